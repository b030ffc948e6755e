//! The short answer: how much, goal met or not, why, the window and where the design stands, what would
//! fix it; then findings and where the inputs come from. At most 24 lines.

use crate::designs::design::Written;
use crate::designs::goals::{GoalState, Target};
use crate::devices::vertical::{Position, Vertical};
use crate::quantities::dimensions::Measured;
use crate::quantities::kind::Scale;
use crate::studies::assess::{Assessment, GoalResult};
use crate::studies::mismatch::{HalfMetal, Mismatch};
use crate::studies::window::{NoWindow, Window};

use super::lines::{labelled, marked, wrap};
use super::numbers::{
    area, areas, asymmetry, comparison, factor, near_one, of_target, percent, result, temperature,
    tidy, voltage, window,
};
use super::wording::{finding, percent_share, position, severity_mark};

/// Most lines of the short answer.
pub const MOST_LINES: usize = 24;

/// Most elements that the sketch of a stack names.
const LONGEST_SKETCH: usize = 11;

/// The stack in one line: `iron | magnesia | silicon`.
#[must_use]
pub fn sketch(a: &Assessment) -> String {
    let device = &a.device;
    let mut parts = Vec::new();
    for (i, name) in device.names.iter().enumerate() {
        let label = if is_bare(device, i) {
            "bare".to_owned()
        } else {
            name.label.clone()
        };
        parts.push(label);
    }
    if parts.len() > LONGEST_SKETCH {
        let left_out = parts.len() - LONGEST_SKETCH + 1;
        parts.splice(
            LONGEST_SKETCH / 2..LONGEST_SKETCH / 2 + left_out,
            [format!("… {left_out} more …")],
        );
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
    let state = if g.goal.state == GoalState::Antiparallel {
        ", antiparallel"
    } else {
        ""
    };
    format!(
        "goal\u{a0}{}{state}: {}",
        comparison(g.goal.target, &g.goal.comparison),
        verdict.replace(' ', "\u{a0}")
    )
}

fn with_goal(a: &Assessment, target: Target, value: String) -> String {
    let goals: Vec<String> = a
        .goals
        .iter()
        .filter(|g| g.goal.target == target)
        .map(goal_text)
        .collect();
    if goals.is_empty() {
        return value;
    }
    // Blanks that do not break keep the goals in one column.
    let blanks = 16_usize.saturating_sub(value.chars().count()).max(2);
    let short = value.chars().count() <= 16;
    let gap = if short {
        "\u{a0}".repeat(blanks)
    } else {
        "; ".to_owned()
    };
    format!("{value}{gap}{}", goals.join("; "))
}

/// Spin accumulation at the injector, with the current density it is told for.
#[must_use]
pub fn accumulation(a: &Assessment) -> String {
    let u = a.outcome.accumulation.si();
    let j = a.told_at.si();
    let at = if a.device.current_density.is_some() {
        "at"
    } else {
        "per"
    };
    format!("{} {at} {}", voltage(u * j), current_density_text(j))
}

/// A current density, a bare power of ten written as such.
#[must_use]
pub fn current_density_text(j: f64) -> String {
    let text = tidy(&result(j, Scale::CurrentDensity));
    match text.strip_prefix("1×10⁰\u{a0}") {
        Some(unit) => format!("1\u{a0}{unit}"),
        None => text.strip_prefix("1×").map_or(text.clone(), str::to_owned),
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
            "an electron stays {} spin lifetimes between the contacts, (r_1\u{a0}∥\u{a0}r_2)\u{a0}t/r_N\u{a0}λ: it forgets",
            factor(dwell)
        );
    }
    let (contact, channel) = (m.contact.si(), m.channel.si());
    // The two contacts together make the injected polarization; a far share of almost nothing is not told.
    let p = a.outcome.polarization.si();
    let far = m.from_far_side.abs() > 5e-3 * p.abs();
    let adds = if far {
        format!("; the far contact adds {}", percent(m.from_far_side))
    } else {
        String::new()
    };
    let crossing = format!(
        "of the {} that the contact offers {} crosses{adds}",
        percent(m.offered),
        percent(m.crossing)
    );
    if !channel.is_finite() {
        return format!("the channel is closed for spins: {crossing}");
    }
    let both = areas(&[channel, contact]);
    let (channel_text, contact_text) = (area(channel), area(contact));
    let (channel_text, contact_text) = match both.as_slice() {
        [n, c] if (channel / contact).max(contact / channel) < 100.0 => (n.clone(), c.clone()),
        _ => (channel_text, contact_text),
    };
    if channel > contact {
        format!(
            "the channel's spin impedance, {channel_text}, is {} times the contact's, {contact_text}: {crossing}",
            factor(channel / contact)
        )
    } else {
        format!(
            "the contact's spin impedance, {contact_text}, is {} times the channel's, {channel_text}: {crossing}",
            factor(contact / channel)
        )
    }
}

