//! `injectance`: see the library for what it answers.

use std::process::ExitCode;

fn main() -> ExitCode {
    injectance::cli::run().into()
}
