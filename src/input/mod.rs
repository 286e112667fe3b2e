//! Text to checked case.
