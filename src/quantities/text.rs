//! Reading a value: number, uncertainty and unit as the trade writes them, checked against its kind.
//!
//! Forms: `3.6 nm`, `3.6 ± 0.4 nm`, `45 nm ± 10 %`, `38 +12 -7 nm`, `1.5 nm ×/ 1.5`, `26 .. 50 nm`,
//! `> 230 nm`. A per cent sign behind a quantity that is itself written in per cent means percentage
//! points, behind any other quantity a part of the value.

use super::constants::VACUUM_PERMEABILITY;
use super::dimensions::{Dimension, Measured};
pub use super::fault::{ReadFault, ReadFaultKind, dimension_names};
use super::form::{Form, Mark, Placed, Splitter, bound_at, spread_fault};
use super::kind::Kind;
use super::number::{Number, skip_spaces};
use super::spread::{Side, Spread};
pub use super::unit::Context;
use super::unit::Special;

/// A value read from a text.
#[derive(Clone, PartialEq, Debug)]
pub struct Reading {
    /// The number in coherent SI units; the middle of an interval, the limit of a bound.
    pub si: f64,
    /// Its spread in coherent SI units. A plain number is [`Spread::Exact`].
    pub spread: Spread,
    /// The unit as typed; empty for a pure number.
    pub unit_text: String,
    /// The whole text as typed, without spaces at its ends.
    pub text: String,
}

impl Reading {
    /// The number as a quantity. The dimension was checked against the kind on reading, so that the
    /// type asked for must be the one of that kind.
    #[must_use]
    pub fn value<Q: Measured>(&self) -> Q {
        Q::from_si(self.si)
    }
}

/// Reads a value of the given kind.
///
/// # Errors
/// A [`ReadFault`] with what is wrong, where, and what to write instead.
pub fn read(text: &str, kind: &Kind, context: &Context) -> Result<Reading, ReadFault> {
    let reader = Reader {
        text,
        kind,
        context,
    };
    let start = reader.start()?;
    let (si, spread, unit_text) = match bound_at(text, start) {
        Some((side, after)) => reader.bound(side, after)?,
        None => reader.value(start)?,
    };
    Ok(Reading {
        si,
        spread,
        unit_text,
        text: text.trim().to_owned(),
    })
}

/// Takes a bare number for a kind without a unit.
///
/// # Errors
/// A [`ReadFault`] when the kind needs a unit, or the number is not finite or out of range.
pub fn read_bare(number: f64, kind: &Kind) -> Result<Reading, ReadFault> {
    let text = number.to_string();
    if kind.dimension != Dimension::NONE {
        return Err(whole(ReadFaultKind::UnitMissing {
            kind: Box::new(*kind),
        }));
    }
    if !number.is_finite() {
        let reason = "only finite numbers are accepted".to_owned();
        return Err(whole(ReadFaultKind::Number { reason }));
    }
    if !kind.range.holds(number) {
        return Err(whole(ReadFaultKind::OutOfRange {
            value: text,
            kind: Box::new(*kind),
        }));
    }
    Ok(Reading {
        si: number,
        spread: Spread::Exact,
        unit_text: String::new(),
        text,
    })
}

/// An interval that was read, with both numbers and the unit as typed, so that a point between the ends
/// can be written as text again.
#[derive(Clone, PartialEq, Debug)]
pub struct Interval {
    /// Lower end, SI.
    pub low: f64,
    /// Upper end, SI.
    pub high: f64,
    /// Number of the lower end as typed.
    pub low_text: String,
    /// Number of the upper end as typed.
    pub high_text: String,
    /// Unit as typed.
    pub unit_text: String,
}

/// Reads an interval `low .. high unit`.
///
/// # Errors
/// A [`ReadFault`] when the text is no interval, its ends are not in order, or one is out of range.
pub fn read_interval(text: &str, kind: &Kind) -> Result<Interval, ReadFault> {
    let context = Context::default();
    let reader = Reader {
        text,
        kind,
        context: &context,
    };
    let start = reader.start()?;
    let form = reader.form(start)?;
    let Mark::Interval { high } = &form.mark else {
        let reason =
            "write an interval with two dots, for example \"1 .. 1e4\" and the unit".to_owned();
        return Err(whole(ReadFaultKind::Spread { reason }));
    };
    let conversion = reader.conversion(form.unit.as_ref(), &form.number)?;
    if let (Some(first), Some(second)) = (&form.unit, &form.second_unit)
        && first.unit.text != second.unit.text
    {
        let reason = "write the unit once, at the end".to_owned();
        return Err(ReadFault::new(
            ReadFaultKind::Spread { reason },
            Some(second.at.clone()),
        ));
    }
    let (low_si, high_si) = reader.ends(&form.number, &conversion, high, &conversion)?;
    let typed = |n: &Number| text[n.at.clone()].to_owned();
    let unit = form
        .unit
        .map_or_else(String::new, |placed| placed.unit.text);
    Ok(Interval {
        low: low_si,
        high: high_si,
        low_text: typed(&form.number),
        high_text: typed(high),
        unit_text: unit,
    })
}

