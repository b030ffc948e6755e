//! Physics as pure functions. One file a phenomenon; every public item states its law, symbols, units,
//! range and source. Models see no records and no files.

pub mod ladder;
mod sweep;
pub mod validity;
