//! Single pieces of a disc that need care in floating point: an angle from two points, theta - sin theta, a sum of squares
//! that cancels. Metres and radians.

/// theta - sin(theta) without cancellation, theta in radians, 0 to 2 pi.
///
/// Below 0.5 the alternating series (first term left out is below 1e-16 of the sum), above it the plain difference.
pub(crate) fn angle_less_sine(theta_rad: f64) -> f64 {
    if theta_rad.abs() > 0.5 {
        return theta_rad - theta_rad.sin();
    }
    let square = theta_rad * theta_rad;
    // Nested from the inside: each divisor is (2k)(2k+1).
    let mut sum = 1.0;
    for divisor in [210.0, 156.0, 110.0, 72.0, 42.0, 20.0] {
        sum = 1.0 - square / divisor * sum;
    }
    theta_rad * square / 6.0 * sum
}

/// r^2 - a^2 - b^2 to within a rounding of the result: the products are kept exact by fused multiply-add and the sums by
/// their rounding errors, because a corner close to the arc lives on this difference alone.
pub(crate) fn squares_left(r_m: f64, a_m: f64, b_m: f64) -> f64 {
    let (rr, rr_rest) = exact_square(r_m);
    let (aa, aa_rest) = exact_square(a_m);
    let (bb, bb_rest) = exact_square(b_m);
    let (first, first_rest) = exact_difference(rr, aa);
    let (second, second_rest) = exact_difference(first, bb);
    second + (second_rest + first_rest + (rr_rest - aa_rest - bb_rest))
}

fn exact_square(x: f64) -> (f64, f64) {
    let square = x * x;
    (square, x.mul_add(x, -square))
}

/// Knuth's two-sum, for a difference.
fn exact_difference(x: f64, y: f64) -> (f64, f64) {
    let difference = x - y;
    let seen = difference - x;
    (difference, (x - (difference - seen)) - (y + seen))
}

/// The piece of the upper half disc over the chord from (x, y) to (x, y): two points of the circle, left one first.
/// `width_m` is the second x less the first, given because it may be known better than the difference of the two.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Arc {
    pub(crate) radius_m: f64,
    pub(crate) from_m: (f64, f64),
    pub(crate) to_m: (f64, f64),
    pub(crate) width_m: f64,
}

impl Arc {
    /// Angle between the two points as seen from the centre, 0 to pi.
    pub(crate) fn angle_rad(&self) -> f64 {
        let ((x1, y1), (x2, y2)) = (self.from_m, self.to_m);
        let cross = if x1 * x2 > 0.0 {
            // On one side of the axis the two products nearly cancel; multiplied out with their sum they do not.
            self.radius_m * self.radius_m * self.width_m * (x1 + x2) / (x2 * y1 + x1 * y2)
        } else {
            x2 * y1 - x1 * y2
        };
        cross.atan2(y1 * y2 + x1 * x2)
    }

    /// Area between the chord and the arc, m2.
    pub(crate) fn segment_area_m2(&self) -> f64 {
        0.5 * self.radius_m * self.radius_m * angle_less_sine(self.angle_rad())
    }

    /// Centroid of the piece between chord and arc.
    pub(crate) fn segment_centroid_m(&self) -> (f64, f64) {
        let ((x1, y1), (x2, y2)) = (self.from_m, self.to_m);
        let rise_m = if y1 + y2 > 0.0 { -self.width_m * (x1 + x2) / (y1 + y2) } else { 0.0 };
        let chord_m = self.width_m.hypot(rise_m);
        let angle_rad = self.angle_rad();
        let distance_m = 4.0 * self.radius_m * (0.5 * angle_rad).sin().powi(3) / (3.0 * angle_less_sine(angle_rad));
        (-rise_m / chord_m * distance_m, self.width_m / chord_m * distance_m)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_branches_of_angle_less_sine_meet() {
        let (below, above) = (angle_less_sine(0.5), 0.5 - 0.5_f64.sin());
        assert!((below / above - 1.0).abs() < 2e-14, "{below} {above}");
    }

    #[test]
    fn squares_that_cancel_leave_the_exact_rest() {
        // 3-4-5: the rest is exactly the square of the shift's effect, (5 + d)^2 - 25 with d = 2^-40.
        let d = 2.0_f64.powi(-40);
        assert_eq!(squares_left(5.0, 3.0, 4.0), 0.0);
        let exact = 10.0 * d + d * d;
        assert!((squares_left(5.0 + d, 3.0, 4.0) / exact - 1.0).abs() < 1e-15);
    }
}
