//! A second road to the same answers: one dense linear system in doubles for seeded random stacks.
//!
//! In each medium u = r[a·e^((x−t)/λ) + b·e^(−x/λ)] and J = β − [a·e^((x−t)/λ) − b·e^(−x/λ)]; the conditions at
//! the ends and joints make one system for all a and b, solved by Gaussian elimination with row scaling and
//! pivoting, once per source. Nothing of the ladder (impedances, sweeps, tanh) is used.
//!
//! Source: Valet and Fert, Phys. Rev. B 48, 7099 (1993), equations recalled.

#![allow(clippy::panic)]

use injectance::models::ladder::{Element, End, State};
use injectance::quantities::dimensions::Measured;

use crate::bare::{Fixed, Free, interface, layer, medium, stack};
use crate::compare::within_at;

/// The dense system loses digits with the ratio of its resistances, here up to 1e5 between neighbours, and a
/// double carries 1e-16. The ladder itself is checked to 1e-12 elsewhere.
const ALLOWED: f64 = 1e-11;
/// Part of j, and part of the largest u of the stack, below which the dense system does not resolve them.
const J_FLOOR: f64 = 1e-3;
const U_FLOOR: f64 = 1e-6;
const STACKS: usize = 300;

/// SplitMix64 (Steele, Lea, Flood 2014, recalled): a seeded stream without a dependency.
struct Stream(u64);

impl Stream {
    fn unit(&mut self) -> f64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        // 32 bits are enough and convert exactly.
        f64::from(u32::try_from((z ^ (z >> 31)) >> 32).unwrap_or(0)) / 4_294_967_296.0
    }

    fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.unit()
    }

    fn log_between(&mut self, low: f64, high: f64) -> f64 {
        (self.between(low.ln(), high.ln())).exp()
    }

    fn chance(&mut self, part: f64) -> bool {
        self.unit() < part
    }
}

#[derive(Clone, Copy, Debug)]
enum Kind {
    /// r, T, ρt.
    Medium { r: f64, reduced: f64, ohmic: f64 },
    /// r_b*.
    Joint { r_b: f64 },
}

/// A medium or a joint with its asymmetry and whether it flips.
#[derive(Clone, Copy, Debug)]
struct Piece {
    kind: Kind,
    asymmetry: f64,
    flips: bool,
}

#[derive(Clone, Copy, PartialEq, Debug)]
enum Ending {
    Open,
    Sink,
    Reflecting,
    Fed,
}

/// A stack twice: as pieces for the dense system and as input of the ladder.
struct Case {
    /// With the open ends among them.
    pieces: Vec<Piece>,
    endings: [Ending; 2],
    elements: Vec<Element>,
    ends: [End; 2],
}

fn random_layer(s: &mut Stream) -> (Piece, Element, injectance::models::ladder::Layer) {
    let (rho, lambda) = (s.log_between(1e-8, 1e-6), s.log_between(3e-9, 3e-7));
    let reduced = s.log_between(0.05, 6.0);
    let beta = if s.chance(0.4) {
        0.0
    } else {
        s.between(-0.95, 0.95)
    };
    let (flips, t) = (s.chance(0.5), reduced * lambda);
    let turn = if flips { Free } else { Fixed };
    let kind = Kind::Medium {
        r: rho * lambda / (1.0 - beta * beta),
        reduced: t / lambda,
        ohmic: rho * t,
    };
    let piece = Piece {
        kind,
        asymmetry: beta,
        flips,
    };
    (
        piece,
        layer(rho, beta, lambda, t, turn),
        medium(rho, beta, lambda, t, turn),
    )
}

fn random_joint(s: &mut Stream) -> (Piece, Element) {
    let (r_b, gamma) = (s.log_between(1e-16, 1e-12), s.between(-0.95, 0.95));
    let flips = s.chance(0.5);
    let delta = if s.chance(0.3) {
        s.log_between(0.05, 3.0)
    } else {
        0.0
    };
    let kind = if delta > 0.0 {
        Kind::Medium {
            r: r_b / delta,
            reduced: delta,
            ohmic: r_b * (1.0 - gamma * gamma),
        }
    } else {
        Kind::Joint { r_b }
    };
    let turn = if flips { Free } else { Fixed };
    (
        Piece {
            kind,
            asymmetry: gamma,
            flips,
        },
        interface(r_b, gamma, delta, turn),
    )
}

