//! Same unit, different meaning, different type.
//!
//! Ω·m² is the unit of a resistance-area product, of a spin resistance and of an interface spin
//! resistance; a dimension check passes a mix-up of the three. Each meaning is its own type here and
//! the few lawful conversions are named functions.
//!
//! A resistance-area product is not an interface spin resistance:
//! ```compile_fail
//! use injectance::quantities::dimensions::Measured;
//! use injectance::quantities::meanings::{InterfaceSpinResistance, ResistanceAreaProduct};
//! let ra = ResistanceAreaProduct::from_si(1e-11);
//! let r_b: InterfaceSpinResistance = ra;
//! ```
//! β and γ are not interchangeable:
//! ```compile_fail
//! use injectance::quantities::dimensions::Measured;
//! use injectance::quantities::meanings::{BulkAsymmetry, InterfaceSpinResistance, ResistanceAreaProduct};
//! let ra = ResistanceAreaProduct::from_si(1e-11);
//! let r_b = InterfaceSpinResistance::from_resistance_area(ra, BulkAsymmetry::from_si(0.4));
//! ```
//! The half splitting (a voltage) is not the full one (an energy):
//! ```compile_fail
//! use injectance::quantities::dimensions::Measured;
//! use injectance::quantities::meanings::{SpinAccumulation, SpinSplitting};
//! let full: SpinSplitting = SpinAccumulation::from_si(1e-3);
//! ```
//! The lawful way round:
//! ```
//! use injectance::quantities::dimensions::Measured;
//! use injectance::quantities::meanings::{
//!     InterfaceAsymmetry, InterfaceSpinResistance, ResistanceAreaProduct, SpinAccumulation, SpinSplitting,
//! };
//! let ra = ResistanceAreaProduct::from_si(1e-11); // 10 Ω µm²
//! let r_b = InterfaceSpinResistance::from_resistance_area(ra, InterfaceAsymmetry::from_si(0.6));
//! assert!((r_b.si() / (1e-11 / 0.64) - 1.0).abs() < 1e-15);
//! let full = SpinSplitting::from(SpinAccumulation::from_si(1e-3)); // 1 mV is 2 meV
//! assert!((full.si() / (2.0 * 1.602176634e-22) - 1.0).abs() < 1e-15);
//! ```

use super::constants::ELEMENTARY_CHARGE;
use super::dimensions::{
    Dimension, ElectricPotential, ElectricalResistance, ElectricalResistivity, Energy, Length,
    Measured, Ratio, ResistanceTimesArea,
};

