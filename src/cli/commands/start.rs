//! A small case to begin with.

use crate::cli::exit::{Exit, Stop};
use crate::cli::files::{self, Staged};
use crate::cli::output::print;
use std::io::Write;
use std::path::Path;

const CASE: &str = include_str!("../start/case.toml");
const LOADS: &str = include_str!("../start/loads.csv");

/// Writes the case and its table, both or none.
pub fn start(dir: &Path, stdout: &mut dyn Write) -> Result<Exit, Stop> {
    files::make_folder(dir)?;
    let (case, loads) = (dir.join("case.toml"), dir.join("loads.csv"));
    let mut staged = Staged::default();
    staged.add(&case, CASE.as_bytes())?;
    staged.add(&loads, LOADS.as_bytes())?;
    staged.commit_new()?;
    let text = format!("Wrote {} and {}.\nNext: chordwall size {0}\n", case.display(), loads.display());
    print(stdout, text.as_bytes())?;
    Ok(Exit::Met)
}
