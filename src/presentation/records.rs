//! The library as text: lists and whole materials.

use crate::materials::library::{Library, Listed};
use crate::materials::record::{
    Common, ContactRecord, InterfaceEntry, LawRecord, Material, NoteRecord, PairRecord, SpreadFrom,
    TemperatureFrom, ValueRecord,
};
use crate::materials::references::Reference;
use crate::quantities::kind::Scale;
use crate::quantities::print::{with_digits, with_spread};
use crate::quantities::spread::Spread;
use crate::quantities::text::Reading;

use super::full::{keep_whole, table, table_lines};
use super::lines::{marked, wrap};
use super::numbers::temperature;

/// The list of materials and interfaces.
#[must_use]
pub fn list(all: &[Listed], width: usize) -> Vec<String> {
    let mut t = table(&["name", "class", "also", "what"], width, &[]);
    for l in all {
        let own = if l.from_user { " (yours)" } else { "" };
        t.add_row(vec![
            l.id.clone(),
            format!("{}{own}", l.class),
            l.aliases.join(", "),
            l.name.clone(),
        ]);
    }
    keep_whole(&mut t, &[0, 1]);
    table_lines(&t)
}

fn reading(r: &Reading, scale: Scale) -> String {
    let text = with_spread(r.si, &r.spread, scale).replace(' ', "\u{a0}");
    if matches!(r.spread, Spread::Unknown) {
        format!("{text}, spread not stated")
    } else {
        text
    }
}

struct Sources<'a> {
    library: &'a Library,
    keys: Vec<String>,
}

impl Sources<'_> {
    fn footnote(&mut self, key: Option<&String>) -> String {
        let Some(key) = key else { return String::new() };
        let at = self.keys.iter().position(|k| k == key).unwrap_or_else(|| {
            self.keys.push(key.clone());
            self.keys.len() - 1
        });
        format!("[{}]", at + 1)
    }

    fn how(&mut self, c: &Common) -> String {
        let mut text = c.obtained.word().to_owned();
        if let Some(locus) = &c.locus {
            text.push_str(&format!(", {locus}"));
        }
        let footnote = self.footnote(c.source.as_ref());
        if !footnote.is_empty() {
            text.push_str(&format!(" {footnote}"));
        }
        if let Some(rule) = &c.rule {
            text.push_str(&format!(": {rule}, from {}", c.parents.join(", ")));
        }
        match c.spread_from {
            SpreadFrom::Published => {}
            SpreadFrom::Estimated => text.push_str("; spread estimated"),
            SpreadFrom::Recalled => text.push_str("; spread recalled"),
            SpreadFrom::NotStated => text.push_str("; spread not stated"),
        }
        if !c.disagrees_with.is_empty() {
            text.push_str(&format!("; disagrees with {}", c.disagrees_with.join(", ")));
        }
        text
    }

    fn lines(&self, width: usize) -> Vec<String> {
        if self.keys.is_empty() {
            return Vec::new();
        }
        let mut lines = vec![String::new(), "Sources".to_owned()];
        for (i, key) in self.keys.iter().enumerate() {
            let text = match self.library.references().get(key) {
                Ok(Reference { full, .. }) => full,
                Err(_) => key.clone(),
            };
            lines.extend(marked(&format!("[{}]", i + 1), &text, width));
        }
        lines
    }
}

fn at(c: &Common) -> String {
    let mut parts = Vec::new();
    if let Some(t) = c.temperature {
        let known = match c.temperature_from {
            TemperatureFrom::Stated => "",
            TemperatureFrom::Recalled => " (recalled)",
            TemperatureFrom::Assumed => " (assumed)",
        };
        parts.push(format!("{}{known}", temperature(t).replace('\u{a0}', " ")));
    }
    let conditions = &c.conditions;
    parts.extend(conditions.form.clone());
    parts.extend(
        conditions
            .carrier_type
            .as_ref()
            .map(|t| format!("{t}-type")),
    );
    parts.extend(conditions.dopant.clone());
    parts.extend(
        conditions
            .doping
            .as_ref()
            .map(|d| with_digits(d.si, Scale::Density, 2)),
    );
    parts.extend(conditions.others.iter().map(|(k, v)| format!("{k}: {v}")));
    parts.join(", ")
}

/// One record: what it says on one line, how it was obtained below it.
fn entry(c: &Common, what: &str, how: &str, width: usize) -> Vec<String> {
    let at = at(c);
    let at = if at.is_empty() {
        String::new()
    } else {
        format!(" at {at}")
    };
    let mut lines = marked(&c.id, &format!("{what}{at}"), width);
    lines.extend(marked("   ", how, width));
    lines
}

fn section(title: &str, lines: Vec<String>) -> Vec<String> {
    if lines.is_empty() {
        return lines;
    }
    [String::new(), title.to_owned()]
        .into_iter()
        .chain(lines)
        .collect()
}

fn pairs(m: &[PairRecord], sources: &mut Sources<'_>, width: usize) -> Vec<String> {
    let mut lines = Vec::new();
    for p in m {
        let what = format!(
            "ρ {}, β {}, λ {}",
            reading(&p.resistivity, Scale::Resistivity),
            reading(&p.bulk_asymmetry, Scale::Plain),
            reading(&p.spin_diffusion_length, Scale::Length)
        );
        let assumed = if p.resistivity_assumed {
            "; ρ not from the same paper"
        } else {
            ""
        };
        let how = format!(
            "{}; {}{assumed}",
            p.common.technique.clone().unwrap_or_default(),
            sources.how(&p.common)
        );
        lines.extend(entry(&p.common, &what, &how, width));
    }
    section("Pairs: ρ, β and λ from one technique", lines)
}

