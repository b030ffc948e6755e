//! Facts of the trade for which no source is named. Each is marked `common practice`.

#![allow(clippy::unwrap_used)]

use injectance::documents::reader::Faults;
use injectance::materials::library::Library;
use injectance::materials::record::{Class, PairRecord};
use injectance::models::ladder::State;
use injectance::numerics::root::bracketed_root;
use injectance::quantities::spread::{Side, Spread};

use crate::bare::{
    Fixed, Free, injected, layer, polarization, stack, thick_ferromagnet, thick_normal,
};
use crate::compare::close;

/// The transport pairs of the common ferromagnets, by material.
fn pairs() -> Vec<(String, Vec<PairRecord>)> {
    let library = Library::shipped();
    let faults = Faults::default();
    ["iron", "cobalt", "nickel", "permalloy", "cobalt-iron"]
        .into_iter()
        .map(|id| {
            let material = library.material(id, &faults).unwrap();
            assert_eq!(material.class, Class::Ferromagnet, "{id}");
            assert!(!material.pairs.is_empty(), "{id} has no pair");
            (id.to_owned(), material.pairs.clone())
        })
        .collect()
}

fn median(mut numbers: Vec<f64>) -> f64 {
    numbers.sort_by(f64::total_cmp);
    let n = numbers.len();
    0.5 * (numbers[(n - 1) / 2] + numbers[n / 2])
}

#[test]
fn bulk_asymmetry_of_common_ferromagnets_is_around_one_half() {
    // common practice
    let mut all = Vec::new();
    for (id, records) in pairs() {
        for record in records {
            let beta = record.bulk_asymmetry.si;
            assert!(
                (0.1..=0.8).contains(&beta),
                "{id}: {beta} ({})",
                record.common.id
            );
            all.push(beta);
        }
    }
    assert!(all.len() >= 10, "only {} pairs", all.len());
    let middle = median(all);
    assert!((0.3..=0.7).contains(&middle), "median {middle}");
}

#[test]
fn spins_live_about_ten_nanometres_in_a_common_ferromagnet() {
    // common practice
    let mut all = Vec::new();
    for (id, records) in pairs() {
        for record in records {
            let lambda = record.spin_diffusion_length.si;
            assert!(
                (1e-9..=60e-9).contains(&lambda),
                "{id}: {lambda} ({})",
                record.common.id
            );
            all.push(lambda);
        }
    }
    assert!(all.len() >= 10, "only {} pairs", all.len());
    let middle = median(all);
    assert!((3e-9..=30e-9).contains(&middle), "median {middle:e}");
}

#[test]
fn spins_travel_ten_micrometres_and_more_in_silicon() {
    // common practice; the library knows it as a bound.
    let faults = Faults::default();
    let silicon = Library::shipped().material("silicon", &faults).unwrap();
    let longest: Vec<f64> = silicon
        .values
        .iter()
        .filter(|v| v.property.name == "spin_diffusion_length")
        .filter(|v| matches!(v.reading.spread, Spread::Bound { side: Side::Above }))
        .map(|v| v.reading.si)
        .collect();
    assert!(!longest.is_empty());
    let longest = longest.into_iter().fold(0.0, f64::max);
    assert!(longest >= 10e-6, "{longest:e}");
}

/// p in F/N/F without barriers, N short of its own λ, when x = (σ_N/σ_F)(λ_F/L): two contacts.
fn two_contacts(beta: f64, x: f64) -> f64 {
    let (rho_n, length) = (1e-3, 1e-6);
    let r_f = x * rho_n * length / ((1.0 - beta) * (1.0 + beta));
    let device = stack(
        thick_ferromagnet(r_f, beta, Fixed),
        &[layer(rho_n, 0.0, 1e8 * length, length, Fixed)],
        thick_ferromagnet(r_f, beta, Free),
    );
    polarization(&device, 0, State::Parallel)
}

/// p at one contact to a thick N without barrier, when x = ρ_F λ_F/(ρ_N λ_N).
fn one_contact(beta: f64, x: f64) -> f64 {
    let r_n = 4e-9;
    let r_f = x * r_n / ((1.0 - beta) * (1.0 + beta));
    injected(&stack(
        thick_ferromagnet(r_f, beta, Fixed),
        &[],
        thick_normal(r_n),
    ))
}

#[test]
fn a_metal_on_a_semiconductor_injects_next_to_nothing() {
    // common practice: the length of the channel is that over which spins relax. β = 0.5, ratio 1e-4:
    // p = βx/(x + 1 − β²) = 0.5·1e-4/(1e-4 + 0.75) = 6.6658e-5, below 0.01 %.
    let single = one_contact(0.5, 1e-4);
    close(single, 6.665_778e-5, 1e-6);
    assert!(single < 1e-4);
    // Two contacts with the same ratio of a channel of length L: p = 2βx/(2x + 1 − β²) = 1.33298e-4, 0.013 %.
    let double = two_contacts(0.5, 1e-4);
    close(double, 1.332_978e-4, 1e-6);
    assert!(double < 2e-4);
}

#[test]
fn ten_per_cent_without_a_barrier_needs_a_nearly_half_metallic_magnet() {
    // common practice. At the ratio 0.01 one contact needs β ≥ 0.956 ...
    let one = bracketed_root(|b| one_contact(b, 0.01) - 0.1, 0.1, 0.999, 0.0).unwrap();
    close(one, 0.956, 5e-4);
    // ... and two contacts on a channel that short, by the formula for two of them, β ≥ 0.915.
    let two = bracketed_root(|b| two_contacts(b, 0.01) - 0.1, 0.1, 0.999, 0.0).unwrap();
    close(two, 0.915, 5e-4);
    // Neither is the other's number.
    assert!(one_contact(0.92, 0.01) < 0.1 && two_contacts(0.92, 0.01) > 0.1);
}
