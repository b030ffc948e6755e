//! Kinds of quantity: what a field of a design, a record or an answer is a number *of*.
//!
//! A [`Kind`] joins what a dimension cannot tell: the printed name, the accepted range with its reason,
//! the unit the trade prints it in, and which special spellings (per cent, °C, oersted, monolayers) make
//! sense there. Every error about a value is worded from the kind, so that a limit is stated in one place.

use super::dimensions::{
    DiffusionCoefficient, ElectricCurrentDensity, ElectricPotential, ElectricalConductivity,
    ElectricalMobility, ElectricalResistance, ElectricalResistivity, Energy, Length,
    MagneticFluxDensity, Ratio, ResistanceTimesArea, ThermodynamicTemperature, Time,
    VolumetricNumberDensity,
};
use super::dimensions::{Dimension, Measured};

/// How a quantity is printed: the trade's units and the steps between them.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Scale {
    /// A pure number as such.
    Plain,
    /// A pure number in per cent.
    Percent,
    /// nm, µm, mm.
    Length,
    /// Ω µm², kΩ µm², MΩ µm², GΩ µm², and fΩ m² below 0.01 Ω µm².
    ResistanceArea,
    /// µΩ cm, mΩ cm, Ω cm, kΩ cm.
    Resistivity,
    /// S/m, printed S/cm.
    Conductivity,
    /// mΩ, Ω, kΩ, MΩ.
    Resistance,
    /// cm⁻³ with a power of ten.
    Density,
    /// cm²/(V s).
    Mobility,
    /// cm²/s.
    Diffusion,
    /// meV, eV.
    Energy,
    /// ps, ns, µs.
    Time,
    /// K.
    Temperature,
    /// A/cm² with a power of ten.
    CurrentDensity,
    /// nV, µV, mV, V.
    Voltage,
    /// mT, T.
    Field,
    /// Å below 1 nm: lattice constants.
    Lattice,
    /// kA/m.
    Magnetization,
    /// nm per decade of resistance-area product.
    Slope,
}

/// Which end of a range is allowed.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum End {
    /// The limit itself is allowed.
    Including(f64),
    /// The limit itself is not allowed.
    Excluding(f64),
}

/// A named range in coherent SI units, with the reason for it.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Range {
    /// Lower limit.
    pub low: End,
    /// Upper limit.
    pub high: End,
    /// Why a value outside is refused; completes the sentence "… is out of range for the …: …".
    pub reason: &'static str,
}

impl Range {
    /// Whether the number lies inside. NaN never does.
    #[must_use]
    pub fn holds(&self, x: f64) -> bool {
        let low = match self.low {
            End::Including(a) => x >= a,
            End::Excluding(a) => x > a,
        };
        let high = match self.high {
            End::Including(b) => x <= b,
            End::Excluding(b) => x < b,
        };
        low && high
    }
}

/// A kind of quantity. See the module text.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Kind {
    /// Printed name, the field's standard term.
    pub name: &'static str,
    /// Dimension.
    pub dimension: Dimension,
    /// Example texts a user could write.
    pub examples: &'static [&'static str],
    /// Accepted range.
    pub range: Range,
    /// How it is printed.
    pub scale: Scale,
    /// Whether `%` is a spelling of it.
    pub percent: bool,
    /// Whether it is an absolute temperature, so that °C is accepted.
    pub absolute_temperature: bool,
    /// Whether it is an applied field in vacuum, so that Oe, G and A/m are accepted and turned into tesla.
    pub vacuum_field: bool,
}

const fn span(low: End, high: End, reason: &'static str) -> Range {
    Range { low, high, reason }
}

const fn kind(
    name: &'static str,
    dimension: Dimension,
    examples: &'static [&'static str],
    range: Range,
    scale: Scale,
) -> Kind {
    Kind {
        name,
        dimension,
        examples,
        range,
        scale,
        percent: false,
        absolute_temperature: false,
        vacuum_field: false,
    }
}

use End::{Excluding, Including};

const POSITIVE_RHO: Range = span(
    Excluding(0.0),
    Including(1e12),
    "a resistivity is positive, and 10¹² Ω m is already an insulator",
);

