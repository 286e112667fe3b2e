//! Outer design unknowns by argmin. The only file that knows argmin, and it does not trust it: every evaluation is checked to
//! be finite, iterations are capped, and the outcome is judged here.

use crate::engine::error::{EngineError, EngineResult};
use argmin::core::{CostFunction, Error, Executor, State};
use argmin::solver::brent::BrentRoot;
use std::cell::{Cell, RefCell};

/// Iterations after which a search is given up; Brent's method on a sensible bracket needs a dozen.
const MAX_ITERATIONS: u64 = 200;

/// What is sought between which ends, and how closely.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DesignRoot<'a> {
    /// Name of the unknown, for messages.
    pub what: &'a str,
    /// One end of the bracket.
    pub from: f64,
    /// The other end.
    pub to: f64,
    /// Absolute tolerance of the unknown.
    pub tolerance: f64,
    /// The function at both ends, which whoever found the bracket has just worked out.
    pub at_ends: (f64, f64),
}

/// A function that argmin may call: it remembers the first failure, and the evaluation nearest zero.
struct Guarded<'a, F> {
    what: &'a str,
    /// Both ends with their values, so that they are not worked out again.
    ends: [(f64, f64); 2],
    function: RefCell<F>,
    failure: RefCell<Option<EngineError>>,
    best: Cell<Option<(f64, f64)>>,
}

impl<F: FnMut(f64) -> EngineResult<f64>> CostFunction for &Guarded<'_, F> {
    type Param = f64;
    type Output = f64;

    fn cost(&self, x: &f64) -> Result<f64, Error> {
        let known = self.ends.iter().find(|(end, _)| end == x).map(|(_, value)| *value);
        let value = known.map_or_else(|| (self.function.borrow_mut())(*x), Ok).and_then(|value| {
            if value.is_finite() {
                Ok(value)
            } else {
                Err(EngineError::NotFinite { what: format!("the residual of {} at {x}", self.what), value })
            }
        });
        match value {
            Ok(value) => {
                if self.best.get().is_none_or(|(_, best)| value.abs() < best.abs()) {
                    self.best.set(Some((*x, value)));
                }
                Ok(value)
            }
            Err(error) => {
                let stop = Error::msg(error.to_string());
                *self.failure.borrow_mut() = Some(error);
                Err(stop)
            }
        }
    }
}

/// Root of a function between two ends of opposite sign, by Brent's method.
///
/// # Errors
/// The function's own error unchanged; [`EngineError::NotFinite`]; [`EngineError::Search`] without a sign change or past the cap.
pub fn design_root(root: DesignRoot<'_>, function: impl FnMut(f64) -> EngineResult<f64>) -> EngineResult<f64> {
    let guarded = Guarded {
        what: root.what,
        ends: [(root.from, root.at_ends.0), (root.to, root.at_ends.1)],
        function: RefCell::new(function),
        failure: RefCell::new(None),
        best: Cell::new(None),
    };
    let solver = BrentRoot::new(root.from, root.to, root.tolerance);
    let run = Executor::new(&guarded, solver).configure(|state| state.max_iters(MAX_ITERATIONS)).run();
    let search = |why: String| EngineError::Search { what: root.what.to_owned(), why };
    if let Some(error) = guarded.failure.borrow_mut().take() {
        return Err(error);
    }
    match run {
        Ok(result) if result.state.get_iter() >= MAX_ITERATIONS => {
            Err(search(format!("not settled after {MAX_ITERATIONS} iterations between {} and {}", root.from, root.to)))
        }
        // The evaluation nearest zero is never worse than the last one, which is what the state keeps.
        Ok(_) => guarded.best.get().map(|(x, _)| x).ok_or_else(|| search("nothing was evaluated".to_owned())),
        Err(error) => Err(search(format!("between {} and {}: {error}", root.from, root.to))),
    }
}
