//! The answer as JSON: the stable interface. Every number is `{value, unit, low, high, level, status,
//! from}` in SI; `low` and `high` are null where no spread was computed; never NaN. Keys are only added
//! within a format number.

use serde::Serialize;
use serde_json::{Map, Value, json};

use crate::designs::goals::Comparison;
use crate::devices::provenance::Origin;
use crate::devices::vertical::{EndPlan, Position};
use crate::models::ladder::{Element, End, Face, Layer, Magnetization};
use crate::quantities::dimensions::Measured;
use crate::quantities::kind::Scale;
use crate::quantities::spread::{Side, Spread};
use crate::studies::assess::{Assessment, GoalResult, channel_potentials};
use crate::studies::mismatch::HalfMetal;
use crate::studies::vary::Varied;
use crate::studies::window::{NoWindow, Window};

use super::summary;
use super::wording::{finding, mark, severity_word};

/// Name and number of the format.
pub const FORMAT: &str = "injectance.assessment/1";
/// Name and number of the format of a varied answer.
pub const VARIED_FORMAT: &str = "injectance.variation/1";

/// Whether a number can be relied on.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Serialize)]
pub enum NumberStatus {
    /// It can.
    #[serde(rename = "ok")]
    Ok,
    /// A model or a record is outside its range.
    #[serde(rename = "outside range")]
    OutsideRange,
    /// It was not computed.
    #[serde(rename = "not computed")]
    NotComputed,
}

/// A number of the output.
#[derive(Clone, PartialEq, Debug, Serialize)]
pub struct Number {
    /// Value in `unit`; null if not computed or infinite.
    pub value: Option<f64>,
    /// Coherent SI unit.
    pub unit: &'static str,
    /// Lower end of the interval.
    pub low: Option<f64>,
    /// Upper end of the interval.
    pub high: Option<f64>,
    /// Probability inside the interval.
    pub level: Option<f64>,
    /// Status.
    pub status: NumberStatus,
    /// Ids of the records behind it.
    pub from: Vec<String>,
}

fn number(value: f64, unit: &'static str, from: &[String], outside: bool) -> Number {
    let finite = value.is_finite();
    Number {
        value: finite.then_some(value),
        unit,
        low: None,
        high: None,
        level: None,
        status: match (finite, outside) {
            (false, _) => NumberStatus::NotComputed,
            (true, true) => NumberStatus::OutsideRange,
            (true, false) => NumberStatus::Ok,
        },
        from: from.to_vec(),
    }
}

/// The coherent SI unit of a scale.
#[must_use]
pub fn si_unit(scale: Scale) -> &'static str {
    match scale {
        Scale::Plain | Scale::Percent => "1",
        Scale::Length | Scale::Lattice | Scale::Slope => "m",
        Scale::ResistanceArea => "Ω m²",
        Scale::Resistivity => "Ω m",
        Scale::Conductivity => "S/m",
        Scale::Resistance => "Ω",
        Scale::Density => "m⁻³",
        Scale::Mobility => "m²/(V s)",
        Scale::Diffusion => "m²/s",
        Scale::Energy => "J",
        Scale::Time => "s",
        Scale::Temperature => "K",
        Scale::CurrentDensity => "A/m²",
        Scale::Voltage => "V",
        Scale::Field => "T",
        Scale::Magnetization => "A/m",
    }
}

const AREA: &str = "Ω m²";

