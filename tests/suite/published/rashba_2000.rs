//! A tunnel contact between two thick media.
//!
//! Source: Rashba, Phys. Rev. B 62, R16267 (2000). Formula recalled, its algebra confirmed. In the paper's
//! letters γ is what crosses, r_c = Σ/4Σ↑Σ↓ the contact resistance and ΔΣ/Σ its asymmetry.

use crate::bare::{injected, single_contact};
use crate::compare::close;

/// r_F = λ_F σ_F/4σ↑σ↓.
fn r_of_channels(lambda: f64, up: f64, down: f64) -> f64 {
    lambda * (up + down) / (4.0 * up * down)
}

/// r_c = Σ/4Σ↑Σ↓.
fn r_of_contact(up: f64, down: f64) -> f64 {
    (up + down) / (4.0 * up * down)
}

/// Injection coefficient from the conductivities of the channels, as the paper writes it.
fn injection_coefficient(sigma: (f64, f64), lambda: f64, contact: (f64, f64), r_n: f64) -> f64 {
    let r_f = r_of_channels(lambda, sigma.0, sigma.1);
    let r_c = r_of_contact(contact.0, contact.1);
    let bulk = (sigma.0 - sigma.1) / (sigma.0 + sigma.1);
    let interface = (contact.0 - contact.1) / (contact.0 + contact.1);
    (r_c * interface + r_f * bulk) / (r_f + r_n + r_c)
}

#[test]
fn injection_coefficient_from_channel_conductivities() {
    let mut compared = 0;
    // Conductivities of the two channels in S/m and of the contact in S/m²; the majority may be either.
    for sigma in [(6e6, 1e6), (1e6, 6e6), (5e6, 4e6), (8e6, 1e2)] {
        for contact in [(1e13, 3e12), (1e9, 3e8), (3e8, 1e9), (1e6, 9e5), (1e3, 1.0)] {
            for r_n in [6e-15, 1e-12, 4e-9, 1e-5] {
                let lambda = 1e-8;
                let want = injection_coefficient(sigma, lambda, contact, r_n);
                // The same contact in our letters: β, ρ*λ, γ, r_b*.
                let (s, c) = (sigma.0 + sigma.1, contact.0 + contact.1);
                let beta = (sigma.0 - sigma.1) / s;
                let gamma = (contact.0 - contact.1) / c;
                let r_f = lambda / (s * (1.0 - beta) * (1.0 + beta));
                let r_b = 1.0 / (c * (1.0 - gamma) * (1.0 + gamma));
                close(
                    injected(&single_contact(beta, r_f, r_n, gamma, r_b)),
                    want,
                    1e-10,
                );
                compared += 1;
            }
        }
    }
    assert_eq!(compared, 80);
}

#[test]
fn a_high_contact_injects_its_own_asymmetry_and_a_low_one_that_of_the_mismatch() {
    let (beta, r_f, r_n, gamma) = (0.46, 4.5e-15, 4e-9, 0.5);
    // r_c ≫ r_N: p = γ(1 − r_N/r_c …).
    close(
        injected(&single_contact(beta, r_f, r_n, gamma, 1.0)),
        gamma,
        1e-8,
    );
    // r_c ≪ r_F: what a bare contact injects.
    let bare = beta * r_f / (r_f + r_n);
    close(
        injected(&single_contact(beta, r_f, r_n, gamma, 1e-26)),
        bare,
        1e-10,
    );
    // The contact has to outweigh the channel, not the magnet: half of γ at r_c = r_N + r_F − 2βr_F/γ.
    let half = r_n + r_f - 2.0 * beta * r_f / gamma;
    close(
        injected(&single_contact(beta, r_f, r_n, gamma, half)),
        0.5 * gamma,
        1e-12,
    );
}
