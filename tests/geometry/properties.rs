//! What holds for every disc, wall and line. A failing case found here becomes a named test; no files are kept.

use super::{disc, m, strip};
use chordwall::engine::geometry::{Strip, compartments, position_for_area, positions_for_shares, wall_area};
use chordwall::engine::units::{Length, Si};
use proptest::prelude::*;

fn config() -> ProptestConfig {
    ProptestConfig { failure_persistence: None, cases: 512, ..ProptestConfig::default() }
}

/// Radius, and two faces within it.
fn any_strip() -> impl Strategy<Value = (f64, f64, f64)> {
    (0.2..6.0_f64, -1.0..1.0_f64, -1.0..1.0_f64)
        .prop_filter("two faces", |(_, a, b)| (a - b).abs() > 1e-6)
        .prop_map(|(radius, a, b)| (radius, radius * a.min(b), radius * a.max(b)))
}

fn close(a: f64, b: f64, scale: f64) -> Result<(), TestCaseError> {
    prop_assert!((a - b).abs() <= 1e-13 * scale.abs(), "{a} against {b}");
    Ok(())
}

fn same(a: Length, b: Length, scale: f64) -> Result<(), TestCaseError> {
    close(a.si(), b.si(), scale)
}

proptest! {
    #![proptest_config(config())]

    #[test]
    fn compartments_and_walls_make_the_disc(
        radius in 0.2..6.0_f64,
        gaps in prop::collection::vec(0.05..1.0_f64, 2..6),
        thickness in 0.0..0.03_f64,
    ) {
        let (disc, thickness) = (disc(radius), m(radius * thickness));
        let total: f64 = gaps.iter().sum();
        let mut at = -1.0;
        let mut positions: Vec<Length> = gaps.iter().map(|gap| { at += 2.0 * gap / total; m(radius * at) }).collect();
        positions.pop();
        prop_assume!(gaps.iter().all(|gap| 2.0 * radius * gap / total > 1.01 * thickness.si()));
        let strips = compartments(&disc, &positions, thickness).unwrap();
        prop_assert_eq!(strips.len(), gaps.len());
        let mut sum: f64 = strips.iter().map(|strip| strip.area().si()).sum();
        let mut arcs: f64 = strips.iter().map(|strip| strip.arc_length().si()).sum();
        for &position in &positions {
            sum += wall_area(&disc, position, thickness).unwrap().si();
            if thickness.si() > 0.0 {
                arcs += disc.strip(position - thickness / 2.0, position + thickness / 2.0).unwrap().arc_length().si();
            }
        }
        close(sum, std::f64::consts::PI * radius * radius, radius * radius)?;
        close(arcs, 2.0 * std::f64::consts::PI * radius, radius)?;
    }

    #[test]
    fn position_and_area_are_each_others_inverse((radius, left, right) in any_strip(), thickness in 0.0..0.05_f64) {
        let thickness = m(thickness);
        let area = strip(radius, left, right).area();
        let position = position_for_area(&disc(radius), m(left), area, thickness).unwrap();
        // Near the shell the area hardly depends on the face: its own rounding over the chord is what can be had.
        let chord = disc(radius).chord_at(m(right)).si().max(1e-5 * radius);
        close(position.si() - 0.5 * thickness.si(), right, radius * (1.0 + radius / chord))?;
        let again = disc(radius).strip(m(left), (position - thickness / 2.0).min(m(radius))).unwrap();
        close(again.area().si(), area.si(), radius * radius)?;
    }

    #[test]
    fn positions_give_the_shares_asked_for_and_mirror_with_them(
        radius in 0.2..6.0_f64,
        weights in prop::collection::vec(0.1..1.0_f64, 2..5),
        thickness in 0.0..0.04_f64,
    ) {
        let (disc, thickness) = (disc(radius), m(radius * thickness));
        let positions = positions_for_shares(&disc, &weights, thickness).unwrap();
        let areas: Vec<f64> =
            compartments(&disc, &positions, thickness).unwrap().iter().map(|strip| strip.area().si()).collect();
        let (sum, of): (f64, f64) = (areas.iter().sum(), weights.iter().sum());
        for (area, weight) in areas.iter().zip(&weights) {
            close(area / sum, weight / of, 1.0)?;
        }
        let reversed: Vec<f64> = weights.iter().rev().copied().collect();
        let mirrored = positions_for_shares(&disc, &reversed, thickness).unwrap();
        for (position, other) in positions.iter().zip(mirrored.iter().rev()) {
            same(*position, -*other, 10.0 * radius)?;
        }
    }

    #[test]
    fn mirror_changes_nothing_but_the_side((radius, left, right) in any_strip(), line in -1.0..1.0_f64) {
        let (one, other) = (strip(radius, left, right), strip(radius, -right, -left));
        let line = m(line * radius);
        close(one.area().si(), other.area().si(), one.area().si())?;
        same(one.centroid(), -other.centroid(), radius)?;
        same(one.hydraulic_diameter(), other.hydraulic_diameter(), radius)?;
        close(one.corner(line).area().si(), other.corner(line).area().si(), one.corner(line).area().si())?;
        same(one.corner(line).arc_length(), other.corner(line).arc_length(), radius)?;
        same(one.line_length(line), other.line_length(line), radius)?;
        prop_assert_eq!(one.corner(line).centroid().is_some(), other.corner(line).centroid().is_some());
        if let (Some((x, y)), Some((mirrored_x, mirrored_y))) =
            (one.corner(line).centroid(), other.corner(line).centroid())
        {
            same(x, -mirrored_x, radius)?;
            same(y, mirrored_y, radius)?;
        }
    }

    #[test]
    fn turning_the_disc_by_a_right_angle_changes_nothing(radius in 0.2..6.0_f64, p in -1.0..1.0_f64, q in -1.0..1.0_f64) {
        let (p, q) = (p * radius, q * radius);
        let whole = disc(radius).whole().unwrap();
        let beyond: Strip = strip(radius, p, radius);
        // A half-plane, cut as a corner of the whole disc and as a strip.
        close(whole.corner(m(p)).area().si(), beyond.area().si(), beyond.area().si())?;
        close(whole.corner(m(p)).arc_length().si(), beyond.arc_length().si(), radius)?;
        same(whole.corner(m(p)).centroid().unwrap().1, beyond.centroid(), 10.0 * radius)?;
        same(whole.line_length(m(p)), disc(radius).chord_at(m(p)), radius)?;
        // A quadrant {x > p, y > q} turned into {x > q, y > p}.
        let turned = strip(radius, q, radius);
        close(beyond.corner(m(q)).area().si(), turned.corner(m(p)).area().si(), radius * radius)?;
        close(beyond.corner(m(q)).arc_length().si(), turned.corner(m(p)).arc_length().si(), 10.0 * radius)?;
    }

    #[test]
    fn corners_and_bands_add_up((radius, left, right) in any_strip(), line in 0.0..1.0_f64, split in 0.01..0.99_f64) {
        let strip = strip(radius, left, right);
        let line = m(line * radius);
        let area = strip.area().si();
        let (above, below) = (strip.corner(line), strip.corner(-line));
        close(above.area().si() + below.area().si(), area, area)?;
        same(above.arc_length() + below.arc_length(), strip.arc_length(), radius)?;
        close(strip.band_area(line).si() + 2.0 * above.area().si(), area, area)?;
        let between = m(left + split * (right - left));
        let parts = [strip.part(m(left), between).unwrap(), strip.part(between, m(right)).unwrap()];
        for at in [line, -line] {
            let sum: f64 = parts.iter().map(|part| part.corner(at).area().si()).sum();
            close(sum, strip.corner(at).area().si(), area)?;
            let length: f64 = parts.iter().map(|part| part.line_length(at).si()).sum();
            close(length, strip.line_length(at).si(), radius)?;
        }
    }

    #[test]
    fn areas_grow_with_what_they_enclose((radius, left, right) in any_strip(), line in -1.0..1.0_f64, step in 1e-6..0.5_f64) {
        let strip = strip(radius, left, right);
        let wider = disc(radius).strip(m(left), m((right + step).min(radius))).unwrap();
        let (line, lower) = (m(line * radius), m(line * radius - step));
        prop_assert!(wider.area() > strip.area());
        prop_assert!(wider.corner(line).area() >= strip.corner(line).area());
        prop_assert!(strip.corner(lower).area() >= strip.corner(line).area());
        prop_assert!(strip.band_area(line.abs() + m(step)) >= strip.band_area(line.abs()));
    }

    #[test]
    fn lines_come_back_from_the_areas_they_cut((radius, left, right) in any_strip(), share in 1e-6..0.999_f64) {
        let strip = strip(radius, left, right);
        let area = strip.area() * share;
        let line = strip.line_for_corner_area(area).unwrap();
        close(strip.corner(line).area().si(), area.si(), strip.area().si())?;
        let half_width = strip.half_width_for_band_area(area).unwrap();
        close(strip.band_area(half_width).si(), area.si(), strip.area().si())?;
    }

    #[test]
    fn everything_scales_with_the_disc((radius, left, right) in any_strip(), line in -1.0..1.0_f64, k in 0.1..10.0_f64) {
        let (one, scaled) = (strip(radius, left, right), strip(k * radius, k * left, (k * right).min(k * radius)));
        let (line, scaled_line) = (m(line * radius), m(k * line * radius));
        // k times a face rounds, which a strip of a millionth of the radius feels in its tenth digit.
        close(scaled.area().si(), k * k * one.area().si(), k * k * radius * radius)?;
        close(scaled.corner(scaled_line).area().si(), k * k * one.corner(line).area().si(), k * k * radius * radius)?;
        same(scaled.centroid(), one.centroid() * k, 10.0 * k * radius)?;
    }
}

