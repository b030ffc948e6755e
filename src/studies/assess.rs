//! The main question: what polarization crosses, why, how far the design is from the window, and what
//! would fix it.

use crate::designs::design::{Design, Part, Written};
use crate::designs::goals::{Goal, Target};
use crate::designs::layers::EndWord;
use crate::devices::inputs::Input;
use crate::devices::provenance::Origin;
use crate::devices::vertical::{Blueprint, Outcome, Position, Vertical};
use crate::documents::reader::Faults;
use crate::materials::library::Library;
use crate::materials::record::{ContactKind, ContactRecord, Obtained};
use crate::materials::references::Reference;
use crate::models::ladder::{Face, StackFault, State};
use crate::quantities::dimensions::{ElectricCurrentDensity, Measured, ResistanceTimesArea};
use crate::quantities::meanings::ResistanceAreaProduct;
use crate::quantities::text::Reading;

use super::findings::Finding;
use super::mismatch::{HalfMetal, Mismatch, half_metal, mismatch};
use super::notice::notice;
use super::shares::{Share, carriers, shares};
use super::target::{Demand, Wish};
use super::window::{NoWindow, Window, window};

/// Without a goal, the window is where the quantity keeps at least this fraction of its most.
pub const DEFAULT_FRACTION: f64 = 0.5;
/// Inputs that together carry this fraction of Σ(change)² are said to carry most of the result.
pub const MOST: f64 = 0.8;

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
    pub kind: ContactKind,
    /// Whether it is a resistance-area product, else a polarization.
    pub is_resistance_area: bool,
    /// Value and spread.
    pub reading: Reading,
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
    /// Current density that voltages are told for: the design's, or the largest power of ten in A/cm² up to
    /// 10⁵ that keeps the drop over the stack below a tenth of a volt.
    pub told_at: ElectricCurrentDensity,
    /// The rule of thumb for the magnetoresistance of two contacts, (1 − γ²) r_N t/λ and (1 − γ²) r_N λ/t;
    /// only where it applies: a channel thinner than λ between two contacts, magnetoresistance asked for.
    pub rule_of_thumb: Option<[ResistanceAreaProduct; 2]>,
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
pub fn assess(
    design: &Design,
    device: Vertical,
    library: &Library,
) -> Result<Assessment, StackFault> {
    let central = device.table.central();
    let blueprint = device.blueprint(central.view());
    let stack = blueprint.stack()?;
    let outcome = device.outcome_of(&stack);
    let (parallel, antiparallel) = (
        stack.solve(State::Parallel),
        stack.solve(State::Antiparallel),
    );
    let mismatch = mismatch(&device, &blueprint)?;
    let wish = design
        .goals
        .first()
        .map_or_else(|| Wish::default_of(&device), Wish::of);
    let mut goals = Vec::new();
    for goal in &design.goals {
        let wish = Wish::of(goal);
        let value = wish.of_outcome(&outcome);
        goals.push(GoalResult {
            goal: goal.clone(),
            value,
            met: goal.comparison.met(value),
            window: window(
                &device,
                &blueprint,
                &device.channel_contacts,
                wish,
                Demand::Goal(goal.comparison),
            ),
            half_metal: half_metal(&device, &blueprint, wish, goal.comparison)?,
        });
    }
    let default_demand = Demand::FractionOfMost(DEFAULT_FRACTION);
    let default_window = goals.is_empty().then(|| {
        window(
            &device,
            &blueprint,
            &device.channel_contacts,
            wish,
            default_demand,
        )
    });
    let default_half_metal = match &default_window {
        Some(Ok(w)) => Some(half_metal(&device, &blueprint, wish, w.threshold)?),
        _ => None,
    };
    let demand = design
        .goals
        .first()
        .map_or(default_demand, |g| Demand::Goal(g.comparison));
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
        told_at: told_at(device.current_density, parallel.resistance_area),
        rule_of_thumb: rule_of_thumb(
            design,
            wish,
            mismatch.as_ref(),
            goals.first().map(|g| &g.window).or(default_window.as_ref()),
        ),
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
    assessment.findings = notice(&assessment, design, library);
    assessment.references = references(&assessment, library);
    Ok(assessment)
}

