//! From arguments to a status.

use super::args::{Cli, Command};
use super::commands;
use super::exit::{Exit, Stop};
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
            let (sink, exit, colour): (&mut dyn Write, Exit, bool) = if error.use_stderr() {
                (stderr, Exit::BadInput, terminal.colour_err)
            } else {
                (stdout, Exit::Met, terminal.colour_out)
            };
            let written = if colour { write!(sink, "{}", text.ansi()) } else { write!(sink, "{text}") };
            return written.map_or(Exit::Met, |()| exit);
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
        Command::Generate { what } => commands::generate::generate(*what, stdout),
    };
    outcome.unwrap_or_else(|stop| {
        let text = render::stop(&stop, terminal.colour_err);
        // If even this cannot be written, the status still says what happened.
        write!(stderr, "{text}").map_or(stop.exit(), |()| stop.exit())
    })
}

impl From<&Stop> for Exit {
    fn from(stop: &Stop) -> Self {
        stop.exit()
    }
}
