//! The sentences: findings, marks, choices. Every number comes from the result; nothing is computed here.

use crate::designs::goals::Target;
use crate::materials::choose::{Decided, Mark};
use crate::quantities::dimensions::Measured;
use crate::quantities::kind::Scale;
use crate::quantities::print::with_digits;
use crate::studies::findings::{Finding, Severity};

use super::numbers::{
    area, asymmetry, factor, of_target, percent, result, temperature, times, voltage, window,
};

/// The mark in front of a finding.
#[must_use]
pub fn severity_mark(severity: Severity) -> &'static str {
    match severity {
        Severity::Problem => "!!",
        Severity::Caution => " !",
        Severity::Remark => " ·",
    }
}

/// Word of a severity.
#[must_use]
pub fn severity_word(severity: Severity) -> &'static str {
    match severity {
        Severity::Problem => "problem",
        Severity::Caution => "caution",
        Severity::Remark => "remark",
    }
}

/// What a rule is about, for the list of rules.
#[must_use]
pub fn rule_text(name: &str) -> &'static str {
    match name {
        "conductivity-mismatch" => {
            "the channel takes up spin so much more easily than the contact offers it that almost nothing crosses (channel's spin impedance above 10 times the contact's)"
        }
        "goal-out-of-reach" => "no resistance-area product meets the goal with this γ",
        "outside-window" => "the design's resistance-area product lies outside the window",
        "window-unknown" => {
            "no window can be told because γ of a barrier is not known for this pair"
        }
        "bare-semiconductor" => {
            "a ferromagnet lies directly on a semiconductor: a depletion region forms, which the ohmic model leaves out"
        }
        "above-curie-temperature" => "a ferromagnet is used above its Curie temperature",
        "near-curie-temperature" => {
            "a ferromagnet is used above 0.7 of its Curie temperature, where asymmetries fall steeply (common practice)"
        }
        "only-a-bound" => "an input is known only as a bound; the bound itself is used",
        "high-bias" => {
            "more than half a volt drops over an interface: the asymmetry of small bias no longer holds (common practice)"
        }
        "thin-channel" => {
            "a channel taken as semi-infinite is thinner than three spin diffusion lengths"
        }
        "other-dopant" => {
            "records of another dopant are used, or the dopant is not known to the library"
        }
        "measured-otherwise" => {
            "a published value of the same contact differs from the design or its answer by more than ten times"
        }
        "borrowed-asymmetry" => {
            "γ stands in from the tunnel polarization of the same ferromagnet and barrier on another electrode"
        }
        "long-channel" => {
            "the channel between two contacts is longer than its spin diffusion length"
        }
        "thin-ferromagnet" => {
            "a ferromagnet taken as thick is thinner than three spin diffusion lengths and its outer end is not stated"
        }
        "thin-barrier" => "a barrier is thinner than two monolayers: pinholes are likely",
        "temperature-outside-data" => "records of a temperature more than 10 % away are used",
        "doping-outside-data" => "records of a doping more than a factor 2 away are used",
        "memory-loss-outside-temperature" => {
            "a spin-memory loss measured at another temperature is used"
        }
        "asymmetry-near-one" => {
            "β or γ is within its own uncertainty of ±1 or nearer to it than 0.01, where 1/(1 − β²) diverges"
        }
        "uncertain-inputs-matter" => {
            "recalled or assumed inputs carry a tenth or more of the answer's spread"
        }
        "interface-left-out" => {
            "an interface between two materials of the library has no record and is taken without resistance"
        }
        "not-linear" => {
            "the spin accumulation of a channel that is not metallic exceeds kT/e: the linear model strains"
        }
        "drift" => {
            "the electric field times λ exceeds kT/e in a channel that is not metallic: drift changes its spin diffusion length"
        }
        "strip-resistance-left-out" => {
            "an end is fed in its plane: the strip's own series resistance is not counted"
        }
        "record-replaced" => "records of your own folder have taken the place of shipped ones",
        _ => "",
    }
}

