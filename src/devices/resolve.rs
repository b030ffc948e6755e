//! From a design to a device: which records feed it and how its plan is laid out.

use std::rc::Rc;

use crate::designs::design::{Design, Part};
use crate::designs::layers::{
    ContactSpec, EndWord, LayerSpec, MagnetizationWord, Side, known_material,
};
use crate::documents::fault::{Fault, Place, Wrong};
use crate::documents::reader::{Faults, Placed};
use crate::materials::choose::{
    self, Chosen, ContactNumber, ContactValue, Mark, NotChosen, Wanted, with_prior,
};
use crate::materials::library::Library;
use crate::materials::record::{Class, Common, Material, PairRecord};
use crate::models::ladder::Magnetization;
use crate::quantities::dimensions::{Measured, ResistanceTimesArea};
use crate::quantities::kind::{self, Kind, Scale};
use crate::quantities::print::with_digits;
use crate::quantities::spread::Spread;
use crate::quantities::text::Reading;

use super::inputs::{Input, InputTable, Slot};
use super::provenance::{Origin, Provenance};
use super::vertical::{
    ElementPlan, EndPlan, InterfacePlan, InterfaceResistancePlan, LayerPlan, LengthPlan,
    LikelyContact, Named, Position, ResistivityPlan, Vertical,
};

/// Least relative spread of a product ρλ joined with a β of another technique: lengths measured in stacks and
/// in lateral valves differ by about as much.
const LEAST_PRODUCT_SPREAD: f64 = 0.3;

/// Builds the device of a design. Faults are collected; `None` where it could not be built.
pub fn resolve(design: &Design, library: &Library, faults: &Faults) -> Option<Vertical> {
    let before = faults.count();
    let mut work = Work {
        design,
        library,
        faults,
        table: InputTable::default(),
        temperature: design.temperature.value.si,
    };
    let device = work.build();
    if faults.count() > before { None } else { device }
}

struct Work<'a> {
    design: &'a Design,
    library: &'a Library,
    faults: &'a Faults,
    table: InputTable,
    temperature: f64,
}

fn origin_of(common: &Common, decided: choose::Decided, among: usize) -> Origin {
    Origin::Record {
        id: common.id.clone(),
        source: common.source.clone(),
        obtained: common.obtained.word(),
        decided,
        among,
    }
}

/// `p-type silicon`, `silicon`.
fn typed_name(material: &Material, spec: &LayerSpec) -> String {
    match &spec.carrier_type {
        Some(t) => format!("{t}-type {}", material.id),
        None => material.id.clone(),
    }
}

/// Carrier types that the library has a property for, to be told when it has none for the one asked.
fn existing_types(material: &Material, key: &str) -> Vec<String> {
    let mut all: Vec<String> = material
        .values
        .iter()
        .filter(|v| v.property.name == key)
        .filter_map(|v| v.common.conditions.carrier_type.as_ref())
        .map(|t| format!("{t}-type {}", material.id))
        .collect();
    all.sort();
    all.dedup();
    all
}

fn layer_spec(part: &Part) -> Option<&LayerSpec> {
    match part {
        Part::Ferromagnet(l) | Part::Normal(l) => Some(l),
        Part::Contact(_) => None,
    }
}

fn magnetization(word: Option<MagnetizationWord>) -> Magnetization {
    match word {
        None | Some(MagnetizationWord::Fixed) => Magnetization::Fixed,
        Some(MagnetizationWord::FixedAntiparallel) => Magnetization::FixedOpposite,
        Some(MagnetizationWord::Free) => Magnetization::Free,
    }
}

