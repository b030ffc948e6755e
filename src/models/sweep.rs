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
//! arrives, so a solution costs its faces and nothing else.
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
    /// r·tanh(T/2) of a layer, r_b*/2 of an interface. Ω m². Weighs J at both faces in the voltage.
    pub reach: f64,
    /// β or γ, signed by the magnetization in the parallel state.
    pub asymmetry: f64,
    /// Whether the asymmetry turns between the two magnetic states.
    pub turns: bool,
    /// What it adds to RA besides its accumulation. Ω m².
    pub resistance: f64,
    /// T = t/λ of a layer, δ of an interface.
    pub reduced: f64,
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
        // What does not depend on the part passed is multiplied first: the chain from rung to rung is
        // one product and one sum for the impedance, and little more for the source.
        let (lift, bend) = (
            asymmetry * rung.series,
            asymmetry * (rung.reach * rung.shunt),
        );
        let next = Self {
            num: self.num + rung.series * self.den,
            den: self.den + rung.shunt * self.num,
            src: self.src * rung.pass + (lift * self.den + bend * self.num),
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
    /// (V↑ + V↓)/2j, Ω m². The sweep leaves it 0; the ladder sums it up.
    pub potential: f64,
}

impl At {
    /// A face not yet told: its three numbers are those of the part to its left.
    fn holding(left: Passed) -> Self {
        Self {
            current: left.num,
            accumulation: left.den,
            potential: left.src,
        }
    }

    /// The part that [`At::holding`] put there.
    fn held(self) -> Passed {
        Passed {
            num: self.current,
            den: self.accumulation,
            src: self.potential,
        }
    }
}

/// J and u where two parts meet.
#[inline]
fn meet(left: Passed, right: Passed) -> At {
    let inverse = 1.0 / (left.num * right.den + right.num * left.den);
    At {
        current: (left.src * right.den + right.src * left.den) * inverse,
        // Turned sign: see the module text.
        accumulation: (left.src * right.num - left.num * right.src) * inverse,
        potential: 0.0,
    }
}

/// J and u at every face, from the left end to the right end: `rungs.len() + 1` entries.
///
/// `asymmetry(rung)` gives the asymmetry with which a rung is driven; the ends carry their own source.
pub(super) fn sweep(
    left: Passed,
    right: Passed,
    rungs: &[Rung],
    asymmetry: impl Fn(&Rung) -> f64,
) -> Vec<At> {
    let mut part = left;
    let mut faces = Vec::with_capacity(rungs.len() + 1);
    // Not a loop of pushes: the call that might grow the vector would keep `part` out of registers.
    faces.extend(rungs.iter().map(|rung| {
        let here = At::holding(part);
        part = part.after(rung, asymmetry(rung));
        here
    }));
    faces.push(meet(part, right));
    let mut part = right;
    for (rung, face) in rungs.iter().zip(&mut faces).rev() {
        part = part.after(rung, asymmetry(rung));
        *face = meet(face.held(), part);
    }
    faces
}

/// Impedance Z = n/d and source E = s/d of the two parts that meet at face `k`, in Ω m²: what the left
/// and the right part look like from there. Z may be infinite.
pub(super) fn parts_at(
    left: Passed,
    right: Passed,
    rungs: &[Rung],
    k: usize,
    asymmetry: impl Fn(&Rung) -> f64,
) -> (Passed, Passed) {
    let mut l = left;
    for rung in rungs.iter().take(k) {
        l = l.after(rung, asymmetry(rung));
    }
    let mut r = right;
    for rung in rungs.iter().skip(k).rev() {
        r = r.after(rung, asymmetry(rung));
    }
    (l, r)
}
