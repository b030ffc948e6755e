//! Constants of nature against a general reference library.
//!
//! Source: tests/reference/constants.json, CODATA 2022 as SciPy gives it.

#![allow(clippy::unwrap_used)]

use injectance::quantities::constants::{
    BOHR_MAGNETON, BOLTZMANN, ELECTRON_MASS, ELEMENTARY_CHARGE, PLANCK, VACUUM_PERMITTIVITY,
};
use serde_json::Value;

use crate::compare::close_at;

const TEXT: &str = include_str!("../../reference/constants.json");

/// Ours, and the relative uncertainty that its description states; 0 where exact.
const OURS: [(&str, f64, f64); 6] = [
    ("e", ELEMENTARY_CHARGE, 0.0),
    ("h", PLANCK, 0.0),
    ("k", BOLTZMANN, 0.0),
    ("mu_B", BOHR_MAGNETON, 3.1e-10),
    ("m_e", ELECTRON_MASS, 3.1e-10),
    ("epsilon_0", VACUUM_PERMITTIVITY, 1.6e-10),
];

fn constants() -> Value {
    let root: Value = serde_json::from_str(TEXT).unwrap();
    assert_eq!(root["about"]["adjustment"], "CODATA 2022");
    root["constants"].clone()
}

#[test]
fn agree_to_every_printed_digit() {
    let constants = constants();
    assert_eq!(constants.as_object().unwrap().len(), 9);
    for (symbol, ours, _) in OURS {
        // Both are the double nearest to the same decimal number, so nothing is allowed between them.
        close_at(
            symbol,
            ours,
            constants[symbol]["value"].as_f64().unwrap(),
            0.0,
        );
    }
}

#[test]
fn stated_uncertainties_are_those_of_the_adjustment() {
    let constants = constants();
    for (symbol, ours, stated) in OURS {
        let absolute = constants[symbol]["uncertainty"].as_f64().unwrap();
        // Two digits are stated.
        close_at(symbol, stated, absolute / ours, 0.02);
    }
}

#[test]
fn constants_that_depend_on_each_other_do() {
    let constants = constants();
    let value = |symbol: &str| constants[symbol]["value"].as_f64().unwrap();
    let h_bar = PLANCK / std::f64::consts::TAU;
    close_at("ħ = h/2π", h_bar, value("hbar"), 1e-15);
    close_at("1 eV = e · 1 V", ELEMENTARY_CHARGE, value("eV"), 0.0);
    // μ_B = eħ/2m_e, to the digits that the adjustment rounds to.
    close_at(
        "μ_B",
        ELEMENTARY_CHARGE * h_bar / (2.0 * ELECTRON_MASS),
        BOHR_MAGNETON,
        1e-10,
    );
}
