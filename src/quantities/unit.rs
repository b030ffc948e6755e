//! Reading a unit as the trade writes it.
//!
//! A product by space, `·`, `⋅`, `*` or `×`; one `/`, with brackets after it for several factors; an
//! exponent as `^-3`, `**-3`, `-3`, `⁻³`, `^(-3)` or `2`. Whatever could be read in two ways is refused
//! with the reason. The power of ten stays an integer, so that a decimal input is rounded only once.

use std::ops::Range;

use super::dimensions::Dimension;
use super::symbols::{self, Role, Symbol};
pub use super::unit_fault::UnitFault;

/// Largest exponent, either sign, that one symbol or one bracket may carry.
const LARGEST_EXPONENT: i32 = 20;
/// Largest exponent of a base unit in a whole unit; two such dimensions still add within an `i8`.
const LARGEST_DIMENSION: i32 = 60;

/// What a unit needs from around it.
#[derive(Clone, Copy, PartialEq, Debug, Default)]
pub struct Context {
    /// Height of one monolayer, m, for the unit `ML`; `None` where no barrier material is known.
    pub monolayer: Option<f64>,
}

/// A unit that only some kinds of quantity accept.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Special {
    /// `%`: for ratios that are written in per cent.
    Percent,
    /// `°C`: for absolute temperatures; a difference of 1 °C is 1 K.
    Celsius,
    /// `Oe`, `G`: for a field applied in vacuum, in tesla.
    Field,
}

/// A unit: the SI value is `number * factor * 10^power_of_ten`.
#[derive(Clone, PartialEq, Debug)]
pub struct Unit {
    /// Dimension.
    pub dimension: Dimension,
    /// Power of ten.
    pub power_of_ten: i32,
    /// What remains beside the power of ten; exactly 1 for every decimal unit.
    pub factor: f64,
    /// The unit as typed, without spaces at its ends.
    pub text: String,
    /// Set when only some kinds accept the unit.
    pub special: Option<Special>,
}

/// Reads a unit.
///
/// # Errors
/// A [`UnitFault`] that says what to write instead.
pub fn parse_unit(text: &str, context: &Context) -> Result<Unit, UnitFault> {
    let mut parser = Parser {
        text,
        pos: 0,
        context,
    };
    parser.skip_spaces();
    let Some(first) = parser.peek() else {
        return Err(UnitFault::Empty);
    };
    let mut parts = Vec::new();
    if first == '1' && parser.text[parser.pos + 1..].trim_start().starts_with('/') {
        parser.pos += 1;
        parser.skip_spaces();
    } else if first != '/' {
        parts = parser.product(false)?;
    }
    if parser.take('/') {
        parts.extend(parser.denominator()?);
    }
    match parser.peek() {
        None => collect(text, &parts, context),
        Some(c) => {
            let at = parser.here(c);
            Err(match c {
                ')' => UnitFault::Unbalanced { at },
                '/' => UnitFault::Ambiguous {
                    at,
                    reason: TWO_SLASHES,
                },
                _ => UnitFault::Ambiguous {
                    at,
                    reason: AFTER_SLASH,
                },
            })
        }
    }
}

const TWO_SLASHES: &str = "two slashes; write one slash and a power or brackets, for example m/s²";
const AFTER_SLASH: &str =
    "a product after the slash; put what is divided by in brackets, for example cm²/(V s)";

/// One symbol with its exponent; the range is kept for messages.
#[derive(Clone)]
struct Part {
    symbol: &'static Symbol,
    prefix: i32,
    exponent: i32,
    at: Range<usize>,
}

/// Whether the character can stand in a symbol.
fn in_symbol(c: char) -> bool {
    c.is_alphabetic() || matches!(c, '°' | '%' | '□' | '℃' | '℉' | '_' | '\u{30a}')
}

/// The value of a superscript digit.
pub(super) fn superscript_digit(c: char) -> Option<char> {
    Some(match c {
        '⁰' => '0',
        '¹' => '1',
        '²' => '2',
        '³' => '3',
        '⁴' => '4',
        '⁵' => '5',
        '⁶' => '6',
        '⁷' => '7',
        '⁸' => '8',
        '⁹' => '9',
        _ => return None,
    })
}

