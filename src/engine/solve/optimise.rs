//! Outer design unknowns by argmin. The only file that knows argmin, and it does not trust it: every evaluation is checked to
//! be finite, iterations are capped, and the outcome is judged here.

use super::root::Failure;
use crate::engine::error::{EngineError, EngineResult};
use argmin::core::{CostFunction, Error, Executor, IterState, Solver, State, TerminationReason};
use argmin::solver::brent::BrentRoot;
use std::cell::RefCell;

/// Iterations after which a search is given up; Brent's methods on a sensible bracket need a dozen or two.
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

/// A function that argmin may call: it remembers the first failure.
struct Guarded<'a, F> {
    what: &'a str,
    /// Points with known values, so that they are not worked out again.
    known: &'a [(f64, f64)],
    function: RefCell<F>,
    failure: RefCell<Option<EngineError>>,
}

impl<F: FnMut(f64) -> EngineResult<f64>> CostFunction for &Guarded<'_, F> {
    type Param = f64;
    type Output = f64;

    fn cost(&self, x: &f64) -> Result<f64, Error> {
        let known = self.known.iter().find(|(point, _)| point == x).map(|(_, value)| *value);
        let value = known.map_or_else(|| (self.function.borrow_mut())(*x), Ok).and_then(|value| {
            if value.is_finite() {
                Ok(value)
            } else {
                Err(EngineError::NotFinite { what: format!("the function of {} at {x}", self.what), value })
            }
        });
        value.map_err(|error| {
            let stop = Error::msg(error.to_string());
            *self.failure.borrow_mut() = Some(error);
            stop
        })
    }
}

impl<F: FnMut(f64) -> EngineResult<f64>> Guarded<'_, F> {
    /// Runs a solver of argmin to its own convergence and gives its last point. Not the best of all evaluations: where the
    /// function jumps across zero, an end of the bracket may lie nearer zero than either side of the jump.
    fn run<'g, S>(&'g self, solver: S) -> EngineResult<f64>
    where
        S: Solver<&'g Self, IterState<f64, (), (), (), (), f64>>,
    {
        let run = Executor::new(self, solver).configure(|state| state.max_iters(MAX_ITERATIONS)).run();
        if let Some(error) = self.failure.borrow_mut().take() {
            return Err(error);
        }
        let search = |why: String| EngineError::Search { what: self.what.to_owned(), why };
        let state = run.map_err(|error| search(error.to_string()))?.state;
        match (state.get_termination_reason(), state.get_param()) {
            (Some(TerminationReason::SolverConverged), Some(at)) => Ok(*at),
            _ => Err(search(format!("not settled after {MAX_ITERATIONS} iterations"))),
        }
    }
}

/// Root of a function between two ends of opposite sign, by Brent's method. A function that jumps across zero gives one side of the
/// jump.
///
/// # Errors
/// The function's own error unchanged; [`EngineError::NotFinite`]; [`EngineError::Search`] for ends that are not finite, without a sign
/// change, or past the cap.
pub fn design_root(root: DesignRoot<'_>, function: impl FnMut(f64) -> EngineResult<f64>) -> EngineResult<f64> {
    let DesignRoot { what, from, to, tolerance, at_ends } = root;
    check_range(what, from, to, tolerance)?;
    // argmin looks at the sign of the product, which loses it where the product underflows.
    let same_sign = (at_ends.0 > 0.0 && at_ends.1 > 0.0) || (at_ends.0 < 0.0 && at_ends.1 < 0.0);
    if same_sign {
        return Err(Failure::NoBracket { low: from.min(to), high: from.max(to) }.in_search_for(what));
    }
    let guarded = Guarded {
        what,
        known: &[(from, at_ends.0), (to, at_ends.1)],
        function: RefCell::new(function),
        failure: RefCell::new(None),
    };
    guarded.run(BrentRoot::new(from, to, tolerance))
}

fn check_range(what: &str, from: f64, to: f64, tolerance: f64) -> EngineResult<()> {
    if !(to - from).is_finite() {
        return Err(Failure::Ends { low: from, high: to }.in_search_for(what));
    }
    if !(tolerance.is_finite() && tolerance >= 0.0) {
        return Err(EngineError::Search { what: what.to_owned(), why: format!("{tolerance} is no tolerance") });
    }
    Ok(())
}
