//! Text to checked case: what was typed (`raw`), then what is meant (`lower`), with every error of a file in one run.
//! Nothing here opens a file: texts come in, data go out.
#![deny(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    clippy::indexing_slicing,
    clippy::todo,
    clippy::unimplemented
)]

pub mod builtin;
mod columns;
pub mod correlation_file;
pub mod diagnostic;
mod loads;
mod lower;
mod open;
mod quantity;
#[cfg(test)]
mod quantity_tests;
mod raw;
mod reader;
mod schema;
mod unit_expr;
mod unit_table;
mod write_back;

pub use diagnostic::{Diagnostic, Diagnostics, Source};
pub use open::{MAX_FILE_BYTES, Needs, Opened, decode, open};
pub use schema::{bid_schema, case_schema};
pub use write_back::{Found, WriteBackError, write_back};
