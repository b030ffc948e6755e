//! Splitting a text into number, spread and unit, without asking yet what the unit may be.

use std::ops::Range;

use super::fault::{ReadFault, ReadFaultKind};
use super::number::{self, Number, is_minus, skip_spaces};
use super::spread::Side;
use super::unit::{Context, Unit, parse_unit};

pub(super) fn spread_fault(reason: &str, at: Range<usize>) -> ReadFault {
    ReadFault::new(
        ReadFaultKind::Spread {
            reason: reason.to_owned(),
        },
        Some(at),
    )
}

/// A unit and where it stands in the text.
pub(super) struct Placed {
    pub(super) unit: Unit,
    pub(super) at: Range<usize>,
}

/// What follows the first number besides its unit.
pub(super) enum Mark {
    None,
    PlusMinus { sd: Number },
    Sides { plus: Number, minus: Number },
    Factor { factor: Number },
    Interval { high: Number },
}

/// The parts of a value. `unit` belongs to the first number, wherever it stood; `second_unit` is the
/// one behind the spread, when the number had its own.
pub(super) struct Form {
    pub(super) number: Number,
    pub(super) unit: Option<Placed>,
    pub(super) mark: Mark,
    pub(super) second_unit: Option<Placed>,
    pub(super) own_unit: bool,
}

enum Sign {
    PlusMinus,
    Plus,
    Factor,
    Interval,
}

pub(super) fn bound_at(text: &str, pos: usize) -> Option<(Side, usize)> {
    const SIGNS: [(&str, Side); 6] = [
        (">=", Side::Above),
        ("<=", Side::Below),
        ("≥", Side::Above),
        ("≤", Side::Below),
        (">", Side::Above),
        ("<", Side::Below),
    ];
    SIGNS
        .iter()
        .find(|(sign, _)| text[pos..].starts_with(sign))
        .map(|(sign, side)| (*side, pos + sign.len()))
}

/// The sign of a spread at this place, with the position behind it.
fn sign_at(text: &str, pos: usize) -> Option<(Sign, usize)> {
    const SIGNS: [&str; 5] = ["±", "+/-", "+/−", "+-", "+−"];
    let rest = &text[pos..];
    if let Some(sign) = SIGNS.iter().find(|s| rest.starts_with(**s)) {
        return Some((Sign::PlusMinus, pos + sign.len()));
    }
    if rest.starts_with("..") {
        return Some((Sign::Interval, pos + 2));
    }
    // The plus stays in front of its number, which may carry it.
    if rest.starts_with('+') {
        return Some((Sign::Plus, pos));
    }
    for times in ["×", "x", "*"] {
        if let Some(after) = rest.strip_prefix(times)
            && let Some(after) = after.trim_start().strip_prefix('/')
        {
            // A letter may end a symbol; only a free-standing x is the sign.
            let free = times != "x" || !text[..pos].ends_with(|c: char| c.is_alphabetic());
            return free.then_some((Sign::Factor, text.len() - after.len()));
        }
    }
    None
}

/// A text with what its unit may need.
pub(super) struct Splitter<'a> {
    pub(super) text: &'a str,
    pub(super) context: &'a Context,
}

