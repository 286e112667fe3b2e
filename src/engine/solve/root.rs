//! Bracketed scalar roots of f64 functions, by Chandrupatla's method (inverse quadratic steps where they are safe, bisection
//! where not; T. R. Chandrupatla, Advances in Engineering Software 28 (1997) 145). Every evaluation is checked to be finite.
//! Nothing is allocated.

use crate::engine::error::EngineError;

/// A residual counts as a jump's if the function climbs this much more steeply there than over the whole bracket: the width
/// ratio to this power. A cube root's vertical tangent (power 1/3) still counts as a root.
const JUMP_POWER: f64 = 0.25;

/// When to stop.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Tolerance {
    /// Absolute half width of the bracket.
    pub x_abs: f64,
    /// Half width relative to the root. Rounding of the root itself is always added.
    pub x_rel: f64,
    /// Evaluations after which the search gives up; both ends count.
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

/// Where the sign changes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Outcome {
    /// Where.
    pub root: f64,
    /// Width of the last bracket; 0 if the function is exactly 0 at the root.
    pub width: f64,
    /// The function at `root`; none if it has no number there.
    pub residual: Option<f64>,
    /// The sign changes here, but the function does not come near zero on either side: a jump or a pole, not a root. Decided to
    /// within the tolerance: what climbs within `width` looks like a jump.
    pub jump: bool,
    /// Evaluations used.
    pub evaluations: usize,
}

/// Why there is none.
#[derive(Clone, Copy, Debug, PartialEq, thiserror::Error)]
pub enum Failure {
    /// An end, or the distance between the ends, is not a finite number.
    #[error("{low} to {high} is no bracket")]
    Ends {
        /// One end.
        low: f64,
        /// The other end.
        high: f64,
    },
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

impl Failure {
    /// The engine's error for a search for `what` that failed so.
    #[must_use]
    pub fn in_search_for(self, what: &str) -> EngineError {
        EngineError::Search { what: what.to_owned(), why: self.to_string() }
    }
}

/// Root of a function between two ends of opposite sign, in either order.
///
/// # Errors
/// [`Failure::Ends`], [`Failure::NoBracket`], [`Failure::NotFinite`] at the first evaluation that gives no finite number,
/// [`Failure::TooManyEvaluations`].
pub fn bracketed(
    end: f64,
    other: f64,
    tolerance: Tolerance,
    mut f: impl FnMut(f64) -> f64,
) -> Result<Outcome, Failure> {
    bracketed_with_signs(end, other, tolerance, |x| Evaluation::Value(f(x)))
}

/// The same where the function may know its sign only. While an end of the bracket has no number, the bracket is halved.
///
/// # Errors
/// As [`bracketed`]; [`Evaluation::Above`] and [`Evaluation::Below`] are no errors.
pub fn bracketed_with_signs(
    end: f64,
    other: f64,
    tolerance: Tolerance,
    mut f: impl FnMut(f64) -> Evaluation,
) -> Result<Outcome, Failure> {
    if !(other - end).is_finite() {
        return Err(Failure::Ends { low: end, high: other });
    }
    let (low, high) = if end <= other { (end, other) } else { (other, end) };
    // Invariant: f(a) and f(b) have opposite signs, so the sign changes between them; c is the point that was replaced last.
    let (mut a, mut b) = (low, high);
    let (mut fa, mut fb) = (signed(a, f(a))?, signed(b, f(b))?);
    let mut evaluations = 2;
    if fa == 0.0 || fb == 0.0 {
        let root = if fa == 0.0 { a } else { b };
        return Ok(Outcome { root, width: 0.0, residual: Some(0.0), jump: false, evaluations });
    }
    if fa.is_sign_positive() == fb.is_sign_positive() {
        return Err(Failure::NoBracket { low, high });
    }
    let scale = greatest_number(fa, fb);
    let (mut c, mut fc): (f64, f64);
    let mut t = 0.5;
    loop {
        if evaluations >= tolerance.max_evaluations {
            return Err(Failure::TooManyEvaluations { evaluations });
        }
        let x = a + t * (b - a);
        let fx = signed(x, f(x))?;
        evaluations += 1;
        if fx.is_sign_positive() == fa.is_sign_positive() {
            (c, fc) = (a, fa);
        } else {
            (c, fc, b, fb) = (b, fb, a, fa);
        }
        (a, fa) = (x, fx);
        let (best, f_best) = if fa.abs() < fb.abs() { (a, fa) } else { (b, fb) };
        if f_best == 0.0 {
            return Ok(Outcome { root: best, width: 0.0, residual: Some(0.0), jump: false, evaluations });
        }
        let width = (b - a).abs();
        let wanted = tolerance.x_abs + tolerance.x_rel * best.abs() + f64::EPSILON * best.abs();
        if width <= 2.0 * wanted {
            // Without a number at either first end, the greater of the last numbers is all the scale there is.
            let scale = if scale > 0.0 { scale } else { greatest_number(fa, fb) };
            let jump = f_best.abs() > scale * (width / (high - low)).powf(JUMP_POWER);
            let residual = f_best.is_finite().then_some(f_best);
            return Ok(Outcome { root: best, width, residual, jump, evaluations });
        }
        let least_step = (wanted / width).min(0.5);
        t = quadratic_step((a, fa), (b, fb), (c, fc)).unwrap_or(0.5).clamp(least_step, 1.0 - least_step);
    }
}

/// The value at x, with an infinity where only its sign is known.
fn signed(x: f64, evaluation: Evaluation) -> Result<f64, Failure> {
    match evaluation {
        Evaluation::Value(value) if value.is_finite() => Ok(value),
        Evaluation::Value(value) => Err(Failure::NotFinite { at: x, value }),
        Evaluation::Above => Ok(f64::INFINITY),
        Evaluation::Below => Ok(f64::NEG_INFINITY),
    }
}

/// The greater magnitude of those that are numbers; 0 if none is.
fn greatest_number(fa: f64, fb: f64) -> f64 {
    let number = |f: f64| if f.is_finite() { f.abs() } else { 0.0 };
    number(fa).max(number(fb))
}

/// Where, as a fraction of the way from a to b, the inverse quadratic through three points crosses zero; none if it cannot be
/// trusted there (Chandrupatla's condition), if a point has no number, or if the arithmetic overflows.
fn quadratic_step((a, fa): (f64, f64), (b, fb): (f64, f64), (c, fc): (f64, f64)) -> Option<f64> {
    if !(fa.is_finite() && fb.is_finite() && fc.is_finite()) {
        return None;
    }
    let xi = (a - b) / (c - b);
    let phi = (fa - fb) / (fc - fb);
    if !(phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi) {
        return None;
    }
    let t = fa / (fb - fa) * fc / (fb - fc) + (c - a) / (b - a) * fa / (fc - fa) * fb / (fc - fb);
    t.is_finite().then_some(t)
}
