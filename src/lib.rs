//! placeholder
pub mod numerics;
pub mod quantities;
pub mod documents;
pub mod materials;
pub mod models;
pub mod designs;
pub mod devices;
pub mod studies;
pub mod presentation;
pub mod cli;
