//! Where a number of the input table comes from.

use crate::documents::fault::Place;
use crate::materials::choose::{Decided, Mark};

/// How an input got its value.
#[derive(Clone, PartialEq, Debug)]
pub enum Origin {
    /// It is written in the design.
    Design {
        /// Where.
        place: Place,
        /// Remark beside it.
        note: Option<String>,
        /// Whether it stands in place of a library value.
        overrides: bool,
    },
    /// It comes from a record.
    Record {
        /// Id of the record.
        id: String,
        /// Key of its reference.
        source: Option<String>,
        /// How it was obtained, in the record's word.
        obtained: &'static str,
        /// What decided.
        decided: Decided,
        /// Among how many.
        among: usize,
    },
}

/// Origin and marks.
#[derive(Clone, PartialEq, Debug)]
pub struct Provenance {
    /// Origin.
    pub origin: Origin,
    /// Marks.
    pub marks: Vec<Mark>,
}

impl Provenance {
    /// Ids of the records behind it.
    #[must_use]
    pub fn records(&self) -> Vec<String> {
        match &self.origin {
            Origin::Record { id, .. } => vec![id.clone()],
            Origin::Design { .. } => Vec::new(),
        }
    }

    /// Whether the number was recalled.
    #[must_use]
    pub fn is_recalled(&self) -> bool {
        self.marks.contains(&Mark::Recalled)
    }

    /// Whether the number rests on an assumption: borrowed, a prior, an assumed resistivity, an estimate.
    #[must_use]
    pub fn is_assumed(&self) -> bool {
        self.marks.iter().any(|m| {
            matches!(
                m,
                Mark::Borrowed { .. }
                    | Mark::LengthNotScaled
                    | Mark::MixedTechniques
                    | Mark::PriorSpread { .. }
                    | Mark::NoSpread
                    | Mark::BoundOnly
                    | Mark::ResistivityAssumed
                    | Mark::Estimated
            )
        })
    }
}
