//! A design file: one ordered stack with two ends, written out or in short form.

use crate::documents::fault::{Fault, Place, Wrong};
use crate::documents::reader::{Faults, Placed, Reader};
use crate::documents::tree::Node;
use crate::materials::library::Library;
use crate::quantities::kind;
use crate::quantities::text::Reading;

use super::goals::{Goal, GoalState, Target, read_goals};
use super::layers::{
    ContactSpec, EndWord, LayerSpec, MagnetizationWord, Role, read_contact, read_layer,
};

/// One element of the stack.
#[derive(Clone, PartialEq, Debug)]
pub enum Part {
    /// A ferromagnet.
    Ferromagnet(LayerSpec),
    /// A normal layer.
    Normal(LayerSpec),
    /// A barrier or a direct interface.
    Contact(ContactSpec),
}

/// Which way the stack was written.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Written {
    /// One contact: injector and channel.
    OneContact,
    /// Two contacts: injector, channel, detector.
    TwoContacts,
    /// As a list of layers.
    Stack,
}

/// A checked design.
#[derive(Clone, PartialEq, Debug)]
pub struct Design {
    /// Name of the file, or where else it came from.
    pub name: String,
    /// Title.
    pub title: Option<String>,
    /// Temperature.
    pub temperature: Placed<Reading>,
    /// Charge current density.
    pub current_density: Option<Placed<Reading>>,
    /// The stack from left to right.
    pub parts: Vec<Part>,
    /// Index of the channel in `parts`.
    pub channel: usize,
    /// Left end.
    pub left: EndWord,
    /// Whether the left end was stated.
    pub left_stated: bool,
    /// Right end.
    pub right: EndWord,
    /// Whether the right end was stated.
    pub right_stated: bool,
    /// How it was written.
    pub written: Written,
    /// Goals.
    pub goals: Vec<Goal>,
    /// Place of the whole file.
    pub place: Place,
}

const LAYOUTS: &[(&str, ())] = &[("vertical", ())];

fn conflict(place: &Place, field: &str, reason: &str, help: &str) -> Fault {
    Fault {
        place: Some(place.clone()),
        field: field.to_owned(),
        wrong: Wrong::Conflict {
            reason: reason.to_owned(),
            help: Some(help.to_owned()),
        },
    }
}

/// Reads a design from its tree. Faults are collected; `None` if the rest could not be understood.
pub fn read_design(root: &Node, library: &Library, faults: &Faults) -> Option<Design> {
    let top = Reader::new(root, "", faults);
    let title = top.text("title").map(|t| t.value);
    let temperature = top.exact_quantity("temperature", &kind::TEMPERATURE);
    if !top.has("temperature") {
        top.missing("temperature", "for example `temperature = \"300 K\"`");
    }
    let current_density = top.exact_quantity("current_density", &kind::CURRENT_DENSITY);
    match top.table("layout") {
        Some(layout) => {
            if !layout.has("kind") {
                layout.missing(
                    "kind",
                    "`kind = \"vertical\"`: the current crosses the layers one after the other",
                );
            }
            layout.word("kind", "layout", LAYOUTS);
            layout.finish();
        }
        None if !top.has("layout") => {
            top.missing("layout", "add `[layout]` with `kind = \"vertical\"`: a formula for one geometry is never used for another");
        }
        None => {}
    }
    let goals = top
        .node("goal")
        .map(|n| read_goals(n, faults))
        .unwrap_or_default();
    let short = ["injector", "channel", "detector"]
        .into_iter()
        .find(|k| top.has(k));
    let stack = match (short, top.has("stack")) {
        (Some(key), true) => {
            for k in ["injector", "channel", "detector", "stack", "ends"] {
                top.node(k);
            }
            let place = top.key_place(key).unwrap_or_else(|| top.place().clone());
            faults.push(conflict(
                &place,
                key,
                "the design is written twice: in short form and as [[stack]]",
                "keep either [injector], [channel], [detector] or [[stack]] with [ends]",
            ));
            None
        }
        (None, true) => long_form(&top, library, faults),
        (Some(_), false) => {
            if top.node("ends").is_some() {
                let place = top.key_place("ends").unwrap_or_else(|| top.place().clone());
                faults.push(conflict(
                    &place,
                    "ends",
                    "[ends] goes with [[stack]]",
                    "in short form a side ends by `end = \"…\"` of its ferromagnet or of the channel",
                ));
            }
            short_form(&top, library, faults)
        }
        (None, false) => {
            top.node("ends");
            top.missing("injector", "a design has [injector] and [channel], perhaps [detector]; or [[stack]] with [ends]");
            None
        }
    };
    top.finish();
    let form = stack?;
    check_states(&top, &goals, &form.parts, faults);
    Some(Design {
        name: root.place.source.name.clone(),
        title,
        temperature: temperature?,
        current_density,
        parts: form.parts,
        channel: form.channel,
        left: form.left.0,
        left_stated: form.left.1,
        right: form.right.0,
        right_stated: form.right.1,
        written: form.written,
        goals,
        place: root.place.clone(),
    })
}

