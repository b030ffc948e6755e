//! The kernel under [`super::ladder`]: bare numbers, swept once from each end.
//!
//! # Law
//! A part of the stack that has been passed is seen, at the face reached, through a spin impedance Z and a
//! spin source E: from the left u = ZJ − E, from the right u = −ZJ + E, where J is the spin current and u
//! the spin accumulation *with the sign turned* (the public face of the ladder turns it back). Z and E are
//! carried as a ratio with a common denominator, Z = n/d and E = s/d, so that a wall that passes no spin
//! (Z = ∞) and a perfect sink (Z = 0) are ordinary values and the loop holds no division:
//!
//! ```text
//! layer of spin resistance r, thickness T = t/λ, asymmetry β      n' = n + r·tanh T·d
//!                                                                d' = d + (tanh T/r)·n
//!                                                                s' = s·sech T + β(r·tanh T·d + tanh T·tanh(T/2)·n)
//! interface of spin resistance r_b*, asymmetry γ                  n' = n + r_b*·d,  d' = d,  s' = s + γ r_b*·d
//! at a face                                                       J = (s_l d_r + s_r d_l)/(n_l d_r + n_r d_l)
//!                                                                u = (n_l s_r − s_l n_r)/(n_l d_r + n_r d_l)
//! ```
//!
//! An interface is the same five coefficients as a layer with other values, so one loop serves both.
//!
//! # Accuracy
//! n and d are sums of non-negative terms: nothing cancels in the impedances. Only sources of opposite
//! sign can cancel in s, J and u, so errors are relative to the sum of the absolute source contributions.
//!
//! # Source
//! Valet and Fert, Phys. Rev. B 48, 7099 (1993) for the equations; the sweep in ratio form is ours.

/// Coefficients of one layer or one interface.
#[derive(Clone, Copy, PartialEq, Debug)]
pub(super) struct Rung {
    /// r·tanh T of a layer, r_b* of an interface. Ω m².
    pub series: f64,
    /// tanh T/r of a layer, 0 of an interface. S/m².
    pub shunt: f64,
    /// sech T of a layer, 1 of an interface.
    pub pass: f64,
    /// tanh T·tanh(T/2) of a layer, 0 of an interface.
    pub bend: f64,
    /// r·tanh(T/2) of a layer, r_b*/2 of an interface. Ω m². Weighs J at both faces in the voltage.
    pub reach: f64,
    /// β or γ, signed by the magnetization in the parallel state.
    pub asymmetry: f64,
}

/// Ratio form of the part already passed: numerator and denominator of Z, and the source.
#[derive(Clone, Copy, PartialEq, Debug)]
pub(super) struct Passed {
    pub num: f64,
    pub den: f64,
    pub src: f64,
}

/// Above this the triple is scaled down by it. A power of two, so scaling is exact; low enough that the
/// product of two triples and the growth over one more rung stay finite.
const CEILING: f64 = 1.606_938_044_258_990_3e60; // 2^200

impl Passed {
    /// The part seen after one more rung whose asymmetry is `asymmetry` (0 where it is not driven).
    #[inline]
    fn after(self, rung: &Rung, asymmetry: f64) -> Self {
        let lift = rung.series * self.den;
        let mut next = Self {
            num: self.num + lift,
            den: self.den + rung.shunt * self.num,
            src: self.src * rung.pass + asymmetry * (lift + rung.bend * self.num),
        };
        if next.num.max(next.den) > CEILING {
            let down = CEILING.recip();
            next.num *= down;
            next.den *= down;
            next.src *= down;
        }
        next
    }
}

/// Spin current and spin accumulation at a face, per unit charge current density.
#[derive(Clone, Copy, PartialEq, Debug)]
pub(super) struct At {
    /// J/j.
    pub current: f64,
    /// u/j in the sign of the published equations, Ω m².
    pub accumulation: f64,
}

/// J and u where two parts meet.
#[inline]
fn meet(left: Passed, right: Passed) -> At {
    let inverse = 1.0 / (left.num * right.den + right.num * left.den);
    At {
        current: (left.src * right.den + right.src * left.den) * inverse,
        // Turned sign: see the module text.
        accumulation: (left.src * right.num - left.num * right.src) * inverse,
    }
}

/// J and u at every face, from the left end to the right end: `rungs.len() + 1` entries.
///
/// `asymmetry(i, rung)` gives the asymmetry with which rung i is driven; the ends carry their own source.
pub(super) fn sweep(
    left: Passed,
    right: Passed,
    rungs: &[Rung],
    asymmetry: impl Fn(usize, &Rung) -> f64,
) -> Vec<At> {
    let mut faces = Vec::with_capacity(rungs.len() + 1);
    let mut passed = Vec::with_capacity(rungs.len() + 1);
    passed.push(left);
    let mut part = left;
    for (i, rung) in rungs.iter().enumerate() {
        part = part.after(rung, asymmetry(i, rung));
        passed.push(part);
    }
    let mut part = right;
    faces.push(meet(passed[rungs.len()], part));
    for (i, rung) in rungs.iter().enumerate().rev() {
        part = part.after(rung, asymmetry(i, rung));
        faces.push(meet(passed[i], part));
    }
    faces.reverse();
    faces
}

/// Impedance Z = n/d and source E = s/d of the two parts that meet at face `k`, in Ω m²: what the left
/// and the right part look like from there. Z may be infinite.
pub(super) fn parts_at(
    left: Passed,
    right: Passed,
    rungs: &[Rung],
    k: usize,
    asymmetry: impl Fn(usize, &Rung) -> f64,
) -> (Passed, Passed) {
    let mut l = left;
    for (i, rung) in rungs.iter().enumerate().take(k) {
        l = l.after(rung, asymmetry(i, rung));
    }
    let mut r = right;
    for (i, rung) in rungs.iter().enumerate().skip(k).rev() {
        r = r.after(rung, asymmetry(i, rung));
    }
    (l, r)
}
