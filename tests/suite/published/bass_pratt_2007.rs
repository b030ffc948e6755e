//! Spins lost in an interface.
//!
//! Source: Bass and Pratt, J. Phys.: Condens. Matter 19, 183201 (2007) (abstract read: an electron that crosses
//! flips with probability 1 − e^(−δ)). The closed form for one contact is derived; all rows are derived.

use injectance::models::ladder::{End, Stack, State};

use super::rows;
use crate::bare::{
    Fixed, injected, interface, layer, polarization, stack, thick_ferromagnet, thick_normal,
};
use crate::compare::{close, close_at};

fn contact(beta: f64, r_f: f64, r_n: f64, gamma: f64, r_b: f64, delta: f64) -> Stack {
    stack(
        thick_ferromagnet(r_f, beta, Fixed),
        &[interface(r_b, gamma, delta, Fixed)],
        thick_normal(r_n),
    )
}

/// p on the normal side of F|I(δ)|N.
fn closed_form(beta: f64, r_f: f64, r_n: f64, gamma: f64, r_b: f64, delta: f64) -> f64 {
    let r_i = r_b / delta;
    // C − 1 with cosh δ − 1 = 2 sinh²(δ/2), so that a small δ keeps its digits.
    let half = (0.5 * delta).sinh();
    let c_less_one = 2.0 * half * half + r_i / r_f * delta.sinh();
    let s = delta.sinh() + r_i / r_f * delta.cosh();
    r_i * (beta + gamma * c_less_one) / (r_n * s + r_i * (1.0 + c_less_one))
}

#[test]
fn one_contact_with_loss() {
    for row in rows("valet_fert_1993.spin_memory_loss") {
        let (beta, r_f, r_n) = (row.input("beta"), row.input("r_F"), row.input("r_N"));
        let (gamma, r_b, delta) = (row.input("gamma"), row.input("r_b"), row.input("delta"));
        row.check(injected(&contact(beta, r_f, r_n, gamma, r_b, delta)), 1e-13);
    }
    let mut compared = 0;
    for beta in [-0.5, 0.0, 0.73] {
        for gamma in [-0.4, 0.7, 0.99] {
            for r_b in [1e-16, 5e-16, 1e-12, 4e-9] {
                for delta in [1e-6, 0.01, 0.25, 0.9, 3.0, 12.0] {
                    for r_n in [6e-15, 4e-9] {
                        let got = injected(&contact(beta, 2e-15, r_n, gamma, r_b, delta));
                        let want = closed_form(beta, 2e-15, r_n, gamma, r_b, delta);
                        close_at(
                            &format!("β {beta} γ {gamma} r_b* {r_b} δ {delta}"),
                            got,
                            want,
                            1e-12,
                        );
                        compared += 1;
                    }
                }
            }
        }
    }
    assert_eq!(compared, 432);
}

#[test]
fn no_loss_is_the_limit_of_small_loss() {
    let (beta, r_f, r_n, gamma, r_b) = (0.73, 2e-15, 6e-15, 0.7, 5e-16);
    let none = injected(&contact(beta, r_f, r_n, gamma, r_b, 0.0));
    close(none, (beta * r_f + gamma * r_b) / (r_f + r_n + r_b), 1e-14);
    let mut last = f64::INFINITY;
    for exponent in [2, 4, 6, 8] {
        let delta = 10_f64.powi(-exponent);
        let off = none - injected(&contact(beta, r_f, r_n, gamma, r_b, delta));
        // The loss is of first order in δ; its size is set by the resistances, here below δ.
        assert!(
            off > 0.0 && off < delta && off < last,
            "δ = {delta:e}: {off:e}"
        );
        last = off;
    }
}

#[test]
fn probability_of_a_flip() {
    // 1 − e^(−δ): the spin current that a lossy interface lets through to a perfect sink, without any source
    // of its own, is sech δ of what enters, which for δ ≫ 1 is 2e^(−δ) (two-way diffusion; the fictitious
    // layer, not the flip of one crossing). Only the definition of δ is tested against the row.
    for row in rows("valet_fert_1993.flip_probability") {
        row.check(-(-row.input("delta")).exp_m1(), 1e-14);
    }
    for delta in [0.1, 0.9, 3.0, 20.0] {
        let (r_f, beta): (f64, f64) = (2e-15, 0.73);
        let device = stack(
            thick_ferromagnet(r_f, beta, Fixed),
            &[
                interface(5e-16, 0.0, delta, Fixed),
                layer(1e-8, 0.0, 1e-6, 1e-30, Fixed),
            ],
            End::SpinSink,
        );
        let (before, after) = (
            polarization(&device, 0, State::Parallel),
            polarization(&device, 1, State::Parallel),
        );
        close(after / before, 1.0 / delta.cosh(), 1e-13);
    }
}