/// Electrical resistivity of a layer.
pub const RESISTIVITY: Kind = kind(
    "resistivity",
    <ElectricalResistivity as Measured>::DIMENSION,
    &["2.1 mΩ cm", "60 nΩ m"],
    POSITIVE_RHO,
    Scale::Resistivity,
);
/// Electrical conductivity of a layer.
pub const CONDUCTIVITY: Kind = kind(
    "conductivity",
    <ElectricalConductivity as Measured>::DIMENSION,
    &["480 S/cm", "4.8e4 S/m"],
    span(
        Excluding(0.0),
        Including(1e12),
        "a conductivity is positive",
    ),
    Scale::Conductivity,
);
/// Spin diffusion length.
pub const SPIN_DIFFUSION_LENGTH: Kind = kind(
    "spin diffusion length",
    <Length as Measured>::DIMENSION,
    &["8.5 nm", "2 µm"],
    span(
        Excluding(0.0),
        Including(0.1),
        "it is a positive length, at most 10 cm",
    ),
    Scale::Length,
);
/// Thickness of a layer.
pub const THICKNESS: Kind = kind(
    "thickness",
    <Length as Measured>::DIMENSION,
    &["80 nm", "1.4 nm"],
    span(
        Excluding(0.0),
        Including(0.1),
        "a layer's thickness is positive, at most 10 cm",
    ),
    Scale::Length,
);
/// Thickness of a tunnel barrier.
pub const BARRIER_THICKNESS: Kind = kind(
    "barrier thickness",
    <Length as Measured>::DIMENSION,
    &["1.4 nm", "6 ML"],
    span(
        Excluding(0.0),
        Including(1e-7),
        "a tunnel barrier is a few nanometres thick; 100 nm is beyond any",
    ),
    Scale::Length,
);
/// Resistance-area product, both spin channels in parallel.
pub const RESISTANCE_AREA: Kind = kind(
    "resistance-area product",
    <ResistanceTimesArea as Measured>::DIMENSION,
    &["12 kΩ µm²", "8 Ω µm²"],
    span(
        Including(0.0),
        Including(1e6),
        "a resistance-area product is not negative",
    ),
    Scale::ResistanceArea,
);
/// Interface spin resistance r_b*, in print AR*.
pub const INTERFACE_SPIN_RESISTANCE: Kind = kind(
    "interface spin resistance",
    <ResistanceTimesArea as Measured>::DIMENSION,
    &["0.51 fΩ m²", "5e-16 Ω m²"],
    span(
        Including(0.0),
        Including(1e6),
        "an interface spin resistance is not negative",
    ),
    Scale::ResistanceArea,
);
/// Areal spin resistance r_F or r_N.
pub const SPIN_RESISTANCE: Kind = kind(
    "spin resistance",
    <ResistanceTimesArea as Measured>::DIMENSION,
    &["4.5e-15 Ω m²"],
    span(
        Excluding(0.0),
        Including(1e6),
        "a spin resistance is positive",
    ),
    Scale::ResistanceArea,
);
/// Product of resistivity and spin diffusion length of a metal.
pub const RHO_LAMBDA: Kind = kind(
    "product of resistivity and spin diffusion length",
    <ResistanceTimesArea as Measured>::DIMENSION,
    &["0.91 fΩ m²"],
    span(Excluding(0.0), Including(1.0), "the product is positive"),
    Scale::ResistanceArea,
);

const ASYMMETRY: Range = span(
    Excluding(-1.0),
    Excluding(1.0),
    "an asymmetry lies between −1 and 1, both excluded: at ±1 one spin channel would not conduct at all",
);

/// Bulk asymmetry β of a ferromagnet.
pub const BULK_ASYMMETRY: Kind = Kind {
    percent: true,
    ..kind(
        "bulk asymmetry",
        Dimension::NONE,
        &["0.46", "46 %"],
        ASYMMETRY,
        Scale::Plain,
    )
};
/// Interface asymmetry γ.
pub const INTERFACE_ASYMMETRY: Kind = Kind {
    percent: true,
    ..kind(
        "interface asymmetry",
        Dimension::NONE,
        &["0.4", "40 %"],
        ASYMMETRY,
        Scale::Plain,
    )
};

