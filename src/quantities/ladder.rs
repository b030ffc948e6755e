//! The units a quantity is printed in, and the decimal digits that go before them.

use super::kind::Scale;

/// One step: its unit is used for numbers whose leading digit stands at `10^from` or above.
pub(super) struct Step {
    pub(super) unit: &'static str,
    /// Power of ten of the unit, in the ladder's base unit.
    pub(super) power: i32,
    from: i32,
}

/// How a scale is printed.
pub(super) struct Ladder {
    /// Smallest unit first.
    steps: &'static [Step],
    /// The step in which zero is printed.
    usual: usize,
    /// SI value of the base unit of the steps; not 1 only for the electronvolt.
    pub(super) base: f64,
    /// Numbers with fewer zeros than this behind the point, or more digits before it, need no power of ten.
    plain: (i32, i32),
}

const ALWAYS_POWER: (i32, i32) = (1, 0);
const USUAL_PLAIN: (i32, i32) = (-3, 4);

const fn step(unit: &'static str, power: i32, from: i32) -> Step {
    Step { unit, power, from }
}

const fn one(steps: &'static [Step]) -> Ladder {
    Ladder {
        steps,
        usual: 0,
        base: 1.0,
        plain: USUAL_PLAIN,
    }
}

const fn several(steps: &'static [Step], usual: usize) -> Ladder {
    Ladder {
        usual,
        ..one(steps)
    }
}

const PLAIN: Ladder = one(&[step("", 0, 0)]);
const PERCENT: Ladder = Ladder {
    plain: (-4, 4),
    ..one(&[step("%", -2, 0)])
};
const LENGTH: Ladder = one(&[step("nm", -9, 0), step("µm", -6, -6), step("mm", -3, -3)]);
const RESISTANCE_AREA: Ladder = Ladder {
    plain: (-3, 3),
    ..several(
        &[
            step("fΩ m²", -15, 0),
            step("Ω µm²", -12, -14),
            step("kΩ µm²", -9, -9),
            step("MΩ µm²", -6, -6),
            step("GΩ µm²", -3, -3),
        ],
        1,
    )
};
const RESISTIVITY: Ladder = several(
    &[
        step("µΩ cm", -8, 0),
        step("mΩ cm", -5, -5),
        step("Ω cm", -2, -2),
        step("kΩ cm", 1, 1),
    ],
    1,
);
const CONDUCTIVITY: Ladder = one(&[step("S/cm", 2, 0)]);
const RESISTANCE: Ladder = several(
    &[
        step("mΩ", -3, 0),
        step("Ω", 0, 0),
        step("kΩ", 3, 3),
        step("MΩ", 6, 6),
    ],
    1,
);
const DENSITY: Ladder = Ladder {
    plain: ALWAYS_POWER,
    ..one(&[step("cm⁻³", 6, 0)])
};
const MOBILITY: Ladder = one(&[step("cm²/(V s)", -4, 0)]);
const DIFFUSION: Ladder = one(&[step("cm²/s", -4, 0)]);
const ENERGY: Ladder = Ladder {
    base: super::constants::ELEMENTARY_CHARGE,
    ..one(&[step("meV", -3, 0), step("eV", 0, -1)])
};
const TIME: Ladder = several(
    &[step("ps", -12, 0), step("ns", -9, -9), step("µs", -6, -6)],
    1,
);
const TEMPERATURE: Ladder = one(&[step("K", 0, 0)]);
const CURRENT_DENSITY: Ladder = Ladder {
    plain: ALWAYS_POWER,
    ..one(&[step("A/cm²", 4, 0)])
};
const VOLTAGE: Ladder = several(
    &[
        step("pV", -12, 0),
        step("nV", -9, -9),
        step("µV", -6, -6),
        step("mV", -3, -3),
        step("V", 0, 0),
    ],
    2,
);
const FIELD: Ladder = one(&[step("mT", -3, 0), step("T", 0, 0)]);
const LATTICE: Ladder = one(&[step("Å", -10, 0), step("nm", -9, -9)]);
const MAGNETIZATION: Ladder = one(&[step("kA/m", 3, 0)]);
// "Per decade" is part of the quantity's name, so that the printed text stays a readable length.
const SLOPE: Ladder = one(&[step("nm", -9, 0)]);

/// The ladder of a scale.
pub(super) fn ladder(scale: Scale) -> &'static Ladder {
    match scale {
        Scale::Plain => &PLAIN,
        Scale::Percent => &PERCENT,
        Scale::Length => &LENGTH,
        Scale::ResistanceArea => &RESISTANCE_AREA,
        Scale::Resistivity => &RESISTIVITY,
        Scale::Conductivity => &CONDUCTIVITY,
        Scale::Resistance => &RESISTANCE,
        Scale::Density => &DENSITY,
        Scale::Mobility => &MOBILITY,
        Scale::Diffusion => &DIFFUSION,
        Scale::Energy => &ENERGY,
        Scale::Time => &TIME,
        Scale::Temperature => &TEMPERATURE,
        Scale::CurrentDensity => &CURRENT_DENSITY,
        Scale::Voltage => &VOLTAGE,
        Scale::Field => &FIELD,
        Scale::Lattice => &LATTICE,
        Scale::Magnetization => &MAGNETIZATION,
        Scale::Slope => &SLOPE,
    }
}

