//! Text into a tree with places: TOML read so that every key and value knows where it stands, overlays
//! from the command line, and faults as facts.
//!
//! Both the design files and the material records are read through [`reader::Reader`], which collects
//! every fault of a file instead of stopping at the first. Wording is done in `cli/diagnostic.rs` alone.

pub mod fault;
pub mod overlay;
pub mod reader;
pub mod tree;
