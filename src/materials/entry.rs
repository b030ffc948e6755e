//! The kinds of record of a file: each `[[value]]`, `[[pair]]`, `[[contact]]`, `[[calibration]]`, `[[law]]` and
//! `[[note]]` read and checked at its place.

use crate::documents::fault::{Fault, Wrong, nearest};
use crate::documents::reader::{Faults, Reader};
use crate::documents::tree::Value;
use crate::quantities::kind::{self, Kind};
use crate::quantities::spread::Spread;
use crate::quantities::text::Reading;
use crate::quantities::unit::{Context, parse_unit};

use super::property::{PROPERTIES, Property, property_named};
use super::record::{
    CalibrationRecord, Common, Conditions, ContactKind, ContactRecord, FieldPlaces, LawRecord,
    NoteRecord, Obtained, PairRecord, SpreadFrom, Status, TemperatureFrom, ValueRecord,
};

/// Whose records are read.
pub(super) struct Owner {
    pub from_user: bool,
}

/// Whether a text is a finite number, perhaps followed by a unit.
fn is_coefficient(text: &str) -> bool {
    let text = text.trim().replace('\u{2212}', "-");
    let (number, unit) = text.split_once(' ').unwrap_or((&text, ""));
    number.parse::<f64>().is_ok_and(f64::is_finite)
        && (unit.is_empty() || parse_unit(unit, &Context::default()).is_ok())
}

const TEMPERATURE_WORDS: &[(&str, TemperatureFrom)] = &[
    ("stated", TemperatureFrom::Stated),
    ("recalled", TemperatureFrom::Recalled),
    ("assumed", TemperatureFrom::Assumed),
];
const STATUS_WORDS: &[(&str, Status)] = &[
    ("preferred", Status::Preferred),
    ("alternative", Status::Alternative),
    ("superseded", Status::Superseded),
];
const SPREAD_WORDS: &[(&str, SpreadFrom)] = &[
    ("published", SpreadFrom::Published),
    ("estimated", SpreadFrom::Estimated),
    ("recalled", SpreadFrom::Recalled),
    ("not stated", SpreadFrom::NotStated),
];
const FORM_WORDS: &[(&str, &str)] = &[
    ("bulk", "bulk"),
    ("film", "film"),
    ("wire", "wire"),
    ("nanowire", "nanowire"),
];
const TYPE_WORDS: &[(&str, &str)] = &[("n", "n"), ("p", "p")];
const NOTE_WORDS: &[(&str, &str)] = &[
    ("hazard", "hazard"),
    ("incompatibility", "incompatibility"),
    ("growth", "growth"),
];

pub(super) fn conflict(r: &Reader<'_>, key: &str, reason: &str, help: &str) {
    r.fault(
        key,
        Wrong::Conflict {
            reason: reason.to_owned(),
            help: Some(help.to_owned()),
        },
    );
}

