//! JSON Schema of the input files.

use crate::cli::args::SchemaOf;
use crate::cli::exit::{Exit, Stop};
use crate::cli::output::print;
use crate::input::{bid_schema, case_schema};
use crate::report::json;
use std::io::Write;

/// Prints one schema.
pub fn schema(of: SchemaOf, stdout: &mut dyn Write) -> Result<Exit, Stop> {
    let schema = match of {
        SchemaOf::Case => case_schema(),
        SchemaOf::Bid => bid_schema(),
    };
    print(stdout, &json::bytes(&schema).map_err(|e| Stop::Usage(e.to_string()))?)?;
    Ok(Exit::Met)
}
