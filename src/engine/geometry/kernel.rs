//! Exact figures of a strip of a disc, in metres: every sum is of positive terms, so thin pieces keep their digits.
//!
//! The disc has its centre at the origin; the strip is left < x < right inside it. Knows no quantities and no trays.

use super::piece::{Arc, squares_left};
use crate::engine::error::{EngineError, EngineResult};

/// The part of the disc between two lines x = const.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct DiscStrip {
    radius_m: f64,
    left_m: f64,
    right_m: f64,
    /// Right less left; kept because it may be known better than their difference.
    width_m: f64,
    left_half_chord_m: f64,
    right_half_chord_m: f64,
}

/// What lies above the line y = `line_m` >= 0 in a strip: a trapezoid (its base on the line) and an arc above it.
#[derive(Clone, Copy, Debug)]
struct Cap {
    line_m: f64,
    arc: Arc,
    left_height_m: f64,
    right_height_m: f64,
}

/// An area with its first moments about the axes, m2 and m3.
#[derive(Clone, Copy, Debug)]
struct Moments {
    area_m2: f64,
    about_y_m3: f64,
    about_x_m3: f64,
}

/// Half of the chord at distance x, from the two distances to the circle.
fn half_chord_m(to_right_m: f64, to_left_m: f64) -> f64 {
    (to_right_m.max(0.0) * to_left_m.max(0.0)).sqrt()
}

/// An error of this module.
pub(crate) fn geometry_error(what: String) -> EngineError {
    EngineError::Geometry { what }
}

impl DiscStrip {
    /// The whole disc. The radius must be positive and finite.
    pub(crate) fn whole(radius_m: f64) -> EngineResult<Self> {
        if radius_m.is_finite() && radius_m > 0.0 {
            Ok(Self {
                radius_m,
                left_m: -radius_m,
                right_m: radius_m,
                width_m: 2.0 * radius_m,
                left_half_chord_m: 0.0,
                right_half_chord_m: 0.0,
            })
        } else {
            Err(geometry_error(format!("a radius of {radius_m} m cannot be; it must be positive and finite")))
        }
    }

    /// The strip from `left_m` to `right_m`, which must lie in the disc in this order.
    pub(crate) fn new(radius_m: f64, left_m: f64, right_m: f64) -> EngineResult<Self> {
        Self::whole(radius_m)?;
        if !(left_m.is_finite()
            && right_m.is_finite()
            && -radius_m <= left_m
            && left_m < right_m
            && right_m <= radius_m)
        {
            return Err(geometry_error(format!(
                "a strip from x = {left_m} m to x = {right_m} m cannot be cut from a disc of radius {radius_m} m; \
                 it needs -{radius_m} <= left < right <= {radius_m}"
            )));
        }
        Ok(Self {
            radius_m,
            left_m,
            right_m,
            width_m: right_m - left_m,
            left_half_chord_m: half_chord_m(radius_m - left_m, radius_m + left_m),
            right_half_chord_m: half_chord_m(radius_m - right_m, radius_m + right_m),
        })
    }

    /// The strip of `width_m` to the right of `left_m`, for widths so small that left + width would lose them.
    /// A width that reaches beyond the disc ends at the disc; a width below zero counts as zero.
    pub(crate) fn from_left(radius_m: f64, left_m: f64, width_m: f64) -> Self {
        let width_m = width_m.clamp(0.0, (radius_m - left_m).max(0.0));
        let to_right_m = (radius_m - left_m) - width_m;
        let to_left_m = (radius_m + left_m) + width_m;
        Self {
            radius_m,
            left_m,
            right_m: left_m + width_m,
            width_m,
            left_half_chord_m: half_chord_m(radius_m - left_m, radius_m + left_m),
            right_half_chord_m: half_chord_m(to_right_m, to_left_m),
        }
    }

    pub(crate) fn radius_m(&self) -> f64 {
        self.radius_m
    }
    pub(crate) fn left_m(&self) -> f64 {
        self.left_m
    }
    pub(crate) fn right_m(&self) -> f64 {
        self.right_m
    }
    pub(crate) fn width_m(&self) -> f64 {
        self.width_m
    }
    pub(crate) fn left_half_chord_m(&self) -> f64 {
        self.left_half_chord_m
    }
    pub(crate) fn right_half_chord_m(&self) -> f64 {
        self.right_half_chord_m
    }

