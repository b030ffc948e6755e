//! Stacks from bare SI numbers, for tests that sweep parameters.

#![allow(clippy::unwrap_used)]

use injectance::models::ladder::{
    Element, End, Interface, Layer, Magnetization, Solution, Stack, State,
};
use injectance::quantities::dimensions::{ElectricalResistivity, Measured};
use injectance::quantities::meanings::{
    BulkAsymmetry, InterfaceAsymmetry, InterfaceSpinResistance, SpinDiffusionLength,
    SpinMemoryLoss, Thickness,
};

pub use injectance::models::ladder::Magnetization::{Fixed, FixedOpposite, Free};

/// ρ in Ω m, β, λ in m, t in m.
pub fn medium(rho: f64, beta: f64, lambda: f64, t: f64, magnetization: Magnetization) -> Layer {
    Layer {
        resistivity: ElectricalResistivity::from_si(rho),
        asymmetry: BulkAsymmetry::from_si(beta),
        length: SpinDiffusionLength::from_si(lambda),
        thickness: Thickness::from_si(t),
        magnetization,
    }
}

/// A layer element.
pub fn layer(rho: f64, beta: f64, lambda: f64, t: f64, magnetization: Magnetization) -> Element {
    Element::Layer(medium(rho, beta, lambda, t, magnetization))
}

/// A normal layer of spin resistance `r_n` in Ω m² and reduced thickness T = t/λ.
pub fn normal(r_n: f64, lambda: f64, reduced: f64) -> Element {
    layer(r_n / lambda, 0.0, lambda, reduced * lambda, Fixed)
}

/// An interface element: r_b* in Ω m², γ, δ.
pub fn interface(r_b: f64, gamma: f64, delta: f64, magnetization: Magnetization) -> Element {
    Element::Interface(Interface {
        spin_resistance: InterfaceSpinResistance::from_si(r_b),
        asymmetry: InterfaceAsymmetry::from_si(gamma),
        memory_loss: SpinMemoryLoss::from_si(delta),
        magnetization,
    })
}

/// A semi-infinite ferromagnet with spin resistance `r_f` and asymmetry β; adds one λ to RA.
pub fn thick_ferromagnet(r_f: f64, beta: f64, magnetization: Magnetization) -> End {
    let lambda = 6e-8;
    let rho = r_f * (1.0 - beta) * (1.0 + beta) / lambda;
    End::SemiInfinite(medium(rho, beta, lambda, f64::INFINITY, magnetization))
}

/// A semi-infinite normal medium with spin resistance `r_n`; adds one λ to RA.
pub fn thick_normal(r_n: f64) -> End {
    End::SemiInfinite(medium(r_n / 2e-6, 0.0, 2e-6, f64::INFINITY, Fixed))
}

/// A stack.
pub fn stack(left: End, elements: &[Element], right: End) -> Stack {
    Stack::new(left, elements, right).unwrap()
}

/// One ferromagnetic contact to a thick normal medium; the last face is the normal side.
pub fn single_contact(beta: f64, r_f: f64, r_n: f64, gamma: f64, r_b: f64) -> Stack {
    stack(
        thick_ferromagnet(r_f, beta, Fixed),
        &[interface(r_b, gamma, 0.0, Fixed)],
        thick_normal(r_n),
    )
}

/// F/I/N/I/F with thick, equal magnets of which the right one flips.
pub fn spin_valve(beta: f64, r_f: f64, r_n: f64, gamma: f64, r_b: f64, reduced: f64) -> Stack {
    stack(
        thick_ferromagnet(r_f, beta, Fixed),
        &[
            interface(r_b, gamma, 0.0, Fixed),
            normal(r_n, 2e-6, reduced),
            interface(r_b, gamma, 0.0, Free),
        ],
        thick_ferromagnet(r_f, beta, Free),
    )
}

/// p at face `k` in the given state.
pub fn polarization(stack: &Stack, k: usize, state: State) -> f64 {
    stack.solve(state).faces[k].polarization.si()
}

/// p at the last face with all magnets parallel.
pub fn injected(stack: &Stack) -> f64 {
    polarization(stack, stack.len(), State::Parallel)
}

/// J/j at all faces.
pub fn currents(solution: &Solution) -> Vec<f64> {
    solution.faces.iter().map(|f| f.polarization.si()).collect()
}

/// u/j at all faces, Ω m².
pub fn accumulations(solution: &Solution) -> Vec<f64> {
    solution
        .faces
        .iter()
        .map(|f| f.accumulation_per_current_density.si())
        .collect()
}

/// RA in Ω m².
pub fn resistance(stack: &Stack, state: State) -> f64 {
    stack.solve(state).resistance_area.si()
}

/// ΔRA in Ω m².
pub fn change(stack: &Stack) -> f64 {
    stack.resistance_area_change().si()
}
