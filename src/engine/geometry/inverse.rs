//! Lines from areas: the inverses of the kernel, by a bracketed Newton iteration of its own. Metres.

use super::kernel::{DiscStrip, geometry_error};
use crate::engine::error::EngineResult;

/// A step below this fraction of the unknown is the last one: the error after it is of the order of its square.
const LAST_STEP: f64 = 1e-9;
/// Bisection alone would need about 60; Newton needs four to six.
const MOST_STEPS: usize = 200;
/// An area may exceed the whole by its own rounding.
const ROUNDING: f64 = 8.0 * f64::EPSILON;

/// The unknown u in (0, `most_m`] at which a growing area reaches `target_m2`; `area_and_slope` gives the area at u and its
/// derivative, the area at `most_m` is not below the target.
///
/// Invariant: the area at `low` is below the target, that at `high` is not. The Newton step is taken on logarithms, where
/// an area that grows by some power of u is a straight line, so small areas need no more steps than large ones; a step
/// out of the bracket is replaced by one within it.
fn reach_area(target_m2: f64, most_m: f64, area_and_slope: impl Fn(f64) -> (f64, f64)) -> EngineResult<f64> {
    let (mut low, mut high) = (0.0, most_m);
    let (most_m2, _) = area_and_slope(most_m);
    let mut u = most_m * (target_m2 / most_m2).powf(2.0 / 3.0).clamp(f64::MIN_POSITIVE, 1.0);
    for _ in 0..MOST_STEPS {
        let (area_m2, slope_m) = area_and_slope(u);
        if area_m2 == target_m2 {
            return Ok(u);
        }
        if area_m2 < target_m2 {
            low = u;
        } else {
            high = u;
        }
        let ratio = (target_m2 - area_m2) / area_m2;
        let next = u * (ratio.ln_1p() * area_m2 / (u * slope_m)).exp();
        let within = next.is_finite() && next >= low && next <= high;
        if within && (next - u).abs() <= LAST_STEP * u {
            return Ok(next);
        }
        let next = match within {
            true => next,
            false if low > 0.0 => 0.5 * (low + high),
            false => 0.125 * high,
        };
        if (high - low) <= f64::EPSILON * high || next == u {
            return Ok(u);
        }
        u = next;
    }
    Err(geometry_error(format!(
        "no line found for an area of {target_m2} m2 within {most_m} m after {MOST_STEPS} steps"
    )))
}

/// Refuses an area that is not in (0, `whole_m2`]; gives it back, limited to the whole if it exceeds it by rounding.
fn possible(area_m2: f64, whole_m2: f64, of_what: &str) -> EngineResult<f64> {
    if area_m2.is_finite() && area_m2 > 0.0 && area_m2 <= whole_m2 * (1.0 + ROUNDING) {
        Ok(area_m2.min(whole_m2))
    } else {
        Err(geometry_error(format!(
            "an area of {area_m2} m2 cannot be cut from {of_what}; it must be positive and at most {whole_m2} m2"
        )))
    }
}

/// Depth of the segment of this area, 0 to the diameter.
pub(crate) fn segment_depth_m(radius_m: f64, area_m2: f64) -> EngineResult<f64> {
    width_from_left_m(radius_m, -radius_m, area_m2)
}

/// Width of the strip to the right of `left_m` that has this area.
///
/// # Errors
/// A geometry error if the line is not in the disc or the disc has less than this area to its right.
pub(crate) fn width_from_left_m(radius_m: f64, left_m: f64, area_m2: f64) -> EngineResult<f64> {
    let rest = DiscStrip::new(radius_m, left_m, radius_m)?;
    let whole_m2 = rest.area_m2();
    let area_m2 = possible(area_m2, whole_m2, &format!("the disc of radius {radius_m} m beyond x = {left_m} m"))?;
    let most_m = rest.width_m();
    // More than half is found from the other side, where the area still grows with the unknown.
    let (from_m, wanted_m2) =
        if area_m2 <= 0.5 * whole_m2 { (left_m, area_m2) } else { (-radius_m, whole_m2 - area_m2) };
    if wanted_m2 <= 0.0 {
        return Ok(most_m);
    }
    let width_m = reach_area(wanted_m2, most_m, |width_m| {
        let strip = DiscStrip::from_left(radius_m, from_m, width_m);
        (strip.area_m2(), 2.0 * strip.right_half_chord_m())
    })?;
    Ok(if area_m2 <= 0.5 * whole_m2 { width_m } else { most_m - width_m })
}

/// The line y at and above which the strip has this area; negative if that is more than half of it.
///
/// # Errors
/// A geometry error if the area is not positive or exceeds the strip's.
pub(crate) fn corner_line_m(strip: &DiscStrip, area_m2: f64) -> EngineResult<f64> {
    let whole_m2 = strip.area_m2();
    let area_m2 = possible(area_m2, whole_m2, &strip_name(strip))?;
    if area_m2 <= 0.5 * whole_m2 {
        Ok(strip.top_m() - corner_depth_m(strip, area_m2)?)
    } else if whole_m2 > area_m2 {
        Ok(corner_depth_m(strip, whole_m2 - area_m2)? - strip.top_m())
    } else {
        Ok(-strip.top_m())
    }
}

/// Depth below the strip's highest point of the line above which it has this area, at most half of the strip's.
///
/// # Errors
/// A geometry error if the area is not positive or exceeds half of the strip's.
pub(crate) fn corner_depth_m(strip: &DiscStrip, area_m2: f64) -> EngineResult<f64> {
    let most_m2 = 0.5 * strip.area_m2();
    let area_m2 = possible(area_m2, most_m2, &format!("the upper half of {}", strip_name(strip)))?;
    reach_area(area_m2, strip.top_m(), |depth_m| strip.corner_below_top(depth_m))
}

/// Half-width w of the central band |y| < w that has this area in the strip.
///
/// # Errors
/// A geometry error if the area is not positive or exceeds the strip's.
pub(crate) fn band_half_width_m(strip: &DiscStrip, area_m2: f64) -> EngineResult<f64> {
    let whole_m2 = strip.area_m2();
    let area_m2 = possible(area_m2, whole_m2, &strip_name(strip))?;
    if area_m2 <= 0.5 * whole_m2 {
        reach_area(area_m2, strip.top_m(), |half_m| (strip.band_area_m2(half_m), 2.0 * strip.line_length_m(half_m)))
    } else if whole_m2 > area_m2 {
        Ok(strip.top_m() - corner_depth_m(strip, 0.5 * (whole_m2 - area_m2))?)
    } else {
        Ok(strip.top_m())
    }
}

fn strip_name(strip: &DiscStrip) -> String {
    format!(
        "the strip from x = {} m to x = {} m of a disc of radius {} m",
        strip.left_m(),
        strip.right_m(),
        strip.radius_m()
    )
}
