//! From what was typed to what is meant, collecting everything that is wrong.

mod context;
mod criteria;
mod declared;
mod device;
mod extent;
mod file;
mod head;
mod internals;
mod packing;
mod point;
mod section;
mod share;
mod shift;
mod tray;
mod vessel;

pub(crate) use file::{Texts, lower};
