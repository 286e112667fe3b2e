//! The command line: the only part that opens files, and the only one that prints.

pub mod args;
mod commands;
pub mod exit;
mod files;
mod output;
mod render;
mod run;

pub use exit::Exit;
pub use run::{Terminal, run};