struct Parser<'a> {
    text: &'a str,
    pos: usize,
    context: &'a Context,
}

impl Parser<'_> {
    fn peek(&self) -> Option<char> {
        self.text[self.pos..].chars().next()
    }

    fn peek_after(&self, c: char) -> Option<char> {
        self.text[self.pos + c.len_utf8()..].chars().next()
    }

    fn here(&self, c: char) -> Range<usize> {
        self.pos..self.pos + c.len_utf8()
    }

    fn take(&mut self, wanted: char) -> bool {
        let found = self.peek() == Some(wanted);
        if found {
            self.pos += wanted.len_utf8();
        }
        found
    }

    fn take_while(&mut self, accept: impl Fn(char) -> bool) -> Range<usize> {
        let start = self.pos;
        while let Some(c) = self.peek().filter(|c| accept(*c)) {
            self.pos += c.len_utf8();
        }
        start..self.pos
    }

    fn skip_spaces(&mut self) {
        self.take_while(char::is_whitespace);
    }

    fn unexpected(&self, reason: &'static str) -> UnitFault {
        match self.peek() {
            Some(c) => UnitFault::Unexpected {
                found: Some(c),
                at: self.here(c),
                reason,
            },
            None => UnitFault::Unexpected {
                found: None,
                at: self.text.trim_end().len()..self.text.trim_end().len(),
                reason,
            },
        }
    }

    /// Factors up to a slash, a closing bracket or the end.
    fn product(&mut self, nested: bool) -> Result<Vec<Part>, UnitFault> {
        let mut parts = Vec::new();
        loop {
            parts.extend(self.element(nested)?);
            let before = self.pos;
            self.skip_spaces();
            if matches!(self.peek(), None | Some('/' | ')')) {
                return Ok(parts);
            }
            if let Some(c) = self
                .peek()
                .filter(|c| matches!(c, '·' | '⋅' | '∙' | '*' | '×'))
            {
                self.pos += c.len_utf8();
                self.skip_spaces();
            } else if self.pos == before && self.joins_ohm() {
                self.pos += 1;
            } else if self.pos == before {
                return Err(self.unexpected("write a space or · between two units"));
            }
        }
    }

    /// Whether a hyphen joins an ohm to the unit behind it: "ohm-cm" is written everywhere, and a power, which
    /// the hyphen could also begin, has a digit there.
    fn joins_ohm(&self) -> bool {
        let before = &self.text[..self.pos];
        let ohm = ["ohm", "Ohm", "\u{3a9}", "\u{2126}"]
            .iter()
            .any(|o| before.ends_with(o));
        ohm && self.peek() == Some('-') && self.peek_after('-').is_some_and(in_symbol)
    }

    /// What the slash divides by: one symbol or one bracket.
    fn denominator(&mut self) -> Result<Vec<Part>, UnitFault> {
        self.skip_spaces();
        let bracket = self.peek() == Some('(');
        let mut parts = self.element(false)?;
        if !bracket && let [_, second, ..] = parts.as_slice() {
            return Err(UnitFault::Ambiguous {
                at: second.at.clone(),
                reason: AFTER_SLASH,
            });
        }
        for part in &mut parts {
            part.exponent = -part.exponent;
        }
        self.skip_spaces();
        Ok(parts)
    }

    /// A symbol or a bracket, with its exponent.
    fn element(&mut self, nested: bool) -> Result<Vec<Part>, UnitFault> {
        match self.peek() {
            Some('(') if nested => Err(UnitFault::Ambiguous {
                at: self.here('('),
                reason: "brackets inside brackets; one pair is enough",
            }),
            Some('(') => self.bracket(),
            Some(')') => Err(UnitFault::Unbalanced { at: self.here(')') }),
            Some(c) if in_symbol(c) => self.symbols(),
            Some('0'..='9') => Err(self
                .unexpected("a power follows its symbol without a space, for example cm² or cm^2")),
            Some('–' | '—') => {
                Err(self.unexpected("it is a dash; the minus of a power is - or −"))
            }
            Some('-' | '−') => Err(self.unexpected(
                "a hyphen joins no units; write a space, and a power directly after its symbol",
            )),
            Some('/') => Err(self.unexpected("write one slash")),
            _ => Err(self.unexpected("a unit symbol was expected")),
        }
    }

    fn bracket(&mut self) -> Result<Vec<Part>, UnitFault> {
        let open = self.here('(');
        self.pos += 1;
        self.skip_spaces();
        if self.peek().is_none() {
            return Err(UnitFault::Unbalanced { at: open });
        }
        let mut parts = self.product(true)?;
        match self.peek() {
            Some('/') => {
                return Err(UnitFault::Ambiguous {
                    at: self.here('/'),
                    reason: "a slash inside brackets; write a negative power instead",
                });
            }
            Some(_) => self.pos += 1,
            None => return Err(UnitFault::Unbalanced { at: open }),
        }
        if let Some(exponent) = self.exponent()? {
            for part in &mut parts {
                part.exponent *= exponent;
            }
        }
        Ok(parts)
    }

    /// A run of letters: one symbol, or an ohm and what directly follows it.
    fn symbols(&mut self) -> Result<Vec<Part>, UnitFault> {
        let run = self.take_while(in_symbol);
        let typed = &self.text[run.clone()];
        let mut parts = Vec::new();
        let after_ohm = typed
            .char_indices()
            .find(|(_, c)| matches!(c, '\u{3a9}' | '\u{2126}'))
            .map(|(i, c)| run.start + i + c.len_utf8())
            .filter(|split| *split < run.end);
        match after_ohm {
            Some(split) if symbols::lookup(&symbols::normalized(typed)).is_none() => {
                parts.push(self.symbol(run.start..split)?);
                parts.push(self.symbol(split..run.end)?);
            }
            _ => parts.push(self.symbol(run)?),
        }
        if let Some(exponent) = self.exponent()?
            && let Some(last) = parts.last_mut()
        {
            last.exponent = exponent;
        }
        Ok(parts)
    }

    fn symbol(&self, at: Range<usize>) -> Result<Part, UnitFault> {
        let symbol = self.text[at.clone()].to_owned();
        let normal = symbols::normalized(&symbol);
        let Some((found, prefix)) = symbols::lookup(&normal) else {
            return Err(match symbols::refusal(&normal) {
                Some(reason) => UnitFault::NotHere { symbol, at, reason },
                None => UnitFault::Unknown {
                    symbol,
                    at,
                    nearest: symbols::nearest(&normal),
                },
            });
        };
        if found.role == Role::Monolayer && monolayer(self.context).is_none() {
            let reason = "ML needs a barrier whose record gives its monolayer height".to_owned();
            return Err(UnitFault::NotHere { symbol, at, reason });
        }
        Ok(Part {
            symbol: found,
            prefix,
            exponent: 1,
            at,
        })
    }

    fn exponent(&mut self) -> Result<Option<i32>, UnitFault> {
        let start = self.pos;
        let marked = if self.text[self.pos..].starts_with("**") {
            self.pos += 2;
            true
        } else {
            self.take('^')
        };
        let Some(first) = self.peek() else {
            return if marked {
                Err(self.bad(start, "a number must follow"))
            } else {
                Ok(None)
            };
        };
        if !marked && (first == '⁻' || superscript_digit(first).is_some()) {
            let negative = self.take('⁻');
            let run = self.take_while(|c| superscript_digit(c).is_some());
            let digits = self.text[run]
                .chars()
                .filter_map(superscript_digit)
                .collect::<String>();
            return self.whole(start, negative, &digits).map(Some);
        }
        if matches!(first, '–' | '—') {
            self.pos += first.len_utf8();
            return Err(self.bad(start, "it is a dash; write the minus as - or −"));
        }
        let bracket = marked && self.take('(');
        let sign = self.peek().filter(|c| matches!(c, '-' | '−'));
        // A hyphen with no digit behind it is not an exponent; the caller says so.
        let digit = match sign {
            Some(c) => self.peek_after(c),
            None => self.peek(),
        };
        if !digit.is_some_and(|c| c.is_ascii_digit()) {
            return if marked {
                Err(self.bad(start, "a whole number must follow, for example cm^-3"))
            } else {
                Ok(None)
            };
        }
        if let Some(c) = sign {
            self.pos += c.len_utf8();
        }
        let run = self.take_while(|c| c.is_ascii_digit());
        let digits = self.text[run].to_owned();
        if matches!(self.peek(), Some('.' | ',')) || (bracket && self.peek() == Some('/')) {
            self.take_while(|c| c.is_ascii_digit() || matches!(c, '.' | ',' | '/'));
            return Err(self.bad(start, "only whole powers have a meaning here"));
        }
        if bracket && !self.take(')') {
            return Err(UnitFault::Unbalanced {
                at: start..self.pos,
            });
        }
        self.whole(start, sign.is_some(), &digits).map(Some)
    }

    fn whole(&self, start: usize, negative: bool, digits: &str) -> Result<i32, UnitFault> {
        match digits.parse::<i32>() {
            Ok(0) => Err(self.bad(start, "the power zero leaves no unit")),
            Ok(n) if n <= LARGEST_EXPONENT => Ok(if negative { -n } else { n }),
            _ if digits.is_empty() => Err(self.bad(start, "a whole number must follow")),
            _ => Err(self.bad(start, "it is too large")),
        }
    }

    fn bad(&self, start: usize, reason: &'static str) -> UnitFault {
        UnitFault::BadExponent {
            at: start..self.pos,
            reason,
        }
    }
}