fn whole(what: ReadFaultKind) -> ReadFault {
    ReadFault::new(what, None)
}

/// How a number becomes SI: `number * factor * 10^power`, in degrees Celsius with another zero.
#[derive(Clone)]
struct Conversion {
    power: i32,
    factor: f64,
    celsius: bool,
    unit_text: String,
}

impl Conversion {
    fn value(&self, number: &Number) -> Result<f64, ReadFault> {
        if self.celsius {
            number.celsius_as_kelvin()
        } else {
            self.difference(number)
        }
    }

    fn difference(&self, number: &Number) -> Result<f64, ReadFault> {
        number.scaled(self.power, self.factor)
    }
}

struct Reader<'a> {
    text: &'a str,
    kind: &'a Kind,
    context: &'a Context,
}

impl Reader<'_> {
    fn start(&self) -> Result<usize, ReadFault> {
        let start = skip_spaces(self.text, 0);
        if start == self.text.len() {
            Err(whole(ReadFaultKind::Empty))
        } else {
            Ok(start)
        }
    }

    fn form(&self, start: usize) -> Result<Form, ReadFault> {
        Splitter {
            text: self.text,
            context: self.context,
        }
        .form(start)
    }

    /// Checks a unit against the kind. `number` is underlined when the unit is missing.
    fn conversion(
        &self,
        placed: Option<&Placed>,
        number: &Number,
    ) -> Result<Conversion, ReadFault> {
        let Some(Placed { unit, at }) = placed else {
            if self.kind.dimension == Dimension::NONE {
                let unit_text = String::new();
                return Ok(Conversion {
                    power: 0,
                    factor: 1.0,
                    celsius: false,
                    unit_text,
                });
            }
            let kind = Box::new(*self.kind);
            return Err(ReadFault::new(
                ReadFaultKind::UnitMissing { kind },
                Some(number.at.clone()),
            ));
        };
        let refused = |reason: String| {
            let spelling = unit.text.clone();
            Err(ReadFault::new(
                ReadFaultKind::NotASpelling { spelling, reason },
                Some(at.clone()),
            ))
        };
        let name = self.kind.name;
        if unit.special == Some(Special::Percent) && !self.kind.percent {
            let example = self.kind.examples.first().copied().unwrap_or_default();
            return refused(format!(
                "{name} is not written in per cent; write it like \"{example}\""
            ));
        }
        if unit.special == Some(Special::Field) && !self.kind.vacuum_field {
            return refused(format!(
                "Oe and G are for a field applied in vacuum, not for {name}; write SI units"
            ));
        }
        let mut factor = unit.factor;
        let is_field_strength = unit.dimension == Dimension([-1, 0, 0, 1, 0, 0, 0]);
        if self.kind.vacuum_field && is_field_strength {
            factor *= VACUUM_PERMEABILITY;
        } else if unit.dimension != self.kind.dimension {
            let what = ReadFaultKind::Dimension {
                found: unit.dimension,
                found_name: dimension_names(unit.dimension),
                unit: unit.text.clone(),
                expected: Box::new(*self.kind),
            };
            return Err(ReadFault::new(what, Some(at.clone())));
        }
        let celsius = unit.special == Some(Special::Celsius);
        if celsius && !self.kind.absolute_temperature {
            return refused(format!("°C is for a temperature, not for {name}; write K"));
        }
        let unit_text = unit.text.clone();
        Ok(Conversion {
            power: unit.power_of_ten,
            factor,
            celsius,
            unit_text,
        })
    }

    /// The number in SI, inside the range of the kind.
    fn in_range(&self, number: &Number, conversion: &Conversion) -> Result<f64, ReadFault> {
        let si = conversion.value(number)?;
        if self.kind.range.holds(si) {
            return Ok(si);
        }
        let typed = &self.text[number.at.clone()];
        let value = format!("{typed} {}", conversion.unit_text)
            .trim_end()
            .to_owned();
        let kind = Box::new(*self.kind);
        Err(ReadFault::new(
            ReadFaultKind::OutOfRange { value, kind },
            Some(number.at.clone()),
        ))
    }

    fn ends(
        &self,
        low: &Number,
        low_unit: &Conversion,
        high: &Number,
        high_unit: &Conversion,
    ) -> Result<(f64, f64), ReadFault> {
        let (a, b) = (
            self.in_range(low, low_unit)?,
            self.in_range(high, high_unit)?,
        );
        if a < b {
            return Ok((a, b));
        }
        Err(spread_fault(
            "the first end must lie below the second",
            low.at.start..high.at.end,
        ))
    }

    fn bound(&self, side: Side, after: usize) -> Result<(f64, Spread, String), ReadFault> {
        let form = self.form(skip_spaces(self.text, after))?;
        if !matches!(form.mark, Mark::None) {
            return Err(spread_fault(
                "a bound has no uncertainty beside it",
                after..self.text.len(),
            ));
        }
        let conversion = self.conversion(form.unit.as_ref(), &form.number)?;
        let si = self.in_range(&form.number, &conversion)?;
        Ok((si, Spread::Bound { side }, conversion.unit_text))
    }

    fn value(&self, start: usize) -> Result<(f64, Spread, String), ReadFault> {
        let form = self.form(start)?;
        let Form {
            number,
            unit,
            mark,
            second_unit,
            own_unit,
        } = &form;
        if let Mark::PlusMinus { sd } = mark
            && let Some(part) = self.relative(&form)
        {
            let own = if *own_unit { unit.as_ref() } else { None };
            let conversion = self.conversion(own, number)?;
            if conversion.celsius {
                return Err(spread_fault(
                    "a per cent of a temperature in °C is ambiguous; write both in K",
                    part.at.clone(),
                ));
            }
            let si = self.in_range(number, &conversion)?;
            let sd_si = sd.scaled(-2, si.abs())?;
            if sd_si <= 0.0 {
                return Err(spread_fault("a part of zero is zero", sd.at.clone()));
            }
            return Ok((si, Spread::Normal { sd: sd_si }, conversion.unit_text));
        }
        let conversion = self.conversion(unit.as_ref(), number)?;
        let beside = match second_unit {
            Some(placed) => self.conversion(Some(placed), number)?,
            None => conversion.clone(),
        };
        if !own_unit {
            self.refuse_doubtful_percent(&form)?;
        }
        let spread = match mark {
            Mark::None => Spread::Exact,
            Mark::PlusMinus { sd } => Spread::Normal {
                sd: beside.difference(sd)?,
            },
            Mark::Sides { plus, minus } => Spread::Asymmetric {
                minus: beside.difference(minus)?,
                plus: beside.difference(plus)?,
            },
            Mark::Factor { factor } => {
                let size = factor.scaled(0, 1.0)?;
                if size <= 1.0 || number.is_negative() || number.is_zero() || conversion.celsius {
                    return Err(spread_fault(
                        "×/ needs a factor above 1 behind a positive value, not one in °C",
                        factor.at.clone(),
                    ));
                }
                Spread::LogNormal { factor: size }
            }
            Mark::Interval { high } => {
                let (low, high) = self.ends(number, &conversion, high, &beside)?;
                let spread = Spread::Uniform { low, high };
                return Ok((0.5 * low + 0.5 * high, spread, conversion.unit_text));
            }
        };
        let si = self.in_range(number, &conversion)?;
        Ok((si, spread, conversion.unit_text))
    }

    /// The per cent sign behind `±` when it means a part of the value.
    fn relative<'f>(&self, form: &'f Form) -> Option<&'f Placed> {
        let behind = if form.own_unit {
            &form.second_unit
        } else {
            &form.unit
        };
        behind.as_ref().filter(|placed| {
            let percent = placed.unit.text == "%" && !self.kind.percent;
            percent && (form.own_unit || self.kind.dimension == Dimension::NONE)
        })
    }

    /// "0.46 ± 10 %" may mean 0.46 with a tenth of it, or 0.46 % with ten points.
    fn refuse_doubtful_percent(&self, form: &Form) -> Result<(), ReadFault> {
        let percent = form
            .unit
            .as_ref()
            .filter(|p| p.unit.special == Some(Special::Percent));
        let Some(placed) = percent else {
            return Ok(());
        };
        let value = form.number.scaled(0, 1.0)?.abs();
        let size = match &form.mark {
            Mark::PlusMinus { sd } => sd.scaled(0, 1.0)?,
            Mark::Sides { plus, minus } => plus.scaled(0, 1.0)?.max(minus.scaled(0, 1.0)?),
            _ => return Ok(()),
        };
        if value > 0.0 && value <= 1.0 && size > value {
            return Err(spread_fault(
                "it is not clear what the per cent sign belongs to; write it behind both numbers",
                placed.at.clone(),
            ));
        }
        Ok(())
    }
}
