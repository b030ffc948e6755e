//! Bare `f64` mathematics: no units, no files, no words of physics.

pub mod hyperbolic;
pub mod root;
