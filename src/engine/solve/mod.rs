//! Numerics: knows no physics.
