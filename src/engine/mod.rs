//! The engine: pure. No files, no printing, no clock, no environment, no serde.
#![deny(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    clippy::indexing_slicing,
    clippy::todo,
    clippy::unimplemented
)]

pub mod case;
pub mod correlation;
pub mod design;
pub mod error;
pub mod findings;
pub mod geometry;
pub mod hydraulics;
pub mod result;
pub mod solve;
pub mod units;
