//! Hyperbolic functions of one layer's reduced thickness, without overflow and without loss at either end.

use std::f64::consts::LOG2_E;

/// The three functions of T = t/λ that a layer needs.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Reduced {
    /// sech T.
    pub sech: f64,
    /// tanh T.
    pub tanh: f64,
    /// tanh(T/2).
    pub half_tanh: f64,
}

/// From here on e^(−T) is below the smallest normal number and counts as zero.
const THICK: f64 = 709.0;

/// ln 2 in two parts; the first ends in zeros, so that its product with a binary exponent is exact.
const LN_2_HIGH: f64 = 0.693_147_180_369_123_8;
const LN_2_LOW: f64 = 1.908_214_929_270_587_7e-10;

/// Added to a small number, rounds it to a whole one and leaves that in the lowest bits. 1.5 × 2^52.
const ROUNDING: f64 = 6_755_399_441_055_744.0;

/// Evaluates [`Reduced`] for T ≥ 0, infinity included.
///
/// With T = k ln 2 + 2h, |h| ≤ (ln 2)/4, s = 2^(−k) and c = h·coth h (an even series that six terms
/// exhaust), e^(−T) = s(c − h)/(c + h). Hence tanh(T/2) = x/y with x = c(1 − s) + h(1 + s) and
/// y = c(1 + s) + h(1 − s), tanh T = 2xy/(x² + y²) and sech T = 4s(c² − h²)/(x² + y²). Nothing cancels
/// for thin or thick layers, and there is neither a branch nor a call.
/// Accuracy: a few units in the last place over the whole range; sech T below 1e-307 is 0.
#[inline]
#[must_use]
pub fn reduced(t: f64) -> Reduced {
    let t = if t > THICK { THICK } else { t };
    let rounded = t * LOG2_E + ROUNDING;
    let k = rounded - ROUNDING;
    let s = f64::from_bits((1023_u64.wrapping_sub(rounded.to_bits())) << 52);
    let h = 0.5 * ((t - k * LN_2_HIGH) - k * LN_2_LOW);
    let z = h * h;
    let low = (1.0 / 3.0 - z * (1.0 / 45.0)) + z * z * (2.0 / 945.0 - z * (1.0 / 4_725.0));
    let high = 2.0 / 93_555.0 - z * (1_382.0 / 638_512_875.0);
    let c = 1.0 + z * (low + (z * z) * (z * z) * high);
    let x = c * (1.0 - s) + h * (1.0 + s);
    let y = c * (1.0 + s) + h * (1.0 - s);
    let inverse = 1.0 / (x * x + y * y);
    Reduced {
        sech: 4.0 * s * ((c - h) * (c + h)) * inverse,
        tanh: 2.0 * x * y * inverse,
        half_tanh: x / y,
    }
}

#[cfg(test)]
mod tests {
    use super::reduced;

    #[test]
    fn agrees_with_the_standard_library_in_the_middle_range() {
        for i in 1..2000 {
            let t = f64::from(i) * 0.005;
            let got = reduced(t);
            for (a, b) in [
                (got.sech, t.cosh().recip()),
                (got.tanh, t.tanh()),
                (got.half_tanh, (0.5 * t).tanh()),
            ] {
                assert!((a / b - 1.0).abs() < 2e-15, "T = {t}: {a} against {b}");
            }
        }
    }

    #[test]
    fn a_thick_layer_keeps_all_digits_of_what_crosses() {
        for i in 10..7000 {
            let t = f64::from(i) * 0.1;
            let (got, want) = (reduced(t).sech, t.cosh().recip());
            assert!(
                (got / want - 1.0).abs() < 2e-15,
                "T = {t}: {got} against {want}"
            );
        }
    }

    #[test]
    fn ends_are_ordinary_values() {
        let thick = reduced(f64::INFINITY);
        assert_eq!((thick.sech, thick.tanh, thick.half_tanh), (0.0, 1.0, 1.0));
        assert!(reduced(f64::NAN).tanh.is_nan());
        let none = reduced(0.0);
        assert_eq!((none.sech, none.tanh, none.half_tanh), (1.0, 0.0, 0.0));
        let thin = reduced(1e-200);
        assert_eq!(
            (thin.sech, thin.tanh, thin.half_tanh),
            (1.0, 1e-200, 5e-201)
        );
    }
}
