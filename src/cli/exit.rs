//! Exit codes, one place.

use std::process::ExitCode;

/// How a run ended.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Exit {
    /// 0: answered, caveats included.
    Answered,
    /// 1: the design fails its goals and `--strict` was given.
    GoalsNotMet,
    /// 2: bad input.
    BadInput,
    /// 3: the answer could not be written.
    CannotWrite,
}

impl From<Exit> for ExitCode {
    fn from(exit: Exit) -> Self {
        Self::from(match exit {
            Exit::Answered => 0,
            Exit::GoalsNotMet => 1,
            Exit::BadInput => 2,
            Exit::CannotWrite => 3,
        })
    }
}
