//! The one way this suite compares numbers: relative, with no absolute part, and never true for NaN.
//!
//! Spin resistances of metals are near 1e-15 Ω m²: any comparison with an absolute allowance of the size
//! of a rounding error of 1 accepts everything there.

#![allow(clippy::panic)]

/// Fails unless `got` lies within `rel` of `want`, relative to `want`. NaN on either side fails.
#[track_caller]
pub fn close(got: f64, want: f64, rel: f64) {
    close_at("", got, want, rel);
}

/// [`close`] with the name of what is compared.
#[track_caller]
pub fn close_at(what: &str, got: f64, want: f64, rel: f64) {
    within_at(what, got, want, want.abs(), rel);
}

/// Fails unless `got` lies within `rel` times `scale` of `want`: for numbers that are sums of terms of the
/// size of `scale` and may cancel. NaN anywhere fails.
#[track_caller]
pub fn within(got: f64, want: f64, scale: f64, rel: f64) {
    within_at("", got, want, scale, rel);
}

/// [`within`] with the name of what is compared.
#[track_caller]
pub fn within_at(what: &str, got: f64, want: f64, scale: f64, rel: f64) {
    let off = deviation(got, want, scale);
    // NaN compares false: it must take the failing branch.
    if off <= rel {
        return;
    }
    panic!("{what}: got {got:e}, want {want:e}; off by {off:e} of {scale:e}, allowed {rel:e}");
}

/// |got − want|/scale; 0 where both agree exactly, whatever the scale. NaN if anything is.
pub fn deviation(got: f64, want: f64, scale: f64) -> f64 {
    let off = (got - want).abs();
    if off <= 0.0 && scale >= 0.0 {
        0.0
    } else {
        off / scale
    }
}

#[cfg(test)]
mod tests {
    use std::panic::catch_unwind;

    use super::{close, deviation, within};

    fn fails(check: impl FnOnce() + std::panic::UnwindSafe) -> bool {
        catch_unwind(check).is_err()
    }

    #[test]
    fn refuses_small_numbers_that_differ() {
        close(4.5e-15, 4.5e-15, 0.0);
        close(4.5e-15, 4.500_000_001e-15, 1e-9);
        assert!(fails(|| close(4.5e-15, 4.7e-15, 1e-12)));
        assert!(fails(|| close(4.5e-15, 4.500_000_1e-15, 1e-9)));
        assert!(fails(|| close(-4.5e-15, 4.5e-15, 0.5)));
    }

    #[test]
    fn refuses_nan_and_infinity() {
        assert!(fails(|| close(f64::NAN, 1.0, 1e3)));
        assert!(fails(|| close(1.0, f64::NAN, 1e3)));
        assert!(fails(|| close(f64::NAN, f64::NAN, 1e3)));
        assert!(fails(|| close(f64::INFINITY, f64::INFINITY, 1e3)));
        assert!(fails(|| close(1.0, f64::INFINITY, 1e-3)));
        assert!(fails(|| within(1.0, 1.0, f64::NAN, 1.0)));
    }

    #[test]
    fn zero_is_met_only_by_zero() {
        close(0.0, 0.0, 0.0);
        assert!(fails(|| close(1e-300, 0.0, 1e-3)));
        assert!(fails(|| within(1e-300, 0.0, 0.0, 1e-3)));
        within(1e-20, 0.0, 1e-8, 1e-11);
        assert!(deviation(1.0, 3.0, 4.0) >= 0.5 && deviation(1.0, 3.0, 4.0) <= 0.5);
    }
}
