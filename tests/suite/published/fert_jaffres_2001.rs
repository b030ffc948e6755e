//! Two tunnel contacts on a channel of finite length, and the window of the contact resistance.
//!
//! Source: Fert and Jaffrès, Phys. Rev. B 64, 184420 (2001) (abstract read, formulas recalled and confirmed
//! against a boundary-value solution); the dwell-time form as in Fert, George, Jaffrès, Mattana, IEEE Trans.
//! Electron Devices 54, 921 (2007) (abstract read). The formula for two different contacts and the optimum are
//! derived. The parameter set of the rows (cobalt on n-GaAs) is recalled; all rows are derived.

use injectance::models::ladder::{Stack, State};
use injectance::numerics::root::{bracketed_root, largest};
use injectance::quantities::dimensions::Measured;

use super::{Row, rows};
use crate::bare::{
    Fixed, Free, change, injected, interface, normal, resistance, single_contact, spin_valve,
    stack, thick_ferromagnet,
};
use crate::compare::{close, close_at};

/// β, r_F, r_N, γ, r_b*, T.
type Numbers = (f64, f64, f64, f64, f64, f64);

fn numbers(row: &Row, r_b: f64) -> Numbers {
    (
        row.input("beta"),
        row.input("r_F"),
        row.input("r_N"),
        row.input("gamma"),
        r_b,
        row.input("T"),
    )
}

fn device((beta, r_f, r_n, gamma, r_b, t): Numbers) -> Stack {
    spin_valve(beta, r_f, r_n, gamma, r_b, t)
}

/// ΔR·A of equal contacts.
fn delta((beta, r_f, r_n, gamma, r_b, t): Numbers) -> f64 {
    let emf = beta * r_f + gamma * r_b;
    let r = r_f + r_b;
    2.0 * emf * emf / (r * t.cosh() + 0.5 * r_n * (1.0 + (r / r_n) * (r / r_n)) * t.sinh())
}

/// R_P·A, with one λ_F of each magnet.
fn parallel((beta, r_f, r_n, gamma, r_b, t): Numbers) -> f64 {
    let load = r_n * (0.5 * t).tanh();
    let difference = (beta - gamma) * (beta - gamma) * r_f * r_b;
    2.0 * (1.0 - beta * beta) * r_f
        + r_n * t
        + 2.0 * (1.0 - gamma * gamma) * r_b
        + 2.0 * (difference + load * (beta * beta * r_f + gamma * gamma * r_b)) / (r_f + r_b + load)
}

fn ratio(numbers: Numbers) -> f64 {
    device(numbers).magnetoresistance().si()
}

#[test]
fn single_contact_rows() {
    for row in rows("fert_jaffres_2001.single_contact") {
        let contact = single_contact(
            row.input("beta"),
            row.input("r_F"),
            row.input("r_N"),
            row.input("gamma"),
            row.input("r_b"),
        );
        row.check(injected(&contact), 1e-13);
    }
}

#[test]
fn two_equal_contacts() {
    for row in rows("fert_jaffres_2001.delta_ra") {
        let n = numbers(&row, row.input("r_b"));
        row.check(delta(n), 1e-13);
        row.check(change(&device(n)), 1e-13);
    }
    for row in rows("fert_jaffres_2001.ra_parallel") {
        let n = numbers(&row, row.input("r_b"));
        row.check(parallel(n), 1e-13);
        row.check(resistance(&device(n), State::Parallel), 1e-13);
    }
    for row in rows("fert_jaffres_2001.mr") {
        row.check(ratio(numbers(&row, row.input("r_b"))), 1e-13);
    }
    let mut compared = 0;
    for beta in [-0.8, 0.0, 0.46, 0.95] {
        for gamma in [-0.7, 0.0, 0.5, 0.9] {
            for r_b in [0.0, 1e-15, 1e-12, 4e-9, 1e-5] {
                for t in [1e-4, 0.1, 1.0, 8.0] {
                    let n = (beta, 4.5e-15, 4e-9, gamma, r_b, t);
                    let what = format!("{n:?}");
                    close_at(
                        &what,
                        resistance(&device(n), State::Parallel),
                        parallel(n),
                        1e-12,
                    );
                    if beta.abs() > 0.0 || (gamma.abs() > 0.0 && r_b > 0.0) {
                        close_at(&what, change(&device(n)), delta(n), 1e-10);
                        compared += 1;
                    }
                }
            }
        }
    }
    // 320 in all, less those with β = 0 and no contact asymmetry: γ = 0 (20) or r_b* = 0 (12 more).
    assert_eq!(compared, 320 - 20 - 12);
}

