//! Materials and interfaces: records with unit, spread, temperature, conditions and source; the library
//! they stand in; and the rules by which a record is chosen. No formulas, no silent defaults.

pub mod check;
pub mod choose;
mod entry;
mod file;
pub mod library;
pub mod property;
pub mod record;
pub mod references;
