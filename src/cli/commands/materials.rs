//! `injectance materials …`.

use crate::cli::arguments::{Check, List, Show};
use crate::cli::diagnostic::refuse;
use crate::cli::exit::Exit;
use crate::cli::files::{library, record_files};
use crate::cli::terminal::{print, width};
use crate::documents::fault::{Fault, Place, Source, Wrong, nearest};
use crate::documents::reader::Faults;
use crate::materials::check::{Counted, check as check_files};
use crate::materials::library::Library;
use crate::presentation::lines::wrap;
use crate::presentation::records;

/// `list`.
#[must_use]
pub fn list(a: &List) -> Exit {
    let faults = Faults::default();
    let library = library(&a.folders.materials, &faults);
    if faults.count() > 0 {
        return refuse(&faults.take());
    }
    print(
        &records::list(&library.listed(), width(a.width)),
        Exit::Answered,
    )
}

/// `show`.
#[must_use]
pub fn show(a: &Show) -> Exit {
    let faults = Faults::default();
    let library = library(&a.folders.materials, &faults);
    let Some(id) = library.id_of(&a.name) else {
        let listed = library.listed();
        let names: Vec<&str> = listed
            .iter()
            .flat_map(|l| {
                std::iter::once(l.id.as_str()).chain(l.aliases.iter().map(String::as_str))
            })
            .collect();
        faults.push(Fault {
            place: Some(Place {
                source: Source::new("materials show", a.name.clone()),
                span: 0..a.name.len(),
            }),
            field: String::new(),
            wrong: Wrong::UnknownWord {
                what: "material or interface",
                found: a.name.clone(),
                nearest: nearest(&a.name, names),
                allowed: listed.iter().map(|l| l.id.clone()).collect(),
            },
        });
        return refuse(&faults.take());
    };
    let width = width(a.width);
    let lines = library
        .material(&id, &faults)
        .map(|m| records::material(&m, &library, width))
        .or_else(|| {
            library
                .interface(&id, &faults)
                .map(|i| records::interface(&i, &library, width))
        });
    match (lines, faults.count()) {
        (Some(lines), 0) => print(&lines, Exit::Answered),
        _ => refuse(&faults.take()),
    }
}

/// `check`.
#[must_use]
pub fn check(a: &Check) -> Exit {
    let faults = Faults::default();
    let counted = if a.paths.is_empty() {
        check_files(&Library::shipped_texts(), None, false, &faults)
    } else {
        let files: Vec<(String, String)> = a
            .paths
            .iter()
            .flat_map(|p| record_files(p, &faults))
            .collect();
        check_files(&files, Some(&Library::shipped()), true, &faults)
    };
    if faults.count() > 0 {
        return refuse(&faults.take());
    }
    print(&wrap(&told(&counted), width(None)), Exit::Answered)
}

fn told(c: &Counted) -> String {
    let of = |n: usize, one: &str| format!("{n} {one}{}", if n == 1 { "" } else { "s" });
    format!(
        "{}: {}, {}, {} ({} read), {}; no fault",
        of(c.files, "file"),
        of(c.materials, "material"),
        of(c.interfaces, "interface"),
        of(c.records, "record"),
        c.read,
        of(c.references, "reference")
    )
}