#[test]
fn two_different_contacts() {
    let build = |one: [f64; 4], two: [f64; 4], r_n: f64, t: f64| {
        stack(
            thick_ferromagnet(one[1], one[0], Fixed),
            &[
                interface(one[3], one[2], 0.0, Fixed),
                normal(r_n, 2e-6, t),
                interface(two[3], two[2], 0.0, Free),
            ],
            thick_ferromagnet(two[1], two[0], Free),
        )
    };
    let formula = |one: [f64; 4], two: [f64; 4], r_n: f64, t: f64| {
        let emf = |c: [f64; 4]| c[0] * c[1] + c[2] * c[3];
        let (r_1, r_2) = (one[1] + one[3], two[1] + two[3]);
        4.0 * emf(one) * emf(two) / ((r_1 * r_2 / r_n + r_n) * t.sinh() + (r_1 + r_2) * t.cosh())
    };
    for row in rows("two_contacts.delta_ra") {
        let contact = |key: &str| {
            ["beta", "r_F", "gamma", "r_b"].map(|k| super::text_number(&row.inputs[key][k]))
        };
        let (one, two) = (contact("contact_1"), contact("contact_2"));
        let (r_n, t) = (row.input("r_N"), row.input("T"));
        row.check(formula(one, two, r_n, t), 1e-13);
        row.check(change(&build(one, two, r_n, t)), 1e-13);
    }
    let kinds = [
        [0.46, 4.5e-15, 0.5, 4e-9],
        [0.7, 1e-12, -0.3, 2e-10],
        [-0.73, 2e-15, 0.7, 5e-16],
        [0.9, 1e-14, 0.0, 0.0],
        [0.3, 1e-9, 0.9, 1e-6],
    ];
    let mut compared = 0;
    for one in kinds {
        for two in kinds {
            for t in [1e-3, 0.5, 3.0] {
                for r_n in [6e-15, 4e-9] {
                    close(
                        change(&build(one, two, r_n, t)),
                        formula(one, two, r_n, t),
                        1e-12,
                    );
                    compared += 1;
                }
            }
        }
    }
    assert_eq!(compared, 150);
}

/// r_b* of the largest ratio and that ratio, from the ladder.
///
/// The maximum is flat: a search for the largest value finds its place to half the digits only. So the root
/// of the slope in ln r_b* is taken, with a fourth-order difference at a step of 0.02 whose error is below
/// 1e-8 of the place.
fn peak(row: &Row) -> (f64, f64) {
    peak_of(numbers(row, 0.0))
}

/// [`peak`] of given numbers; their r_b* is not used.
fn peak_of((beta, r_f, r_n, gamma, _, t): Numbers) -> (f64, f64) {
    let at = |ln: f64| ratio((beta, r_f, r_n, gamma, ln.exp(), t));
    let (near, _) = largest(at, 1e-12_f64.ln(), 1e-5_f64.ln(), 1e-4);
    let step = 0.02;
    let slope = |x: f64| {
        (8.0 * (at(x + step) - at(x - step)) - (at(x + 2.0 * step) - at(x - 2.0 * step)))
            / (12.0 * step)
    };
    let place = bracketed_root(slope, near - 0.1, near + 0.1, 1e-14).unwrap();
    (place.exp(), at(place))
}

