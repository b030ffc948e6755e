//! The full answer: the short one, then the design as understood, its expansion into a stack, spin
//! resistances and their ratios, potentials, windows, check values, every finding, and the sources.

use comfy_table::{CellAlignment, ColumnConstraint, ContentArrangement, Table, presets};

use crate::devices::inputs::Input;
use crate::devices::provenance::Origin;
use crate::devices::vertical::{EndPlan, Position};
use crate::materials::choose::Mark;
use crate::models::ladder::{Element, End, Face, Layer, Magnetization};
use crate::quantities::dimensions::Measured;
use crate::quantities::kind::Scale;
use crate::quantities::print::{with_digits, with_spread};
use crate::quantities::spread::Spread;
use crate::studies::assess::{Assessment, channel_potentials};

use super::lines::{labelled, marked, wrap};
use super::numbers::{area, factor, percent, voltage};
use super::summary::{self, position_name, share};
use super::wording::{decided, finding, mark, severity_mark, target_name};

/// A table of the house: no vertical rules, a line under the head.
#[must_use]
pub fn table(head: &[&str], width: usize, right: &[usize]) -> Table {
    let mut t = Table::new();
    t.load_style(presets::UTF8_HORIZONTAL_ONLY)
        .set_content_arrangement(ContentArrangement::Dynamic)
        .set_width(u16::try_from(width).unwrap_or(u16::MAX))
        .set_header(head.to_vec());
    for column in 0..head.len() {
        if let Some(c) = t.column_mut(column) {
            c.set_padding((0, 1));
            if right.contains(&column) {
                c.set_cell_alignment(CellAlignment::Right);
            }
        }
    }
    t
}

/// Keeps the given columns from breaking a word.
pub fn keep_whole(t: &mut Table, columns: &[usize]) {
    for column in columns {
        if let Some(c) = t.column_mut(*column) {
            c.set_constraint(ColumnConstraint::ContentWidth);
        }
    }
}

/// The lines of a table without trailing blanks and without the outer rules.
#[must_use]
pub fn table_lines(t: &Table) -> Vec<String> {
    let lines: Vec<String> = t
        .lines()
        .map(|l| l.replace('\u{a0}', " ").trim_end().to_owned())
        .collect();
    let rule = |l: &String| !l.is_empty() && l.chars().all(|c| "─═╌┄┈-= ".contains(c));
    let inner: Vec<String> = lines
        .iter()
        .enumerate()
        .filter(|(i, l)| !(rule(l) && (*i == 0 || *i + 1 == lines.len())))
        .map(|(_, l)| l.clone())
        .collect();
    // A rule between every two rows would double the length: keep the one under the head.
    let mut seen = false;
    inner
        .into_iter()
        .filter(|l| {
            if rule(l) {
                let first = !seen;
                seen = true;
                first
            } else {
                true
            }
        })
        .collect()
}

/// Keeps a cell on one line.
fn whole(text: &str) -> String {
    text.replace(' ', "\u{a0}")
}

fn heading(text: &str, width: usize) -> Vec<String> {
    let mut lines = vec![String::new()];
    lines.extend(wrap(text, width));
    lines
}

fn plain(text: &str) -> String {
    text.replace('\u{a0}', " ")
}

/// Value and spread of an input, `unknown` said where it is.
#[must_use]
pub fn value_of(input: &Input) -> String {
    let r = &input.reading;
    let text = with_spread(r.si, &r.spread, input.kind.scale);
    match r.spread {
        Spread::Unknown => format!("{text} ± unknown"),
        _ => text,
    }
}

fn source_of(a: &Assessment, input: &Input) -> String {
    match &input.provenance.origin {
        Origin::Design {
            note, overrides, ..
        } => match (overrides, note) {
            (true, Some(note)) => format!("design, in place of the library: {note}"),
            (true, None) => "design, in place of the library".to_owned(),
            (false, _) => "design".to_owned(),
        },
        Origin::Record {
            id,
            source,
            decided: d,
            among,
            obtained,
        } => {
            let footnote = source
                .as_ref()
                .and_then(|key| a.references.iter().position(|(k, _)| k == key))
                .map_or(String::new(), |n| format!(" [{}]", n + 1));
            // How it was obtained stands first; the marks that repeat it are left out.
            let marks: Vec<String> = input
                .provenance
                .marks
                .iter()
                .filter(|m| {
                    !matches!(
                        m,
                        Mark::Recalled | Mark::Derived | Mark::Estimated | Mark::CommonPractice
                    )
                })
                .map(mark)
                .collect();
            let marks = if marks.is_empty() {
                String::new()
            } else {
                format!("; {}", marks.join("; "))
            };
            let unread = if *obtained == "recalled" {
                ", not read"
            } else {
                ""
            };
            format!(
                "{id}{footnote}, {obtained}{unread} ({}){marks}",
                decided(*d, *among)
            )
        }
    }
}

