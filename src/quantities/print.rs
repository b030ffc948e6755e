//! Printing a value in the trade's unit, rounded first and then given its prefix.
//!
//! Every text printed here is read back by [`super::text::read`] for a kind of the same scale, except
//! the dash that stands for a number that is not finite.

use super::kind::Scale;
use super::ladder::{Decimal, Ladder, MOST_DIGITS, Step, ladder};
use super::spread::{Side, Spread};

/// What stands for a number that is not finite.
const NO_NUMBER: &str = "—";
/// Significant digits of a number without an uncertainty.
const EXACT_DIGITS: usize = 6;
/// Rounding after which a column's common unit is chosen.
const COLUMN_DIGITS: usize = 3;

/// The number with a count of significant digits (1 to 17) and its unit. `si` is in coherent SI units.
#[must_use]
pub fn with_digits(si: f64, scale: Scale, digits: usize) -> String {
    let (number, unit) = split(si, scale, digits);
    joined(&number, unit)
}

/// The same as [`with_digits`], number and unit apart.
#[must_use]
pub fn split(si: f64, scale: Scale, digits: usize) -> (String, &'static str) {
    let ladder = ladder(scale);
    let rounded = Decimal::rounded(si / ladder.base, digits);
    let step = ladder.step(&rounded);
    if si.is_finite() {
        (shown(&rounded, ladder, step), step.unit)
    } else {
        (NO_NUMBER.to_owned(), "")
    }
}

/// The unit in which a number of this size is printed, and the SI value of that unit, so that a whole
/// column can share it. The unit is chosen after rounding to three digits.
#[must_use]
pub fn trade_unit(si: f64, scale: Scale) -> (&'static str, f64) {
    let ladder = ladder(scale);
    let number = if si.is_finite() {
        si / ladder.base
    } else {
        0.0
    };
    let step = ladder.step(&Decimal::rounded(number, COLUMN_DIGITS));
    (step.unit, power_of_ten(step.power) * ladder.base)
}

/// The number with a count of significant digits (1 to 17) in a given unit, without the unit.
/// `unit_factor` is the SI value of the unit, as given by [`trade_unit`].
#[must_use]
pub fn number_in(si: f64, unit_factor: f64, digits: usize) -> String {
    let number = si / unit_factor;
    if !number.is_finite() {
        return NO_NUMBER.to_owned();
    }
    // Shifting the point of a decimal unit rounds once, dividing would round twice.
    let power = unit_factor.log10().round();
    let decimal_unit =
        power.abs() < 300.0 && power_of_ten(power as i32).to_bits() == unit_factor.to_bits();
    let (rounded, unit_power) = if decimal_unit {
        (Decimal::rounded(si, digits), power as i32)
    } else {
        (Decimal::rounded(number, digits), 0)
    };
    if rounded.is_zero() || (-3..=4).contains(&(rounded.lead - unit_power)) {
        rounded.plain(unit_power)
    } else {
        rounded.power(unit_power)
    }
}

/// The number with its spread and its unit. The digits follow the spread: two when the spread's first
/// digit is 1 or 2, else one. A number without a known spread has at most six digits. `si` and the
/// spread are in coherent SI units.
#[must_use]
pub fn with_spread(si: f64, spread: &Spread, scale: Scale) -> String {
    if !si.is_finite() {
        return NO_NUMBER.to_owned();
    }
    let printer = Printer {
        ladder: ladder(scale),
        percent: scale == Scale::Percent,
    };
    // A spread that leaves the range of a number in the printed unit is told as none.
    let fits = |x: f64| (x / printer.ladder.base).is_finite();
    match *spread {
        Spread::Normal { sd } if is_size(sd) && fits(sd) => printer.normal(si, sd),
        Spread::Asymmetric { minus, plus }
            if (is_size(minus) && plus >= 0.0 || is_size(plus) && minus >= 0.0)
                && fits(minus + plus) =>
        {
            printer.sides(si, minus, plus)
        }
        Spread::LogNormal { factor } if factor > 1.0 && factor.is_finite() && si > 0.0 => {
            printer.factor(si, factor)
        }
        Spread::Uniform { low, high }
            if low < high && fits(high - low) && fits(low) && fits(high) =>
        {
            printer.interval(low, high)
        }
        Spread::Bound { side: Side::Above } => format!("> {}", printer.exact(si)),
        Spread::Bound { side: Side::Below } => format!("< {}", printer.exact(si)),
        _ => printer.exact(si),
    }
}

fn is_size(x: f64) -> bool {
    x > 0.0 && x.is_finite()
}

fn power_of_ten(power: i32) -> f64 {
    // Through the decimal text, because powi is not correctly rounded.
    format!("1e{power}").parse().unwrap_or(f64::NAN)
}

fn joined(number: &str, unit: &str) -> String {
    if unit.is_empty() {
        number.to_owned()
    } else {
        format!("{number} {unit}")
    }
}

fn shown(rounded: &Decimal, ladder: &Ladder, step: &Step) -> String {
    if ladder.is_plain(rounded, step) {
        rounded.plain(step.power)
    } else {
        rounded.power(step.power)
    }
}

