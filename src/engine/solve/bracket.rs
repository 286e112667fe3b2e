//! Where the sign of an f64 function changes: by walking away from a start, or by a scan of a grid. What is found is the bracket
//! that `root` takes. Nothing is allocated.

use super::root::{Evaluation, Failure, signed};

/// A walk away from a start in growing steps.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Walk {
    /// Where it starts.
    pub start: f64,
    /// The first step; its sign is the direction.
    pub step: f64,
    /// Factor on each further step; at least 1.
    pub growth: f64,
    /// The last point that may be asked for.
    pub limit: f64,
    /// Evaluations after which the walk is given up; the start counts.
    pub max_evaluations: usize,
}

/// Two neighbouring points between which the sign changes, each with its value. Equal points are an exact zero.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Bracket {
    /// The point nearer the start, and the function there.
    pub near: (f64, f64),
    /// The point beyond, and the function there.
    pub far: (f64, f64),
    /// Evaluations used.
    pub evaluations: usize,
}

/// Walks from the start until the sign changes. No point beyond `limit` is asked for; the limit itself is the last one.
///
/// # Errors
/// [`Failure::Ends`] if the walk does not lead from start to limit (not finite, no step, wrong direction, shrinking steps);
/// [`Failure::NoBracket`] if the sign is the same up to the limit; [`Failure::NotFinite`]; [`Failure::TooManyEvaluations`].
pub fn expand_bracket(walk: Walk, mut f: impl FnMut(f64) -> f64) -> Result<Bracket, Failure> {
    let Walk { start, limit, growth, max_evaluations, mut step } = walk;
    let leads = (limit - start).is_finite() && step.is_finite() && step != 0.0 && growth.is_finite() && growth >= 1.0;
    if !leads || (limit - start) * step < 0.0 {
        return Err(Failure::Ends { low: start, high: limit });
    }
    let mut near = (start, signed(start, Evaluation::Value(f(start)))?);
    let mut evaluations = 1;
    if near.1 == 0.0 {
        return Ok(Bracket { near, far: near, evaluations });
    }
    // Invariant: the sign at `near` is that of the start.
    while near.0 != limit {
        if evaluations >= max_evaluations {
            return Err(Failure::TooManyEvaluations { evaluations });
        }
        let next = near.0 + step;
        let at = if step > 0.0 { next.min(limit) } else { next.max(limit) };
        let far = (at, signed(at, Evaluation::Value(f(at)))?);
        evaluations += 1;
        if far.1 == 0.0 {
            return Ok(Bracket { near: far, far, evaluations });
        }
        if far.1.is_sign_positive() != near.1.is_sign_positive() {
            return Ok(Bracket { near, far, evaluations });
        }
        near = far;
        step *= growth;
    }
    Err(Failure::NoBracket { low: start.min(limit), high: start.max(limit) })
}

/// Calls `found` with both ends of every interval of an even grid over which the sign changes, in ascending order. A zero exactly on
/// a grid point is given once, as an interval of no width. Roots that come in pairs within one interval are not seen. Gives the
/// evaluations used: one more than there are intervals.
///
/// # Errors
/// [`Failure::Ends`] if `low` to `high` is not a finite, ascending range or there is no interval; [`Failure::NotFinite`].
pub fn scan(
    low: f64,
    high: f64,
    intervals: usize,
    mut f: impl FnMut(f64) -> Evaluation,
    mut found: impl FnMut(f64, f64),
) -> Result<usize, Failure> {
    if !(high - low).is_finite() || low >= high || intervals == 0 {
        return Err(Failure::Ends { low, high });
    }
    let mut before: Option<(f64, f64)> = None;
    for i in 0..=intervals {
        // The last point is the end itself, not the end but for rounding.
        let x = if i == intervals { high } else { low + (high - low) * (i as f64 / intervals as f64) };
        let fx = signed(x, f(x))?;
        match before {
            _ if fx == 0.0 => found(x, x),
            Some((x0, f0)) if f0 != 0.0 && f0.is_sign_positive() != fx.is_sign_positive() => found(x0, x),
            _ => {}
        }
        before = Some((x, fx));
    }
    Ok(intervals + 1)
}
