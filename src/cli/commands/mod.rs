//! One file a command.

pub mod assess;
pub mod findings;
pub mod materials;
pub mod new;
