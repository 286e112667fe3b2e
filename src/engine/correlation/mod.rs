//! Correlations: records of published coefficients and one small evaluator per functional form.

pub mod packing;
