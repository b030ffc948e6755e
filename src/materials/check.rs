//! Rules that hold over a whole set of records: what one file alone cannot show.

use std::collections::{BTreeMap, BTreeSet};

use crate::documents::fault::{Fault, Wrong, nearest};
use crate::documents::reader::Faults;

use super::library::{Library, commons_of_interface, commons_of_material, parse_text};
use super::file::Content;
use super::record::{Common, InterfaceEntry, Material, Obtained};
use super::references::{Opened, References};

/// What a check went through.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
pub struct Counted {
    /// Files.
    pub files: usize,
    /// Materials.
    pub materials: usize,
    /// Interfaces.
    pub interfaces: usize,
    /// Records.
    pub records: usize,
    /// Records that were read.
    pub read: usize,
    /// References.
    pub references: usize,
}

/// Checks texts of records `(name, text)` against each other and, where `library` is given, against what
/// it holds. Faults go into `faults`.
pub fn check(
    files: &[(String, String)],
    library: Option<&Library>,
    from_user: bool,
    faults: &Faults,
) -> Counted {
    let mut counted = Counted { files: files.len(), ..Counted::default() };
    let mut materials: Vec<Material> = Vec::new();
    let mut interfaces: Vec<InterfaceEntry> = Vec::new();
    let mut references = library.map_or_else(|| References::new(""), |l| l.references().clone());
    for (name, text) in files {
        if name.ends_with(".bib") {
            references.lay_over(text);
            continue;
        }
        match parse_text(name, text, from_user, faults) {
            Some(Content::Material(m)) => materials.push(*m),
            Some(Content::Interface(i)) => interfaces.push(*i),
            Some(Content::Priors(_)) | None => {}
        }
    }
    counted.materials = materials.len();
    counted.interfaces = interfaces.len();
    counted.references = references.keys().count();
    let commons: Vec<&Common> = materials
        .iter()
        .flat_map(commons_of_material)
        .chain(interfaces.iter().flat_map(commons_of_interface))
        .collect();
    counted.records = commons.len();
    counted.read = commons.iter().filter(|c| c.obtained == Obtained::Read).count();
    for key in &references.duplicates {
        faults.push(Fault {
            place: None,
            field: key.clone(),
            wrong: Wrong::Conflict {
                reason: format!("the reference key `{key}` stands twice"),
                help: Some("give each entry of references.bib a key of its own".to_owned()),
            },
        });
    }
    unique_ids(&commons, faults);
    sources(&commons, &references, faults);
    links(&commons, library, faults);
    known_materials(&materials, &interfaces, library, faults);
    counted
}

fn at(common: &Common, field: &str, wrong: Wrong) -> Fault {
    Fault { place: Some(common.place.clone()), field: format!("{}: {field}", common.id), wrong }
}

fn unique_ids(commons: &[&Common], faults: &Faults) {
    let mut seen: BTreeMap<&str, &Common> = BTreeMap::new();
    for common in commons {
        if let Some(first) = seen.insert(&common.id, common) {
            faults.push(at(
                common,
                "id",
                Wrong::Conflict {
                    reason: format!(
                        "the record id `{}` stands twice, first in {} line {}",
                        common.id,
                        first.place.source.name,
                        first.place.line()
                    ),
                    help: Some("give each record an id of its own".to_owned()),
                },
            ));
        }
    }
}

fn sources(commons: &[&Common], references: &References, faults: &Faults) {
    for common in commons {
        let Some(key) = &common.source else { continue };
        match references.get(key) {
            Ok(reference) => {
                let opened = reference.opened;
                if common.obtained == Obtained::Read
                    && !matches!(
                        opened,
                        Some(Opened::FullText | Opened::Abstract | Opened::QuotedElsewhere)
                    )
                {
                    faults.push(at(
                        common,
                        "obtained",
                        Wrong::Conflict {
                            reason: format!("marked as read, but its source `{key}` was never opened"),
                            help: Some("mark it as recalled, or say in the reference how it was opened".to_owned()),
                        },
                    ));
                }
            }
            Err(Some(reason)) => faults.push(at(
                common,
                "source",
                Wrong::Conflict {
                    reason: format!("the reference `{key}` cannot be read: {reason}"),
                    help: None,
                },
            )),
            Err(None) => faults.push(at(
                common,
                "source",
                Wrong::UnknownWord {
                    what: "reference key",
                    found: key.clone(),
                    nearest: nearest(key, references.keys()),
                    allowed: Vec::new(),
                },
            )),
        }
    }
}

fn links(commons: &[&Common], library: Option<&Library>, faults: &Faults) {
    let known: BTreeMap<&str, &Common> = commons.iter().map(|c| (c.id.as_str(), *c)).collect();
    let points_away = commons
        .iter()
        .flat_map(|c| c.disagrees_with.iter().chain(&c.parents))
        .any(|id| !known.contains_key(id.as_str()));
    let shipped = match library {
        Some(library) if points_away => ids_of(library),
        _ => BTreeSet::new(),
    };
    for common in commons {
        for (field, id) in common
            .disagrees_with
            .iter()
            .map(|id| ("disagrees_with", id))
            .chain(common.parents.iter().map(|id| ("parents", id)))
        {
            match known.get(id.as_str()) {
                Some(other) if field == "disagrees_with" && !other.disagrees_with.contains(&common.id) => {
                    faults.push(at(
                        common,
                        field,
                        Wrong::Conflict {
                            reason: format!("`{id}` does not name this record in turn"),
                            help: Some("two records that disagree name each other".to_owned()),
                        },
                    ));
                }
                Some(_) => {}
                // A folder of the user may point at shipped records, which are not among its own.
                None if shipped.contains(id) => {}
                None => faults.push(at(
                    common,
                    field,
                    Wrong::UnknownWord {
                        what: "record id",
                        found: id.clone(),
                        nearest: nearest(id, known.keys().copied().chain(shipped.iter().map(String::as_str))),
                        allowed: Vec::new(),
                    },
                )),
            }
        }
    }
}

/// Ids of all records of a library.
fn ids_of(library: &Library) -> BTreeSet<String> {
    let quiet = Faults::default();
    let mut ids = BTreeSet::new();
    for listed in library.listed() {
        if let Some(m) = library.material(&listed.id, &quiet) {
            ids.extend(commons_of_material(&m).iter().map(|c| c.id.clone()));
        } else if let Some(i) = library.interface(&listed.id, &quiet) {
            ids.extend(commons_of_interface(&i).iter().map(|c| c.id.clone()));
        }
    }
    ids
}

fn known_materials(
    materials: &[Material],
    interfaces: &[InterfaceEntry],
    library: Option<&Library>,
    faults: &Faults,
) {
    let mut ids: Vec<String> = materials.iter().map(|m| m.id.clone()).collect();
    if let Some(library) = library {
        ids.extend(library.listed().into_iter().map(|l| l.id));
    }
    for i in interfaces {
        let place = commons_of_interface(i).first().map(|c| c.place.clone());
        for name in [Some(&i.ferromagnet), i.barrier.as_ref(), i.channel.as_ref()].into_iter().flatten() {
            if !ids.contains(name) {
                faults.push(Fault {
                    place: place.clone(),
                    field: i.id.clone(),
                    wrong: Wrong::UnknownWord {
                        what: "material",
                        found: name.clone(),
                        nearest: nearest(name, ids.iter().map(String::as_str)),
                        allowed: Vec::new(),
                    },
                });
            }
        }
    }
}
