//! The ladder against boundary-value solutions with at least 60 digits.
//!
//! Source: tests/reference/stacks.json, written by stacks.py there (mpmath; one dense linear system for all
//! amplitudes, no recursion). 120 random stacks and 46 made to be hard.

#![allow(clippy::unwrap_used, clippy::panic)]

use std::collections::BTreeMap;

use injectance::models::ladder::{Element, End, Magnetization, Stack, State};
use injectance::quantities::dimensions::Measured;
use serde_json::Value;

use crate::bare::{Fixed, FixedOpposite, Free, change, interface, medium, resistance};
use crate::compare::{close_at, within_at};

const TEXT: &str = include_str!("../../reference/stacks.json");

/// Of J and u the scale is the sum over the single sources; a double carries 16 digits, a stack has up to
/// 400 elements, and 1e-12 leaves room for a growth of error no larger than their number.
const ALLOWED: f64 = 1e-12;

/// ΔRA is compared with itself unless its terms cancel by more than this factor.
const CANCELS: f64 = 0.1;

fn stacks() -> Vec<Value> {
    let root: Value = serde_json::from_str(TEXT).unwrap();
    root["stacks"].as_array().unwrap().clone()
}

fn number(value: &Value, key: &str) -> f64 {
    value[key]
        .as_f64()
        .unwrap_or_else(|| panic!("no number `{key}` in {value}"))
}

/// A decimal string as the nearest double.
fn decimal(value: &Value) -> f64 {
    value
        .as_str()
        .unwrap_or_else(|| panic!("{value} is no decimal string"))
        .parse()
        .unwrap()
}

/// Magnetization and the asymmetry it goes with: a magnet that flips and starts reversed is one that flips
/// with the sign of its asymmetry turned.
fn orientation(value: &Value, asymmetry: f64) -> (Magnetization, f64) {
    let reversed = match value["sign"].as_i64().unwrap() {
        1 => false,
        -1 => true,
        other => panic!("sign {other}"),
    };
    match (value["flips"].as_bool().unwrap(), reversed) {
        (false, false) => (Fixed, asymmetry),
        (false, true) => (FixedOpposite, asymmetry),
        (true, false) => (Free, asymmetry),
        (true, true) => (Free, -asymmetry),
    }
}

fn medium_of(value: &Value) -> injectance::models::ladder::Layer {
    let (magnetization, beta) = orientation(value, number(value, "beta"));
    let thickness = if value["thickness"].is_null() {
        f64::INFINITY
    } else {
        number(value, "thickness")
    };
    medium(
        number(value, "resistivity"),
        beta,
        number(value, "lambda"),
        thickness,
        magnetization,
    )
}

fn element(value: &Value) -> Element {
    match value["kind"].as_str().unwrap() {
        "layer" => Element::Layer(medium_of(value)),
        "interface" => {
            let (magnetization, gamma) = orientation(value, number(value, "gamma"));
            interface(
                number(value, "r_b"),
                gamma,
                number(value, "delta"),
                magnetization,
            )
        }
        other => panic!("element kind {other}"),
    }
}

fn end(value: &Value) -> End {
    match value["kind"].as_str().unwrap() {
        "semi-infinite" => End::SemiInfinite(medium_of(value)),
        "spin sink" => End::SpinSink,
        "reflecting" => End::Reflecting,
        "fed in plane" => End::FedInPlane,
        other => panic!("end kind {other}"),
    }
}

fn build(value: &Value) -> Stack {
    let elements: Vec<Element> = value["elements"]
        .as_array()
        .unwrap()
        .iter()
        .map(element)
        .collect();
    Stack::new(end(&value["left"]), &elements, end(&value["right"])).unwrap()
}

/// Mantissa and exponent of a decimal number: value = mantissa·10^exponent, exactly.
fn exact(text: &str) -> (i128, i32) {
    let (digits, exponent) = text.split_once('e').unwrap_or((text, "0"));
    let (whole, part) = digits.split_once('.').unwrap_or((digits, ""));
    let exponent: i32 = exponent.parse().unwrap();
    (
        format!("{whole}{part}").parse().unwrap(),
        exponent - i32::try_from(part.len()).unwrap(),
    )
}

/// `text` minus the double `near`. Where they agree in leading digits both are taken to 28 digits.
fn minus(text: &str, near: f64) -> f64 {
    let rounded: f64 = text.parse().unwrap();
    if near < 0.1 * rounded {
        return rounded - near;
    }
    let ((mut a, mut m), (mut b, mut n)) = (exact(text), exact(&format!("{near:.27e}")));
    while m > n {
        (a, m) = (a.checked_mul(10).unwrap(), m - 1);
    }
    while n > m {
        (b, n) = (b.checked_mul(10).unwrap(), n - 1);
    }
    format!("{}e{m}", a - b).parse().unwrap()
}