fn monolayer(context: &Context) -> Option<f64> {
    context
        .monolayer
        .filter(|height| height.is_finite() && *height > 0.0)
}

/// Joins the parts and checks what only the whole shows.
fn collect(text: &str, parts: &[Part], context: &Context) -> Result<Unit, UnitFault> {
    let mut dimension = [0_i32; 7];
    let mut power_of_ten = 0_i32;
    let mut factor = 1.0;
    let mut special = None;
    let mut ohms = 0_i32;
    let mut squares = None;
    for part in parts {
        for (sum, one) in dimension.iter_mut().zip(part.symbol.dimension) {
            *sum = sum.saturating_add(i32::from(one) * part.exponent);
        }
        let power = (part.symbol.power + part.prefix) * part.exponent;
        power_of_ten = power_of_ten.saturating_add(power);
        factor *= part.symbol.factor.powi(part.exponent);
        let symbol = || text[part.at.clone()].to_owned();
        match part.symbol.role {
            Role::Usual => {}
            Role::Ohm => ohms = ohms.saturating_add(part.exponent),
            Role::Percent => special = Some(Special::Percent),
            Role::Field => special = Some(Special::Field),
            Role::Celsius if parts.len() == 1 && part.exponent == 1 => {
                special = Some(Special::Celsius);
            }
            Role::Celsius => {
                let reason = "°C stands alone only; write K in a product or a quotient".to_owned();
                return Err(UnitFault::NotHere {
                    symbol: symbol(),
                    at: part.at.clone(),
                    reason,
                });
            }
            Role::Monolayer => {
                factor *= monolayer(context).unwrap_or(f64::NAN).powi(part.exponent);
            }
            Role::Square => {
                let (_, sum) = squares.get_or_insert((part, 0_i32));
                *sum = sum.saturating_add(part.exponent);
            }
        }
    }
    if let Some((part, sum)) = squares
        && (sum != -1 || ohms != 1)
    {
        let reason =
            "a square is no unit of its own; a sheet resistance is written Ω/sq".to_owned();
        let symbol = text[part.at.clone()].to_owned();
        return Err(UnitFault::NotHere {
            symbol,
            at: part.at.clone(),
            reason,
        });
    }
    let mut exponents = [0_i8; 7];
    for (small, sum) in exponents.iter_mut().zip(dimension) {
        match i8::try_from(sum) {
            Ok(n) if sum.abs() <= LARGEST_DIMENSION => *small = n,
            _ => {
                let reason = "all powers together are too large";
                return Err(UnitFault::BadExponent {
                    at: 0..text.len(),
                    reason,
                });
            }
        }
    }
    Ok(Unit {
        dimension: Dimension(exponents),
        power_of_ten,
        factor,
        text: text.trim().to_owned(),
        special,
    })
}
