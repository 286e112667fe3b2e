//! A small case to begin with.

use crate::cli::exit::{Exit, Stop};
use crate::cli::files;
use std::io::Write;
use std::path::Path;

const CASE: &str = include_str!("../start/case.toml");
const LOADS: &str = include_str!("../start/loads.csv");

/// Writes the case and its table.
pub fn start(dir: &Path, stdout: &mut dyn Write) -> Result<Exit, Stop> {
    files::make_folder(dir)?;
    let (case, loads) = (dir.join("case.toml"), dir.join("loads.csv"));
    if loads.exists() {
        return Err(Stop::File {
            path: loads,
            why: "exists already and is not overwritten; choose another folder".to_owned(),
        });
    }
    files::write_new(&case, CASE.as_bytes())?;
    files::write_new(&loads, LOADS.as_bytes())?;
    writeln!(stdout, "Wrote {} and {}.", case.display(), loads.display())?;
    writeln!(stdout, "Next: chordwall size {}", case.display())?;
    Ok(Exit::Met)
}