/// The document of an assessment.
#[must_use]
pub fn assessment(a: &Assessment) -> Value {
    let from = records(a);
    // A model or a record is outside its range where one of these findings stands.
    let strained = a.findings.iter().any(|f| {
        matches!(
            f.rule_name(),
            "bare-semiconductor"
                | "thin-ferromagnet"
                | "thin-channel"
                | "not-linear"
                | "drift"
                | "high-bias"
                | "asymmetry-near-one"
                | "above-curie-temperature"
                | "temperature-outside-data"
                | "doping-outside-data"
                | "memory-loss-outside-temperature"
        )
    });
    let n = |v: f64, unit: &'static str| number(v, unit, &from, strained);
    let o = &a.outcome;
    let mut doc = Map::new();
    let mut put = |key: &str, value: Value| {
        doc.insert(key.to_owned(), value);
    };
    put("format", json!(FORMAT));
    put(
        "program",
        json!(format!("injectance {}", env!("CARGO_PKG_VERSION"))),
    );
    put("design", json!(a.name));
    put("title", json!(a.title));
    put("written", json!(summary::written(a.written)));
    put("stack_sketch", json!(summary::sketch(a)));
    put(
        "temperature",
        json!(number(a.device.temperature.si(), "K", &[], false)),
    );
    put(
        "current_density",
        json!(
            a.device
                .current_density
                .map(|j| number(j.si(), "A/m²", &[], false))
        ),
    );
    put(
        "voltages_told_at_current_density",
        json!(number(a.told_at.si(), "A/m²", &[], false)),
    );
    put("injected_polarization", json!(n(o.polarization.si(), "1")));
    put(
        "spin_accumulation_per_current_density",
        json!(n(o.accumulation.si(), AREA)),
    );
    put(
        "spin_accumulation",
        json!(
            a.device
                .current_density
                .map(|j| n(o.accumulation.si() * j.si(), "V"))
        ),
    );
    put("resistance_area", json!(n(a.resistance_area[0].si(), AREA)));
    if a.device.has_two_states {
        put(
            "injected_polarization_antiparallel",
            json!(n(o.polarization_antiparallel.si(), "1")),
        );
        put(
            "spin_accumulation_per_current_density_antiparallel",
            json!(n(o.accumulation_antiparallel.si(), AREA)),
        );
        put("magnetoresistance", json!(n(o.magnetoresistance.si(), "1")));
        put(
            "resistance_area_change",
            json!(n(o.resistance_area_change.si(), AREA)),
        );
        put(
            "resistance_area_antiparallel",
            json!(n(a.resistance_area[1].si(), AREA)),
        );
    }
    put(
        "goals",
        Value::Array(
            a.goals
                .iter()
                .map(|g| goal(a, g, &from, strained))
                .collect(),
        ),
    );
    put("goals_met", json!(a.goals.iter().all(|g| g.met)));
    put(
        "default_window",
        a.default_window
            .as_ref()
            .map_or(Value::Null, |w| window(a, w, &from)),
    );
    put(
        "rule_of_thumb",
        a.rule_of_thumb.map_or(
            Value::Null,
            |[low, high]| json!({ "low": n(low.si(), AREA), "high": n(high.si(), AREA) }),
        ),
    );
    put(
        "without_barrier",
        a.default_half_metal
            .map_or(Value::Null, |h| half_metal(h, &from)),
    );
    put(
        "contact_windows",
        a.contact_windows
            .iter()
            .map(|(i, w)| {
                json!({ "contact": path_of(a, Position::Element(*i)), "window": window(a, w, &from) })
            })
            .collect(),
    );
    put("mismatch", mismatch(a, &from, strained));
    put("stack", Value::Array(stack(a)));
    put("faces", faces(a, &from, strained));
    put("inputs", Value::Array(inputs(a)));
    put("honesty", honesty(a));
    put(
        "findings",
        a.findings
            .iter()
            .map(|f| {
                json!({
                    "rule": f.rule_name(),
                    "severity": severity_word(f.severity()),
                    "text": finding(f).replace('\u{a0}', " "),
                })
            })
            .collect(),
    );
    put(
        "check_values",
        a.checks
            .iter()
            .map(|c| {
                let (key, unit) = if c.is_resistance_area {
                    ("resistance_area", AREA)
                } else {
                    ("polarization", "1")
                };
                json!({
                    "kind": c.kind.word(),
                    key: number(c.reading.si, unit, std::slice::from_ref(&c.record), false),
                    "temperature": c.temperature.map(|t| number(t, "K", &[], false)),
                    "recalled": c.recalled,
                })
            })
            .collect(),
    );
    put(
        "references",
        a.references
            .iter()
            .map(|(key, r)| json!({ "key": key, "text": r.as_ref().map(|r| r.full.clone()) }))
            .collect(),
    );
    Value::Object(doc)
}

fn records(a: &Assessment) -> Vec<String> {
    let mut ids: Vec<String> = a
        .device
        .table
        .inputs()
        .iter()
        .flat_map(|i| i.provenance.records())
        .collect();
    ids.sort();
    ids.dedup();
    ids
}

fn path_of(a: &Assessment, at: Position) -> Option<String> {
    a.device.name(at).map(|n| n.path.clone())
}

/// Ids of the records behind the inputs of one layer or contact.
fn under(a: &Assessment, at: Position) -> Vec<String> {
    let Some(path) = path_of(a, at) else {
        return Vec::new();
    };
    let mut ids: Vec<String> = a
        .device
        .table
        .inputs()
        .iter()
        .filter(|i| i.name.rsplit_once('.').is_some_and(|(p, _)| p == path))
        .flat_map(|i| i.provenance.records())
        .collect();
    ids.sort();
    ids.dedup();
    ids
}

