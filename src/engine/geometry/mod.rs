//! A disc cut by parallel walls and straight weirs.
//!
//! The centre of the disc is the origin; walls are lines x = const, weirs are lines y = const (liquid along the wall) or
//! x = const (liquid across it). Bare numbers live in the kernel and its inverses only.

pub mod compartments;
pub mod disc;
mod inverse;
mod kernel;
mod piece;
pub mod strip;
pub mod tray_layout;

pub use compartments::{compartments, position_for_area, positions_for_shares, wall_area};
pub use disc::Disc;
pub use strip::{Corner, Strip};
pub use tray_layout::{Deck, LayoutFigures, Pass, TrayLayout, Weir};