    /// Height of the strip's highest point above the axis.
    pub(crate) fn top_m(&self) -> f64 {
        if self.left_m > 0.0 {
            self.left_half_chord_m
        } else if self.right_m < 0.0 {
            self.right_half_chord_m
        } else {
            self.radius_m
        }
    }

    /// The upper arc of the strip.
    fn upper_arc(&self) -> Arc {
        Arc {
            radius_m: self.radius_m,
            from_m: (self.left_m, self.left_half_chord_m),
            to_m: (self.right_m, self.right_half_chord_m),
            width_m: self.width_m,
        }
    }

    /// Angle of the upper arc (the lower one has the same), 0 to pi.
    fn angle_rad(&self) -> f64 {
        if self.width_m > 0.0 { self.upper_arc().angle_rad() } else { 0.0 }
    }

    /// Area, m2: both circular segments over the arcs' chords and the trapezoid between them,
    /// r^2 (theta - sin theta) + width^2 / tan(theta/2).
    pub(crate) fn area_m2(&self) -> f64 {
        let angle_rad = self.angle_rad();
        if angle_rad <= 0.0 {
            return 0.0;
        }
        self.radius_m * self.radius_m * super::piece::angle_less_sine(angle_rad)
            + self.width_m * self.width_m / (0.5 * angle_rad).tan()
    }

    /// Both arcs together, m.
    pub(crate) fn arc_length_m(&self) -> f64 {
        2.0 * self.radius_m * self.angle_rad()
    }

    /// Full chord at x, m; zero outside the strip.
    pub(crate) fn chord_at_m(&self, x_m: f64) -> f64 {
        if x_m >= self.left_m && x_m <= self.right_m {
            2.0 * half_chord_m(self.radius_m - x_m, self.radius_m + x_m)
        } else {
            0.0
        }
    }

    /// Distance of the centroid from the axis, m; none for an empty strip.
    pub(crate) fn centroid_m(&self) -> Option<f64> {
        let area_m2 = self.area_m2();
        (area_m2 > 0.0).then(|| self.moment_about_y_m3() / area_m2)
    }

    /// (2/3)(c_left^3 - c_right^3) with the difference of the half chords written out.
    fn moment_about_y_m3(&self) -> f64 {
        let (left, right) = (self.left_half_chord_m, self.right_half_chord_m);
        if left + right <= 0.0 {
            return 0.0;
        }
        let difference_m = self.width_m * (self.left_m + self.right_m) / (left + right);
        2.0 / 3.0 * difference_m * (left * left + left * right + right * right)
    }

    /// What lies above y = `line_m` >= 0; none if nothing does.
    fn cap(&self, line_m: f64) -> Option<Cap> {
        if line_m >= self.radius_m {
            return None;
        }
        let reach_m = half_chord_m(self.radius_m - line_m, self.radius_m + line_m);
        let height_m = |x_m: f64, half_chord_m: f64| {
            let rest_m2 = squares_left(self.radius_m, x_m, line_m);
            if rest_m2 == 0.0 { 0.0 } else { rest_m2 / (half_chord_m + line_m) }
        };
        let left_height_m = height_m(self.left_m, self.left_half_chord_m);
        self.cap_from(line_m, reach_m, left_height_m, height_m(self.right_m, self.right_half_chord_m))
    }

    /// What lies above the line `depth_m` below the strip's highest point; keeps the digits of small depths.
    fn cap_below_top(&self, depth_m: f64) -> Option<Cap> {
        let top_m = self.top_m();
        let fall_m2 = depth_m * (2.0 * top_m - depth_m);
        // How far the two ends of the upper arc lie below the highest point, as differences of squares over sums.
        let end_to_end_m2 = self.width_m * (self.left_m + self.right_m);
        let (from_axis_m2, left_drop_m2, right_drop_m2) = if self.left_m > 0.0 {
            (self.left_m * self.left_m, 0.0, end_to_end_m2)
        } else if self.right_m < 0.0 {
            (self.right_m * self.right_m, -end_to_end_m2, 0.0)
        } else {
            (0.0, self.left_m * self.left_m, self.right_m * self.right_m)
        };
        let height_m = |drop_m2: f64, half_chord_m: f64| depth_m - drop_m2 / (top_m + half_chord_m);
        self.cap_from(
            (top_m - depth_m).max(0.0),
            (from_axis_m2 + fall_m2).sqrt(),
            height_m(left_drop_m2, self.left_half_chord_m),
            height_m(right_drop_m2, self.right_half_chord_m),
        )
    }

