//! Reading a number without losing its decimal digits.
//!
//! The digits stay text and the power of ten an integer until the unit is known, so that the one
//! conversion to `f64` is correctly rounded.

use std::ops::Range;

use super::fault::{ReadFault, ReadFaultKind};
use super::unit::superscript_digit;

/// Beyond this every power of ten is infinite or zero in an `f64`, whatever digits stand before it.
const LARGEST_POWER: i32 = 1_000_000;

/// A decimal number as typed: `mantissa * 10^exponent`.
#[derive(Clone, Debug)]
pub(super) struct Number {
    /// ASCII sign and digits with at most one point.
    mantissa: String,
    exponent: i32,
    /// Where it stands in the text.
    pub(super) at: Range<usize>,
}

impl Number {
    /// Whether a minus stands before it.
    pub(super) fn is_negative(&self) -> bool {
        self.mantissa.starts_with('-')
    }

    /// Whether all digits are zero.
    pub(super) fn is_zero(&self) -> bool {
        !self.mantissa.bytes().any(|b| matches!(b, b'1'..=b'9'))
    }

    /// The number times a power of ten and then times a factor. With the factor 1 it is correctly
    /// rounded, with another it carries two roundings.
    pub(super) fn scaled(&self, power: i32, factor: f64) -> Result<f64, ReadFault> {
        let exponent = self.exponent.saturating_add(power);
        let value = format!("{}e{exponent}", self.mantissa)
            .parse()
            .unwrap_or(f64::NAN)
            * factor;
        self.checked(value)
    }

    /// Degrees Celsius as kelvin, correctly rounded as long as the digits fit an integer.
    pub(super) fn celsius_as_kelvin(&self) -> Result<f64, ReadFault> {
        match self.celsius_exactly() {
            Some(kelvin) => self.checked(kelvin),
            None => Ok(self.scaled(0, 1.0)? + 273.15),
        }
    }

    fn celsius_exactly(&self) -> Option<f64> {
        let digits: i128 = self.mantissa.replace('.', "").parse().ok()?;
        let fraction = self
            .mantissa
            .split_once('.')
            .map_or(0, |(_, after)| after.len());
        let exponent = self.exponent.checked_sub(i32::try_from(fraction).ok()?)?;
        let ten = |power: i32| 10_i128.checked_pow(u32::try_from(power).ok()?);
        let sum = if exponent >= -2 {
            digits
                .checked_mul(ten(exponent + 2)?)?
                .checked_add(27_315)?
        } else {
            27_315_i128
                .checked_mul(ten(-2 - exponent)?)?
                .checked_add(digits)?
        };
        format!("{sum}e{}", exponent.min(-2)).parse().ok()
    }

    fn checked(&self, value: f64) -> Result<f64, ReadFault> {
        if !value.is_finite() {
            return Err(self.fault("it is too large for a finite number"));
        }
        // A silent zero would pass every range that includes zero.
        if value.abs() < f64::MIN_POSITIVE && !self.is_zero() {
            return Err(self.fault("it is too small to be told from zero"));
        }
        Ok(value)
    }

    fn fault(&self, reason: &str) -> ReadFault {
        number_fault(reason, self.at.clone())
    }
}

fn number_fault(reason: &str, at: Range<usize>) -> ReadFault {
    ReadFault::new(
        ReadFaultKind::Number {
            reason: reason.to_owned(),
        },
        Some(at),
    )
}

/// Whether the character is a minus.
pub(super) fn is_minus(c: char) -> bool {
    matches!(c, '-' | '−')
}

/// The first character at or behind the position that is no space.
pub(super) fn skip_spaces(text: &str, pos: usize) -> usize {
    text.len() - text[pos..].trim_start().len()
}

fn char_at(text: &str, pos: usize) -> Option<char> {
    text[pos..].chars().next()
}

fn digits_end(text: &str, pos: usize) -> usize {
    text.len()
        - text[pos..]
            .trim_start_matches(|c: char| c.is_ascii_digit())
            .len()
}

/// An integer power, saturating: beyond the limit the value is zero or infinite anyway.
fn power(negative: bool, digits: &str) -> i32 {
    let size = digits
        .parse::<i32>()
        .unwrap_or(LARGEST_POWER)
        .min(LARGEST_POWER);
    if negative { -size } else { size }
}

/// Reads the number that starts at the position, which must not be a space.
pub(super) fn scan(text: &str, start: usize) -> Result<Number, ReadFault> {
    let mut pos = start;
    let mut mantissa = String::new();
    match char_at(text, pos) {
        Some(c) if is_minus(c) => {
            mantissa.push('-');
            pos += c.len_utf8();
        }
        Some('+') => pos += 1,
        _ => {}
    }
    let whole_end = digits_end(text, pos);
    let mut end = whole_end;
    // Two points are the sign of an interval: "26..50" is 26 and 50.
    if text[end..].starts_with('.') && !text[end..].starts_with("..") {
        end = digits_end(text, end + 1);
    }
    let digits = &text[pos..end];
    if !digits.bytes().any(|b| b.is_ascii_digit()) {
        return Err(no_number(text, start));
    }
    let only_ten = digits == "10";
    mantissa.push_str(digits);
    let mut exponent = 0;
    if let Some((n, after)) = letter_exponent(text, end) {
        exponent = n;
        end = after;
    } else if only_ten && let Some((n, after)) = raised(text, end) {
        let ten = mantissa.len() - 2;
        mantissa.truncate(ten);
        mantissa.push('1');
        exponent = n;
        end = after;
    } else if let Some((n, after)) = times_power(text, end) {
        exponent = n;
        end = after;
    }
    refuse_what_follows(text, start, end)?;
    Ok(Number {
        mantissa,
        exponent,
        at: start..end,
    })
}