/// Refuses goals on a second magnetic state where the design has none.
fn check_states(top: &Reader<'_>, goals: &[Goal], parts: &[Part], faults: &Faults) {
    let turns = |layer: &LayerSpec| layer.magnetization == Some(MagnetizationWord::Free);
    let ferromagnets = || {
        parts.iter().filter_map(|p| match p {
            Part::Ferromagnet(layer) => Some(layer),
            _ => None,
        })
    };
    if ferromagnets().any(turns) && !ferromagnets().all(turns) {
        return;
    }
    let help =
        "add a [detector], or in a [[stack]] one ferromagnet with `magnetization = \"free\"`";
    for goal in goals
        .iter()
        .filter(|g| g.target != Target::InjectedPolarization)
    {
        faults.push(conflict(
            &goal.place,
            &format!("goal.{}", goal.target.word()),
            "the design has one magnetic state, and this compares two",
            help,
        ));
    }
    let state = top.node("goal").and_then(|n| n.get("state"));
    if let (Some(entry), Some(GoalState::Antiparallel)) = (state, goals.first().map(|g| g.state)) {
        faults.push(conflict(
            &entry.node.place,
            "goal.state",
            "the design has one magnetic state, no antiparallel one",
            help,
        ));
    }
}

struct Form {
    parts: Vec<Part>,
    channel: usize,
    left: (EndWord, bool),
    right: (EndWord, bool),
    written: Written,
}

fn contact_side(
    side: &Reader<'_>,
    path: &str,
    library: &Library,
    faults: &Faults,
) -> (Option<LayerSpec>, Option<ContactSpec>) {
    let ferromagnet = side.node("ferromagnet").map(|n| {
        read_layer(
            n,
            &format!("{path}.ferromagnet"),
            Role::ContactFerromagnet,
            library,
            faults,
        )
    });
    if !side.has("ferromagnet") {
        side.missing(
            "ferromagnet",
            "for example `ferromagnet = { material = \"iron\", thickness = \"15 nm\" }`",
        );
    }
    let barrier = side
        .node("barrier")
        .map(|n| read_contact(n, &format!("{path}.barrier"), true, false, library, faults));
    let interface = side.node("interface").map(|n| {
        read_contact(
            n,
            &format!("{path}.interface"),
            false,
            false,
            library,
            faults,
        )
    });
    if barrier.is_some() && interface.is_some() {
        side.fault(
            "interface",
            Wrong::Conflict {
                reason: "a contact has either a barrier or a direct interface".to_owned(),
                help: Some("keep one of `barrier` and `interface`".to_owned()),
            },
        );
    }
    side.finish();
    (ferromagnet, barrier.or(interface))
}

