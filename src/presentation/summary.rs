//! The short answer: how much, goal met or not, why, the window and where the design stands, what would
//! fix it; then findings and where the inputs come from. At most 24 lines.

use crate::designs::design::Written;
use crate::designs::goals::{GoalState, Target};
use crate::devices::vertical::{Position, Vertical};
use crate::quantities::dimensions::Measured;
use crate::quantities::kind::Scale;
use crate::quantities::print::with_digits;
use crate::studies::assess::{Assessment, GoalResult};
use crate::studies::mismatch::{HalfMetal, Mismatch};
use crate::studies::window::{NoWindow, Window};

use super::lines::{joined, labelled, marked, wrap};
use super::numbers::{area, comparison, factor, near_one, of_target, percent, result, voltage, window};
use super::wording::{finding, percent_share, position, severity_mark};

/// Most lines of the short answer.
pub const MOST_LINES: usize = 24;

/// Current density that a spin accumulation is told for where none is stated, A/m².
const PER_CURRENT_DENSITY: f64 = 1e9;

/// The stack in one line: `iron | magnesia | silicon`.
#[must_use]
pub fn sketch(a: &Assessment) -> String {
    let device = &a.device;
    let mut parts = Vec::new();
    for (i, name) in device.names.iter().enumerate() {
        let label = if is_bare(device, i) { "bare".to_owned() } else { name.label.clone() };
        parts.push(label);
    }
    parts.join(" | ")
}

fn is_bare(device: &Vertical, name: usize) -> bool {
    use crate::devices::vertical::{ElementPlan, EndPlan, InterfaceResistancePlan};
    let shift = usize::from(matches!(device.left, EndPlan::SemiInfinite(_)));
    name.checked_sub(shift).and_then(|i| device.elements.get(i)).is_some_and(|e| {
        matches!(e, ElementPlan::Interface(p) if matches!(p.resistance, InterfaceResistancePlan::Zero))
    })
}

fn goal_text(g: &GoalResult) -> String {
    let verdict = if g.met { "met" } else { "not met" };
    let state = if g.goal.state == GoalState::Antiparallel { ", antiparallel" } else { "" };
    format!("goal\u{a0}{}{state}: {}", comparison(g.goal.target, &g.goal.comparison), verdict.replace(' ', "\u{a0}"))
}

fn with_goal(a: &Assessment, target: Target, value: String) -> String {
    let goals: Vec<String> =
        a.goals.iter().filter(|g| g.goal.target == target).map(goal_text).collect();
    if goals.is_empty() { value } else { format!("{value:<18}{}", goals.join("; ")) }
}

/// Spin accumulation at the injector, with the current density it is told for.
#[must_use]
pub fn accumulation(a: &Assessment) -> String {
    let u = a.outcome.accumulation.si();
    match a.device.current_density {
        Some(j) => format!("{} at {}", voltage(u * j.si()), result(j.si(), Scale::CurrentDensity)),
        None => format!("{} per 10⁵\u{a0}A/cm²", voltage(u * PER_CURRENT_DENSITY)),
    }
}

/// Why the polarization or the magnetoresistance is what it is.
#[must_use]
pub fn why(a: &Assessment, m: &Mismatch) -> String {
    if a.wish.target != Target::InjectedPolarization
        && let Some(dwell) = m.dwell
        && dwell > 1.0
    {
        return format!(
            "an electron stays {} spin lifetimes between the contacts (r_b*\u{a0}t/2r_N\u{a0}λ): it forgets",
            factor(dwell)
        );
    }
    let (contact, channel) = (m.contact.si(), m.channel.si());
    let crossing = format!("of the {} that the contact offers {} crosses", percent(m.offered), percent(a.outcome.polarization.si()));
    if !channel.is_finite() {
        return format!("the channel is closed for spins: {crossing}");
    }
    if channel > contact {
        format!(
            "the channel's spin impedance, {}, is {} times the contact's, {}: {crossing}",
            area(channel), factor(channel / contact), area(contact)
        )
    } else {
        format!(
            "the contact's spin impedance, {}, is {} times the channel's, {}: {crossing}",
            area(contact), factor(contact / channel), area(channel)
        )
    }
}

fn asymmetry_text(a: &Assessment, w: &Window) -> String {
    let gamma = w.asymmetry.si();
    if w.asymmetry_is_likely {
        let likely = a.device.likely.as_ref();
        let from = likely.map_or(String::new(), |l| {
            let borrowed = l.input.provenance.marks.iter().any(|m| {
                matches!(m, crate::materials::choose::Mark::Borrowed { .. })
            });
            format!(", {} {}", if borrowed { "borrowed from" } else { "that of" }, l.interface)
        });
        format!("with γ\u{a0}=\u{a0}{gamma:.2}{from}")
    } else {
        format!("with γ\u{a0}=\u{a0}{gamma:.2}")
    }
}

