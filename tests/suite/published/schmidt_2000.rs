//! Ohmic contacts: the conductivity mismatch.
//!
//! Source: Schmidt, Ferrand, Molenkamp, Filip, van Wees, Phys. Rev. B 62, R4790 (2000). The abstract was read
//! (`< 0.1 %` for a typical device, a resistance change up to quadratically smaller); the formulas are
//! recalled and were confirmed against two-channel matching. All rows are derived.

use injectance::models::ladder::{Stack, State};
use injectance::numerics::root::bracketed_root;
use injectance::quantities::dimensions::Measured;

use super::rows;
use crate::bare::{
    Fixed, Free, change, currents, injected, layer, normal, polarization, resistance, stack,
    thick_ferromagnet, thick_normal,
};
use crate::compare::{close, close_at, within};

/// Both media thick: p = βr_F/(r_F + r_N).
fn one_contact(beta: f64, r_f: f64, r_n: f64) -> f64 {
    beta * r_f / (r_f + r_n)
}

/// F/N/F with a channel much shorter than its spin diffusion length; s = λ_F σ_N/(σ_F x₀).
fn two_contacts(beta: f64, s: f64) -> f64 {
    beta * 2.0 * s / (2.0 * s + 1.0 - beta * beta)
}

/// ΔR/R of the same, with one λ_F of each magnet in R.
fn two_contacts_mr(beta: f64, s: f64) -> f64 {
    let square = beta * beta;
    square / (1.0 - square) * 4.0 * s * s / ((2.0 * s + 1.0) * (2.0 * s + 1.0) - square)
}

/// F/N/F without barriers; s fixes ρ_F, and λ_N = 1e8 x₀ stands for a channel that does not relax.
fn channel(beta: f64, s: f64) -> Stack {
    let (rho_n, x_0) = (1e-4, 1e-6);
    // s = λ_F ρ_F/(ρ_N x₀), and r_F = ρ_F λ_F/(1 − β²).
    let r_f = s * rho_n * x_0 / ((1.0 - beta) * (1.0 + beta));
    stack(
        thick_ferromagnet(r_f, beta, Fixed),
        &[layer(rho_n, 0.0, 1e8 * x_0, x_0, Fixed)],
        thick_ferromagnet(r_f, beta, Free),
    )
}

fn bare_contact(beta: f64, r_f: f64, r_n: f64) -> Stack {
    stack(thick_ferromagnet(r_f, beta, Fixed), &[], thick_normal(r_n))
}

#[test]
fn single_contact() {
    for row in rows("schmidt_2000.single_contact") {
        let (beta, r_f, r_n) = (row.input("beta"), row.input("r_F"), row.input("r_N"));
        row.check(one_contact(beta, r_f, r_n), 1e-14);
        row.check(injected(&bare_contact(beta, r_f, r_n)), 1e-14);
    }
    let mut compared = 0;
    for beta in [-0.9, -0.3, 0.1, 0.46, 0.9, 0.999, 0.999_999_9] {
        for r_f in [1e-16, 4.5e-15, 1e-12, 1e-8] {
            for r_n in [1e-16, 6e-15, 1e-10, 4e-9, 1e-4] {
                close(
                    injected(&bare_contact(beta, r_f, r_n)),
                    one_contact(beta, r_f, r_n),
                    1e-13,
                );
                compared += 1;
            }
        }
    }
    assert_eq!(compared, 140);
}

#[test]
fn two_contacts_over_a_sweep_and_all_rows() {
    // The ladder needs a finite λ_N: at 1e8 channel lengths what relaxes is below 1e-15 of the current.
    for row in rows("schmidt_2000.two_contacts") {
        let (beta, s) = (row.input("beta"), row.input("s"));
        row.check(two_contacts(beta, s), 1e-13);
        row.check(polarization(&channel(beta, s), 0, State::Parallel), 1e-13);
    }
    for row in rows("schmidt_2000.two_contacts_mr") {
        let (beta, s) = (row.input("beta"), row.input("s"));
        row.check(two_contacts_mr(beta, s), 1e-13);
        row.check(channel(beta, s).magnetoresistance().si(), 1e-13);
    }
    let mut compared = 0;
    for beta in [0.05, 0.3, 0.6, 0.9, 0.99, 0.999] {
        for exponent in -8..=2 {
            let s = 10_f64.powi(exponent);
            let device = channel(beta, s);
            close(
                polarization(&device, 0, State::Parallel),
                two_contacts(beta, s),
                1e-10,
            );
            close(
                device.magnetoresistance().si(),
                two_contacts_mr(beta, s),
                1e-10,
            );
            compared += 1;
        }
    }
    assert_eq!(compared, 66);
}