/// Area and first moments of {left < x < right, y > line} by Simpson's rule over the angle from the y axis.
fn by_simpson(radius: f64, left: f64, right: f64, line: f64) -> (f64, f64, f64) {
    const STEPS: usize = 4000;
    let reach = if line >= 0.0 { (radius * radius - line * line).sqrt() } else { radius };
    let (from, to) = ((left.max(-reach) / radius).asin(), (right.min(reach) / radius).asin());
    let step = (to - from) / STEPS as f64;
    let mut sums = (0.0, 0.0, 0.0);
    for i in 0..=STEPS {
        let weight = if i == 0 || i == STEPS { 1.0 } else { 2.0 + 2.0 * (i % 2) as f64 };
        let angle = from + step * i as f64;
        let (x, top) = (radius * angle.sin(), radius * angle.cos());
        // Where the lower arc lies above the line it is the lower bound.
        let bottom = line.max(-top);
        let strip = weight * step / 3.0 * top * (top - bottom);
        sums = (sums.0 + strip, sums.1 + strip * x, sums.2 + strip * 0.5 * (top + bottom));
    }
    sums
}

#[test]
fn areas_and_centroids_agree_with_numerical_integration() {
    let places =
        [(1.0, -1.0, 1.0), (1.5, 0.2, 1.5), (1.5, -1.5, 0.3), (2.0, -0.7, 0.9), (0.8, 0.3, 0.5), (3.0, -2.8, -1.0)];
    for (radius, left, right) in places {
        let strip = strip(radius, left, right);
        // The rule is exact to about h^4 where the integrand is smooth; a line below the axis makes a kink at its ends.
        for (share, tolerance) in [(0.0, 1e-12), (0.3, 1e-12), (0.55, 1e-12), (-0.4, 1e-6), (-0.8, 1e-6), (-1.0, 1e-12)]
        {
            let corner = strip.corner(m(share * radius));
            let Some((x, y)) = corner.centroid() else {
                assert_eq!(corner.area().si(), 0.0);
                continue;
            };
            let (area, about_y, about_x) = by_simpson(radius, left, right, share * radius);
            assert!((corner.area().si() / area - 1.0).abs() < tolerance, "area {left} {right} {share}");
            assert!((x.si() - about_y / area).abs() < tolerance * radius, "x {left} {right} {share}");
            assert!((y.si() - about_x / area).abs() < tolerance * radius, "y {left} {right} {share}");
        }
        let (area, about_y, _) = by_simpson(radius, left, right, -radius);
        assert!((strip.centroid().si() - about_y / area).abs() < 1e-12 * radius);
    }
}