#[test]
fn largest_magnetoresistance_and_its_window() {
    for row in rows("fert_jaffres_2001.peak_r_b") {
        row.check(peak(&row).0, 1e-6);
    }
    for row in rows("fert_jaffres_2001.peak_mr") {
        row.check(peak(&row).1, 1e-12);
    }
    for (name, low, high) in [
        ("fert_jaffres_2001.half_low_r_b", 1e-14_f64, 6e-9_f64),
        ("fert_jaffres_2001.half_high_r_b", 8e-9, 1e-3),
    ] {
        for row in rows(name) {
            let half = 0.5 * peak(&row).1;
            let f = |ln: f64| ratio(numbers(&row, ln.exp())) - half;
            row.check(
                bracketed_root(f, low.ln(), high.ln(), 0.0).unwrap().exp(),
                1e-10,
            );
        }
    }
    // The height of a thin channel tends to γ²/(1 − γ²), a third for γ = 0.5.
    close(
        ratio((0.46, 4.5e-15, 4e-9, 0.5, 6.5e-9, 1e-7)),
        1.0 / 3.0,
        1e-5,
    );
}

#[test]
fn best_interface_spin_resistance() {
    for row in rows("fert_jaffres_2001.optimum_r_b_over_r_N") {
        row.check(peak(&row).0 / row.input("r_N"), 1e-6);
    }
    for row in rows("fert_jaffres_2001.optimum_share_of_plateau") {
        let gamma = row.input("gamma");
        let plateau = gamma * gamma / ((1.0 - gamma) * (1.0 + gamma));
        row.check(peak(&row).1 / plateau, 1e-12);
    }
    // The rule r_b* = r_N √(2/(1 − γ²)) holds for a thin channel; the ladder shows how far.
    for row in rows("fert_jaffres_2001.optimum_formula") {
        let gamma = row.input("gamma");
        let rule = (2.0 / ((1.0 - gamma) * (1.0 + gamma))).sqrt();
        row.check(rule, 1e-14);
        // At T = 0.001 it is off by less than 0.1 %, if r_F/r_N is small beside T as well: with r_F of cobalt the
        // row for γ = 0.1 is 0.4 % below it.
        close(
            peak_of((0.46, 4.5e-20, 4e-9, gamma, 0.0, 1e-3)).0 / 4e-9,
            rule,
            1e-3,
        );
        close(
            peak_of((0.46, 4.5e-20, 4e-9, gamma, 0.0, 1e-5)).0 / 4e-9,
            rule,
            2e-5,
        );
    }
}

#[test]
fn dwell_time_against_lifetime() {
    let form = |gamma: f64, r_n: f64, r_b: f64, t: f64| {
        // ΔR/R = [γ²/(1 − γ²)]/(1 + τ_n/τ_sf), τ_n/τ_sf = r_b*T/2r_N.
        gamma * gamma / ((1.0 - gamma) * (1.0 + gamma)) / (1.0 + r_b * t / (2.0 * r_n))
    };
    for row in rows("fert_2007.mr_from_dwell_time") {
        let (gamma, r_n) = (row.input("gamma"), row.input("r_N"));
        let (r_b, t) = (row.input("r_b"), row.input("T"));
        row.check(form(gamma, r_n, r_b, t), 1e-13);
        // The form leaves out the channel resistance and the lower edge: 1.6 % here.
        close(
            ratio((0.46, 4.5e-15, r_n, gamma, r_b, t)),
            form(gamma, r_n, r_b, t),
            0.016,
        );
    }
    // High contacts on a thin channel: the form becomes exact, also past its half at r_b* = 2r_N/T.
    for r_b in [1e-5, 4e-5, 1e-3] {
        close(
            ratio((0.46, 4.5e-15, 4e-9, 0.5, r_b, 1e-3)),
            form(0.5, 4e-9, r_b, 1e-3),
            1.3e-3,
        );
    }
}

#[test]
fn a_single_contact_has_no_upper_edge() {
    let p = |r_b: f64| injected(&single_contact(0.46, 4.5e-15, 4e-9, 0.5, r_b));
    let mut last = 0.0;
    for exponent in -16..=2 {
        let now = p(10_f64.powi(exponent));
        assert!(now > last, "p does not grow at 1e{exponent}");
        last = now;
    }
    close(last, 0.5, 1e-9);
}