/// The window and where the design stands.
#[must_use]
pub fn window_text(a: &Assessment, found: &Result<Window, NoWindow>) -> String {
    match found {
        Ok(w) => {
            let together = if w.together > 1 { "; all contacts scaled together" } else { "" };
            let stands = if w.here.si() > 0.0 {
                format!("this design: {}{}", area(w.here.si()), position(w))
            } else {
                "this design: no barrier".to_owned()
            };
            let where_ = if w.intervals.is_empty() {
                format!(
                    "none: the best is {}{}",
                    of_target(w.wish.target, w.best.value),
                    w.best.at.map_or(", as RA\u{a0}→\u{a0}∞".to_owned(), |ra| format!(", at {}", area(ra.si())))
                )
            } else {
                let list: Vec<String> = w.intervals.iter().map(|i| window(i.low, i.high)).collect();
                list.join(" and ")
            };
            format!("{where_} ({}{together}); {stands}", asymmetry_text(a, w))
        }
        Err(NoWindow::NoAsymmetry) => "not known: γ of a barrier is on record neither for this pair nor to borrow; state `interface_asymmetry`".to_owned(),
        Err(NoWindow::NoContact) => "none: no contact with a ferromagnet touches the channel".to_owned(),
        Err(NoWindow::NotFound) => "not computed: an edge could not be bracketed".to_owned(),
        Err(NoWindow::Stack(_)) => "not computed: the stack cannot be solved".to_owned(),
    }
}

/// The rule of thumb, where the channel is thinner than λ.
#[must_use]
pub fn rule_of_thumb(a: &Assessment, gamma: f64) -> Option<String> {
    let m = a.mismatch.as_ref()?;
    let t = m.reduced_length?;
    if t >= 1.0 || a.device.channel_contacts.len() < 2 {
        return None;
    }
    let ra = (1.0 - gamma * gamma) * m.r_channel.si();
    Some(format!("{} .. {} from (1−γ²)\u{a0}r_N\u{a0}t/λ .. (1−γ²)\u{a0}r_N\u{a0}λ/t", area(ra * t), area(ra / t)))
}

/// What bulk polarization would be needed without a barrier.
#[must_use]
pub fn half_metal_text(a: &Assessment, found: HalfMetal) -> String {
    let several = a.device.channel_contacts.len() > 1;
    let semiconductor = a.device.name(a.device.channel).is_some_and(|n| n.semiconductor);
    let hypothetical = if semiconductor { " (hypothetical: a depletion region forms)" } else { "" };
    let of = if several { "β of both would" } else { "β would" };
    match found {
        HalfMetal::Needed { short_of_one } => {
            format!("{of} have to reach {}{hypothetical}", near_one(short_of_one))
        }
        HalfMetal::Suffices => format!("β as it is suffices{hypothetical}"),
        HalfMetal::OutOfReach => format!("no β below 1\u{a0}−\u{a0}10⁻¹² would do{hypothetical}"),
    }
}

/// Where the inputs come from, in one line.
#[must_use]
pub fn honesty(a: &Assessment) -> String {
    let h = &a.honesty;
    let mut counts = Vec::new();
    for (n, word) in [(h.recalled, "recalled"), (h.assumed, "assumed"), (h.stated, "stated in the design")] {
        if n > 0 {
            counts.push(format!("{n} {word}"));
        }
    }
    let rest = h.inputs - h.recalled - h.assumed - h.stated.min(h.inputs - h.recalled - h.assumed);
    if rest > 0 {
        counts.push(format!("{rest} read or derived"));
    }
    let carry = match (h.carriers.len(), h.doubtful_carriers) {
        (0, _) => "none has a spread".to_owned(),
        (1, 0) => "the one that carries most of the result is neither recalled nor assumed".to_owned(),
        (1, _) => "one of the recalled or assumed carries most of the result".to_owned(),
        (n, 0) => format!("none of the {n} that carry most of the result is recalled or assumed"),
        (n, d) if d == n => format!("the {n} that carry most of the result are all recalled or assumed"),
        (n, d) => format!("{d} of the {n} that carry most of the result are recalled or assumed"),
    };
    format!("{} inputs: {}; {carry}", h.inputs, counts.join(", "))
}

