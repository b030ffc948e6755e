//! Why a text is not a unit, as facts and as a sentence.

use std::fmt;
use std::ops::Range;

/// Why a text is not a unit. Ranges are bytes inside the text of the unit.
#[derive(Clone, PartialEq, Eq, Debug)]
pub enum UnitFault {
    /// There is no unit.
    Empty,
    /// The symbol is not known.
    Unknown {
        /// The symbol as typed.
        symbol: String,
        /// Where it stands.
        at: Range<usize>,
        /// The accepted spelling nearest to it.
        nearest: Option<String>,
    },
    /// The symbol is understood but not accepted here.
    NotHere {
        /// The symbol as typed.
        symbol: String,
        /// Where it stands.
        at: Range<usize>,
        /// What to write instead.
        reason: String,
    },
    /// The text can be read in two ways.
    Ambiguous {
        /// Where the doubt begins.
        at: Range<usize>,
        /// What to write instead.
        reason: &'static str,
    },
    /// The exponent is not a small whole number.
    BadExponent {
        /// Where it stands.
        at: Range<usize>,
        /// What to write instead.
        reason: &'static str,
    },
    /// A bracket without its partner.
    Unbalanced {
        /// The bracket.
        at: Range<usize>,
    },
    /// A character that belongs to no unit.
    Unexpected {
        /// What was found; `None` at the end of the text.
        found: Option<char>,
        /// Where it stands.
        at: Range<usize>,
        /// What to write instead.
        reason: &'static str,
    },
}

impl UnitFault {
    /// The bytes to underline inside the text of the unit; `None` means all of it.
    #[must_use]
    pub fn at(&self) -> Option<Range<usize>> {
        match self {
            Self::Empty => None,
            Self::Unknown { at, .. }
            | Self::NotHere { at, .. }
            | Self::Ambiguous { at, .. }
            | Self::BadExponent { at, .. }
            | Self::Unbalanced { at }
            | Self::Unexpected { at, .. } => Some(at.clone()),
        }
    }
}

impl fmt::Display for UnitFault {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Empty => write!(f, "the unit is missing"),
            Self::Unknown {
                symbol,
                nearest: Some(near),
                ..
            } => {
                write!(f, "\"{symbol}\" is not a known unit; did you mean {near}?")
            }
            Self::Unknown {
                symbol,
                nearest: None,
                ..
            } => {
                write!(f, "\"{symbol}\" is not a known unit")
            }
            Self::NotHere { symbol, reason, .. } => {
                write!(f, "\"{symbol}\" is not accepted here: {reason}")
            }
            Self::Ambiguous { reason, .. } => write!(f, "the unit is ambiguous: {reason}"),
            Self::BadExponent { reason, .. } => write!(f, "the exponent is not accepted: {reason}"),
            Self::Unbalanced { .. } => write!(f, "a bracket in the unit has no partner"),
            Self::Unexpected {
                found: Some(c),
                reason,
                ..
            } => {
                write!(f, "\"{c}\" does not belong into a unit here: {reason}")
            }
            Self::Unexpected {
                found: None,
                reason,
                ..
            } => write!(f, "the unit breaks off: {reason}"),
        }
    }
}

impl std::error::Error for UnitFault {}
