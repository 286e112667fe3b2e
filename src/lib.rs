//! Hydraulics, wall position and vapour split of dividing-wall distillation columns.
//!
//! Data flow one way: [`input`] reads files into a checked case, [`engine`] works it, [`report`] turns the answer into
//! bytes, [`cli`] is the only place that opens files and prints.

pub mod cli;
pub mod engine;
pub mod input;
pub mod report;
