//! Bracketed scalar roots of f64 functions, by Chandrupatla's method (inverse quadratic steps where they are safe, bisection
//! where not). Every evaluation is checked to be finite.

use std::cell::Cell;

/// When to stop.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Tolerance {
    /// Absolute width of the bracket.
    pub x_abs: f64,
    /// Width relative to the root.
    pub x_rel: f64,
    /// Evaluations after which the search gives up.
    pub max_evaluations: usize,
}

/// A function's answer: a number, or only its sign where there is no number.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Evaluation {
    /// A finite value.
    Value(f64),
    /// No number, but above zero.
    Above,
    /// No number, but below zero.
    Below,
}

/// A root.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Outcome {
    /// Where.
    pub root: f64,
    /// Width of the last bracket.
    pub width: f64,
    /// Evaluations used.
    pub evaluations: usize,
}

/// Why there is none.
#[derive(Clone, Copy, Debug, PartialEq, thiserror::Error)]
pub enum Failure {
    /// The ends have the same sign.
    #[error("no sign change between {low} and {high}")]
    NoBracket {
        /// Lower end.
        low: f64,
        /// Upper end.
        high: f64,
    },
    /// A value that is not finite.
    #[error("the function gives {value} at {at}")]
    NotFinite {
        /// Where.
        at: f64,
        /// What.
        value: f64,
    },
    /// The cap was reached.
    #[error("not settled after {evaluations} evaluations")]
    TooManyEvaluations {
        /// How many.
        evaluations: usize,
    },
}

/// Root of a function between two ends of opposite sign.
///
/// # Errors
/// [`Failure`].
pub fn bracketed(low: f64, high: f64, tolerance: Tolerance, mut f: impl FnMut(f64) -> f64) -> Result<Outcome, Failure> {
    bracketed_with_signs(low, high, tolerance, |x| Evaluation::Value(f(x)))
}

/// The same where the function may know its sign only.
///
/// # Errors
/// [`Failure`].
pub fn bracketed_with_signs(
    low: f64,
    high: f64,
    tolerance: Tolerance,
    mut f: impl FnMut(f64) -> Evaluation,
) -> Result<Outcome, Failure> {
    let evaluations = Cell::new(0);
    let mut at = |x: f64| -> Result<f64, Failure> {
        evaluations.set(evaluations.get() + 1);
        match f(x) {
            Evaluation::Value(value) if value.is_finite() => Ok(value),
            Evaluation::Value(value) => Err(Failure::NotFinite { at: x, value }),
            Evaluation::Above => Ok(f64::INFINITY),
            Evaluation::Below => Ok(f64::NEG_INFINITY),
        }
    };
    // Invariant: f(a) and f(b) have opposite signs, so the root lies between; c is the point b replaced.
    let (mut a, mut b) = (low, high);
    let (mut fa, mut fb) = (at(a)?, at(b)?);
    if fa == 0.0 {
        return Ok(Outcome { root: a, width: 0.0, evaluations: evaluations.get() });
    }
    if fb == 0.0 {
        return Ok(Outcome { root: b, width: 0.0, evaluations: evaluations.get() });
    }
    if fa.is_sign_positive() == fb.is_sign_positive() {
        return Err(Failure::NoBracket { low, high });
    }
    let (mut c, mut fc): (f64, f64);
    let mut t = 0.5;
    loop {
        let x = a + t * (b - a);
        let fx = at(x)?;
        if fx.is_sign_positive() == fa.is_sign_positive() {
            (c, fc) = (a, fa);
        } else {
            (c, fc, b, fb) = (b, fb, a, fa);
        }
        (a, fa) = (x, fx);
        let (best, f_best) = if fa.abs() < fb.abs() { (a, fa) } else { (b, fb) };
        let width = (b - a).abs();
        let wanted = tolerance.x_abs + tolerance.x_rel * best.abs() + f64::EPSILON * best.abs();
        if f_best == 0.0 || width <= 2.0 * wanted {
            return Ok(Outcome { root: best, width, evaluations: evaluations.get() });
        }
        if evaluations.get() >= tolerance.max_evaluations {
            return Err(Failure::TooManyEvaluations { evaluations: evaluations.get() });
        }
        let least_step = wanted / width;
        let xi = (a - b) / (c - b);
        let phi = (fa - fb) / (fc - fb);
        let smooth = fa.is_finite() && fb.is_finite() && fc.is_finite();
        t = if smooth && phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi {
            fa / (fb - fa) * fc / (fb - fc) + (c - a) / (b - a) * fa / (fc - fa) * fb / (fc - fb)
        } else {
            0.5
        };
        t = t.clamp(least_step.min(0.5), 1.0 - least_step.min(0.5));
    }
}
