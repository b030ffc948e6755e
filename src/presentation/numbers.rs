//! Numbers of answers, printed in the trade's units.

use crate::designs::goals::{Comparison, Target};
use crate::quantities::dimensions::Measured;
use crate::quantities::kind::Scale;
use crate::quantities::meanings::ResistanceAreaProduct;
use crate::quantities::print::{number_in, trade_unit, with_digits};

use super::lines::joined;

/// Digits of a computed result.
pub const DIGITS: usize = 3;

/// A result of the given scale, its parts held together.
#[must_use]
pub fn result(si: f64, scale: Scale) -> String {
    joined(&with_digits(si, scale, DIGITS))
}

/// A resistance-area product of any meaning.
#[must_use]
pub fn area(si: f64) -> String {
    result(si, Scale::ResistanceArea)
}

/// Several resistance-area products that belong together, in one unit where they lie within three decades.
#[must_use]
pub fn areas(all: &[f64]) -> Vec<String> {
    let sizes: Vec<f64> = all
        .iter()
        .map(|x| x.abs())
        .filter(|x| *x > 0.0 && x.is_finite())
        .collect();
    let low = sizes.iter().copied().fold(f64::INFINITY, f64::min);
    let high = sizes.iter().copied().fold(0.0, f64::max);
    if !(low.is_finite() && high / low < 1e3) {
        return all.iter().map(|x| area(*x)).collect();
    }
    // The unit of the geometric middle keeps both ends readable.
    let (unit, factor) = trade_unit((low * high).sqrt(), Scale::ResistanceArea);
    all.iter()
        .map(|x| joined(&format!("{} {unit}", number_in(*x, factor, DIGITS))))
        .collect()
}

/// A pure number such as β or γ with two digits behind the point.
#[must_use]
pub fn asymmetry(x: f64) -> String {
    let near = x.abs() > 0.995 && x.abs() < 1.0;
    let text = if near {
        format!("{x:.5}")
    } else {
        format!("{x:.2}")
    };
    text.replace('-', "\u{2212}")
}

/// A polarization or a ratio in per cent.
#[must_use]
pub fn percent(si: f64) -> String {
    result(si, Scale::Percent)
}

/// A voltage; below a nanovolt the decimal powers of it.
#[must_use]
pub fn voltage(si: f64) -> String {
    result(si, Scale::Voltage)
}

/// A factor such as 9900 or 3.1×10⁷, without unit.
#[must_use]
pub fn factor(x: f64) -> String {
    if !x.is_finite() {
        return "infinitely many".to_owned();
    }
    let digits = 2;
    let power = x.abs().log10().floor();
    if (0.0..5.0).contains(&power) {
        let step = 10.0_f64.powf((power - f64::from(digits) + 1.0).max(-1.0));
        let rounded = (x / step).round() * step;
        if rounded < 10.0 {
            format!("{rounded:.1}")
        } else {
            format!("{rounded:.0}")
        }
    } else {
        with_digits(x, Scale::Plain, 2)
    }
}

/// 1 − β as people write it: `0.956` far from one, `1 − 1.2×10⁻⁴` near it.
#[must_use]
pub fn near_one(short_of_one: f64) -> String {
    if short_of_one < 1e-3 {
        format!(
            "1\u{a0}−\u{a0}{}",
            joined(&with_digits(short_of_one, Scale::Plain, 2))
        )
    } else {
        let digits = if short_of_one < 0.01 { 4 } else { 3 };
        format!("{:.digits$}", 1.0 - short_of_one)
    }
}

/// A value of a target.
#[must_use]
pub fn of_target(target: Target, si: f64) -> String {
    result(si, target.kind().scale)
}

/// A comparison of a target, `≥ 10 %`.
#[must_use]
pub fn comparison(target: Target, comparison: &Comparison) -> String {
    let scale = target.kind().scale;
    let tidy = |x: f64| tidy(&joined(&with_digits(x, scale, 4)));
    match *comparison {
        Comparison::AtLeast(a) => format!("≥\u{a0}{}", tidy(a)),
        Comparison::AtMost(b) => format!("≤\u{a0}{}", tidy(b)),
        Comparison::Between(a, b) => format!("{}\u{a0}..\u{a0}{}", tidy(a), tidy(b)),
    }
}

/// A temperature.
#[must_use]
pub fn temperature(kelvin: f64) -> String {
    tidy(&joined(&with_digits(kelvin, Scale::Temperature, 4)))
}

/// Drops zeros behind the decimal point of a number that was written exactly.
#[must_use]
pub fn tidy(text: &str) -> String {
    let (number, unit) = match text.split_once(['\u{a0}', ' ']) {
        Some((number, unit)) => (number, format!("\u{a0}{unit}")),
        None => (text, String::new()),
    };
    let (mantissa, power) = match number.split_once('×') {
        Some((mantissa, power)) => (mantissa, format!("×{power}")),
        None => (number, String::new()),
    };
    if mantissa.contains('.') {
        let short = mantissa.trim_end_matches('0').trim_end_matches('.');
        return format!("{short}{power}{unit}");
    }
    text.to_owned()
}

/// An interval of resistance-area products.
#[must_use]
pub fn window(low: Option<ResistanceAreaProduct>, high: Option<ResistanceAreaProduct>) -> String {
    match (low, high) {
        (Some(l), Some(h)) => areas(&[l.si(), h.si()]).join(" .. "),
        (Some(l), None) => format!("≥\u{a0}{}, upper edge none", area(l.si())),
        (None, Some(h)) => format!("≤\u{a0}{}, lower edge none", area(h.si())),
        (None, None) => "any RA, edges none".to_owned(),
    }
}

/// How far x is from an edge: `12 times`, `3 %`, `0.2 %`.
#[must_use]
pub fn times(ratio: f64) -> String {
    if ratio < 1.1 {
        percent(ratio - 1.0)
    } else {
        format!("{} times", factor(ratio))
    }
}
