//! The spin ladder: current, spin current and spin accumulation through any one-dimensional collinear
//! stack of ferromagnets, normal layers and interfaces.
//!
//! # Law
//! In each layer u'' = u/λ² and J = βj − (λ/r)u'; at an interface J is continuous and u drops by
//! r_b*(J − γj); r = ρλ/(1 − β²). A reversed magnetization turns the sign of β and γ. An interface with
//! spin-memory loss δ is a layer of reduced thickness δ, spin resistance r_b*/δ and asymmetry γ.
//!
//! | symbol | meaning | unit |
//! |---|---|---|
//! | j, J | charge current density, spin current density J = j↑ − j↓ | A/m² |
//! | p = J/j | current spin polarization | 1 |
//! | u = (V↑ − V↓)/2 | spin accumulation; the full splitting is Δμ = 2eu | V |
//! | ρ, β, λ | resistivity, bulk asymmetry, spin diffusion length | Ω m, 1, m |
//! | r_b*, γ, δ | interface spin resistance, interface asymmetry, spin-memory loss | Ω m², 1, 1 |
//!
//! # Holds when
//! Transport is diffusive and linear, one-dimensional along the stack, magnetizations collinear; each
//! layer is thicker than the mean free path and λ longer than it; |eu| stays below kT or the Fermi energy.
//! [`super::validity`] says when a given stack leaves this range.
//!
//! # Source
//! Valet and Fert, Phys. Rev. B 48, 7099 (1993) [abstract read, equations recalled and confirmed against
//! an independent boundary-value solution]; Fert and Jaffrès, Phys. Rev. B 64, 184420 (2001) for tunnel
//! contacts to semiconductors [abstract read]; spin-memory loss as in Bass and Pratt, J. Phys.: Condens.
//! Matter 19, 183201 (2007) [abstract read].
//!
//! # Accuracy
//! J and u to 1e-12 of the sum of the absolute contributions of all sources; RA to 1e-12 of itself; ΔRA to
//! 1e-12 of itself unless its own terms cancel. Checked in tests/suite/outside/stacks.rs against 60-digit
//! solutions.

use crate::quantities::dimensions::{ElectricalResistivity, Measured, ResistanceTimesArea};
use crate::quantities::meanings::{
    BulkAsymmetry, CurrentSpinPolarization, InterfaceAsymmetry, InterfaceSpinResistance,
    Magnetoresistance, ResistanceAreaChange, ResistanceAreaProduct, SpinDiffusionLength,
    SpinMemoryLoss, SpinResistance, Thickness,
};

use super::sweep::{At, Passed, Rung, coefficients, parts_at, sweep};

/// How a magnetization stands, and whether it turns between the two magnetic states of the stack.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Magnetization {
    /// Along the reference direction in both states. Normal layers count as this.
    Fixed,
    /// Against the reference direction in both states.
    FixedOpposite,
    /// Along it in the parallel state, against it in the antiparallel state.
    Free,
}

impl Magnetization {
    fn sign(self) -> f64 {
        // A look-up, not a branch: see `Stack::weighed`.
        [1.0, -1.0, 1.0][self as usize]
    }
}

/// The two magnetic states.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum State {
    /// Free magnetizations along the reference direction.
    Parallel,
    /// Free magnetizations against it.
    Antiparallel,
}

/// A ferromagnetic or (β = 0) normal layer.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Layer {
    /// ρ of the layer as a whole, both channels in parallel.
    pub resistivity: ElectricalResistivity,
    /// β; zero for a normal layer.
    pub asymmetry: BulkAsymmetry,
    /// λ.
    pub length: SpinDiffusionLength,
    /// t.
    pub thickness: Thickness,
    /// How it is magnetized.
    pub magnetization: Magnetization,
}

impl Layer {
    /// r = ρλ/(1 − β²).
    #[must_use]
    pub fn spin_resistance(&self) -> SpinResistance {
        SpinResistance::of_ferromagnet(self.resistivity, self.length, self.asymmetry)
    }
}