fn random_case(s: &mut Stream) -> Case {
    let (mut pieces, mut elements) = (Vec::new(), Vec::new());
    let mut endings = [Ending::Sink; 2];
    let mut ends = [End::SpinSink; 2];
    let mut outer = [None, None];
    for side in 0..2 {
        (endings[side], ends[side]) = match (4.0 * s.unit()).floor() {
            x if x < 1.0 => {
                let (piece, _, layer) = random_layer(s);
                outer[side] = Some(piece);
                (Ending::Open, End::SemiInfinite(layer))
            }
            x if x < 2.0 => (Ending::Sink, End::SpinSink),
            x if x < 3.0 => (Ending::Reflecting, End::Reflecting),
            _ => (Ending::Fed, End::FedInPlane),
        };
    }
    pieces.extend(outer[0]);
    let layers = 1 + (6.0 * s.unit()) as usize;
    for i in 0..layers {
        if (i > 0 || outer[0].is_some()) && s.chance(0.7) {
            let (piece, element) = random_joint(s);
            pieces.push(piece);
            elements.push(element);
        }
        let (piece, element, _) = random_layer(s);
        pieces.push(piece);
        elements.push(element);
    }
    if outer[1].is_some() && s.chance(0.7) {
        let (piece, element) = random_joint(s);
        pieces.push(piece);
        elements.push(element);
    }
    pieces.extend(outer[1]);
    Case {
        pieces,
        endings,
        elements,
        ends,
    }
}

/// A linear form in the unknowns.
type Form = Vec<(usize, f64)>;

fn scaled(form: &Form, by: f64) -> Form {
    form.iter().map(|(k, v)| (*k, v * by)).collect()
}

/// Gaussian elimination with scaled partial pivoting, many right-hand sides.
fn eliminate(rows: &mut [Vec<f64>], rhs: &mut [Vec<f64>]) {
    let n = rows.len();
    for (row, right) in rows.iter_mut().zip(rhs.iter_mut()) {
        let largest = row.iter().fold(0.0_f64, |m, v| m.max(v.abs()));
        assert!(largest > 0.0, "an empty equation");
        row.iter_mut()
            .chain(right.iter_mut())
            .for_each(|v| *v /= largest);
    }
    for c in 0..n {
        let pivot = (c..n)
            .max_by(|a, b| rows[*a][c].abs().total_cmp(&rows[*b][c].abs()))
            .unwrap_or(c);
        rows.swap(c, pivot);
        rhs.swap(c, pivot);
        let (lead, lead_rhs) = (rows[c].clone(), rhs[c].clone());
        for i in (0..n).filter(|i| *i != c) {
            let factor = rows[i][c] / lead[c];
            if factor.abs() > 0.0 {
                rows[i]
                    .iter_mut()
                    .zip(&lead)
                    .for_each(|(v, l)| *v -= factor * l);
                rhs[i]
                    .iter_mut()
                    .zip(&lead_rhs)
                    .for_each(|(v, l)| *v -= factor * l);
            }
        }
    }
    for (i, right) in rhs.iter_mut().enumerate() {
        right.iter_mut().for_each(|v| *v /= rows[i][i]);
    }
}

/// u and J on both sides of each medium, one number per source driven alone; RA per pair of sources.
struct Dense {
    /// By piece: (u left, J left, u right, J right) per source. Empty for a joint.
    sides: Vec<[Vec<f64>; 4]>,
    ohmic: f64,
    /// reading[i][k]: what piece i adds to RA when source k alone is driven.
    reading: Vec<Vec<f64>>,
}

