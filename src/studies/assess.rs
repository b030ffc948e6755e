//! The main question: what polarization crosses, why, how far the design is from the window, and what
//! would fix it.

use crate::designs::design::{Design, Part, Written};
use crate::designs::goals::{Goal, Target};
use crate::designs::layers::EndWord;
use crate::devices::inputs::Input;
use crate::devices::provenance::Origin;
use crate::devices::vertical::{
    Blueprint, ElementPlan, InterfaceResistancePlan, Outcome, Position, Vertical,
};
use crate::documents::reader::Faults;
use crate::materials::choose::Mark;
use crate::materials::library::Library;
use crate::materials::references::Reference;
use crate::models::ladder::{Face, StackFault, State};
use crate::models::validity::{self, Caveat};
use crate::quantities::dimensions::Measured;
use crate::quantities::meanings::ResistanceAreaProduct;

use super::findings::{Finding, Named, ordered};
use super::mismatch::{HalfMetal, Mismatch, half_metal, mismatch};
use super::shares::{Share, carriers, shares};
use super::target::{Demand, Wish};
use super::window::{NoWindow, Window, window};

/// Without a goal, the window is where the quantity keeps at least this fraction of its most.
pub const DEFAULT_FRACTION: f64 = 0.5;
/// Inputs that together carry this fraction of Σ(change)² are said to carry most of the result.
pub const MOST: f64 = 0.8;
/// A recalled or assumed input matters from this share on.
const MATTERS: f64 = 0.1;
/// A mismatch is pointed out when the channel's spin impedance exceeds the contact's by this factor.
const MISMATCH: f64 = 10.0;

/// A goal with its outcome.
#[derive(Clone, PartialEq, Debug)]
pub struct GoalResult {
    /// The goal.
    pub goal: Goal,
    /// Value reached, SI.
    pub value: f64,
    /// Whether it is met.
    pub met: bool,
    /// Its window.
    pub window: Result<Window, NoWindow>,
    /// Without a barrier.
    pub half_metal: HalfMetal,
}

/// Where the inputs come from, counted.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct Honesty {
    /// Inputs.
    pub inputs: usize,
    /// Of them stated in the design.
    pub stated: usize,
    /// Of them recalled.
    pub recalled: usize,
    /// Of them resting on an assumption: borrowed, a prior, an assumed resistivity.
    pub assumed: usize,
    /// Of them without a spread that could be moved.
    pub not_spread: usize,
    /// Inputs that carry most of the result.
    pub carriers: Vec<Share>,
    /// Of the carriers: recalled or assumed.
    pub doubtful_carriers: usize,
    /// Share that the recalled and assumed inputs carry together.
    pub doubtful_share: f64,
}

/// A published value that is shown beside the answer and never fed to the model.
#[derive(Clone, PartialEq, Debug)]
pub struct CheckValue {
    /// Record.
    pub record: String,
    /// What it is, in the record's word.
    pub kind: &'static str,
    /// Value and spread.
    pub reading: crate::quantities::text::Reading,
    /// Temperature, K.
    pub temperature: Option<f64>,
    /// Reference.
    pub source: Option<String>,
    /// Whether it was recalled.
    pub recalled: bool,
}

/// The answer.
#[derive(Clone, Debug)]
pub struct Assessment {
    /// Name of the design file.
    pub name: String,
    /// Title.
    pub title: Option<String>,
    /// How the design was written.
    pub written: Written,
    /// Ends.
    pub ends: [EndWord; 2],
    /// The device.
    pub device: Vertical,
    /// Its stack at the central row.
    pub blueprint: Blueprint,
    /// Outcome at the central row.
    pub outcome: Outcome,
    /// Faces in both states.
    pub faces: [Vec<Face>; 2],
    /// RA in both states.
    pub resistance_area: [ResistanceAreaProduct; 2],
    /// Why.
    pub mismatch: Option<Mismatch>,
    /// What is asked first: the first goal's quantity, or the default.
    pub wish: Wish,
    /// Goals.
    pub goals: Vec<GoalResult>,
    /// Window of the default demand, where there is no goal.
    pub default_window: Option<Result<Window, NoWindow>>,
    /// Without a barrier, for the default demand.
    pub default_half_metal: Option<HalfMetal>,
    /// Windows of each contact alone, where there are several: element, and its window.
    pub contact_windows: Vec<(usize, Result<Window, NoWindow>)>,
    /// Shares of the inputs.
    pub shares: Vec<Share>,
    /// Where the inputs come from.
    pub honesty: Honesty,
    /// Findings.
    pub findings: Vec<Finding>,
    /// Check values.
    pub checks: Vec<CheckValue>,
    /// References of every record used, by key.
    pub references: Vec<(String, Option<Reference>)>,
}