fn gamma_records(a: &Assessment, w: &Window) -> Vec<String> {
    match a
        .device
        .likely
        .iter()
        .find(|l| l.element == w.contact && w.asymmetry_is_likely)
    {
        Some(likely) => likely.input.provenance.records(),
        None => under(a, Position::Element(w.contact)),
    }
}

fn goal(a: &Assessment, g: &GoalResult, from: &[String], strained: bool) -> Value {
    let unit = si_unit(g.goal.target.kind().scale);
    json!({
        "result": g.goal.target.word(),
        "state": format!("{:?}", g.goal.state).to_lowercase(),
        "comparison": g.goal.text,
        "threshold": threshold(&g.goal.comparison, unit),
        "value": number(g.value, unit, from, strained),
        "met": g.met,
        "window": window(a, &g.window, from),
        "without_barrier": half_metal(g.half_metal, from),
    })
}

fn threshold(c: &Comparison, unit: &'static str) -> Value {
    let n = |x: f64| number(x, unit, &[], false);
    match *c {
        Comparison::AtLeast(a) => json!({ "at_least": n(a) }),
        Comparison::AtMost(b) => json!({ "at_most": n(b) }),
        Comparison::Between(a, b) => json!({ "at_least": n(a), "at_most": n(b) }),
    }
}

fn half_metal(h: HalfMetal, from: &[String]) -> Value {
    match h {
        HalfMetal::Needed { short_of_one } => json!({
            "answer": "needed",
            "one_minus_bulk_asymmetry": number(short_of_one, "1", from, false),
        }),
        HalfMetal::Suffices => json!({ "answer": "suffices as it is" }),
        HalfMetal::OutOfReach => json!({ "answer": "out of reach" }),
        HalfMetal::NotAsked => json!({ "answer": "no lower limit asked for" }),
        HalfMetal::NotFound => json!({ "answer": "not computed" }),
    }
}

fn window(a: &Assessment, w: &Result<Window, NoWindow>, from: &[String]) -> Value {
    match w {
        Ok(w) => {
            let mut from = from.to_vec();
            from.extend(
                gamma_records(a, w)
                    .into_iter()
                    .filter(|id| !from.contains(id))
                    .collect::<Vec<_>>(),
            );
            let from = from.as_slice();
            let edge = |e: Option<f64>| e.map(|x| number(x, AREA, from, false));
            let unit = si_unit(w.wish.target.kind().scale);
            json!({
                "status": "ok",
                "contact": path_of(a, Position::Element(w.contact)),
                "contacts_scaled_together": w.contacts.iter().map(|i| path_of(a, Position::Element(*i))).collect::<Vec<_>>(),
                "intervals": w.intervals.iter().map(|i| json!({
                    "low": edge(i.low.map(Measured::si)),
                    "high": edge(i.high.map(Measured::si)),
                })).collect::<Vec<_>>(),
                "fraction_of_best": w.fraction.map(|f| number(f, "1", &[], false)),
                "best": {
                    "value": number(w.best.value, unit, from, false),
                    "at": edge(w.best.at.map(Measured::si)),
                },
                "here": number(w.here.si(), AREA, &under(a, Position::Element(w.contact)), false),
                "inside": w.intervals.iter().any(|i| i.holds(w.here)),
                "interface_asymmetry": number(w.asymmetry.si(), "1", &gamma_records(a, w), false),
                "interface_asymmetry_of_a_barrier_not_there": w.asymmetry_is_likely,
            })
        }
        Err(why) => json!({
            "status": "not computed",
            "reason": match why {
                NoWindow::NoContact => "no contact at the channel",
                NoWindow::NoAsymmetry => "interface asymmetry not known",
                NoWindow::NotFound => "an edge could not be bracketed",
                NoWindow::Stack(_) => "the stack cannot be solved",
            },
        }),
    }
}