fn dense(case: &Case) -> Dense {
    let n = case.pieces.len();
    let open = [
        case.endings[0] == Ending::Open,
        case.endings[1] == Ending::Open,
    ];
    let mut unknowns = 0;
    // u and J − β on the left and the right of each medium.
    let mut forms: Vec<Option<[Form; 4]>> = Vec::new();
    for (i, piece) in case.pieces.iter().enumerate() {
        let Kind::Medium { r, reduced, .. } = piece.kind else {
            forms.push(None);
            continue;
        };
        let k = unknowns;
        if open[0] && i == 0 {
            let (u, j) = (vec![(k, r)], vec![(k, -1.0)]);
            forms.push(Some([u.clone(), j.clone(), u, j]));
            unknowns += 1;
        } else if open[1] && i == n - 1 {
            let (u, j) = (vec![(k, r)], vec![(k, 1.0)]);
            forms.push(Some([u.clone(), j.clone(), u, j]));
            unknowns += 1;
        } else {
            let e = (-reduced).exp();
            forms.push(Some([
                vec![(k, r * e), (k + 1, r)],
                vec![(k, -e), (k + 1, 1.0)],
                vec![(k, r), (k + 1, r * e)],
                vec![(k, -1.0), (k + 1, e)],
            ]));
            unknowns += 2;
        }
    }
    let mut rows: Vec<Vec<f64>> = Vec::new();
    let mut rhs: Vec<Vec<f64>> = Vec::new();
    let mut equation = |parts: &[Form], drives: &[(usize, f64)]| {
        let (mut row, mut right) = (vec![0.0; unknowns], vec![0.0; n]);
        parts.iter().flatten().for_each(|(k, v)| row[*k] += v);
        drives.iter().for_each(|(k, v)| right[*k] += v);
        rows.push(row);
        rhs.push(right);
    };
    let media: Vec<(usize, &[Form; 4])> = forms
        .iter()
        .enumerate()
        .filter_map(|(i, f)| f.as_ref().map(|f| (i, f)))
        .collect();
    let beta = |i: usize| case.pieces[i].asymmetry;
    for (ending, (i, f), at) in [
        (case.endings[0], media[0], 0),
        (case.endings[1], media[media.len() - 1], 2),
    ] {
        match ending {
            Ending::Open => {}
            Ending::Sink => equation(&[f[at].clone()], &[]),
            Ending::Reflecting => equation(&[f[at + 1].clone()], &[(i, -beta(i))]),
            Ending::Fed => equation(&[f[at + 1].clone()], &[]),
        }
    }
    for pair in media.windows(2) {
        let ((p, left), (q, right)) = (pair[0], pair[1]);
        equation(
            &[left[3].clone(), scaled(&right[1], -1.0)],
            &[(q, beta(q)), (p, -beta(p))],
        );
        let step = [right[0].clone(), scaled(&left[2], -1.0)];
        if let (true, Kind::Joint { r_b }) = (q == p + 2, case.pieces[p + 1].kind) {
            let with = [step[0].clone(), step[1].clone(), scaled(&left[3], r_b)];
            equation(&with, &[(p + 1, r_b * beta(p + 1)), (p, -r_b * beta(p))]);
        } else {
            equation(&step, &[]);
        }
    }
    assert_eq!(rows.len(), unknowns);
    eliminate(&mut rows, &mut rhs);
    let value = |form: &Form, own: Option<usize>| -> Vec<f64> {
        (0..n)
            .map(|source| {
                let sum: f64 = form.iter().map(|(k, v)| v * rhs[*k][source]).sum();
                sum + if own == Some(source) {
                    beta(source)
                } else {
                    0.0
                }
            })
            .collect()
    };
    let sides: Vec<[Vec<f64>; 4]> = forms
        .iter()
        .enumerate()
        .map(|(i, f)| match f {
            None => Default::default(),
            Some(f) => [
                value(&f[0], None),
                value(&f[1], Some(i)),
                value(&f[2], None),
                value(&f[3], Some(i)),
            ],
        })
        .collect();
    let (mut ohmic, mut reading) = (0.0, Vec::new());
    let (first, last) = (media[0].0, media[media.len() - 1].0);
    for (i, piece) in case.pieces.iter().enumerate() {
        match piece.kind {
            Kind::Joint { r_b } => {
                ohmic += r_b;
                reading.push(
                    sides[i - 1][3]
                        .iter()
                        .map(|j| -piece.asymmetry * r_b * j)
                        .collect(),
                );
            }
            Kind::Medium { r, ohmic: own, .. } => {
                let strip = (i == first && case.endings[0] == Ending::Fed)
                    || (i == last && case.endings[1] == Ending::Fed);
                if !strip {
                    ohmic += own;
                }
                let from =
                    |cut: bool, side: usize, k: usize| if cut { 0.0 } else { sides[i][side][k] };
                let cut_left = i == first && matches!(case.endings[0], Ending::Open | Ending::Fed);
                let cut_right = i == last && matches!(case.endings[1], Ending::Open | Ending::Fed);
                reading.push(
                    (0..n)
                        .map(|k| piece.asymmetry * (from(cut_right, 2, k) - from(cut_left, 0, k)))
                        .collect(),
                );
                assert!(r > 0.0);
            }
        }
    }
    Dense {
        sides,
        ohmic,
        reading,
    }
}