/// `e-3` behind a mantissa. An `e` without digits is left to the unit.
fn letter_exponent(text: &str, pos: usize) -> Option<(i32, usize)> {
    let rest = text[pos..].strip_prefix(['e', 'E'])?;
    signed_digits(text, text.len() - rest.len())
}

fn signed_digits(text: &str, pos: usize) -> Option<(i32, usize)> {
    let sign = char_at(text, pos).filter(|c| is_minus(*c) || *c == '+');
    let from = pos + sign.map_or(0, char::len_utf8);
    let end = digits_end(text, from);
    (end > from).then(|| (power(sign.is_some_and(is_minus), &text[from..end]), end))
}

/// `×10^19` behind a mantissa.
fn times_power(text: &str, pos: usize) -> Option<(i32, usize)> {
    let sign = skip_spaces(text, pos);
    let rest = text[sign..].strip_prefix(['×', 'x', 'X', '*', '·', '⋅'])?;
    let ten = skip_spaces(text, text.len() - rest.len());
    if text[ten..].starts_with("10") {
        raised(text, ten + 2)
    } else {
        None
    }
}

/// `^19`, `**19`, `^(19)` or `¹⁹` behind a ten.
fn raised(text: &str, pos: usize) -> Option<(i32, usize)> {
    let rest = &text[pos..];
    if let Some(after) = rest.strip_prefix("**").or_else(|| rest.strip_prefix('^')) {
        let from = text.len() - after.len();
        if after.starts_with('(') {
            let (n, end) = signed_digits(text, from + 1)?;
            return text[end..].starts_with(')').then_some((n, end + 1));
        }
        return signed_digits(text, from);
    }
    let unsigned = rest.trim_start_matches(['⁻', '⁺']);
    let digits: String = unsigned.chars().map_while(superscript_digit).collect();
    let sign = rest.chars().next().filter(|c| matches!(c, '⁻' | '⁺'));
    if digits.is_empty() || rest.len() - unsigned.len() > sign.map_or(0, char::len_utf8) {
        return None;
    }
    let tail = unsigned.trim_start_matches(|c| superscript_digit(c).is_some());
    Some((power(sign == Some('⁻'), &digits), text.len() - tail.len()))
}

fn no_number(text: &str, at: usize) -> ReadFault {
    let rest = &text[at..];
    // A word is underlined as a whole, anything else by its first character.
    let word = rest.len() - rest.trim_start_matches(char::is_alphanumeric).len();
    let here = at..at + word.max(rest.chars().next().map_or(0, char::len_utf8));
    let lower = rest.trim_start_matches(['+', '-', '−']).to_lowercase();
    let reason = if lower.starts_with("nan") || lower.starts_with("inf") || lower.starts_with('∞')
    {
        "only finite numbers are accepted"
    } else if rest.starts_with(['–', '—']) {
        "it begins with a dash; write the minus as - or −"
    } else if rest.starts_with(['~', '≈', '∼', '≃']) {
        "leave the sign out and write the uncertainty, for example 3.6 ± 0.4 nm"
    } else if rest.starts_with('(') {
        "leave the brackets out, for example 3.6 ± 0.4 nm"
    } else if rest.starts_with('.') {
        "an interval has two dots, for example 26 .. 50 nm"
    } else if rest.is_empty() {
        "a number is missing at the end"
    } else {
        "it must begin with a number"
    };
    number_fault(reason, here)
}

/// Spellings that another reader would take for a different number.
fn refuse_what_follows(text: &str, start: usize, end: usize) -> Result<(), ReadFault> {
    let rest = &text[end..];
    let digit_after = |skip: usize| {
        rest[skip..]
            .chars()
            .next()
            .is_some_and(|c| c.is_ascii_digit())
    };
    let Some(next) = rest.chars().next() else {
        return Ok(());
    };
    let reason = match next {
        ',' => "it has a comma; write the decimal point as in 1.5, and no marks between thousands",
        '.' if !rest.starts_with("..") => "it has two decimal points or a broken power",
        '_' | '\'' | '’' if digit_after(next.len_utf8()) => {
            "write the digits without marks between them"
        }
        '(' => "write the uncertainty with ±, for example 3.6 ± 0.4 nm",
        c if c.is_whitespace() => {
            let digits = skip_spaces(text, end);
            let behind = digits_end(text, digits);
            // "1e19 1/cm³" is the only unit that begins with a digit.
            if behind == digits || text[behind..].trim_start().starts_with('/') {
                return Ok(());
            }
            "write the digits without spaces between them, for example 1000"
        }
        _ => return Ok(()),
    };
    Err(number_fault(reason, start..end + next.len_utf8()))
}