/// One line an input: name, value with spread, share. Inputs that follow each other and come from the same
/// place are told it once, below them.
fn inputs(a: &Assessment, width: usize) -> Vec<String> {
    let mut lines = heading(
        "Design as understood: value, share of the answer's spread, where it comes from",
        width,
    );
    let mut all: Vec<(&Input, String)> = a
        .device
        .table
        .inputs()
        .iter()
        .enumerate()
        .map(|(i, input)| (input, plain(&share(a, i))))
        .chain(
            a.device
                .likely
                .iter()
                .map(|l| (&l.input, "window only".to_owned())),
        )
        .collect();
    // In the order of the stack, not in the order in which they were resolved.
    let place = |input: &Input| {
        let path = input.name.rsplit_once('.').map_or("", |(p, _)| p);
        a.device
            .names
            .iter()
            .position(|n| n.path == path)
            .unwrap_or(usize::MAX)
    };
    all.sort_by_key(|(input, _)| place(input));
    let mut part = "";
    for (i, (input, share)) in all.iter().enumerate() {
        let (path, key) = input.name.rsplit_once('.').unwrap_or(("", &input.name));
        if path != part {
            lines.push(path.to_owned());
            part = path;
        }
        let name = key.replace('_', " ");
        let value = value_of(input);
        lines.push(
            format!("  {name:<27}  {value:<24} {share:>6}")
                .trim_end()
                .to_owned(),
        );
        let source = source_of(a, input);
        let same_next = all.get(i + 1).is_some_and(|(next, _)| {
            next.name.rsplit_once('.').map_or("", |(p, _)| p) == path
                && source_of(a, next) == source
        });
        if !same_next {
            lines.extend(marked("     ", &source, width));
        }
    }
    lines.extend(wrap(
        &format!(
            "Share: part of Σ(change)² of the {} when each input moves by one standard deviation, one at a time; the same number of one record moves at once wherever it stands; – where an input has no spread to move.",
            target_name(a.wish.target)
        ),
        width,
    ));
    lines
}

fn layer_row(a: &Assessment, at: Position, layer: &Layer, place: &str) -> Vec<String> {
    let t = layer.thickness.si();
    let beta = if a.device.is_ferromagnet(at) {
        format!("{:.3}", layer.asymmetry.si())
    } else {
        "–".to_owned()
    };
    let turns = match (a.device.is_ferromagnet(at), layer.magnetization) {
        (false, _) => "–",
        (true, Magnetization::Fixed) => "fixed",
        (true, Magnetization::FixedOpposite) => "fixed, AP",
        (true, Magnetization::Free) => "free",
    };
    vec![
        whole(&format!("{}{place}", position_name(&a.device, at))),
        whole(&with_digits(layer.resistivity.si(), Scale::Resistivity, 3)),
        whole(&with_digits(layer.length.si(), Scale::Length, 3)),
        if t.is_finite() {
            whole(&with_digits(t, Scale::Length, 3))
        } else {
            "∞".to_owned()
        },
        beta,
        whole(&with_digits(
            layer.spin_resistance().si(),
            Scale::ResistanceArea,
            3,
        )),
        turns.to_owned(),
    ]
}

fn end_word(end: &EndPlan) -> Option<&'static str> {
    match end {
        EndPlan::SemiInfinite(_) => None,
        EndPlan::SpinSink => Some("spin sink"),
        EndPlan::Reflecting => Some("reflecting"),
        EndPlan::FedInPlane => Some("fed in plane"),
    }
}