    /// `reach_m` is half of the disc's chord on the line; the heights are those of the two ends of the upper arc above the
    /// line: negative where the line has left the disc before it meets that end.
    fn cap_from(&self, line_m: f64, reach_m: f64, left_height_m: f64, right_height_m: f64) -> Option<Cap> {
        let (left_inside, right_inside) = (left_height_m > 0.0, right_height_m > 0.0);
        if (!left_inside && self.left_m >= 0.0) || (!right_inside && self.right_m <= 0.0) {
            return None;
        }
        let width_m = self.line_width_m(
            reach_m,
            left_height_m * (self.left_half_chord_m + line_m),
            right_height_m * (self.right_half_chord_m + line_m),
        );
        let end_m = |inside: bool, x_m: f64, half_chord_m: f64, height_m: f64| match inside {
            true => ((x_m, half_chord_m), height_m),
            false => ((reach_m.copysign(x_m), line_m), 0.0),
        };
        let (from_m, left_height_m) = end_m(left_inside, self.left_m, self.left_half_chord_m, left_height_m);
        let (to_m, right_height_m) = end_m(right_inside, self.right_m, self.right_half_chord_m, right_height_m);
        (width_m > 0.0).then_some(Cap {
            line_m,
            arc: Arc { radius_m: self.radius_m, from_m, to_m, width_m },
            left_height_m,
            right_height_m,
        })
    }

    /// Length of a line inside the strip. `reach_m` is half of the disc's chord on the line; the rests are
    /// r^2 - x^2 - line^2 at the two ends, negative where the line has left the disc before it meets that end.
    fn line_width_m(&self, reach_m: f64, left_rest_m2: f64, right_rest_m2: f64) -> f64 {
        match (left_rest_m2 > 0.0, right_rest_m2 > 0.0) {
            (true, true) => self.width_m,
            (true, false) if self.left_m > 0.0 => left_rest_m2 / (reach_m + self.left_m),
            (true, false) => reach_m - self.left_m,
            (false, true) if self.right_m < 0.0 => right_rest_m2 / (reach_m - self.right_m),
            (false, true) => reach_m + self.right_m,
            (false, false) if self.left_m < 0.0 && self.right_m > 0.0 => 2.0 * reach_m,
            (false, false) => 0.0,
        }
    }

    /// Length of the line y = `line_m` inside the strip, m; zero where it misses.
    pub(crate) fn line_length_m(&self, line_m: f64) -> f64 {
        if line_m == 0.0 {
            return self.width_m;
        }
        self.cap(line_m.abs()).map_or(0.0, |cap| cap.arc.width_m)
    }

    /// Area of the strip above y = `line_m` (any sign), m2.
    pub(crate) fn corner_area_m2(&self, line_m: f64) -> f64 {
        let cap_m2 = self.cap(line_m.abs()).map_or(0.0, |cap| cap.area_m2());
        if line_m >= 0.0 { cap_m2 } else { self.area_m2() - cap_m2 }
    }

    /// Area and length of the line at a depth below the strip's highest point, from 0 to that height.
    pub(crate) fn corner_below_top(&self, depth_m: f64) -> (f64, f64) {
        self.cap_below_top(depth_m).map_or((0.0, 0.0), |cap| (cap.area_m2(), cap.arc.width_m))
    }

    /// Length of the arcs that bound the strip above y = `line_m` (any sign), m.
    pub(crate) fn corner_arc_length_m(&self, line_m: f64) -> f64 {
        let cap_m = self.cap(line_m.abs()).map_or(0.0, |cap| self.radius_m * cap.arc.angle_rad());
        if line_m >= 0.0 { cap_m } else { self.arc_length_m() - cap_m }
    }

