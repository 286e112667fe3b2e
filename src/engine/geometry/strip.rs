//! A place of the column in cross-section: a compartment between two walls or wall and shell, or the whole disc.

use super::inverse;
use super::kernel::DiscStrip;
use crate::engine::error::EngineResult;
use crate::engine::units::{Area, Length, Si};

/// The part of a disc between two lines x = const. Never empty.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Strip {
    kernel: DiscStrip,
}

/// The part of a strip above a line y = const: what a downcomer at the end of a compartment takes. May be empty.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Corner {
    strip: DiscStrip,
    line_m: f64,
}

impl Strip {
    pub(crate) fn from_kernel(kernel: DiscStrip) -> Self {
        Self { kernel }
    }

    pub(crate) fn kernel(&self) -> &DiscStrip {
        &self.kernel
    }

    /// Radius of the disc.
    pub fn radius(&self) -> Length {
        Length::from_si(self.kernel.radius_m())
    }

    /// Signed distance of the left face from the axis.
    pub fn left(&self) -> Length {
        Length::from_si(self.kernel.left_m())
    }

    /// Signed distance of the right face from the axis.
    pub fn right(&self) -> Length {
        Length::from_si(self.kernel.right_m())
    }

    /// Area.
    pub fn area(&self) -> Area {
        Area::from_si(self.kernel.area_m2())
    }

    /// Greatest extent across the walls: right face less left face.
    pub fn clear_depth(&self) -> Length {
        Length::from_si(self.kernel.width_m())
    }

    /// Length of the chord at distance x from the axis; zero outside the strip.
    pub fn chord_at(&self, x: Length) -> Length {
        Length::from_si(self.kernel.chord_at_m(x.si()))
    }

    /// Length of the left face; zero where the strip reaches the shell.
    pub fn left_chord(&self) -> Length {
        Length::from_si(2.0 * self.kernel.left_half_chord_m())
    }

    /// Length of the right face; zero where the strip reaches the shell.
    pub fn right_chord(&self) -> Length {
        Length::from_si(2.0 * self.kernel.right_half_chord_m())
    }

    /// Length of shell that bounds the strip (both ends of a strip between two walls).
    pub fn arc_length(&self) -> Length {
        Length::from_si(self.kernel.arc_length_m())
    }

    /// Shell and walls around the strip.
    pub fn perimeter(&self) -> Length {
        self.arc_length() + self.left_chord() + self.right_chord()
    }

    /// Four times the area over the perimeter.
    pub fn hydraulic_diameter(&self) -> Length {
        4.0 * self.area() / self.perimeter()
    }

    /// Signed distance of the centroid from the axis (along the wall it lies in the middle).
    pub fn centroid(&self) -> Length {
        // A strip is never empty; if its area is lost to underflow its middle is as good as its centroid.
        let middle_m = 0.5 * (self.kernel.left_m() + self.kernel.right_m());
        Length::from_si(self.kernel.centroid_m().unwrap_or(middle_m))
    }

    /// The part between two further lines x = const; a line beyond a face cuts nothing off.
    ///
    /// # Errors
    /// `EngineError::Geometry` if nothing is left between them.
    pub fn part(&self, left: Length, right: Length) -> EngineResult<Self> {
        let (left_m, right_m) = (left.si().max(self.kernel.left_m()), right.si().min(self.kernel.right_m()));
        DiscStrip::new(self.kernel.radius_m(), left_m, right_m).map(Self::from_kernel)
    }

    /// Length of the line y = const inside the strip; zero where it misses.
    pub fn line_length(&self, y: Length) -> Length {
        Length::from_si(self.kernel.line_length_m(y.si()))
    }

    /// What lies above the line y = const (any sign; empty or the whole strip where the line misses).
    pub fn corner(&self, y: Length) -> Corner {
        Corner { strip: self.kernel, line_m: y.si() }
    }

    /// The line y = const above which the strip has this area.
    ///
    /// # Errors
    /// `EngineError::Geometry` unless the area is positive and at most the strip's.
    pub fn line_for_corner_area(&self, area: Area) -> EngineResult<Length> {
        inverse::corner_line_m(&self.kernel, area.si()).map(Length::from_si)
    }

