//! Reading fields out of a table: each by its kind, every fault collected, no key left unread.

use std::cell::RefCell;
use std::rc::Rc;

use crate::quantities::kind::Kind;
use crate::quantities::spread::Spread;
use crate::quantities::text::{Reading, read, read_bare};
use crate::quantities::unit::Context;

use super::fault::{Fault, Place, Wrong, nearest};
use super::tree::{Node, Value};

/// Faults of one or several texts, in the order found.
#[derive(Clone, Default, Debug)]
pub struct Faults(Rc<RefCell<Vec<Fault>>>);

impl Faults {
    /// Adds one, unless it is there already: a file that is read twice is complained of once.
    pub fn push(&self, fault: Fault) {
        let mut all = self.0.borrow_mut();
        if !all.contains(&fault) {
            all.push(fault);
        }
    }

    /// Takes them all out, ordered by place within each source.
    #[must_use]
    pub fn take(&self) -> Vec<Fault> {
        let mut all = std::mem::take(&mut *self.0.borrow_mut());
        all.sort_by(|a, b| {
            let key = |f: &Fault| {
                f.place.as_ref().map_or((String::new(), 0), |p| {
                    (p.source.name.clone(), p.span.start)
                })
            };
            key(a).cmp(&key(b))
        });
        all
    }

    /// Whether something was said about this field already, so that what follows from it is not said too.
    #[must_use]
    pub fn told(&self, field: &str) -> bool {
        self.0.borrow().iter().any(|f| f.field == field)
    }

    /// How many there are.
    #[must_use]
    pub fn count(&self) -> usize {
        self.0.borrow().len()
    }
}

/// A value that was read, with the place it came from.
#[derive(Clone, PartialEq, Debug)]
pub struct Placed<T> {
    /// The value.
    pub value: T,
    /// Where it stood.
    pub place: Place,
}

/// Reads one table. Keys that were never asked for are reported by [`Reader::finish`].
#[derive(Debug)]
pub struct Reader<'a> {
    node: &'a Node,
    path: String,
    faults: Faults,
    asked: RefCell<Vec<&'static str>>,
}

impl<'a> Reader<'a> {
    /// A reader of a table; anything else is a fault and reads as an empty table.
    #[must_use]
    pub fn new(node: &'a Node, path: &str, faults: &Faults) -> Self {
        if !matches!(node.value, Value::Table(_)) {
            faults.push(Fault {
                place: Some(node.place.clone()),
                field: path.to_owned(),
                wrong: Wrong::Type {
                    found: node.value.type_name(),
                    expected: "a table",
                },
            });
        }
        Self {
            node,
            path: path.to_owned(),
            faults: faults.clone(),
            asked: RefCell::default(),
        }
    }

    /// Path of a key under this table.
    #[must_use]
    pub fn path_of(&self, key: &str) -> String {
        if self.path.is_empty() {
            key.to_owned()
        } else {
            format!("{}.{key}", self.path)
        }
    }

    /// Place of the whole table.
    #[must_use]
    pub fn place(&self) -> &Place {
        &self.node.place
    }

    /// Adds a fault at a key of this table, at its value if it is there, else at the table.
    pub fn fault(&self, key: &str, wrong: Wrong) {
        let place = self
            .node
            .get(key)
            .map_or(&self.node.place, |e| &e.node.place);
        self.faults.push(Fault {
            place: Some(place.clone()),
            field: self.path_of(key),
            wrong,
        });
    }

    /// Whether the key is there, without counting it as read.
    #[must_use]
    pub fn has(&self, key: &str) -> bool {
        self.node.get(key).is_some()
    }

