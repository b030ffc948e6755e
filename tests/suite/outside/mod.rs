//! Checks against numbers that this program had no part in: boundary-value solutions with 60 digits and
//! more, constants and element data of general reference packages. The files and the scripts that write
//! them stand in tests/reference.

mod constants;
mod elements;
mod stacks;