impl Owner {
    fn common(&self, r: &Reader<'_>, temperature_needed: bool) -> Option<Common> {
        let id = r.required_text(
            "id",
            "a unique name of the record, for example `id = \"cobalt.pair.1\"`",
        );
        let temperature = r.quantity("temperature", &kind::TEMPERATURE, &Context::default());
        if temperature_needed && !r.has("temperature") {
            r.missing(
                "temperature",
                "this property depends on temperature: `temperature = \"300 K\"`",
            );
        }
        let temperature_from = r
            .word(
                "temperature_is",
                "way a temperature is known",
                TEMPERATURE_WORDS,
            )
            .map_or(TemperatureFrom::Stated, |w| w.value);
        let technique = r.text("technique").map(|t| t.value);
        let source = r.text("source");
        let locus = r.text("locus").map(|t| t.value);
        let obtained = if r.has("obtained") {
            r.word("obtained", "way of obtaining", Obtained::WORDS)
                .map(|w| w.value)
        } else {
            r.node("obtained");
            r.missing("obtained", "how the number was obtained: read, recalled, derived, estimated, common practice or measured here");
            None
        };
        let parents = r.texts("parents");
        let rule = r.text("rule").map(|t| t.value);
        let status = r
            .word("status", "status", STATUS_WORDS)
            .map_or(Status::Alternative, |w| w.value);
        let why = r.text("why").map(|t| t.value);
        let disagrees_with = r.texts("disagrees_with");
        let links = parents
            .iter()
            .chain(&disagrees_with)
            .map(|t| (t.value.clone(), t.place.clone()))
            .collect();
        let note = r.text("note").map(|t| t.value);
        let spread_from = r
            .word("uncertainty", "origin of a spread", SPREAD_WORDS)
            .map_or(SpreadFrom::Published, |w| w.value);
        let conditions = self.conditions(r);
        if status != Status::Alternative && why.is_none() {
            r.missing("why", "a preferred or superseded record says why");
        }
        match obtained {
            Some(Obtained::Read) if locus.is_none() => {
                r.missing(
                    "locus",
                    "a number that was read says where: table, figure, page or \"abstract\"",
                );
            }
            Some(Obtained::Derived) if parents.is_empty() || rule.is_none() => {
                conflict(
                    r,
                    "obtained",
                    "a derived number names its parents and the rule",
                    "add `parents = [\"…\"]` and `rule = \"…\"`",
                );
            }
            _ => {}
        }
        if matches!(obtained, Some(Obtained::Read | Obtained::Recalled)) && source.is_none() {
            r.missing("source", "the key of a reference in references.bib");
        }
        let id = id?;
        let fields = FieldPlaces {
            id: Some(id.place),
            source: source.as_ref().map(|t| t.place.clone()),
            obtained: r.node("obtained").map(|n| n.place.clone()),
            links,
        };
        Some(Common {
            id: id.value,
            temperature: temperature.map(|t| t.value.si),
            temperature_from,
            technique,
            source: source.map(|t| t.value),
            locus,
            obtained: obtained?,
            parents: parents.into_iter().map(|t| t.value).collect(),
            rule,
            status,
            why,
            disagrees_with: disagrees_with.into_iter().map(|t| t.value).collect(),
            note,
            spread_from,
            conditions,
            from_user: self.from_user,
            place: r.place().clone(),
            fields,
        })
    }

    fn conditions(&self, r: &Reader<'_>) -> Conditions {
        let Some(c) = r.table("conditions") else {
            return Conditions::default();
        };
        let mut others = Vec::new();
        let form = c
            .word("form", "form", FORM_WORDS)
            .map(|w| w.value.to_owned());
        let carrier_type = c
            .word("type", "carrier type", TYPE_WORDS)
            .map(|w| w.value.to_owned());
        let dopant = c.text("dopant").map(|t| t.value);
        let doping = c
            .quantity("doping", &kind::DOPING, &Context::default())
            .map(|p| p.value);
        for key in ["growth", "orientation", "thickness", "bias", "anneal"] {
            if let Some(t) = c.text(key) {
                others.push((key.to_owned(), t.value));
            }
        }
        c.finish();
        Conditions {
            form,
            carrier_type,
            dopant,
            doping,
            others,
        }
    }

    /// A number of a record: a spread is required unless the record says that none is stated.
    fn number(&self, r: &Reader<'_>, key: &'static str, kind: &'static Kind) -> Option<Reading> {
        let reading = r.quantity(key, kind, &Context::default())?.value;
        let not_stated = r
            .node("uncertainty")
            .is_some_and(|n| matches!(&n.value, Value::Text(t) if t == "not stated"));
        match (&reading.spread, not_stated) {
            (Spread::Exact, true) => Some(Reading {
                spread: Spread::Unknown,
                ..reading
            }),
            (Spread::Exact, false) => {
                conflict(
                    r,
                    key,
                    "a number of the library needs its uncertainty",
                    "write it as \"3.6 ± 0.4 nm\", or add `uncertainty = \"not stated\"` if the source states none",
                );
                None
            }
            (_, true) => {
                conflict(
                    r,
                    key,
                    "the record says that no uncertainty is stated, yet this number has one",
                    "drop the spread or the line `uncertainty = \"not stated\"`",
                );
                None
            }
            _ => Some(reading),
        }
    }