/// A finding as a sentence.
#[must_use]
pub fn finding(f: &Finding) -> String {
    match f {
        Finding::ConductivityMismatch { ratio, offered, injected } => format!(
            "Conductivity mismatch: the channel's spin impedance is {} times the contact's, so of the {} that the contact offers {} crosses. A tunnel resistance has to make up the difference.",
            factor(*ratio), percent(*offered), percent(*injected)
        ),
        Finding::GoalOutOfReach { target, best, at, alone } => format!(
            "{} meets the goal for the {}: the best is {}{}. {}",
            if *alone { "No common scaling of the contacts" } else { "No RA" },
            target_name(*target),
            of_target(*target, *best),
            at.map_or(" in the limit of an infinite RA".to_owned(), |ra| format!(" at {}", area(ra.si()))),
            if *alone {
                "One contact changed alone would: see its own window in --full."
            } else {
                "A larger γ or another quantity has to change."
            }
        ),
        Finding::OutsideWindow { window: w } => {
            let nearest: Vec<String> = w.intervals.iter().map(|i| window(i.low, i.high)).collect();
            let how = position(w);
            if w.here.si() <= 0.0 {
                return format!("The contact has no resistance of its own; the window is {}.", nearest.join(" and "));
            }
            format!("RA of {} is outside the window, {}{how}.", area(w.here.si()), nearest.join(" and "))
        }
        Finding::WindowUnknown => "No window: γ of a barrier is not known for this pair. State `interface_asymmetry` in a barrier to get one.".to_owned(),
        Finding::BareSemiconductor { ferromagnet, channel } => format!(
            "{ferromagnet} bare on {channel}: a depletion region forms there. The ohmic answer is a hypothetical limit, not what a grown contact does."
        ),
        Finding::BorrowedAsymmetry { names, record, polarization, asymmetry } => format!(
            "γ = {} of {} is borrowed: the tunnel polarization {} of {record} is an upper guide; a quarter of it to all of it is taken (our estimate).",
            super::numbers::asymmetry(*asymmetry),
            names.iter().map(|n| n.trim_end_matches(".interface_asymmetry")).collect::<Vec<_>>().join(", "),
            super::numbers::asymmetry(*polarization)
        ),
        Finding::CurieTemperature { material, curie, temperature: t, record } => format!(
            "{material} is used at {}, {} its Curie temperature of {} ({record}): {}",
            temperature(*t),
            if t > curie { "above" } else { "near" },
            temperature(*curie),
            if t > curie { "it has no spin polarization there." } else { "its asymmetries fall steeply there (common practice)." }
        ),
        Finding::OnlyABound { inputs } => format!(
            "Only a bound is known, and used as the value, for {}.",
            grouped(inputs.iter().map(String::as_str))
        ),
        Finding::HighBias { path, voltage: v, thickness } => format!(
            "{} drops over {path}{}: above half a volt γ falls and the resistance is no longer that of small bias (common practice).",
            voltage(v.si()),
            thickness.map_or(String::new(), |t| format!(", {} thick", result(t.si(), Scale::Length)))
        ),
        Finding::OtherDopant { inputs, wanted } => {
            let list: Vec<String> =
                inputs.iter().map(|(n, d)| format!("{n} (record for {d})")).collect();
            format!("Records of another dopant than {wanted}: {}.", list.join(", "))
        }
        Finding::MeasuredOtherwise { record, what, published, here } => {
            let print = |x: f64| if *what == "polarization" { percent(x) } else { area(x) };
            format!("A published {what} of this contact is {} ({record}), here {}.", print(*published), print(*here))
        }
        Finding::ThinChannel { thickness, length } => format!(
            "The channel is {} thick, {} spin diffusion lengths, yet taken as semi-infinite: its thickness does not enter. State another `end`.",
            result(thickness.si(), Scale::Length), factor(thickness.si() / length.si())
        ),
        Finding::LongChannel { thickness, length } => format!(
            "The channel, {}, is {} times its spin diffusion length: the second contact hears little of the first.",
            result(thickness.si(), Scale::Length), factor(thickness.si() / length.si())
        ),
        Finding::ThinFerromagnet { path, thickness, length, .. } => format!(
            "{path} is {} thick, {} spin diffusion lengths, yet taken as thick. State its end (spin sink, reflecting, fed in plane).",
            result(thickness.si(), Scale::Length), factor(thickness.si() / length.si())
        ),
        Finding::ThinBarrier { path, thickness, monolayers } => format!(
            "{path} is {} thick, {monolayers:.1} monolayers: below two, pinholes are likely (common practice).",
            result(thickness.si(), Scale::Length)
        ),
        Finding::TemperatureOutsideData { inputs, wanted } => {
            let mut kelvins: Vec<f64> = inputs.iter().map(|(_, t)| *t).collect();
            kelvins.sort_by(f64::total_cmp);
            kelvins.dedup_by(|a, b| a.to_bits() == b.to_bits());
            let temperatures: Vec<String> = kelvins.iter().map(|t| temperature(*t)).collect();
            format!(
                "{} of {} used at {}: {}.",
                if inputs.len() == 1 { "A value".to_owned() } else { format!("{} values", inputs.len()) },
                temperatures.join(", "),
                temperature(*wanted),
                grouped(inputs.iter().map(|(n, _)| n.as_str()))
            )
        }
        Finding::DopingOutsideData { inputs, wanted } => {
            let list: Vec<String> = inputs
                .iter()
                .map(|(n, d)| format!("{n} (record at {})", result(*d, Scale::Density)))
                .collect();
            format!("Records of another doping than {}: {}.", result(*wanted, Scale::Density), list.join(", "))
        }
        Finding::MemoryLossOutsideTemperature { record, wanted } => format!(
            "The spin-memory loss of {} is used at {}: a loss fitted cold is not a warm default.",
            temperature(*record), temperature(*wanted)
        ),
        Finding::AsymmetryNearOne { name, value } => format!(
            "{name} = {} is too near one: 1/(1 − β²) diverges there, and no measurement bounds the answer.",
            asymmetry(*value)
        ),
        Finding::UncertainInputsMatter { inputs, target } => {
            let list: Vec<String> = inputs
                .iter()
                .map(|i| {
                    format!(
                        "{} ({}, {})",
                        i.names.join(" with "),
                        percent_share(i.share),
                        if i.recalled { "recalled" } else { "assumed" }
                    )
                })
                .collect();
            format!("The spread of the {} leans on {}.", target_name(*target), list.join(", "))
        }
        Finding::InterfaceLeftOut { path } => format!(
            "{path}: no record of this interface; it is taken without resistance, asymmetry or spin loss."
        ),
        Finding::NotLinear { accumulation, thermal } => format!(
            "The spin accumulation, {}, exceeds kT/e = {}: the linear model overstates it in a non-degenerate channel.",
            voltage(accumulation.si()), voltage(thermal.si())
        ),
        Finding::Drift { voltage: v, thermal } => format!(
            "The field drops {} over one spin diffusion length, above kT/e = {}: drift is left out here.",
            voltage(v.si()), voltage(thermal.si())
        ),
        Finding::StripResistanceLeftOut { .. } => {
            "An end is fed in its plane: the strip's own series resistance is not counted in RA.".to_owned()
        }
        Finding::RecordReplaced { ids } => format!("Shipped records replaced by yours: {}.", ids.join(", ")),
    }
}

