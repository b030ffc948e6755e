//! Results as text: the short answer, the full answer, tables, CSV, JSON. Computes no physics and chooses
//! no records.

pub mod full;
pub mod lines;
pub mod machine;
pub mod numbers;
pub mod records;
pub mod summary;
pub mod varied;
pub mod wording;