impl Splitter<'_> {
    fn number(&self, pos: usize) -> Result<Number, ReadFault> {
        number::scan(self.text, skip_spaces(self.text, pos))
    }

    /// A number that stands for a size: without a sign.
    fn size(&self, pos: usize) -> Result<Number, ReadFault> {
        let number = self.number(pos)?;
        if self.text[number.at.clone()].starts_with(|c| is_minus(c) || c == '+') {
            return Err(spread_fault(
                "an uncertainty has no sign of its own",
                number.at,
            ));
        }
        Ok(number)
    }

    /// The unit in the range; `None` when only spaces are there.
    fn unit(&self, range: Range<usize>) -> Result<Option<Placed>, ReadFault> {
        let typed = &self.text[range.clone()];
        let trimmed = typed.trim();
        if trimmed.is_empty() {
            return Ok(None);
        }
        let start = skip_spaces(self.text, range.start);
        let at = start..start + trimmed.len();
        match parse_unit(trimmed, self.context) {
            Ok(unit) => Ok(Some(Placed { unit, at })),
            Err(fault) => {
                let inside = fault.at().map(|r| start + r.start..start + r.end);
                Err(ReadFault::new(
                    ReadFaultKind::Unit(fault),
                    Some(inside.unwrap_or(at)),
                ))
            }
        }
    }

    /// Splits the text into its parts, without asking yet what the unit may be.
    pub(super) fn form(&self, start: usize) -> Result<Form, ReadFault> {
        let text = self.text;
        let number = number::scan(text, start)?;
        let first = skip_spaces(text, number.at.end);
        if text[first..].starts_with(['-', '−', '–', '—', '…']) {
            let at = first..text.len();
            return Err(spread_fault(
                "write an interval with two dots, as in 26 .. 50 nm, and unequal sides as in 38 +12 -7 nm",
                at,
            ));
        }
        let sign = text[first..].char_indices().find_map(|(i, _)| {
            sign_at(text, first + i).map(|(sign, after)| (sign, first + i, after))
        });
        let Some((sign, at, after)) = sign else {
            let unit = self.unit(first..text.len())?;
            return Ok(Form {
                number,
                unit,
                mark: Mark::None,
                second_unit: None,
                own_unit: true,
            });
        };
        let own = self.unit(first..at)?;
        let (mark, end) = self.mark(sign, at, after)?;
        let again = text[end..]
            .char_indices()
            .find(|(i, _)| sign_at(text, end + i).is_some());
        if let Some((again, _)) = again.map(|(i, c)| (end + i, c)) {
            return Err(spread_fault(
                "there are two spreads; one is enough",
                again..text.len(),
            ));
        }
        let tail = self.unit(end..text.len())?;
        if let (Mark::Factor { .. }, Some(extra)) = (&mark, &tail) {
            return Err(spread_fault(
                "the factor is a pure number; write the unit before it, as in 1.5 nm ×/ 1.5",
                extra.at.clone(),
            ));
        }
        let own_unit = own.is_some();
        let (unit, second_unit) = if own_unit { (own, tail) } else { (tail, None) };
        Ok(Form {
            number,
            unit,
            mark,
            second_unit,
            own_unit,
        })
    }

    fn mark(&self, sign: Sign, at: usize, after: usize) -> Result<(Mark, usize), ReadFault> {
        match sign {
            Sign::PlusMinus => {
                let sd = self.size(after)?;
                if sd.is_zero() {
                    return Err(spread_fault(
                        "an uncertainty of zero says nothing; a plain number is exact already",
                        sd.at,
                    ));
                }
                let end = sd.at.end;
                Ok((Mark::PlusMinus { sd }, end))
            }
            Sign::Interval => {
                if self.text[after..].starts_with('.') {
                    return Err(spread_fault(
                        "an interval has two dots, not three",
                        at..after + 1,
                    ));
                }
                let high = self.number(after)?;
                let end = high.at.end;
                Ok((Mark::Interval { high }, end))
            }
            Sign::Factor => {
                let factor = self.size(after)?;
                let end = factor.at.end;
                Ok((Mark::Factor { factor }, end))
            }
            Sign::Plus => {
                let plus = self.size(at + 1)?;
                let reason = "behind the upper side follows the lower one, as in 38 +12 -7 nm";
                let mut next = skip_spaces(self.text, plus.at.end);
                if self.text[next..].starts_with('/') {
                    next = skip_spaces(self.text, next + 1);
                }
                let Some(minus_sign) = self.text[next..].chars().next().filter(|c| is_minus(*c))
                else {
                    return Err(spread_fault(reason, at..plus.at.end));
                };
                let minus = self.size(next + minus_sign.len_utf8())?;
                if plus.is_zero() && minus.is_zero() {
                    return Err(spread_fault(reason, at..minus.at.end));
                }
                let end = minus.at.end;
                Ok((Mark::Sides { plus, minus }, end))
            }
        }
    }
}
