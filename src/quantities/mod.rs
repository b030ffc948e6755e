//! Quantities: units in types, kinds with ranges, reading and printing as the trade writes.
//!
//! Touches no file and knows no physics beyond what a unit is.

pub mod constants;
pub mod dimensions;
pub mod fault;
mod form;
pub mod kind;
mod ladder;
pub mod meanings;
mod number;
pub mod print;
pub mod spread;
mod symbols;
pub mod text;
pub mod unit;
pub mod unit_fault;