fn mismatch(a: &Assessment, from: &[String], strained: bool) -> Value {
    let Some(m) = &a.mismatch else {
        return Value::Null;
    };
    let n = |v: f64, unit: &'static str| number(v, unit, from, strained);
    let of = |v: f64, unit: &'static str, at: Option<Position>| {
        number(v, unit, &at.map_or(Vec::new(), |at| under(a, at)), strained)
    };
    let contact = a.device.injector_contact.map(Position::Element);
    json!({
        "contact_spin_impedance": n(m.contact.si(), AREA),
        "channel_spin_impedance": n(m.channel.si(), AREA),
        "offered_polarization": n(m.offered, "1"),
        "injected_from_this_contact": n(m.crossing, "1"),
        "added_by_far_contact": n(m.from_far_side, "1"),
        "spin_resistance_of_channel": of(m.r_channel.si(), AREA, Some(a.device.channel)),
        "spin_resistance_of_ferromagnet": of(m.r_ferromagnet.si(), AREA, Some(a.device.injector)),
        "interface_spin_resistance": of(m.r_interface.si(), AREA, contact),
        "interface_asymmetry": of(m.asymmetry.si(), "1", contact),
        "interface_resistance_area": of(m.resistance_area.si(), AREA, contact),
        "interface_resistance_area_as_measured": n(m.measured.si(), AREA),
        "channel_thickness_over_spin_diffusion_length": m.reduced_length.map(|t| n(t, "1")),
        "dwell_time_over_spin_lifetime": m.dwell.map(|t| n(t, "1")),
    })
}

fn turns(m: Magnetization) -> &'static str {
    match m {
        Magnetization::Fixed => "fixed",
        Magnetization::FixedOpposite => "fixed antiparallel",
        Magnetization::Free => "free",
    }
}

fn stack(a: &Assessment) -> Vec<Value> {
    let layer = |at: Position, l: &Layer, end: bool| {
        let from = under(a, at);
        let n = |v: f64, unit: &'static str| number(v, unit, &from, false);
        json!({
            "element": "layer",
            "name": a.device.name(at).map(|x| x.label.clone()),
            "path": path_of(a, at),
            "semi_infinite_end": end,
            "resistivity": n(l.resistivity.si(), "Ω m"),
            "spin_diffusion_length": n(l.length.si(), "m"),
            "thickness": l.thickness.si().is_finite().then(|| n(l.thickness.si(), "m")),
            "bulk_asymmetry": a.device.is_ferromagnet(at).then(|| n(l.asymmetry.si(), "1")),
            "spin_resistance": n(l.spin_resistance().si(), AREA),
            "magnetization": a.device.is_ferromagnet(at).then(|| turns(l.magnetization)),
        })
    };
    let closed = |end: &EndPlan| {
        json!({ "element": "end", "kind": match end {
            EndPlan::SemiInfinite(_) => "semi-infinite",
            EndPlan::SpinSink => "spin sink",
            EndPlan::Reflecting => "reflecting",
            EndPlan::FedInPlane => "fed in plane",
        } })
    };
    let mut all = Vec::new();
    all.push(match &a.blueprint.left {
        End::SemiInfinite(l) => layer(Position::LeftEnd, l, true),
        _ => closed(&a.device.left),
    });
    for (i, element) in a.blueprint.elements.iter().enumerate() {
        let at = Position::Element(i);
        all.push(match element {
            Element::Layer(l) => layer(at, l, false),
            Element::Interface(x) => {
                let from = under(a, at);
                let n = |v: f64, unit: &'static str| number(v, unit, &from, false);
                json!({
                "element": "interface",
                "name": a.device.name(at).map(|x| x.label.clone()),
                "path": path_of(a, at),
                "interface_spin_resistance": n(x.spin_resistance.si(), AREA),
                "resistance_area": n(x.spin_resistance.resistance_area(x.asymmetry).si(), AREA),
                "interface_asymmetry": n(x.asymmetry.si(), "1"),
                "spin_memory_loss": n(x.memory_loss.si(), "1"),
                "magnetization": turns(x.magnetization),
                })
            }
        });
    }
    all.push(match &a.blueprint.right {
        End::SemiInfinite(l) => layer(Position::RightEnd, l, true),
        _ => closed(&a.device.right),
    });
    all
}

fn faces(a: &Assessment, from: &[String], strained: bool) -> Value {
    let n = |v: f64, unit: &'static str| number(v, unit, from, strained);
    let list = |faces: &[Face]| -> Vec<Value> {
        faces
            .iter()
            .map(|f| {
                let u = f.accumulation_per_current_density.si();
                let [up, down] = channel_potentials(f);
                json!({
                    "polarization": n(f.polarization.si(), "1"),
                    "spin_accumulation_per_current_density": n(u, AREA),
                    "potential_up_per_current_density": n(up.si(), AREA),
                    "potential_down_per_current_density": n(down.si(), AREA),
                })
            })
            .collect()
    };
    let mut out = Map::new();
    out.insert("parallel".to_owned(), Value::Array(list(&a.faces[0])));
    if a.device.has_two_states {
        out.insert("antiparallel".to_owned(), Value::Array(list(&a.faces[1])));
    }
    Value::Object(out)
}