const POLARIZATION: Range = span(
    Including(-1.0),
    Including(1.0),
    "a polarization lies between −100 % and 100 %",
);

/// A polarization of any kind that is not an asymmetry of the model.
pub const SPIN_POLARIZATION: Kind = Kind {
    percent: true,
    ..kind(
        "spin polarization",
        Dimension::NONE,
        &["45 %", "0.45"],
        POLARIZATION,
        Scale::Percent,
    )
};
/// Current spin polarization p = J/j.
pub const CURRENT_SPIN_POLARIZATION: Kind = Kind {
    percent: true,
    ..kind(
        "current spin polarization",
        Dimension::NONE,
        &["10 %", "0.1"],
        POLARIZATION,
        Scale::Percent,
    )
};
/// Spin polarization of the carrier density.
pub const DENSITY_SPIN_POLARIZATION: Kind = Kind {
    percent: true,
    ..kind(
        "density spin polarization",
        Dimension::NONE,
        &["4.6 %"],
        POLARIZATION,
        Scale::Percent,
    )
};
/// Spin-memory-loss parameter δ of an interface.
pub const SPIN_MEMORY_LOSS: Kind = kind(
    "spin-memory loss",
    Dimension::NONE,
    &["0.25"],
    span(
        Including(0.0),
        Including(20.0),
        "δ is not negative; beyond 20 nothing is left of the spin",
    ),
    Scale::Plain,
);
/// Two-terminal magnetoresistance.
pub const MAGNETORESISTANCE: Kind = Kind {
    percent: true,
    ..kind(
        "magnetoresistance",
        Dimension::NONE,
        &["1 %"],
        span(
            Including(-1.0),
            Including(1e6),
            "it is a ratio of resistances, above −100 %",
        ),
        Scale::Percent,
    )
};
/// Change of the resistance-area product between the two magnetic states.
pub const RESISTANCE_AREA_CHANGE: Kind = kind(
    "resistance-area change",
    <ResistanceTimesArea as Measured>::DIMENSION,
    &["1 Ω µm²", "2 fΩ m²"],
    span(
        Including(-1e6),
        Including(1e6),
        "it is a difference of resistance-area products",
    ),
    Scale::ResistanceArea,
);
/// Absolute temperature.
pub const TEMPERATURE: Kind = Kind {
    absolute_temperature: true,
    ..kind(
        "temperature",
        <ThermodynamicTemperature as Measured>::DIMENSION,
        &["300 K", "25 °C"],
        span(
            Including(1e-3),
            Including(2000.0),
            "the models hold between a millikelvin and 2000 K",
        ),
        Scale::Temperature,
    )
};
/// Dopant or carrier density.
pub const DOPING: Kind = kind(
    "doping",
    <VolumetricNumberDensity as Measured>::DIMENSION,
    &["1e19 /cm³", "5e16 cm⁻³"],
    span(
        Excluding(0.0),
        Including(1e30),
        "a density is positive, and 10²⁴ cm⁻³ is more than any solid holds",
    ),
    Scale::Density,
);
/// Charge current density.
pub const CURRENT_DENSITY: Kind = kind(
    "current density",
    <ElectricCurrentDensity as Measured>::DIMENSION,
    &["1e5 A/cm²", "10 µA/µm²"],
    span(
        Excluding(0.0),
        Including(1e14),
        "it is taken positive; 10¹⁰ A/cm² melts any contact",
    ),
    Scale::CurrentDensity,
);
/// Spin accumulation u = (V↑ − V↓)/2: half the splitting, as a voltage.
pub const SPIN_ACCUMULATION: Kind = kind(
    "spin accumulation",
    <ElectricPotential as Measured>::DIMENSION,
    &["0.8 µV"],
    span(
        Including(-100.0),
        Including(100.0),
        "it is a voltage within ±100 V",
    ),
    Scale::Voltage,
);
/// Spin splitting Δμ = 2eu: the full splitting, as an energy.
pub const SPIN_SPLITTING: Kind = kind(
    "spin splitting",
    <Energy as Measured>::DIMENSION,
    &["2.9 meV"],
    span(
        Including(-1e-16),
        Including(1e-16),
        "it is an energy of at most some hundred electronvolts",
    ),
    Scale::Energy,
);
/// Energy: gap, barrier height, affinity, work function.
pub const ENERGY: Kind = kind(
    "energy",
    <Energy as Measured>::DIMENSION,
    &["0.35 eV", "45 meV"],
    span(
        Including(0.0),
        Including(1.7e-17),
        "it is not negative and at most about 100 eV",
    ),
    Scale::Energy,
);
/// Carrier mobility.
pub const MOBILITY: Kind = kind(
    "mobility",
    <ElectricalMobility as Measured>::DIMENSION,
    &["1400 cm²/(V s)"],
    span(Excluding(0.0), Including(1e6), "a mobility is positive"),
    Scale::Mobility,
);
/// Diffusion constant.
pub const DIFFUSION: Kind = kind(
    "diffusion constant",
    <DiffusionCoefficient as Measured>::DIMENSION,
    &["2.8 cm²/s"],
    span(
        Excluding(0.0),
        Including(1e4),
        "a diffusion constant is positive",
    ),
    Scale::Diffusion,
);
/// Spin lifetime.
pub const SPIN_LIFETIME: Kind = kind(
    "spin lifetime",
    <Time as Measured>::DIMENSION,
    &["1.3 ns", "84 ps"],
    span(
        Excluding(0.0),
        Including(1.0),
        "a spin lifetime is positive and below a second",
    ),
    Scale::Time,
);
/// Magnetic field applied in vacuum.
pub const APPLIED_FIELD: Kind = Kind {
    vacuum_field: true,
    ..kind(
        "applied field",
        <MagneticFluxDensity as Measured>::DIMENSION,
        &["50 mT", "500 Oe"],
        span(Including(-100.0), Including(100.0), "it lies within ±100 T"),
        Scale::Field,
    )
};
/// Electrical resistance of a device.
pub const RESISTANCE: Kind = kind(
    "resistance",
    <ElectricalResistance as Measured>::DIMENSION,
    &["1.2 kΩ"],
    span(Including(-1e15), Including(1e15), "it is a resistance"),
    Scale::Resistance,
);
/// Lattice constant or monolayer height.
pub const LATTICE_LENGTH: Kind = kind(
    "lattice length",
    <Length as Measured>::DIMENSION,
    &["5.43 Å", "0.2106 nm"],
    span(
        Excluding(0.0),
        Including(1e-7),
        "it is positive and below 100 nm",
    ),
    Scale::Lattice,
);
/// Relative permittivity.
pub const PERMITTIVITY: Kind = kind(
    "relative permittivity",
    Dimension::NONE,
    &["11.7"],
    span(Including(1.0), Including(1e6), "it is at least 1"),
    Scale::Plain,
);
/// Effective mass over the free-electron mass.
pub const EFFECTIVE_MASS: Kind = kind(
    "effective mass",
    Dimension::NONE,
    &["0.26"],
    span(
        Excluding(0.0),
        Including(100.0),
        "it is positive, in units of the free-electron mass",
    ),
    Scale::Plain,
);
/// Saturation magnetization.
pub const MAGNETIZATION: Kind = kind(
    "saturation magnetization",
    Dimension([-1, 0, 0, 1, 0, 0, 0]),
    &["800 kA/m"],
    span(Including(0.0), Including(1e7), "it is not negative"),
    Scale::Magnetization,
);
/// Thickness that raises a barrier's resistance-area product tenfold.
pub const DECADE_THICKNESS: Kind = kind(
    "thickness per decade",
    <Length as Measured>::DIMENSION,
    &["0.36 nm"],
    span(
        Excluding(0.0),
        Including(1e-8),
        "it is positive and below 10 nm",
    ),
    Scale::Slope,
);
/// A pure number without further meaning: a law's exponent, a g factor.
pub const NUMBER: Kind = kind(
    "number",
    <Ratio as Measured>::DIMENSION,
    &["1.98"],
    span(Including(-1e300), Including(1e300), "it is a finite number"),
    Scale::Plain,
);
