//! Correlation files: TOML text to records and packings.
//!
//! The format is described in `correlations/README.md`. All errors of a file come in one go. Check points stand last in a
//! file and are read only when asked for, because a run needs coefficients and not proofs.

mod packing_table;
mod published_unit;
mod reader;
mod record;

use crate::engine::correlation::catalogue::PackingEntry;
use crate::engine::correlation::record::Record;
use std::fmt;

pub(crate) use packing_table::split_table;

/// What one file holds.
#[derive(Clone, Debug, PartialEq)]
pub enum Content {
    /// A correlation.
    Record(Box<Record>),
    /// Packings.
    Packings(Vec<PackingEntry>),
}

/// One thing wrong in a file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct FileProblem {
    /// Line, from 1.
    pub line: usize,
    /// The text at fault.
    pub offending: String,
    /// Why it is wrong.
    pub why: String,
    /// What would be right.
    pub right: String,
}

/// Everything wrong in one file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct CorrelationFileError {
    /// Name of the file.
    pub file: String,
    /// At least one.
    pub problems: Vec<FileProblem>,
}

impl fmt::Display for CorrelationFileError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (place, problem) in self.problems.iter().enumerate() {
            if place > 0 {
                writeln!(f)?;
            }
            write!(f, "{}:{}: `{}`: {}", self.file, problem.line, problem.offending, problem.why)?;
            if !problem.right.is_empty() {
                write!(f, "; {}", problem.right)?;
            }
        }
        Ok(())
    }
}

impl std::error::Error for CorrelationFileError {}

/// Reads a file whole, with its check points. `stem` is the file's name without its ending, which must be the id.
///
/// # Errors
/// [`CorrelationFileError`] with everything that is wrong in the file.
pub fn read(file: &str, stem: &str, text: &str) -> Result<Content, CorrelationFileError> {
    if is_packing_table(text) {
        return packing_table::read(file, stem, text).map(Content::Packings);
    }
    record::read(file, stem, text, true).map(|record| Content::Record(Box::new(record)))
}

/// Reads a correlation without its check points.
///
/// # Errors
/// [`CorrelationFileError`] with everything that is wrong in that part of the file.
pub fn read_head(file: &str, stem: &str, text: &str) -> Result<Record, CorrelationFileError> {
    record::read(file, stem, text, false)
}

/// True for a file of packings: it has a `[[packing]]`.
pub fn is_packing_table(text: &str) -> bool {
    text.contains("\n[[packing]]")
}

#[cfg(test)]
mod tests;