fn told_at(
    stated: Option<ElectricCurrentDensity>,
    resistance_area: ResistanceAreaProduct,
) -> ElectricCurrentDensity {
    const MOST: f64 = 1e9;
    const DROP: f64 = 0.1;
    stated.unwrap_or_else(|| {
        let most = DROP / resistance_area.si().max(f64::MIN_POSITIVE);
        ElectricCurrentDensity::from_si(10.0_f64.powf(most.log10().floor()).min(MOST))
    })
}

/// Source: Fert and Jaffrès, Phys. Rev. B 64, 184420 (2001) [the window r_N t/λ ≪ r_b* ≪ r_N λ/t, recalled].
fn rule_of_thumb(
    design: &Design,
    wish: Wish,
    mismatch: Option<&Mismatch>,
    window: Option<&Result<Window, NoWindow>>,
) -> Option<[ResistanceAreaProduct; 2]> {
    let m = mismatch?;
    let t = m.reduced_length.filter(|t| *t < 1.0)?;
    let Some(Ok(window)) = window else {
        return None;
    };
    let applies = wish.target == Target::Magnetoresistance
        && design.written == Written::TwoContacts
        && window.contacts.len() == 2;
    let g = window.asymmetry.si();
    let ra = (1.0 - g) * (1.0 + g) * m.r_channel.si();
    applies.then(|| {
        [
            ResistanceAreaProduct::from_si(ra * t),
            ResistanceAreaProduct::from_si(ra / t),
        ]
    })
}

/// V↑ and V↓ at a face per current density, Ω m².
#[must_use]
pub fn channel_potentials(face: &Face) -> [ResistanceTimesArea; 2] {
    let (v, u) = (
        face.potential_per_current_density,
        face.accumulation_per_current_density,
    );
    [v + u, v - u]
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
        not_spread: inputs.len() - shares.iter().map(|s| s.columns.len()).sum::<usize>(),
        doubtful_carriers: carriers
            .iter()
            .filter(|s| doubtful(&inputs[s.first()]))
            .count(),
        doubtful_share: shares
            .iter()
            .filter(|s| doubtful(&inputs[s.first()]))
            .map(|s| s.share)
            .sum(),
        carriers,
    }
}

fn check_values(design: &Design, device: &Vertical, library: &Library) -> Vec<CheckValue> {
    let faults = Faults::default();
    let material = |at: Position| device.name(at).and_then(|n| n.material.clone());
    let (Some(f), Some(n)) = (material(device.injector), material(device.channel)) else {
        return Vec::new();
    };
    let path = device
        .injector_contact
        .and_then(|i| device.name(Position::Element(i)))
        .map(|n| &n.path);
    let barrier = design.parts.iter().find_map(|p| match p {
        Part::Contact(c) if Some(&c.path) == path => {
            c.material.as_ref().and_then(|m| library.id_of(&m.value))
        }
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
                .flat_map(check_numbers)
                .collect::<Vec<_>>()
        })
        .collect()
}

fn check_numbers(c: &ContactRecord) -> Vec<CheckValue> {
    [(false, &c.polarization), (true, &c.resistance_area)]
        .into_iter()
        .filter_map(|(is_resistance_area, reading)| {
            Some(CheckValue {
                record: c.common.id.clone(),
                kind: c.kind,
                is_resistance_area,
                reading: reading.clone()?,
                temperature: c.common.temperature,
                source: c.common.source.clone(),
                recalled: c.common.obtained == Obtained::Recalled,
            })
        })
        .collect()
}

fn references(a: &Assessment, library: &Library) -> Vec<(String, Option<Reference>)> {
    let mut keys: Vec<String> = Vec::new();
    let inputs = a
        .device
        .table
        .inputs()
        .iter()
        .chain(a.device.likely.iter().map(|l| &l.input));
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
