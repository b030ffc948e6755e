//! Where the ladder's assumptions end: caveats for given inputs, as data.
//!
//! Kernels return numbers; these functions say, for the same inputs, which assumption is strained and by
//! how much.

use crate::quantities::constants::{BOLTZMANN, ELEMENTARY_CHARGE};
use crate::quantities::dimensions::{
    ElectricCurrentDensity, ElectricPotential, Measured, ResistanceTimesArea,
    ThermodynamicTemperature,
};

use super::ladder::Layer;

/// Spin diffusion lengths of a ferromagnet below which its far side is felt: at 3 λ the source
/// still differs from the thick limit by sech 3 = 10 % of itself, in the worst end.
pub const THICK_FERROMAGNET: f64 = 3.0;

/// Voltage over a tunnel interface above which its asymmetry falls and its resistance is no longer that of
/// small bias, V. Common practice: tunnel magnetoresistance has lost about half by then.
pub const SMALL_BIAS: f64 = 0.5;

/// 1 − |β| or 1 − |γ| below which 1/(1 − β²) leaves the range that measurements support.
pub const NEAR_ONE: f64 = 0.01;

/// Fraction of the Curie temperature above which a ferromagnet's asymmetries fall steeply. Common practice.
pub const NEAR_CURIE: f64 = 0.7;

/// A caveat of the ladder.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum Caveat {
    /// A ferromagnet taken as semi-infinite is thinner than [`THICK_FERROMAGNET`] λ.
    ThinFerromagnet {
        /// t/λ.
        reduced_thickness: f64,
    },
    /// The spin accumulation exceeds kT/e: transport is no longer linear in a non-degenerate channel.
    Nonlinear {
        /// |u|.
        accumulation: ElectricPotential,
        /// kT/e.
        thermal: ElectricPotential,
    },
    /// The electric field times λ exceeds kT/e: drift lengthens or shortens the spin diffusion length of a
    /// non-degenerate channel, which the diffusive model leaves out.
    Drift {
        /// ρjλ.
        voltage: ElectricPotential,
        /// kT/e.
        thermal: ElectricPotential,
    },
}

/// kT/e.
#[must_use]
pub fn thermal_voltage(temperature: ThermodynamicTemperature) -> ElectricPotential {
    ElectricPotential::from_si(BOLTZMANN * temperature.si() / ELEMENTARY_CHARGE)
}

/// Whether a ferromagnet taken as semi-infinite is thick enough.
#[must_use]
pub fn ferromagnet(layer: &Layer) -> Option<Caveat> {
    let reduced_thickness = layer.thickness.si() / layer.length.si();
    (reduced_thickness < THICK_FERROMAGNET).then_some(Caveat::ThinFerromagnet { reduced_thickness })
}

/// Whether a current density keeps the channel linear and diffusive. Meant for semiconductors: a metal's
/// Fermi energy is far above kT.
#[must_use]
pub fn channel(
    layer: &Layer,
    accumulation_per_current_density: ResistanceTimesArea,
    current_density: ElectricCurrentDensity,
    temperature: ThermodynamicTemperature,
) -> Vec<Caveat> {
    let thermal = thermal_voltage(temperature);
    let u = (accumulation_per_current_density.si() * current_density.si()).abs();
    let drift = layer.resistivity.si() * current_density.si() * layer.length.si();
    let mut caveats = Vec::new();
    if u > thermal.si() {
        caveats.push(Caveat::Nonlinear {
            accumulation: ElectricPotential::from_si(u),
            thermal,
        });
    }
    if drift > thermal.si() {
        caveats.push(Caveat::Drift {
            voltage: ElectricPotential::from_si(drift),
            thermal,
        });
    }
    caveats
}
