//! Rules that hold over a whole set of records: what one file alone cannot show.

use std::collections::{BTreeMap, BTreeSet};
use std::sync::Arc;

use crate::documents::fault::{Fault, Place, Source, Wrong, nearest};
use crate::documents::reader::Faults;

use super::file::Content;
use super::library::{Library, commons_of_interface, commons_of_material, parse_text};
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
    let mut counted = Counted {
        files: files.len(),
        ..Counted::default()
    };
    let mut materials: Vec<Material> = Vec::new();
    let mut interfaces: Vec<InterfaceEntry> = Vec::new();
    let mut references = library.map_or_else(|| References::new(""), |l| l.references().clone());
    for (name, text) in files {
        if name.ends_with(".bib") {
            counted.references += check_references(name, text, faults);
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
    let commons: Vec<&Common> = materials
        .iter()
        .flat_map(commons_of_material)
        .chain(interfaces.iter().flat_map(commons_of_interface))
        .collect();
    counted.records = commons.len();
    counted.read = commons
        .iter()
        .filter(|c| c.obtained == Obtained::Read)
        .count();
    unique_ids(&commons, faults);
    sources(&commons, &references, faults);
    links(&commons, library, faults);
    known_materials(&materials, &interfaces, library, faults);
    counted
}

/// Keys that stand twice, entries that cannot be read, and references that do not say how far they were
/// opened. Returns the number of entries.
fn check_references(name: &str, text: &str, faults: &Faults) -> usize {
    let own = References::new(text);
    let source = Source::new(name, text);
    let fault = |key: &str, reason: String, help: &str| {
        // The last entry of that key is the one that is one too many.
        let start = text.rfind(&format!("{{{key},")).map_or(0, |at| at + 1);
        faults.push(Fault {
            place: Some(Place {
                source: Arc::clone(&source),
                span: start..start + key.len(),
            }),
            field: key.to_owned(),
            wrong: Wrong::Conflict {
                reason,
                help: Some(help.to_owned()),
            },
        });
    };
    for key in &own.duplicates {
        fault(
            key,
            "this key stands twice".to_owned(),
            "give each entry a key of its own",
        );
    }
    for key in own.keys() {
        match own.get(key) {
            Ok(reference) if reference.opened.is_none() => fault(
                key,
                "the entry does not say how far the source was opened".to_owned(),
                "add `opened = {full text}`, {abstract}, {quoted elsewhere} or {not opened}",
            ),
            Ok(_) | Err(None) => {}
            Err(Some(reason)) => fault(
                key,
                format!(
                    "the entry cannot be read: {}",
                    reason.split(':').next().unwrap_or(&reason)
                ),
                "check its commas and braces",
            ),
        }
    }
    own.keys().count()
}

/// A fault at a field of a record, at the record's head where the field's place is not kept.
fn at(common: &Common, field: &str, wrong: Wrong) -> Fault {
    let f = &common.fields;
    let place = match field {
        "id" => f.id.as_ref(),
        "source" => f.source.as_ref(),
        "obtained" => f.obtained.as_ref(),
        _ => None,
    };
    let place = place.unwrap_or(&common.place).clone();
    Fault {
        place: Some(place),
        field: format!("{}: {field}", common.id),
        wrong,
    }
}

/// A fault at an id that a record names.
fn at_link(common: &Common, field: &str, id: &str, wrong: Wrong) -> Fault {
    let place = common
        .fields
        .links
        .iter()
        .find(|(known, _)| known == id)
        .map(|(_, p)| p);
    let place = place.unwrap_or(&common.place).clone();
    Fault {
        place: Some(place),
        field: format!("{}: {field}", common.id),
        wrong,
    }
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
                            reason: format!(
                                "marked as read, but its source `{key}` was never opened"
                            ),
                            help: Some(
                                "mark it as recalled, or say in the reference how it was opened"
                                    .to_owned(),
                            ),
                        },
                    ));
                }
            }
            // Told at the entry itself.
            Err(Some(_)) => {}
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
                Some(other)
                    if field == "disagrees_with" && !other.disagrees_with.contains(&common.id) =>
                {
                    faults.push(at_link(
                        common,
                        field,
                        id,
                        Wrong::Conflict {
                            reason: format!("`{id}` does not name this record in turn"),
                            help: Some("two records that disagree name each other".to_owned()),
                        },
                    ));
                }
                Some(_) => {}
                // A folder of the user may point at shipped records, which are not among its own.
                None if shipped.contains(id) => {}
                None => faults.push(at_link(
                    common,
                    field,
                    id,
                    Wrong::UnknownWord {
                        what: "record id",
                        found: id.clone(),
                        nearest: nearest(
                            id,
                            known
                                .keys()
                                .copied()
                                .chain(shipped.iter().map(String::as_str)),
                        ),
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
        for (name, place) in i.places.iter().filter(|(name, _)| !ids.contains(name)) {
            faults.push(Fault {
                place: Some(place.clone()),
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