fn asymmetry_text(a: &Assessment, w: &Window) -> String {
    let gamma = w.asymmetry.si();
    if w.asymmetry_is_likely {
        let likely = a.device.likely.iter().find(|l| l.element == w.contact);
        let from = likely.map_or(String::new(), |l| {
            let borrowed = l
                .input
                .provenance
                .marks
                .iter()
                .any(|m| matches!(m, crate::materials::choose::Mark::Borrowed { .. }));
            format!(
                ", {} {}",
                if borrowed { "borrowed from" } else { "that of" },
                l.interface
            )
        });
        format!("with γ\u{a0}=\u{a0}{}{from}", asymmetry(gamma))
    } else {
        format!("with γ\u{a0}=\u{a0}{}", asymmetry(gamma))
    }
}

/// Which contacts are scaled, where there are several, and whether they are alike.
fn together(a: &Assessment, w: &Window) -> String {
    if w.contacts.len() < 2 {
        let bare = w.here.si() > 0.0
            && a.device.channel_contacts.iter().any(|i| {
                *i != w.contact
                    && a.blueprint
                        .interface(*i)
                        .is_some_and(|x| x.spin_resistance.si() <= 0.0)
            });
        return if bare {
            "; the bare contact stays bare".to_owned()
        } else {
            String::new()
        };
    }
    let product = |i: &usize| {
        a.blueprint
            .interface(*i)
            .map_or(0.0, |x| x.spin_resistance.resistance_area(x.asymmetry).si())
    };
    let products: Vec<f64> = w.contacts.iter().map(product).collect();
    let (low, high) = (
        products.iter().copied().fold(f64::INFINITY, f64::min),
        products.iter().copied().fold(0.0, f64::max),
    );
    let named = if a.written == Written::Stack {
        let names: Vec<String> = w
            .contacts
            .iter()
            .filter_map(|i| a.device.name(Position::Element(*i)))
            .map(|n| n.path.clone())
            .collect();
        format!(", {}", names.join(" and "))
    } else {
        String::new()
    };
    let unlike = low > 0.0 && high / low > 1.01;
    let ratio = if unlike {
        format!(", their ratio {} kept", factor(high / low))
    } else {
        String::new()
    };
    format!("; both contacts{named} scaled together{ratio}")
}

fn here_text(w: &Window) -> String {
    if w.here.si() > 0.0 {
        format!("this design: {}", area(w.here.si()))
    } else {
        "this design: no barrier".to_owned()
    }
}

/// A window in one line, for several goals.
fn short_window(found: &Result<Window, NoWindow>) -> String {
    match found {
        Ok(w) if w.intervals.is_empty() => {
            format!("none, best {}", of_target(w.wish.target, w.best.value))
        }
        Ok(w) => {
            let list: Vec<String> = w.intervals.iter().map(|i| window(i.low, i.high)).collect();
            format!("{}{}", list.join(" and "), position(w))
        }
        Err(NoWindow::NoAsymmetry) => "not known: no γ".to_owned(),
        Err(_) => "not computed".to_owned(),
    }
}

