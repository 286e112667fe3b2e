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
    after_help = "Exit status: 0 no criterion is \"not met\"; 1 some criterion is not met; 2 the input cannot be used (nothing is \
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
    Start {
        /// Folder to write into; made if it does not exist. Existing files are never overwritten
        #[arg(default_value = ".")]
        dir: PathBuf,
    },
    /// Find shell diameter and wall position
    Size {
        /// The case
        #[command(flatten)]
        answer: AnswerArgs,
        /// Write the case again, comments kept, with the found numbers in place
        #[arg(long, value_name = "FILE")]
        write: Option<PathBuf>,
    },
    /// Rate a case against every criterion; what it leaves open is sized first
    Check {
        /// The case
        #[command(flatten)]
        answer: AnswerArgs,
    },
    /// List correlations with source and range, and re-run their published check points
    Methods {
        /// Show one correlation in full
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
        #[arg(value_enum)]
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
    /// m, mbar, t/h
    Si,
    /// ft, psi, gpm
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
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum Generated {
    /// Completions for bash
    Bash,
    /// Completions for zsh
    Zsh,
    /// Completions for fish
    Fish,
    /// Completions for PowerShell
    Powershell,
    /// The man page
    Man,
}