    /// Depth below the strip's highest point of the line above which it has this area; exact for the smallest areas.
    ///
    /// # Errors
    /// `EngineError::Geometry` unless the area is positive and at most half of the strip's.
    pub fn depth_for_corner_area(&self, area: Area) -> EngineResult<Length> {
        inverse::corner_depth_m(&self.kernel, area.si()).map(Length::from_si)
    }

    /// Area of the central band |y| < `half_width`.
    pub fn band_area(&self, half_width: Length) -> Area {
        Area::from_si(self.kernel.band_area_m2(half_width.si()))
    }

    /// Half-width of the central band |y| < w of this area.
    ///
    /// # Errors
    /// `EngineError::Geometry` unless the area is positive and at most the strip's.
    pub fn half_width_for_band_area(&self, area: Area) -> EngineResult<Length> {
        inverse::band_half_width_m(&self.kernel, area.si()).map(Length::from_si)
    }
}

impl Corner {
    /// Area; zero if the line lies above the strip.
    pub fn area(&self) -> Area {
        Area::from_si(self.strip.corner_area_m2(self.line_m))
    }

    /// Length of the line that cuts it off: the weir.
    pub fn line_length(&self) -> Length {
        Length::from_si(self.strip.line_length_m(self.line_m))
    }

    /// Length of shell that bounds it.
    pub fn arc_length(&self) -> Length {
        Length::from_si(self.strip.corner_arc_length_m(self.line_m))
    }

    /// Centroid: distances across and along the wall from the axis; none if the corner is empty.
    pub fn centroid(&self) -> Option<(Length, Length)> {
        let (x_m, y_m) = self.strip.corner_centroid_m(self.line_m)?;
        Some((Length::from_si(x_m), Length::from_si(y_m)))
    }
}

#[cfg(test)]
mod tests {
    use crate::engine::geometry::Disc;
    use crate::engine::units::{Area, Length, Si};

    fn metres(x: f64) -> Length {
        Length::from_si(x)
    }

    #[test]
    fn lines_that_miss_leave_nothing_or_everything() {
        let strip = Disc::from_diameter(metres(2.0)).unwrap().strip(metres(0.6), metres(0.9)).unwrap();
        // The strip's highest point is 0.8.
        for (line_m, share) in [(0.8, 0.0), (0.85, 0.0), (1.5, 0.0), (-0.8, 1.0), (-0.95, 1.0), (-3.0, 1.0)] {
            let corner = strip.corner(metres(line_m));
            assert_eq!(corner.area(), strip.area() * share, "line at {line_m}");
            assert_eq!(corner.arc_length(), strip.arc_length() * share, "line at {line_m}");
            assert_eq!(corner.line_length().si(), 0.0, "line at {line_m}");
            assert_eq!(corner.centroid().is_some(), share > 0.0);
        }
        assert_eq!(strip.band_area(metres(0.8)), strip.area());
        assert_eq!(strip.band_area(metres(-0.1)).si(), 0.0);
        assert_eq!(strip.chord_at(metres(0.95)).si(), 0.0);
    }

    #[test]
    fn line_through_the_middle_halves_the_strip() {
        let strip = Disc::from_diameter(metres(3.0)).unwrap().strip(metres(-0.2), metres(1.1)).unwrap();
        let half = strip.corner(metres(0.0));
        assert!((half.area() / strip.area() - Area::from_si(0.5) / Area::from_si(1.0)).si().abs() < 1e-15);
        assert_eq!(half.line_length(), strip.clear_depth());
        assert!((strip.line_for_corner_area(half.area()).unwrap()).si().abs() < 1e-15);
    }

    #[test]
    fn areas_that_the_strip_has_not_are_refused() {
        let strip = Disc::from_diameter(metres(3.0)).unwrap().strip(metres(-0.2), metres(1.1)).unwrap();
        for area in [0.0, -0.1, 100.0, f64::NAN] {
            let area = Area::from_si(area);
            assert!(strip.line_for_corner_area(area).is_err());
            assert!(strip.depth_for_corner_area(area).is_err());
            assert!(strip.half_width_for_band_area(area).is_err());
        }
        assert!(strip.part(metres(1.2), metres(1.3)).is_err());
    }
}
