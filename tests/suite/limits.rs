//! Laws of nature that every stack obeys, tried on random ones, and limits that are known without solving.
//!
//! Random stacks: resistivities over 8 decades, T = t/λ from 1e-3 to 30, r_b* from 1e-17 to 1e-6 Ω m², every end,
//! asymmetries of both signs up to 0.99, lossy interfaces. The seed is fixed.

#![allow(clippy::unwrap_used)]

use injectance::models::ladder::{Element, End, Face, Layer, Magnetization, Stack, State};
use injectance::quantities::dimensions::Measured;
use injectance::quantities::meanings::{BulkAsymmetry, InterfaceAsymmetry, Thickness};
use proptest::prelude::*;
use proptest::test_runner::RngSeed;

use crate::bare::{
    Fixed, FixedOpposite, Free, accumulations, change, currents, injected, interface, layer,
    medium, normal, resistance, single_contact, stack, thick_ferromagnet, thick_normal,
};
use crate::compare::{close, close_at, within, within_at};

const BOTH: [State; 2] = [State::Parallel, State::Antiparallel];

/// The project's own bound on J and u; see tests/suite/outside/stacks.rs.
const ALLOWED: f64 = 1e-12;

#[derive(Clone, Debug)]
struct Plan {
    left: End,
    elements: Vec<Element>,
    right: End,
}

impl Plan {
    fn build(&self) -> Stack {
        stack(self.left, &self.elements, self.right)
    }

    /// With every layer and interface changed.
    fn mapped(&self, f: impl Fn(Part) -> Part) -> Self {
        let end = |e: &End| match e {
            End::SemiInfinite(l) => {
                let (asymmetry, magnetization) = f((l.asymmetry.si(), l.magnetization));
                End::SemiInfinite(Layer {
                    asymmetry: BulkAsymmetry::from_si(asymmetry),
                    magnetization,
                    ..*l
                })
            }
            other => *other,
        };
        let elements = self.elements.iter().map(|e| match e {
            Element::Layer(l) => {
                let (asymmetry, magnetization) = f((l.asymmetry.si(), l.magnetization));
                Element::Layer(Layer {
                    asymmetry: BulkAsymmetry::from_si(asymmetry),
                    magnetization,
                    ..*l
                })
            }
            Element::Interface(i) => {
                let (asymmetry, magnetization) = f((i.asymmetry.si(), i.magnetization));
                let mut i = *i;
                (i.asymmetry, i.magnetization) =
                    (InterfaceAsymmetry::from_si(asymmetry), magnetization);
                Element::Interface(i)
            }
        });
        Self {
            left: end(&self.left),
            elements: elements.collect(),
            right: end(&self.right),
        }
    }

    fn largest_asymmetry(&self) -> f64 {
        let of_end = |e: &End| {
            if let End::SemiInfinite(l) = e {
                l.asymmetry.si().abs()
            } else {
                0.0
            }
        };
        self.elements
            .iter()
            .map(|e| match e {
                Element::Layer(l) => l.asymmetry.si().abs(),
                Element::Interface(i) => i.asymmetry.si().abs(),
            })
            .fold(of_end(&self.left).max(of_end(&self.right)), f64::max)
    }
}

/// Asymmetry and magnetization of one element.
type Part = (f64, Magnetization);

fn signed() -> impl Strategy<Value = f64> {
    prop_oneof![1 => Just(0.0), 3 => -0.99..0.99]
}

fn turn() -> impl Strategy<Value = Magnetization> {
    prop_oneof![Just(Fixed), Just(FixedOpposite), Just(Free)]
}

fn any_layer() -> impl Strategy<Value = Layer> {
    (-8.0..0.0, signed(), -9.0..-5.0, -3.0..1.477, turn()).prop_map(|(rho, beta, lambda, t, m)| {
        let length = 10_f64.powf(lambda);
        medium(10_f64.powf(rho), beta, length, length * 10_f64.powf(t), m)
    })
}

fn any_interface() -> impl Strategy<Value = Element> {
    let delta = prop_oneof![3 => Just(0.0), 1 => 0.01..3.0];
    (-17.0..-6.0, -0.99..0.99, delta, turn())
        .prop_map(|(r_b, gamma, delta, m)| interface(10_f64.powf(r_b), gamma, delta, m))
}

fn any_end() -> impl Strategy<Value = End> {
    prop_oneof![
        any_layer().prop_map(End::SemiInfinite),
        Just(End::SpinSink),
        Just(End::Reflecting),
        Just(End::FedInPlane),
    ]
}

