//! `injectance new`.

use crate::cli::arguments::{Beginning, New};
use crate::cli::exit::Exit;
use crate::cli::terminal::print_text;
use crate::designs::template::{STACK, VERTICAL};

/// Runs it.
#[must_use]
pub fn run(a: &New) -> Exit {
    match a.kind {
        Beginning::Vertical => print_text(VERTICAL, Exit::Answered),
        Beginning::Stack => print_text(STACK, Exit::Answered),
    }
}