impl Ladder {
    /// The step for a number that is already rounded.
    pub(super) fn step(&self, rounded: &Decimal) -> &'static Step {
        if rounded.is_zero() {
            return &self.steps[self.usual];
        }
        let reached = self
            .steps
            .iter()
            .skip(1)
            .rev()
            .find(|s| rounded.lead >= s.from);
        reached.unwrap_or(&self.steps[0])
    }

    /// Whether every number has a power of ten.
    pub(super) fn always_power(&self) -> bool {
        self.plain == ALWAYS_POWER
    }

    /// Whether a number in one of the units is printed without a power of ten.
    pub(super) fn is_plain(&self, rounded: &Decimal, step: &Step) -> bool {
        let lead = rounded.lead - step.power;
        rounded.is_zero() || (self.plain.0..=self.plain.1).contains(&lead)
    }
}

/// A rounded number as decimal digits: `±d.ddd * 10^lead`.
#[derive(Clone, PartialEq, Eq, Debug)]
pub(super) struct Decimal {
    negative: bool,
    /// ASCII digits; a single `0` for zero.
    digits: String,
    /// Power of ten of the first digit.
    pub(super) lead: i32,
}

/// Significant digits beyond which an `f64` holds nothing.
pub(super) const MOST_DIGITS: usize = 17;

impl Decimal {
    /// The number rounded to a count of significant digits, from 1 to [`MOST_DIGITS`].
    pub(super) fn rounded(x: f64, digits: usize) -> Self {
        let count = digits.clamp(1, MOST_DIGITS);
        let text = format!("{:.*e}", count - 1, x.abs());
        let (mantissa, power) = text.split_once('e').unwrap_or((&text, "0"));
        let digits = mantissa.replace('.', "");
        let zero = !digits.bytes().any(|b| b != b'0');
        Self {
            negative: x < 0.0,
            digits: if zero { "0".to_owned() } else { digits },
            lead: power.parse().unwrap_or(0),
        }
    }

    /// The same number with one more zero at its end.
    pub(super) fn one_more_zero(mut self) -> Self {
        self.digits.push('0');
        self
    }

    /// Up to a count of significant digits, without the zeros at the end.
    pub(super) fn shortest(x: f64, digits: usize) -> Self {
        let mut decimal = Self::rounded(x, digits);
        let kept = decimal.digits.trim_end_matches('0').len().max(1);
        decimal.digits.truncate(kept);
        decimal
    }

    pub(super) fn is_zero(&self) -> bool {
        self.digits == "0"
    }

    /// The first digit as a number.
    pub(super) fn first(&self) -> u8 {
        self.digits
            .bytes()
            .next()
            .map_or(0, |b| b.saturating_sub(b'0'))
    }

    fn sign(&self) -> &'static str {
        if self.negative && !self.is_zero() {
            "−"
        } else {
            ""
        }
    }

    /// Digits with a point, in the unit of the given power of ten.
    pub(super) fn plain(&self, unit_power: i32) -> String {
        let sign = self.sign();
        if self.is_zero() {
            return "0".to_owned();
        }
        let lead = self.lead - unit_power;
        let Ok(whole) = usize::try_from(lead) else {
            let zeros = usize::try_from(-1 - lead).unwrap_or(0);
            return format!("{sign}0.{}{}", "0".repeat(zeros), self.digits);
        };
        match self.digits.split_at_checked(whole + 1) {
            Some((before, "")) => format!("{sign}{before}"),
            Some((before, after)) => format!("{sign}{before}.{after}"),
            None => format!(
                "{sign}{}{}",
                self.digits,
                "0".repeat(whole + 1 - self.digits.len())
            ),
        }
    }

    /// Digits with a power of ten, in the unit of the given power of ten.
    pub(super) fn power(&self, unit_power: i32) -> String {
        let sign = self.sign();
        if self.is_zero() {
            return "0".to_owned();
        }
        let mantissa = match self.digits.split_at_checked(1) {
            Some((first, rest)) if !rest.is_empty() => format!("{first}.{rest}"),
            _ => self.digits.clone(),
        };
        format!("{sign}{mantissa}×10{}", superscript(self.lead - unit_power))
    }
}

/// An integer of any size as Unicode superscripts.
fn superscript(n: i32) -> String {
    n.to_string()
        .chars()
        .map(|c| match c {
            '-' => '⁻',
            '1' => '¹',
            '2' => '²',
            '3' => '³',
            d => char::from_u32(0x2070 + d.to_digit(10).unwrap_or(0)).unwrap_or(d),
        })
        .collect()
}
