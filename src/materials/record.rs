//! Checked records: what a file says, with every quantity read and every word known.

use crate::documents::fault::Place;
use crate::quantities::kind::Kind;
use crate::quantities::text::Reading;

use super::property::Property;

/// How a number was obtained.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Obtained {
    /// It stood in a text that was opened; the record says where.
    Read,
    /// It was recalled; nobody has opened the place.
    Recalled,
    /// It follows from other records by a stated rule.
    Derived,
    /// It is an estimate of whoever wrote the record.
    Estimated,
    /// It is a fact of the trade without a source.
    CommonPractice,
    /// The user measured it.
    MeasuredHere,
}

impl Obtained {
    /// Words and meanings, in the order of preference.
    pub const WORDS: &'static [(&'static str, Self)] = &[
        ("measured here", Self::MeasuredHere),
        ("read", Self::Read),
        ("derived", Self::Derived),
        ("common practice", Self::CommonPractice),
        ("estimated", Self::Estimated),
        ("recalled", Self::Recalled),
    ];

    /// The word.
    #[must_use]
    pub fn word(self) -> &'static str {
        Self::WORDS
            .iter()
            .find(|(_, o)| *o == self)
            .map_or("", |(w, _)| w)
    }

    pub(crate) fn rank(self) -> usize {
        Self::WORDS
            .iter()
            .position(|(_, o)| *o == self)
            .unwrap_or(usize::MAX)
    }
}

/// Standing of a record among others of the same property.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Debug)]
pub enum Status {
    /// To be taken first; the record says why.
    Preferred,
    /// One of several.
    Alternative,
    /// Kept for the record, never chosen; the record says why.
    Superseded,
}

/// Where a spread comes from.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum SpreadFrom {
    /// It stood beside the value.
    Published,
    /// Whoever wrote the record estimated it.
    Estimated,
    /// It was recalled.
    Recalled,
    /// The source states none; a prior of the property class stands in.
    NotStated,
}

/// How the temperature of a record is known.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum TemperatureFrom {
    /// It stood beside the value.
    Stated,
    /// It was recalled.
    Recalled,
    /// It is assumed from the habit of the technique.
    Assumed,
}

/// Conditions of a record: a closed list.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct Conditions {
    /// Bulk, film, wire, nanowire.
    pub form: Option<String>,
    /// `n` or `p`.
    pub carrier_type: Option<String>,
    /// Dopant element, by name.
    pub dopant: Option<String>,
    /// Dopant density.
    pub doping: Option<Reading>,
    /// The others, as written: growth, orientation, thickness, bias, anneal.
    pub others: Vec<(String, String)>,
}

/// What every record has.
#[derive(Clone, PartialEq, Debug)]
pub struct Common {
    /// Unique name, never used again.
    pub id: String,
    /// Temperature, K.
    pub temperature: Option<f64>,
    /// How the temperature is known.
    pub temperature_from: TemperatureFrom,
    /// Technique.
    pub technique: Option<String>,
    /// Key of the reference.
    pub source: Option<String>,
    /// Place in the source.
    pub locus: Option<String>,
    /// How it was obtained.
    pub obtained: Obtained,
    /// Records it is derived from.
    pub parents: Vec<String>,
    /// Rule of the derivation.
    pub rule: Option<String>,
    /// Standing.
    pub status: Status,
    /// Why preferred or superseded.
    pub why: Option<String>,
    /// Records it disagrees with.
    pub disagrees_with: Vec<String>,
    /// Remark.
    pub note: Option<String>,
    /// Where the spread comes from.
    pub spread_from: SpreadFrom,
    /// Conditions.
    pub conditions: Conditions,
    /// Whether it comes from a folder of the user.
    pub from_user: bool,
    /// Where it stands.
    pub place: Place,
    /// Where single fields stand, for faults that only a whole set of records shows.
    pub fields: FieldPlaces,
}

/// Places of single fields of a record.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct FieldPlaces {
    /// `id`.
    pub id: Option<Place>,
    /// `source`.
    pub source: Option<Place>,
    /// `obtained`.
    pub obtained: Option<Place>,
    /// `disagrees_with` and `parents`, each id with its place.
    pub links: Vec<(String, Place)>,
}

/// A value of one property.
#[derive(Clone, Debug)]
pub struct ValueRecord {
    /// What every record has.
    pub common: Common,
    /// The property.
    pub property: &'static Property,
    /// Value and spread.
    pub reading: Reading,
}

/// Resistivity, bulk asymmetry and spin diffusion length of a ferromagnet from one technique.
#[derive(Clone, PartialEq, Debug)]
pub struct PairRecord {
    /// What every record has.
    pub common: Common,
    /// ρ.
    pub resistivity: Reading,
    /// β.
    pub bulk_asymmetry: Reading,
    /// λ.
    pub spin_diffusion_length: Reading,
    /// Whether ρ is not from the same paper.
    pub resistivity_assumed: bool,
}

/// What a contact record was fitted to or measured by.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum ContactKind {
    /// Fitted on a finished tunnel device with the mismatch in the fit: it is that contact's γ.
    DeviceFit,
    /// From superconducting tunnelling or a tunnel magnetoresistance: an upper guide to γ.
    TunnelPolarization,
    /// From current-perpendicular multilayers: AR*, γ, δ.
    MultilayerFit,
    /// Already reduced by mismatch: a check value.
    TransparentContact,
    /// Of the carrier density: a check value.
    Density,
    /// From light emission, through recombination: a check value.
    Optical,
    /// Injector times detector: a check value.
    Product,
    /// Differential, at a bias: a check value.
    AtBias,
    /// A resistance only.
    Resistance,
}

