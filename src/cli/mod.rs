//! The command line: arguments, files, exit codes, diagnostics. No formulas and no constants.

mod arguments;
mod commands;
mod diagnostic;
mod exit;
mod files;
mod terminal;

pub use exit::Exit;

use clap::Parser as _;
use clap::error::ErrorKind;

use arguments::{Arguments, Command, MaterialsCommand};

/// Runs the program with the arguments of the process.
#[must_use]
pub fn run() -> Exit {
    let arguments = match Arguments::try_parse() {
        Ok(arguments) => arguments,
        Err(error) => {
            let asked = matches!(
                error.kind(),
                ErrorKind::DisplayHelp
                    | ErrorKind::DisplayVersion
                    | ErrorKind::DisplayHelpOnMissingArgumentOrSubcommand
            );
            let text = error.render().to_string();
            if asked {
                return terminal::print_text(&text, Exit::Answered);
            }
            terminal::complain(&text);
            return Exit::BadInput;
        }
    };
    match arguments.command {
        Command::Assess(a) => commands::assess::run(&a),
        Command::Materials { command } => match command {
            MaterialsCommand::List(a) => commands::materials::list(&a),
            MaterialsCommand::Show(a) => commands::materials::show(&a),
            MaterialsCommand::Check(a) => commands::materials::check(&a),
        },
        Command::New(a) => commands::new::run(&a),
        Command::Findings(a) => commands::findings::run(&a),
    }
}
