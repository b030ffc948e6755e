//! Arguments as typed.

use std::path::PathBuf;

use clap::{Args, Parser, Subcommand, ValueEnum};

/// How much spin polarization crosses from a ferromagnet into a semiconductor, why, and what would fix it.
///
/// Reads a design (a TOML file that names layers, barriers and goals), takes what it does not state from a
/// library of published values, and answers with units, caveats and sources.
#[derive(Debug, Parser)]
#[command(
    name = "injectance",
    version,
    arg_required_else_help = true,
    after_help = "Begin with `injectance new vertical > first.toml`, then `injectance assess first.toml`.\n\nExit codes: 0 answered, 1 a goal is not met and --strict was given, 2 bad input, 3 cannot write."
)]
pub struct Arguments {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

/// Commands.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Assess a design: injected polarization, why, the window of RA, what would fix it
    Assess(Assess),
    /// Look into the library of materials and interfaces
    Materials {
        /// What to do.
        #[command(subcommand)]
        command: MaterialsCommand,
    },
    /// Print a commented design to begin with
    New(New),
    /// List every rule that can speak up in an assessment
    Findings(Findings),
}

/// How an answer is written.
#[derive(Clone, Copy, PartialEq, Eq, Debug, ValueEnum)]
pub enum Format {
    /// For people
    Table,
    /// For programs: SI units, every number with its status and records
    Json,
    /// Only with --vary: SI units, one row a point
    Csv,
}

/// How points are spaced.
#[derive(Clone, Copy, PartialEq, Eq, Debug, ValueEnum)]
pub enum SpacingWord {
    /// Equal factors
    Log,
    /// Equal steps
    Linear,
}

/// Folders of records.
#[derive(Debug, Args)]
pub struct Folders {
    /// Lay a folder of your own records over the library, by id (repeatable)
    #[arg(long = "materials", value_name = "DIR")]
    pub materials: Vec<PathBuf>,
}

/// `assess`.
#[derive(Debug, Args)]
#[command(
    after_help = "Examples:\n  injectance assess stack.toml\n  injectance assess stack.toml --set channel.thickness=\"40 nm\" --full\n  injectance assess stack.toml --vary injector.barrier.resistance_area=\"1 .. 1e4 Ω µm²\" --points 9"
)]
pub struct Assess {
    /// Design file; `-` reads standard input
    #[arg(value_name = "DESIGN")]
    pub design: PathBuf,
    /// Put a value in place of the design's, for example channel.thickness="40 nm" (repeatable)
    #[arg(long = "set", value_name = "PATH=VALUE")]
    pub set: Vec<String>,
    /// Follow the answer over a range, for example injector.barrier.resistance_area="1 .. 1e4 Ω µm²"
    #[arg(long, value_name = "PATH=RANGE")]
    pub vary: Option<String>,
    /// Points of --vary
    #[arg(long, value_name = "N", default_value_t = 13, requires = "vary")]
    pub points: usize,
    /// Spacing of --vary [default: log over a decade or more, else linear]
    #[arg(long, value_name = "HOW", requires = "vary")]
    pub spacing: Option<SpacingWord>,
    /// Print everything: inputs with sources, the stack, spin resistances, potentials, all findings
    #[arg(long)]
    pub full: bool,
    /// Exit with 1 when a goal is not met
    #[arg(long)]
    pub strict: bool,
    /// How the answer is written
    #[arg(long, value_enum, default_value_t = Format::Table)]
    pub format: Format,
    /// Width in characters, 60 to 400 [default: COLUMNS, the terminal, or 80]
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(u16).range(60..=400))]
    pub width: Option<u16>,
    /// Folders.
    #[command(flatten)]
    pub folders: Folders,
}

/// `materials …`.
#[derive(Debug, Subcommand)]
pub enum MaterialsCommand {
    /// List materials and interfaces
    List(List),
    /// Show every record of a material or an interface
    Show(Show),
    /// Check files of records; without a path, the shipped library
    Check(Check),
}

/// `materials list`.
#[derive(Debug, Args)]
pub struct List {
    /// Width in characters, 60 to 400
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(u16).range(60..=400))]
    pub width: Option<u16>,
    /// Folders.
    #[command(flatten)]
    pub folders: Folders,
}

/// `materials show`.
#[derive(Debug, Args)]
pub struct Show {
    /// Name or alias of a material, or name of an interface
    #[arg(value_name = "NAME")]
    pub name: String,
    /// Width in characters, 60 to 400
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(u16).range(60..=400))]
    pub width: Option<u16>,
    /// Folders.
    #[command(flatten)]
    pub folders: Folders,
}

/// `materials check`.
#[derive(Debug, Args)]
pub struct Check {
    /// Files or folders of records
    #[arg(value_name = "PATH")]
    pub paths: Vec<PathBuf>,
}

/// Designs that can be begun.
#[derive(Clone, Copy, PartialEq, Eq, Debug, ValueEnum)]
pub enum Beginning {
    /// Injector, channel and perhaps detector: the current crosses the layers one after the other
    Vertical,
    /// Any list of layers, written out
    Stack,
}

/// `new`.
#[derive(Debug, Args)]
pub struct New {
    /// Kind of design
    #[arg(value_enum)]
    pub kind: Beginning,
}

/// `findings`.
#[derive(Debug, Args)]
pub struct Findings {
    /// Width in characters, 60 to 400
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(u16).range(60..=400))]
    pub width: Option<u16>,
}
