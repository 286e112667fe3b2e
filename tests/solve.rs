//! The root finder and the adapter around argmin: numerics without physics.
//!
//! Roots are those of the textbook functions named beside them. Ceilings on evaluations stand in for timings.

use approx::assert_relative_eq;
use chordwall::engine::error::{EngineError, EngineResult};
use chordwall::engine::solve::optimise::{DesignRoot, design_root};
use chordwall::engine::solve::root::{Evaluation, Failure, Outcome, Tolerance, bracketed, bracketed_with_signs};

const CLOSE: Tolerance = Tolerance { x_abs: 1e-14, x_rel: 1e-14, max_evaluations: 200 };

/// Smooth functions with one root in a bracket, and the root in closed form.
type Case = (&'static str, fn(f64) -> f64, f64, f64, f64);
const SMOOTH: &[Case] = &[
    ("a line", |x| 3.0 * x - 1.0, -1.0, 4.0, 1.0 / 3.0),
    ("x^2 = 2", |x| x * x - 2.0, 0.0, 2.0, std::f64::consts::SQRT_2),
    ("e^x = 10", |x| x.exp() - 10.0, 0.0, 9.0, std::f64::consts::LN_10),
    ("1/x = 3, convex and steep at one end", |x| 1.0 / x - 3.0, 1e-6, 1e3, 1.0 / 3.0),
    ("x^20 = 1/2, flat at one end", |x| x.powi(20) - 0.5, 0.0, 5.0, 0.965_936_328_924_845_7),
    ("arctan far out", |x| (x - 7.0).atan(), -1e6, 1e6, 7.0),
    ("cube root, vertical at the root", |x| (x - 0.3).cbrt(), -1.0, 2.0, 0.3),
    ("tiny values", |x| 1e-200 * (x - 0.7), 0.0, 1.0, 0.7),
    ("huge values", |x| 1e300 * (x - 0.7), 0.0, 1.0, 0.7),
];

#[test]
fn smooth_functions_give_their_root_within_few_evaluations() {
    for (name, f, low, high, root) in SMOOTH {
        let found = bracketed(*low, *high, CLOSE, f).unwrap();
        assert_relative_eq!(found.root, *root, epsilon = 2.1e-14, max_relative = 2.1e-14);
        assert!(!found.jump, "{name}: {found:?}");
        assert_eq!(found.residual, Some(f(found.root)), "{name}");
        // Halving alone would need up to 68 for these brackets.
        assert!(found.evaluations <= 60, "{name}: {} evaluations", found.evaluations);
    }
    let cheap = bracketed(0.0, 2.0, CLOSE, |x| x * x - 2.0).unwrap();
    assert!(cheap.evaluations <= 12, "{} evaluations", cheap.evaluations);
}

#[test]
fn evaluations_reported_are_those_made() {
    for (name, f, low, high, _) in SMOOTH {
        let mut made = 0;
        let found = bracketed(*low, *high, CLOSE, |x| {
            made += 1;
            f(x)
        })
        .unwrap();
        assert_eq!(found.evaluations, made, "{name}");
    }
}

#[test]
fn the_last_bracket_holds_the_root_at_every_tolerance() {
    for (name, f, low, high, root) in SMOOTH {
        for x_abs in [1e-1, 1e-4, 1e-9] {
            let found = bracketed(*low, *high, Tolerance { x_abs, x_rel: 0.0, max_evaluations: 200 }, f).unwrap();
            assert!((found.root - root).abs() <= found.width + 1e-15 * root.abs(), "{name} at {x_abs}: {found:?}");
            assert!(found.width <= 2.0 * (x_abs + 4e-16 * root.abs()) * (1.0 + 1e-9), "{name} at {x_abs}: {found:?}");
        }
    }
}

#[test]
fn swapped_ends_give_the_same_outcome() {
    for (name, f, low, high, _) in SMOOTH {
        assert_eq!(bracketed(*low, *high, CLOSE, f), bracketed(*high, *low, CLOSE, f), "{name}");
    }
    assert_eq!(bracketed(2.0, 1.0, CLOSE, |x| x), Err(Failure::NoBracket { low: 1.0, high: 2.0 }));
}

#[test]
fn root_at_an_end_costs_the_two_ends_and_nothing_more() {
    for (low, high) in [(0.0, 3.0), (-3.0, 0.0)] {
        let found = bracketed(low, high, CLOSE, |x| x).unwrap();
        assert_eq!(found, Outcome { root: 0.0, width: 0.0, residual: Some(0.0), jump: false, evaluations: 2 });
    }
}

#[test]
fn same_sign_is_told_after_the_two_ends() {
    let mut made = 0;
    let found = bracketed(-1.0, 1.0, CLOSE, |x| {
        made += 1;
        x * x + 1.0
    });
    assert_eq!((found, made), (Err(Failure::NoBracket { low: -1.0, high: 1.0 }), 2));
    // A function without any slope is the same case.
    assert_eq!(bracketed(-1.0, 1.0, CLOSE, |_| 5.0), Err(Failure::NoBracket { low: -1.0, high: 1.0 }));
}

#[test]
fn a_flat_root_is_found_within_the_ceiling() {
    // x^9: the function is below 1e-14 of its end values over a quarter of the bracket.
    let found = bracketed(-1.0, 1.5, CLOSE, |x| x.powi(9)).unwrap();
    assert!(found.root.abs() <= 1e-13 || found.residual == Some(0.0), "{found:?}");
    assert!(found.evaluations <= 140, "{} evaluations", found.evaluations);
    // Zero over a stretch: any point of it is a root.
    let plateau = bracketed(0.0, 1.0, CLOSE, |x| if x < 0.4 { x - 0.4 } else { (x - 0.6).max(0.0) }).unwrap();
    assert!((0.4..=0.6).contains(&plateau.root) && plateau.residual == Some(0.0), "{plateau:?}");
}

#[test]
fn a_jump_is_found_and_told_from_a_root() {
    let step = |x: f64| if x < 0.123 { -1.0 } else { 2.0 };
    let found = bracketed(0.0, 1.0, CLOSE, step).unwrap();
    assert!(found.jump && (found.root - 0.123).abs() <= found.width, "{found:?}");
    assert!(found.evaluations <= 60, "{} evaluations", found.evaluations);
    let pole = bracketed(0.0, 1.0, CLOSE, |x| 1.0 / (x - 0.3)).unwrap();
    assert!(pole.jump && (pole.root - 0.3).abs() <= 1e-13, "{pole:?}");
    // One side reaches zero exactly where the other jumps away: there is a root.
    let edge = bracketed(0.0, 1.0, CLOSE, |x| if x <= 0.5 { x - 0.5 } else { 1.0 }).unwrap();
    assert!(!edge.jump, "{edge:?}");
}

#[test]
fn a_value_that_is_no_number_stops_at_once_and_names_the_point() {
    let mut made = 0;
    let found = bracketed(0.0, 1.0, CLOSE, |x| {
        made += 1;
        if x > 0.4 && x < 0.9 { f64::NAN } else { x - 0.95 }
    });
    let Err(Failure::NotFinite { at, value }) = found else { panic!("{found:?}") };
    assert!(value.is_nan() && at == 0.5 && made == 3, "{at} after {made}");
    // NaN on one side of the bracket, at the very end.
    let found = bracketed(-1.0, 1.0, CLOSE, f64::sqrt);
    assert!(matches!(found, Err(Failure::NotFinite { at: -1.0, value }) if value.is_nan()), "{found:?}");
    let found = bracketed(0.0, 1.0, CLOSE, |x| 1.0 / x - 2.0);
    assert_eq!(found, Err(Failure::NotFinite { at: 0.0, value: f64::INFINITY }));
}

#[test]
fn ends_that_are_not_finite_are_refused_before_anything_is_evaluated() {
    for (low, high) in [(f64::NAN, 1.0), (0.0, f64::INFINITY), (f64::NEG_INFINITY, f64::INFINITY), (-1e308, 1e308)] {
        let found = bracketed(low, high, CLOSE, |x| panic!("asked for {x}"));
        assert!(matches!(found, Err(Failure::Ends { .. })), "{low} to {high}: {found:?}");
    }
}

#[test]
fn the_cap_on_evaluations_is_kept() {
    for max_evaluations in [2, 3, 7, 20] {
        let mut made = 0;
        let found = bracketed(0.0, 1.0, Tolerance { max_evaluations, ..CLOSE }, |x| {
            made += 1;
            if x < 0.123 { -1.0 } else { 2.0 }
        });
        assert_eq!(found, Err(Failure::TooManyEvaluations { evaluations: max_evaluations }));
        assert_eq!(made, max_evaluations);
    }
    // Nothing ever settles at a tolerance of zero around zero but by the cap or an exact hit.
    let none = Tolerance { x_abs: 0.0, x_rel: 0.0, max_evaluations: 300 };
    let found = bracketed(-1.0, 3.0, none, |x| if x < 0.0 { -1.0 } else { 1.0 });
    assert_eq!(found, Err(Failure::TooManyEvaluations { evaluations: 300 }));
}

#[test]
fn sign_without_number_leads_to_the_root() {
    // Pressure drops that rise without end towards 0.6, and none beyond.
    let f = |x: f64| if x < 0.6 { Evaluation::Value(1.0 / (0.6 - x) - 5.0) } else { Evaluation::Above };
    for found in [bracketed_with_signs(0.0, 1.0, CLOSE, f), bracketed_with_signs(1.0, 0.0, CLOSE, f)] {
        let found = found.unwrap();
        assert_relative_eq!(found.root, 0.4, epsilon = 2.1e-14);
        assert!(!found.jump && found.evaluations <= 40, "{found:?}");
    }
    // No number at either end.
    let g = |x: f64| match x {
        x if x < 0.2 => Evaluation::Below,
        x if x > 0.7 => Evaluation::Above,
        x => Evaluation::Value(x.powi(3) - 0.125),
    };
    let found = bracketed_with_signs(0.0, 1.0, CLOSE, g).unwrap();
    assert_relative_eq!(found.root, 0.5, epsilon = 2.1e-14);
    assert!(!found.jump, "{found:?}");
}

#[test]
fn sign_without_number_right_beside_another_sign_is_a_jump() {
    let brink = |x: f64| if x < 0.6 { Evaluation::Value(x - 2.0) } else { Evaluation::Above };
    let found = bracketed_with_signs(0.0, 1.0, CLOSE, brink).unwrap();
    assert!(found.jump && (found.root - 0.6).abs() <= found.width, "{found:?}");
    assert!(found.residual.is_some_and(|r| (r + 1.4).abs() < 1e-12), "{found:?}");
    assert!(found.evaluations <= 60, "{} evaluations", found.evaluations);
    let never = |x: f64| if x < 0.6 { Evaluation::Below } else { Evaluation::Above };
    let found = bracketed_with_signs(0.0, 1.0, CLOSE, never).unwrap();
    assert!(found.jump && found.residual.is_none(), "{found:?}");
}

#[test]
fn a_failure_says_what_was_sought() {
    let error = Failure::NoBracket { low: 1.0, high: 2.0 }.in_search_for("the share");
    assert_eq!(error.to_string(), "search for the share found no answer: no sign change between 1 and 2");
}

// ---------------------------------------------------------------- walk and scan

/// The adapter on a plain function, which gives it the values at the ends as its callers do.
fn by_argmin(from: f64, to: f64, f: impl Fn(f64) -> f64) -> EngineResult<f64> {
    let root = DesignRoot { what: "the unknown", from, to, tolerance: 1e-12, at_ends: (f(from), f(to)) };
    design_root(root, |x| Ok(f(x)))
}

#[test]
fn both_root_finders_agree() {
    for (name, f, low, high, _) in SMOOTH {
        // Brent's method works on products of values, which these leave the range of.
        if name.contains("tiny") || name.contains("huge") {
            continue;
        }
        let own = bracketed(*low, *high, CLOSE, f).unwrap().root;
        for (from, to) in [(*low, *high), (*high, *low)] {
            let argmin = by_argmin(from, to, f).unwrap();
            assert!((own - argmin).abs() <= 1e-10, "{name}: {own} against {argmin}");
        }
    }
}

#[test]
fn ends_are_not_evaluated_again() {
    let root = DesignRoot { what: "x", from: 0.0, to: 2.0, tolerance: 1e-12, at_ends: (-2.0, 2.0) };
    let found = design_root(root, |x| {
        assert!(x != 0.0 && x != 2.0, "asked for the end {x}");
        Ok(x * x - 2.0)
    });
    assert_relative_eq!(found.unwrap(), std::f64::consts::SQRT_2, epsilon = 1e-11);
    // A root at an end is that end.
    for (from, to) in [(0.0, 3.0), (3.0, 0.0)] {
        assert_eq!(by_argmin(from, to, |x| x).unwrap(), 0.0);
    }
}

#[test]
fn what_argmin_would_call_converged_is_an_error_here() {
    // NaN at an end: argmin alone gives "solver converged" after one iteration.
    let at_end = by_argmin(-1.0, 1.0, f64::sqrt);
    assert!(matches!(&at_end, Err(EngineError::NotFinite { value, .. }) if value.is_nan()), "{at_end:?}");
    let inside = by_argmin(0.0, 1.0, |x| if x > 0.1 && x < 0.9 { f64::INFINITY } else { x - 0.5 });
    assert!(matches!(&inside, Err(EngineError::NotFinite { .. })), "{inside:?}");
    assert!(inside.unwrap_err().to_string().contains("the unknown"));
}

#[test]
fn same_sign_is_no_bracket_even_where_the_product_underflows() {
    for scale in [1.0, 1e-200] {
        let found = by_argmin(-1.0, 1.0, |x| scale * (x * x + 1.0));
        let Err(EngineError::Search { what, why }) = &found else { panic!("{scale}: {found:?}") };
        assert_eq!((what.as_str(), why.as_str()), ("the unknown", "no sign change between -1 and 1"));
    }
    for (from, to) in [(f64::NAN, 1.0), (0.0, f64::INFINITY)] {
        let root = DesignRoot { what: "x", from, to, tolerance: 1e-9, at_ends: (-1.0, 1.0) };
        let found = design_root(root, |x| panic!("asked for {x}"));
        assert!(matches!(found, Err(EngineError::Search { .. })));
    }
    for tolerance in [f64::NAN, -1.0] {
        let root = DesignRoot { what: "x", from: 0.0, to: 1.0, tolerance, at_ends: (-1.0, 1.0) };
        assert!(design_root(root, |_| panic!("asked")).is_err());
    }
}

#[test]
fn the_functions_own_error_comes_out_unchanged() {
    let own = EngineError::Geometry { what: "a shell without a wall".to_owned() };
    let root = DesignRoot { what: "x", from: 0.0, to: 1.0, tolerance: 1e-9, at_ends: (-1.0, 1.0) };
    assert_eq!(design_root(root, |_| Err(own.clone())), Err(own));
}

#[test]
fn a_function_that_jumps_ends_within_the_cap() {
    let mut made = 0;
    let root = DesignRoot { what: "x", from: 0.0, to: 1.0, tolerance: 0.0, at_ends: (-1.0, 2.0) };
    let found = design_root(root, |x| {
        made += 1;
        Ok(if x < 0.123 { -1.0 } else { 2.0 })
    });
    assert!(found.is_ok_and(|x| (x - 0.123).abs() < 1e-12));
    assert!(made <= 200, "{made} evaluations");
}
