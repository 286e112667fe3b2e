//! Physics of one stage on one side.

pub(crate) mod declared;
pub(crate) mod load;
pub(crate) mod packing;
pub(crate) mod section;
pub(crate) mod tray;
pub(crate) mod tray_methods;
