//! The program: arguments in, exit status out.

use anstream::{AutoStream, ColorChoice};
use chordwall::cli::{Terminal, run};
use std::io::{stderr, stdout};
use std::process::ExitCode;

fn main() -> ExitCode {
    let terminal = Terminal {
        colour_out: AutoStream::choice(&stdout()) != ColorChoice::Never,
        colour_err: AutoStream::choice(&stderr()) != ColorChoice::Never,
    };
    let exit = run(std::env::args_os(), terminal, &mut stdout().lock(), &mut stderr().lock());
    ExitCode::from(exit as u8)
}