    /// Centroid of the strip above y = `line_m` (any sign); none if nothing lies there.
    pub(crate) fn corner_centroid_m(&self, line_m: f64) -> Option<(f64, f64)> {
        let cap = self.cap(line_m.abs()).map(|cap| cap.moments());
        let moments = if line_m >= 0.0 {
            cap?
        } else {
            let below = cap.unwrap_or(Moments { area_m2: 0.0, about_y_m3: 0.0, about_x_m3: 0.0 });
            Moments {
                area_m2: self.area_m2() - below.area_m2,
                about_y_m3: self.moment_about_y_m3() - below.about_y_m3,
                about_x_m3: below.about_x_m3,
            }
        };
        (moments.area_m2 > 0.0).then(|| (moments.about_y_m3 / moments.area_m2, moments.about_x_m3 / moments.area_m2))
    }

    /// Area of the central band |y| < `half_width_m`, m2.
    pub(crate) fn band_area_m2(&self, half_width_m: f64) -> f64 {
        if half_width_m <= 0.0 {
            return 0.0;
        }
        if half_width_m >= self.top_m() {
            return self.area_m2();
        }
        let reach_m = half_chord_m(self.radius_m - half_width_m, self.radius_m + half_width_m);
        let left_rest = squares_left(self.radius_m, self.left_m, half_width_m);
        let right_rest = squares_left(self.radius_m, self.right_m, half_width_m);
        let middle_m2 = 2.0 * half_width_m * self.line_width_m(reach_m, left_rest, right_rest);
        // Beyond the ends of the line the band is all that the strip has there.
        let left_m2 = if left_rest < 0.0 && self.left_m < 0.0 {
            Self::from_left(self.radius_m, self.left_m, -left_rest / (reach_m - self.left_m)).area_m2()
        } else {
            0.0
        };
        let right_m2 = if right_rest < 0.0 && self.right_m > 0.0 {
            Self::from_left(self.radius_m, -self.right_m, -right_rest / (reach_m + self.right_m)).area_m2()
        } else {
            0.0
        };
        left_m2 + middle_m2 + right_m2
    }

    /// Length of the arcs of the strip between two lines y = const, m.
    pub(crate) fn arc_between_m(&self, lower_m: f64, upper_m: f64) -> f64 {
        self.corner_arc_length_m(lower_m) - self.corner_arc_length_m(upper_m)
    }

    /// Length of the strip's two straight sides between two lines y = const, m. A side that has shrunk to a point of the
    /// circle has none.
    pub(crate) fn sides_between_m(&self, lower_m: f64, upper_m: f64) -> f64 {
        let side_m = |half_m: f64| (upper_m.min(half_m) - lower_m.max(-half_m)).max(0.0);
        side_m(self.left_half_chord_m) + side_m(self.right_half_chord_m)
    }
}

impl Cap {
    fn trapezoid_area_m2(&self) -> f64 {
        0.5 * self.arc.width_m * (self.left_height_m + self.right_height_m)
    }

    fn area_m2(&self) -> f64 {
        self.trapezoid_area_m2() + self.arc.segment_area_m2()
    }

    fn moments(&self) -> Moments {
        let (left, right) = (self.left_height_m, self.right_height_m);
        let (trapezoid_m2, segment_m2) = (self.trapezoid_area_m2(), self.arc.segment_area_m2());
        let (segment_x_m, segment_y_m) = self.arc.segment_centroid_m();
        let (trapezoid_x_m, trapezoid_y_m) = if left + right > 0.0 {
            (
                self.arc.from_m.0 + self.arc.width_m * (left + 2.0 * right) / (3.0 * (left + right)),
                self.line_m + (left * left + left * right + right * right) / (3.0 * (left + right)),
            )
        } else {
            (0.0, 0.0)
        };
        Moments {
            area_m2: trapezoid_m2 + segment_m2,
            about_y_m3: trapezoid_m2 * trapezoid_x_m + segment_m2 * segment_x_m,
            about_x_m3: trapezoid_m2 * trapezoid_y_m + segment_m2 * segment_y_m,
        }
    }
}
