//! `injectance findings`.

use crate::cli::arguments::Findings;
use crate::cli::exit::Exit;
use crate::cli::terminal::{print, width};
use crate::presentation::full::{keep_whole, table, table_lines};
use crate::presentation::wording::{rule_text, severity_word};
use crate::studies::findings::RULES;

/// Runs it.
#[must_use]
pub fn run(a: &Findings) -> Exit {
    let mut t = table(&["rule", "severity", "speaks up when"], width(a.width), &[]);
    for rule in RULES {
        t.add_row(vec![
            rule.name,
            severity_word(rule.severity),
            rule_text(rule.name),
        ]);
    }
    keep_whole(&mut t, &[0, 1]);
    print(&table_lines(&t), Exit::Answered)
}
