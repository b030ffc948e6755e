//! Faults as framed source with the value underlined. The only place that words and renders them.

use std::fmt;

use miette::{
    Diagnostic, GraphicalReportHandler, GraphicalTheme, LabeledSpan, NamedSource, SourceCode,
};

use crate::documents::fault::{Fault, Wrong};
use crate::quantities::text::ReadFaultKind;

use super::exit::Exit;
use super::terminal::{coloured_diagnostics, complain, width};

struct Report {
    message: String,
    help: Option<String>,
    label: Option<LabeledSpan>,
    source: Option<NamedSource<String>>,
}

impl fmt::Debug for Report {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.message)
    }
}

impl fmt::Display for Report {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.message)
    }
}

impl std::error::Error for Report {}

impl Diagnostic for Report {
    fn help<'a>(&'a self) -> Option<Box<dyn fmt::Display + 'a>> {
        self.help
            .as_ref()
            .map(|h| Box::new(h) as Box<dyn fmt::Display>)
    }

    fn source_code(&self) -> Option<&dyn SourceCode> {
        self.source.as_ref().map(|s| s as &dyn SourceCode)
    }

    fn labels(&self) -> Option<Box<dyn Iterator<Item = LabeledSpan> + '_>> {
        self.label
            .clone()
            .map(|l| Box::new(std::iter::once(l)) as Box<dyn Iterator<Item = LabeledSpan>>)
    }
}

fn listed(words: &[String]) -> String {
    words.join(", ")
}

/// Message, label under the value, help.
fn words(wrong: &Wrong) -> (String, String, Option<String>) {
    match wrong {
        Wrong::Syntax { reason } => {
            let help = reason.contains("must be quoted").then(|| {
                "texts stand in quotes, and so does a number with its unit: `thickness = \"40 nm\"`".to_owned()
            });
            ("this is not TOML".to_owned(), reason.clone(), help)
        }
        Wrong::File { reason, help } => (reason.clone(), String::new(), help.clone()),
        Wrong::UnknownKey {
            found,
            allowed,
            nearest,
        } => (
            format!("unknown key `{found}`"),
            "not known here".to_owned(),
            Some(match nearest {
                Some(n) => format!("did you mean `{n}`?"),
                None => format!("keys here: {}", listed(allowed)),
            }),
        ),
        Wrong::Missing { key, help } => (
            format!("`{key}` is missing"),
            "here".to_owned(),
            Some(help.clone()),
        ),
        Wrong::Type { found, expected } => {
            let help = match *expected {
                "a table" => Some(
                    "a table is written `name = { key = \"…\" }`, or `[name]` with its keys below",
                ),
                "a list of tables" => Some("write `[[name]]` before each entry"),
                "a text with number and unit" => {
                    Some("write number and unit in quotes, as in \"300 K\"")
                }
                "a list of texts" => Some("write `[\"…\", \"…\"]`"),
                _ => None,
            };
            (
                format!("expected {expected}, found {found}"),
                format!("this is {found}"),
                help.map(str::to_owned),
            )
        }
        Wrong::UnknownWord {
            what,
            found,
            allowed,
            nearest,
        } => {
            let help = match (nearest, allowed.is_empty()) {
                (Some(n), true) => Some(format!("did you mean `{n}`?")),
                (Some(n), false) => Some(format!("did you mean `{n}`? Known: {}", listed(allowed))),
                (None, false) => Some(format!("known: {}", listed(allowed))),
                (None, true) => None,
            };
            (
                format!("unknown {what} `{found}`"),
                format!("no such {what}"),
                help,
            )
        }
        Wrong::Quantity { fault, example } => {
            let label = match (&fault.at, &fault.what) {
                (
                    Some(_),
                    ReadFaultKind::Unit(_)
                    | ReadFaultKind::Dimension { .. }
                    | ReadFaultKind::NotASpelling { .. },
                ) => "this unit",
                (Some(_), ReadFaultKind::Spread { .. }) => "here",
                _ => "this value",
            };
            let help = fault
                .help()
                .unwrap_or_else(|| format!("write it like \"{example}\""));
            (fault.message(), label.to_owned(), Some(help))
        }
        Wrong::Conflict { reason, help } => (reason.clone(), "here".to_owned(), help.clone()),
        Wrong::NotInLibrary { what, exists, help } => {
            let near = if exists.is_empty() {
                String::new()
            } else {
                format!(". Records exist for: {}", listed(exists))
            };
            (
                format!("the library has no {what}"),
                "needed here".to_owned(),
                Some(format!("{help}{near}")),
            )
        }
    }
}

fn report(fault: &Fault) -> Report {
    let (message, label, help) = words(&fault.wrong);
    let place = fault.place.as_ref().filter(|p| !p.source.text.is_empty());
    // A fault of a whole file (a missing table) frames nothing: the file is named instead.
    let whole = place.is_some_and(|p| p.span.start == 0 && p.span.end >= p.source.text.len())
        && !fault
            .place
            .as_ref()
            .is_some_and(|p| p.source.name.starts_with("--"));
    let framed = place.filter(|_| !whole);
    let name = fault.place.as_ref().map(|p| p.source.name.clone());
    let message = match (&name, framed.is_some(), fault.field.is_empty()) {
        (_, true, true) | (None, false, true) => message,
        (_, true, false) | (None, false, false) => format!("{}: {message}", fault.field),
        (Some(name), false, true) => format!("{name}: {message}"),
        (Some(name), false, false) => format!("{name}: {}: {message}", fault.field),
    };
    Report {
        message,
        help,
        label: framed.map(|p| {
            let text = (!label.is_empty()).then_some(label);
            LabeledSpan::new(text, p.span.start, first_line(&p.source.text, &p.span))
        }),
        source: framed.map(|p| NamedSource::new(p.source.name.clone(), p.source.text.clone())),
    }
}

/// Length of the range, cut at the end of its first line: a table is underlined at its head.
fn first_line(text: &str, span: &std::ops::Range<usize>) -> usize {
    let inside = text.get(span.clone()).unwrap_or("");
    inside
        .lines()
        .next()
        .map_or(0, |l| l.trim_end().len())
        .max(usize::from(!inside.is_empty()))
}

/// Faults as text.
#[must_use]
pub fn render(faults: &[Fault], width: usize, coloured: bool) -> String {
    let theme = if coloured {
        GraphicalTheme::unicode()
    } else {
        GraphicalTheme::unicode_nocolor()
    };
    let handler = GraphicalReportHandler::new_themed(theme)
        .with_width(width)
        .with_links(false)
        .with_break_words(false)
        .with_word_splitter(textwrap::WordSplitter::NoHyphenation)
        .with_context_lines(1);
    let mut text = String::new();
    for fault in faults {
        if handler.render_report(&mut text, &report(fault)).is_err() {
            text.push_str(&report(fault).message);
        }
        if !text.ends_with('\n') {
            text.push('\n');
        }
    }
    let count = faults.len();
    if count > 1 {
        text.push_str(&format!("\n{count} faults; nothing was computed.\n"));
    }
    text
}

/// Tells the faults on standard error.
#[must_use]
pub fn refuse(faults: &[Fault]) -> Exit {
    complain(&render(
        faults,
        width(None).max(100),
        coloured_diagnostics(),
    ));
    Exit::BadInput
}