fn plan() -> impl Strategy<Value = Plan> {
    let inner = prop::collection::vec(
        prop_oneof![any_layer().prop_map(Element::Layer), any_interface()],
        0..6,
    );
    (any_end(), any_layer(), inner, any_layer(), any_end()).prop_map(
        |(left, first, inner, last, right)| {
            let mut elements = vec![Element::Layer(first)];
            elements.extend(inner);
            elements.push(Element::Layer(last));
            Plan {
                left,
                elements,
                right,
            }
        },
    )
}

fn config() -> ProptestConfig {
    ProptestConfig {
        cases: 256,
        failure_persistence: None,
        rng_seed: RngSeed::Fixed(2017),
        ..ProptestConfig::default()
    }
}

/// What all sources together could drive at a face if none cancelled, over the largest asymmetry: for u,
/// the two sides in parallel.
fn accumulation_scale(device: &Stack, k: usize) -> f64 {
    let sides = device.sides(k, State::Parallel);
    2.0 / (sides.left_impedance.recip() + sides.right_impedance.recip())
}

/// The same for ΔRA: with all asymmetries of one sign every pair of sources adds.
fn change_scale(plan: &Plan) -> f64 {
    let one_sign = plan.mapped(|(a, m)| (a.abs(), if m == Free { Free } else { Fixed }));
    change(&one_sign.build()).abs()
}

fn number(face: &Face) -> [f64; 3] {
    [
        face.polarization.si(),
        face.accumulation_per_current_density.si(),
        face.potential_per_current_density.si(),
    ]
}