/// An interface between two layers.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Interface {
    /// r_b*.
    pub spin_resistance: InterfaceSpinResistance,
    /// γ.
    pub asymmetry: InterfaceAsymmetry,
    /// δ; zero for none.
    pub memory_loss: SpinMemoryLoss,
    /// Magnetization of the ferromagnet it flips with.
    pub magnetization: Magnetization,
}

/// One element of a stack.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum Element {
    /// A layer.
    Layer(Layer),
    /// An interface.
    Interface(Interface),
}

/// What lies beyond the outermost element on one side.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum End {
    /// A medium many spin diffusion lengths thick. Its `thickness` is what it adds to RA: ρt, or ρλ where
    /// the thickness is infinite.
    SemiInfinite(Layer),
    /// u = 0: spins relax at once.
    SpinSink,
    /// J = 0: no spin current passes.
    Reflecting,
    /// The outermost layer is a strip that carries the current sideways, J = βj at its far face; its own
    /// series resistance ρt is not counted in RA, only β times its whole accumulation down to u = 0.
    FedInPlane,
}

/// Why a stack cannot be solved.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum StackFault {
    /// There is no layer between the two ends that could relax a spin.
    NoLayer,
    /// An end fed in its plane needs a layer, not an interface, as the outermost element.
    FedInterface,
}

/// A stack from left to right; the charge current flows to the right.
#[derive(Clone, PartialEq, Debug)]
pub struct Stack {
    left: End,
    right: End,
    rungs: Vec<Rung>,
}

/// Spin current and spin accumulation at one face.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Face {
    /// p = J/j.
    pub polarization: CurrentSpinPolarization,
    /// u/j, Ω m²: times j it is the spin accumulation.
    pub accumulation_per_current_density: ResistanceTimesArea,
    /// (V↑ + V↓)/2j at this face, Ω m²; zero at the right end. V↑,↓ = this ± the accumulation.
    pub potential_per_current_density: ResistanceTimesArea,
}

/// The solution in one magnetic state.
#[derive(Clone, PartialEq, Debug)]
pub struct Solution {
    /// At the left end, between consecutive elements, at the right end: one more than there are elements.
    pub faces: Vec<Face>,
    /// Resistance-area product of the whole stack.
    pub resistance_area: ResistanceAreaProduct,
}

/// What the two sides of a face look like to a spin.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Sides {
    /// Spin impedance of everything to the left, Ω m²; infinite if nothing there takes up spin.
    pub left_impedance: f64,
    /// Spin source of everything to the left per current density, Ω m².
    pub left_source: f64,
    /// Spin impedance of everything to the right, Ω m².
    pub right_impedance: f64,
    /// Spin source of everything to the right per current density, Ω m².
    pub right_source: f64,
}

fn rung_of(element: &Element) -> Rung {
    let (coefficients, resistance, asymmetry, magnetization) = match element {
        Element::Layer(layer) => {
            let t = layer.thickness.si() / layer.length.si();
            (
                coefficients(layer.spin_resistance().si(), t),
                layer.resistivity.si() * layer.thickness.si(),
                layer.asymmetry.si(),
                layer.magnetization,
            )
        }
        Element::Interface(interface) => {
            let r_b = interface.spin_resistance.si();
            let delta = interface.memory_loss.si();
            (
                if delta > 0.0 && r_b > 0.0 {
                    coefficients(r_b / delta, delta)
                } else {
                    [r_b, 0.0, 1.0, 0.5 * r_b]
                },
                interface
                    .spin_resistance
                    .resistance_area(interface.asymmetry)
                    .si(),
                interface.asymmetry.si(),
                interface.magnetization,
            )
        }
    };
    Rung::new(
        coefficients,
        resistance,
        asymmetry * magnetization.sign(),
        magnetization == Magnetization::Free,
    )
}

