//! Answers to bytes. One model, many formats; nothing here computes physics, opens a file or prints.

pub mod caution;
pub mod csv;
pub mod findings;
pub mod json;
pub mod markdown;
pub mod model;
pub mod number;
pub mod tables;
pub mod terminal;
pub mod text;