impl Work<'_> {
    fn add<Q: Measured>(
        &mut self,
        name: String,
        kind: &'static Kind,
        reading: Reading,
        provenance: Provenance,
    ) -> Slot<Q> {
        self.table.add(Input { name, kind, reading, provenance })
    }

    fn given<Q: Measured>(
        &mut self,
        name: String,
        kind: &'static Kind,
        value: &Placed<Reading>,
        note: Option<&String>,
        overrides: bool,
    ) -> Slot<Q> {
        let origin =
            Origin::Design { place: value.place.clone(), note: note.cloned(), overrides };
        self.add(name, kind, value.value.clone(), Provenance { origin, marks: Vec::new() })
    }

    fn wanted(&self, layer: Option<&LayerSpec>) -> Wanted {
        Wanted {
            temperature: self.temperature,
            doping: layer.and_then(|l| l.doping.as_ref()).map(|d| d.value.si),
            carrier_type: layer.and_then(|l| l.carrier_type.clone()),
            dopant: layer.and_then(|l| l.dopant.clone()),
        }
    }

    fn fault(&self, place: &Place, field: String, wrong: Wrong) {
        self.faults.push(Fault { place: Some(place.clone()), field, wrong });
    }

    /// The library material a spec names, of one of the classes allowed.
    fn material(
        &self,
        name: &Placed<String>,
        path: &str,
        allowed: &[Class],
    ) -> Option<Rc<Material>> {
        let id = known_material(self.library, name, path, allowed, self.faults)?;
        self.library.material(&id, self.faults)
    }

    fn not_in_library(&self, spec_place: &Place, path: &str, key: &str, what: String, exists: Vec<String>, example: &str) {
        self.fault(
            spec_place,
            format!("{path}.{key}"),
            Wrong::NotInLibrary { what, exists, help: format!("state it: `{key} = \"{example}\"`") },
        );
    }

    /// A value of a normal material by property.
    fn value_of<Q: Measured>(
        &mut self,
        material: &Material,
        spec: &LayerSpec,
        key: &'static str,
        kind: &'static Kind,
        example: &str,
    ) -> Option<Slot<Q>> {
        let wanted = self.wanted(Some(spec));
        match choose::value(material, key, &wanted) {
            Ok(chosen) if choose::too_far_in_doping(&chosen.marks) => {
                let near = chosen.record.common.conditions.doping.as_ref().map_or(0.0, |d| d.si);
                self.not_in_library(
                    &spec.place,
                    &spec.path,
                    key,
                    format!(
                        "{} of {} within a factor {:.0} of this doping (the nearest record is for {})",
                        kind.name,
                        typed_name(material, spec),
                        choose::DOPING_LIMIT,
                        with_digits(near, Scale::Density, 2)
                    ),
                    Vec::new(),
                    example,
                );
                None
            }
            Ok(chosen) => {
                let Chosen { record, decided, among, mut marks } = chosen;
                let (reading, mark) = with_prior(self.library, key, kind, &record.reading);
                marks.extend(mark);
                let provenance =
                    Provenance { origin: origin_of(&record.common, decided, among), marks };
                Some(self.add(format!("{}.{key}", spec.path), kind, reading, provenance))
            }
            Err(NotChosen::WhichDoping(_)) if self.faults.told(&format!("{}.doping", spec.path)) => None,
            Err(NotChosen::WhichDoping(dopings)) => {
                let list: Vec<String> =
                    dopings.iter().map(|d| with_digits(*d, Scale::Density, 2)).collect();
                self.fault(
                    &spec.place,
                    format!("{}.doping", spec.path),
                    Wrong::Missing {
                        key: "doping".to_owned(),
                        help: format!(
                            "{} has {} for several dopings ({}): say which, for example `doping = \"5e19 /cm³\"`",
                            material.id,
                            kind.name,
                            list.join(", ")
                        ),
                    },
                );
                None
            }
            Err(NotChosen::None) => {
                self.not_in_library(
                    &spec.place,
                    &spec.path,
                    key,
                    format!("{} of {}", kind.name, typed_name(material, spec)),
                    existing_types(material, key),
                    example,
                );
                None
            }
        }
    }

    fn explicit_missing(&self, spec: &LayerSpec, key: &'static str, example: &str) {
        self.fault(
            &spec.place,
            format!("{}.{key}", spec.path),
            Wrong::Missing {
                key: key.to_owned(),
                help: format!("name a library `material`, or state `{key} = \"{example}\"`"),
            },
        );
    }

    fn given_resistivity(&mut self, spec: &LayerSpec) -> Option<ResistivityPlan> {
        let overrides = spec.material.is_some();
        if let Some(rho) = &spec.resistivity {
            let name = format!("{}.resistivity", spec.path);
            return Some(ResistivityPlan::Direct(self.given(
                name,
                &kind::RESISTIVITY,
                rho,
                spec.note.as_ref(),
                overrides,
            )));
        }
        let sigma = spec.conductivity.as_ref()?;
        let name = format!("{}.conductivity", spec.path);
        Some(ResistivityPlan::FromConductivity(self.given(
            name,
            &kind::CONDUCTIVITY,
            sigma,
            spec.note.as_ref(),
            overrides,
        )))
    }

    fn given_length(&mut self, spec: &LayerSpec) -> Option<LengthPlan> {
        let length = spec.spin_diffusion_length.as_ref()?;
        let name = format!("{}.spin_diffusion_length", spec.path);
        Some(LengthPlan::Direct(self.given(
            name,
            &kind::SPIN_DIFFUSION_LENGTH,
            length,
            spec.note.as_ref(),
            spec.material.is_some(),
        )))
    }

    fn thickness(&mut self, spec: &LayerSpec) -> Option<Slot<crate::quantities::meanings::Thickness>> {
        let t = spec.thickness.as_ref()?;
        let name = format!("{}.thickness", spec.path);
        Some(self.given(name, &kind::THICKNESS, t, None, false))
    }

    fn normal(&mut self, spec: &LayerSpec) -> Option<(LayerPlan, Named)> {
        let material = match &spec.material {
            Some(name) => Some(self.material(name, &spec.path, &[Class::Semiconductor, Class::Metal])?),
            None => None,
        };
        if let Some(m) = &material
            && m.class == Class::Metal
            && (spec.doping.is_some() || spec.dopant.is_some() || spec.carrier_type.is_some())
        {
            self.fault(
                spec.doping.as_ref().map_or(&spec.place, |d| &d.place),
                format!("{}.doping", spec.path),
                Wrong::Conflict {
                    reason: format!("{} is a metal: it takes no doping, dopant or type", m.id),
                    help: Some("drop these keys".to_owned()),
                },
            );
        }
        let resistivity = match (self.given_resistivity(spec), &material) {
            (Some(plan), _) => Some(plan),
            (None, Some(m)) => self
                .value_of(m, spec, "resistivity", &kind::RESISTIVITY, "2.1 mΩ cm")
                .map(ResistivityPlan::Direct),
            (None, None) => {
                self.explicit_missing(spec, "resistivity", "2.1 mΩ cm");
                None
            }
        };
        let length = match (self.given_length(spec), &material) {
            (Some(plan), _) => Some(plan),
            (None, Some(m)) => self
                .value_of(m, spec, "spin_diffusion_length", &kind::SPIN_DIFFUSION_LENGTH, "0.5 µm")
                .map(LengthPlan::Direct),
            (None, None) => {
                self.explicit_missing(spec, "spin_diffusion_length", "0.5 µm");
                None
            }
        };
        let thickness = self.thickness(spec);
        let named = Named {
            path: spec.path.clone(),
            label: material.as_ref().map_or_else(|| label_of(&spec.path), |m| m.id.clone()),
            material: material.as_ref().map(|m| m.id.clone()),
            semiconductor: material.as_ref().is_some_and(|m| m.class == Class::Semiconductor),
        };
        let plan = LayerPlan {
            resistivity: resistivity?,
            asymmetry: None,
            length: length?,
            thickness,
            magnetization: Magnetization::Fixed,
        };
        Some((plan, named))
    }

    fn ferromagnet(&mut self, spec: &LayerSpec) -> Option<(LayerPlan, Named)> {
        let material = match &spec.material {
            Some(name) => Some(self.material(name, &spec.path, &[Class::Ferromagnet])?),
            None => None,
        };
        let given_rho = self.given_resistivity(spec);
        let given_length = self.given_length(spec);
        let given_beta = spec.bulk_asymmetry.as_ref().map(|b| {
            self.given(
                format!("{}.bulk_asymmetry", spec.path),
                &kind::BULK_ASYMMETRY,
                b,
                spec.note.as_ref(),
                spec.material.is_some(),
            )
        });
        let named = Named {
            path: spec.path.clone(),
            label: material.as_ref().map_or_else(|| label_of(&spec.path), |m| m.id.clone()),
            material: material.as_ref().map(|m| m.id.clone()),
            semiconductor: false,
        };
        let (resistivity, asymmetry, length) = match (&material, given_rho, given_beta, given_length) {
            (_, Some(rho), Some(beta), Some(length)) => (rho, beta, length),
            (Some(m), rho, beta, length) => self.pair_of(m, spec, rho, beta, length)?,
            (None, rho, beta, length) => {
                if rho.is_none() {
                    self.explicit_missing(spec, "resistivity", "60 nΩ m");
                }
                if beta.is_none() {
                    self.explicit_missing(spec, "bulk_asymmetry", "0.4 ± 0.1");
                }
                if length.is_none() {
                    self.explicit_missing(spec, "spin_diffusion_length", "8 nm");
                }
                return None;
            }
        };
        let thickness = self.thickness(spec);
        let plan = LayerPlan {
            resistivity,
            asymmetry: Some(asymmetry),
            length,
            thickness,
            magnetization: magnetization(spec.magnetization),
        };
        Some((plan, named))
    }

    #[allow(clippy::type_complexity)]
    fn pair_of(
        &mut self,
        material: &Material,
        spec: &LayerSpec,
        rho: Option<ResistivityPlan>,
        beta: Option<Slot<crate::quantities::meanings::BulkAsymmetry>>,
        length: Option<LengthPlan>,
    ) -> Option<(ResistivityPlan, Slot<crate::quantities::meanings::BulkAsymmetry>, LengthPlan)> {
        let wanted = self.wanted(None);
        let Some(chosen) = choose::pair(material, &wanted) else {
            self.not_in_library(
                &spec.place,
                &spec.path,
                "bulk_asymmetry",
                format!("pair of β and λ of {}", material.id),
                Vec::new(),
                "0.4 ± 0.1",
            );
            return None;
        };
        let Chosen { record, decided, among, marks } = chosen;
        let path = &spec.path;
        let origin = origin_of(&record.common, decided, among);
        let column = |this: &mut Self, key: &str, kind: &'static Kind, reading: &Reading, skip: Option<&Mark>| {
            let (reading, mark) = with_prior(this.library, key, kind, reading);
            let mut marks: Vec<Mark> =
                marks.iter().filter(|m| skip.is_none_or(|s| *m != s)).cloned().collect();
            marks.extend(mark);
            let provenance = Provenance { origin: origin.clone(), marks };
            (format!("{path}.{key}"), reading, provenance)
        };
        let overridden = rho.is_some();
        let rho = match rho {
            Some(plan) => plan,
            None => {
                let (name, reading, provenance) =
                    column(self, "resistivity", &kind::RESISTIVITY, &record.resistivity, None);
                ResistivityPlan::Direct(self.add(name, &kind::RESISTIVITY, reading, provenance))
            }
        };
        let assumed = Mark::ResistivityAssumed;
        let beta = match beta {
            Some(slot) => slot,
            None => {
                let (name, reading, provenance) = column(
                    self,
                    "bulk_asymmetry",
                    &kind::BULK_ASYMMETRY,
                    &record.bulk_asymmetry,
                    Some(&assumed),
                );
                self.add(name, &kind::BULK_ASYMMETRY, reading, provenance)
            }
        };
        if let Some(length) = length {
            return Some((rho, beta, length));
        }
        if overridden && let Some(slot) = self.product(material, &record, path, &origin, &marks, &wanted) {
            return Some((rho, beta, LengthPlan::FromProduct(slot)));
        }
        let (name, reading, mut provenance) = column(
            self,
            "spin_diffusion_length",
            &kind::SPIN_DIFFUSION_LENGTH,
            &record.spin_diffusion_length,
            Some(&assumed),
        );
        if overridden {
            provenance.marks.push(Mark::LengthNotScaled);
        }
        let slot = self.add(name, &kind::SPIN_DIFFUSION_LENGTH, reading, provenance);
        Some((rho, beta, LengthPlan::Direct(slot)))
    }

    /// The product ρλ that gives λ for the user's own resistivity: the pair's own where both come from one
    /// paper, else the material's product record, marked as of another technique and with at least
    /// [`LEAST_PRODUCT_SPREAD`]; none where neither is known.
    fn product(
        &mut self,
        material: &Material,
        record: &PairRecord,
        path: &str,
        origin: &Origin,
        marks: &[Mark],
        wanted: &Wanted,
    ) -> Option<Slot<ResistanceTimesArea>> {
        let key = "resistivity_length_product";
        let name = format!("{path}.{key}");
        if !record.resistivity_assumed {
            let (rho, lambda) = (&record.resistivity, &record.spin_diffusion_length);
            let product = rho.si * lambda.si;
            let relative = |r: &Reading| r.spread.standard_deviation(r.si).map(|sd| sd / r.si);
            let spread = match (relative(rho), relative(lambda)) {
                (Some(a), Some(b)) => Spread::Normal { sd: product * a.hypot(b) },
                _ => Spread::Unknown,
            };
            let reading = Reading {
                si: product,
                spread,
                unit_text: String::new(),
                text: with_digits(product, Scale::ResistanceArea, 3),
            };
            let marks = marks.iter().cloned().chain([Mark::LengthScaled]).collect();
            let provenance = Provenance { origin: origin.clone(), marks };
            return Some(self.add(name, &kind::RHO_LAMBDA, reading, provenance));
        }
        let chosen = choose::value(material, key, wanted).ok()?;
        let (mut reading, mark) =
            with_prior(self.library, key, &kind::RHO_LAMBDA, &chosen.record.reading);
        let least = LEAST_PRODUCT_SPREAD * reading.si;
        if reading.spread.standard_deviation(reading.si).is_none_or(|sd| sd < least) {
            reading.spread = Spread::Normal { sd: least };
        }
        let mut marks = chosen.marks;
        marks.extend(mark);
        marks.push(Mark::MixedTechniques);
        let provenance = Provenance {
            origin: origin_of(&chosen.record.common, chosen.decided, chosen.among),
            marks,
        };
        Some(self.add(name, &kind::RHO_LAMBDA, reading, provenance))
    }

    fn contact_value<Q: Measured>(
        &mut self,
        path: &str,
        number: ContactNumber,
        value: ContactValue,
    ) -> Slot<Q> {
        let ContactValue { reading, chosen, .. } = value;
        let provenance = Provenance {
            origin: origin_of(&chosen.record.common, chosen.decided, chosen.among),
            marks: chosen.marks,
        };
        self.add(format!("{path}.{}", number.property()), number.kind(), reading, provenance)
    }

    /// The interface between two neighbours. `spec` is none where the design states none.
    fn interface(
        &mut self,
        spec: Option<&ContactSpec>,
        path: &str,
        place: &Place,
        neighbours: (&Part, &Named, &Part, &Named),
    ) -> Option<InterfacePlan> {
        let (left, left_name, right, right_name) = neighbours;
        let is_f = |p: &Part| matches!(p, Part::Ferromagnet(_));
        let ferromagnet = match (is_f(left), is_f(right), spec.and_then(|s| s.flips_with)) {
            (true, false, _) | (true, true, Some(Side::Left)) => Some((left, left_name, right_name)),
            (false, true, _) | (true, true, Some(Side::Right)) => Some((right, right_name, left_name)),
            _ => None,
        };
        let magnetization = ferromagnet
            .and_then(|(p, _, _)| layer_spec(p))
            .map_or(Magnetization::Fixed, |l| magnetization(l.magnetization));
        let both = ferromagnet
            .and_then(|(_, f, n)| Some((f.material.clone()?, n.material.clone()?, n.semiconductor)));
        // A contact record belongs to a channel of a type and doping: those of the normal neighbour.
        let normal = [left, right].into_iter().find(|p| matches!(p, Part::Normal(_)));
        let wanted = self.wanted(normal.and_then(layer_spec));
        let mut plan = InterfacePlan {
            resistance: InterfaceResistancePlan::Zero,
            asymmetry: None,
            memory_loss: None,
            magnetization,
        };
        let Some(spec) = spec else {
            // Nothing stated. Between metals the library may know the interface; on a semiconductor a bare
            // contact has no resistance of its own in this model, which a finding says.
            if let Some((f, n, false)) = &both {
                self.known_direct(path, f, n, &wanted, &mut plan, (true, true));
            }
            return Some(plan);
        };
        if let Some(name) = &spec.material {
            self.material(name, path, &[Class::Barrier])?;
        }
        let note = spec.note.as_ref();
        if let Some(ra) = &spec.resistance_area {
            let name = format!("{path}.resistance_area");
            plan.resistance = InterfaceResistancePlan::ResistanceArea(self.given(
                name,
                &kind::RESISTANCE_AREA,
                ra,
                note,
                false,
            ));
        } else if let Some(ar) = &spec.interface_spin_resistance {
            let name = format!("{path}.interface_spin_resistance");
            plan.resistance = InterfaceResistancePlan::SpinResistance(self.given(
                name,
                &kind::INTERFACE_SPIN_RESISTANCE,
                ar,
                note,
                false,
            ));
        } else if let Some((f, n, _)) = &both {
            let missing = (spec.interface_asymmetry.is_none(), spec.spin_memory_loss.is_none());
            self.known_direct(path, f, n, &wanted, &mut plan, missing);
        }
        if matches!(plan.resistance, InterfaceResistancePlan::Zero) {
            self.not_in_library(
                place,
                path,
                "interface_spin_resistance",
                "resistance of this interface".to_owned(),
                Vec::new(),
                "0.5 fΩ m²",
            );
            return None;
        }
        if let Some(gamma) = &spec.interface_asymmetry {
            let name = format!("{path}.interface_asymmetry");
            plan.asymmetry =
                Some(self.given(name, &kind::INTERFACE_ASYMMETRY, gamma, note, false));
        } else if plan.asymmetry.is_none() && ferromagnet.is_some() {
            plan.asymmetry = Some(self.asymmetry_of(spec, path, ferromagnet.map(|(_, f, n)| (f, n)), &wanted)?);
        }
        if let Some(delta) = &spec.spin_memory_loss {
            let name = format!("{path}.spin_memory_loss");
            plan.memory_loss = Some(self.given(name, &kind::SPIN_MEMORY_LOSS, delta, note, false));
        }
        Some(plan)
    }

    /// AR* of a direct contact between library metals, and γ and δ where asked for, as far as records exist.
    fn known_direct(
        &mut self,
        path: &str,
        f: &str,
        n: &str,
        wanted: &Wanted,
        plan: &mut InterfacePlan,
        (asymmetry_wanted, loss_wanted): (bool, bool),
    ) {
        let find = |number| choose::contact_number(self.library, f, None, n, number, wanted, self.faults);
        let resistance = find(ContactNumber::SpinResistance);
        let asymmetry = find(ContactNumber::Asymmetry);
        let loss = find(ContactNumber::MemoryLoss);
        // Nothing stated: only a whole contact is taken. Stated in part: the resistance alone is of use.
        let Some(resistance) = resistance.filter(|_| asymmetry.is_some() || !asymmetry_wanted) else { return };
        plan.resistance = InterfaceResistancePlan::SpinResistance(self.contact_value(
            path,
            ContactNumber::SpinResistance,
            resistance,
        ));
        if let Some(asymmetry) = asymmetry.filter(|_| asymmetry_wanted) {
            plan.asymmetry = Some(self.contact_value(path, ContactNumber::Asymmetry, asymmetry));
        }
        plan.memory_loss = loss
            .filter(|_| loss_wanted)
            .map(|loss| self.contact_value(path, ContactNumber::MemoryLoss, loss));
    }

    fn asymmetry_of(
        &mut self,
        spec: &ContactSpec,
        path: &str,
        sides: Option<(&Named, &Named)>,
        wanted: &Wanted,
    ) -> Option<Slot<crate::quantities::meanings::InterfaceAsymmetry>> {
        let barrier = match &spec.material {
            Some(name) => Some(self.material(name, path, &[Class::Barrier])?.id.clone()),
            None => None,
        };
        let found = sides.and_then(|(f, n)| {
            let (f, n) = (f.material.as_deref()?, n.material.as_deref()?);
            if spec.is_barrier && barrier.is_none() {
                return None;
            }
            choose::tunnel_asymmetry(self.library, f, barrier.as_deref(), n, wanted, self.faults)
        });
        if let Some(value) = found {
            return Some(self.contact_value(path, ContactNumber::Asymmetry, value));
        }
        let label = |n: Option<&Named>| n.map_or("?".to_owned(), |n| n.label.clone());
        let triple = [
            label(sides.map(|s| s.0)),
            barrier.unwrap_or_else(|| if spec.is_barrier { "barrier".into() } else { "direct".into() }),
            label(sides.map(|s| s.1)),
        ]
        .join(" | ");
        let exists = sides
            .and_then(|(f, _)| f.material.as_deref())
            .map(|f| self.library.interfaces_of(f).into_iter().map(|(id, _, _)| id).collect())
            .unwrap_or_default();
        self.not_in_library(
            &spec.place,
            path,
            "interface_asymmetry",
            format!("interface asymmetry γ of {triple}, nor a tunnel polarization to borrow"),
            exists,
            "0.3 ± 0.1",
        );
        None
    }

    fn build(&mut self) -> Option<Vertical> {
        let design = self.design;
        let parts = &design.parts;
        let mut layers: Vec<Option<(LayerPlan, Named)>> = Vec::new();
        for part in parts {
            layers.push(match part {
                Part::Ferromagnet(spec) => self.ferromagnet(spec),
                Part::Normal(spec) => self.normal(spec),
                Part::Contact(_) => None,
            });
        }
        let complete = parts
            .iter()
            .zip(&layers)
            .all(|(p, l)| matches!(p, Part::Contact(_)) || l.is_some());
        if !complete {
            return None;
        }
        let last = parts.len() - 1;
        let mut elements = Vec::new();
        let mut names = Vec::new();
        let mut gone: Vec<Option<Position>> = vec![None; parts.len()];
        let (mut left, mut right) = (end_plan(design.left), end_plan(design.right));
        let mut contacts: Vec<(usize, usize, usize)> = Vec::new();
        let mut previous: Option<usize> = None;
        for i in 0..parts.len() {
            let Some((plan, name)) = &layers[i] else { continue };
            if let Some(before) = previous {
                let (Some((_, before_name)), spec) = (
                    &layers[before],
                    match parts.get(before + 1) {
                        Some(Part::Contact(c)) => Some(c),
                        _ => None,
                    },
                ) else {
                    continue;
                };
                let path = spec.map_or_else(|| between(&parts[before], &parts[i]), |s| s.path.clone());
                let place = spec.map_or_else(|| design.place.clone(), |s| s.place.clone());
                let interface = self.interface(
                    spec,
                    &path,
                    &place,
                    (&parts[before], before_name, &parts[i], name),
                );
                contacts.push((elements.len(), before, i));
                elements.push(ElementPlan::Interface(interface.unwrap_or(InterfacePlan {
                    resistance: InterfaceResistancePlan::Zero,
                    asymmetry: None,
                    memory_loss: None,
                    magnetization: Magnetization::Fixed,
                })));
                names.push(interface_name(spec, path));
            }
            let position = if i == 0 && design.left == EndWord::SemiInfinite {
                left = EndPlan::SemiInfinite(*plan);
                Position::LeftEnd
            } else if i == last && design.right == EndWord::SemiInfinite {
                right = EndPlan::SemiInfinite(*plan);
                Position::RightEnd
            } else {
                elements.push(ElementPlan::Layer(*plan));
                Position::Element(elements.len() - 1)
            };
            gone[i] = Some(position);
            names.push(name.clone());
            previous = Some(i);
        }
        self.finish(elements, names, left, right, &gone, &contacts)
    }

    fn finish(
        &mut self,
        elements: Vec<ElementPlan>,
        names: Vec<Named>,
        left: EndPlan,
        right: EndPlan,
        gone: &[Option<Position>],
        contacts: &[(usize, usize, usize)],
    ) -> Option<Vertical> {
        let design = self.design;
        let parts = &design.parts;
        let position = |i: usize| gone.get(i).copied().flatten();
        let is_f = |i: usize| matches!(parts[i], Part::Ferromagnet(_));
        let channel = position(design.channel)?;
        let before = (0..design.channel).rev().find(|i| is_f(*i));
        let after = (design.channel + 1..parts.len()).find(|i| is_f(*i));
        let injects_from_left = before.is_some();
        let injector_part = before.or(after)?;
        let injector = position(injector_part)?;
        let touching = |other: usize| {
            contacts
                .iter()
                .find(|(_, a, b)| (*a, *b) == (other, design.channel) || (*b, *a) == (other, design.channel))
                .map(|(element, _, _)| *element)
        };
        let contacts_of_channel: Vec<(usize, usize)> = [before, after]
            .into_iter()
            .flatten()
            .filter_map(|magnet| touching(magnet).map(|element| (element, magnet)))
            .collect();
        let channel_contacts = contacts_of_channel.iter().map(|(element, _)| *element).collect();
        let injector_contact = touching(injector_part);
        let flips = |f: Magnetization| f == Magnetization::Free;
        let magnetizations: Vec<Magnetization> = parts
            .iter()
            .filter_map(|p| match p {
                Part::Ferromagnet(l) => Some(magnetization(l.magnetization)),
                _ => None,
            })
            .collect();
        let has_two_states =
            magnetizations.iter().any(|m| flips(*m)) && magnetizations.iter().any(|m| !flips(*m));
        let likely = contacts_of_channel
            .iter()
            .filter_map(|(element, magnet)| self.likely(*element, elements.get(*element), *magnet))
            .collect();
        Some(Vertical {
            table: std::mem::take(&mut self.table),
            left,
            elements,
            right,
            names,
            channel,
            injector_contact,
            injects_from_left,
            injector,
            channel_contacts,
            has_two_states,
            likely,
            temperature: design.temperature.value.value(),
            current_density: design.current_density.as_ref().map(|j| j.value.value()),
        })
    }

    /// γ that a barrier might have at a contact without one.
    fn likely(&self, element: usize, contact: Option<&ElementPlan>, magnet: usize) -> Option<LikelyContact> {
        let Some(ElementPlan::Interface(InterfacePlan { asymmetry: None, .. })) = contact else {
            return None;
        };
        let channel = self.design.parts.get(self.design.channel)?;
        let id = |part: &Part| {
            let name = &layer_spec(part)?.material.as_ref()?.value;
            self.library.id_of(name)
        };
        let f = id(self.design.parts.get(magnet)?)?;
        let n = id(channel)?;
        let wanted = self.wanted(layer_spec(channel));
        let value = choose::likely_asymmetry(self.library, &f, &n, &wanted, self.faults)?;
        let ContactValue { reading, chosen, interface, barrier } = value;
        let provenance = Provenance {
            origin: origin_of(&chosen.record.common, chosen.decided, chosen.among),
            marks: chosen.marks,
        };
        let side = if magnet < self.design.channel { "injector" } else { "detector" };
        let input = Input {
            name: format!("{side}.barrier.interface_asymmetry"),
            kind: &kind::INTERFACE_ASYMMETRY,
            reading,
            provenance,
        };
        Some(LikelyContact { element, input, barrier, interface })
    }
}

