//! What a colleague would notice about an answer: the conditions of every finding.

use crate::designs::design::{Design, Part, Written};
use crate::designs::layers::ContactSpec;
use crate::devices::inputs::Input;
use crate::devices::vertical::{EndPlan, Position};
use crate::documents::reader::Faults;
use crate::materials::choose::{self, Mark, Wanted};
use crate::materials::library::Library;
use crate::materials::record::ContactKind;
use crate::models::validity::{self, Caveat, NEAR_CURIE, NEAR_ONE, SMALL_BIAS, THICK_FERROMAGNET};
use crate::quantities::dimensions::{ElectricPotential, Measured};
use crate::quantities::spread::Spread;

use super::assess::Assessment;
use super::findings::{Finding, Named, ordered};
use super::window::NoWindow;

/// A recalled or assumed input matters from this share on.
const MATTERS: f64 = 0.1;
/// A mismatch is pointed out when the channel's spin impedance exceeds the contact's by this factor.
const MISMATCH: f64 = 10.0;
/// A published value of the same contact is pointed out when it differs by this factor.
const OTHERWISE: f64 = 10.0;
/// A ferromagnet's own spin resistance does not matter below this fraction of its interface's.
const HIDDEN: f64 = 0.01;

/// All findings of an answer, in the order of the rules.
pub(super) fn notice(a: &Assessment, design: &Design, library: &Library) -> Vec<Finding> {
    let mut out = Vec::new();
    if let Some(m) = &a.mismatch
        && m.channel.si() > MISMATCH * m.contact.si()
    {
        out.push(Finding::ConductivityMismatch {
            ratio: m.channel.si() / m.contact.si(),
            offered: m.offered,
            injected: m.crossing,
        });
    }
    windows(a, &mut out);
    thicknesses(a, design, &mut out);
    barriers(a, design, library, &mut out);
    bare_contacts(a, &mut out);
    magnets(a, library, &mut out);
    strained(a, library, design, &mut out);
    records(a, &mut out);
    numbers(a, &mut out);
    measured_otherwise(a, &mut out);
    for (end, word) in [(&a.device.left, a.ends[0]), (&a.device.right, a.ends[1])] {
        if matches!(end, EndPlan::FedInPlane) {
            out.push(Finding::StripResistanceLeftOut { end: word });
        }
    }
    if !library.replaced().is_empty() {
        out.push(Finding::RecordReplaced {
            ids: library.replaced().to_vec(),
        });
    }
    ordered(out)
}

fn windows(a: &Assessment, out: &mut Vec<Finding>) {
    let alone = a
        .contact_windows
        .iter()
        .any(|(_, w)| w.as_ref().is_ok_and(|w| !w.intervals.is_empty()));
    let mut unknown = false;
    for window in a
        .goals
        .iter()
        .map(|g| &g.window)
        .chain(a.default_window.as_ref())
    {
        match window {
            Ok(w) if w.intervals.is_empty() => out.push(Finding::GoalOutOfReach {
                target: w.wish.target,
                best: w.best.value,
                at: w.best.at,
                alone,
            }),
            Ok(w) if !w.intervals.iter().any(|i| i.holds(w.here)) => {
                out.push(Finding::OutsideWindow {
                    window: Box::new(w.clone()),
                });
            }
            Err(NoWindow::NoAsymmetry) => unknown = true,
            _ => {}
        }
    }
    if unknown {
        out.push(Finding::WindowUnknown);
    }
}

fn path(a: &Assessment, at: Position) -> String {
    a.device.name(at).map_or(String::new(), |n| n.path.clone())
}

