//! From arguments to a status.

use super::args::{Cli, Command};
use super::commands;
use super::exit::Exit;
use super::output::print;
use super::render;
use clap::Parser;
use std::ffi::OsString;
use std::io::Write;

/// Where the output goes.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Terminal {
    /// True to paint standard output.
    pub colour_out: bool,
    /// True to paint standard error.
    pub colour_err: bool,
}

/// Runs the program.
pub fn run(
    args: impl IntoIterator<Item = OsString>,
    terminal: Terminal,
    stdout: &mut dyn Write,
    stderr: &mut dyn Write,
) -> Exit {
    let cli = match Cli::try_parse_from(args) {
        Ok(cli) => cli,
        Err(error) => {
            let text = error.render();
            // Help and version are answers; everything else is a mistake in what was typed.
            let mistake = error.use_stderr();
            let colour = if mistake { terminal.colour_err } else { terminal.colour_out };
            let text = if colour { text.ansi().to_string() } else { text.to_string() };
            return if mistake {
                // A mistake stays one even if nobody can read what is said about it.
                write!(stderr, "{text}").map_or(Exit::BadInput, |()| Exit::BadInput)
            } else {
                print(stdout, text.as_bytes()).map_or_else(|stop| stop.exit(), |()| Exit::Met)
            };
        }
    };
    let outcome = match &cli.command {
        Command::Start { dir } => commands::start::start(dir, stdout),
        Command::Size { answer, write } => {
            commands::answer::size(answer, write.as_deref(), terminal.colour_out, stdout)
        }
        Command::Check { answer } => commands::answer::check(answer, terminal.colour_out, stdout),
        Command::Methods { name, json, correlations } => {
            commands::methods::methods(name.as_deref(), *json, correlations.as_deref(), stdout)
        }
        Command::Schema { of } => commands::schema::schema(*of, stdout),
        Command::Generate { what } => commands::generate::generate(what, stdout),
    };
    outcome.unwrap_or_else(|stop| {
        let text = render::stop(&stop, terminal.colour_err);
        // If even this cannot be written, the status still says what happened.
        write!(stderr, "{text}").map_or(stop.exit(), |()| stop.exit())
    })
}