fn values(m: &[ValueRecord], sources: &mut Sources<'_>, width: usize) -> Vec<String> {
    let mut lines = Vec::new();
    for v in m {
        let what = reading(&v.reading, v.property.kind.scale);
        let how = sources.how(&v.common);
        lines.extend(entry(&v.common, &what, &how, width));
    }
    section("Values", lines)
}

fn laws(m: &[LawRecord], sources: &mut Sources<'_>, width: usize) -> Vec<String> {
    let mut lines = Vec::new();
    for law in m {
        if lines.is_empty() {
            lines.extend([String::new(), "Laws".to_owned()]);
        }
        let coefficients: Vec<String> = law
            .coefficients
            .iter()
            .map(|(k, v)| format!("{k} = {v}"))
            .collect();
        let range: Vec<String> = law.range.iter().map(|(k, v)| format!("{k} {v}")).collect();
        let error = law
            .error
            .as_ref()
            .map_or(String::new(), |e| format!("; stated error {e}"));
        let text = format!(
            "{}, {}: {}; {}; range {}{error}; {}",
            law.property.name,
            law.form,
            law.formula,
            coefficients.join(", "),
            range.join(", "),
            sources.how(&law.common)
        );
        lines.extend(marked(&law.common.id, &text, width));
    }
    lines
}

fn contacts(m: &[ContactRecord], sources: &mut Sources<'_>, width: usize) -> Vec<String> {
    let mut lines = Vec::new();
    for c in m {
        let numbers: Vec<String> = [
            ("γ", &c.interface_asymmetry, Scale::Plain),
            ("polarization", &c.polarization, Scale::Percent),
            ("AR*", &c.interface_spin_resistance, Scale::ResistanceArea),
            ("RA", &c.resistance_area, Scale::ResistanceArea),
            ("δ", &c.spin_memory_loss, Scale::Plain),
        ]
        .into_iter()
        .filter_map(|(name, r, scale)| r.as_ref().map(|r| format!("{name} {}", reading(r, scale))))
        .collect();
        let what = format!("{}, {}", c.kind.word(), numbers.join(", "));
        let how = sources.how(&c.common);
        lines.extend(entry(&c.common, &what, &how, width));
    }
    section("Contacts", lines)
}

fn notes(m: &[NoteRecord], sources: &mut Sources<'_>, width: usize) -> Vec<String> {
    let mut lines = Vec::new();
    for n in m {
        if lines.is_empty() {
            lines.extend([String::new(), "Notes".to_owned()]);
        }
        lines.extend(marked(
            &format!("{}:", n.kind),
            &format!("{} ({})", n.text, sources.how(&n.common)),
            width,
        ));
    }
    if m.iter().any(|n| n.kind == "hazard") {
        lines.extend(wrap("These are reminders, not a safety assessment: local rules, the safety data sheet and licensed practice decide.", width));
    }
    lines
}

/// A whole material.
#[must_use]
pub fn material(m: &Material, library: &Library, width: usize) -> Vec<String> {
    let mut sources = Sources {
        library,
        keys: Vec::new(),
    };
    let also = if m.aliases.is_empty() {
        String::new()
    } else {
        format!(", also {}", m.aliases.join(", "))
    };
    let mut lines = wrap(
        &format!("{} ({}{also}): {}", m.id, m.class.word(), m.name),
        width,
    );
    lines.extend(pairs(&m.pairs, &mut sources, width));
    lines.extend(values(&m.values, &mut sources, width));
    lines.extend(calibration_lines(&m.calibrations, &mut sources, width));
    lines.extend(laws(&m.laws, &mut sources, width));
    lines.extend(notes(&m.notes, &mut sources, width));
    lines.extend(sources.lines(width));
    lines
}

fn calibration_lines(
    all: &[crate::materials::record::CalibrationRecord],
    sources: &mut Sources<'_>,
    width: usize,
) -> Vec<String> {
    let mut lines = Vec::new();
    for c in all {
        if lines.is_empty() {
            lines.extend([
                String::new(),
                "Calibrations of the resistance-area product".to_owned(),
            ]);
        }
        let mut parts = vec![format!("between {}", c.electrodes.join(" and "))];
        if let (Some(ra), Some(t)) = (&c.resistance_area, &c.thickness) {
            parts.push(format!(
                "RA {} at {}",
                reading(ra, Scale::ResistanceArea),
                reading(t, Scale::Length)
            ));
        }
        parts.extend(
            c.thickness_per_decade
                .as_ref()
                .map(|s| format!("{} a decade", reading(s, Scale::Slope))),
        );
        parts.push(at(&c.common));
        parts.push(sources.how(&c.common));
        lines.extend(marked(&c.common.id, &parts.join("; "), width));
    }
    lines
}

/// A whole interface.
#[must_use]
pub fn interface(i: &InterfaceEntry, library: &Library, width: usize) -> Vec<String> {
    let mut sources = Sources {
        library,
        keys: Vec::new(),
    };
    let mut lines = wrap(
        &format!(
            "{}: {}. Ferromagnet {}, barrier {}, channel {}.",
            i.id,
            i.name,
            i.ferromagnet,
            i.barrier.as_deref().unwrap_or("none (direct contact)"),
            i.channel
                .as_deref()
                .unwrap_or("none (superconductor or second ferromagnet)")
        ),
        width,
    );
    lines.extend(contacts(&i.contacts, &mut sources, width));
    lines.extend(values(&i.values, &mut sources, width));
    lines.extend(calibration_lines(&i.calibrations, &mut sources, width));
    lines.extend(notes(&i.notes, &mut sources, width));
    lines.extend(sources.lines(width));
    lines
}