#[test]
fn channel_of_finite_length() {
    let build = |beta: f64, r_f: f64, r_n: f64, lambda: f64, t: f64| {
        // Two halves, so that the middle is a face.
        let half = normal(r_n, lambda, 0.5 * t / lambda);
        stack(
            thick_ferromagnet(r_f, beta, Fixed),
            &[half, half],
            thick_ferromagnet(r_f, beta, Free),
        )
    };
    for (name, face, state) in [
        (
            "ohmic.finite_channel_interface_parallel",
            0,
            State::Parallel,
        ),
        ("ohmic.finite_channel_centre_parallel", 1, State::Parallel),
        (
            "ohmic.finite_channel_interface_antiparallel",
            0,
            State::Antiparallel,
        ),
    ] {
        for row in rows(name) {
            let device = build(
                row.input("beta"),
                row.input("r_F"),
                row.input("r_N"),
                row.input("lambda_N"),
                row.input("t"),
            );
            row.check(polarization(&device, face, state), 1e-14);
        }
    }
    for reduced in [1e-6, 1e-3, 0.1, 1.0, 5.0, 30.0] {
        let (beta, r_f, r_n): (f64, f64, f64) = (0.73, 2e-15, 6e-15);
        let device = build(beta, r_f, r_n, 1e-6, reduced * 1e-6);
        let half: f64 = 0.5 * reduced;
        let parallel = beta * r_f / (r_f + r_n * half.tanh());
        let p = currents(&device.solve(State::Parallel));
        close(p[0], parallel, 1e-13);
        close(p[1], parallel / half.cosh(), 1e-13);
        close(p[2], parallel, 1e-13);
        let antiparallel = currents(&device.solve(State::Antiparallel));
        // Here the two magnets work against each other: the error is one of what each does alone.
        within(
            antiparallel[0],
            beta * r_f / (r_f + r_n / half.tanh()),
            parallel,
            1e-15,
        );
        // In the middle they cancel.
        within(antiparallel[1], 0.0, p[1], 1e-15);
    }
}

#[test]
fn less_than_a_tenth_of_a_per_cent_for_a_typical_device() {
    // Abstract, read: "< 0.1 %". Typical (recalled): β = 0.6, σ_F/σ_N = 1e4, λ_F = 10 to 100 nm, x₀ = 1 µm, so
    // that s = λ_F σ_N/(σ_F x₀) = 1e-6 to 1e-5.
    for s in [1e-6, 1e-5] {
        let p = polarization(&channel(0.6, s), 0, State::Parallel);
        assert!(p > 0.0 && p < 1e-3, "{p:e}");
    }
    // Even a magnet polarized to 99 % does not reach it there.
    let p = polarization(&channel(0.99, 1e-5), 0, State::Parallel);
    assert!(p > 5e-4 && p < 1e-3, "{p:e}");
    // "Up to quadratically smaller": ΔR/R = p²/(1 − β²)·… stays of the order of p², far below p.
    for beta in [0.3, 0.6, 0.9] {
        let device = channel(beta, 1e-5);
        let p = polarization(&device, 0, State::Parallel);
        let ratio = device.magnetoresistance().si();
        // To lowest order in s: 4s²β²/(1 − β²)² over (2sβ/(1 − β²))² = 1.
        close(ratio / (p * p), 1.0, 1e-4);
    }
}

#[test]
fn asymmetry_needed_for_a_tenth() {
    // Solved on the ladder: ρ_F λ_F held, so that r_F = ρ_F λ_F/(1 − β²) grows as β does.
    for row in rows("schmidt_2000.required_beta_single_contact") {
        let (p, x) = (row.input("p"), row.input("rho_F_lambda_F_over_r_N"));
        let r_n = 4e-9;
        let contact = |b: f64| bare_contact(b, x * r_n / ((1.0 - b) * (1.0 + b)), r_n);
        let beta = bracketed_root(|b| injected(&contact(b)) - p, 0.1, 0.999, 0.0).unwrap();
        row.check(beta, 1e-13);
    }
    for row in rows("schmidt_2000.required_beta_two_contacts") {
        let (p, s) = (row.input("p"), row.input("s"));
        let f = |b: f64| polarization(&channel(b, s), 0, State::Parallel) - p;
        row.check(bracketed_root(f, 0.1, 0.999, 0.0).unwrap(), 1e-13);
    }
}

#[test]
fn resistance_change_is_not_lost_below_the_resistance() {
    // ΔR/R = 3.5e-10: the plain difference of two doubles keeps six digits of it, the cross term all.
    let device = channel(0.6, 1e-5);
    let plain = resistance(&device, State::Antiparallel) - resistance(&device, State::Parallel);
    close_at("difference", plain, change(&device), 1e-5);
    let exact = two_contacts_mr(0.6, 1e-5) * resistance(&device, State::Parallel);
    close_at("cross term", change(&device), exact, 1e-13);
}