    /// The value of a key.
    pub fn node(&self, key: &'static str) -> Option<&'a Node> {
        self.asked.borrow_mut().push(key);
        self.node.get(key).map(|e| &e.node)
    }

    /// Place of the key itself.
    #[must_use]
    pub fn key_place(&self, key: &str) -> Option<Place> {
        self.node.get(key).map(|e| e.key_place.clone())
    }

    fn wrong_type(&self, key: &str, node: &Node, expected: &'static str) {
        self.faults.push(Fault {
            place: Some(node.place.clone()),
            field: self.path_of(key),
            wrong: Wrong::Type {
                found: node.value.type_name(),
                expected,
            },
        });
    }

    /// A text.
    pub fn text(&self, key: &'static str) -> Option<Placed<String>> {
        let node = self.node(key)?;
        if let Value::Text(text) = &node.value {
            Some(Placed {
                value: text.clone(),
                place: node.place.clone(),
            })
        } else {
            self.wrong_type(key, node, "a text");
            None
        }
    }

    /// A text that has to be there.
    pub fn required_text(&self, key: &'static str, help: &str) -> Option<Placed<String>> {
        if !self.has(key) {
            self.asked.borrow_mut().push(key);
            self.missing(key, help);
            return None;
        }
        self.text(key)
    }

    /// Reports a key as missing; not of something that is no table, which was reported as such.
    pub fn missing(&self, key: &str, help: &str) {
        if !matches!(self.node.value, Value::Table(_)) {
            return;
        }
        self.faults.push(Fault {
            place: Some(self.node.place.clone()),
            field: self.path_of(key),
            wrong: Wrong::Missing {
                key: key.to_owned(),
                help: help.to_owned(),
            },
        });
    }

    /// One of some words.
    pub fn word<T: Copy>(
        &self,
        key: &'static str,
        what: &'static str,
        words: &[(&str, T)],
    ) -> Option<Placed<T>> {
        let text = self.text(key)?;
        if let Some((_, found)) = words.iter().find(|(w, _)| *w == text.value) {
            return Some(Placed {
                value: *found,
                place: text.place,
            });
        }
        self.faults.push(Fault {
            place: Some(text.place),
            field: self.path_of(key),
            wrong: Wrong::UnknownWord {
                what,
                nearest: nearest(&text.value, words.iter().map(|(w, _)| *w)),
                found: text.value,
                allowed: words.iter().map(|(w, _)| (*w).to_owned()).collect(),
            },
        });
        None
    }

    /// A quantity of the given kind.
    pub fn quantity(
        &self,
        key: &'static str,
        kind: &'static Kind,
        context: &Context,
    ) -> Option<Placed<Reading>> {
        let node = self.node(key)?;
        let reading = match &node.value {
            Value::Text(text) => read(text, kind, context),
            Value::Number(n) => read_bare(*n, kind),
            _ => {
                self.wrong_type(key, node, "a text with number and unit");
                return None;
            }
        };
        match reading {
            Ok(value) => Some(Placed {
                value,
                place: node.place.clone(),
            }),
            Err(fault) => {
                self.faults.push(Fault {
                    place: Some(node.inside(fault.at.clone())),
                    field: self.path_of(key),
                    wrong: Wrong::quantity(fault, kind),
                });
                None
            }
        }
    }

    /// A quantity that takes no spread: it decides which records are chosen, or only scales an answer.
    pub fn exact_quantity(
        &self,
        key: &'static str,
        kind: &'static Kind,
    ) -> Option<Placed<Reading>> {
        let placed = self.quantity(key, kind, &Context::default())?;
        if placed.value.spread == Spread::Exact {
            return Some(placed);
        }
        self.faults.push(Fault {
            place: Some(placed.place),
            field: self.path_of(key),
            wrong: Wrong::Conflict {
                reason: format!("`{key}` takes no spread and no bound"),
                help: Some(format!(
                    "write a plain value, for example \"{}\"",
                    kind.examples.first().copied().unwrap_or("1")
                )),
            },
        });
        None
    }

    /// true or false.
    pub fn flag(&self, key: &'static str) -> Option<bool> {
        let node = self.node(key)?;
        if let Value::Flag(b) = node.value {
            Some(b)
        } else {
            self.wrong_type(key, node, "true or false");
            None
        }
    }

    /// A list of texts; absent reads as empty.
    pub fn texts(&self, key: &'static str) -> Vec<Placed<String>> {
        let Some(node) = self.node(key) else {
            return Vec::new();
        };
        let Value::List(items) = &node.value else {
            self.wrong_type(key, node, "a list of texts");
            return Vec::new();
        };
        items
            .iter()
            .filter_map(|item| {
                if let Value::Text(text) = &item.value {
                    Some(Placed {
                        value: text.clone(),
                        place: item.place.clone(),
                    })
                } else {
                    self.wrong_type(key, item, "a text");
                    None
                }
            })
            .collect()
    }

    /// A table under this one.
    pub fn table(&self, key: &'static str) -> Option<Reader<'a>> {
        let node = self.node(key)?;
        Some(Reader::new(node, &self.path_of(key), &self.faults))
    }

    /// A list of tables; absent reads as empty.
    pub fn tables(&self, key: &'static str) -> Vec<Reader<'a>> {
        let Some(node) = self.node(key) else {
            return Vec::new();
        };
        let Value::List(items) = &node.value else {
            self.wrong_type(key, node, "a list of tables");
            return Vec::new();
        };
        items
            .iter()
            .enumerate()
            .map(|(i, item)| {
                Reader::new(
                    item,
                    &format!("{}.{}", self.path_of(key), i + 1),
                    &self.faults,
                )
            })
            .collect()
    }

    /// Whether it is a table without an entry.
    #[must_use]
    pub fn is_empty_table(&self) -> bool {
        matches!(&self.node.value, Value::Table(entries) if entries.is_empty())
    }

    /// All entries of this table in order: key, its place, value. Counts them as read.
    #[must_use]
    pub fn entries(&self) -> Vec<(&'a str, &'a Place, &'a Node)> {
        match &self.node.value {
            Value::Table(entries) => entries
                .iter()
                .map(|e| (e.key.as_str(), &e.key_place, &e.node))
                .collect(),
            _ => Vec::new(),
        }
    }

    /// Reports every key that was not asked for.
    pub fn finish(&self) {
        let asked = self.asked.borrow();
        for (key, place, _) in self.entries() {
            if !asked.contains(&key) {
                let mut allowed: Vec<String> = asked.iter().map(|k| (*k).to_owned()).collect();
                allowed.sort();
                allowed.dedup();
                self.faults.push(Fault {
                    place: Some(place.clone()),
                    field: self.path_of(key),
                    wrong: Wrong::UnknownKey {
                        found: key.to_owned(),
                        nearest: nearest(key, asked.iter().copied()),
                        allowed,
                    },
                });
            }
        }
    }
}