fn short_form(top: &Reader<'_>, library: &Library, faults: &Faults) -> Option<Form> {
    let Some(injector) = top.table("injector") else {
        top.missing(
            "injector",
            "the ferromagnet that injects: `[injector]` with `ferromagnet = { … }`",
        );
        top.node("channel");
        top.node("detector");
        return None;
    };
    let (injecting, first) = contact_side(&injector, "injector", library, faults);
    let channel = top
        .node("channel")
        .map(|n| read_layer(n, "channel", Role::Channel, library, faults));
    if channel.is_none() {
        top.missing(
            "channel",
            "the layer that is injected into: `[channel]` with `material` or explicit numbers",
        );
    }
    let detector = top.table("detector");
    let two = detector.is_some();
    let (detecting, second) = detector.map_or((None, None), |d| {
        contact_side(&d, "detector", library, faults)
    });
    if two && detecting.is_none() {
        return None;
    }
    let (injecting, channel) = (injecting?, channel?);
    let end_of = |layer: &LayerSpec| {
        layer
            .end
            .as_ref()
            .map_or((EndWord::SemiInfinite, false), |e| (e.value, true))
    };
    let left = end_of(&injecting);
    let right = if let Some(detecting) = &detecting {
        if let Some(end) = &channel.end {
            faults.push(conflict(
                &end.place,
                "channel.end",
                "the channel ends at the detector, yet an end is stated",
                "drop `end`, or drop [detector]",
            ));
        }
        end_of(detecting)
    } else {
        match &channel.end {
            Some(end) => (end.value, true),
            None if faults.told("channel.end") || faults.told("channel") => return None,
            None => {
                faults.push(Fault {
                    place: Some(channel.place.clone()),
                    field: "channel.end".to_owned(),
                    wrong: Wrong::Missing {
                        key: "end".to_owned(),
                        help: "say what the channel's far side ends in: `end = \"semi-infinite\"`, \"spin sink\" or \"reflecting\"".to_owned(),
                    },
                });
                (EndWord::SemiInfinite, false)
            }
        }
    };
    for (layer, end) in [
        (&injecting, left),
        (detecting.as_ref().unwrap_or(&channel), right),
    ] {
        needs_thickness(layer, end.0, faults);
    }
    if two && channel.thickness.is_none() {
        missing_thickness(
            &channel,
            "the channel between two contacts needs its thickness",
            faults,
        );
    }
    let mut parts = vec![Part::Ferromagnet(injecting)];
    parts.extend(first.map(Part::Contact));
    let at = parts.len();
    parts.push(Part::Normal(channel));
    parts.extend(second.map(Part::Contact));
    parts.extend(detecting.map(|mut layer| {
        layer.magnetization = Some(MagnetizationWord::Free);
        Part::Ferromagnet(layer)
    }));
    let written = if two {
        Written::TwoContacts
    } else {
        Written::OneContact
    };
    Some(Form {
        parts,
        channel: at,
        left,
        right,
        written,
    })
}

fn missing_thickness(layer: &LayerSpec, help: &str, faults: &Faults) {
    let field = format!("{}.thickness", layer.path);
    if faults.told(&field) || faults.told(&layer.path) {
        return;
    }
    faults.push(Fault {
        place: Some(layer.place.clone()),
        field,
        wrong: Wrong::Missing {
            key: "thickness".to_owned(),
            help: format!("{help}: `thickness = \"40 nm\"`"),
        },
    });
}

fn needs_thickness(layer: &LayerSpec, end: EndWord, faults: &Faults) {
    if end != EndWord::SemiInfinite && layer.thickness.is_none() {
        missing_thickness(
            layer,
            &format!("a layer that ends in `{}` needs its thickness", end.word()),
            faults,
        );
    }
}

fn long_form(top: &Reader<'_>, library: &Library, faults: &Faults) -> Option<Form> {
    let ends = top.table("ends");
    if ends.is_none() && !top.has("ends") {
        top.missing("ends", "add `[ends]` with `left` and `right`: semi-infinite, spin sink, reflecting or fed in plane");
    }
    let mut words = [None, None];
    if let Some(ends) = ends {
        for (word, key) in words.iter_mut().zip(["left", "right"]) {
            if !ends.has(key) {
                ends.node(key);
                ends.missing(key, "semi-infinite, spin sink, reflecting or fed in plane");
            } else {
                *word = ends.word(key, "end", EndWord::WORDS).map(|w| w.value);
            }
        }
        ends.finish();
    }
    let mut parts: Vec<Part> = Vec::new();
    // Whether each entry is one layer or interface; else nothing is said about their order.
    let mut understood = true;
    for (i, entry) in top.tables("stack").iter().enumerate() {
        let path = format!("stack.{}", i + 1);
        let kinds = ["ferromagnet", "normal", "barrier", "interface"];
        let present: Vec<&'static str> = kinds.into_iter().filter(|k| entry.has(k)).collect();
        for key in kinds {
            entry.node(key);
        }
        entry.finish();
        let [only] = present.as_slice() else {
            understood = false;
            // An unknown key in place of the four was reported above, with what is known.
            if !present.is_empty() || entry.is_empty_table() {
                faults.push(conflict(
                    entry.place(),
                    &path,
                    "an entry of the stack is exactly one of ferromagnet, normal, barrier or interface",
                    "for example `[[stack]]` then `normal = { material = \"copper\", thickness = \"20 nm\" }`",
                ));
            }
            continue;
        };
        let Some(node) = entry.node(only) else {
            continue;
        };
        let inner = format!("{path}.{only}");
        parts.push(match *only {
            "ferromagnet" => Part::Ferromagnet(read_layer(
                node,
                &inner,
                Role::StackFerromagnet,
                library,
                faults,
            )),
            "normal" => Part::Normal(read_layer(node, &inner, Role::StackNormal, library, faults)),
            kind => Part::Contact(read_contact(
                node,
                &inner,
                kind == "barrier",
                true,
                library,
                faults,
            )),
        });
    }
    let (left, right) = (words[0]?, words[1]?);
    let place = top
        .key_place("stack")
        .unwrap_or_else(|| top.place().clone());
    if !understood || faults.told("stack") {
        return None;
    }
    if parts.is_empty() {
        faults.push(conflict(
            &place,
            "stack",
            "the stack has no layer",
            "add [[stack]] entries",
        ));
        return None;
    }
    check_order(&parts, left, right, faults);
    let channel = channel_of(&parts, &place, faults)?;
    Some(Form {
        parts,
        channel,
        left: (left, true),
        right: (right, true),
        written: Written::Stack,
    })
}

