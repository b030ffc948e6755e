//! From a design to a device: which records feed it and how its plan is laid out.

mod contacts;
mod layers;
mod layout;

use std::rc::Rc;

use crate::designs::design::{Design, Part};
use crate::designs::layers::{LayerSpec, MagnetizationWord, known_material};
use crate::documents::fault::{Fault, Place, Wrong};
use crate::documents::reader::{Faults, Placed};
use crate::materials::choose::{self, Wanted};
use crate::materials::library::Library;
use crate::materials::record::{Class, Common, Material};
use crate::models::ladder::Magnetization;
use crate::quantities::dimensions::Measured;
use crate::quantities::kind::Kind;
use crate::quantities::text::Reading;

use crate::devices::inputs::{Input, InputTable, Slot};
use crate::devices::provenance::{Origin, Provenance};
use crate::devices::vertical::Vertical;

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
    if faults.count() > before {
        None
    } else {
        device
    }
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
        self.table.add(Input {
            name,
            kind,
            reading,
            provenance,
        })
    }

    fn given<Q: Measured>(
        &mut self,
        name: String,
        kind: &'static Kind,
        value: &Placed<Reading>,
        note: Option<&String>,
        overrides: bool,
    ) -> Slot<Q> {
        let origin = Origin::Design {
            place: value.place.clone(),
            note: note.cloned(),
            overrides,
        };
        self.add(
            name,
            kind,
            value.value.clone(),
            Provenance {
                origin,
                marks: Vec::new(),
            },
        )
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
        self.faults.push(Fault {
            place: Some(place.clone()),
            field,
            wrong,
        });
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

    fn not_in_library(
        &self,
        spec_place: &Place,
        path: &str,
        key: &str,
        what: String,
        exists: Vec<String>,
        example: &str,
    ) {
        self.fault(
            spec_place,
            format!("{path}.{key}"),
            Wrong::NotInLibrary {
                what,
                exists,
                help: format!("state it: `{key} = \"{example}\"`"),
            },
        );
    }
}