proptest! {
    #![proptest_config(config())]

    #[test]
    fn no_current_is_more_polarized_than_its_sources(plan in plan()) {
        let (device, most) = (plan.build(), plan.largest_asymmetry());
        for state in BOTH {
            for p in currents(&device.solve(state)) {
                prop_assert!(p.abs() <= most * (1.0 + ALLOWED), "{p} beside {most}");
            }
        }
    }

    #[test]
    fn the_mirror_image_reverses_the_accumulation_and_nothing_else(plan in plan()) {
        let mirror = Plan {
            left: plan.right,
            elements: plan.elements.iter().rev().copied().collect(),
            right: plan.left,
        };
        let (device, image) = (plan.build(), mirror.build());
        for state in BOTH {
            let (a, b) = (device.solve(state), image.solve(state));
            let n = device.len();
            for k in 0..=n {
                within_at("p", b.faces[n - k].polarization.si(), a.faces[k].polarization.si(), 1.0, ALLOWED);
                let (u, v) = (accumulations(&a)[k], accumulations(&b)[n - k]);
                within_at("u", v, -u, accumulation_scale(&device, k), ALLOWED);
            }
            close_at("RA", b.resistance_area.si(), a.resistance_area.si(), ALLOWED);
        }
        within_at("ΔRA", change(&image), change(&device), change_scale(&plan), ALLOWED);
    }

    #[test]
    fn turning_every_asymmetry_turns_the_spins_and_keeps_the_resistance(plan in plan()) {
        let (device, turned) = (plan.build(), plan.mapped(|(a, m)| (-a, m)).build());
        for state in BOTH {
            let (a, b) = (device.solve(state), turned.solve(state));
            for (x, y) in a.faces.iter().zip(&b.faces) {
                let ([p, u, v], [q, w, z]) = (number(x), number(y));
                // Rounding does not know the sign: not one digit may differ.
                close_at("p", q, -p, 0.0);
                close_at("u", w, -u, 0.0);
                close_at("V", z, v, 0.0);
            }
        }
        close_at("ΔRA", change(&turned), change(&device), 0.0);
    }

    #[test]
    fn change_of_resistance_is_the_difference_of_the_resistances(plan in plan()) {
        let device = plan.build();
        let (p, ap) = (resistance(&device, State::Parallel), resistance(&device, State::Antiparallel));
        // All that a subtraction of two doubles can know.
        within(change(&device), ap - p, p.abs() + ap.abs(), ALLOWED);
    }

    #[test]
    fn it_does_not_matter_which_set_of_magnets_is_turned(plan in plan()) {
        // What stood still turns and what turned stands still; a fixed magnet that lies reversed keeps its sign.
        let complement = plan.mapped(|(a, m)| match m {
            Free => (a, Fixed),
            Fixed => (a, Free),
            FixedOpposite => (-a, Free),
        });
        within(change(&complement.build()), change(&plan.build()), change_scale(&plan), ALLOWED);
    }

    #[test]
    fn what_is_not_there_changes_nothing(plan in plan(), at in 0_usize..100, gamma in -0.99..0.99) {
        let device = plan.build();
        // Inside: at a strip fed in its plane the outermost layer is another one.
        let at = 1 + at % (plan.elements.len() - 1);
        for nothing in [layer(1e-7, gamma, 1e-8, 0.0, Free), interface(0.0, gamma, 0.0, Free), interface(0.0, gamma, 0.7, Free)] {
            let mut more = plan.clone();
            more.elements.insert(at, nothing);
            let more = more.build();
            for state in BOTH {
                let (a, b) = (device.solve(state), more.solve(state));
                for k in 0..=device.len() {
                    let same = if k < at { k } else { k + 1 };
                    for (x, y) in number(&a.faces[k]).iter().zip(number(&b.faces[same])) {
                        close(y, *x, 0.0);
                    }
                }
            }
            close(change(&more), change(&device), 0.0);
        }
    }

    #[test]
    fn a_layer_in_two_pieces_is_one_layer(plan in plan(), pick in 0_usize..100, part in 0.05..0.95) {
        let layers: Vec<usize> = (0..plan.elements.len())
            .filter(|k| matches!(plan.elements[*k], Element::Layer(_)))
            // A strip fed in its plane is one piece: what is cut off would carry the current across.
            .filter(|k| *k > 0 || plan.left != End::FedInPlane)
            .filter(|k| *k + 1 < plan.elements.len() || plan.right != End::FedInPlane)
            .collect();
        prop_assume!(!layers.is_empty());
        let k = layers[pick % layers.len()];
        let mut cut = plan.clone();
        if let Element::Layer(whole) = plan.elements[k] {
            let piece = |f: f64| Element::Layer(Layer { thickness: Thickness::from_si(f * whole.thickness.si()), ..whole });
            cut.elements[k] = piece(part);
            cut.elements.insert(k + 1, piece(1.0 - part));
        }
        let (device, cut_device) = (plan.build(), cut.build());
        for state in BOTH {
            let (a, b) = (device.solve(state), cut_device.solve(state));
            for f in 0..=device.len() {
                let same = if f <= k { f } else { f + 1 };
                let ([p, u, _], [q, w, _]) = (number(&a.faces[f]), number(&b.faces[same]));
                within_at("p", q, p, 1.0, ALLOWED);
                within_at("u", w, u, accumulation_scale(&device, f), ALLOWED);
            }
            close_at("RA", b.resistance_area.si(), a.resistance_area.si(), ALLOWED);
            // The same point reached from inside the whole layer.
            let inside = device.inside(&a, k, part, state).unwrap();
            let ([p, u, v], [q, w, z]) = (number(&inside), number(&b.faces[k + 1]));
            within_at("p inside", p, q, 1.0, ALLOWED);
            within_at("u inside", u, w, accumulation_scale(&cut_device, k + 1), 1e-11);
            let size = a.resistance_area.si().abs() + u.abs() + number(&a.faces[k])[1].abs() + v.abs();
            within_at("V inside", v, z, size, 1e-11);
        }
        within_at("ΔRA", change(&cut_device), change(&device), change_scale(&plan), ALLOWED);
    }

    #[test]
    fn ohms_law_in_each_channel_of_an_interface_and_the_diffusion_in_each_layer(plan in plan()) {
        let device = plan.build();
        for state in BOTH {
            let solution = device.solve(state);
            for (k, element) in plan.elements.iter().enumerate() {
                let ([p, u, v], [q, w, z]) = (number(&solution.faces[k]), number(&solution.faces[k + 1]));
                let sign = |m: Magnetization| match (m, state) {
                    (FixedOpposite, _) | (Free, State::Antiparallel) => -1.0,
                    _ => 1.0,
                };
                // The sizes of what is subtracted here.
                let size = u.abs() + w.abs() + v.abs() + z.abs()
                    + accumulation_scale(&device, k) + accumulation_scale(&device, k + 1);
                match element {
                    Element::Interface(i) if i.memory_loss.si() <= 0.0 => {
                        let (r_b, gamma) = (i.spin_resistance.si(), i.asymmetry.si() * sign(i.magnetization));
                        within_at("J continuous", q, p, 1.0, ALLOWED);
                        // V↑ drops by r↑J↑ = 2r_b*(1 − γ)·(1 + p)/2, V↓ by r_b*(1 + γ)(1 − p).
                        within_at("up", (v + u) - (z + w), r_b * (1.0 - gamma) * (1.0 + p), size + r_b, ALLOWED);
                        within_at("down", (v - u) - (z - w), r_b * (1.0 + gamma) * (1.0 - p), size + r_b, ALLOWED);
                    }
                    Element::Layer(l) => {
                        let strip = (k == 0 && plan.left == End::FedInPlane)
                            || (k + 1 == plan.elements.len() && plan.right == End::FedInPlane);
                        let (r, beta) = (l.spin_resistance().si(), l.asymmetry.si() * sign(l.magnetization));
                        let t = l.thickness.si() / l.length.si();
                        // u and r(βj − J) are mixed by cosh and sinh; divided by cosh so that nothing overflows.
                        let (c, s) = (1.0 / t.cosh(), t.tanh());
                        within_at("u", w * c, u + r * (beta - p) * s, size + 2.0 * r * s, ALLOWED);
                        within_at("J", (beta - q) * r * c, u * s + r * (beta - p), size + 2.0 * r, ALLOWED);
                        let ohmic = if strip { 0.0 } else { l.resistivity.si() * l.thickness.si() };
                        within_at("V", v - z, ohmic + beta * (w - u), size + ohmic, ALLOWED);
                    }
                    Element::Interface(_) => {}
                }
            }
        }
    }

    #[test]
    fn the_drops_add_up_to_the_resistance(plan in plan()) {
        let device = plan.build();
        for state in BOTH {
            let solution = device.solve(state);
            let last = solution.faces.len() - 1;
            let ra = solution.resistance_area.si();
            let ([_, u, v], [_, w, z]) = (number(&solution.faces[0]), number(&solution.faces[last]));
            let sign = |m: Magnetization| match (m, state) {
                (FixedOpposite, _) | (Free, State::Antiparallel) => -1.0,
                _ => 1.0,
            };
            // Beyond the outer faces: nothing, or an end medium down to u = 0, or the strip's accumulation.
            let outer = |end: &End, at: usize, u: f64| match (end, &plan.elements[at]) {
                (End::SemiInfinite(l), _) => {
                    l.resistivity.si() * l.thickness.si() + l.asymmetry.si() * sign(l.magnetization) * u
                }
                (End::FedInPlane, Element::Layer(l)) => l.asymmetry.si() * sign(l.magnetization) * u,
                _ => 0.0,
            };
            let (left, right) = (outer(&plan.left, 0, u), outer(&plan.right, plan.elements.len() - 1, -w));
            within_at("right", z, right, right.abs(), ALLOWED);
            within_at("RA", ra, v + left, v.abs() + left.abs(), ALLOWED);
        }
    }

    #[test]
    fn a_huge_barrier_lets_its_own_asymmetry_through(plan in plan(), at in 0_usize..100, gamma in -0.99..0.99) {
        let device = plan.build();
        let at = 1 + at % (plan.elements.len() - 1);
        let sides = device.sides(at, State::Parallel);
        let load = sides.left_impedance + sides.right_impedance;
        let mut with = plan.clone();
        with.elements.insert(at, interface(1e13 * load, gamma, 0.0, Fixed));
        let p = currents(&with.build().solve(State::Parallel));
        within(p[at], gamma, 1.0, ALLOWED);
        within(p[at + 1], gamma, 1.0, ALLOWED);
        // A vanishing one lets through what crosses without it.
        with.elements[at] = interface(1e-14 * load, gamma, 0.0, Fixed);
        let (p, bare) = (currents(&with.build().solve(State::Parallel)), currents(&device.solve(State::Parallel)));
        within(p[at], bare[at], 1.0, ALLOWED);
    }

    #[test]
    fn a_small_loss_loses_little(plan in plan(), at in 0_usize..100, gamma in -0.99..0.99, ratio in -3.0..3.0) {
        let device = plan.build();
        let at = 1 + at % (plan.elements.len() - 1);
        // The loss opens a side path δ²/r_b* beside the load of both sides.
        let load = 0.5 * accumulation_scale(&device, at);
        let r_b = load * 10_f64.powf(ratio);
        let with = |delta: f64| {
            let mut with = plan.clone();
            with.elements.insert(at, interface(r_b, gamma, delta, Free));
            currents(&with.build().solve(State::Antiparallel))
        };
        let none = with(0.0);
        for delta in [1e-2, 1e-4, 1e-8] {
            let most = 2.0 * delta * delta * (1.0 + load / r_b) + ALLOWED;
            for (p, q) in none.iter().zip(with(delta)) {
                prop_assert!((p - q).abs() <= most, "δ = {delta}: {p} and {q}, allowed {most:e}");
            }
        }
    }

    #[test]
    fn without_relaxation_the_two_channels_are_series_resistors(
        parts in prop::collection::vec((-8.0..0.0, signed(), -9.0..-6.0, any::<bool>()), 1..8),
        barrier in (-17.0..-6.0, -0.99..0.99),
    ) {
        // λ → ∞ between two places where the channels meet: p = Σ βρ*t / Σ ρ*t, γr_b* and r_b* for the barrier.
        let mut elements = vec![interface(10_f64.powf(barrier.0), barrier.1, 0.0, Fixed)];
        let (mut emf, mut whole) = (barrier.1 * 10_f64.powf(barrier.0), 10_f64.powf(barrier.0));
        let mut terms = emf.abs();
        for (rho, beta, t, opposite) in parts {
            let (rho, t) = (10_f64.powf(rho), 10_f64.powf(t));
            elements.push(layer(rho, beta, 1e6, t, if opposite { FixedOpposite } else { Fixed }));
            let star = rho * t / ((1.0 - beta) * (1.0 + beta));
            emf += star * if opposite { -beta } else { beta };
            terms += (star * beta).abs();
            whole += star;
        }
        for p in currents(&stack(End::SpinSink, &elements, End::SpinSink).solve(State::Parallel)) {
            within(p, emf / whole, terms / whole, 1e-11);
        }
    }

    #[test]
    fn a_higher_barrier_always_injects_more_where_it_can(
        beta in 0.01..0.95, r_f in -16.0..-10.0, r_n in -16.0..-6.0, above in 0.05..0.95, low in -18.0..-4.0, step in 0.01..4.0,
    ) {
        let (r_f, r_n) = (10_f64.powf(r_f), 10_f64.powf(r_n));
        // γ above what crosses without a barrier: between βr_F/(r_F + r_N) and 1.
        let bare = beta * r_f / (r_f + r_n);
        let gamma = bare + above * (0.99 - bare);
        let p = |r_b: f64| injected(&single_contact(beta, r_f, r_n, gamma, r_b));
        let (small, large) = (p(10_f64.powf(low)), p(10_f64.powf(low + step)));
        // Where r_b* is nothing beside r_N both are equal to rounding.
        prop_assert!(large >= small * (1.0 - 1e-15), "{large} after {small}");
        prop_assert!(p(1e3) > p(r_n) && p(r_n) > bare);
        prop_assert!(p(1e3) <= gamma * (1.0 + 1e-15));
    }

    #[test]
    fn no_overflow_and_no_loss_in_very_thick_and_very_thin_layers(plan in plan(), thick in 300.0..1e3) {
        let scaled_to = |t: f64| {
            let mut scaled = plan.clone();
            for element in &mut scaled.elements {
                if let Element::Layer(l) = element {
                    l.thickness = Thickness::from_si(t * l.length.si());
                }
            }
            scaled
        };
        let device = scaled_to(thick).build();
        for state in BOTH {
            let solution = device.solve(state);
            prop_assert!(solution.faces.iter().flat_map(number).all(f64::is_finite));
            prop_assert!(solution.resistance_area.si().is_finite());
        }
        prop_assert!(change(&device).is_finite());
        // T = 1e-6 in two pieces is T = 1e-6.
        let thin = scaled_to(1e-6);
        let mut halves = scaled_to(5e-7);
        let inner = |k: usize| k > 0 && k + 1 < plan.elements.len();
        halves.elements = thin.elements.iter().enumerate().flat_map(|(k, e)| {
            match (e, halves.elements[k]) {
                (Element::Layer(_), half) if inner(k) => vec![half, half],
                _ => vec![*e],
            }
        }).collect();
        let (a, b) = (thin.build(), halves.build());
        let (first, second) = (a.solve(State::Parallel), b.solve(State::Parallel));
        let last = (first.faces.len() - 1, second.faces.len() - 1);
        within_at("p", second.faces[1].polarization.si(), first.faces[1].polarization.si(), 1.0, ALLOWED);
        within_at("u", accumulations(&second)[last.1 - 1], accumulations(&first)[last.0 - 1], accumulation_scale(&a, last.0 - 1), ALLOWED);
        close_at("RA", second.resistance_area.si(), first.resistance_area.si(), ALLOWED);
    }
}