fn end_plan(word: EndWord) -> EndPlan {
    match word {
        EndWord::SpinSink => EndPlan::SpinSink,
        EndWord::FedInPlane => EndPlan::FedInPlane,
        // A semi-infinite end is replaced by its medium when the outermost layer is laid out.
        EndWord::Reflecting | EndWord::SemiInfinite => EndPlan::Reflecting,
    }
}

/// What to call a layer without a library material: `injector.ferromagnet` is "the injector's
/// ferromagnet", `channel` is "the channel".
fn label_of(path: &str) -> String {
    path.to_owned()
}

fn between(left: &Part, right: &Part) -> String {
    let path = |p: &Part| layer_spec(p).map_or(String::new(), |l| l.path.clone());
    let (a, b) = (path(left), path(right));
    if a.starts_with("injector") {
        "injector.interface".to_owned()
    } else if b.starts_with("detector") {
        "detector.interface".to_owned()
    } else {
        let number = |p: &str| p.split('.').nth(1).unwrap_or("?").to_owned();
        format!("stack.{}-{}.interface", number(&a), number(&b))
    }
}

fn interface_name(spec: Option<&ContactSpec>, path: String) -> Named {
    let label = match spec {
        Some(s) if s.is_barrier => s.material.as_ref().map_or("barrier".to_owned(), |m| m.value.clone()),
        _ => "interface".to_owned(),
    };
    Named { path, label, material: None, semiconductor: false }
}
