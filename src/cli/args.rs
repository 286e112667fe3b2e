//! What may be typed.

use crate::report::number::Display;
use clap::{Args, Parser, Subcommand, ValueEnum};
use std::path::PathBuf;

/// Hydraulics of dividing-wall columns: shell diameter, wall position, and the vapour split that this geometry will really give.
#[derive(Debug, Parser)]
#[command(
    name = "chordwall",
    version,
    max_term_width = 100,
    after_help = "Examples:\n  chordwall start first                     a small commented case in the folder \"first\"\n  \
chordwall size first/case.toml            shell diameter, wall position, vapour split\n  \
chordwall check first/case.toml --stages  every criterion, every row, each limit with its origin\n  \
chordwall methods fair-1961-capacity      one correlation: equation, source, range, check points\n\n\
Exit status: 0 no criterion is \"not met\"; 1 some criterion is not met; 2 the input cannot be used (nothing is \
written); 3 a correlation has no answer there.\n\nA process sizing aid: local codes and licensed practice decide, and parts that \
contain pressure need a code calculation by a qualified person."
)]
pub struct Cli {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

/// The commands.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Write a small, commented case that runs as it stands
    #[command(after_help = "Example: chordwall start first    writes first/case.toml and first/loads.csv")]
    Start {
        /// Folder to write into; made if it does not exist. Existing files are never overwritten
        #[arg(default_value = ".")]
        dir: PathBuf,
    },
    /// Find shell diameter and wall position
    #[command(after_help = "Examples:\n  chordwall size case.toml\n  chordwall size case.toml --write sized.toml\n  \
chordwall size case.toml --display us --out answer.md\n\n\
A case gives lengths and flows with their units (\"2.60 m\", \"8.5 ft\", \"18.4 t/h\", \"35 mbar\"); \
diameter = \"size\" leaves the diameter to the program.")]
    Size {
        /// The case
        #[command(flatten)]
        answer: AnswerArgs,
        /// Write the case again, comments kept, with the found numbers in place; the loads table must lie beside the new file too
        #[arg(long, value_name = "FILE")]
        write: Option<PathBuf>,
    },
    /// Rate a case against every criterion; what it leaves open is sized first
    #[command(
        after_help = "Examples:\n  chordwall check case.toml\n  chordwall check case.toml --stages --out answer.csv\n  \
chordwall check case.toml --json > answer.json"
    )]
    Check {
        /// The case
        #[command(flatten)]
        answer: AnswerArgs,
    },
    /// List correlations with source and range, and re-run their published check points
    #[command(after_help = "Examples:\n  chordwall methods\n  chordwall methods stichlmair\n  \
chordwall methods --json --correlations mine")]
    Methods {
        /// Show one correlation in full: its id, or the name by which a case selects it
        name: Option<String>,
        /// Print JSON
        #[arg(long)]
        json: bool,
        /// Add the correlations of this folder
        #[arg(long, value_name = "DIR")]
        correlations: Option<PathBuf>,
    },
    /// Print the JSON Schema of an input file
    Schema {
        /// Which file
        #[arg(value_enum, default_value_t = SchemaOf::Case)]
        of: SchemaOf,
    },
    /// Shell completions and the man page
    #[command(hide = true)]
    Generate {
        /// What to print
        #[command(subcommand)]
        what: Generated,
    },
}

/// What every answering command takes.
#[derive(Debug, Args)]
pub struct AnswerArgs {
    /// Case file (TOML); its loads table lies beside it
    pub case: PathBuf,
    /// Print JSON (SI) instead of text
    #[arg(long)]
    pub json: bool,
    /// Also write the answer to a file; the ending says how: .json, .csv or .md
    #[arg(long, value_name = "FILE")]
    pub out: Option<PathBuf>,
    /// Add the correlations and packings of this folder to the built-in ones
    #[arg(long, value_name = "DIR")]
    pub correlations: Option<PathBuf>,
    /// Units that a person sees; JSON and CSV are always SI
    #[arg(long, value_enum, default_value_t = Units::Si)]
    pub display: Units,
    /// Add the rows of every section
    #[arg(long)]
    pub stages: bool,
}

/// Display units.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum Units {
    /// m and mm, mbar, t/h, m/s, liquid loads in m3/(m2 h), weir loads in m3/(h m)
    Si,
    /// ft and in, psi and inH2O/ft, lb/h, ft/s, liquid loads in gpm/ft2, weir loads in gpm/in
    Us,
}

impl From<Units> for Display {
    fn from(units: Units) -> Self {
        match units {
            Units::Si => Self::Si,
            Units::Us => Self::Us,
        }
    }
}

/// Files that have a schema.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum SchemaOf {
    /// The case
    Case,
    /// A bid
    Bid,
}

/// Generated texts.
#[derive(Clone, Debug, PartialEq, Eq, Subcommand)]
pub enum Generated {
    /// Completions for a shell
    Completions {
        /// Which shell
        #[arg(value_enum)]
        shell: Shell,
    },
    /// The man page of the program, or of one command
    Man {
        /// Which command
        command: Option<String>,
    },
}

/// Shells that have completions.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum Shell {
    /// bash
    Bash,
    /// zsh
    Zsh,
    /// fish
    Fish,
    /// PowerShell
    Powershell,
}
