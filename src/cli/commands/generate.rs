//! Shell completions and the man page.

use crate::cli::args::{Cli, Generated};
use crate::cli::exit::{Exit, Stop};
use clap::CommandFactory;
use clap_complete::{Shell, generate as complete};
use std::io::Write;

/// Prints what was asked for.
pub fn generate(what: Generated, stdout: &mut dyn Write) -> Result<Exit, Stop> {
    let mut command = Cli::command();
    let shell = match what {
        Generated::Bash => Shell::Bash,
        Generated::Zsh => Shell::Zsh,
        Generated::Fish => Shell::Fish,
        Generated::Powershell => Shell::PowerShell,
        Generated::Man => {
            clap_mangen::Man::new(command).render(stdout)?;
            return Ok(Exit::Met);
        }
    };
    // The generator panics where it cannot write, so it writes to memory.
    let mut text = Vec::new();
    complete(shell, &mut command, "chordwall", &mut text);
    stdout.write_all(&text)?;
    Ok(Exit::Met)
}
