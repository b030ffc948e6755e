//! Layers: ferromagnets by their pairs, normal layers by their values.

use crate::designs::layers::LayerSpec;
use crate::documents::fault::Wrong;
use crate::documents::reader::Placed;
use crate::materials::choose::{self, Chosen, Mark, NotChosen, Wanted, with_prior};
use crate::materials::record::{Class, Material, PairRecord};
use crate::models::ladder::Magnetization;
use crate::quantities::dimensions::{Measured, ResistanceTimesArea};
use crate::quantities::kind::{self, Kind, Scale};
use crate::quantities::meanings::{BulkAsymmetry, Thickness};
use crate::quantities::print::with_digits;
use crate::quantities::spread::Spread;
use crate::quantities::text::Reading;

use crate::devices::inputs::Slot;
use crate::devices::provenance::{Origin, Provenance};
use crate::devices::vertical::{LayerPlan, LengthPlan, Named, ResistivityPlan};

use super::{Work, magnetization, origin_of};

/// Least relative spread of a product ρλ joined with a β of another technique: lengths measured in stacks and
/// in lateral valves differ by about as much.
const LEAST_PRODUCT_SPREAD: f64 = 0.3;

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

impl Work<'_> {
    /// A value of a normal material by property.
    pub(super) fn value_of<Q: Measured>(
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
                let near = chosen
                    .record
                    .common
                    .conditions
                    .doping
                    .as_ref()
                    .map_or(0.0, |d| d.si);
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
                let Chosen {
                    record,
                    decided,
                    among,
                    mut marks,
                } = chosen;
                let (reading, mark) = with_prior(self.library, key, kind, &record.reading);
                marks.extend(mark);
                let provenance = Provenance {
                    origin: origin_of(&record.common, decided, among),
                    marks,
                };
                Some(self.add(format!("{}.{key}", spec.path), kind, reading, provenance))
            }
            Err(NotChosen::WhichDoping(_))
                if self.faults.told(&format!("{}.doping", spec.path)) =>
            {
                None
            }
            Err(NotChosen::WhichDoping(dopings)) => {
                let list: Vec<String> = dopings
                    .iter()
                    .map(|d| with_digits(*d, Scale::Density, 2))
                    .collect();
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

    pub(super) fn explicit_missing(&self, spec: &LayerSpec, key: &'static str, example: &str) {
        self.fault(
            &spec.place,
            format!("{}.{key}", spec.path),
            Wrong::Missing {
                key: key.to_owned(),
                help: format!("name a library `material`, or state `{key} = \"{example}\"`"),
            },
        );
    }

    /// A property that the design states for a layer; it overrides the library where a material is named.
    fn stated<Q: Measured>(
        &mut self,
        spec: &LayerSpec,
        key: &str,
        kind: &'static Kind,
        value: &Placed<Reading>,
    ) -> Slot<Q> {
        let name = format!("{}.{key}", spec.path);
        self.given(
            name,
            kind,
            value,
            spec.note.as_ref(),
            spec.material.is_some(),
        )
    }

    pub(super) fn given_resistivity(&mut self, spec: &LayerSpec) -> Option<ResistivityPlan> {
        if let Some(rho) = &spec.resistivity {
            let slot = self.stated(spec, "resistivity", &kind::RESISTIVITY, rho);
            return Some(ResistivityPlan::Direct(slot));
        }
        let sigma = spec.conductivity.as_ref()?;
        let slot = self.stated(spec, "conductivity", &kind::CONDUCTIVITY, sigma);
        Some(ResistivityPlan::FromConductivity(slot))
    }

    pub(super) fn given_length(&mut self, spec: &LayerSpec) -> Option<LengthPlan> {
        let length = spec.spin_diffusion_length.as_ref()?;
        let key = "spin_diffusion_length";
        let slot = self.stated(spec, key, &kind::SPIN_DIFFUSION_LENGTH, length);
        Some(LengthPlan::Direct(slot))
    }

    pub(super) fn thickness(&mut self, spec: &LayerSpec) -> Option<Slot<Thickness>> {
        let t = spec.thickness.as_ref()?;
        let name = format!("{}.thickness", spec.path);
        Some(self.given(name, &kind::THICKNESS, t, None, false))
    }

    pub(super) fn normal(&mut self, spec: &LayerSpec) -> Option<(LayerPlan, Named)> {
        let material = match &spec.material {
            Some(name) => {
                Some(self.material(name, &spec.path, &[Class::Semiconductor, Class::Metal])?)
            }
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
                .value_of(
                    m,
                    spec,
                    "spin_diffusion_length",
                    &kind::SPIN_DIFFUSION_LENGTH,
                    "0.5 µm",
                )
                .map(LengthPlan::Direct),
            (None, None) => {
                self.explicit_missing(spec, "spin_diffusion_length", "0.5 µm");
                None
            }
        };
        let thickness = self.thickness(spec);
        let named = Named {
            path: spec.path.clone(),
            label: material
                .as_ref()
                .map_or_else(|| label_of(&spec.path), |m| m.id.clone()),
            material: material.as_ref().map(|m| m.id.clone()),
            semiconductor: material
                .as_ref()
                .is_some_and(|m| m.class == Class::Semiconductor),
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

    pub(super) fn ferromagnet(&mut self, spec: &LayerSpec) -> Option<(LayerPlan, Named)> {
        let material = match &spec.material {
            Some(name) => Some(self.material(name, &spec.path, &[Class::Ferromagnet])?),
            None => None,
        };
        let given_rho = self.given_resistivity(spec);
        let given_length = self.given_length(spec);
        let given_beta = spec
            .bulk_asymmetry
            .as_ref()
            .map(|b| self.stated(spec, "bulk_asymmetry", &kind::BULK_ASYMMETRY, b));
        let named = Named {
            path: spec.path.clone(),
            label: material
                .as_ref()
                .map_or_else(|| label_of(&spec.path), |m| m.id.clone()),
            material: material.as_ref().map(|m| m.id.clone()),
            semiconductor: false,
        };
        let (resistivity, asymmetry, length) =
            match (&material, given_rho, given_beta, given_length) {
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
    pub(super) fn pair_of(
        &mut self,
        material: &Material,
        spec: &LayerSpec,
        rho: Option<ResistivityPlan>,
        beta: Option<Slot<BulkAsymmetry>>,
        length: Option<LengthPlan>,
    ) -> Option<(ResistivityPlan, Slot<BulkAsymmetry>, LengthPlan)> {
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
        let Chosen {
            record,
            decided,
            among,
            marks,
        } = chosen;
        let path = &spec.path;
        let origin = origin_of(&record.common, decided, among);
        let column = |this: &mut Self,
                      key: &str,
                      kind: &'static Kind,
                      reading: &Reading,
                      skip: Option<&Mark>| {
            let (reading, mark) = with_prior(this.library, key, kind, reading);
            let mut marks: Vec<Mark> = marks
                .iter()
                .filter(|m| skip.is_none_or(|s| *m != s))
                .cloned()
                .collect();
            marks.extend(mark);
            let provenance = Provenance {
                origin: origin.clone(),
                marks,
            };
            (format!("{path}.{key}"), reading, provenance)
        };
        let overridden = rho.is_some();
        let rho = match rho {
            Some(plan) => plan,
            None => {
                let (name, reading, provenance) = column(
                    self,
                    "resistivity",
                    &kind::RESISTIVITY,
                    &record.resistivity,
                    None,
                );
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
        if overridden
            && let Some(slot) = self.product(material, &record, path, &origin, &marks, &wanted)
        {
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
    pub(super) fn product(
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
                (Some(a), Some(b)) => Spread::Normal {
                    sd: product * a.hypot(b),
                },
                _ => Spread::Unknown,
            };
            let reading = Reading {
                si: product,
                spread,
                unit_text: String::new(),
                text: with_digits(product, Scale::ResistanceArea, 3),
            };
            let marks = marks.iter().cloned().chain([Mark::LengthScaled]).collect();
            let provenance = Provenance {
                origin: origin.clone(),
                marks,
            };
            return Some(self.add(name, &kind::RHO_LAMBDA, reading, provenance));
        }
        let chosen = choose::value(material, key, wanted).ok()?;
        let (mut reading, mark) =
            with_prior(self.library, key, &kind::RHO_LAMBDA, &chosen.record.reading);
        let least = LEAST_PRODUCT_SPREAD * reading.si;
        if reading
            .spread
            .standard_deviation(reading.si)
            .is_none_or(|sd| sd < least)
        {
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
}

/// What to call a layer without a library material: `injector.ferromagnet` is "the injector's
/// ferromagnet", `channel` is "the channel".
fn label_of(path: &str) -> String {
    path.to_owned()
}
