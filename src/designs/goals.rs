//! Goals: a result's name, a comparison and a quantity.

use crate::documents::fault::{Fault, Place, Wrong, nearest};
use crate::documents::reader::{Faults, Reader};
use crate::documents::tree::{Node, Value};
use crate::quantities::kind::{self, Kind};
use crate::quantities::spread::Spread;
use crate::quantities::text::{Reading, read, read_interval};
use crate::quantities::unit::Context;

/// The result a goal is set on.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Target {
    /// p = J/j just inside the channel at the injector.
    InjectedPolarization,
    /// ΔRA/RA of the parallel state.
    Magnetoresistance,
    /// ΔRA.
    ResistanceAreaChange,
}

impl Target {
    /// Names in a design, in order.
    pub const WORDS: &'static [(&'static str, Self)] = &[
        ("injected_polarization", Self::InjectedPolarization),
        ("magnetoresistance", Self::Magnetoresistance),
        ("resistance_area_change", Self::ResistanceAreaChange),
    ];

    /// Name in a design.
    #[must_use]
    pub fn word(self) -> &'static str {
        Self::WORDS
            .iter()
            .find(|(_, t)| *t == self)
            .map_or("", |(w, _)| w)
    }

    /// Kind of quantity.
    #[must_use]
    pub fn kind(self) -> &'static Kind {
        match self {
            Self::InjectedPolarization => &kind::CURRENT_SPIN_POLARIZATION,
            Self::Magnetoresistance => &kind::MAGNETORESISTANCE,
            Self::ResistanceAreaChange => &kind::RESISTANCE_AREA_CHANGE,
        }
    }
}

/// A comparison of an absolute value, in SI.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum Comparison {
    /// At least.
    AtLeast(f64),
    /// At most.
    AtMost(f64),
    /// Between the two.
    Between(f64, f64),
}

impl Comparison {
    /// Whether |value| meets it.
    #[must_use]
    pub fn met(&self, value: f64) -> bool {
        let v = value.abs();
        match *self {
            Self::AtLeast(a) => v >= a,
            Self::AtMost(b) => v <= b,
            Self::Between(a, b) => v >= a && v <= b,
        }
    }

    /// Positive inside, negative outside, zero on an edge.
    #[must_use]
    pub fn margin(&self, value: f64) -> f64 {
        let v = value.abs();
        match *self {
            Self::AtLeast(a) => v - a,
            Self::AtMost(b) => b - v,
            Self::Between(a, b) => (v - a).min(b - v),
        }
    }
}

/// The magnetic state a goal is about.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum GoalState {
    /// Parallel.
    Parallel,
    /// Antiparallel.
    Antiparallel,
}

/// One goal.
#[derive(Clone, PartialEq, Debug)]
pub struct Goal {
    /// What it is set on.
    pub target: Target,
    /// The comparison.
    pub comparison: Comparison,
    /// State.
    pub state: GoalState,
    /// As written.
    pub text: String,
    /// Where.
    pub place: Place,
}

const STATES: &[(&str, GoalState)] = &[
    ("parallel", GoalState::Parallel),
    ("antiparallel", GoalState::Antiparallel),
];

fn refuse(faults: &Faults, place: &Place, field: &str, reason: &str, help: &str) {
    faults.push(Fault {
        place: Some(place.clone()),
        field: field.to_owned(),
        wrong: Wrong::Conflict {
            reason: reason.to_owned(),
            help: Some(help.to_owned()),
        },
    });
}

/// Reads the table of goals.
pub fn read_goals(node: &Node, faults: &Faults) -> Vec<Goal> {
    let reader = Reader::new(node, "goal", faults);
    let state = reader
        .word("state", "state", STATES)
        .map_or(GoalState::Parallel, |w| w.value);
    let mut goals = Vec::new();
    for (key, key_place, node) in reader.entries() {
        if key == "state" {
            continue;
        }
        let field = format!("goal.{key}");
        let Some((_, target)) = Target::WORDS.iter().find(|(w, _)| *w == key) else {
            faults.push(Fault {
                place: Some(key_place.clone()),
                field,
                wrong: Wrong::UnknownWord {
                    what: "goal",
                    found: key.to_owned(),
                    nearest: nearest(key, Target::WORDS.iter().map(|(w, _)| *w)),
                    allowed: Target::WORDS.iter().map(|(w, _)| (*w).to_owned()).collect(),
                },
            });
            continue;
        };
        let Value::Text(text) = &node.value else {
            faults.push(Fault {
                place: Some(node.place.clone()),
                field,
                wrong: Wrong::Type {
                    found: node.value.type_name(),
                    expected: "a text such as \">= 10 %\"",
                },
            });
            continue;
        };
        if let Some(comparison) = read_comparison(text, node, &field, target.kind(), faults) {
            goals.push(Goal {
                target: *target,
                comparison,
                state: if *target == Target::InjectedPolarization {
                    state
                } else {
                    GoalState::Parallel
                },
                text: text.clone(),
                place: node.place.clone(),
            });
        }
    }
    goals
}

fn read_comparison(
    text: &str,
    node: &Node,
    field: &str,
    kind: &'static Kind,
    faults: &Faults,
) -> Option<Comparison> {
    if text.contains("..") {
        return match read_interval(text, kind) {
            Ok(interval) => {
                let (low, high) = (interval.low, interval.high);
                if low < 0.0 {
                    refuse(
                        faults,
                        &node.place,
                        field,
                        "absolute values are compared, so the lower end of a goal is not negative",
                        "write, for example, \"1 .. 5 %\"",
                    );
                    return None;
                }
                Some(Comparison::Between(low, high))
            }
            Err(fault) => {
                faults.push(Fault {
                    place: Some(node.inside(fault.at.clone())),
                    field: field.to_owned(),
                    wrong: Wrong::quantity(fault, kind),
                });
                None
            }
        };
    }
    let trimmed = text.trim_start();
    let offset = text.len() - trimmed.len();
    let (at_least, skip) = if let Some(r) = trimmed.strip_prefix(">=") {
        (true, trimmed.len() - r.len())
    } else if let Some(r) = trimmed.strip_prefix('≥') {
        (true, trimmed.len() - r.len())
    } else if let Some(r) = trimmed.strip_prefix("<=") {
        (false, trimmed.len() - r.len())
    } else if let Some(r) = trimmed.strip_prefix('≤') {
        (false, trimmed.len() - r.len())
    } else {
        refuse(
            faults,
            &node.place,
            field,
            "a goal begins with >= or <=, or is an interval",
            "write \">= 10 %\", \"<= 5 %\" or \"1 .. 5 %\"",
        );
        return None;
    };
    let start = offset + skip;
    match read(&text[start..], kind, &Context::default()) {
        Ok(Reading {
            si,
            spread: Spread::Exact,
            ..
        }) if si >= 0.0 => Some(if at_least {
            Comparison::AtLeast(si)
        } else {
            Comparison::AtMost(si)
        }),
        Ok(Reading { si, .. }) if si < 0.0 => {
            refuse(
                faults,
                &node.place,
                field,
                "absolute values are compared, so a goal is not negative",
                "write it without the minus sign",
            );
            None
        }
        Ok(_) => {
            refuse(
                faults,
                &node.place,
                field,
                "a goal is a plain number without spread",
                "write, for example, \">= 10 %\"",
            );
            None
        }
        Err(fault) => {
            let at = fault.at.clone().map(|r| r.start + start..r.end + start);
            faults.push(Fault {
                place: Some(node.inside(at)),
                field: field.to_owned(),
                wrong: Wrong::quantity(fault, kind),
            });
            None
        }
    }
}