fn check_order(parts: &[Part], left: EndWord, right: EndWord, faults: &Faults) {
    for pair in parts.windows(2) {
        if let [Part::Contact(_), Part::Contact(second)] = pair {
            faults.push(conflict(
                &second.place,
                &second.path,
                "two interfaces stand side by side",
                "put a layer between them, or join them into one",
            ));
        }
    }
    for (part, end, side) in [
        (parts.first(), left, "left"),
        (parts.last(), right, "right"),
    ] {
        match part {
            Some(Part::Contact(contact)) => faults.push(conflict(
                &contact.place,
                &contact.path,
                &format!("the outermost element on the {side} is an interface"),
                "a stack begins and ends with a layer",
            )),
            Some(Part::Ferromagnet(layer) | Part::Normal(layer)) => {
                needs_thickness(layer, end, faults)
            }
            None => {}
        }
    }
    for layer in parts
        .iter()
        .skip(1)
        .take(parts.len().saturating_sub(2))
        .filter_map(|p| match p {
            Part::Ferromagnet(layer) | Part::Normal(layer) => Some(layer),
            Part::Contact(_) => None,
        })
    {
        if layer.thickness.is_none() {
            missing_thickness(layer, "an inner layer needs its thickness", faults);
        }
    }
    for (i, part) in parts.iter().enumerate() {
        let Part::Contact(contact) = part else {
            continue;
        };
        let ferromagnet = |p: Option<&Part>| matches!(p, Some(Part::Ferromagnet(_)));
        let both = i > 0 && ferromagnet(parts.get(i - 1)) && ferromagnet(parts.get(i + 1));
        if both && contact.flips_with.is_none() {
            faults.push(Fault {
                place: Some(contact.place.clone()),
                field: format!("{}.flips_with", contact.path),
                wrong: Wrong::Missing {
                    key: "flips_with".to_owned(),
                    help: "between two ferromagnets say which one the interface flips with: `flips_with = \"left\"` or \"right\"".to_owned(),
                },
            });
        }
    }
}

fn channel_of(parts: &[Part], place: &Place, faults: &Faults) -> Option<usize> {
    let normals: Vec<usize> = (0..parts.len())
        .filter(|i| matches!(parts[*i], Part::Normal(_)))
        .collect();
    let marked: Vec<usize> = normals
        .iter()
        .copied()
        .filter(|i| matches!(&parts[*i], Part::Normal(l) if l.is_channel))
        .collect();
    if let Some(Part::Normal(second)) = marked.get(1).and_then(|i| parts.get(*i)) {
        faults.push(conflict(
            &second.place,
            &second.path,
            "more than one layer is marked as the channel",
            "keep one `channel = true`",
        ));
        return None;
    }
    let has_ferromagnet = parts.iter().any(|p| matches!(p, Part::Ferromagnet(_)));
    if !has_ferromagnet || normals.is_empty() {
        faults.push(conflict(
            place,
            "stack",
            "a stack needs at least one ferromagnet and one normal layer",
            "the first normal layer after a ferromagnet is the channel",
        ));
        return None;
    }
    let first_ferromagnet = parts
        .iter()
        .position(|p| matches!(p, Part::Ferromagnet(_)))
        .unwrap_or(0);
    marked
        .first()
        .or_else(|| normals.iter().find(|i| between_states(parts, **i)))
        .or_else(|| normals.iter().find(|i| **i > first_ferromagnet))
        .or(normals.last())
        .copied()
}

/// Whether the layer lies between a magnet that turns and one that does not: there the two states differ.
fn between_states(parts: &[Part], at: usize) -> bool {
    let turns = |p: &Part| match p {
        Part::Ferromagnet(layer) => Some(layer.magnetization == Some(MagnetizationWord::Free)),
        _ => None,
    };
    let layer = |p: &&Part| !matches!(p, Part::Contact(_));
    let left = parts[..at].iter().rev().find(layer).and_then(turns);
    let right = parts[at + 1..].iter().find(layer).and_then(turns);
    matches!((left, right), (Some(a), Some(b)) if a != b)
}