/// Assesses a device.
///
/// # Errors
/// [`StackFault`]; designs that were read without fault do not give one.
pub fn assess(design: &Design, device: Vertical, library: &Library) -> Result<Assessment, StackFault> {
    let central = device.table.central();
    let blueprint = device.blueprint(central.view());
    let stack = blueprint.stack()?;
    let outcome = device.outcome_of(&stack);
    let (parallel, antiparallel) = (stack.solve(State::Parallel), stack.solve(State::Antiparallel));
    let mismatch = mismatch(&device, &blueprint)?;
    let wish = design.goals.first().map_or_else(|| Wish::default_of(&device), Wish::of);
    let mut goals = Vec::new();
    for goal in &design.goals {
        let wish = Wish::of(goal);
        let value = wish.of_outcome(&outcome);
        goals.push(GoalResult {
            goal: goal.clone(),
            value,
            met: goal.comparison.met(value),
            window: window(&device, &blueprint, &device.channel_contacts, wish, Demand::Goal(goal.comparison)),
            half_metal: half_metal(&device, &blueprint, wish, goal.comparison)?,
        });
    }
    let default_demand = Demand::FractionOfMost(DEFAULT_FRACTION);
    let default_window = goals
        .is_empty()
        .then(|| window(&device, &blueprint, &device.channel_contacts, wish, default_demand));
    let default_half_metal = match &default_window {
        Some(Ok(w)) => Some(half_metal(&device, &blueprint, wish, w.threshold)?),
        _ => None,
    };
    let demand = design.goals.first().map_or(default_demand, |g| Demand::Goal(g.comparison));
    let contact_windows = if device.channel_contacts.len() > 1 {
        device
            .channel_contacts
            .iter()
            .map(|c| (*c, window(&device, &blueprint, &[*c], wish, demand)))
            .collect()
    } else {
        Vec::new()
    };
    let shares = shares(&device, wish)?;
    let honesty = honesty(&device, &shares);
    let checks = check_values(design, &device, library);
    let mut assessment = Assessment {
        name: design.name.clone(),
        title: design.title.clone(),
        written: design.written,
        ends: [design.left, design.right],
        blueprint,
        outcome,
        faces: [parallel.faces, antiparallel.faces],
        resistance_area: [parallel.resistance_area, antiparallel.resistance_area],
        mismatch,
        wish,
        goals,
        default_window,
        default_half_metal,
        contact_windows,
        shares,
        honesty,
        findings: Vec::new(),
        checks,
        references: Vec::new(),
        device,
    };
    assessment.findings = find(&assessment, design, library);
    assessment.references = references(&assessment, library);
    Ok(assessment)
}

fn honesty(device: &Vertical, shares: &[Share]) -> Honesty {
    let inputs = device.table.inputs();
    let doubtful = |i: &Input| i.provenance.is_recalled() || i.provenance.is_assumed();
    let count = |f: &dyn Fn(&Input) -> bool| inputs.iter().filter(|i| f(i)).count();
    let carriers = carriers(shares, MOST);
    Honesty {
        inputs: inputs.len(),
        stated: count(&|i| matches!(i.provenance.origin, Origin::Design { .. })),
        recalled: count(&|i| i.provenance.is_recalled()),
        assumed: count(&|i| i.provenance.is_assumed() && !i.provenance.is_recalled()),
        not_spread: inputs.len() - shares.len(),
        doubtful_carriers: carriers.iter().filter(|s| doubtful(&inputs[s.column])).count(),
        doubtful_share: shares.iter().filter(|s| doubtful(&inputs[s.column])).map(|s| s.share).sum(),
        carriers,
    }
}

