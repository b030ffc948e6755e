//! Roots of a continuous function of one variable, bracketed.

/// Why no root was returned.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum RootFault {
    /// The function has the same sign at both ends.
    NoSignChange {
        /// Value at the lower end.
        low: f64,
        /// Value at the upper end.
        high: f64,
    },
    /// The function returned something that is not a number.
    NotFinite {
        /// Where.
        at: f64,
    },
    /// The bracket did not shrink to the tolerance.
    NotConverged {
        /// Number of steps taken.
        steps: u32,
        /// Width that was left.
        width: f64,
    },
}

const MOST_STEPS: u32 = 200;

/// Brent's method on `[a, b]`: inverse quadratic interpolation, guarded by bisection.
///
/// Invariant: the root lies between `b` (the best point) and `c`, where the function has opposite signs.
/// A step falls back to bisection whenever interpolation would leave that bracket or fails to halve the
/// step before last, so at worst the method is bisection. `tolerance` is absolute in x; the result is
/// within it (plus four units in the last place) of a sign change.
///
/// # Errors
/// [`RootFault`]; never a number that was not found.
///
/// # Source
/// Brent, Algorithms for Minimization without Derivatives, Prentice-Hall, 1973, chapter 4 (recalled).
pub fn bracketed_root(
    mut f: impl FnMut(f64) -> f64,
    a: f64,
    b: f64,
    tolerance: f64,
) -> Result<f64, RootFault> {
    let (mut a, mut b) = (a, b);
    let (mut fa, mut fb) = (f(a), f(b));
    for (x, y) in [(a, fa), (b, fb)] {
        if !y.is_finite() {
            return Err(RootFault::NotFinite { at: x });
        }
    }
    if fa.abs() <= 0.0 {
        return Ok(a);
    }
    if fb.abs() <= 0.0 {
        return Ok(b);
    }
    if fa.signum() * fb.signum() > 0.0 {
        return Err(RootFault::NoSignChange { low: fa, high: fb });
    }
    let (mut c, mut fc) = (a, fa);
    let mut step = b - a;
    let mut before_last = step;
    for _ in 0..MOST_STEPS {
        if fb.signum() * fc.signum() > 0.0 {
            (c, fc) = (a, fa);
            step = b - a;
            before_last = step;
        }
        if fc.abs() < fb.abs() {
            (a, b, c) = (b, c, b);
            (fa, fb, fc) = (fb, fc, fb);
        }
        // Four units in the last place of b: a tolerance below that could never be met.
        let reach = 4.0 * f64::from_bits(1).max(b.abs() * 2.0_f64.powi(-53)) + 0.5 * tolerance;
        let half = 0.5 * (c - b);
        if half.abs() <= reach || fb.abs() <= 0.0 {
            return Ok(b);
        }
        if before_last.abs() >= reach && fa.abs() > fb.abs() {
            let s = fb / fa;
            let (mut p, mut q) = if (a - c).abs() <= 0.0 {
                (2.0 * half * s, 1.0 - s)
            } else {
                let (q0, r) = (fa / fc, fb / fc);
                (
                    s * (2.0 * half * q0 * (q0 - r) - (b - a) * (r - 1.0)),
                    (q0 - 1.0) * (r - 1.0) * (s - 1.0),
                )
            };
            if p > 0.0 {
                q = -q;
            }
            p = p.abs();
            if 2.0 * p < (3.0 * half * q - (reach * q).abs()).min((before_last * q).abs()) {
                before_last = step;
                step = p / q;
            } else {
                step = half;
                before_last = half;
            }
        } else {
            step = half;
            before_last = half;
        }
        (a, fa) = (b, fb);
        b += if step.abs() > reach {
            step
        } else {
            reach.copysign(half)
        };
        fb = f(b);
        if !fb.is_finite() {
            return Err(RootFault::NotFinite { at: b });
        }
    }
    Err(RootFault::NotConverged {
        steps: MOST_STEPS,
        width: (c - b).abs(),
    })
}

/// Place and value of the largest value of `f` on `[a, b]` by golden-section search: the function must
/// have one maximum there. `tolerance` is absolute in x.
pub fn largest(mut f: impl FnMut(f64) -> f64, a: f64, b: f64, tolerance: f64) -> (f64, f64) {
    const RATIO: f64 = 0.618_033_988_749_894_9;
    let (mut a, mut b) = (a, b);
    let (mut x1, mut x2) = (b - RATIO * (b - a), a + RATIO * (b - a));
    let (mut f1, mut f2) = (f(x1), f(x2));
    for _ in 0..MOST_STEPS {
        if (b - a).abs() <= tolerance {
            break;
        }
        if f1 < f2 {
            a = x1;
            (x1, f1) = (x2, f2);
            x2 = a + RATIO * (b - a);
            f2 = f(x2);
        } else {
            b = x2;
            (x2, f2) = (x1, f1);
            x1 = b - RATIO * (b - a);
            f1 = f(x1);
        }
    }
    if f1 > f2 { (x1, f1) } else { (x2, f2) }
}

#[cfg(test)]
mod tests {
    use super::{RootFault, bracketed_root, largest};

    #[test]
    fn finds_known_roots() {
        // cos x = x at the Dottie number 0.739085133215160641655 (OEIS A003957, recalled digits, checked by substitution).
        let dottie = bracketed_root(|x| x.cos() - x, 0.0, 1.0, 0.0).unwrap();
        assert!((dottie - 0.739_085_133_215_160_6).abs() < 4e-16, "{dottie}");
        // A triple root and a root behind a near-vertical step: bisection has to take over.
        let triple = bracketed_root(|x| (x - 0.3).powi(3), -1.0, 7.0, 1e-13).unwrap();
        assert!((triple - 0.3).abs() < 1e-4);
        let step = bracketed_root(|x| ((x - 0.7) * 1e9).tanh(), 0.0, 1.0, 1e-12).unwrap();
        assert!((step - 0.7).abs() < 1e-11);
    }

    #[test]
    fn refuses_what_it_cannot_bracket() {
        assert!(matches!(
            bracketed_root(|x| x * x + 1.0, -1.0, 1.0, 0.0),
            Err(RootFault::NoSignChange { .. })
        ));
        assert!(matches!(
            bracketed_root(|_| f64::NAN, 0.0, 1.0, 0.0),
            Err(RootFault::NotFinite { .. })
        ));
    }

    #[test]
    fn finds_a_maximum() {
        let (x, y) = largest(|x| -(x - 2.0).powi(2) + 5.0, 0.0, 10.0, 1e-9);
        assert!((x - 2.0).abs() < 1e-7 && (y - 5.0).abs() < 1e-12);
    }
}
