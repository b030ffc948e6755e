//! Hyperbolic functions of one layer's reduced thickness, without overflow and without loss at either end.

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

/// Evaluates [`Reduced`] for T ≥ 0, infinity included.
///
/// Everything comes out of e = e^(−T) and m = e − 1, which do not overflow for thick layers:
/// tanh T = −m(2 + m)/(1 + e²), tanh(T/2) = −m/(2 + m), sech T = 2e/(1 + e²). For thin layers m is
/// computed and e = 1 + m; for thick ones e is computed and m = e − 1. The other way round m would cancel
/// for thin layers, and sech T, which carries what little spin crosses a thick layer, would lose all digits.
/// Accuracy: a few units in the last place over the whole range.
#[must_use]
pub fn reduced(t: f64) -> Reduced {
    let (m, e) = if t < 1.0 {
        let m = (-t).exp_m1();
        (m, 1.0 + m)
    } else {
        let e = (-t).exp();
        (e - 1.0, e)
    };
    let inverse = 1.0 / (1.0 + e * e);
    Reduced {
        sech: 2.0 * e * inverse,
        tanh: -m * (2.0 + m) * inverse,
        half_tanh: -m / (2.0 + m),
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
            for (a, b) in
                [(got.sech, t.cosh().recip()), (got.tanh, t.tanh()), (got.half_tanh, (0.5 * t).tanh())]
            {
                assert!((a / b - 1.0).abs() < 2e-15, "T = {t}: {a} against {b}");
            }
        }
    }

    #[test]
    fn a_thick_layer_keeps_all_digits_of_what_crosses() {
        for i in 10..7000 {
            let t = f64::from(i) * 0.1;
            let (got, want) = (reduced(t).sech, t.cosh().recip());
            assert!((got / want - 1.0).abs() < 2e-15, "T = {t}: {got} against {want}");
        }
    }

    #[test]
    fn ends_are_ordinary_values() {
        let thick = reduced(f64::INFINITY);
        assert_eq!((thick.sech, thick.tanh, thick.half_tanh), (0.0, 1.0, 1.0));
        let thin = reduced(1e-200);
        assert_eq!((thin.sech, thin.tanh, thin.half_tanh), (1.0, 1e-200, 5e-201));
    }
}