fn spread(s: &Spread, unit: &'static str) -> Value {
    let n = |x: f64| number(x, unit, &[], false);
    match s {
        Spread::Exact => json!({ "kind": "exact" }),
        Spread::Normal { sd } => json!({ "kind": "normal", "standard_deviation": n(*sd) }),
        Spread::Asymmetric { minus, plus } => {
            json!({ "kind": "asymmetric", "minus": n(*minus), "plus": n(*plus) })
        }
        Spread::LogNormal { factor } => {
            json!({ "kind": "log-normal", "factor": number(*factor, "1", &[], false) })
        }
        Spread::Uniform { low, high } => {
            json!({ "kind": "uniform", "low": n(*low), "high": n(*high) })
        }
        Spread::Bound { side } => json!({ "kind": "bound", "value_is": match side {
            Side::Above => "above",
            Side::Below => "below",
        } }),
        Spread::Unknown => json!({ "kind": "unknown" }),
    }
}

fn inputs(a: &Assessment) -> Vec<Value> {
    let table = a
        .device
        .table
        .inputs()
        .iter()
        .enumerate()
        .map(|(i, input)| (Some(i), input));
    let likely = a.device.likely.iter().map(|l| (None, &l.input));
    table
        .chain(likely)
        .map(|(i, input)| {
            let origin = match &input.provenance.origin {
                Origin::Design { note, overrides, place } => json!({
                    "kind": "design", "file": place.source.name, "line": place.line(),
                    "overrides_library": overrides, "note": note,
                }),
                Origin::Record { id, source, obtained, among, decided } => json!({
                    "kind": "record", "id": id, "reference": source, "obtained": obtained,
                    "chosen_by": super::wording::decided(*decided, *among),
                }),
            };
            let ids = input.provenance.records();
            json!({
                "name": input.name,
                "quantity": input.kind.name,
                "value": number(input.reading.si, si_unit(input.kind.scale), &ids, false),
                "spread": spread(&input.reading.spread, si_unit(input.kind.scale)),
                "as_written": input.reading.text,
                "share": a.shares.iter().find(|s| i.is_some_and(|i| s.columns.contains(&i))).map(|s| number(s.share, "1", &[], false)),
                "origin": origin,
                "for_the_window_only": i.is_none(),
                "marks": input.provenance.marks.iter().map(|m| mark(m).replace('\u{a0}', " ")).collect::<Vec<_>>(),
            })
        })
        .collect()
}

fn honesty(a: &Assessment) -> Value {
    let h = &a.honesty;
    json!({
        "inputs": h.inputs,
        "stated_in_design": h.stated,
        "recalled": h.recalled,
        "assumed": h.assumed,
        "without_spread": h.not_spread,
        "carry_most": h.carriers.iter().map(|s| json!({
            "names": s.columns.iter().map(|c| a.device.table.inputs()[*c].name.as_str()).collect::<Vec<_>>(),
            "share": number(s.share, "1", &[], false),
        })).collect::<Vec<_>>(),
        "share_of_recalled_and_assumed": number(h.doubtful_share, "1", &[], false),
        "text": summary::honesty(a).replace('\u{a0}', " "),
    })
}

/// The document of a varied answer.
#[must_use]
pub fn varied(v: &Varied) -> Value {
    let unit = si_unit(v.variation.kind.scale);
    let units = super::varied::columns(v);
    let mut from: Vec<String> = v
        .device
        .table
        .inputs()
        .iter()
        .flat_map(|i| i.provenance.records())
        .collect();
    from.sort();
    from.dedup();
    let rows: Vec<Value> = v
        .rows
        .iter()
        .zip(&v.variation.points)
        .map(|(row, text)| {
            let mut out = Map::new();
            out.insert("as_written".to_owned(), json!(text));
            out.insert(
                "value".to_owned(),
                json!(number(row.value, unit, &[], false)),
            );
            for c in &units {
                out.insert(
                    c.name.to_owned(),
                    json!(number(row.outcome[c.index], si_unit(c.scale), &from, false)),
                );
            }
            if !v.goals.is_empty() {
                out.insert("goals_met".to_owned(), json!(row.goals_met));
            }
            Value::Object(out)
        })
        .collect();
    json!({ "format": VARIED_FORMAT, "field": v.variation.path, "rows": rows })
}
