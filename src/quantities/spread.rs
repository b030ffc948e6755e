//! The spread of a value: how far, and in which shape, it may lie from the number given.

/// Which side of the number the value lies on.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Side {
    /// The value is greater than the number.
    Above,
    /// The value is smaller than the number.
    Below,
}

/// The spread of a value, in coherent SI units. There is no default: an unknown spread is not a zero one.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum Spread {
    /// No spread: a plain number.
    Exact,
    /// Normal distribution.
    Normal {
        /// Standard deviation, positive.
        sd: f64,
    },
    /// One standard deviation to each side, of different size.
    Asymmetric {
        /// Downwards, given as a positive number.
        minus: f64,
        /// Upwards, given as a positive number.
        plus: f64,
    },
    /// The logarithm is normal.
    LogNormal {
        /// One standard deviation multiplies or divides by it; above 1, unit 1.
        factor: f64,
    },
    /// Equally likely anywhere between two ends.
    Uniform {
        /// Lower end.
        low: f64,
        /// Upper end, above the lower one.
        high: f64,
    },
    /// Only one side is known.
    Bound {
        /// The side on which the value lies.
        side: Side,
    },
    /// The source gives none.
    Unknown,
}

/// Standard deviation of a uniform distribution of the given width.
fn of_width(width: f64) -> f64 {
    width / 12.0_f64.sqrt()
}

impl Spread {
    /// Standard deviation, in the unit of `value`: the mean of both sides for unequal sides,
    /// `value * ln(factor)` for a factor, width/√12 for an interval. `None` when it is not known.
    #[must_use]
    pub fn standard_deviation(&self, value: f64) -> Option<f64> {
        match *self {
            Self::Exact => Some(0.0),
            Self::Normal { sd } => Some(sd),
            Self::Asymmetric { minus, plus } => Some(0.5 * minus + 0.5 * plus),
            Self::LogNormal { factor } => Some((value * factor.ln()).abs()),
            Self::Uniform { low, high } => Some(of_width(high - low)),
            Self::Bound { .. } | Self::Unknown => None,
        }
    }

    /// The value moved by a number of standard deviations along its own distribution. An interval is
    /// not left; a value without a known spread stays where it is.
    #[must_use]
    pub fn shifted(&self, value: f64, sigmas: f64) -> f64 {
        match *self {
            Self::Exact | Self::Bound { .. } | Self::Unknown => value,
            Self::Normal { sd } => value + sigmas * sd,
            Self::Asymmetric { minus, plus } => {
                value + sigmas * if sigmas < 0.0 { minus } else { plus }
            }
            Self::LogNormal { factor } => value * factor.powf(sigmas),
            Self::Uniform { low, high } => {
                (value + sigmas * of_width(high - low)).max(low).min(high)
            }
        }
    }
}