fn stack(a: &Assessment, width: usize) -> Vec<String> {
    let mut lines = heading(
        &format!(
            "Stack, from left to right (written as {})",
            summary::written(a.written)
        ),
        width,
    );
    let mut t = table(
        &[
            "element",
            "ρ or RA",
            "λ or δ",
            "t",
            "β or γ",
            "r or r_b*",
            "magnet",
        ],
        width,
        &[1, 2, 3, 4, 5],
    );
    let empty = |text: &str| {
        let mut row = vec![text.to_owned()];
        row.resize(7, String::new());
        row
    };
    match &a.blueprint.left {
        End::SemiInfinite(layer) => {
            t.add_row(layer_row(a, Position::LeftEnd, layer, ", end"));
        }
        _ => {
            t.add_row(empty(&format!(
                "({})",
                end_word(&a.device.left).unwrap_or("end")
            )));
        }
    }
    for (i, element) in a.blueprint.elements.iter().enumerate() {
        let at = Position::Element(i);
        match element {
            Element::Layer(layer) => {
                t.add_row(layer_row(a, at, layer, ""));
            }
            Element::Interface(x) => {
                let ra = x.spin_resistance.resistance_area(x.asymmetry).si();
                let delta = x.memory_loss.si();
                let none = x.spin_resistance.si() <= 0.0;
                t.add_row(vec![
                    position_name(&a.device, at),
                    if none {
                        "none".to_owned()
                    } else {
                        whole(&with_digits(ra, Scale::ResistanceArea, 3))
                    },
                    if delta > 0.0 {
                        format!("{delta:.2}")
                    } else {
                        "–".to_owned()
                    },
                    "–".to_owned(),
                    if none {
                        "–".to_owned()
                    } else {
                        format!("{:.3}", x.asymmetry.si())
                    },
                    if none {
                        "–".to_owned()
                    } else {
                        whole(&with_digits(
                            x.spin_resistance.si(),
                            Scale::ResistanceArea,
                            3,
                        ))
                    },
                    match (none, x.magnetization) {
                        (true, _) => "–".to_owned(),
                        (_, Magnetization::Free) => "free".to_owned(),
                        (_, Magnetization::Fixed) => "fixed".to_owned(),
                        (_, Magnetization::FixedOpposite) => "fixed, AP".to_owned(),
                    },
                ]);
            }
        }
    }
    match &a.blueprint.right {
        End::SemiInfinite(layer) => {
            t.add_row(layer_row(a, Position::RightEnd, layer, ", end"));
        }
        _ => {
            t.add_row(empty(&format!(
                "({})",
                end_word(&a.device.right).unwrap_or("end")
            )));
        }
    }
    lines.extend(table_lines(&t));
    let has_end = [&a.device.left, &a.device.right]
        .iter()
        .any(|e| end_word(e).is_none());
    if has_end {
        lines.extend(wrap("An outermost layer marked `end` is taken as many λ thick; its thickness, or λ where none is stated, counts in RA only.", width));
    }
    lines
}

fn resistances(a: &Assessment, width: usize) -> Vec<String> {
    let Some(m) = &a.mismatch else {
        return Vec::new();
    };
    let mut lines = heading("Spin resistances at the injector", width);
    let mut row = |label: &str, value: String| lines.extend(labelled(label, &value, width));
    row("r_F of the ferromagnet", area(m.r_ferromagnet.si()));
    row(
        "r_N of the channel",
        format!(
            "{}, {} times r_F",
            area(m.r_channel.si()),
            factor(m.r_channel.si() / m.r_ferromagnet.si())
        ),
    );
    if m.r_interface.si() > 0.0 {
        row(
            "r_b* of the interface",
            format!(
                "{}, {} times r_N, {} times r_F",
                area(m.r_interface.si()),
                factor(m.r_interface.si() / m.r_channel.si()),
                factor(m.r_interface.si() / m.r_ferromagnet.si())
            ),
        );
        row(
            "RA of the interface",
            format!(
                "{} with both channels in parallel, r_b*(1−γ²); a measurement on this stack reads {}, r_b*(1−γp)",
                area(m.resistance_area.si()),
                area(m.measured.si())
            ),
        );
    }
    row(
        "seen from the channel's face",
        format!(
            "contact {}, channel {}",
            area(m.contact.si()),
            if m.channel.si().is_finite() {
                area(m.channel.si())
            } else {
                "closed".to_owned()
            }
        ),
    );
    if m.from_far_side.abs() > 0.0 {
        row("injected from this contact", percent(m.crossing));
        row("added by the far contact", percent(m.from_far_side));
    }
    lines
}

fn place_name(a: &Assessment, face: usize) -> String {
    let before = match face.checked_sub(1) {
        Some(i) => Some(Position::Element(i)),
        None => matches!(a.device.left, EndPlan::SemiInfinite(_)).then_some(Position::LeftEnd),
    };
    let after = if face < a.device.elements.len() {
        Some(Position::Element(face))
    } else {
        matches!(a.device.right, EndPlan::SemiInfinite(_)).then_some(Position::RightEnd)
    };
    let name = |at: Option<Position>, end: &EndPlan| {
        at.map_or_else(
            || end_word(end).unwrap_or("end").to_owned(),
            |at| position_name(&a.device, at),
        )
    };
    format!(
        "{} → {}",
        name(before, &a.device.left),
        name(after, &a.device.right)
    )
}

