//! `--vary PATH="LOW .. HIGH UNIT"`: a path of the design and the points to put there.

use crate::documents::fault::{Fault, Wrong};
use crate::documents::overlay::{Setting, read_setting};
use crate::documents::tree::{Node, Value};
use crate::quantities::kind::{self, Kind};
use crate::quantities::text::{ReadFaultKind, read_interval};

/// How points are spaced.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Spacing {
    /// Equal steps.
    Linear,
    /// Equal factors.
    Logarithmic,
}

/// A path with its points, each as the text that a single run would be given.
#[derive(Clone, PartialEq, Debug)]
pub struct Variation {
    /// The path, as typed.
    pub path: String,
    /// Kind of quantity of the field.
    pub kind: &'static Kind,
    /// The points as texts.
    pub points: Vec<String>,
    /// The setting of each point.
    pub settings: Vec<Setting>,
    /// How they are spaced.
    pub spacing: Spacing,
}

/// Most points of one variation.
pub const MOST_POINTS: usize = 100_000;

/// Kind of quantity that a field of a design takes, by the last key of its path.
#[must_use]
pub fn kind_of_field(key: &str) -> Option<&'static Kind> {
    Some(match key {
        "temperature" => &kind::TEMPERATURE,
        "current_density" => &kind::CURRENT_DENSITY,
        "resistivity" => &kind::RESISTIVITY,
        "conductivity" => &kind::CONDUCTIVITY,
        "bulk_asymmetry" => &kind::BULK_ASYMMETRY,
        "spin_diffusion_length" => &kind::SPIN_DIFFUSION_LENGTH,
        "thickness" => &kind::THICKNESS,
        "doping" => &kind::DOPING,
        "resistance_area" => &kind::RESISTANCE_AREA,
        "interface_spin_resistance" => &kind::INTERFACE_SPIN_RESISTANCE,
        "interface_asymmetry" => &kind::INTERFACE_ASYMMETRY,
        "spin_memory_loss" => &kind::SPIN_MEMORY_LOSS,
        _ => return None,
    })
}

/// Names of the fields that can be varied.
pub const FIELDS: &[&str] = &[
    "temperature",
    "current_density",
    "resistivity",
    "conductivity",
    "bulk_asymmetry",
    "spin_diffusion_length",
    "thickness",
    "doping",
    "resistance_area",
    "interface_spin_resistance",
    "interface_asymmetry",
    "spin_memory_loss",
];

fn fault(setting: &Setting, wrong: Wrong) -> Fault {
    Fault {
        place: Some(setting.node.place.clone()),
        field: setting.path.join("."),
        wrong,
    }
}

/// A number with six significant digits, as text without loss on reading it again.
fn six_digits(x: f64) -> String {
    let text = format!("{x:.5e}");
    let Some((mantissa, exponent)) = text.split_once('e') else {
        return text;
    };
    let mantissa = if mantissa.contains('.') {
        mantissa.trim_end_matches('0').trim_end_matches('.')
    } else {
        mantissa
    };
    let Ok(n) = exponent.parse::<i32>() else {
        return text;
    };
    if (-4..6).contains(&n) {
        let plain = format!("{x:.*}", usize::try_from((5 - n).max(0)).unwrap_or(0));
        let plain = if plain.contains('.') {
            plain.trim_end_matches('0').trim_end_matches('.').to_owned()
        } else {
            plain
        };
        return plain;
    }
    format!("{mantissa}e{exponent}")
}

/// Reads the text of `--vary` into points.
///
/// # Errors
/// The text is not of the form, the field is not one that can be varied, the range is not one, or the
/// number of points is not between 2 and [`MOST_POINTS`].
pub fn read_variation(
    text: &str,
    points: usize,
    spacing: Option<Spacing>,
) -> Result<Variation, Fault> {
    let setting = read_setting("--vary", text)?;
    let path = setting.path.join(".");
    let key = setting.path.last().map_or("", String::as_str);
    let Some(kind) = kind_of_field(key) else {
        return Err(Fault {
            place: Some(setting.path_place.clone()),
            field: path,
            wrong: Wrong::UnknownWord {
                what: "field that can be varied",
                found: key.to_owned(),
                nearest: crate::documents::fault::nearest(key, FIELDS.iter().copied()),
                allowed: FIELDS.iter().map(|f| (*f).to_owned()).collect(),
            },
        });
    };
    let Value::Text(range) = &setting.node.value else {
        return Err(fault(
            &setting,
            Wrong::Type {
                found: setting.node.value.type_name(),
                expected: "a text such as \"1 .. 1e4 Ω µm²\"",
            },
        ));
    };
    if !(2..=MOST_POINTS).contains(&points) {
        return Err(fault(
            &setting,
            Wrong::Conflict {
                reason: format!("{points} points were asked for"),
                help: Some(format!("`--points` takes 2 to {MOST_POINTS}")),
            },
        ));
    }
    let interval = read_interval(range, kind).map_err(|f| Fault {
        place: Some(setting.node.inside(f.at.clone())),
        field: setting.path.join("."),
        wrong: match &f.what {
            ReadFaultKind::Spread { reason } => Wrong::Conflict {
                reason: format!("the range is not accepted: {reason}"),
                help: Some("write the lower end, two dots, the higher end and the unit once, for example \"1 .. 1e4 Ω µm²\"".to_owned()),
            },
            _ => Wrong::quantity(f, kind),
        },
    })?;
    let number = |t: &str| t.replace(['\u{2212}'], "-").parse::<f64>().ok();
    let (Some(low), Some(high)) = (number(&interval.low_text), number(&interval.high_text)) else {
        return Err(fault(
            &setting,
            Wrong::Conflict {
                reason: "the ends of the range are written with a power of ten".to_owned(),
                help: Some("write plain numbers or 1e4".to_owned()),
            },
        ));
    };
    let automatic = if low > 0.0 && high / low >= 10.0 {
        Spacing::Logarithmic
    } else {
        Spacing::Linear
    };
    let spacing = spacing.unwrap_or(automatic);
    if spacing == Spacing::Logarithmic && low <= 0.0 {
        return Err(fault(
            &setting,
            Wrong::Conflict {
                reason: "a logarithmic spacing cannot begin at or below zero".to_owned(),
                help: Some("begin above zero, or use `--spacing linear`".to_owned()),
            },
        ));
    }
    let last = points - 1;
    let texts: Vec<String> = (0..points)
        .map(|i| {
            let number = if i == 0 {
                interval.low_text.clone()
            } else if i == last {
                interval.high_text.clone()
            } else {
                let f = i as f64 / last as f64;
                six_digits(match spacing {
                    Spacing::Linear => low + (high - low) * f,
                    Spacing::Logarithmic => low * (high / low).powf(f),
                })
            };
            if interval.unit_text.is_empty() {
                number
            } else {
                format!("{number} {}", interval.unit_text)
            }
        })
        .collect();
    let settings = texts
        .iter()
        .map(|t| Setting {
            path: setting.path.clone(),
            path_place: setting.path_place.clone(),
            node: Node {
                value: Value::Text(t.clone()),
                place: setting.node.place.clone(),
            },
        })
        .collect();
    Ok(Variation {
        path,
        kind,
        points: texts,
        settings,
        spacing,
    })
}
