//! Why a text is not a value of its kind: what is wrong, where, and what to write instead.

use std::fmt;
use std::ops::Range;

use super::dimensions::Dimension;
use super::kind::{self, End, Kind};
use super::print;
use super::spread::Spread;
use super::unit::UnitFault;

/// What is wrong.
#[derive(Clone, PartialEq, Debug)]
pub enum ReadFaultKind {
    /// The text is empty.
    Empty,
    /// The number cannot be read.
    Number {
        /// Why, and what to write instead.
        reason: String,
    },
    /// A number without a unit where one is needed.
    UnitMissing {
        /// What was expected.
        kind: Box<Kind>,
    },
    /// The unit cannot be read.
    Unit(UnitFault),
    /// The unit belongs to another quantity.
    Dimension {
        /// Dimension of what was written.
        found: Dimension,
        /// Names of the quantities with that dimension; empty when it has none here.
        found_name: Vec<&'static str>,
        /// The unit as typed.
        unit: String,
        /// What was expected.
        expected: Box<Kind>,
    },
    /// The unit has the right dimension but is no way to write this quantity.
    NotASpelling {
        /// The unit as typed.
        spelling: String,
        /// Why, and what to write instead.
        reason: String,
    },
    /// The number lies outside the range of its kind.
    OutOfRange {
        /// The number and the unit as typed.
        value: String,
        /// What was expected.
        kind: Box<Kind>,
    },
    /// The uncertainty, the interval or the bound cannot be read.
    Spread {
        /// Why, and what to write instead.
        reason: String,
    },
}

/// A text that is not a value of its kind.
#[derive(Clone, PartialEq, Debug)]
pub struct ReadFault {
    /// What is wrong.
    pub what: ReadFaultKind,
    /// Bytes inside the text to underline; `None` means the whole text.
    pub at: Option<Range<usize>>,
}

fn examples(kind: &Kind) -> String {
    let quoted: Vec<String> = kind.examples.iter().map(|e| format!("\"{e}\"")).collect();
    format!("write it like {}", quoted.join(" or "))
}

fn limits(kind: &Kind) -> String {
    let text = |x: f64| print::with_spread(x, &Spread::Exact, kind.scale);
    let low = match kind.range.low {
        End::Including(a) => format!("at least {}", text(a)),
        End::Excluding(a) => format!("above {}", text(a)),
    };
    let high = match kind.range.high {
        End::Including(b) => format!("at most {}", text(b)),
        End::Excluding(b) => format!("below {}", text(b)),
    };
    format!("it must be {low} and {high}")
}

impl ReadFault {
    pub(super) fn new(what: ReadFaultKind, at: Option<Range<usize>>) -> Self {
        Self { what, at }
    }

    /// What is wrong, in one short clause.
    #[must_use]
    pub fn message(&self) -> String {
        match &self.what {
            ReadFaultKind::Empty => "the value is empty".to_owned(),
            ReadFaultKind::Number { reason } => format!("the number is not accepted: {reason}"),
            ReadFaultKind::UnitMissing { kind } => {
                format!("the unit is missing: expected {}", kind.name)
            }
            ReadFaultKind::Unit(fault) => fault.to_string(),
            ReadFaultKind::Dimension {
                found,
                found_name,
                expected,
                ..
            } => {
                let found = if *found == Dimension::NONE {
                    "a pure number".to_owned()
                } else if found_name.is_empty() {
                    format!("a quantity in {}", found.spelled())
                } else {
                    found_name.join(" or ")
                };
                format!("expected {}, found {found}", expected.name)
            }
            ReadFaultKind::NotASpelling { spelling, reason } => {
                format!("\"{spelling}\" is not accepted here: {reason}")
            }
            ReadFaultKind::OutOfRange { value, kind } => {
                format!(
                    "{value} is out of range for the {}: {}",
                    kind.name, kind.range.reason
                )
            }
            ReadFaultKind::Spread { reason } => format!("the spread is not accepted: {reason}"),
        }
    }