fn thicknesses(a: &Assessment, design: &Design, out: &mut Vec<Finding>) {
    let stated = |at: Position| match at {
        Position::LeftEnd => design.left_stated && design.written != Written::Stack,
        Position::RightEnd => design.right_stated && design.written != Written::Stack,
        Position::Element(_) => true,
    };
    if let Some(layer) = a.blueprint.layer(a.device.channel) {
        let (t, length) = (layer.thickness, layer.length);
        let is_end = !matches!(a.device.channel, Position::Element(_));
        if is_end && t.si() < THICK_FERROMAGNET * length.si() {
            out.push(Finding::ThinChannel {
                thickness: t,
                length,
            });
        }
        if !is_end && a.device.has_two_states && t.si() > length.si() {
            out.push(Finding::LongChannel {
                thickness: t,
                length,
            });
        }
    }
    for (at, interface) in [
        (Position::LeftEnd, 0),
        (
            Position::RightEnd,
            a.blueprint.elements.len().wrapping_sub(1),
        ),
    ] {
        if !stated(at)
            && a.device.is_ferromagnet(at)
            && let Some(layer) = a.blueprint.layer(at)
            && let Some(Caveat::ThinFerromagnet { .. }) = validity::ferromagnet(layer)
        {
            let r_b = a
                .blueprint
                .interface(interface)
                .map_or(0.0, |x| x.spin_resistance.si());
            if layer.spin_resistance().si() >= HIDDEN * r_b {
                out.push(Finding::ThinFerromagnet {
                    path: path(a, at),
                    thickness: layer.thickness,
                    length: layer.length,
                    thick: layer.spin_resistance(),
                });
            }
        }
    }
}

fn contact_spec<'a>(design: &'a Design, path: &str) -> Option<&'a ContactSpec> {
    design.parts.iter().find_map(|p| match p {
        Part::Contact(c) if c.path == path => Some(c),
        _ => None,
    })
}

fn barriers(a: &Assessment, design: &Design, library: &Library, out: &mut Vec<Finding>) {
    let faults = Faults::default();
    for part in &design.parts {
        let Part::Contact(contact) = part else {
            continue;
        };
        let Some(thickness) = &contact.thickness else {
            continue;
        };
        let height = contact
            .material
            .as_ref()
            .and_then(|m| library.id_of(&m.value))
            .and_then(|id| library.material(&id, &faults))
            .and_then(|m| {
                m.values
                    .iter()
                    .find(|v| v.property.name == "monolayer")
                    .map(|v| v.reading.si)
            });
        if let Some(height) = height
            && thickness.value.si < 2.0 * height * (1.0 - 1e-9)
        {
            out.push(Finding::ThinBarrier {
                path: contact.path.clone(),
                thickness: thickness.value.value(),
                monolayers: thickness.value.si / height,
            });
        }
    }
    let Some(j) = a.device.current_density else {
        return;
    };
    for (i, _) in a.blueprint.elements.iter().enumerate() {
        let Some(interface) = a.blueprint.interface(i) else {
            continue;
        };
        let Some(face) = a.faces[0].get(i) else {
            continue;
        };
        let read = interface
            .spin_resistance
            .as_measured(interface.asymmetry, face.polarization);
        let voltage = read.si() * j.si();
        if voltage > SMALL_BIAS {
            let path = path(a, Position::Element(i));
            let thickness = contact_spec(design, &path).and_then(|c| c.thickness.as_ref());
            out.push(Finding::HighBias {
                voltage: ElectricPotential::from_si(voltage),
                thickness: thickness.map(|t| t.value.value()),
                path,
            });
        }
    }
}

fn bare_contacts(a: &Assessment, out: &mut Vec<Finding>) {
    for element in 0..a.blueprint.elements.len() {
        if a.blueprint
            .interface(element)
            .is_none_or(|x| x.spin_resistance.si() > 0.0)
        {
            continue;
        }
        let sides = a.device.neighbours(element);
        let [Some(left), Some(right)] = sides.map(|at| a.device.name(at)) else {
            continue;
        };
        let magnet = sides.into_iter().find(|at| a.device.is_ferromagnet(*at));
        let semiconductor = [left, right].into_iter().find(|n| n.semiconductor);
        match (magnet.and_then(|at| a.device.name(at)), semiconductor) {
            (Some(f), Some(n)) => out.push(Finding::BareSemiconductor {
                ferromagnet: f.label.clone(),
                channel: n.label.clone(),
            }),
            // Between layers of stated numbers the user decides; two layers of one material join.
            _ if left.material.is_some()
                && right.material.is_some()
                && left.material != right.material =>
            {
                out.push(Finding::InterfaceLeftOut {
                    path: path(a, Position::Element(element)),
                });
            }
            _ => {}
        }
    }
}