impl Stack {
    /// Builds a stack.
    ///
    /// # Errors
    /// [`StackFault`] when the ends and elements do not make a solvable problem.
    pub fn new(left: End, elements: &[Element], right: End) -> Result<Self, StackFault> {
        let closed = |end: &End| !matches!(end, End::SemiInfinite(_));
        let has_layer = elements.iter().any(|e| matches!(e, Element::Layer(_)));
        if closed(&left) && closed(&right) && !has_layer {
            return Err(StackFault::NoLayer);
        }
        for (end, outermost) in [(&left, elements.first()), (&right, elements.last())] {
            if matches!(end, End::FedInPlane) && !matches!(outermost, Some(Element::Layer(_))) {
                return Err(StackFault::FedInterface);
            }
        }
        let rungs = elements.iter().map(rung_of).collect();
        Ok(Self { left, right, rungs })
    }

    /// Number of elements.
    #[must_use]
    pub fn len(&self) -> usize {
        self.rungs.len()
    }

    /// Whether there is no element between the ends.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.rungs.is_empty()
    }

    /// Ratio form of an end whose source is weighed by `weight(asymmetry, turns)`.
    fn end(&self, left: bool, weight: impl Fn(f64, bool) -> f64) -> Passed {
        let asymmetry = self.outer_asymmetry(left, weight);
        let (num, den, src) = match if left { &self.left } else { &self.right } {
            End::SemiInfinite(layer) => {
                let r = layer.spin_resistance().si();
                (r, 1.0, asymmetry * r)
            }
            End::SpinSink => (0.0, 1.0, 0.0),
            End::Reflecting | End::FedInPlane => (1.0, 0.0, asymmetry),
        };
        Passed { num, den, src }
    }

    /// Faces of the stack with the sources weighed by `drive`, and the sum over everything of what `ohmic`
    /// makes of its resistance plus (u_right − u_left)/j weighed by `read`; the potentials are that sum from
    /// the right end on. A weight is a factor for what stays and one for what turns.
    fn swept(&self, drive: [f64; 2], read: [f64; 2], ohmic: impl Fn(f64) -> f64) -> (Vec<At>, f64) {
        // Turned in sign by the factors: turned in the loop, the compiler would turn it back, which costs
        // what `Passed::after` tells.
        let (driven, driven_against) = (Self::weighed(drive), Self::weighed(drive.map(|f| -f)));
        let (read, read_against) = (Self::weighed(read), Self::weighed(read.map(|f| -f)));
        let mut ends = [self.end(true, driven), self.end(false, driven)];
        let driven = |rung: &Rung| driven(rung.asymmetry, rung.turns());
        let against = |rung: &Rung| driven_against(rung.asymmetry, rung.turns());
        let across = |rung: &Rung, against: f64, left: At, right: At| {
            read_against(rung.asymmetry, rung.turns()) * rung.fall(against, left, right)
        };
        // At the far face of a strip fed in its plane u' = 0, so that u there is u of the near face times
        // sech(t/λ); what a sweep gives there is the difference of two terms of the size of βr·coth(t/λ).
        let far = |rung: &Rung, near: At| At::new(driven(rung), near.accumulation * rung.pass);
        let mut between = self.rungs.as_slice();
        let mut faces = Vec::with_capacity(between.len() + 1);
        let (fed_left, fed_right) = (self.strip(true), self.strip(false));
        if let (Some(one), Some(_), [_]) = (fed_left, fed_right, between) {
            // u' = 0 at both faces of one layer leaves no accumulation at all.
            faces.resize(2, At::new(driven(one), 0.0));
            return (faces, 0.0);
        }
        if let Some(strip) = fed_left {
            // Told last, from the face beside it.
            faces.push(At::new(0.0, 0.0));
            ends[0] = ends[0].after(strip, against(strip));
            between = between.get(1..).unwrap_or_default();
        }
        if let Some(strip) = fed_right {
            ends[1] = ends[1].after(strip, against(strip));
            between = between.split_last().map_or(between, |(_, rest)| rest);
        }
        let [out_left, out_right] = [true, false].map(|left| self.outer_asymmetry(left, read));
        let mut outermost = None;
        sweep(
            &mut faces,
            ends[0],
            ends[1],
            between,
            against,
            |near| match fed_right {
                None => ohmic(Self::outer_resistance(&self.right)) - out_right * near.accumulation,
                Some(strip) => {
                    let mut end = far(strip, near);
                    end.potential = -out_right * end.accumulation;
                    outermost = Some(end);
                    end.potential + across(strip, against(strip), near, end)
                }
            },
            |rung, against, left, right| {
                ohmic(rung.resistance()) + across(rung, against, left, right)
            },
        );
        faces.extend(outermost);
        if let (Some(strip), [end, near, ..]) = (fed_left, faces.as_mut_slice()) {
            *end = far(strip, *near);
            end.potential = near.potential + across(strip, against(strip), *end, *near);
        }
        let sum = faces.first().map_or(0.0, |end| {
            ohmic(Self::outer_resistance(&self.left)) + out_left * end.accumulation + end.potential
        });
        (faces, sum)
    }

    /// The asymmetry of what lies at an end and takes part in RA beyond the outermost face: the end medium
    /// or the strip fed in its plane.
    fn outer_asymmetry(&self, left: bool, weight: impl Fn(f64, bool) -> f64) -> f64 {
        match if left { &self.left } else { &self.right } {
            End::SemiInfinite(layer) => weight(
                layer.asymmetry.si() * layer.magnetization.sign(),
                layer.magnetization == Magnetization::Free,
            ),
            End::FedInPlane => self
                .strip(left)
                .map_or(0.0, |rung| weight(rung.asymmetry, rung.turns())),
            End::SpinSink | End::Reflecting => 0.0,
        }
    }

    /// The weight of what stays and of what turns.
    fn weight(state: State) -> [f64; 2] {
        match state {
            State::Parallel => [1.0, 1.0],
            State::Antiparallel => [1.0, -1.0],
        }
    }

    /// Weighs an asymmetry by the first factor if it stays and by the second if it turns. A look-up, not a
    /// branch: in a long stack nobody can guess which magnets turn.
    fn weighed(factors: [f64; 2]) -> impl Fn(f64, bool) -> f64 + Copy {
        move |asymmetry, turned| asymmetry * factors[usize::from(turned)]
    }

    /// Solves the stack in one magnetic state.
    ///
    /// RA sums ρt + β(u_right − u_left)/j over the layers and r_b*(1 − γp) over the interfaces, which is
    /// r_b*(1 − γ²) + γ(u_right − u_left)/j; the end media and strips fed in their plane enter down to u = 0.
    #[must_use]
    pub fn solve(&self, state: State) -> Solution {
        let weight = Self::weight(state);
        let (faces, sum) = self.swept(weight, weight, |resistance| resistance);
        let face = |at: At| Face {
            polarization: CurrentSpinPolarization::from_si(at.current),
            accumulation_per_current_density: ResistanceTimesArea::from_si(at.accumulation),
            potential_per_current_density: ResistanceTimesArea::from_si(at.potential),
        };
        Solution {
            faces: faces.into_iter().map(face).collect(),
            resistance_area: ResistanceAreaProduct::from_si(sum),
        }
    }

    /// The outermost layer on one side if it is fed in its plane.
    fn strip(&self, left: bool) -> Option<&Rung> {
        let (end, rung) = if left {
            (&self.left, self.rungs.first())
        } else {
            (&self.right, self.rungs.last())
        };
        if matches!(end, End::FedInPlane) {
            rung
        } else {
            None
        }
    }

    /// What an end medium adds to RA besides its accumulation.
    fn outer_resistance(end: &End) -> f64 {
        match end {
            End::SemiInfinite(layer) => {
                let t = layer.thickness.si();
                let length = if t.is_finite() { t } else { layer.length.si() };
                layer.resistivity.si() * length
            }
            _ => 0.0,
        }
    }

    /// ΔRA = RA(antiparallel) − RA(parallel), from the cross term.
    ///
    /// Only the sources of the magnets that flip are driven and the others read their effect:
    /// ΔRA = −4 Σ over what does not flip of β(u_right − u_left)/j (γ for an interface), the ends included.
    /// The two resistances, which agree in most of their digits, are never subtracted.
    #[must_use]
    pub fn resistance_area_change(&self) -> ResistanceAreaChange {
        // What reads is not driven, and what is driven does not read.
        let (_, sum) = self.swept([0.0, 1.0], [1.0, 0.0], |_| 0.0);
        ResistanceAreaChange::from_si(-4.0 * sum)
    }

    /// Magnetoresistance ΔRA/RA(parallel).
    #[must_use]
    pub fn magnetoresistance(&self) -> Magnetoresistance {
        let parallel = self.solve(State::Parallel).resistance_area.si();
        Magnetoresistance::from_si(self.resistance_area_change().si() / parallel)
    }

    /// What both sides of face `k` look like to a spin: the working behind
    /// p = (E_left + E_right)/(Z_left + Z_right).
    #[must_use]
    pub fn sides(&self, k: usize, state: State) -> Sides {
        let weight = Self::weighed(Self::weight(state));
        let (left, right) = (self.end(true, weight), self.end(false, weight));
        let (l, r) = parts_at(left, right, &self.rungs, k.min(self.rungs.len()), |rung| {
            -weight(rung.asymmetry, rung.turns())
        });
        // A closed end has d = 0: its impedance is infinite and it offers no source.
        let ratio = |n: f64, d: f64, closed: f64| if d > 0.0 { n / d } else { closed };
        Sides {
            left_impedance: ratio(l.num, l.den, f64::INFINITY),
            left_source: ratio(l.src, l.den, 0.0),
            right_impedance: ratio(r.num, r.den, f64::INFINITY),
            right_source: ratio(r.src, r.den, 0.0),
        }
    }

    /// Spin current, accumulation and mean potential inside element `k` at `fraction` of its thickness,
    /// between the two faces of `solution`; on an interface without loss, the nearer face.
    #[must_use]
    pub fn inside(
        &self,
        solution: &Solution,
        k: usize,
        fraction: f64,
        state: State,
    ) -> Option<Face> {
        let (left, right) = (solution.faces.get(k)?, solution.faces.get(k + 1)?);
        let rung = self.rungs.get(k)?;
        if rung.shunt <= 0.0 {
            return Some(if fraction < 0.5 { *left } else { *right });
        }
        let x = fraction.clamp(0.0, 1.0);
        let t = rung.reduced();
        // sinh(aT)/sinh(T): what a face contributes at the distance (1 − a)t from it.
        let part = |a: f64| {
            if a <= 0.0 {
                0.0
            } else if a < 1.0 && t > 0.0 {
                ((a - 1.0) * t).exp() * (-2.0 * a * t).exp_m1() / (-2.0 * t).exp_m1()
            } else {
                a
            }
        };
        let (wl, wr) = (part(1.0 - x), part(x));
        let b = Self::weighed(Self::weight(state))(rung.asymmetry, rung.turns());
        let (pl, pr) = (left.polarization.si(), right.polarization.si());
        let (ul, ur) = (
            left.accumulation_per_current_density.si(),
            right.accumulation_per_current_density.si(),
        );
        let u = ul * wl + ur * wr;
        let strip = (k == 0 && self.strip(true).is_some())
            || (k + 1 == self.rungs.len() && self.strip(false).is_some());
        let ohmic = if strip { 0.0 } else { rung.resistance() };
        let potential = left.potential_per_current_density.si() - ohmic * x - b * (u - ul);
        Some(Face {
            polarization: CurrentSpinPolarization::from_si(b + (pl - b) * wl + (pr - b) * wr),
            accumulation_per_current_density: ResistanceTimesArea::from_si(u),
            potential_per_current_density: ResistanceTimesArea::from_si(potential),
        })
    }
}