#[test]
fn a_thick_magnet_polarizes_to_its_own_asymmetry() {
    for t in [40.0, 300.0, 1e3, 1e6] {
        let device = stack(
            End::SpinSink,
            &[
                layer(1e-7, 0.46, 6e-8, t * 6e-8, Fixed),
                layer(1e-7, 0.46, 6e-8, t * 6e-8, Fixed),
            ],
            thick_normal(4e-9),
        );
        let p = currents(&device.solve(State::Parallel));
        close(p[1], 0.46, 1e-14);
    }
}

#[test]
fn a_thin_magnet_injects_with_the_square_of_its_thickness() {
    // Far side reflecting: source βr_F tanh(Θ/2) behind r_F coth Θ, so p = βΘ²/2 where r_N ≪ r_F/Θ and
    // Θ ≪ 1: corrections Θ² and r_NΘ/r_F, below 1e-11 here. An error of 1e-16 in the thickness of a sum would show.
    for theta in [1e-6, 1e-7, 1e-9] {
        let r_f = 1e-7 * 6e-8 / ((1.0 - 0.5) * (1.0 + 0.5));
        let device = stack(
            End::Reflecting,
            &[layer(1e-7, 0.5, 6e-8, theta * 6e-8, Fixed)],
            thick_normal(r_f * 1e-6),
        );
        close(injected(&device), 0.25 * theta * theta, 3e-12);
    }
}

