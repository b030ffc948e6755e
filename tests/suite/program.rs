//! The program run as a user runs it.

#![allow(clippy::unwrap_used)]

use std::path::Path;

use assert_cmd::Command;
use assert_cmd::cargo::cargo_bin_cmd;

/// What a run left behind.
pub struct Answer {
    pub code: Option<i32>,
    pub stdout: String,
    pub stderr: String,
}

/// The program in a folder, as if the terminal had so many columns.
pub fn program(folder: &Path, columns: &str) -> Command {
    let mut command = cargo_bin_cmd!("injectance");
    command.current_dir(folder).env("COLUMNS", columns);
    command
}

/// Runs it with arguments and standard input.
pub fn run(mut command: Command, arguments: &[&str], stdin: &[u8]) -> Answer {
    let output = command.args(arguments).write_stdin(stdin).output().unwrap();
    Answer {
        code: output.status.code(),
        stdout: String::from_utf8(output.stdout).unwrap(),
        stderr: String::from_utf8(output.stderr).unwrap(),
    }
}