fn magnets(a: &Assessment, library: &Library, out: &mut Vec<Finding>) {
    let faults = Faults::default();
    let temperature = a.device.temperature.si();
    let wanted = Wanted {
        temperature,
        doping: None,
        carrier_type: None,
        dopant: None,
    };
    let mut told: Vec<String> = Vec::new();
    for at in a.device.layers() {
        let Some(id) = a.device.name(at).and_then(|n| n.material.clone()) else {
            continue;
        };
        if !a.device.is_ferromagnet(at) || told.contains(&id) {
            continue;
        }
        let Some(material) = library.material(&id, &faults) else {
            continue;
        };
        if let Ok(chosen) = choose::value(&material, "curie_temperature", &wanted)
            && temperature > NEAR_CURIE * chosen.record.reading.si
        {
            out.push(Finding::CurieTemperature {
                material: id.clone(),
                curie: chosen.record.reading.si,
                temperature,
                record: chosen.record.common.id.clone(),
            });
        }
        told.push(id);
    }
}

/// Nonlinear and drift effects, for channels that are not metallic: neither a metal nor a semiconductor
/// doped above its critical density.
fn strained(a: &Assessment, library: &Library, design: &Design, out: &mut Vec<Finding>) {
    let (Some(layer), Some(j)) = (
        a.blueprint.layer(a.device.channel),
        a.device.current_density,
    ) else {
        return;
    };
    let name = a.device.name(a.device.channel);
    if name.is_some_and(|n| n.material.is_some() && !n.semiconductor)
        || is_metallic(a, library, design)
    {
        return;
    }
    let (p, ap) = (a.outcome.accumulation, a.outcome.accumulation_antiparallel);
    let larger = if ap.si().abs() > p.si().abs() { ap } else { p };
    for caveat in validity::channel(layer, larger, j, a.device.temperature) {
        match caveat {
            Caveat::Nonlinear {
                accumulation,
                thermal,
            } => {
                out.push(Finding::NotLinear {
                    accumulation,
                    thermal,
                });
            }
            Caveat::Drift { voltage, thermal } => out.push(Finding::Drift { voltage, thermal }),
            Caveat::ThinFerromagnet { .. } => {}
        }
    }
}

fn is_metallic(a: &Assessment, library: &Library, design: &Design) -> bool {
    let doping = match design.parts.get(design.channel) {
        Some(Part::Normal(layer)) => layer.doping.as_ref().map(|d| d.value.si),
        _ => None,
    };
    let critical = a
        .device
        .name(a.device.channel)
        .and_then(|n| n.material.as_ref())
        .and_then(|id| library.material(id, &Faults::default()))
        .and_then(|m| {
            m.values
                .iter()
                .filter(|v| v.property.name == "doping_critical")
                .map(|v| v.reading.si)
                .max_by(f64::total_cmp)
        });
    matches!((doping, critical), (Some(d), Some(c)) if d > c)
}

fn all_inputs(a: &Assessment) -> Vec<&Input> {
    a.device
        .table
        .inputs()
        .iter()
        .chain(a.device.likely.iter().map(|l| &l.input))
        .collect()
}