/// Names of inputs with the part they share said once: `channel: resistivity, thickness`.
fn grouped<'a>(all: impl Iterator<Item = &'a str>) -> String {
    let mut groups: Vec<(String, Vec<String>)> = Vec::new();
    for name in all {
        let (part, key) = name.rsplit_once('.').unwrap_or(("", name));
        let key = key.replace('_', " ");
        match groups.last_mut() {
            Some((p, keys)) if p == part => keys.push(key),
            _ => groups.push((part.to_owned(), vec![key])),
        }
    }
    groups
        .iter()
        .map(|(p, k)| format!("{p}: {}", k.join(", ")))
        .collect::<Vec<_>>()
        .join("; ")
}

/// Name of a target in a sentence.
#[must_use]
pub fn target_name(target: Target) -> &'static str {
    match target {
        Target::InjectedPolarization => "injected polarization",
        Target::Magnetoresistance => "magnetoresistance",
        Target::ResistanceAreaChange => "resistance-area change",
    }
}

/// A share as a whole per cent.
#[must_use]
pub fn percent_share(share: f64) -> String {
    if share > 0.0 && share < 0.005 {
        return "<\u{a0}1\u{a0}%".to_owned();
    }
    format!("{:.0}\u{a0}%", 100.0 * share)
}

/// How far a design is outside its window: ", 880 times too high".
#[must_use]
pub fn position(w: &crate::studies::window::Window) -> String {
    let here = w.here.si();
    if w.intervals.iter().any(|i| i.holds(w.here)) {
        return ", inside".to_owned();
    }
    let below = w
        .intervals
        .iter()
        .filter_map(|i| i.low)
        .map(|l| l.si())
        .filter(|l| *l > here)
        .fold(f64::INFINITY, f64::min);
    let above = w
        .intervals
        .iter()
        .filter_map(|i| i.high)
        .map(|h| h.si())
        .filter(|h| *h < here)
        .fold(0.0, f64::max);
    if here <= 0.0 {
        String::new()
    } else if below.is_finite() && (above <= 0.0 || below / here < here / above) {
        format!(", {} too low", times(below / here))
    } else if above > 0.0 {
        format!(", {} too high", times(here / above))
    } else {
        String::new()
    }
}

