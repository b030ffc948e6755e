//! Designs: the files a user writes, read into checked structs that keep every place. Nothing is
//! computed and nothing printed here.

pub mod design;
pub mod goals;
pub mod layers;
pub mod template;
pub mod variation;
