//! Answers along a range, as a table or as CSV.

use crate::devices::vertical::Outcome;
use crate::quantities::kind::Scale;
use crate::quantities::print::with_digits;
use crate::studies::vary::Varied;

use super::full::{table, table_lines};
use super::machine::si_unit;
use super::numbers::DIGITS;

/// A column of the answer.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Column {
    /// Name in CSV and JSON.
    pub name: &'static str,
    /// Head in tables.
    pub head: &'static str,
    /// How it is printed.
    pub scale: Scale,
    /// Index in an outcome.
    pub index: usize,
    two_states: bool,
}

const HEADS: [(&str, Scale, bool); Outcome::COLUMNS.len()] = [
    ("injected p", Scale::Percent, false),
    ("p antiparallel", Scale::Percent, true),
    ("u/j", Scale::ResistanceArea, false),
    ("u/j antiparallel", Scale::ResistanceArea, true),
    ("RA", Scale::ResistanceArea, false),
    ("ΔRA", Scale::ResistanceArea, true),
    ("MR", Scale::Percent, true),
];

/// The columns that a device has an answer for.
#[must_use]
pub fn columns(v: &Varied) -> Vec<Column> {
    HEADS
        .iter()
        .enumerate()
        .map(|(index, (head, scale, two_states))| Column {
            name: Outcome::COLUMNS[index],
            head,
            scale: *scale,
            index,
            two_states: *two_states,
        })
        .filter(|c| !c.two_states || v.device.has_two_states)
        .collect()
}

/// As a table.
#[must_use]
pub fn lines(v: &Varied, width: usize) -> Vec<String> {
    let columns = columns(v);
    let mut head = vec![v.variation.path.as_str()];
    head.extend(columns.iter().map(|c| c.head));
    let right: Vec<usize> = (0..head.len()).collect();
    let mut t = table(&head, width, &right);
    for (row, text) in v.rows.iter().zip(&v.variation.points) {
        let mut cells = vec![text.clone()];
        cells.extend(columns.iter().map(|c| with_digits(row.outcome[c.index], c.scale, DIGITS)));
        t.add_row(cells);
    }
    table_lines(&t)
}

/// As CSV in SI units; the unit stands in the head. Numbers are written so that reading them back gives
/// the same number.
///
/// # Errors
/// The writer's, as text.
pub fn csv(v: &Varied) -> Result<String, String> {
    let columns = columns(v);
    let mut writer = csv::Writer::from_writer(Vec::new());
    let head = |name: &str, scale: Scale| format!("{name} ({})", si_unit(scale));
    let mut heads = vec!["as_written".to_owned(), head(&v.variation.path, v.variation.kind.scale)];
    heads.extend(columns.iter().map(|c| head(c.name, c.scale)));
    writer.write_record(&heads).map_err(|e| e.to_string())?;
    for (row, text) in v.rows.iter().zip(&v.variation.points) {
        let mut cells = vec![text.clone(), exact(row.value)];
        cells.extend(columns.iter().map(|c| exact(row.outcome[c.index])));
        writer.write_record(&cells).map_err(|e| e.to_string())?;
    }
    let bytes = writer.into_inner().map_err(|e| e.to_string())?;
    String::from_utf8(bytes).map_err(|e| e.to_string())
}

/// The shortest text that reads back as the same number; empty if it is not a number.
fn exact(x: f64) -> String {
    if !x.is_finite() {
        String::new()
    } else if x.abs() > 0.0 && !(1e-3..1e6).contains(&x.abs()) {
        format!("{x:e}")
    } else {
        format!("{x}")
    }
}