macro_rules! meaning {
    ($(#[$text:meta])* $name:ident over $base:ty) => {
        $(#[$text])*
        #[derive(Clone, Copy, PartialEq, PartialOrd, Debug)]
        pub struct $name($base);

        impl $name {
            /// Gives the quantity this meaning.
            #[must_use]
            pub const fn new(quantity: $base) -> Self {
                Self(quantity)
            }

            /// The quantity without its meaning.
            #[must_use]
            pub const fn quantity(self) -> $base {
                self.0
            }
        }

        impl Measured for $name {
            const DIMENSION: Dimension = <$base as Measured>::DIMENSION;

            fn from_si(value: f64) -> Self {
                Self(<$base as Measured>::from_si(value))
            }

            fn si(self) -> f64 {
                self.0.si()
            }
        }
    };
}

meaning! {
    /// Resistance-area product RA of an interface: both spin channels in parallel, the far side shorted
    /// for spins. RA = r_b*(1 − γ²). Unit Ω·m².
    ResistanceAreaProduct over ResistanceTimesArea
}
meaning! {
    /// Interface spin resistance r_b*, in print AR*: r↑,↓ = 2 r_b*(1 ∓ γ). Not the measured RA. Unit Ω·m².
    InterfaceSpinResistance over ResistanceTimesArea
}
meaning! {
    /// Areal spin resistance of a layer: r_F = ρ_F λ_F/(1 − β²) or r_N = ρ_N λ_N. Unit Ω·m².
    SpinResistance over ResistanceTimesArea
}
meaning! {
    /// Difference of the resistance-area product between the antiparallel and the parallel state. Unit Ω·m².
    ResistanceAreaChange over ResistanceTimesArea
}
meaning! {
    /// Bulk asymmetry β of a ferromagnet: σ↑,↓ = σ(1 ± β)/2. Unit 1, −1 < β < 1.
    BulkAsymmetry over Ratio
}
meaning! {
    /// Interface asymmetry γ: r↑,↓ = 2 r_b*(1 ∓ γ). Unit 1, −1 < γ < 1.
    InterfaceAsymmetry over Ratio
}
meaning! {
    /// Spin-memory-loss parameter δ of an interface; an electron that crosses flips with probability 1 − e^(−δ). Unit 1.
    SpinMemoryLoss over Ratio
}
meaning! {
    /// Current spin polarization p = J/j of the current that crosses. Unit 1.
    CurrentSpinPolarization over Ratio
}
meaning! {
    /// Spin polarization of the carrier density, (n↑ − n↓)/n. Not that of the current. Unit 1.
    DensitySpinPolarization over Ratio
}
meaning! {
    /// Two-terminal magnetoresistance, (R_AP − R_P)/R_P. Unit 1.
    Magnetoresistance over Ratio
}
meaning! {
    /// Spin diffusion length λ. Unit m.
    SpinDiffusionLength over Length
}
meaning! {
    /// Thickness of a layer. Unit m.
    Thickness over Length
}
meaning! {
    /// Spin accumulation u = (V↑ − V↓)/2: half the splitting, a voltage. Unit V.
    SpinAccumulation over ElectricPotential
}
meaning! {
    /// Spin splitting Δμ = 2eu: the full splitting of the electrochemical potentials, an energy. Unit J.
    SpinSplitting over Energy
}
meaning! {
    /// Non-local resistance: the amplitude ± about its mean. Unit Ω.
    NonLocalResistance over ElectricalResistance
}
meaning! {
    /// Non-local signal: the swing between the parallel and the antiparallel state, twice the amplitude. Unit Ω.
    NonLocalSignal over ElectricalResistance
}

impl InterfaceSpinResistance {
    /// r_b* = RA/(1 − γ²). Range: |γ| < 1, which the readers of γ guarantee.
    #[must_use]
    pub fn from_resistance_area(ra: ResistanceAreaProduct, gamma: InterfaceAsymmetry) -> Self {
        let g = gamma.si();
        Self::from_si(ra.si() / ((1.0 - g) * (1.0 + g)))
    }

    /// A published AR* is r_b* of a single interface (papers that print 2AR* are halved in the record).
    #[must_use]
    pub const fn from_published(ar_star: ResistanceTimesArea) -> Self {
        Self(ar_star)
    }

    /// RA = r_b*(1 − γ²).
    #[must_use]
    pub fn resistance_area(self, gamma: InterfaceAsymmetry) -> ResistanceAreaProduct {
        let g = gamma.si();
        ResistanceAreaProduct::from_si(self.si() * ((1.0 - g) * (1.0 + g)))
    }

    /// What a device reads when a current of polarization p crosses: r_b*(1 − γp).
    #[must_use]
    pub fn as_measured(
        self,
        gamma: InterfaceAsymmetry,
        polarization: CurrentSpinPolarization,
    ) -> ResistanceAreaProduct {
        ResistanceAreaProduct::from_si(self.si() * (1.0 - gamma.si() * polarization.si()))
    }
}

impl SpinResistance {
    /// r_F = ρ_F λ_F/(1 − β²).
    #[must_use]
    pub fn of_ferromagnet(
        resistivity: ElectricalResistivity,
        length: SpinDiffusionLength,
        beta: BulkAsymmetry,
    ) -> Self {
        let b = beta.si();
        Self::from_si(resistivity.si() * length.si() / ((1.0 - b) * (1.0 + b)))
    }

    /// r_N = ρ_N λ_N.
    #[must_use]
    pub fn of_channel(resistivity: ElectricalResistivity, length: SpinDiffusionLength) -> Self {
        Self::from_si(resistivity.si() * length.si())
    }
}

impl From<SpinAccumulation> for SpinSplitting {
    /// Δμ = 2eu.
    fn from(u: SpinAccumulation) -> Self {
        Self::from_si(2.0 * ELEMENTARY_CHARGE * u.si())
    }
}

impl From<NonLocalResistance> for NonLocalSignal {
    /// Swing = 2 × amplitude.
    fn from(amplitude: NonLocalResistance) -> Self {
        Self::from_si(2.0 * amplitude.si())
    }
}