/// What the marks of the records say.
fn records(a: &Assessment, out: &mut Vec<Finding>) {
    let mut temperatures = Vec::new();
    let mut dopings = Vec::new();
    let mut dopants = Vec::new();
    let (mut wanted_doping, mut wanted_dopant) = (0.0, String::new());
    for input in all_inputs(a) {
        let record = input
            .provenance
            .records()
            .first()
            .cloned()
            .unwrap_or_default();
        for mark in &input.provenance.marks {
            match mark {
                Mark::OtherTemperature { record, wanted }
                    if input.name.ends_with("spin_memory_loss") =>
                {
                    out.push(Finding::MemoryLossOutsideTemperature {
                        record: *record,
                        wanted: *wanted,
                    });
                }
                Mark::OtherTemperature { record, .. } => {
                    temperatures.push((input.name.clone(), *record))
                }
                Mark::OtherDoping { record, wanted } => {
                    dopings.push((input.name.clone(), *record));
                    wanted_doping = *wanted;
                }
                Mark::OtherDopant { record, wanted } => {
                    dopants.push((input.name.clone(), record.clone()));
                    wanted_dopant.clone_from(wanted);
                }
                Mark::Borrowed { polarization } => {
                    borrowed(out, &input.name, &record, *polarization, input.reading.si);
                }
                _ => {}
            }
        }
    }
    if !temperatures.is_empty() {
        out.push(Finding::TemperatureOutsideData {
            inputs: temperatures,
            wanted: a.device.temperature.si(),
        });
    }
    if !dopings.is_empty() {
        out.push(Finding::DopingOutsideData {
            inputs: dopings,
            wanted: wanted_doping,
        });
    }
    if !dopants.is_empty() {
        out.push(Finding::OtherDopant {
            inputs: dopants,
            wanted: wanted_dopant,
        });
    }
    let table = a.device.table.inputs();
    let uncertain: Vec<Named> = a
        .shares
        .iter()
        .filter(|s| s.share >= MATTERS)
        .map(|s| (s, &table[s.first()]))
        .filter(|(_, i)| i.provenance.is_recalled() || i.provenance.is_assumed())
        .map(|(s, i)| Named {
            names: s.columns.iter().map(|c| table[*c].name.clone()).collect(),
            record: i.provenance.records().first().cloned(),
            share: s.share,
            recalled: i.provenance.is_recalled(),
        })
        .collect();
    if !uncertain.is_empty() {
        out.push(Finding::UncertainInputsMatter {
            target: a.wish.target,
            inputs: uncertain,
        });
    }
}

/// One finding a record, however many contacts borrow from it.
fn borrowed(out: &mut Vec<Finding>, input: &str, from: &str, polarization: f64, asymmetry: f64) {
    for finding in out.iter_mut() {
        if let Finding::BorrowedAsymmetry { names, record, .. } = finding
            && record == from
        {
            names.push(input.to_owned());
            return;
        }
    }
    out.push(Finding::BorrowedAsymmetry {
        names: vec![input.to_owned()],
        record: from.to_owned(),
        polarization,
        asymmetry,
    });
}

/// What the numbers themselves say, whatever their source.
fn numbers(a: &Assessment, out: &mut Vec<Finding>) {
    let mut bounds = Vec::new();
    for input in all_inputs(a) {
        let value = input.reading.si;
        if matches!(input.reading.spread, Spread::Bound { .. }) {
            bounds.push(input.name.clone());
        }
        if input.name.ends_with("asymmetry") {
            let sd = input
                .reading
                .spread
                .standard_deviation(value)
                .unwrap_or(0.0);
            if value.abs() + sd >= 1.0 || 1.0 - value.abs() < NEAR_ONE {
                out.push(Finding::AsymmetryNearOne {
                    name: input.name.clone(),
                    value,
                });
            }
        }
    }
    if !bounds.is_empty() {
        out.push(Finding::OnlyABound { inputs: bounds });
    }
}

fn measured_otherwise(a: &Assessment, out: &mut Vec<Finding>) {
    let apart = |x: f64, y: f64| x > 0.0 && y > 0.0 && (x / y).ln().abs() > OTHERWISE.ln();
    let here = a.mismatch.as_ref().map_or(0.0, |m| m.resistance_area.si());
    let nearest = a
        .checks
        .iter()
        .filter(|c| c.is_resistance_area)
        .min_by(|x, y| {
            (x.reading.si / here)
                .ln()
                .abs()
                .total_cmp(&(y.reading.si / here).ln().abs())
        });
    if let Some(c) = nearest
        && apart(c.reading.si, here)
    {
        out.push(Finding::MeasuredOtherwise {
            record: c.record.clone(),
            what: "resistance-area product",
            published: c.reading.si,
            here,
        });
    }
    let p = a.outcome.polarization.si();
    for c in &a.checks {
        let comparable = matches!(
            c.kind,
            ContactKind::Optical | ContactKind::TransparentContact
        );
        if comparable && !c.is_resistance_area && apart(c.reading.si.abs(), p.abs()) {
            out.push(Finding::MeasuredOtherwise {
                record: c.record.clone(),
                what: "polarization",
                published: c.reading.si,
                here: p,
            });
        }
    }
}
