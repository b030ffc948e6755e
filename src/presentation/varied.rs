//! Answers along a range, as a table or as CSV.

use crate::devices::vertical::Outcome;
use crate::quantities::kind::Scale;
use crate::quantities::print::{number_in, trade_unit};
use crate::studies::vary::Varied;

use super::full::{table, table_lines};
use super::lines::wrap;
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
    ("p", Scale::Percent, false),
    ("p, AP", Scale::Percent, true),
    ("u/j", Scale::ResistanceArea, false),
    ("u/j, AP", Scale::ResistanceArea, true),
    ("stack RA", Scale::ResistanceArea, false),
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

/// As a table: one unit a column, told in its head.
#[must_use]
pub fn lines(v: &Varied, width: usize) -> Vec<String> {
    let columns = columns(v);
    let typed_unit = common_unit(&v.variation.points);
    let key = v
        .variation
        .path
        .rsplit('.')
        .next()
        .unwrap_or("")
        .replace('_', " ");
    let mut head = vec![format!("{}\n{typed_unit}", key.replace(' ', "\n"))];
    let mut units = Vec::new();
    for c in &columns {
        let mut sizes: Vec<f64> = v.rows.iter().map(|r| r.outcome[c.index].abs()).collect();
        sizes.sort_by(f64::total_cmp);
        let middle = sizes.get(sizes.len() / 2).copied().unwrap_or(0.0);
        let (unit, factor) = trade_unit(middle, c.scale);
        head.push(format!("{}\n{unit}", c.head).replace(' ', "\u{a0}"));
        units.push(factor);
    }
    if !v.goals.is_empty() {
        head.push("goals".to_owned());
    }
    let heads: Vec<&str> = head.iter().map(String::as_str).collect();
    let right: Vec<usize> = (0..=columns.len()).collect();
    let mut t = table(&heads, width, &right);
    for (row, text) in v.rows.iter().zip(&v.variation.points) {
        let number = text.strip_suffix(&typed_unit).unwrap_or(text).trim();
        let mut cells = vec![number.to_owned()];
        cells.extend(
            columns
                .iter()
                .zip(&units)
                .map(|(c, f)| number_in(row.outcome[c.index], *f, DIGITS)),
        );
        if !v.goals.is_empty() {
            cells.push(if row.goals_met { "met" } else { "not met" }.to_owned());
        }
        t.add_row(
            cells
                .iter()
                .map(|c| c.replace(' ', "\u{a0}"))
                .collect::<Vec<_>>(),
        );
    }
    let mut lines = vec![format!("along {}", v.variation.path)];
    lines.extend(table_lines(&t));
    let mut notes = vec![
        "p: injected current polarization; u/j: spin accumulation per current density; RA of the whole stack".to_owned(),
    ];
    if v.device.has_two_states {
        notes.push("AP: antiparallel state".to_owned());
    }
    lines.extend(wrap(&notes.join("; "), width));
    if v.chooses_records {
        lines.extend(wrap("Steps along this field are changes of record, not physics: the library's values are not interpolated.", width));
    }
    lines
}

/// The unit that all points were typed in.
fn common_unit(points: &[String]) -> String {
    points
        .first()
        .and_then(|p| p.split_once(' '))
        .map(|(_, unit)| unit.to_owned())
        .filter(|unit| points.iter().all(|p| p.ends_with(unit.as_str())))
        .unwrap_or_default()
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
    let mut heads = vec![
        "as_written".to_owned(),
        head(&v.variation.path, v.variation.kind.scale),
    ];
    heads.extend(columns.iter().map(|c| head(c.name, c.scale)));
    if !v.goals.is_empty() {
        heads.push("goals_met".to_owned());
    }
    writer.write_record(&heads).map_err(|e| e.to_string())?;
    for (row, text) in v.rows.iter().zip(&v.variation.points) {
        let mut cells = vec![text.clone(), exact(row.value)];
        cells.extend(columns.iter().map(|c| exact(row.outcome[c.index])));
        if !v.goals.is_empty() {
            cells.push(row.goals_met.to_string());
        }
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