/// Power of ten of the last digit worth printing of a spread.
fn last_place(spread: f64) -> i32 {
    let two = Decimal::rounded(spread, 2);
    if two.first() <= 2 {
        two.lead - 1
    } else {
        two.lead
    }
}

/// Rounded at a power of ten. Keeps one digit of a number smaller than that, which would otherwise be
/// printed as zero and read back outside its range; `None` when the digits go beyond an `f64`.
fn at_place(x: f64, place: i32) -> Option<Decimal> {
    let lead = Decimal::rounded(x, MOST_DIGITS).lead;
    let count = usize::try_from(lead - place + 1).unwrap_or(0).max(1);
    if count > MOST_DIGITS {
        return None;
    }
    let rounded = Decimal::rounded(x, count);
    // A carry, 9.96 to 10.0, brings one digit more before the point.
    Some(if rounded.lead > lead && count < MOST_DIGITS {
        rounded.one_more_zero()
    } else {
        rounded
    })
}

struct Printer {
    ladder: &'static Ladder,
    percent: bool,
}

impl Printer {
    fn exact(&self, si: f64) -> String {
        let rounded = Decimal::shortest(si / self.ladder.base, EXACT_DIGITS);
        let step = self.ladder.step(&rounded);
        joined(&shown(&rounded, self.ladder, step), step.unit)
    }

    /// A value and its spreads rounded at one place, in one unit.
    fn together(&self, si: f64, spreads: &[f64]) -> (String, Vec<String>, &'static Step) {
        let base = self.ladder.base;
        let place = spreads
            .iter()
            .filter(|s| **s > 0.0)
            .map(|s| last_place(*s / base))
            .min();
        let place = place.unwrap_or(0);
        let value =
            at_place(si / base, place).unwrap_or_else(|| Decimal::rounded(si / base, MOST_DIGITS));
        let sizes: Vec<Decimal> = spreads
            .iter()
            .map(|s| at_place(s / base, place).unwrap_or_else(|| Decimal::rounded(s / base, 2)))
            .collect();
        let largest = sizes.iter().filter(|d| !d.is_zero()).max_by_key(|d| d.lead);
        let step = self
            .ladder
            .step(largest.filter(|_| value.is_zero()).unwrap_or(&value));
        let plain = self.ladder.is_plain(&value, step);
        let size_text = |d: &Decimal| {
            // A long row of zeros beside a short value is harder to read than a power of ten.
            let lead = d.lead - step.power;
            if (plain && (-7..=6).contains(&lead) && !self.ladder.always_power()) || d.is_zero() {
                d.plain(step.power)
            } else {
                d.power(step.power)
            }
        };
        let texts = sizes.iter().map(size_text).collect();
        (shown(&value, self.ladder, step), texts, step)
    }

    /// Per cent behind a small number with a larger spread stands behind both, as the reader asks.
    fn repeats_unit(&self, si: f64, spread: f64) -> bool {
        self.percent && si.abs() <= 0.0101 && spread * 1.1 >= si.abs()
    }

    fn normal(&self, si: f64, sd: f64) -> String {
        let (value, sizes, step) = self.together(si, &[sd]);
        let size = sizes.first().map_or("", String::as_str);
        if self.repeats_unit(si, sd) {
            return format!(
                "{} ± {}",
                joined(&value, step.unit),
                joined(size, step.unit)
            );
        }
        joined(&format!("{value} ± {size}"), step.unit)
    }

    fn sides(&self, si: f64, minus: f64, plus: f64) -> String {
        let (value, sizes, step) = self.together(si, &[plus, minus]);
        let [plus_text, minus_text] = sizes.as_slice() else {
            return joined(&value, step.unit);
        };
        if self.repeats_unit(si, plus.max(minus)) {
            let value = joined(&value, step.unit);
            return joined(&format!("{value} +{plus_text} −{minus_text}"), step.unit);
        }
        joined(&format!("{value} +{plus_text} −{minus_text}"), step.unit)
    }

    fn factor(&self, si: f64, factor: f64) -> String {
        let (value, _, step) = self.together(si, &[si * factor.ln()]);
        let place = last_place(factor - 1.0).min(0);
        let rounded =
            at_place(factor, place).unwrap_or_else(|| Decimal::rounded(factor, MOST_DIGITS));
        let text = if rounded.lead <= 4 {
            rounded.plain(0)
        } else {
            rounded.power(0)
        };
        format!("{} ×/ {text}", joined(&value, step.unit))
    }

    fn interval(&self, low: f64, high: f64) -> String {
        let base = self.ladder.base;
        let both = |digits| [low, high].map(|x| Decimal::shortest(x / base, digits));
        let mut ends = both(EXACT_DIGITS);
        if ends[0] == ends[1] {
            ends = both(MOST_DIGITS);
        }
        let larger = if ends[0].lead > ends[1].lead || ends[1].is_zero() {
            &ends[0]
        } else {
            &ends[1]
        };
        let step = self.ladder.step(larger);
        let [a, b] = [&ends[0], &ends[1]].map(|d| shown(d, self.ladder, step));
        joined(&format!("{a} .. {b}"), step.unit)
    }
}