fn check_values(design: &Design, device: &Vertical, library: &Library) -> Vec<CheckValue> {
    let faults = Faults::default();
    let material = |at: Position| device.name(at).and_then(|n| n.material.clone());
    let (Some(f), Some(n)) = (material(device.injector), material(device.channel)) else {
        return Vec::new();
    };
    let barrier = design.parts.iter().find_map(|p| match p {
        Part::Contact(c) => c.material.as_ref().and_then(|m| library.id_of(&m.value)),
        _ => None,
    });
    library
        .interfaces_of(&f)
        .into_iter()
        .filter(|(_, b, c)| *b == barrier && c.as_deref() == Some(n.as_str()))
        .filter_map(|(id, _, _)| library.interface(&id, &faults))
        .flat_map(|i| {
            i.contacts
                .iter()
                .filter_map(|c| {
                    Some(CheckValue {
                        record: c.common.id.clone(),
                        kind: c.kind.word(),
                        reading: c.polarization.clone()?,
                        temperature: c.common.temperature,
                        source: c.common.source.clone(),
                        recalled: c.common.obtained == crate::materials::record::Obtained::Recalled,
                    })
                })
                .collect::<Vec<_>>()
        })
        .collect()
}

fn references(a: &Assessment, library: &Library) -> Vec<(String, Option<Reference>)> {
    let mut keys: Vec<String> = Vec::new();
    let inputs = a.device.table.inputs().iter().chain(a.device.likely.as_ref().map(|l| &l.input));
    let from_inputs = inputs.filter_map(|i| match &i.provenance.origin {
        Origin::Record { source, .. } => source.clone(),
        Origin::Design { .. } => None,
    });
    for key in from_inputs.chain(a.checks.iter().filter_map(|c| c.source.clone())) {
        if !keys.contains(&key) {
            keys.push(key);
        }
    }
    keys.into_iter()
        .map(|key| {
            let reference = library.references().get(&key).ok();
            (key, reference)
        })
        .collect()
}

fn find(a: &Assessment, design: &Design, library: &Library) -> Vec<Finding> {
    let mut out = Vec::new();
    if let Some(m) = &a.mismatch
        && a.wish.target == Target::InjectedPolarization
        && m.channel.si() > MISMATCH * m.contact.si()
    {
        out.push(Finding::ConductivityMismatch {
            ratio: m.channel.si() / m.contact.si(),
            offered: m.offered,
            injected: a.outcome.polarization.si(),
        });
    }
    find_windows(a, &mut out);
    find_layers(a, design, library, &mut out);
    find_inputs(a, &mut out);
    for (end, word) in [(&a.device.left, a.ends[0]), (&a.device.right, a.ends[1])] {
        if matches!(end, crate::devices::vertical::EndPlan::FedInPlane) {
            out.push(Finding::StripResistanceLeftOut { end: word });
        }
    }
    if !library.replaced().is_empty() {
        out.push(Finding::RecordReplaced { ids: library.replaced().to_vec() });
    }
    ordered(out)
}

fn find_windows(a: &Assessment, out: &mut Vec<Finding>) {
    let windows = a.goals.iter().map(|g| &g.window).chain(a.default_window.as_ref());
    let mut unknown = false;
    for window in windows {
        match window {
            Ok(w) if w.intervals.is_empty() => out.push(Finding::GoalOutOfReach {
                target: w.wish.target,
                best: w.best.value,
                at: w.best.at,
            }),
            Ok(w) if !w.intervals.iter().any(|i| i.holds(w.here)) => {
                out.push(Finding::OutsideWindow { window: Box::new(w.clone()) });
            }
            Err(NoWindow::NoAsymmetry) => unknown = true,
            _ => {}
        }
    }
    if unknown {
        out.push(Finding::WindowUnknown);
    }
}

