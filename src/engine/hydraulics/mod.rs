//! Physics of one stage on one side.