    /// What to write instead, where the message does not say it already.
    #[must_use]
    pub fn help(&self) -> Option<String> {
        match &self.what {
            ReadFaultKind::Dimension { unit, expected, .. } => {
                let hint = if expected.dimension == kind::THICKNESS.dimension && unit == "A" {
                    "A is the ampere; for ångström write Å or angstrom, or use nm; "
                } else if expected.absolute_temperature && unit == "C" {
                    "C is the coulomb; for degrees Celsius write °C; "
                } else if expected.dimension == Dimension::NONE {
                    "it has no unit; "
                } else {
                    ""
                };
                Some(format!("{hint}{}", examples(expected)))
            }
            ReadFaultKind::UnitMissing { kind } => Some(examples(kind)),
            ReadFaultKind::OutOfRange { value, kind } => {
                // "10" for a ratio is nearly always meant in per cent.
                let in_percent = value
                    .parse::<f64>()
                    .is_ok_and(|x| x.abs() >= 2.0 && kind.percent && kind.range.holds(x / 100.0));
                Some(if in_percent {
                    format!("did you mean {value} %? {}", limits(kind))
                } else {
                    limits(kind)
                })
            }
            ReadFaultKind::Unit(UnitFault::Unknown {
                nearest: Some(near),
                ..
            }) => Some(format!("write {near}")),
            _ => None,
        }
    }
}

impl fmt::Display for ReadFault {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}", self.message())
    }
}

impl std::error::Error for ReadFault {}

/// Names by dimension, the most usual first.
const NAMES: &[([i8; 7], &[&str])] = &[
    ([0, 0, 0, 0, 0, 0, 0], &["pure number"]),
    ([1, 0, 0, 0, 0, 0, 0], &["length"]),
    ([2, 0, 0, 0, 0, 0, 0], &["area"]),
    ([3, 0, 0, 0, 0, 0, 0], &["volume"]),
    ([0, 1, 0, 0, 0, 0, 0], &["mass"]),
    ([0, 0, 1, 0, 0, 0, 0], &["time"]),
    ([0, 0, -1, 0, 0, 0, 0], &["frequency"]),
    ([0, 0, 0, 1, 0, 0, 0], &["electric current"]),
    ([0, 0, 0, 0, 1, 0, 0], &["temperature"]),
    ([0, 0, 0, 0, 0, 1, 0], &["amount of substance"]),
    ([0, 0, 0, 0, 0, 0, 1], &["luminous intensity"]),
    ([-1, 0, 0, 0, 0, 0, 0], &["inverse length"]),
    ([-2, 0, 0, 0, 0, 0, 0], &["areal density"]),
    ([-3, 0, 0, 0, 0, 0, 0], &["density of carriers or dopants"]),
    ([1, 0, -1, 0, 0, 0, 0], &["velocity"]),
    ([1, 0, -2, 0, 0, 0, 0], &["acceleration"]),
    ([2, 0, -1, 0, 0, 0, 0], &["diffusion constant"]),
    ([0, 0, 1, 1, 0, 0, 0], &["electric charge"]),
    ([-2, 0, 0, 1, 0, 0, 0], &["current density"]),
    (
        [-1, 0, 0, 1, 0, 0, 0],
        &["magnetization", "magnetic field strength"],
    ),
    ([2, 1, -3, -1, 0, 0, 0], &["voltage"]),
    ([1, 1, -3, -1, 0, 0, 0], &["electric field"]),
    ([2, 1, -3, -2, 0, 0, 0], &["resistance", "sheet resistance"]),
    ([3, 1, -3, -2, 0, 0, 0], &["resistivity"]),
    (
        [4, 1, -3, -2, 0, 0, 0],
        &["resistance-area product", "spin resistance"],
    ),
    ([-2, -1, 3, 2, 0, 0, 0], &["conductance"]),
    ([-3, -1, 3, 2, 0, 0, 0], &["conductivity"]),
    ([-4, -1, 3, 2, 0, 0, 0], &["conductance per area"]),
    ([0, -1, 2, 1, 0, 0, 0], &["mobility"]),
    ([-2, -1, 4, 2, 0, 0, 0], &["capacitance"]),
    ([2, 1, -2, -2, 0, 0, 0], &["inductance"]),
    ([2, 1, -2, 0, 0, 0, 0], &["energy"]),
    ([2, 1, -3, 0, 0, 0, 0], &["power"]),
    ([1, 1, -2, 0, 0, 0, 0], &["force"]),
    ([-1, 1, -2, 0, 0, 0, 0], &["pressure"]),
    ([0, 1, -2, -1, 0, 0, 0], &["magnetic flux density"]),
    ([2, 1, -2, -1, 0, 0, 0], &["magnetic flux"]),
    ([0, -1, 1, 1, 0, 0, 0], &["gyromagnetic ratio"]),
];

/// Names of the quantities of this field with the given dimension; empty when there is none.
#[must_use]
pub fn dimension_names(d: Dimension) -> Vec<&'static str> {
    NAMES
        .iter()
        .find(|(known, _)| *known == d.0)
        .map_or_else(Vec::new, |(_, names)| names.to_vec())
}
