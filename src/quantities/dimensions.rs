//! Dimensions: uom's own quantities, the ones this field needs beside them, and the bridge from a
//! type to its exponents at run time.
//!
//! uom cannot be extended with new quantities from another crate, so the quantities it lacks are type
//! aliases over its `Quantity` with the exponents spelled out (order: length, mass, time, current,
//! temperature, amount, luminous intensity).

use std::marker::PhantomData;

use uom::si::{ISQ, Quantity, SI};
use uom::typenum::{Integer, N1, N2, N3, N4, P1, P2, P3, P4, Z0};

/// Exponents of length, mass, time, current, temperature, amount of substance, luminous intensity.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Hash)]
pub struct Dimension(pub [i8; 7]);

impl Dimension {
    /// A pure number.
    pub const NONE: Self = Self([0; 7]);

    /// The dimension of a product.
    #[must_use]
    pub fn times(self, other: Self) -> Self {
        let mut sum = self.0;
        for (a, b) in sum.iter_mut().zip(other.0) {
            *a += b;
        }
        Self(sum)
    }

    /// The dimension raised to an integer power.
    #[must_use]
    pub fn power(self, exponent: i8) -> Self {
        Self(self.0.map(|a| a * exponent))
    }

    /// SI base units spelled out, for example `kg m⁴ s⁻³ A⁻²`; `1` for a pure number.
    #[must_use]
    pub fn spelled(self) -> String {
        const ORDER: [(usize, &str); 7] = [
            (1, "kg"),
            (0, "m"),
            (2, "s"),
            (3, "A"),
            (4, "K"),
            (5, "mol"),
            (6, "cd"),
        ];
        let parts: Vec<String> = ORDER
            .iter()
            .filter(|(i, _)| self.0[*i] != 0)
            .map(|(i, symbol)| match self.0[*i] {
                1 => (*symbol).to_owned(),
                n => format!("{symbol}{}", superscript(n)),
            })
            .collect();
        if parts.is_empty() {
            "1".to_owned()
        } else {
            parts.join(" ")
        }
    }
}

/// An integer as Unicode superscripts.
#[must_use]
pub fn superscript(n: i8) -> String {
    n.to_string()
        .chars()
        .map(|c| match c {
            '-' => '⁻',
            '1' => '¹',
            '2' => '²',
            '3' => '³',
            d => char::from_u32(0x2070 + d.to_digit(10).unwrap_or(0)).unwrap_or(d),
        })
        .collect()
}

/// A quantity type whose dimension can be asked for and that can be built from, and read back as, a
/// number in coherent SI units. The only bridge between typed quantities and bare `f64`.
pub trait Measured: Copy {
    /// Dimension of the type.
    const DIMENSION: Dimension;
    /// Wraps a number given in coherent SI units.
    fn from_si(value: f64) -> Self;
    /// The number in coherent SI units.
    fn si(self) -> f64;
}

impl<L, M, T, I, Th, N, J, K> Measured for Quantity<ISQ<L, M, T, I, Th, N, J, K>, SI<f64>, f64>
where
    L: Integer,
    M: Integer,
    T: Integer,
    I: Integer,
    Th: Integer,
    N: Integer,
    J: Integer,
    K: ?Sized,
{
    const DIMENSION: Dimension = Dimension([L::I8, M::I8, T::I8, I::I8, Th::I8, N::I8, J::I8]);

    fn from_si(value: f64) -> Self {
        Self {
            dimension: PhantomData,
            units: PhantomData,
            value,
        }
    }

    fn si(self) -> f64 {
        self.value
    }
}

/// Resistance times area, Ω·m². Also the dimension of every areal spin resistance; the meanings are
/// kept apart as types in [`super::meanings`].
pub type ResistanceTimesArea = Quantity<ISQ<P4, P1, N3, N2, Z0, Z0, Z0>, SI<f64>, f64>;
/// Conductance per area, S/m².
pub type ArealConductance = Quantity<ISQ<N4, N1, P3, P2, Z0, Z0, Z0>, SI<f64>, f64>;
/// Frequency per magnetic flux density, Hz/T.
pub type GyromagneticRatio = Quantity<ISQ<Z0, N1, P1, P1, Z0, Z0, Z0>, SI<f64>, f64>;

pub use uom::si::f64::{
    DiffusionCoefficient, ElectricCurrentDensity, ElectricPotential, ElectricalConductivity,
    ElectricalMobility, ElectricalResistance, ElectricalResistivity, Energy, Length,
    MagneticFluxDensity, Ratio, ThermodynamicTemperature, Time, VolumetricNumberDensity,
};
