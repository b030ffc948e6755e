//! What can be wrong with a text, as facts: where, what was found, what was expected.

use std::ops::Range;
use std::sync::Arc;

use crate::quantities::kind::Kind;
use crate::quantities::text::ReadFault;

/// A text with the name it is shown under: a file path, `standard input`, an option of the command line.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Source {
    /// Name shown.
    pub name: String,
    /// The text itself.
    pub text: String,
}

impl Source {
    /// A text with its name.
    #[must_use]
    pub fn new(name: impl Into<String>, text: impl Into<String>) -> Arc<Self> {
        Arc::new(Self {
            name: name.into(),
            text: text.into(),
        })
    }
}

/// Bytes of one source.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Place {
    /// The text.
    pub source: Arc<Source>,
    /// Byte range in it.
    pub span: Range<usize>,
}

impl Place {
    /// Line number, counted from one, where the range begins.
    #[must_use]
    pub fn line(&self) -> usize {
        let end = self.span.start.min(self.source.text.len());
        self.source.text.as_bytes()[..end]
            .iter()
            .filter(|b| **b == b'\n')
            .count()
            + 1
    }
}

/// What is wrong.
#[derive(Clone, PartialEq, Debug)]
pub enum Wrong {
    /// The text is not TOML.
    Syntax {
        /// The parser's reason.
        reason: String,
    },
    /// The file cannot be used as it is.
    File {
        /// Why.
        reason: String,
        /// What to do.
        help: Option<String>,
    },
    /// A key that this table does not have.
    UnknownKey {
        /// Key found.
        found: String,
        /// Keys allowed here.
        allowed: Vec<String>,
        /// Nearest of them, if one is near.
        nearest: Option<String>,
    },
    /// A key or table that has to be there is not.
    Missing {
        /// Its name.
        key: String,
        /// What it is for, with an example line.
        help: String,
    },
    /// Another type of TOML value than the field takes.
    Type {
        /// Type found.
        found: &'static str,
        /// Type expected.
        expected: &'static str,
    },
    /// A text that is not one of the words allowed.
    UnknownWord {
        /// What the word is of.
        what: &'static str,
        /// Word found.
        found: String,
        /// Words allowed.
        allowed: Vec<String>,
        /// Nearest of them.
        nearest: Option<String>,
    },
    /// A quantity that cannot be read or accepted.
    Quantity {
        /// Reason and help from the reader of quantities.
        fault: ReadFault,
        /// What could be written here.
        example: &'static str,
    },
    /// Two things that exclude each other, or one thing that needs another.
    Conflict {
        /// What does not go together.
        reason: String,
        /// What to write instead.
        help: Option<String>,
    },
    /// Nothing in the library answers what the design asks.
    NotInLibrary {
        /// What was looked for.
        what: String,
        /// What exists that is near.
        exists: Vec<String>,
        /// The line to write.
        help: String,
    },
}

impl Wrong {
    /// A quantity that cannot be read, with an example of its kind.
    #[must_use]
    pub fn quantity(fault: ReadFault, kind: &Kind) -> Self {
        Self::Quantity {
            fault,
            example: kind.examples.first().copied().unwrap_or("1"),
        }
    }
}

/// A fault at a place.
#[derive(Clone, PartialEq, Debug)]
pub struct Fault {
    /// Where. None where a whole source is meant that has no text.
    pub place: Option<Place>,
    /// The field, as a path: `injector.barrier.resistance_area`.
    pub field: String,
    /// What.
    pub wrong: Wrong,
}

/// The known name nearest to the one found, if it is near enough to be meant.
#[must_use]
pub fn nearest<'a>(found: &str, known: impl IntoIterator<Item = &'a str>) -> Option<String> {
    let lower = found.to_lowercase();
    known
        .into_iter()
        .map(|k| (strsim::jaro_winkler(&lower, &k.to_lowercase()), k))
        .filter(|(score, k)| {
            *score > 0.82 || (found.chars().count() >= 4 && k.to_lowercase().contains(&lower))
        })
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, k)| k.to_owned())
}
