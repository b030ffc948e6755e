//! Reading what the user points at: designs, standard input, folders of records.

use std::collections::BTreeSet;
use std::fs;
use std::io::Read as _;
use std::path::{Path, PathBuf};
use std::sync::Arc;

use crate::documents::fault::{Fault, Place, Source, Wrong};
use crate::documents::overlay::{lay_over, read_setting};
use crate::documents::reader::Faults;
use crate::documents::tree::{Node, parse};
use crate::materials::check::check;
use crate::materials::library::Library;

/// Largest file that is read.
const MOST_BYTES: u64 = 4 * 1024 * 1024;
/// Deepest folder that is entered.
const DEEPEST: usize = 16;

fn file_fault(name: &str, reason: String, help: Option<&str>) -> Fault {
    Fault {
        place: Some(Place {
            source: Source::new(name, ""),
            span: 0..0,
        }),
        field: String::new(),
        wrong: Wrong::File {
            reason,
            help: help.map(str::to_owned),
        },
    }
}

fn unreadable(name: &str, error: &std::io::Error) -> Fault {
    file_fault(name, format!("cannot be read: {}", reason(error)), None)
}

fn text_of(name: &str, bytes: Vec<u8>) -> Result<String, Fault> {
    String::from_utf8(bytes).map_err(|e| {
        let at = e.utf8_error().valid_up_to();
        let line = e.as_bytes()[..at].iter().filter(|b| **b == b'\n').count() + 1;
        file_fault(
            name,
            format!("is not UTF-8 text: line {line} holds a byte that does not belong there"),
            Some("save the file as UTF-8"),
        )
    })
}

/// Reads a file, or standard input for `-`.
///
/// # Errors
/// A fault that says why it cannot be used.
pub fn read_text(path: &Path) -> Result<(String, String), Fault> {
    if path == Path::new("-") {
        let name = "standard input".to_owned();
        let mut bytes = Vec::new();
        std::io::stdin()
            .lock()
            .take(MOST_BYTES + 1)
            .read_to_end(&mut bytes)
            .map_err(|e| unreadable(&name, &e))?;
        if bytes.len() as u64 > MOST_BYTES {
            return Err(file_fault(&name, too_large(None), None));
        }
        return Ok((name.clone(), text_of(&name, bytes)?));
    }
    let name = path.display().to_string();
    let meta = fs::metadata(path).map_err(|e| unreadable(&name, &e))?;
    if meta.is_dir() {
        return Err(file_fault(
            &name,
            "is a folder, not a file".to_owned(),
            None,
        ));
    }
    if meta.len() > MOST_BYTES {
        return Err(file_fault(&name, too_large(Some(meta.len())), None));
    }
    // A device or pipe tells no length: read no more than is allowed whatever it says.
    let mut bytes = Vec::new();
    fs::File::open(path)
        .and_then(|f| f.take(MOST_BYTES + 1).read_to_end(&mut bytes))
        .map_err(|e| unreadable(&name, &e))?;
    if bytes.len() as u64 > MOST_BYTES {
        return Err(file_fault(&name, too_large(None), None));
    }
    Ok((name.clone(), text_of(&name, bytes)?))
}

fn reason(e: &std::io::Error) -> String {
    match e.kind() {
        std::io::ErrorKind::NotFound => "there is no such file".to_owned(),
        std::io::ErrorKind::PermissionDenied => "permission denied".to_owned(),
        _ => e.to_string(),
    }
}

fn too_large(size: Option<u64>) -> String {
    let found = size.map_or_else(String::new, |s| format!("{} MB, and ", s / 1_000_000));
    format!(
        "is too large: {found}at most {} MB are read",
        MOST_BYTES / 1_000_000
    )
}

/// Reads a design and lays settings over it.
pub fn design_tree(path: &Path, settings: &[String], faults: &Faults) -> Option<Node> {
    let (name, text) = read_text(path).map_err(|f| faults.push(f)).ok()?;
    if text.trim().is_empty() {
        faults.push(file_fault(
            &name,
            "is empty".to_owned(),
            Some("begin with `injectance new vertical > first.toml`"),
        ));
        return None;
    }
    let source: Arc<Source> = Source::new(name, text);
    let mut root = match parse(&source) {
        Ok(root) => root,
        Err(found) => {
            found.into_iter().for_each(|f| faults.push(f));
            return None;
        }
    };
    for text in settings {
        match read_setting("--set", text) {
            Ok(setting) => {
                if let Err(fault) = lay_over(&mut root, &setting) {
                    faults.push(fault);
                }
            }
            Err(fault) => faults.push(fault),
        }
    }
    Some(root)
}

/// The files of records under a path: itself, or every `.toml` and `.bib` of a folder and its folders.
pub fn record_files(path: &Path, faults: &Faults) -> Vec<(String, String)> {
    let mut paths = Vec::new();
    let mut seen = BTreeSet::new();
    collect(path, 0, &mut seen, &mut paths, faults);
    if paths.is_empty() && faults.count() == 0 {
        faults.push(file_fault(
            &path.display().to_string(),
            "holds no file of records".to_owned(),
            Some("a folder of records has `.toml` files, and perhaps a `references.bib`"),
        ));
    }
    paths
        .iter()
        .filter_map(|p| read_text(p).map_err(|f| faults.push(f)).ok())
        .collect()
}

fn collect(
    path: &Path,
    depth: usize,
    seen: &mut BTreeSet<PathBuf>,
    into: &mut Vec<PathBuf>,
    faults: &Faults,
) {
    let name = path.display().to_string();
    let real = match fs::canonicalize(path) {
        Ok(real) => real,
        Err(e) => {
            faults.push(unreadable(&name, &e));
            return;
        }
    };
    if !real.is_dir() {
        into.push(path.to_owned());
        return;
    }
    if !seen.insert(real) {
        faults.push(file_fault(
            &name,
            "is a folder that contains itself by a link".to_owned(),
            Some("remove the link"),
        ));
        return;
    }
    if depth > DEEPEST {
        faults.push(file_fault(
            &name,
            format!("lies more than {DEEPEST} folders deep"),
            None,
        ));
        return;
    }
    let entries = match fs::read_dir(path) {
        Ok(entries) => entries,
        Err(e) => {
            faults.push(unreadable(&name, &e));
            return;
        }
    };
    let mut inside: Vec<PathBuf> = entries.filter_map(|e| e.ok().map(|e| e.path())).collect();
    inside.sort();
    for p in inside {
        let wanted = p.extension().is_some_and(|e| e == "toml" || e == "bib");
        if p.is_dir() || wanted {
            collect(&p, depth + 1, seen, into, faults);
        }
    }
}

/// The library with the user's folders laid over it.
pub fn library(folders: &[PathBuf], faults: &Faults) -> Library {
    let mut library = Library::shipped();
    for folder in folders {
        let files = record_files(folder, faults);
        check(&files, Some(&library), true, faults);
        library.lay_over(&files, faults);
    }
    library
}
