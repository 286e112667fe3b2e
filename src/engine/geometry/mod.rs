//! A disc cut by parallel walls and straight weirs.
