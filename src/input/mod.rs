//! Text to checked case.

pub mod builtin;
pub mod correlation_file;
