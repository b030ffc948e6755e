//! Closed forms of the literature, written out here a second time and compared with the ladder.
//!
//! Each file carries the name of the paper whose formula it writes out. Rows of numbers come from our own
//! evaluation (tests/reference/closed_forms.json, 40 digits) and are said to be `derived`; a number of a paper
//! that nobody here has opened is marked `recalled`.

#![allow(clippy::unwrap_used, clippy::panic)]

use serde_json::Value;

use crate::compare::close_at;

mod bass_pratt_2007;
mod fert_jaffres_2001;
mod rashba_2000;
mod schmidt_2000;
mod valet_fert_1993;

const TEXT: &str = include_str!("../../reference/closed_forms.json");

/// Names of the rows and how many of each there are. Every one is used by a test of this folder.
const NAMES: [(&str, usize); 25] = [
    ("schmidt_2000.two_contacts", 7),
    ("schmidt_2000.two_contacts_mr", 7),
    ("ohmic.finite_channel_interface_parallel", 1),
    ("ohmic.finite_channel_centre_parallel", 1),
    ("ohmic.finite_channel_interface_antiparallel", 1),
    ("schmidt_2000.single_contact", 3),
    ("schmidt_2000.required_beta_single_contact", 1),
    ("schmidt_2000.required_beta_two_contacts", 1),
    ("fert_jaffres_2001.single_contact", 7),
    ("fert_jaffres_2001.delta_ra", 7),
    ("fert_jaffres_2001.ra_parallel", 7),
    ("fert_jaffres_2001.mr", 7),
    ("fert_2007.mr_from_dwell_time", 1),
    ("fert_jaffres_2001.peak_mr", 3),
    ("fert_jaffres_2001.peak_r_b", 3),
    ("fert_jaffres_2001.half_low_r_b", 3),
    ("fert_jaffres_2001.half_high_r_b", 3),
    ("fert_jaffres_2001.optimum_r_b_over_r_N", 10),
    ("fert_jaffres_2001.optimum_share_of_plateau", 10),
    ("fert_jaffres_2001.optimum_formula", 3),
    ("two_contacts.delta_ra", 3),
    ("valet_fert_1993.five_layer_stack", 1),
    ("valet_fert_1993.series_resistor_root", 1),
    ("valet_fert_1993.spin_memory_loss", 4),
    ("valet_fert_1993.flip_probability", 1),
];

/// One row of the reference file.
struct Row {
    name: String,
    inputs: Value,
    computed: f64,
    printed: Option<String>,
}

impl Row {
    /// An input; all are decimal strings.
    fn input(&self, key: &str) -> f64 {
        text_number(&self.inputs[key])
    }

    /// Compares with the row: to `rel` of the computed digits and, where an earlier evaluation printed
    /// digits, to one unit of the last of them (some were cut off rather than rounded).
    #[track_caller]
    fn check(&self, got: f64, rel: f64) {
        let what = format!("{} {}", self.name, self.inputs);
        close_at(&what, got, self.computed, rel);
        if let Some(printed) = &self.printed {
            let want: f64 = printed.parse().unwrap();
            // A millionth of a unit for a number cut off exactly one unit away.
            close_at(
                &what,
                got,
                want,
                1.000_001 * last_place(printed) / want.abs(),
            );
        }
    }
}

fn text_number(value: &Value) -> f64 {
    value
        .as_str()
        .unwrap_or_else(|| panic!("{value} is no decimal string"))
        .parse()
        .unwrap()
}

/// One unit of the last digit of a decimal number.
fn last_place(text: &str) -> f64 {
    let (digits, exponent) = text.split_once('e').unwrap_or((text, "0"));
    let places = digits
        .split_once('.')
        .map_or(0, |(_, part)| i32::try_from(part.len()).unwrap());
    format!("1e{}", exponent.parse::<i32>().unwrap() - places)
        .parse()
        .unwrap()
}

fn all_rows() -> Vec<Row> {
    let root: Value = serde_json::from_str(TEXT).unwrap();
    root["rows"]
        .as_array()
        .unwrap()
        .iter()
        .map(|row| Row {
            name: row["name"].as_str().unwrap().to_owned(),
            inputs: row["inputs"].clone(),
            computed: text_number(&row["computed"]),
            printed: row["printed"].as_str().map(str::to_owned),
        })
        .collect()
}

/// The rows of one name, as many as [`NAMES`] says.
fn rows(name: &str) -> Vec<Row> {
    let (_, count) = NAMES
        .iter()
        .find(|(n, _)| *n == name)
        .unwrap_or_else(|| panic!("no rows `{name}`"));
    let found: Vec<Row> = all_rows()
        .into_iter()
        .filter(|row| row.name == name)
        .collect();
    assert_eq!(found.len(), *count, "{name}");
    assert!(!found.is_empty(), "{name}");
    found
}

#[test]
fn every_row_of_the_file_has_a_name_that_is_used() {
    let all = all_rows();
    assert_eq!(
        all.len(),
        NAMES.iter().map(|(_, count)| count).sum::<usize>()
    );
    for row in &all {
        assert!(
            NAMES.iter().any(|(name, _)| *name == row.name),
            "{}",
            row.name
        );
    }
    let sources = [
        include_str!("schmidt_2000.rs"),
        include_str!("fert_jaffres_2001.rs"),
        include_str!("valet_fert_1993.rs"),
        include_str!("bass_pratt_2007.rs"),
    ];
    for (name, _) in NAMES {
        let quoted = format!("\"{name}\"");
        assert!(
            sources.iter().any(|source| source.contains(&quoted)),
            "no test reads {name}"
        );
    }
}

#[test]
fn last_places() {
    for (text, want) in [
        ("0.956", 1e-3),
        ("4e-9", 1e-9),
        ("1.9848e-14", 1e-18),
        ("12", 1.0),
    ] {
        close_at(text, last_place(text), want, 1e-15);
    }
}
