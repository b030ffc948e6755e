//! Questions asked of a device, each answered as plain data. Nothing is printed here and no sentence is
//! worded: findings are facts with the numbers inside.

pub mod assess;
pub mod findings;
pub mod mismatch;
mod notice;
pub mod shares;
pub mod target;
pub mod vary;
pub mod window;
