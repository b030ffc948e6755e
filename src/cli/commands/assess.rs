//! `injectance assess`.

use crate::cli::arguments::{Assess, Format, SpacingWord};
use crate::cli::diagnostic::refuse;
use crate::cli::exit::Exit;
use crate::cli::files::{design_tree, library};
use crate::cli::terminal::{print, print_text, width};
use crate::designs::design::read_design;
use crate::designs::variation::{Spacing, read_variation};
use crate::devices::resolve;
use crate::documents::fault::{Fault, Wrong};
use crate::documents::reader::Faults;
use crate::presentation::{full, machine, summary, varied};
use crate::studies::assess::assess;
use crate::studies::vary::vary;

/// Runs it.
#[must_use]
pub fn run(a: &Assess) -> Exit {
    let faults = Faults::default();
    if a.vary.is_none() && a.format == Format::Csv {
        faults.push(option_fault(
            "--format csv goes with --vary",
            "use `--format json` for a single answer",
        ));
    }
    if a.vary.is_some() && a.full {
        faults.push(option_fault(
            "--full and --vary exclude each other",
            "drop one of them",
        ));
    }
    if a.vary.is_some() && a.strict {
        faults.push(option_fault(
            "--strict and --vary exclude each other",
            "drop one of them",
        ));
    }
    let library = library(&a.folders.materials, &faults);
    let tree = design_tree(&a.design, &a.set, &faults);
    let (Some(tree), 0) = (tree, faults.count()) else {
        return refuse(&faults.take());
    };
    if let Some(text) = &a.vary {
        let spacing = a.spacing.map(|s| match s {
            SpacingWord::Log => Spacing::Logarithmic,
            SpacingWord::Linear => Spacing::Linear,
        });
        let variation = match read_variation(text, a.points, spacing) {
            Ok(variation) => variation,
            Err(fault) => return refuse(&[fault]),
        };
        let Some(result) = vary(&tree, variation, &library, &faults) else {
            return refuse(&faults.take());
        };
        return match a.format {
            Format::Table => print(&varied::lines(&result, width(a.width)), Exit::Answered),
            Format::Json => print_json(&machine::varied(&result), Exit::Answered),
            Format::Csv => match varied::csv(&result) {
                Ok(text) => print_text(&text, Exit::Answered),
                Err(_) => Exit::CannotWrite,
            },
        };
    }
    let design = read_design(&tree, &library, &faults);
    let (Some(design), 0) = (design, faults.count()) else {
        return refuse(&faults.take());
    };
    let Some(device) = resolve(&design, &library, &faults) else {
        return refuse(&faults.take());
    };
    let assessment = match assess(&design, device, &library) {
        Ok(assessment) => assessment,
        Err(why) => {
            return refuse(&[Fault {
                place: Some(design.place.clone()),
                field: String::new(),
                wrong: Wrong::Conflict {
                    reason: format!("the stack cannot be solved: {why:?}"),
                    help: None,
                },
            }]);
        }
    };
    let exit = if a.strict && assessment.goals.iter().any(|g| !g.met) {
        Exit::GoalsNotMet
    } else {
        Exit::Answered
    };
    match a.format {
        Format::Json => print_json(&machine::assessment(&assessment), exit),
        _ if a.full => print(&full::full(&assessment, width(a.width)), exit),
        _ => print(&summary::summary(&assessment, width(a.width)), exit),
    }
}

fn option_fault(reason: &str, help: &str) -> Fault {
    Fault {
        place: None,
        field: String::new(),
        wrong: Wrong::Conflict {
            reason: reason.to_owned(),
            help: Some(help.to_owned()),
        },
    }
}

fn print_json(value: &serde_json::Value, exit: Exit) -> Exit {
    match serde_json::to_string_pretty(value) {
        Ok(mut text) => {
            text.push('\n');
            print_text(&text, exit)
        }
        Err(_) => Exit::CannotWrite,
    }
}