/// A mark as a short note.
#[must_use]
pub fn mark(m: &Mark) -> String {
    match m {
        Mark::Recalled => "recalled, not read".to_owned(),
        Mark::Derived => "derived".to_owned(),
        Mark::Estimated => "our estimate".to_owned(),
        Mark::CommonPractice => "common practice".to_owned(),
        Mark::OtherTemperature { record, wanted } => {
            format!(
                "{} value used at {}",
                temperature(*record),
                temperature(*wanted)
            )
        }
        Mark::TemperatureNotStated => "its temperature is not stated beside it".to_owned(),
        Mark::OtherDoping { record, .. } => {
            format!("value for {}", with_digits(*record, Scale::Density, 2))
        }
        Mark::OtherDopant { record, .. } => format!("value for {record}"),
        Mark::PriorSpread { prior } => format!("spread assumed: {prior}"),
        Mark::NoSpread => "no spread known".to_owned(),
        Mark::BoundOnly => "only a bound".to_owned(),
        Mark::Borrowed { polarization } => {
            format!(
                "borrowed from a tunnel polarization of {}",
                asymmetry(*polarization)
            )
        }
        Mark::LengthScaled => "λ follows the stated resistivity, ρλ of the pair held".to_owned(),
        Mark::LengthNotScaled => "λ not scaled with the stated resistivity".to_owned(),
        Mark::MixedTechniques => "β and ρλ from different techniques".to_owned(),
        Mark::ResistivityAssumed => "resistivity not from the same paper".to_owned(),
        Mark::Disagrees { with } => format!("disagrees with {}", with.join(", ")),
        Mark::NearUnity => "within its uncertainty of one".to_owned(),
    }
}

/// What decided a choice.
#[must_use]
pub fn decided(d: Decided, among: usize) -> String {
    let why = match d {
        Decided::OnlyRecord => return "the only record".to_owned(),
        Decided::Doping => "nearest doping",
        Decided::Temperature => "nearest temperature",
        Decided::OwnRecord => "your own record",
        Decided::ValueBeforeBound => "a value before a bound",
        Decided::Dopant => "same dopant",
        Decided::Status => "preferred in the library",
        Decided::Obtained => "better obtained",
        Decided::Order => {
            return format!("first of {among} records that nothing else tells apart");
        }
    };
    format!("{why} of {among} records")
}
