//! The shell's inner cross-section.

use super::inverse;
use super::kernel::{DiscStrip, geometry_error};
use super::strip::Strip;
use crate::engine::error::EngineResult;
use crate::engine::units::{Area, Length, Si};

/// A disc with its centre at the origin.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Disc {
    radius_m: f64,
}

impl Disc {
    /// A disc of this diameter.
    ///
    /// # Errors
    /// `EngineError::Geometry` unless the diameter is positive and finite.
    pub fn from_diameter(diameter: Length) -> EngineResult<Self> {
        let diameter_m = diameter.si();
        if diameter_m.is_finite() && diameter_m > 0.0 {
            Ok(Self { radius_m: 0.5 * diameter_m })
        } else {
            Err(geometry_error(format!("a diameter of {diameter_m} m cannot be; it must be positive and finite")))
        }
    }

    /// Diameter.
    pub fn diameter(&self) -> Length {
        Length::from_si(2.0 * self.radius_m)
    }

    /// Radius.
    pub fn radius(&self) -> Length {
        Length::from_si(self.radius_m)
    }

    /// Area of the whole disc.
    pub fn area(&self) -> Area {
        // By the way of every other strip, so that the whole and a strip as wide as the disc agree to the last bit.
        Area::from_si(DiscStrip::from_left(self.radius_m, -self.radius_m, 2.0 * self.radius_m).area_m2())
    }

    /// The whole disc as a strip: the place above or below the wall.
    ///
    /// # Errors
    /// None for a disc that was built; the signature is that of every cut.
    pub fn whole(&self) -> EngineResult<Strip> {
        DiscStrip::whole(self.radius_m).map(Strip::from_kernel)
    }

    /// The strip between the lines x = `left` and x = `right`, distances from the axis.
    ///
    /// # Errors
    /// `EngineError::Geometry` unless -radius <= left < right <= radius.
    pub fn strip(&self, left: Length, right: Length) -> EngineResult<Strip> {
        DiscStrip::new(self.radius_m, left.si(), right.si()).map(Strip::from_kernel)
    }

    /// Length of the chord at distance x from the axis; zero where the line misses the disc.
    pub fn chord_at(&self, x: Length) -> Length {
        let (radius_m, x_m) = (self.radius_m, x.si());
        Length::from_si(2.0 * ((radius_m - x_m).max(0.0) * (radius_m + x_m).max(0.0)).sqrt())
    }

    /// Area of the circular segment of this depth, 0 to the diameter; exact for depths of any smallness.
    ///
    /// # Errors
    /// `EngineError::Geometry` for a depth out of that range.
    pub fn segment_area(&self, depth: Length) -> EngineResult<Area> {
        let depth_m = depth.si();
        if (0.0..=2.0 * self.radius_m).contains(&depth_m) {
            Ok(Area::from_si(DiscStrip::from_left(self.radius_m, -self.radius_m, depth_m).area_m2()))
        } else {
            Err(geometry_error(format!(
                "a segment {depth_m} m deep cannot be cut from a disc of diameter {} m; the depth must be between 0 \
                 and the diameter",
                2.0 * self.radius_m
            )))
        }
    }

    /// Depth of the circular segment of this area.
    ///
    /// # Errors
    /// `EngineError::Geometry` unless the area is positive and at most the disc's.
    pub fn segment_depth(&self, area: Area) -> EngineResult<Length> {
        inverse::segment_depth_m(self.radius_m, area.si()).map(Length::from_si)
    }

    /// Width of the strip of this area that begins at x = `left` and lies to its right.
    ///
    /// # Errors
    /// `EngineError::Geometry` if `left` is not in the disc or the disc has less than this area to its right.
    pub fn width_right_of(&self, left: Length, area: Area) -> EngineResult<Length> {
        inverse::width_from_left_m(self.radius_m, left.si(), area.si()).map(Length::from_si)
    }

    /// Right face of the strip of this area that begins at x = `left`.
    ///
    /// # Errors
    /// As [`Disc::width_right_of`].
    pub fn right_face_for_area(&self, left: Length, area: Area) -> EngineResult<Length> {
        Ok(left + self.width_right_of(left, area)?)
    }

    /// Left face of the strip of this area that ends at x = `right`.
    ///
    /// # Errors
    /// As [`Disc::width_right_of`], to the left.
    pub fn left_face_for_area(&self, right: Length, area: Area) -> EngineResult<Length> {
        Ok(right - self.width_right_of(-right, area)?)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::engine::error::EngineError;

    fn disc(diameter_m: f64) -> Disc {
        Disc::from_diameter(Length::from_si(diameter_m)).unwrap()
    }

    #[test]
    fn impossible_diameters_are_refused_with_the_reason() {
        for diameter_m in [0.0, -1.0, f64::NAN, f64::INFINITY] {
            let EngineError::Geometry { what } = Disc::from_diameter(Length::from_si(diameter_m)).unwrap_err() else {
                panic!("another kind of error");
            };
            assert!(what.contains("must be positive and finite"), "{what}");
        }
    }

    #[test]
    fn impossible_areas_are_refused_with_the_most_there_is() {
        let disc = disc(2.0);
        for area_m2 in [0.0, -1.0, 3.2, f64::NAN, f64::INFINITY] {
            let error = disc.segment_depth(Area::from_si(area_m2)).unwrap_err().to_string();
            assert!(error.contains("at most 3.14159265"), "{error}");
        }
        assert!(disc.width_right_of(Length::from_si(1.5), Area::from_si(0.1)).is_err());
        assert!(disc.segment_area(Length::from_si(2.1)).is_err());
        assert!(disc.segment_area(Length::from_si(f64::NAN)).is_err());
    }

    #[test]
    fn segment_as_deep_as_the_disc_is_the_disc() {
        let disc = disc(3.0);
        assert_eq!(disc.segment_area(disc.diameter()).unwrap(), disc.area());
        assert_eq!(disc.segment_depth(disc.area()).unwrap(), disc.diameter());
    }

    #[test]
    fn faces_found_from_either_side_agree() {
        let disc = disc(3.0);
        let (left, right) = (Length::from_si(-0.25), Length::from_si(0.875));
        let area = disc.strip(left, right).unwrap().area();
        assert!((disc.right_face_for_area(left, area).unwrap() - right).si().abs() < 1e-15);
        assert!((disc.left_face_for_area(right, area).unwrap() - left).si().abs() < 1e-15);
    }
}