fn find_layers(a: &Assessment, design: &Design, library: &Library, out: &mut Vec<Finding>) {
    let channel = a.blueprint.layer(a.device.channel);
    if let Some(layer) = channel
        && a.device.has_two_states
        && layer.thickness.si().is_finite()
        && layer.thickness.si() > layer.length.si()
    {
        out.push(Finding::LongChannel { thickness: layer.thickness, length: layer.length });
    }
    for (at, stated) in
        [(Position::LeftEnd, design.left_stated), (Position::RightEnd, design.right_stated)]
    {
        let assumed = !stated || design.written == Written::Stack;
        if assumed
            && a.device.is_ferromagnet(at)
            && let Some(layer) = a.blueprint.layer(at)
            && let Some(Caveat::ThinFerromagnet { .. }) = validity::ferromagnet(layer)
        {
            out.push(Finding::ThinFerromagnet {
                path: a.device.name(at).map_or(String::new(), |n| n.path.clone()),
                thickness: layer.thickness,
                length: layer.length,
                thick: layer.spin_resistance(),
            });
        }
    }
    let faults = Faults::default();
    for part in &design.parts {
        let Part::Contact(contact) = part else { continue };
        let Some(thickness) = &contact.thickness else { continue };
        let height = contact
            .material
            .as_ref()
            .and_then(|m| library.id_of(&m.value))
            .and_then(|id| library.material(&id, &faults))
            .and_then(|m| m.values.iter().find(|v| v.property.name == "monolayer").map(|v| v.reading.si));
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
    for element in &a.device.channel_contacts {
        let bare = matches!(
            a.device.elements.get(*element),
            Some(ElementPlan::Interface(plan)) if matches!(plan.resistance, InterfaceResistancePlan::Zero)
        );
        let channel = a.device.name(a.device.channel);
        if !bare {
            continue;
        }
        let path = a.device.name(Position::Element(*element)).map_or(String::new(), |n| n.path.clone());
        if channel.is_some_and(|n| n.semiconductor) {
            let other = a.device.neighbours(*element).into_iter().find(|at| a.device.is_ferromagnet(*at));
            out.push(Finding::BareSemiconductor {
                ferromagnet: other
                    .and_then(|at| a.device.name(at))
                    .map_or(String::new(), |n| n.label.clone()),
                channel: channel.map_or(String::new(), |n| n.label.clone()),
            });
        } else if channel.is_some_and(|n| n.material.is_some()) {
            out.push(Finding::InterfaceLeftOut { path });
        }
    }
    if let (Some(layer), Some(j)) = (channel, a.device.current_density)
        && a.device.name(a.device.channel).is_some_and(|n| n.semiconductor || n.material.is_none())
    {
        for caveat in validity::channel(layer, a.outcome.accumulation, j, a.device.temperature) {
            match caveat {
                Caveat::Nonlinear { accumulation, thermal } => {
                    out.push(Finding::NotLinear { accumulation, thermal });
                }
                Caveat::Drift { voltage, thermal } => out.push(Finding::Drift { voltage, thermal }),
                Caveat::ThinFerromagnet { .. } => {}
            }
        }
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

fn find_inputs(a: &Assessment, out: &mut Vec<Finding>) {
    let inputs: Vec<&Input> =
        a.device.table.inputs().iter().chain(a.device.likely.as_ref().map(|l| &l.input)).collect();
    let mut temperatures = Vec::new();
    let mut dopings = Vec::new();
    let mut wanted_doping = 0.0;
    for input in &inputs {
        let record = input.provenance.records().first().cloned().unwrap_or_default();
        for mark in &input.provenance.marks {
            match mark {
                Mark::OtherTemperature { record, wanted } if input.name.ends_with("spin_memory_loss") => {
                    out.push(Finding::MemoryLossOutsideTemperature { record: *record, wanted: *wanted });
                }
                Mark::OtherTemperature { record, .. } => temperatures.push((input.name.clone(), *record)),
                Mark::OtherDoping { record, wanted } => {
                    dopings.push((input.name.clone(), *record));
                    wanted_doping = *wanted;
                }
                Mark::Borrowed { polarization } => {
                    borrowed(out, &input.name, &record, *polarization, input.reading.si);
                }
                Mark::NearUnity if input.name.ends_with("bulk_asymmetry") => {
                    out.push(Finding::AsymmetryNearOne {
                        name: input.name.clone(),
                        value: input.reading.si,
                    });
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
        out.push(Finding::DopingOutsideData { inputs: dopings, wanted: wanted_doping });
    }
    let table = a.device.table.inputs();
    let uncertain: Vec<Named> = a
        .shares
        .iter()
        .filter(|s| s.share >= MATTERS)
        .map(|s| (s, &table[s.column]))
        .filter(|(_, i)| i.provenance.is_recalled() || i.provenance.is_assumed())
        .map(|(s, i)| Named {
            name: i.name.clone(),
            record: i.provenance.records().first().cloned(),
            share: s.share,
            recalled: i.provenance.is_recalled(),
        })
        .collect();
    if !uncertain.is_empty() {
        out.push(Finding::UncertainInputsMatter { inputs: uncertain });
    }
}