#[test]
fn seeded_random_stacks() {
    let mut s = Stream(20_260_117);
    let (mut faces_compared, mut changes) = (0, 0);
    for number in 0..STACKS {
        let case = random_case(&mut s);
        let road = dense(&case);
        let device = stack(case.ends[0], &case.elements, case.ends[1]);
        let shift = usize::from(case.endings[0] == Ending::Open);
        for state in [State::Parallel, State::Antiparallel] {
            let sign: Vec<f64> = case
                .pieces
                .iter()
                .map(|p| {
                    if p.flips && state == State::Antiparallel {
                        -1.0
                    } else {
                        1.0
                    }
                })
                .collect();
            let sum = |parts: &[f64]| parts.iter().zip(&sign).map(|(v, w)| v * w).sum::<f64>();
            let size = |parts: &[f64]| parts.iter().map(|v| v.abs()).sum::<f64>();
            let solution = device.solve(state);
            for (k, face) in solution.faces.iter().enumerate() {
                // The face's left neighbour is a medium, or its right one is: two joints never meet.
                let right_of = (k + shift)
                    .checked_sub(1)
                    .filter(|i| !road.sides[*i][0].is_empty());
                let (u, j) = match right_of {
                    Some(i) => (&road.sides[i][2], &road.sides[i][3]),
                    None => (&road.sides[k + shift][0], &road.sides[k + shift][1]),
                };
                let what = format!("stack {number}, face {k}, {state:?}");
                // In the dense system J is β less a number of the same size, and u a difference where a sink is
                // near: what it knows is relative to the largest numbers of the stack.
                within_at(
                    &what,
                    face.polarization.si(),
                    sum(j),
                    size(j).max(J_FLOOR),
                    ALLOWED,
                );
                let got = face.accumulation_per_current_density.si();
                let floor = road
                    .sides
                    .iter()
                    .flatten()
                    .map(|u| size(u))
                    .fold(0.0, f64::max)
                    * U_FLOOR;
                within_at(&what, got, sum(u), size(u).max(floor), ALLOWED);
                faces_compared += 1;
            }
            let readings: Vec<f64> = road.reading.iter().map(|r| sum(r)).collect();
            let want = road.ohmic + sum(&readings);
            let scale = road.ohmic + road.reading.iter().map(|r| size(r)).sum::<f64>();
            within_at(
                &format!("stack {number}, RA {state:?}"),
                solution.resistance_area.si(),
                want,
                scale,
                ALLOWED,
            );
        }
        // Pairs of a source that flips and a reader that does not, twice (both orders) and with the sign turned twice.
        let (mut want, mut scale) = (0.0, 0.0);
        for (i, _) in case.pieces.iter().enumerate().filter(|(_, p)| !p.flips) {
            for (k, _) in case.pieces.iter().enumerate().filter(|(_, p)| p.flips) {
                want -= 4.0 * road.reading[i][k];
                scale += 4.0 * road.reading[i][k].abs();
            }
        }
        if scale > 0.0 {
            within_at(
                &format!("stack {number}, ΔRA"),
                device.resistance_area_change().si(),
                want,
                scale,
                ALLOWED,
            );
            changes += 1;
        }
    }
    assert!(faces_compared > 3000, "{faces_compared}");
    assert!(changes > 200, "{changes}");
}
