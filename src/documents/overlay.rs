//! Single values laid over a tree: `--set channel.thickness="40 nm"`.

use std::sync::Arc;

use super::fault::{Fault, Place, Source, Wrong};
use super::tree::{Entry, Node, Value, parse};

/// A path into a tree and the value to put there.
#[derive(Clone, PartialEq, Debug)]
pub struct Setting {
    /// Keys from the root; an index picks an entry of a list, counted from one.
    pub path: Vec<String>,
    /// Place of the path.
    pub path_place: Place,
    /// The value.
    pub node: Node,
}

fn fault(source: &Arc<Source>, span: std::ops::Range<usize>, reason: &str) -> Fault {
    Fault {
        place: Some(Place {
            source: Arc::clone(source),
            span,
        }),
        field: String::new(),
        wrong: Wrong::Conflict {
            reason: reason.to_owned(),
            help: Some(
                "write it as PATH=VALUE, for example channel.thickness=\"40 nm\"".to_owned(),
            ),
        },
    }
}

/// Reads `PATH=VALUE`. The value may be a TOML value, or a bare text, which stands for itself: the quotes
/// that a shell eats need not be written twice.
///
/// # Errors
/// The text has no `=`, or no path before it.
pub fn read_setting(option: &str, text: &str) -> Result<Setting, Fault> {
    let source = Source::new(format!("{option} {text}"), text);
    let Some(equals) = text.find('=') else {
        return Err(fault(
            &source,
            0..text.len(),
            "there is no `=` between path and value",
        ));
    };
    let path_text = text[..equals].trim_end();
    let path: Vec<String> = path_text.split('.').map(|k| k.trim().to_owned()).collect();
    if path.iter().any(String::is_empty) {
        return Err(fault(
            &source,
            0..equals.max(1).min(text.len()),
            "the path before `=` has an empty part",
        ));
    }
    let start = equals + 1 + text[equals + 1..].len() - text[equals + 1..].trim_start().len();
    let raw = text[start..].trim_end();
    let span = start..start + raw.len();
    let place = Place {
        source: Arc::clone(&source),
        span,
    };
    let value = toml_value(raw).unwrap_or_else(|| Value::Text(raw.to_owned()));
    Ok(Setting {
        path,
        path_place: Place {
            source: Arc::clone(&source),
            span: 0..path_text.len(),
        },
        node: Node {
            value: relocated(value, &place),
            place,
        },
    })
}

fn toml_value(raw: &str) -> Option<Value> {
    let line = Source::new("", format!("v={raw}"));
    let Value::Table(entries) = parse(&line).ok()?.value else {
        return None;
    };
    match entries.as_slice() {
        [only] if only.key == "v" => Some(only.node.value.clone()),
        _ => None,
    }
}

/// Inner places of a value that was parsed out of a made-up line all become the place of the option.
fn relocated(value: Value, place: &Place) -> Value {
    let inner = |node: Node| Node {
        value: relocated(node.value, place),
        place: place.clone(),
    };
    match value {
        Value::List(items) => Value::List(items.into_iter().map(inner).collect()),
        Value::Table(entries) => Value::Table(
            entries
                .into_iter()
                .map(|e| Entry {
                    key: e.key,
                    key_place: place.clone(),
                    node: inner(e.node),
                })
                .collect(),
        ),
        other => other,
    }
}

/// Puts the value into the tree, making the tables on the way.
///
/// # Errors
/// The path leads through something that is not a table, or past the end of a list.
pub fn lay_over(root: &mut Node, setting: &Setting) -> Result<(), Fault> {
    let mut node = root;
    let (last, way) = match setting.path.split_last() {
        Some(parts) => parts,
        None => return Ok(()),
    };
    for (depth, key) in way.iter().enumerate() {
        node = step(node, key, setting, depth)?;
    }
    match &mut node.value {
        Value::Table(entries) => {
            match entries.iter_mut().find(|e| e.key == *last) {
                Some(entry) => entry.node = setting.node.clone(),
                None => entries.push(Entry {
                    key: last.clone(),
                    key_place: setting.path_place.clone(),
                    node: setting.node.clone(),
                }),
            }
            Ok(())
        }
        Value::List(_) => {
            *step(node, last, setting, setting.path.len() - 1)? = setting.node.clone();
            Ok(())
        }
        other => Err(through(setting, setting.path.len() - 1, other.type_name())),
    }
}

fn through(setting: &Setting, depth: usize, found: &str) -> Fault {
    Fault {
        place: Some(setting.path_place.clone()),
        field: setting.path.join("."),
        wrong: Wrong::Conflict {
            reason: format!(
                "`{}` is {found}, not a table",
                setting.path[..depth].join(".")
            ),
            help: None,
        },
    }
}

fn step<'a>(
    node: &'a mut Node,
    key: &str,
    setting: &Setting,
    depth: usize,
) -> Result<&'a mut Node, Fault> {
    match &mut node.value {
        Value::Table(entries) => {
            let at = match entries.iter().position(|e| e.key == key) {
                Some(at) => at,
                None => {
                    entries.push(Entry {
                        key: key.to_owned(),
                        key_place: setting.path_place.clone(),
                        node: Node {
                            value: Value::Table(Vec::new()),
                            place: setting.path_place.clone(),
                        },
                    });
                    entries.len() - 1
                }
            };
            Ok(&mut entries[at].node)
        }
        Value::List(items) => {
            let count = items.len();
            let index = key.parse::<usize>().ok().and_then(|n| n.checked_sub(1));
            match index.and_then(|i| items.get_mut(i)) {
                Some(item) => Ok(item),
                None => Err(Fault {
                    place: Some(setting.path_place.clone()),
                    field: setting.path.join("."),
                    wrong: Wrong::Conflict {
                        reason: format!(
                            "`{}` is a list of {count}; `{key}` is not one of its entries",
                            setting.path[..depth].join(".")
                        ),
                        help: Some(format!("count them from 1 to {count}")),
                    },
                }),
            }
        }
        other => Err(through(setting, depth, other.type_name())),
    }
}
