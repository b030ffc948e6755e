//! Multilayers with the current perpendicular to the planes, and layers that end somewhere.
//!
//! Source: Valet and Fert, Phys. Rev. B 48, 7099 (1993) (abstract read, equations recalled and confirmed
//! against a boundary-value solution). All rows are derived.

use injectance::models::ladder::{Element, End, Stack, State};
use serde_json::Value;

use super::{rows, text_number};
use crate::bare::{
    Fixed, Free, change, interface, layer, medium, polarization, resistance, stack, thick_normal,
};
use crate::compare::{close, close_at};

/// The list of lists of a row, `null` as infinite.
fn table(value: &Value) -> Vec<Vec<f64>> {
    value
        .as_array()
        .unwrap()
        .iter()
        .map(|line| {
            line.as_array()
                .unwrap()
                .iter()
                .map(|n| {
                    if n.is_null() {
                        f64::INFINITY
                    } else {
                        text_number(n)
                    }
                })
                .collect()
        })
        .collect()
}

#[test]
fn five_layers_without_symmetry() {
    for row in rows("valet_fert_1993.five_layer_stack") {
        let layers = table(&row.inputs["layers rho, beta, lambda, t"]);
        let interfaces = table(&row.inputs["interfaces r_b, gamma"]);
        assert_eq!((layers.len(), interfaces.len()), (5, 4));
        let mut elements: Vec<Element> = Vec::new();
        for (i, face) in interfaces.iter().enumerate() {
            elements.push(interface(face[0], face[1], 0.0, Fixed));
            if let [rho, beta, lambda, t] = layers[i + 1][..]
                && i + 1 < interfaces.len()
            {
                elements.push(layer(rho, beta, lambda, t, Fixed));
            }
        }
        let end = |l: &[f64]| End::SemiInfinite(medium(l[0], l[1], l[2], l[3], Fixed));
        let device = stack(end(&layers[0]), &elements, end(&layers[4]));
        assert_eq!(device.len(), 7);
        let got = resistance(&device, State::Parallel);
        row.check(got, 1e-14);
        // With all digits that were printed: 8.90310832265417714e-15.
        close(got, 8.903_108_322_654_177e-15, 1e-14);
    }
}

/// N bilayers F/N with alternate magnets free; at both ends the two channels meet (u = 0).
fn multilayer(
    bilayers: usize,
    (beta, rho_star, t_f): (f64, f64, f64),
    (r_b, gamma): (f64, f64),
    lambda: f64,
) -> Stack {
    let rho_f = rho_star * (1.0 - beta) * (1.0 + beta);
    let mut elements = Vec::new();
    for i in 0..bilayers {
        let turn = if i % 2 == 1 { Free } else { Fixed };
        elements.push(interface(r_b, gamma, 0.0, turn));
        elements.push(layer(rho_f, beta, lambda, t_f, turn));
        elements.push(interface(r_b, gamma, 0.0, turn));
        elements.push(layer(6e-9, 0.0, lambda, 6e-9, Fixed));
    }
    stack(End::SpinSink, &elements, End::SpinSink)
}

#[test]
fn two_current_series_resistor() {
    // Long λ: √[(AR_AP − AR_P)·AR_AP] = N(βρ*_F t_F + 2γAR*), whatever the normal layers do. Inputs of the row
    // are those recalled for cobalt and copper.
    for row in rows("valet_fert_1993.series_resistor_root") {
        let bilayers = 20;
        close(row.input("bilayers"), 20.0, 0.0);
        let magnet = (row.input("beta"), row.input("rho_star"), row.input("t_F"));
        let device = multilayer(
            bilayers,
            magnet,
            (row.input("r_b"), row.input("gamma")),
            1.0,
        );
        let root = (change(&device) * resistance(&device, State::Antiparallel)).sqrt();
        // Corrections of order (t/λ)·r/r: below 1e-12 at λ = 1 m.
        row.check(root, 1e-12);
        // It is a law of long λ: with λ of the order of the layers it fails by far.
        let short = multilayer(
            bilayers,
            magnet,
            (row.input("r_b"), row.input("gamma")),
            1e-8,
        );
        let root = (change(&short) * resistance(&short, State::Antiparallel)).sqrt();
        assert!(root < 0.9 * row.computed, "{root:e}");
    }
    for (bilayers, beta, gamma, r_b, t_f) in [
        (2, 0.3, 0.9, 1e-16, 1e-9),
        (6, -0.4, 0.77, 5e-16, 6e-9),
        (50, 0.7, -0.1, 2e-15, 3e-9),
    ] {
        let rho_star = 1e-7;
        let device = multilayer(bilayers, (beta, rho_star, t_f), (r_b, gamma), 1.0);
        let root = (change(&device) * resistance(&device, State::Antiparallel)).sqrt();
        #[allow(clippy::cast_precision_loss)]
        let n = bilayers as f64;
        close(
            root,
            (n * (beta * rho_star * t_f + 2.0 * gamma * r_b)).abs(),
            1e-10,
        );
    }
}

/// Spin impedance and source of a magnet of thickness Θ = t/λ seen from its near face, by what lies beyond.
fn ended(end: End, theta: f64, r_f: f64, beta: f64) -> (f64, f64) {
    let tanh = theta.tanh();
    match end {
        End::SpinSink => (r_f * tanh, beta * r_f * tanh),
        End::Reflecting => (r_f / tanh, beta * r_f * (0.5 * theta).tanh()),
        End::FedInPlane => (r_f / tanh, beta * r_f / tanh),
        End::SemiInfinite(_) => (r_f, beta * r_f),
    }
}

#[test]
fn ends_of_a_magnet() {
    let (beta, r_f, lambda, r_n): (f64, f64, f64, f64) = (0.6, 4.5e-15, 5e-9, 6e-15);
    let rho = r_f * (1.0 - beta) * (1.0 + beta) / lambda;
    let thick = End::SemiInfinite(medium(rho, beta, lambda, f64::INFINITY, Fixed));
    let mut compared = 0;
    for theta in [1e-6, 0.01, 0.2, 1.0, 4.0, 25.0] {
        for end in [thick, End::SpinSink, End::Reflecting, End::FedInPlane] {
            let (impedance, source) = ended(end, theta, r_f, beta);
            let element = layer(rho, beta, lambda, theta * lambda, Fixed);
            let left = stack(end, &[element], thick_normal(r_n));
            let what = format!("Θ = {theta}, {end:?}");
            let sides = left.sides(1, State::Parallel);
            close_at(&what, sides.left_impedance, impedance, 1e-13);
            close_at(&what, sides.left_source, source, 1e-13);
            close_at(&what, sides.right_impedance, r_n, 1e-13);
            let p = source / (impedance + r_n);
            close_at(&what, polarization(&left, 1, State::Parallel), p, 1e-13);
            // u on the near side is what the current does to the channel: J·r_N, up on the right of a magnet.
            let u = left.solve(State::Parallel).faces[1].accumulation_per_current_density;
            close_at(
                &what,
                injectance::quantities::dimensions::Measured::si(u),
                p * r_n,
                1e-13,
            );
            // The same from the other side.
            let right = stack(thick_normal(r_n), &[element], end);
            close_at(&what, polarization(&right, 0, State::Parallel), p, 1e-13);
            compared += 1;
        }
    }
    assert_eq!(compared, 24);
    // At Θ = 0.2 the sources of the last two differ 51-fold: an end must say which it is.
    let (_, reflecting) = ended(End::Reflecting, 0.2, r_f, beta);
    let (_, fed) = ended(End::FedInPlane, 0.2, r_f, beta);
    close(fed / reflecting, 51.0, 0.01);
}