#[test]
fn exact_limits_of_the_interface() {
    let bare = stack(
        thick_ferromagnet(4.5e-15, 0.46, Fixed),
        &[],
        thick_normal(4e-9),
    );
    for gamma in [-0.9, 0.0, 0.5] {
        let with = single_contact(0.46, 4.5e-15, 4e-9, gamma, 0.0);
        close(injected(&with), injected(&bare), 0.0);
        close(
            resistance(&with, State::Parallel),
            resistance(&bare, State::Parallel),
            0.0,
        );
        within(
            injected(&single_contact(0.46, 4.5e-15, 4e-9, gamma, 1e10)),
            gamma,
            1.0,
            1e-15,
        );
    }
    // A channel without end carries nothing from one magnet to the other, one of no length everything.
    let valve = |t: f64| {
        let elements = [
            interface(4e-9, 0.5, 0.0, Fixed),
            normal(4e-9, 2e-6, t),
            interface(4e-9, 0.5, 0.0, Free),
        ];
        stack(
            thick_ferromagnet(4.5e-15, 0.46, Fixed),
            &elements,
            thick_ferromagnet(4.5e-15, 0.46, Free),
        )
    };
    close(change(&valve(f64::INFINITY)), 0.0, 0.0);
    // Four sources in series: ΔRA = 4a²/2R.
    let (emf, r) = (0.46 * 4.5e-15 + 0.5 * 4e-9, 4.5e-15 + 4e-9);
    close(change(&valve(0.0)), 2.0 * emf * emf / r, 1e-14);
}