/// RA of the reference without ρt of the strips fed in their plane, which the ladder does not count.
///
/// The product ρt is split into a double and its rounding error, so that a strip much more resistive than
/// the rest of the stack does not hide an error of the rest.
fn resistance_without_strips(value: &Value, key: &str) -> f64 {
    let text = value["result"][key].as_str().unwrap();
    let elements = value["elements"].as_array().unwrap();
    let mut strips: Vec<usize> = Vec::new();
    if value["left"]["kind"] == "fed in plane" {
        strips.push(0);
    }
    if value["right"]["kind"] == "fed in plane" && (strips.is_empty() || elements.len() > 1) {
        strips.push(elements.len() - 1);
    }
    if strips.is_empty() {
        return text.parse().unwrap();
    }
    let products: Vec<(f64, f64)> = strips
        .iter()
        .map(|k| {
            let (rho, t) = (
                number(&elements[*k], "resistivity"),
                number(&elements[*k], "thickness"),
            );
            (rho * t, rho.mul_add(t, -(rho * t)))
        })
        .collect();
    let high: f64 = products.iter().map(|p| p.0).sum();
    // With two strips the sum of the doubles rounds; Knuth's two-sum gives what it dropped.
    let dropped = if let [(a, _), (b, _)] = products[..] {
        let b_seen = high - a;
        (a - (high - b_seen)) + (b - b_seen)
    } else {
        0.0
    };
    minus(text, high) - dropped - products.iter().map(|p| p.1).sum::<f64>()
}

#[test]
fn the_file_holds_what_it_should() {
    let stacks = stacks();
    assert_eq!(stacks.len(), 166);
    let random = stacks
        .iter()
        .filter(|s| s["name"].as_str().unwrap().starts_with("random "))
        .count();
    assert_eq!(random, 120);
    let mut ends: BTreeMap<String, usize> = BTreeMap::new();
    for stack in &stacks {
        for side in ["left", "right"] {
            *ends
                .entry(stack[side]["kind"].as_str().unwrap().to_owned())
                .or_default() += 1;
        }
    }
    assert_eq!(ends.len(), 4);
    assert!(ends.values().all(|count| *count >= 40), "{ends:?}");
    assert_eq!(ends.values().sum::<usize>(), 2 * 166);
}

#[test]
fn spin_current_and_accumulation_at_every_face() {
    let mut compared = 0;
    for value in stacks() {
        let stack = build(&value);
        let faces: Vec<usize> = value["faces"]
            .as_array()
            .unwrap()
            .iter()
            .map(|f| usize::try_from(f.as_u64().unwrap()).unwrap())
            .collect();
        for (state, key) in [
            (State::Parallel, "parallel"),
            (State::Antiparallel, "antiparallel"),
        ] {
            let solution = stack.solve(state);
            assert_eq!(
                solution.faces.len(),
                value["elements"].as_array().unwrap().len() + 1
            );
            let result = &value["result"];
            for quantity in ["J", "u"] {
                assert_eq!(result[key][quantity].as_array().unwrap().len(), faces.len());
                for (i, k) in faces.iter().enumerate() {
                    let face = &solution.faces[*k];
                    let got = if quantity == "J" {
                        face.polarization.si()
                    } else {
                        face.accumulation_per_current_density.si()
                    };
                    let what = format!("{}, {key} {quantity} at face {k}", value["name"]);
                    let scale = decimal(&result["scale"][quantity][i]);
                    within_at(
                        &what,
                        got,
                        decimal(&result[key][quantity][i]),
                        scale,
                        ALLOWED,
                    );
                    compared += 1;
                }
            }
        }
    }
    assert_eq!(compared, 7240);
}

#[test]
fn resistance_area_product_in_both_states() {
    let mut compared = 0;
    for value in stacks() {
        let stack = build(&value);
        for (state, key) in [
            (State::Parallel, "ra_parallel"),
            (State::Antiparallel, "ra_antiparallel"),
        ] {
            let what = format!("{}, {key}", value["name"]);
            let want = resistance_without_strips(&value, key);
            // The reference has 25 digits with the strips in: that much it does not know about the rest.
            let scale = want.abs() + 1e-12 * decimal(&value["result"][key]);
            within_at(&what, resistance(&stack, state), want, scale, ALLOWED);
            compared += 1;
        }
    }
    assert_eq!(compared, 2 * 166);
}

#[test]
fn change_of_resistance() {
    let (mut of_itself, mut of_its_terms, mut subnormal, mut nothing) = (0, 0, 0, 0);
    for value in stacks() {
        let got = change(&build(&value));
        let want = decimal(&value["result"]["delta_ra"]);
        let scale = decimal(&value["result"]["delta_ra_scale"]);
        let what = format!("{}, ΔRA", value["name"]);
        if want.abs() <= 0.0 {
            // Nothing that flips acts on anything that does not, or less than a double can hold.
            close_at(&what, got, 0.0, 0.0);
            nothing += 1;
        } else if want.abs() < f64::MIN_POSITIVE {
            // Below 2.2e-308 a double has few digits left; the sources on the way to this one have six.
            close_at(&what, got, want, 1e-5);
            subnormal += 1;
        } else if want.abs() >= CANCELS * scale {
            close_at(&what, got, want, ALLOWED);
            of_itself += 1;
        } else {
            within_at(&what, got, want, scale, ALLOWED);
            of_its_terms += 1;
        }
    }
    // The subnormal one is "thickness/lambda = 700"; the twelve are "thickness/lambda = 2000" (1e-877) and the
    // eleven stacks with one magnet or one layer.
    assert_eq!(
        (of_itself, of_its_terms, subnormal, nothing),
        (150, 3, 1, 12)
    );
}

#[test]
fn the_digits_of_a_reference_string_are_kept() {
    // 1/3 to 25 digits minus its nearest double, worked out by hand from 0.333333333333333314829616256247…
    close_at(
        "1/3",
        minus("0.3333333333333333333333333", 1.0 / 3.0),
        1.850_371_7e-17,
        1e-7,
    );
    close_at("100", minus("1.00000000000000001e2", 100.0), 1e-15, 1e-12);
}
