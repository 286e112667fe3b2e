//! JSON Schema of the input files.
use crate::cli::args::SchemaOf;
use crate::cli::exit::{Exit, Stop};
use std::io::Write;
/// Prints one schema.
pub fn schema(_of: SchemaOf, _stdout: &mut dyn Write) -> Result<Exit, Stop> {
    Err(Stop::Usage("not yet".to_owned()))
}