#[test]
fn resistances_that_alternate_over_24_decades_do_not_overflow() {
    // Each pair of layers multiplies the ratio form by about 1e24: without scaling down, 13 of them overflow.
    // What lies behind the first pair is shorted to 1e-24 of it, so p at the magnet is known.
    let (r_f, beta, large, small): (f64, f64, f64, f64) = (1e5, 0.46, 1e6, 1e-18);
    let pair = [normal(large, 1e-6, 1.0), normal(small, 1e-6, 1.0)];
    for pairs in [1, 12, 100] {
        let elements: Vec<Element> = (0..pairs).flat_map(|_| pair).collect();
        let device = stack(
            thick_ferromagnet(r_f, beta, Fixed),
            &elements,
            End::Reflecting,
        );
        let solution = device.solve(State::Parallel);
        assert!(
            solution.faces.iter().flat_map(number).all(f64::is_finite),
            "{pairs} pairs"
        );
        close(
            currents(&solution)[0],
            beta * r_f / (r_f + large * 1.0_f64.tanh()),
            1e-13,
        );
        let image: Vec<Element> = elements.iter().rev().copied().collect();
        let image = stack(End::Reflecting, &image, thick_ferromagnet(r_f, beta, Fixed));
        close(
            injected(&image),
            beta * r_f / (r_f + large * 1.0_f64.tanh()),
            1e-13,
        );
    }
}