fn potentials(a: &Assessment, width: usize) -> Vec<String> {
    let j = a.told_at.si();
    let none = if a.device.current_density.is_some() {
        ""
    } else {
        " (the design states none)"
    };
    let told = format!("{}{none}", plain(&summary::current_density_text(j)));
    let mut lines = Vec::new();
    let states: &[(&str, &[Face])] = if a.device.has_two_states {
        &[("parallel", &a.faces[0]), ("antiparallel", &a.faces[1])]
    } else {
        &[("", &a.faces[0])]
    };
    for (name, faces) in states {
        let state = if name.is_empty() {
            String::new()
        } else {
            format!(", {name}")
        };
        lines.extend(heading(
            &format!("Electrochemical potentials at the faces{state}, at {told}"),
            width,
        ));
        let mut t = table(
            &["face", "p = J/j", "u = (V↑−V↓)/2", "V↑", "V↓"],
            width,
            &[1, 2, 3, 4],
        );
        for (k, f) in faces.iter().enumerate() {
            let u = f.accumulation_per_current_density.si() * j;
            let [up, down] = channel_potentials(f);
            t.add_row(vec![
                place_name(a, k),
                percent(f.polarization.si()),
                voltage(u),
                whole(&with_digits(up.si() * j, Scale::Voltage, 4)),
                whole(&with_digits(down.si() * j, Scale::Voltage, 4)),
            ]);
        }
        lines.extend(table_lines(&t));
    }
    lines
}

fn contact_windows(a: &Assessment, width: usize) -> Vec<String> {
    if a.contact_windows.is_empty() {
        return Vec::new();
    }
    let mut lines = heading(
        "Window of each contact alone, the others as they are",
        width,
    );
    for (element, w) in &a.contact_windows {
        let name = a
            .device
            .name(Position::Element(*element))
            .map_or(String::new(), |n| n.path.clone());
        lines.extend(labelled(&name, &summary::window_text(a, w), width));
    }
    lines
}

fn checks(a: &Assessment, width: usize) -> Vec<String> {
    if a.checks.is_empty() {
        return Vec::new();
    }
    let mut lines = heading(
        "Published values of this contact, shown beside the answer and never fed to it",
        width,
    );
    for c in &a.checks {
        let footnote = c
            .source
            .as_ref()
            .and_then(|key| a.references.iter().position(|(k, _)| k == key))
            .map_or(String::new(), |n| format!(" [{}]", n + 1));
        let at = c
            .temperature
            .map_or(String::new(), |t| format!(" at {t} K"));
        let recalled = if c.recalled {
            ", recalled, not read"
        } else {
            ""
        };
        let (scale, what) = if c.is_resistance_area {
            (Scale::ResistanceArea, "RA")
        } else {
            (Scale::Percent, "polarization")
        };
        let value = with_spread(c.reading.si, &c.reading.spread, scale);
        let label = if c.is_resistance_area {
            "measured RA".to_owned()
        } else {
            format!("{} {what}", c.kind.word())
        };
        lines.extend(labelled(
            &label,
            &format!("{value}{at}, {}{footnote}{recalled}", c.record),
            width,
        ));
    }
    lines
}

fn findings(a: &Assessment, width: usize) -> Vec<String> {
    let mut lines = heading("Findings", width);
    if a.findings.is_empty() {
        lines.push("none".to_owned());
    }
    for f in &a.findings {
        lines.extend(marked(
            severity_mark(f.severity()),
            &format!("{} [{}]", finding(f), f.rule_name()),
            width,
        ));
    }
    lines
}

fn sources(a: &Assessment, width: usize) -> Vec<String> {
    if a.references.is_empty() {
        return Vec::new();
    }
    let mut lines = heading("Sources", width);
    for (i, (key, reference)) in a.references.iter().enumerate() {
        let text = reference
            .as_ref()
            .map_or_else(|| key.clone(), |r| r.full.clone());
        lines.extend(marked(&format!("[{}]", i + 1), &text, width));
    }
    lines.extend(wrap("Model: Valet and Fert, Phys. Rev. B 48, 7099 (1993); Fert and Jaffrès, Phys. Rev. B 64, 184420 (2001): diffusive, linear, one-dimensional, collinear.", width));
    lines
}

/// The full answer, `width` characters wide.
#[must_use]
pub fn full(a: &Assessment, width: usize) -> Vec<String> {
    let mut lines = summary::summary_rows(a, width);
    lines.extend(findings(a, width));
    lines.extend(inputs(a, width));
    lines.extend(stack(a, width));
    lines.extend(resistances(a, width));
    lines.extend(potentials(a, width));
    lines.extend(contact_windows(a, width));
    lines.extend(checks(a, width));
    lines.extend(sources(a, width));
    lines
}
