//! Rating, sizing and balance: from a checked case to an answer.

mod answer;
mod arrangement;
mod balance;
mod balance_many;
mod basis;
mod column;
mod figures;
mod judge;
mod limits;
mod model;
mod place_wall;
mod probe;
mod rate;
mod remedy;
mod size;
mod state;
mod zone;

pub use answer::work;
pub use probe::Probe;
