//! The properties a value record can be of, and what each may be used for.

use crate::quantities::kind::{self, Kind};

/// What a property may feed.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Use {
    /// An input of the model.
    Model,
    /// Shown beside an answer, never fed through the model again.
    CheckOnly,
    /// Kept for later models and for reading.
    Reference,
}

/// One property.
#[derive(Debug)]
pub struct Property {
    /// Name in records and designs.
    pub name: &'static str,
    /// Kind of quantity.
    pub kind: &'static Kind,
    /// Whether a record has to say its temperature.
    pub needs_temperature: bool,
    /// What it may feed.
    pub feeds: Use,
}

const fn property(
    name: &'static str,
    kind: &'static Kind,
    needs_temperature: bool,
    feeds: Use,
) -> Property {
    Property {
        name,
        kind,
        needs_temperature,
        feeds,
    }
}

/// All properties of value records.
pub static PROPERTIES: &[Property] = &[
    property("resistivity", &kind::RESISTIVITY, true, Use::Model),
    property("conductivity", &kind::CONDUCTIVITY, true, Use::Model),
    property(
        "spin_diffusion_length",
        &kind::SPIN_DIFFUSION_LENGTH,
        true,
        Use::Model,
    ),
    property(
        "resistivity_length_product",
        &kind::RHO_LAMBDA,
        false,
        Use::Model,
    ),
    property("spin_lifetime", &kind::SPIN_LIFETIME, true, Use::Reference),
    property("diffusion_constant", &kind::DIFFUSION, true, Use::Reference),
    property("mobility", &kind::MOBILITY, true, Use::Reference),
    property("doping_critical", &kind::DOPING, false, Use::Reference),
    property("band_gap", &kind::ENERGY, true, Use::Reference),
    property("electron_affinity", &kind::ENERGY, false, Use::Reference),
    property("work_function", &kind::ENERGY, false, Use::Reference),
    property("ionization_energy", &kind::ENERGY, false, Use::Reference),
    property("barrier_height", &kind::ENERGY, false, Use::Reference),
    property("barrier_mass", &kind::EFFECTIVE_MASS, false, Use::Reference),
    property(
        "relative_permittivity",
        &kind::PERMITTIVITY,
        false,
        Use::Reference,
    ),
    property(
        "effective_mass",
        &kind::EFFECTIVE_MASS,
        false,
        Use::Reference,
    ),
    property(
        "density_of_states_mass",
        &kind::EFFECTIVE_MASS,
        false,
        Use::Reference,
    ),
    property(
        "lattice_constant",
        &kind::LATTICE_LENGTH,
        false,
        Use::Reference,
    ),
    property("monolayer", &kind::LATTICE_LENGTH, false, Use::Model),
    property(
        "curie_temperature",
        &kind::TEMPERATURE,
        false,
        Use::Reference,
    ),
    property(
        "saturation_magnetization",
        &kind::MAGNETIZATION,
        true,
        Use::Reference,
    ),
    property("intrinsic_density", &kind::DOPING, true, Use::Reference),
    property("density_of_states", &kind::DOPING, true, Use::Reference),
    property("g_factor", &kind::NUMBER, false, Use::Reference),
    property(
        "point_contact_polarization",
        &kind::SPIN_POLARIZATION,
        false,
        Use::CheckOnly,
    ),
    property(
        "photoemission_polarization",
        &kind::SPIN_POLARIZATION,
        false,
        Use::CheckOnly,
    ),
];

/// The property of that name.
#[must_use]
pub fn property_named(name: &str) -> Option<&'static Property> {
    PROPERTIES.iter().find(|p| p.name == name)
}