    fn property(&self, r: &Reader<'_>) -> Option<&'static Property> {
        let name = r.required_text("property", "for example `property = \"resistivity\"`")?;
        let found = property_named(&name.value);
        if found.is_none() {
            r.fault(
                "property",
                Wrong::UnknownWord {
                    what: "property",
                    nearest: nearest(&name.value, PROPERTIES.iter().map(|p| p.name)),
                    found: name.value,
                    allowed: PROPERTIES.iter().map(|p| p.name.to_owned()).collect(),
                },
            );
        }
        found
    }

    pub(super) fn value(&self, r: &Reader<'_>) -> Option<ValueRecord> {
        let property = self.property(r);
        let common = self.common(r, property.is_some_and(|p| p.needs_temperature));
        let reading = if r.has("value") {
            property.and_then(|p| self.number(r, "value", p.kind))
        } else {
            r.missing("value", "the value with unit and uncertainty");
            None
        };
        r.node("value");
        r.finish();
        Some(ValueRecord {
            common: common?,
            property: property?,
            reading: reading?,
        })
    }

    fn required(&self, r: &Reader<'_>, key: &'static str, kind: &'static Kind) -> Option<Reading> {
        if r.has(key) {
            self.number(r, key, kind)
        } else {
            r.node(key);
            r.missing(key, "a pair holds resistivity, bulk_asymmetry and spin_diffusion_length of one technique");
            None
        }
    }

    pub(super) fn pair(&self, r: &Reader<'_>) -> Option<PairRecord> {
        let common = self.common(r, true);
        if !r.has("technique") {
            r.missing(
                "technique",
                "β and λ are used as a pair from one technique: say which",
            );
        }
        let resistivity = self.required(r, "resistivity", &kind::RESISTIVITY);
        let bulk_asymmetry = self.required(r, "bulk_asymmetry", &kind::BULK_ASYMMETRY);
        let spin_diffusion_length =
            self.required(r, "spin_diffusion_length", &kind::SPIN_DIFFUSION_LENGTH);
        let resistivity_assumed = r
            .word(
                "resistivity_is",
                "way a resistivity is known",
                &[("assumed", true), ("measured", false)],
            )
            .is_some_and(|w| w.value);
        r.finish();
        Some(PairRecord {
            common: common?,
            resistivity: resistivity?,
            bulk_asymmetry: bulk_asymmetry?,
            spin_diffusion_length: spin_diffusion_length?,
            resistivity_assumed,
        })
    }

    pub(super) fn contact(&self, r: &Reader<'_>) -> Option<ContactRecord> {
        let common = self.common(r, true);
        let kind = if r.has("kind") {
            r.word("kind", "kind of contact record", ContactKind::WORDS)
                .map(|w| w.value)
        } else {
            r.node("kind");
            r.missing("kind", "for example `kind = \"device fit\"`");
            None
        };
        let interface_asymmetry = self.number(r, "interface_asymmetry", &kind::INTERFACE_ASYMMETRY);
        let polarization = self.number(r, "polarization", &kind::SPIN_POLARIZATION);
        let interface_spin_resistance = self.number(
            r,
            "interface_spin_resistance",
            &kind::INTERFACE_SPIN_RESISTANCE,
        );
        let resistance_area = self.number(r, "resistance_area", &kind::RESISTANCE_AREA);
        let spin_memory_loss = self.number(r, "spin_memory_loss", &kind::SPIN_MEMORY_LOSS);
        if let Some(k) = kind {
            if r.has("interface_asymmetry") && !k.is_interface_asymmetry() {
                conflict(
                    r,
                    "interface_asymmetry",
                    "only a device fit or a multilayer fit gives an interface asymmetry",
                    "write it as `polarization`: it will be shown beside answers, not fed to the model",
                );
            }
            if r.has("polarization") && k.is_interface_asymmetry() {
                conflict(
                    r,
                    "polarization",
                    "a device fit or a multilayer fit gives an interface asymmetry, not another polarization",
                    "write it as `interface_asymmetry`",
                );
            }
        }
        let numbers = [
            "interface_asymmetry",
            "polarization",
            "interface_spin_resistance",
            "resistance_area",
            "spin_memory_loss",
        ];
        if !numbers.iter().any(|k| r.has(k)) {
            r.missing(
                "interface_asymmetry",
                "a contact record holds at least one number",
            );
        }
        r.finish();
        Some(ContactRecord {
            common: common?,
            kind: kind?,
            interface_asymmetry,
            polarization,
            interface_spin_resistance,
            resistance_area,
            spin_memory_loss,
        })
    }

    pub(super) fn calibration(&self, r: &Reader<'_>) -> Option<CalibrationRecord> {
        let common = self.common(r, true);
        let electrodes: Vec<String> = r.texts("electrodes").into_iter().map(|t| t.value).collect();
        if electrodes.len() != 2 {
            conflict(
                r,
                "electrodes",
                "a calibration is keyed by both electrodes",
                "write `electrodes = [\"…\", \"…\"]`",
            );
        }
        let resistance_area = self.number(r, "resistance_area", &kind::RESISTANCE_AREA);
        let thickness = self.number(r, "thickness", &kind::THICKNESS);
        let thickness_per_decade = self.number(r, "thickness_per_decade", &kind::DECADE_THICKNESS);
        if thickness_per_decade.is_none()
            && (resistance_area.is_none() || thickness.is_none())
            && !r.has("thickness_per_decade")
        {
            r.missing(
                "thickness_per_decade",
                "a calibration gives a slope, or a resistance_area at a thickness, or both",
            );
        }
        r.finish();
        Some(CalibrationRecord {
            common: common?,
            electrodes,
            resistance_area,
            thickness,
            thickness_per_decade,
        })
    }

    pub(super) fn law(&self, r: &Reader<'_>, faults: &Faults) -> Option<LawRecord> {
        let property = self.property(r);
        let common = self.common(r, false);
        let form = r.required_text("form", "the named form of the law");
        let formula = r.required_text("formula", "the formula, readable");
        let error = r.text("error").map(|t| t.value);
        let pairs = |key: &'static str| -> Vec<(String, String)> {
            let Some(table) = r.table(key) else {
                return Vec::new();
            };
            table
                .entries()
                .into_iter()
                .filter_map(|(k, _, node)| match &node.value {
                    Value::Text(t) => Some((k.to_owned(), t.clone())),
                    other => {
                        faults.push(Fault {
                            place: Some(node.place.clone()),
                            field: table.path_of(k),
                            wrong: Wrong::Type {
                                found: other.type_name(),
                                expected: "a text",
                            },
                        });
                        None
                    }
                })
                .collect()
        };
        let range = pairs("range");
        let coefficients = pairs("coefficients");
        for (k, text) in &coefficients {
            if !is_coefficient(text) {
                conflict(
                    r,
                    "coefficients",
                    &format!("`{k}` = \"{text}\" is not a number with or without unit"),
                    "write, for example, \"0.711\" or \"9.2e16 /cm³\"",
                );
            }
        }
        r.finish();
        Some(LawRecord {
            common: common?,
            property: property?,
            form: form?.value,
            formula: formula?.value,
            coefficients,
            range,
            error,
        })
    }

    pub(super) fn note(&self, r: &Reader<'_>) -> Option<NoteRecord> {
        let common = self.common(r, false);
        let kind = if r.has("kind") {
            r.word("kind", "kind of note", NOTE_WORDS).map(|w| w.value)
        } else {
            r.node("kind");
            r.missing("kind", "hazard, incompatibility or growth");
            None
        };
        let text = r.required_text("text", "the remark");
        r.finish();
        Some(NoteRecord {
            common: common?,
            kind: kind?,
            text: text?.value,
        })
    }
}
