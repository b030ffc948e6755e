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

use crate::numerics::hyperbolic::reduced;
use crate::quantities::dimensions::{ElectricalResistivity, Measured, ResistanceTimesArea};
use crate::quantities::meanings::{
    BulkAsymmetry, CurrentSpinPolarization, InterfaceAsymmetry, InterfaceSpinResistance,
    Magnetoresistance, ResistanceAreaChange, ResistanceAreaProduct, SpinDiffusionLength,
    SpinMemoryLoss, SpinResistance, Thickness,
};

use super::sweep::{At, Passed, Rung, parts_at, sweep};

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
    match element {
        Element::Layer(layer) => {
            let t = layer.thickness.si() / layer.length.si();
            let r = layer.spin_resistance().si();
            Rung {
                resistance: layer.resistivity.si() * layer.thickness.si(),
                ..layer_rung(r, t, layer.asymmetry.si(), layer.magnetization)
            }
        }
        Element::Interface(interface) => {
            let r_b = interface.spin_resistance.si();
            let gamma = interface.asymmetry.si();
            let delta = interface.memory_loss.si();
            let rung = if delta > 0.0 && r_b > 0.0 {
                layer_rung(r_b / delta, delta, gamma, interface.magnetization)
            } else {
                Rung {
                    series: r_b,
                    shunt: 0.0,
                    pass: 1.0,
                    reach: 0.5 * r_b,
                    ..layer_rung(1.0, 0.0, gamma, interface.magnetization)
                }
            };
            Rung {
                resistance: interface
                    .spin_resistance
                    .resistance_area(interface.asymmetry)
                    .si(),
                reduced: delta,
                ..rung
            }
        }
    }
}

/// Rung of a layer of spin resistance `r` and reduced thickness `t`, its resistance left 0.
#[inline]
fn layer_rung(r: f64, t: f64, asymmetry: f64, magnetization: Magnetization) -> Rung {
    let f = reduced(t);
    Rung {
        series: r * f.tanh,
        shunt: f.tanh * r.recip(),
        pass: f.sech,
        reach: r * f.half_tanh,
        asymmetry: asymmetry * magnetization.sign(),
        turns: magnetization == Magnetization::Free,
        resistance: 0.0,
        reduced: t,
    }
}

