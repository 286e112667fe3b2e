//! What can go wrong in the engine, as named causes.

/// A result of the engine.
pub type EngineResult<T> = Result<T, EngineError>;

/// One named cause. Messages say what, where and, where it is known, what would be right.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum EngineError {
    /// A correlation was asked where it has no solution (beyond flood, past its last curve).
    #[error(
        "{correlation} has no answer in section \"{section}\", stage {stage}, at point \"{point}\": {why} \
         (vapour {vapour_kg_s:.4} kg/s, liquid {liquid_kg_s:.4} kg/s on {area_m2:.4} m2)"
    )]
    NoAnswer {
        /// Identifier of the correlation.
        correlation: String,
        /// Section of the case.
        section: String,
        /// Stage number of the loads table, as text.
        stage: String,
        /// Operating point.
        point: String,
        /// Why there is none, and what would help.
        why: String,
        /// Vapour mass flow of that row, kg/s.
        vapour_kg_s: f64,
        /// Liquid mass flow of that row, kg/s.
        liquid_kg_s: f64,
        /// Area of the place, m2.
        area_m2: f64,
    },
    /// The case asks for a method that cannot serve these internals.
    #[error("section \"{section}\": {method} cannot serve internals \"{internals}\": {why}")]
    NoMethod {
        /// Section of the case.
        section: String,
        /// Name of the internals.
        internals: String,
        /// What was asked for.
        method: String,
        /// What is missing and what would be right.
        why: String,
    },
    /// A figure that should be finite is not.
    #[error("{what} came out as {value}, not a finite number")]
    NotFinite {
        /// Which figure, and where.
        what: String,
        /// What came out.
        value: f64,
    },
    /// A geometry that cannot exist.
    #[error("geometry: {what}")]
    Geometry {
        /// What cannot be, with numbers.
        what: String,
    },
    /// A search ended without an answer.
    #[error("search for {what} found no answer: {why}")]
    Search {
        /// The unknown that was sought.
        what: String,
        /// Why it failed.
        why: String,
    },
    /// A correlation record is unusable.
    #[error("correlation \"{id}\": {what}")]
    Record {
        /// Identifier of the record.
        id: String,
        /// What is wrong, and what would be right.
        what: String,
    },
}

/// Gives `value` back if it is finite, and otherwise an error that names `what`.
///
/// # Errors
/// [`EngineError::NotFinite`] for NaN and infinities.
pub fn finite(value: f64, what: &str) -> EngineResult<f64> {
    if value.is_finite() { Ok(value) } else { Err(EngineError::NotFinite { what: what.to_owned(), value }) }
}
