//! One field of a design followed over a range.

use crate::designs::design::read_design;
use crate::designs::goals::Goal;
use crate::designs::variation::Variation;
use crate::devices::resolve;
use crate::devices::vertical::{Outcome, Vertical};
use crate::documents::fault::{Fault, Wrong};
use crate::documents::overlay::lay_over;
use crate::documents::reader::Faults;
use crate::documents::tree::Node;
use crate::materials::library::Library;

use super::target::Wish;

/// Answers along a range.
#[derive(Clone, Debug)]
pub struct Varied {
    /// The range.
    pub variation: Variation,
    /// One row a point.
    pub rows: Vec<VariedRow>,
    /// Device of the first point, for the names of its parts.
    pub device: Vertical,
    /// Goals of the design.
    pub goals: Vec<Goal>,
    /// Whether the field decides which records are chosen, so that steps are changes of record.
    pub chooses_records: bool,
}

/// One point.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct VariedRow {
    /// Value of the field, SI.
    pub value: f64,
    /// Answer, columns as in [`Outcome::COLUMNS`].
    pub outcome: [f64; Outcome::COLUMNS.len()],
    /// Whether every goal is met.
    pub goals_met: bool,
}

fn device_at(
    root: &Node,
    variation: &Variation,
    point: usize,
    library: &Library,
    faults: &Faults,
) -> Option<(Vertical, Vec<Goal>)> {
    let mut tree = root.clone();
    let setting = variation.settings.get(point)?;
    if let Err(fault) = lay_over(&mut tree, setting) {
        faults.push(fault);
        return None;
    }
    let design = read_design(&tree, library, faults)?;
    if faults.count() > 0 {
        return None;
    }
    Some((resolve(&design, library, faults)?, design.goals))
}

fn row(value: f64, outcome: [f64; Outcome::COLUMNS.len()], goals: &[Goal]) -> VariedRow {
    let goals_met = goals
        .iter()
        .all(|g| g.comparison.met(outcome[Wish::of(g).column()]));
    VariedRow {
        value,
        outcome,
        goals_met,
    }
}

/// Follows a field. Where it is an input of the device, one column of the input matrix moves; where it
/// decides which records are chosen (temperature, doping), the device is resolved again at each point.
/// Either way each row equals a single run with that value set.
pub fn vary(
    root: &Node,
    variation: Variation,
    library: &Library,
    faults: &Faults,
) -> Option<Varied> {
    let (device, goals) = device_at(root, &variation, 0, library, faults)?;
    // A range can leave what a design allows at its far end: what a single run refuses is refused here.
    device_at(
        root,
        &variation,
        variation.points.len().saturating_sub(1),
        library,
        faults,
    )?;
    let readings: Option<Vec<f64>> = variation
        .points
        .iter()
        .map(|t| {
            crate::quantities::text::read(
                t,
                variation.kind,
                &crate::quantities::unit::Context::default(),
            )
            .ok()
            .map(|r| r.si)
        })
        .collect();
    let column = device.table.column(&variation.path);
    let rows = match (column, readings) {
        (Some(column), Some(values)) => {
            let mut matrix = device.table.repeated(values.len());
            for (slot, value) in matrix.column_mut(column).iter_mut().zip(&values) {
                *slot = *value;
            }
            let results = device.evaluate_rows(matrix.view()).ok()?;
            values
                .iter()
                .zip(results.rows())
                .map(|(value, found)| row(*value, std::array::from_fn(|i| found[i]), &goals))
                .collect()
        }
        (_, values) => {
            if !decides_records(&variation) {
                faults.push(Fault {
                    place: variation.settings.first().map(|s| s.path_place.clone()),
                    field: variation.path.clone(),
                    wrong: Wrong::Conflict {
                        reason: "the answers in this table do not depend on this field".to_owned(),
                        help: Some(
                            "see `injectance assess DESIGN --full` for the inputs they depend on"
                                .to_owned(),
                        ),
                    },
                });
                return None;
            }
            let mut rows = Vec::new();
            for point in 0..variation.points.len() {
                let (here, _) = device_at(root, &variation, point, library, faults)?;
                let outcome = here.evaluate(here.table.central().view()).ok()?.si();
                let value = values
                    .as_ref()
                    .and_then(|v| v.get(point))
                    .copied()
                    .unwrap_or(f64::NAN);
                rows.push(row(value, outcome, &goals));
            }
            rows
        }
    };
    let chooses_records = column.is_none();
    Some(Varied {
        variation,
        rows,
        device,
        goals,
        chooses_records,
    })
}

/// Fields that decide which records are chosen rather than being inputs themselves.
fn decides_records(variation: &Variation) -> bool {
    matches!(
        variation.path.rsplit('.').next(),
        Some("temperature" | "doping")
    )
}
