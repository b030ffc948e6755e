//! Constants of nature, CODATA 2022, in coherent SI units. The only numbers of nature in code.
//!
//! Source: Mohr, Newell, Taylor, Tiesinga, CODATA recommended values of the fundamental physical
//! constants 2022. The elementary charge, the Planck and the Boltzmann constant are exact by the
//! definition of the SI (SI Brochure, 9th edition, 2019). Checked against a general reference library in
//! tests/suite/outside.

/// Elementary charge, C. Exact.
pub const ELEMENTARY_CHARGE: f64 = 1.602_176_634e-19;
/// Planck constant, J s. Exact.
pub const PLANCK: f64 = 6.626_070_15e-34;
/// Boltzmann constant, J/K. Exact.
pub const BOLTZMANN: f64 = 1.380_649e-23;
/// Bohr magneton, J/T. Relative uncertainty 3.1e-10.
pub const BOHR_MAGNETON: f64 = 9.274_010_065_7e-24;
/// Electron mass, kg. Relative uncertainty 3.1e-10.
pub const ELECTRON_MASS: f64 = 9.109_383_713_9e-31;
/// Vacuum electric permittivity, F/m. Relative uncertainty 1.6e-10.
pub const VACUUM_PERMITTIVITY: f64 = 8.854_187_818_8e-12;
/// Vacuum magnetic permeability, T m/A. Relative uncertainty 1.6e-10.
pub const VACUUM_PERMEABILITY: f64 = 1.256_637_061_27e-6;
