//! From a file's tree to checked records. Every fault of the file is reported at its place.

use crate::documents::fault::{Wrong, nearest};
use crate::documents::reader::{Faults, Reader};
use crate::documents::tree::{Node, Value};
use crate::quantities::kind::{self, Kind};
use crate::quantities::spread::Spread;
use crate::quantities::text::read;
use crate::quantities::unit::Context;

use super::entry::{Owner, conflict};
use super::property::{PROPERTIES, property_named};
use super::record::{Class, InterfaceEntry, Material, Obtained, Prior};

/// What one file holds.
#[derive(Clone, Debug)]
pub(super) enum Content {
    Material(Box<Material>),
    Interface(Box<InterfaceEntry>),
    Priors(Vec<Prior>),
}

const FORMAT: f64 = 1.0;

/// Reads one file of records.
pub(super) fn read_file(root: &Node, from_user: bool, faults: &Faults) -> Option<Content> {
    let top = Reader::new(root, "", faults);
    if let Some(node) = top.node("format") {
        let known = matches!(node.value, Value::Number(n) if (n - FORMAT).abs() < 0.5);
        if !known {
            top.fault(
                "format",
                Wrong::Conflict {
                    reason: "this format number is not known".to_owned(),
                    help: Some("this version reads `format = 1`".to_owned()),
                },
            );
            return None;
        }
    } else if ["material", "interface", "prior"]
        .iter()
        .any(|head| top.has(head))
    {
        top.missing(
            "format",
            "the first line of a file of records is `format = 1`",
        );
    }
    let content = if top.has("material") {
        read_material(&top, from_user, faults).map(|m| Content::Material(Box::new(m)))
    } else if top.has("interface") {
        read_interface(&top, from_user).map(|i| Content::Interface(Box::new(i)))
    } else if top.has("prior") {
        Some(Content::Priors(read_priors(&top)))
    } else {
        top.missing(
            "material",
            "a file of records has one of the tables [material], [interface] or [[prior]]",
        );
        return None;
    };
    top.finish();
    content
}

fn read_priors(top: &Reader<'_>) -> Vec<Prior> {
    top.tables("prior")
        .iter()
        .filter_map(|r| {
            let property = r.required_text(
                "property",
                "the property class, for example \"resistivity\"",
            );
            let spread = r.required_text("spread", "for example \"×/ 1.3\" or \"± 0.1\"");
            if let (Some(property), Some(spread)) = (&property, &spread) {
                check_prior(r, &property.value, &spread.value);
            }
            let note = r.text("note").map(|t| t.value);
            r.word("obtained", "way of obtaining", Obtained::WORDS);
            r.finish();
            Some(Prior {
                property: property?.value,
                spread: spread?.value,
                note,
            })
        })
        .collect()
}

/// Numbers of pairs, contacts and calibrations that a prior may be of, beside the properties.
const OTHER_PRIORS: &[(&str, &Kind)] = &[
    ("bulk_asymmetry", &kind::BULK_ASYMMETRY),
    ("interface_asymmetry", &kind::INTERFACE_ASYMMETRY),
    ("polarization", &kind::SPIN_POLARIZATION),
    (
        "interface_spin_resistance",
        &kind::INTERFACE_SPIN_RESISTANCE,
    ),
    ("resistance_area", &kind::RESISTANCE_AREA),
    ("spin_memory_loss", &kind::SPIN_MEMORY_LOSS),
    ("thickness", &kind::THICKNESS),
    ("thickness_per_decade", &kind::DECADE_THICKNESS),
];

/// A prior is of a known property, and its text can stand behind a value of it.
fn check_prior(r: &Reader<'_>, property: &str, spread: &str) {
    let other = OTHER_PRIORS
        .iter()
        .find(|(name, _)| *name == property)
        .map(|(_, kind)| *kind);
    let Some(kind) = property_named(property).map(|p| p.kind).or(other) else {
        let names = || {
            PROPERTIES
                .iter()
                .map(|p| p.name)
                .chain(OTHER_PRIORS.iter().map(|(name, _)| *name))
        };
        r.fault(
            "property",
            Wrong::UnknownWord {
                what: "property",
                nearest: nearest(property, names()),
                found: property.to_owned(),
                allowed: names().map(str::to_owned).collect(),
            },
        );
        return;
    };
    let example = kind
        .examples
        .iter()
        .find(|e| !e.contains('%'))
        .or(kind.examples.first());
    let readable = example.is_none_or(|value| {
        read(&format!("{value} {spread}"), kind, &Context::default())
            .is_ok_and(|reading| !matches!(reading.spread, Spread::Exact))
    });
    if !readable {
        conflict(
            r,
            "spread",
            &format!("this cannot stand behind a value of {}", kind.name),
            "write \"×/ 1.3\", or \"± …\" with the unit of the property",
        );
    }
}

/// Every entry of one kind that could be read; the others are told as faults by `read`.
fn gather<T>(
    top: &Reader<'_>,
    kind: &'static str,
    read: impl Fn(&Reader<'_>) -> Option<T>,
) -> Vec<T> {
    top.tables(kind).iter().filter_map(read).collect()
}

fn read_material(top: &Reader<'_>, from_user: bool, faults: &Faults) -> Option<Material> {
    let head = top.table("material")?;
    let id = head.required_text(
        "id",
        "lower-case words with hyphens, for example `id = \"cobalt\"`",
    );
    let name = head.required_text(
        "name",
        "for example `name = \"Cobalt, polycrystalline film\"`",
    );
    let class = if head.has("class") {
        head.word("class", "class", Class::WORDS)
    } else {
        head.node("class");
        head.missing("class", "ferromagnet, semiconductor, metal or barrier");
        None
    };
    let aliases = head.texts("aliases").into_iter().map(|t| t.value).collect();
    head.text("formula");
    head.finish();
    let owner = Owner { from_user };
    let values = gather(top, "value", |r| owner.value(r));
    let pairs = gather(top, "pair", |r| owner.pair(r));
    let calibrations = gather(top, "calibration", |r| owner.calibration(r));
    let laws = gather(top, "law", |r| owner.law(r, faults));
    let notes = gather(top, "note", |r| owner.note(r));
    Some(Material {
        id: id?.value,
        name: name?.value,
        class: class?.value,
        aliases,
        values,
        pairs,
        calibrations,
        laws,
        notes,
    })
}

fn read_interface(top: &Reader<'_>, from_user: bool) -> Option<InterfaceEntry> {
    let head = top.table("interface")?;
    let id = head.required_text("id", "for example `id = \"iron-magnesia-silicon\"`");
    let name = head.required_text(
        "name",
        "for example `name = \"Iron on magnesia on n-silicon\"`",
    );
    let ferromagnet = head.required_text("ferromagnet", "id of a ferromagnet of the library");
    let barrier = head.text("barrier");
    let channel = head.text("channel");
    head.finish();
    let places = [&ferromagnet, &barrier, &channel]
        .into_iter()
        .flatten()
        .map(|t| (t.value.clone(), t.place.clone()))
        .collect();
    let owner = Owner { from_user };
    let contacts = gather(top, "contact", |r| owner.contact(r));
    let calibrations = gather(top, "calibration", |r| owner.calibration(r));
    let values = gather(top, "value", |r| owner.value(r));
    let notes = gather(top, "note", |r| owner.note(r));
    Some(InterfaceEntry {
        id: id?.value,
        name: name?.value,
        ferromagnet: ferromagnet?.value,
        barrier: barrier.map(|t| t.value),
        channel: channel.map(|t| t.value),
        places,
        contacts,
        calibrations,
        values,
        notes,
    })
}
