//! A TOML text as a tree in which every key and every value knows its place.

use std::collections::BTreeSet;
use std::sync::Arc;

use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::fault::{Fault, Place, Source, Wrong};

/// A value with its place.
#[derive(Clone, PartialEq, Debug)]
pub struct Node {
    /// What it is.
    pub value: Value,
    /// Where it stands, quotes included.
    pub place: Place,
}

/// A TOML value.
#[derive(Clone, PartialEq, Debug)]
pub enum Value {
    /// A string.
    Text(String),
    /// An integer or a float; kept as written so that nothing is rounded twice.
    Number(f64),
    /// true or false.
    Flag(bool),
    /// An array.
    List(Vec<Node>),
    /// A table, keys in the order of the file.
    Table(Vec<Entry>),
    /// A date or time, which no field here takes.
    Date,
}

/// One key of a table.
#[derive(Clone, PartialEq, Debug)]
pub struct Entry {
    /// The key.
    pub key: String,
    /// Where the key stands.
    pub key_place: Place,
    /// Its value.
    pub node: Node,
}

impl Value {
    /// The name of the type, as a user would say it.
    #[must_use]
    pub fn type_name(&self) -> &'static str {
        match self {
            Self::Text(_) => "a text",
            Self::Number(_) => "a number",
            Self::Flag(_) => "true or false",
            Self::List(_) => "a list",
            Self::Table(_) => "a table",
            Self::Date => "a date",
        }
    }
}

impl Node {
    /// The entry of a table by its key.
    #[must_use]
    pub fn get(&self, key: &str) -> Option<&Entry> {
        match &self.value {
            Value::Table(entries) => entries.iter().find(|e| e.key == key),
            _ => None,
        }
    }

    /// The place inside the quotes that `at` bytes of the text stand at, where the literal holds no
    /// escapes; otherwise the place of the whole literal.
    #[must_use]
    pub fn inside(&self, at: Option<std::ops::Range<usize>>) -> Place {
        let (Some(at), Value::Text(text)) = (at, &self.value) else {
            return self.place.clone();
        };
        let whole = &self.place.span;
        let literal = self.place.source.text.get(whole.clone()).unwrap_or("");
        let quote = [3_usize, 1, 0].into_iter().find(|n| {
            literal.len() == text.len() + 2 * n && literal.get(*n..literal.len() - n) == Some(text)
        });
        match quote {
            Some(n) if at.end <= text.len() => Place {
                source: Arc::clone(&self.place.source),
                span: whole.start + n + at.start..whole.start + n + at.end,
            },
            _ => self.place.clone(),
        }
    }
}

/// Reads a TOML text.
///
/// # Errors
/// Every syntax fault of the text.
pub fn parse(source: &Arc<Source>) -> Result<Node, Vec<Fault>> {
    let (table, errors) = DeTable::parse_recoverable(&source.text);
    if !errors.is_empty() {
        // The first of each line: what follows on it is mostly said of the same slip.
        let mut lines = BTreeSet::new();
        let line = |at: usize| {
            source
                .text
                .as_bytes()
                .iter()
                .take(at)
                .filter(|b| **b == b'\n')
                .count()
        };
        return Err(errors
            .into_iter()
            .filter(|e| lines.insert(e.span().map(|span| line(span.start))))
            .map(|e| Fault {
                place: e.span().map(|span| Place {
                    source: Arc::clone(source),
                    span,
                }),
                field: String::new(),
                wrong: Wrong::Syntax {
                    reason: e.message().to_owned(),
                },
            })
            .collect());
    }
    let span = 0..source.text.len();
    Ok(Node {
        value: table_of(source, table.into_inner()),
        place: Place {
            source: Arc::clone(source),
            span,
        },
    })
}

fn table_of(source: &Arc<Source>, table: DeTable<'_>) -> Value {
    let mut entries: Vec<Entry> = table
        .into_iter()
        .map(|(key, value)| Entry {
            key: key.get_ref().to_string(),
            key_place: Place {
                source: Arc::clone(source),
                span: key.span(),
            },
            node: node_of(source, value),
        })
        .collect();
    entries.sort_by_key(|e| e.key_place.span.start);
    Value::Table(entries)
}

fn node_of(source: &Arc<Source>, value: Spanned<DeValue<'_>>) -> Node {
    let place = Place {
        source: Arc::clone(source),
        span: value.span(),
    };
    let value = match value.into_inner() {
        DeValue::String(text) => Value::Text(text.into_owned()),
        DeValue::Integer(i) => {
            Value::Number(i64::from_str_radix(i.as_str(), i.radix()).map_or(f64::NAN, |n| n as f64))
        }
        DeValue::Float(f) => Value::Number(f.as_str().parse().unwrap_or(f64::NAN)),
        DeValue::Boolean(b) => Value::Flag(b),
        DeValue::Datetime(_) => Value::Date,
        DeValue::Array(items) => Value::List(
            items
                .into_iter()
                .map(|item| node_of(source, item))
                .collect(),
        ),
        DeValue::Table(table) => table_of(source, table),
    };
    Node { value, place }
}