/// The window and where the design stands.
#[must_use]
pub fn window_text(a: &Assessment, found: &Result<Window, NoWindow>) -> String {
    match found {
        Ok(w) => {
            let together = together(a, w);
            let stands = format!("{}{}", here_text(w), position(w));
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

/// The rule of thumb, where it applies.
#[must_use]
pub fn rule_of_thumb(a: &Assessment) -> Option<String> {
    let [low, high] = a.rule_of_thumb?;
    let both = areas(&[low.si(), high.si()]).join(" .. ");
    Some(format!(
        "{both} from (1−γ²)\u{a0}r_N\u{a0}t/λ .. (1−γ²)\u{a0}r_N\u{a0}λ/t"
    ))
}

/// What bulk polarization would be needed without a barrier.
#[must_use]
pub fn half_metal_text(a: &Assessment, found: HalfMetal) -> Option<String> {
    let several = a.device.channel_contacts.len() > 1;
    let semiconductor = a
        .device
        .name(a.device.channel)
        .is_some_and(|n| n.semiconductor);
    let hypothetical = if semiconductor {
        " (hypothetical: a depletion region forms)"
    } else {
        ""
    };
    let of = if several {
        "β of both would"
    } else {
        "β would"
    };
    Some(match found {
        HalfMetal::Needed { short_of_one } => {
            format!(
                "{of} have to reach {}{hypothetical}",
                near_one(short_of_one)
            )
        }
        HalfMetal::Suffices => format!("β as it is suffices{hypothetical}"),
        HalfMetal::OutOfReach => format!("no β below 1\u{a0}−\u{a0}10⁻¹² would do{hypothetical}"),
        HalfMetal::NotFound => "not computed: β could not be bracketed".to_owned(),
        HalfMetal::NotAsked => return None,
    })
}

/// Where the inputs come from, in one line.
#[must_use]
pub fn honesty(a: &Assessment) -> String {
    let h = &a.honesty;
    let mut counts = Vec::new();
    if h.recalled > 0 {
        counts.push(format!("{} recalled", h.recalled));
    }
    if h.assumed > 0 {
        counts.push(format!("{} assumed", h.assumed));
    }
    if h.stated > 0 {
        counts.push(format!("{} stated in the design", h.stated));
    }
    let counts = match counts.split_first() {
        None => format!("all {} from records, none recalled or assumed", h.inputs),
        Some((first, rest)) => {
            let (n, word) = first.split_once(' ').unwrap_or((first, ""));
            let mut text = format!("{n} of {} {word}", h.inputs);
            for r in rest {
                text.push_str(&format!(", {r}"));
            }
            text
        }
    };
    let carry = match (h.carriers.len(), h.doubtful_carriers) {
        (0, _) => "no input has a spread to move".to_owned(),
        (1, 0) => "one carries most of the result and is neither recalled nor assumed".to_owned(),
        (1, _) => "one of the recalled or assumed carries most of the result".to_owned(),
        (n, 0) => format!("{n} carry most of its spread, none of them recalled or assumed"),
        (n, d) if d == n => {
            format!("{n} carry most of the result, all of them recalled or assumed")
        }
        (n, d) => format!("{n} carry most of the result, {d} of them recalled or assumed"),
    };
    format!("{counts}; {carry}")
}

/// The short answer, `width` characters wide.
#[must_use]
pub fn summary(a: &Assessment, width: usize) -> Vec<String> {
    let mut lines = summary_rows(a, width);
    let room = MOST_LINES.saturating_sub(lines.len());
    let tail = lines.split_off(lines.len() - inputs_row(a, width).len());
    let findings = findings_within(a, width, room);
    // Findings and where the inputs come from are always told; what is cut is above them.
    let most = MOST_LINES.saturating_sub(findings.len() + tail.len());
    if lines.len() > most {
        let left = lines.len() - most.saturating_sub(1);
        lines.truncate(most.saturating_sub(1));
        lines.push(format!(" ! {left} more lines: see --full"));
    }
    lines.extend(findings);
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
        // Control characters of a title are not passed on to the terminal.
        let title: String = title
            .chars()
            .map(|c| if c.is_control() { ' ' } else { c })
            .collect();
        head.extend(wrap(&title, width).into_iter().take(1));
    }
    head.extend(wrap(
        &format!("{}, {}", sketch(a), temperature(a.device.temperature.si())),
        width,
    ));
    let mut body = Vec::new();
    let mut row = |label: &str, value: String| body.extend(labelled(label, &value, width));
    let p = a.outcome.polarization.si();
    let polarization = if a.device.has_two_states {
        format!(
            "{} (antiparallel {})",
            percent(p),
            percent(a.outcome.polarization_antiparallel.si())
        )
    } else {
        percent(p)
    };
    row(
        "injected current polarization",
        with_goal(a, Target::InjectedPolarization, polarization),
    );
    row("spin accumulation", accumulation(a));
    if a.device.has_two_states {
        row(
            "magnetoresistance",
            with_goal(
                a,
                Target::Magnetoresistance,
                percent(a.outcome.magnetoresistance.si()),
            ),
        );
        let all = [
            a.outcome.resistance_area_change.si(),
            a.resistance_area[0].si(),
            a.resistance_area[1].si(),
        ];
        let printed = areas(&all);
        let change = format!(
            "{} on RA {} (antiparallel {})",
            printed[0], printed[1], printed[2]
        );
        row(
            "resistance-area change",
            with_goal(a, Target::ResistanceAreaChange, change),
        );
    }
    if let Some(m) = &a.mismatch {
        row("why", why(a, m));
    }
    if let [only] = a.goals.as_slice() {
        row("RA that meets the goal", window_text(a, &only.window));
    } else {
        for g in &a.goals {
            let goal = format!(
                "RA for {} {}",
                short_name(g.goal.target),
                comparison(g.goal.target, &g.goal.comparison)
            );
            row(&goal.replace('\u{a0}', " "), short_window(&g.window));
        }
        if let Some(Ok(w)) = a.goals.first().map(|g| &g.window) {
            row(
                "",
                format!(
                    "({}{}); {}",
                    asymmetry_text(a, w),
                    together(a, w),
                    here_text(w)
                ),
            );
        }
    }
    if let Some(w) = &a.default_window {
        let of = short_name(a.wish.target);
        row(&format!("RA for half the best {of}"), window_text(a, w));
    }
    if let Some(text) = rule_of_thumb(a) {
        row("rule of thumb", text);
    }
    let found = a
        .goals
        .first()
        .map(|g| g.half_metal)
        .or(a.default_half_metal);
    if let Some(text) = found.and_then(|found| half_metal_text(a, found)) {
        let label = if has_barrier(a) {
            "without a barrier"
        } else {
            "without that resistance"
        };
        row(label, text);
    }
    head.into_iter()
        .chain(body)
        .chain(inputs_row(a, width))
        .collect()
}

/// Whether what stands at the channel is a tunnel barrier or nothing yet, rather than a direct interface
/// between metals.
fn has_barrier(a: &Assessment) -> bool {
    let direct = |i: &usize| {
        a.device
            .name(Position::Element(*i))
            .is_some_and(|n| n.path.ends_with("interface"))
            && a.blueprint
                .interface(*i)
                .is_some_and(|x| x.spin_resistance.si() > 0.0)
    };
    !a.device.channel_contacts.iter().any(direct)
}

/// Findings that a row of the short answer already tells.
fn is_told(f: &crate::studies::findings::Finding) -> bool {
    matches!(
        f.rule_name(),
        "conductivity-mismatch" | "outside-window" | "goal-out-of-reach" | "window-unknown"
    )
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
    let untold: Vec<_> = a.findings.iter().filter(|f| !is_told(f)).collect();
    let blocks: Vec<Vec<String>> = untold
        .iter()
        .map(|f| marked(severity_mark(f.severity()), &finding(f), width))
        .collect();
    // What does not fit is named, so that no caveat is hidden by the width of a terminal.
    for shown in (0..=blocks.len()).rev() {
        let mut lines: Vec<String> = blocks[..shown].iter().flatten().cloned().collect();
        if shown < blocks.len() {
            let mut names: Vec<&str> = untold[shown..].iter().map(|f| f.rule_name()).collect();
            names.dedup();
            let text = format!("{} more in --full: {}", names.len(), names.join(", "));
            lines.extend(marked(" !", &text, width));
        }
        if lines.len() <= room || shown == 0 {
            return lines;
        }
    }
    Vec::new()
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
    a.shares
        .iter()
        .find(|s| s.columns.contains(&column))
        .map_or("–".to_owned(), |s| percent_share(s.share))
}

/// Name of a position, for tables.
#[must_use]
pub fn position_name(device: &Vertical, at: Position) -> String {
    device.name(at).map_or(String::new(), |n| n.label.clone())
}
