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
//!                                                                s' = s·sech T + β(r·tanh T·d + r·tanh(T/2)·(tanh T/r)·n)
//! interface of spin resistance r_b*, asymmetry γ                  n' = n + r_b*·d,  d' = d,  s' = s + γ r_b*·d
//! at a face                                                       J = (s_l d_r + s_r d_l)/(n_l d_r + n_r d_l)
//!                                                                u = (n_l s_r − s_l n_r)/(n_l d_r + n_r d_l)
//! ```
//!
//! An interface is the same coefficients as a layer with other values, so one loop serves both.
//!
//! # Cost
//! The answer's own memory holds what lies to the left of every face until the sweep from the right
//! arrives and tells J, u and V there at once: a solution costs its faces, one pass up the stack and one
//! down, and nothing else.
//!
//! # Accuracy
//! n and d are sums of non-negative terms: nothing cancels in the impedances. Only sources of opposite
//! sign can cancel in s, J and u, so errors are relative to the sum of the absolute source contributions.
//!
//! # Source
//! Valet and Fert, Phys. Rev. B 48, 7099 (1993) for the equations; the sweep in ratio form is ours.

use crate::numerics::hyperbolic::reduced;

/// Coefficients of one layer or one interface. As few numbers as do not cost the sweep a division: what a
/// long stack takes is the time to write and read them.
#[derive(Clone, Copy, PartialEq, Debug)]
pub(super) struct Rung {
    /// r·tanh T of a layer, r_b* of an interface. Ω m².
    pub series: f64,
    /// tanh T/r of a layer, 0 of an interface. S/m².
    pub shunt: f64,
    /// sech T of a layer, 1 of an interface.
    pub pass: f64,
    /// r·tanh(T/2) of a layer, r_b*/2 of an interface. Ω m². Weighs J at both faces in the voltage.
    pub reach: f64,
    /// β or γ, signed by the magnetization in the parallel state.
    pub asymmetry: f64,
    /// What it adds to RA besides its accumulation, Ω m²; negative, down to −0, if the asymmetry turns
    /// between the two magnetic states.
    signed_resistance: f64,
}

impl Rung {
    /// A rung of the given coefficients.
    #[inline]
    pub fn new(
        [series, shunt, pass, reach]: [f64; 4],
        resistance: f64,
        asymmetry: f64,
        turns: bool,
    ) -> Self {
        let signed_resistance =
            f64::from_bits(resistance.abs().to_bits() | (u64::from(turns) << 63));
        Self {
            series,
            shunt,
            pass,
            reach,
            asymmetry,
            signed_resistance,
        }
    }

    /// Whether the asymmetry turns between the two magnetic states.
    #[inline]
    pub fn turns(&self) -> bool {
        self.signed_resistance.is_sign_negative()
    }

    /// What it adds to RA besides its accumulation: ρt of a layer, r_b*(1 − γ²) of an interface. Ω m².
    #[inline]
    pub fn resistance(&self) -> f64 {
        self.signed_resistance.abs()
    }

    /// T = t/λ of a layer, δ of an interface with loss: the resistance over r(1 − β²).
    pub fn reduced(&self) -> f64 {
        let spin_resistance = self.series.sqrt() / self.shunt.sqrt();
        let across_both = (1.0 - self.asymmetry) * (1.0 + self.asymmetry);
        self.resistance() / (spin_resistance * across_both)
    }

    /// (u_left − u_right)/j over the rung, driven with an asymmetry that is `against` with its sign turned.
    ///
    /// The same number has two forms: the difference itself, and reach·(2·against + p_left + p_right), which
    /// is what the diffusion equation makes of it. The first loses digits where u hardly changes (a layer
    /// much thinner than λ), the second where the current already has the polarization of the layer and
    /// `reach` is large (β near 1). Each subtracts at the size of its terms, so the form with the smaller
    /// terms is taken; near a tie it is the second, because u, a product with a resistance, runs out of
    /// exponent before J does.
    #[inline]
    pub fn fall(&self, against: f64, left: At, right: At) -> f64 {
        let by_current =
            self.reach * (2.0 * against.abs() + left.current.abs() + right.current.abs());
        let by_accumulation = left.accumulation.abs() + right.accumulation.abs();
        let from_current = self.reach * ((against + left.current) + (against + right.current));
        let from_accumulation = left.accumulation - right.accumulation;
        if by_current <= 4.0 * by_accumulation {
            from_current
        } else {
            from_accumulation
        }
    }
}

