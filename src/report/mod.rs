//! Answers to bytes.
