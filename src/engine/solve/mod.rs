//! Numerics: knows no physics.

pub mod optimise;
pub mod root;