/// Series, shunt, pass and reach of a layer of spin resistance `r` and reduced thickness `t`.
#[inline]
pub(super) fn coefficients(r: f64, t: f64) -> [f64; 4] {
    let f = reduced(t);
    [r * f.tanh, f.tanh * r.recip(), f.sech, r * f.half_tanh]
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
    /// The part seen after one more rung whose asymmetry, turned in sign, is `against` (0 where it is not
    /// driven).
    ///
    /// Turned because a difference, here, is faster than a sum: from sums alone compilers pack the source
    /// into one vector with the impedance, which then waits for it at every rung.
    #[inline]
    pub fn after(self, rung: &Rung, against: f64) -> Self {
        let (series, shunt) = (rung.series * self.den, rung.shunt * self.num);
        let next = Self {
            num: self.num + series,
            den: self.den + shunt,
            src: self.src * rung.pass - against * (series + rung.reach * shunt),
        };
        // Neither is negative, so the sum stands for the larger of the two.
        if next.num + next.den > CEILING {
            next.lowered()
        } else {
            next
        }
    }

    #[cold]
    fn lowered(self) -> Self {
        let down = CEILING.recip();
        Self {
            num: self.num * down,
            den: self.den * down,
            src: self.src * down,
        }
    }
}

/// Spin current, spin accumulation and mean potential at a face, per unit charge current density.
#[derive(Clone, Copy, PartialEq, Debug)]
pub(super) struct At {
    /// J/j.
    pub current: f64,
    /// u/j in the sign of the published equations, Ω m².
    pub accumulation: f64,
    /// (V↑ + V↓)/2j, Ω m².
    pub potential: f64,
}

impl At {
    /// A face of given J and u, its V left 0.
    #[inline]
    pub fn new(current: f64, accumulation: f64) -> Self {
        Self {
            current,
            accumulation,
            potential: 0.0,
        }
    }

    /// A face not yet told: its three numbers are those of the part to its left.
    #[inline]
    fn holding(left: Passed) -> Self {
        Self {
            current: left.src,
            accumulation: left.num,
            potential: left.den,
        }
    }

    /// The part that [`At::holding`] put there.
    #[inline]
    fn held(self) -> Passed {
        Passed {
            num: self.accumulation,
            den: self.potential,
            src: self.current,
        }
    }
}

/// J and u where two parts meet; V is left 0.
#[inline]
fn meet(left: Passed, right: Passed) -> At {
    let inverse = 1.0 / (left.num * right.den + right.num * left.den);
    At::new(
        (left.src * right.den + right.src * left.den) * inverse,
        // Turned sign: see the module text.
        (left.src * right.num - left.num * right.src) * inverse,
    )
}

/// Appends J, u and V at every face, from the left end to the right end: `rungs.len() + 1` entries.
///
/// `against(rung)` gives the asymmetry with which a rung is driven, turned in sign; the ends carry their own
/// source. `start` tells V of the rightmost face, `drop` what V falls by over a rung, given `against` of it
/// and its two faces.
pub(super) fn sweep(
    faces: &mut Vec<At>,
    left: Passed,
    right: Passed,
    rungs: &[Rung],
    against: impl Fn(&Rung) -> f64,
    start: impl FnOnce(At) -> f64,
    drop: impl Fn(&Rung, f64, At, At) -> f64,
) {
    let before = faces.len();
    let mut part = left;
    // Not a loop of pushes: the call that might grow the vector would keep `part` out of registers.
    faces.extend(rungs.iter().map(|rung| {
        let here = At::holding(part);
        part = part.after(rung, against(rung));
        here
    }));
    let mut near = meet(part, right);
    near.potential = start(near);
    let last = near;
    let (_, held) = faces.split_at_mut(before);
    let mut part = right;
    for (rung, face) in rungs.iter().zip(held).rev() {
        let turned = against(rung);
        part = part.after(rung, turned);
        let mut here = meet(face.held(), part);
        here.potential = near.potential + drop(rung, turned, here, near);
        *face = here;
        near = here;
    }
    faces.push(last);
}

/// Impedance Z = n/d and source E = s/d of the two parts that meet at face `k`, in Ω m²: what the left
/// and the right part look like from there. Z may be infinite.
pub(super) fn parts_at(
    left: Passed,
    right: Passed,
    rungs: &[Rung],
    k: usize,
    against: impl Fn(&Rung) -> f64,
) -> (Passed, Passed) {
    let mut l = left;
    for rung in rungs.iter().take(k) {
        l = l.after(rung, against(rung));
    }
    let mut r = right;
    for rung in rungs.iter().skip(k).rev() {
        r = r.after(rung, against(rung));
    }
    (l, r)
}
