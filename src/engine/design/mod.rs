//! Rating, sizing and balance.
