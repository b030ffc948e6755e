//! Devices: a design joined with records and laws. A device is an input table, one row per number the
//! answer depends on, and a pure evaluator from one row of values to outcomes.

pub mod inputs;
pub mod provenance;
mod resolve;
pub mod vertical;

pub use resolve::resolve;
