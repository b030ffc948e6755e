//! Width and colour of the two streams.

use std::io::{ErrorKind, IsTerminal as _, Write as _};

use super::exit::Exit;

/// Width where nothing tells.
const DEFAULT_WIDTH: usize = 80;
const NARROWEST: usize = 60;
const WIDEST: usize = 400;

/// Width to lay out for: the option, else `COLUMNS`, else the terminal, else 80.
#[must_use]
pub fn width(option: Option<u16>) -> usize {
    let from_environment = || std::env::var("COLUMNS").ok().and_then(|c| c.parse().ok());
    let from_terminal = || terminal_size::terminal_size().map(|(w, _)| usize::from(w.0));
    option
        .map(usize::from)
        .or_else(from_environment)
        .or_else(from_terminal)
        .unwrap_or(DEFAULT_WIDTH)
        .clamp(NARROWEST, WIDEST)
}

/// Whether diagnostics may be coloured.
#[must_use]
pub fn coloured_diagnostics() -> bool {
    std::env::var_os("NO_COLOR").is_none_or(|v| v.is_empty()) && std::io::stderr().is_terminal()
}

/// Writes lines to standard output.
#[must_use]
pub fn print(lines: &[String], otherwise: Exit) -> Exit {
    let mut text = lines.join("\n");
    if !text.ends_with('\n') {
        text.push('\n');
    }
    print_text(&text, otherwise)
}

/// Writes a text to standard output. A reader that went away is no failure; any other one is told.
#[must_use]
pub fn print_text(text: &str, otherwise: Exit) -> Exit {
    let mut out = std::io::stdout().lock();
    let written = out.write_all(text.as_bytes()).and_then(|()| out.flush());
    match written {
        Ok(()) => otherwise,
        Err(e) if e.kind() == ErrorKind::BrokenPipe => otherwise,
        Err(e) => {
            complain(&format!("  × standard output: cannot be written: {e}\n"));
            Exit::CannotWrite
        }
    }
}

/// Writes a text to standard error; a failure there cannot be told anybody.
pub fn complain(text: &str) {
    let mut err = std::io::stderr().lock();
    if err.write_all(text.as_bytes()).is_ok() {
        let _ = err.flush();
    }
}