impl ContactKind {
    /// Words and meanings.
    pub const WORDS: &'static [(&'static str, Self)] = &[
        ("device fit", Self::DeviceFit),
        ("tunnel polarization", Self::TunnelPolarization),
        ("multilayer fit", Self::MultilayerFit),
        ("transparent contact", Self::TransparentContact),
        ("density", Self::Density),
        ("optical", Self::Optical),
        ("product", Self::Product),
        ("at bias", Self::AtBias),
        ("resistance", Self::Resistance),
    ];

    /// The word.
    #[must_use]
    pub fn word(self) -> &'static str {
        Self::WORDS
            .iter()
            .find(|(_, k)| *k == self)
            .map_or("", |(w, _)| w)
    }

    /// Whether its γ may be fed to the model.
    #[must_use]
    pub fn is_interface_asymmetry(self) -> bool {
        matches!(self, Self::DeviceFit | Self::MultilayerFit)
    }
}

/// Numbers of one contact from one source.
#[derive(Clone, PartialEq, Debug)]
pub struct ContactRecord {
    /// What every record has.
    pub common: Common,
    /// What it is.
    pub kind: ContactKind,
    /// γ; only of a device fit or a multilayer fit.
    pub interface_asymmetry: Option<Reading>,
    /// Polarization of any other kind.
    pub polarization: Option<Reading>,
    /// AR* of one interface.
    pub interface_spin_resistance: Option<Reading>,
    /// Measured RA.
    pub resistance_area: Option<Reading>,
    /// δ.
    pub spin_memory_loss: Option<Reading>,
}

/// Resistance-area product of a barrier at a thickness, and how it grows.
#[derive(Clone, PartialEq, Debug)]
pub struct CalibrationRecord {
    /// What every record has.
    pub common: Common,
    /// Both electrodes.
    pub electrodes: Vec<String>,
    /// RA₀.
    pub resistance_area: Option<Reading>,
    /// t₀.
    pub thickness: Option<Reading>,
    /// Thickness per decade of RA.
    pub thickness_per_decade: Option<Reading>,
}

/// A fitted law.
#[derive(Clone, Debug)]
pub struct LawRecord {
    /// What every record has.
    pub common: Common,
    /// The property it gives.
    pub property: &'static Property,
    /// Named form.
    pub form: String,
    /// The formula, readable.
    pub formula: String,
    /// Coefficients in order, as written, each a number with the unit that the formula takes it in.
    pub coefficients: Vec<(String, String)>,
    /// Range per variable, as written.
    pub range: Vec<(String, String)>,
    /// Stated error, as written.
    pub error: Option<String>,
}

/// A remark that a person should see.
#[derive(Clone, PartialEq, Debug)]
pub struct NoteRecord {
    /// What every record has.
    pub common: Common,
    /// `hazard`, `incompatibility` or `growth`.
    pub kind: &'static str,
    /// The remark.
    pub text: String,
}

/// Class of a material.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Class {
    /// A ferromagnet or half-metal.
    Ferromagnet,
    /// A semiconductor channel.
    Semiconductor,
    /// A normal metal channel.
    Metal,
    /// A tunnel barrier.
    Barrier,
}

impl Class {
    /// Words and meanings.
    pub const WORDS: &'static [(&'static str, Self)] = &[
        ("ferromagnet", Self::Ferromagnet),
        ("semiconductor", Self::Semiconductor),
        ("metal", Self::Metal),
        ("barrier", Self::Barrier),
    ];

    /// The word.
    #[must_use]
    pub fn word(self) -> &'static str {
        Self::WORDS
            .iter()
            .find(|(_, k)| *k == self)
            .map_or("", |(w, _)| w)
    }
}

/// A material with all its records.
#[derive(Clone, Debug)]
pub struct Material {
    /// Id.
    pub id: String,
    /// Name.
    pub name: String,
    /// Class.
    pub class: Class,
    /// Other names.
    pub aliases: Vec<String>,
    /// Values.
    pub values: Vec<ValueRecord>,
    /// Pairs.
    pub pairs: Vec<PairRecord>,
    /// Calibrations.
    pub calibrations: Vec<CalibrationRecord>,
    /// Laws.
    pub laws: Vec<LawRecord>,
    /// Notes.
    pub notes: Vec<NoteRecord>,
}

/// An interface with all its records.
#[derive(Clone, Debug)]
pub struct InterfaceEntry {
    /// Id.
    pub id: String,
    /// Name.
    pub name: String,
    /// Ferromagnet, by id.
    pub ferromagnet: String,
    /// Barrier, by id; none for a direct contact.
    pub barrier: Option<String>,
    /// Channel, by id; none where the counter electrode is a superconductor or another ferromagnet.
    pub channel: Option<String>,
    /// Where ferromagnet, barrier and channel are named, in this order.
    pub places: Vec<(String, Place)>,
    /// Contacts.
    pub contacts: Vec<ContactRecord>,
    /// Calibrations.
    pub calibrations: Vec<CalibrationRecord>,
    /// Values, such as a barrier height.
    pub values: Vec<ValueRecord>,
    /// Notes.
    pub notes: Vec<NoteRecord>,
}

/// The spread that stands in where a source states none.
#[derive(Clone, PartialEq, Debug)]
pub struct Prior {
    /// Property class.
    pub property: String,
    /// The spread as a text that follows a value: `×/ 1.3` or `± 0.1`.
    pub spread: String,
    /// Remark.
    pub note: Option<String>,
}

/// A named number of a record with its kind, for lists and checks.
#[derive(Clone, Debug)]
pub struct Named<'a> {
    /// Key.
    pub key: &'static str,
    /// Kind.
    pub kind: &'static Kind,
    /// Value and spread.
    pub reading: &'a Reading,
}
