//! Correlations: records of published coefficients and one small evaluator per functional form.

pub mod catalogue;
pub mod form;
pub mod packing;
pub mod range;
pub mod record;
