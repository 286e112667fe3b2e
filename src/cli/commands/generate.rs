//! Shell completions and the man pages.

use crate::cli::args::{Cli, Generated, Shell};
use crate::cli::exit::{Exit, Stop};
use crate::cli::output::print;
use crate::report::text::inert;
use clap::{Command, CommandFactory};
use clap_complete::{Shell as Completed, generate as complete};
use std::io::Write;

/// Prints what was asked for.
pub fn generate(what: &Generated, stdout: &mut dyn Write) -> Result<Exit, Stop> {
    let mut command = Cli::command();
    // The generators panic or stop halfway where they cannot write, so they write to memory.
    let mut text = Vec::new();
    match what {
        Generated::Completions { shell } => {
            let shell = match shell {
                Shell::Bash => Completed::Bash,
                Shell::Zsh => Completed::Zsh,
                Shell::Fish => Completed::Fish,
                Shell::Powershell => Completed::PowerShell,
            };
            complete(shell, &mut command, "chordwall", &mut text);
        }
        Generated::Man { command: name } => {
            let page = page(command, name.as_deref())?;
            clap_mangen::Man::new(page).render(&mut text).map_err(|e| Stop::Usage(e.to_string()))?;
        }
    }
    print(stdout, &text)?;
    Ok(Exit::Met)
}

/// The command of a page; building the program names a page of one command after both.
fn page(mut program: Command, name: Option<&str>) -> Result<Command, Stop> {
    let Some(name) = name else { return Ok(program) };
    program.build();
    let unknown = || Stop::Usage(format!("there is no command \"{}\"; \"chordwall --help\" lists all", inert(name)));
    let found = program.find_subcommand(name).ok_or_else(unknown)?;
    Ok(found.clone().version(env!("CARGO_PKG_VERSION")))
}
