//! One file a command.

pub mod answer;
pub mod generate;
pub mod methods;
pub mod schema;
pub mod start;