/// (u_right − u_left)/j over a rung driven with asymmetry `own`.
///
/// The same number has two forms: the difference itself, and reach·(2·own − p_left − p_right), which is what
/// the diffusion equation makes of it. The first loses digits where u hardly changes (a layer much thinner
/// than λ), the second where the current already has the polarization of the layer and `reach` is large
/// (β near 1). Each subtracts at the size of its terms, so the form with the smaller terms is taken; near a
/// tie it is the second, because u, a product with a resistance, runs out of exponent before J does.
fn rise(rung: &Rung, own: f64, left: At, right: At) -> f64 {
    let by_current = rung.reach * (2.0 * own.abs() + left.current.abs() + right.current.abs());
    let by_accumulation = left.accumulation.abs() + right.accumulation.abs();
    let from_current = rung.reach * ((own - left.current) + (own - right.current));
    let from_accumulation = right.accumulation - left.accumulation;
    if by_current <= 4.0 * by_accumulation {
        from_current
    } else {
        from_accumulation
    }
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
        let mut stack = Self { left, right, rungs };
        for k in [stack.fed(true), stack.fed(false)].into_iter().flatten() {
            stack.rungs[k].resistance = 0.0;
        }
        Ok(stack)
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
    fn end(
        &self,
        end: &End,
        outermost: Option<usize>,
        weight: impl Fn(f64, bool) -> f64,
    ) -> Passed {
        match end {
            End::SemiInfinite(layer) => {
                let r = layer.spin_resistance().si();
                let turns = layer.magnetization == Magnetization::Free;
                let beta = weight(layer.asymmetry.si() * layer.magnetization.sign(), turns);
                Passed {
                    num: r,
                    den: 1.0,
                    src: beta * r,
                }
            }
            End::SpinSink => Passed {
                num: 0.0,
                den: 1.0,
                src: 0.0,
            },
            End::Reflecting => Passed {
                num: 1.0,
                den: 0.0,
                src: 0.0,
            },
            End::FedInPlane => {
                let src = outermost.map_or(0.0, |i| {
                    weight(self.rungs[i].asymmetry, self.rungs[i].turns)
                });
                Passed {
                    num: 1.0,
                    den: 0.0,
                    src,
                }
            }
        }
    }

    /// Faces of the stack with the sources weighed by `weight(asymmetry, turns)`.
    fn driven(&self, weight: impl Fn(f64, bool) -> f64 + Copy) -> Vec<At> {
        let last = self.rungs.len().checked_sub(1);
        let left = self.end(&self.left, last.map(|_| 0), weight);
        let right = self.end(&self.right, last, weight);
        let mut faces = sweep(left, right, &self.rungs, |rung| {
            weight(rung.asymmetry, rung.turns)
        });
        // At the far face of a strip fed in its plane u' = 0, so that u there is u of the near face times
        // sech(t/λ); what the sweep gives there is the difference of two terms of the size of βr·coth(t/λ).
        for (fed, outer, inner) in [
            (self.fed(true), 0, 1),
            (
                self.fed(false),
                self.rungs.len(),
                self.rungs.len().saturating_sub(1),
            ),
        ] {
            if let Some(k) = fed {
                faces[outer] = At {
                    current: weight(self.rungs[k].asymmetry, self.rungs[k].turns),
                    accumulation: faces[inner].accumulation * self.rungs[k].pass,
                    potential: 0.0,
                };
            }
        }
        if self.rungs.len() == 1 && self.fed(true).is_some() && self.fed(false).is_some() {
            // u' = 0 at both faces of one layer leaves no accumulation at all.
            faces.iter_mut().for_each(|face| face.accumulation = 0.0);
        }
        faces
    }

    /// The asymmetry of what lies at an end and takes part in RA beyond the outermost face: the end medium
    /// or the strip fed in its plane.
    fn outer_asymmetry(&self, left: bool, weight: impl Fn(f64, bool) -> f64) -> f64 {
        match if left { &self.left } else { &self.right } {
            End::SemiInfinite(layer) => weight(
                layer.asymmetry.si() * layer.magnetization.sign(),
                layer.magnetization == Magnetization::Free,
            ),
            End::FedInPlane => self.fed(left).map_or(0.0, |k| {
                weight(self.rungs[k].asymmetry, self.rungs[k].turns)
            }),
            End::SpinSink | End::Reflecting => 0.0,
        }
    }

    fn weight(state: State) -> impl Fn(f64, bool) -> f64 + Copy {
        match state {
            State::Parallel => Self::weighed(1.0, 1.0),
            State::Antiparallel => Self::weighed(1.0, -1.0),
        }
    }

    /// Weighs an asymmetry by one factor if it stays and by another if it turns. A look-up, not a branch:
    /// in a long stack nobody can guess which magnets turn.
    fn weighed(stays: f64, turns: f64) -> impl Fn(f64, bool) -> f64 + Copy {
        let factors = [stays, turns];
        move |asymmetry, turned| asymmetry * factors[usize::from(turned)]
    }

    /// Solves the stack in one magnetic state.
    ///
    /// RA sums ρt + β(u_right − u_left)/j over the layers and r_b*(1 − γp) over the interfaces, which is
    /// r_b*(1 − γ²) + γ(u_right − u_left)/j; the end media and strips fed in their plane enter down to u = 0.
    #[must_use]
    pub fn solve(&self, state: State) -> Solution {
        let weight = Self::weight(state);
        let mut faces = self.driven(weight);
        let first = faces.first().map_or(0.0, |f| f.accumulation);
        let last = faces.last().map_or(0.0, |f| f.accumulation);
        let outer_left =
            Self::outer_resistance(&self.left) + self.outer_asymmetry(true, weight) * first;
        let outer_right =
            Self::outer_resistance(&self.right) - self.outer_asymmetry(false, weight) * last;
        let mut potential = outer_right;
        let mut right: Option<At> = None;
        for (k, at) in faces.iter_mut().enumerate().rev() {
            if let (Some(rung), Some(right)) = (self.rungs.get(k), right) {
                let a = weight(rung.asymmetry, rung.turns);
                potential += rung.resistance + a * rise(rung, a, *at, right);
            }
            at.potential = potential;
            right = Some(*at);
        }
        let face = |at: At| Face {
            polarization: CurrentSpinPolarization::from_si(at.current),
            accumulation_per_current_density: ResistanceTimesArea::from_si(at.accumulation),
            potential_per_current_density: ResistanceTimesArea::from_si(at.potential),
        };
        Solution {
            faces: faces.into_iter().map(face).collect(),
            resistance_area: ResistanceAreaProduct::from_si(potential + outer_left),
        }
    }

    fn fed(&self, left: bool) -> Option<usize> {
        let (end, index) = if left {
            (&self.left, self.rungs.len().checked_sub(1).map(|_| 0))
        } else {
            (&self.right, self.rungs.len().checked_sub(1))
        };
        if matches!(end, End::FedInPlane) {
            index
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
        let (drive, read) = (Self::weighed(0.0, 1.0), Self::weighed(1.0, 0.0));
        let faces = self.driven(drive);
        let first = faces.first().map_or(0.0, |f| f.accumulation);
        let last = faces.last().map_or(0.0, |f| f.accumulation);
        let mut sum =
            self.outer_asymmetry(true, read) * first - self.outer_asymmetry(false, read) * last;
        for (i, rung) in self.rungs.iter().enumerate() {
            // What reads is not driven: its own source is 0 here.
            sum += read(rung.asymmetry, rung.turns) * rise(rung, 0.0, faces[i], faces[i + 1]);
        }
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
        let weight = Self::weight(state);
        let last = self.rungs.len().checked_sub(1);
        let left = self.end(&self.left, last.map(|_| 0), weight);
        let right = self.end(&self.right, last, weight);
        let (l, r) = parts_at(left, right, &self.rungs, k.min(self.rungs.len()), |rung| {
            weight(rung.asymmetry, rung.turns)
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
        let t = rung.reduced;
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
        let b = Self::weight(state)(rung.asymmetry, rung.turns);
        let (pl, pr) = (left.polarization.si(), right.polarization.si());
        let (ul, ur) = (
            left.accumulation_per_current_density.si(),
            right.accumulation_per_current_density.si(),
        );
        let u = ul * wl + ur * wr;
        let potential =
            left.potential_per_current_density.si() - rung.resistance * x - b * (u - ul);
        Some(Face {
            polarization: CurrentSpinPolarization::from_si(b + (pl - b) * wl + (pr - b) * wr),
            accumulation_per_current_density: ResistanceTimesArea::from_si(u),
            potential_per_current_density: ResistanceTimesArea::from_si(potential),
        })
    }
}