/// The short answer, `width` characters wide.
#[must_use]
pub fn summary(a: &Assessment, width: usize) -> Vec<String> {
    let mut lines = summary_rows(a, width);
    let room = MOST_LINES.saturating_sub(lines.len());
    let tail = lines.split_off(lines.len() - inputs_row(a, width).len());
    lines.extend(findings_within(a, width, room));
    lines.extend(tail);
    lines
}

fn inputs_row(a: &Assessment, width: usize) -> Vec<String> {
    labelled("inputs", &honesty(a), width)
}

/// The rows of the short answer without findings.
#[must_use]
pub fn summary_rows(a: &Assessment, width: usize) -> Vec<String> {
    let mut head = Vec::new();
    if let Some(title) = &a.title {
        head.extend(wrap(title, width).into_iter().take(1));
    }
    head.extend(wrap(
        &format!("{}, {}", sketch(a), joined(&with_digits(a.device.temperature.si(), Scale::Temperature, 4))),
        width,
    ));
    let mut body = Vec::new();
    let mut row = |label: &str, value: String| body.extend(labelled(label, &value, width));
    let p = a.outcome.polarization.si();
    let polarization = if a.device.has_two_states {
        format!("{} (antiparallel {})", percent(p), percent(a.outcome.polarization_antiparallel.si()))
    } else {
        percent(p)
    };
    row("injected current polarization", with_goal(a, Target::InjectedPolarization, polarization));
    row("spin accumulation", accumulation(a));
    if a.device.has_two_states {
        row(
            "magnetoresistance",
            with_goal(a, Target::Magnetoresistance, percent(a.outcome.magnetoresistance.si())),
        );
        let change = format!(
            "{} on RA {} (antiparallel {})",
            area(a.outcome.resistance_area_change.si()),
            area(a.resistance_area[0].si()),
            area(a.resistance_area[1].si())
        );
        row("resistance-area change", with_goal(a, Target::ResistanceAreaChange, change));
    }
    if let Some(m) = &a.mismatch {
        row("why", why(a, m));
    }
    for g in &a.goals {
        let label = if a.goals.len() == 1 {
            "RA that meets the goal".to_owned()
        } else {
            format!("RA for {}", short_name(g.goal.target))
        };
        row(&label, window_text(a, &g.window));
    }
    if let Some(w) = &a.default_window {
        let of = short_name(a.wish.target);
        row(&format!("RA for half the best {of}"), window_text(a, w));
    }
    let gamma = a.goals.first().map(|g| &g.window).or(a.default_window.as_ref());
    if let Some(Ok(w)) = gamma
        && let Some(text) = rule_of_thumb(a, w.asymmetry.si())
    {
        row("rule of thumb", text);
    }
    let found = a.goals.first().map(|g| g.half_metal).or(a.default_half_metal);
    if let Some(found) = found {
        row("without a barrier", half_metal_text(a, found));
    }
    head.into_iter().chain(body).chain(inputs_row(a, width)).collect()
}

fn short_name(target: Target) -> &'static str {
    match target {
        Target::InjectedPolarization => "p",
        Target::Magnetoresistance => "MR",
        Target::ResistanceAreaChange => "ΔRA",
    }
}

/// As many whole findings as fit; the last line says how many are left.
fn findings_within(a: &Assessment, width: usize, room: usize) -> Vec<String> {
    let blocks: Vec<Vec<String>> = a
        .findings
        .iter()
        .map(|f| marked(severity_mark(f.severity()), &finding(f), width))
        .collect();
    let all: usize = blocks.iter().map(Vec::len).sum();
    if all <= room {
        return blocks.into_iter().flatten().collect();
    }
    let mut lines = Vec::new();
    let mut shown = 0;
    for block in &blocks {
        if lines.len() + block.len() + 1 > room {
            break;
        }
        lines.extend(block.iter().cloned());
        shown += 1;
    }
    if room > 0 {
        let left = a.findings.len() - shown;
        let noun = if left == 1 { "finding" } else { "findings" };
        lines.push(format!(" ! {left} more {noun}: see --full"));
    }
    lines
}

/// How the design was written, in words.
#[must_use]
pub fn written(w: Written) -> &'static str {
    match w {
        Written::OneContact => "one contact",
        Written::TwoContacts => "two contacts",
        Written::Stack => "a stack of layers",
    }
}

/// The share of an input, for tables.
#[must_use]
pub fn share(a: &Assessment, column: usize) -> String {
    a.shares.iter().find(|s| s.column == column).map_or("–".to_owned(), |s| percent_share(s.share))
}

/// Name of a position, for tables.
#[must_use]
pub fn position_name(device: &Vertical, at: Position) -> String {
    device.name(at).map_or(String::new(), |n| n.label.clone())
}
