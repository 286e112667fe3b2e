//! Numerics: knows no physics.

pub mod bracket;
pub mod optimise;
pub mod root;
