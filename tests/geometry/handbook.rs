//! Geometry against printed figures, each within half of its last printed digit unless the source read a chart.

use super::{disc, m, m2, strip};
use chordwall::engine::geometry::{Strip, wall_area};
use chordwall::engine::units::Si;
use std::f64::consts::PI;

/// Printed to `digits` decimals; a hair over half a digit, for figures that end in 5.
fn printed(value: f64, expected: f64, digits: i32, what: &str) {
    assert!((value - expected).abs() <= 0.5001 * 10.0_f64.powi(-digits), "{what}: {value} against {expected}");
}

/// Segment of a disc of diameter 1 with this share of its area: depth and chord, in diameters.
fn segment(share: f64) -> (f64, f64) {
    let disc = disc(0.5);
    let depth = disc.segment_depth(disc.area() * share).unwrap();
    (depth.si(), disc.chord_at(disc.radius() - depth).si())
}

/// Angle at the centre under a chord, degrees.
fn angle_deg(depth_over_diameter: f64) -> f64 {
    2.0 * (1.0 - 2.0 * depth_over_diameter).acos().to_degrees()
}

/// Areas of circular segments over the square of the diameter, by depth over diameter: the table of partly filled pipes in
/// handbooks of hydraulics (King, Handbook of Hydraulics; from memory).
#[test]
#[expect(clippy::approx_constant, reason = "digits as printed")]
fn segment_areas_are_those_of_the_handbook() {
    let table = [
        (0.01, 0.0013),
        (0.02, 0.0037),
        (0.05, 0.0147),
        (0.10, 0.0409),
        (0.15, 0.0739),
        (0.20, 0.1118),
        (0.25, 0.1535),
        (0.30, 0.1982),
        (0.40, 0.2934),
        (0.50, 0.3927),
        (0.60, 0.4920),
        (0.75, 0.6319),
        (0.90, 0.7445),
        (1.00, 0.7854),
    ];
    for (depth, area) in table {
        printed(disc(0.5).segment_area(m(depth)).unwrap().si(), area, 4, &format!("segment {depth}"));
    }
}

/// 12 % of the area: chord 0.76 of the diameter, 99 degrees (Coulson and Richardson vol. 6, read from its chart: the angle is
/// good to a degree); 10 %: 0.727 (Benitez, Principles and Modern Applications of Mass Transfer Operations).
#[test]
fn downcomer_chords_are_those_of_the_textbooks() {
    let (depth, chord) = segment(0.12);
    printed(chord, 0.76, 2, "chord at 12 %");
    assert!((angle_deg(depth) - 99.0).abs() < 1.0, "{}", angle_deg(depth));
    printed(segment(0.10).1, 0.727, 3, "chord at 10 %");
}

/// The chord table of the method notes of this project (exact, worked out there independently, not published).
#[test]
fn chord_table_of_the_notes_comes_out() {
    let table = [
        (0.03, 0.5063, 0.0688, 60.8),
        (0.05, 0.5928, 0.0973, 72.7),
        (0.06, 0.6263, 0.1102, 77.5),
        (0.08, 0.6817, 0.1342, 86.0),
        (0.10, 0.7266, 0.1565, 93.2),
        (0.11, 0.7462, 0.1671, 96.5),
        (0.12, 0.7642, 0.1775, 99.7),
        (0.13, 0.7809, 0.1877, 102.7),
        (0.14, 0.7965, 0.1977, 105.6),
        (0.15, 0.8109, 0.2074, 108.4),
        (0.18, 0.8490, 0.2358, 116.2),
        (0.20, 0.8707, 0.2541, 121.1),
    ];
    for (share, chord, width, angle) in table {
        let (depth, length) = segment(share);
        printed(length, chord, 4, &format!("chord at {share}"));
        printed(depth, width, 4, &format!("width at {share}"));
        printed(angle_deg(depth), angle, 1, &format!("angle at {share}"));
    }
    for (chord, percent) in
        [(0.60, 5.20), (0.65, 6.80), (0.70, 8.77), (0.75, 11.20), (0.77, 12.34), (0.80, 14.24), (0.85, 18.09)]
    {
        let depth = 0.5 * (1.0 - (1.0_f64 - chord * chord).sqrt());
        let area = disc(0.5).segment_area(m(depth)).unwrap();
        printed(100.0 * area.si() / disc(0.5).area().si(), percent, 2, &format!("share at chord {chord}"));
    }
}

/// Centre downcomers, from the same notes.
#[test]
fn centre_downcomers_of_the_notes_come_out() {
    let whole = disc(0.5).whole().unwrap();
    let table = [
        (0.05, 0.0393, 0.9992),
        (0.08, 0.0629, 0.9980),
        (0.10, 0.0786, 0.9969),
        (0.12, 0.0944, 0.9955),
        (0.15, 0.1181, 0.9930),
        (0.20, 0.1577, 0.9875),
    ];
    for (share, width, edge) in table {
        let half = whole.half_width_for_band_area(whole.area() * share).unwrap();
        printed(2.0 * half.si(), width, 4, &format!("width at {share}"));
        printed(whole.line_length(half).si(), edge, 4, &format!("edge at {share}"));
    }
}

/// Half-moon check values of the method notes (R 1.5 m; the corner there also by random sampling).
#[test]
fn half_moon_values_of_the_notes_come_out() {
    let small = strip(1.5, 0.2, 1.5);
    printed(small.area().si(), 2.93607, 5, "side");
    printed(small.area().si() / disc(1.5).area().si(), 0.41537, 5, "share");
    let corner = small.corner(m(0.9));
    printed(corner.area().si(), 0.38410, 5, "corner");
    printed(corner.line_length().si(), 1.0, 4, "its weir");
    printed((small.area() - corner.area() * 2.0).si(), 2.16788, 5, "left between two corners");
    printed(strip(1.5, 0.2, 0.35).area().si(), 0.44218, 5, "wall strip");
    printed(small.chord_at(m(0.35)).si(), 2.91719, 5, "its weir");
    printed(strip(1.5, 1.25, 1.5).area().si(), 0.28135, 5, "arc segment");
    printed(small.chord_at(m(1.25)).si(), 1.65831, 5, "its weir");
}

/// The notes give 0.61874 m2 for the corner (line 0.9) of the large side (wall at -0.2). Their formula integrates up to the wall's
/// end at y = (R^2 - 0.2^2)^0.5 and so, for a wall beyond the axis, leaves out the segment of the disc above that end,
/// 0.00358 m2. The corner itself is half the segment above the line and what lies between wall and axis.
#[test]
fn corner_of_the_large_side_is_the_noted_one_and_the_segment_that_it_leaves_out() {
    let corner = strip(1.5, -0.2, 1.5).corner(m(0.9)).area().si();
    let wall_end = (1.5_f64 * 1.5 - 0.2 * 0.2).sqrt();
    let left_out = 2.25 * (wall_end / 1.5).acos() - 0.2 * wall_end;
    printed(corner - left_out, 0.61874, 5, "noted part");
    let segment = 2.25 * 0.6_f64.acos() - 0.9 * 1.2;
    let beside_axis = 0.5 * (0.2 * wall_end + 2.25 * (0.2_f64 / 1.5).asin()) - 0.9 * 0.2;
    assert!((corner - (0.5 * segment + beside_axis)).abs() < 1e-14);
}

/// Wall geometry table of the method notes (gross, wall without thickness, diameter 1).
#[test]
#[expect(clippy::approx_constant, reason = "digits as printed")]
fn wall_geometry_table_of_the_notes_comes_out() {
    let table = [
        (0.50, 0.0, 1.0, 0.5, 0.6110, 0.6110),
        (0.45, 0.07862, 0.99690, 0.46069, 0.5680, 0.6529),
        (0.40, 0.15774, 0.98748, 0.42113, 0.5236, 0.6938),
        (0.35, 0.23788, 0.97129, 0.38106, 0.4777, 0.7339),
        (1.0 / 3.0, 0.26493, 0.96427, 0.36753, 0.4619, 0.7471),
        (0.30, 0.31969, 0.94752, 0.34015, 0.4298, 0.7733),
        (0.25, 0.40397, 0.91477, 0.29801, 0.3795, 0.8121),
        (0.20, 0.49186, 0.87067, 0.25407, 0.3260, 0.8503),
    ];
    let disc = disc(0.5);
    for (share, off_centre, chord, depth_small, hydraulic_small, hydraulic_large) in table {
        let face = disc.left_face_for_area(m(0.5), disc.area() * share).unwrap();
        let (large, small): (Strip, Strip) = (disc.strip(m(-0.5), face).unwrap(), disc.strip(face, m(0.5)).unwrap());
        printed(face.si() / 0.5, off_centre, 5, &format!("e at {share}"));
        printed(small.left_chord().si(), chord, 5, &format!("chord at {share}"));
        printed(small.clear_depth().si(), depth_small, 5, &format!("depth at {share}"));
        printed(small.hydraulic_diameter().si(), hydraulic_small, 4, &format!("small d_h at {share}"));
        printed(large.hydraulic_diameter().si(), hydraulic_large, 4, &format!("large d_h at {share}"));
    }
}

/// 10 mm of wall shift near the centre, from the same notes: percentage points of share by diameter.
#[test]
fn ten_millimetres_of_wall_move_the_share_as_noted() {
    for (diameter, points) in [(1.0, 1.27), (2.0, 0.64), (3.0, 0.42), (4.0, 0.32), (5.0, 0.25)] {
        let disc = disc(0.5 * diameter);
        let moved = wall_area(&disc, m(0.005), m(0.01)).unwrap();
        printed(100.0 * moved.si() / disc.area().si(), points, 2, &format!("diameter {diameter}"));
    }
}

/// Archimedes: centroid of a half disc at 4 r / (3 pi) from the diameter, of a quarter at that from both.
#[test]
fn half_and_quarter_discs_have_their_textbook_centroids() {
    let at = 4.0 * 1.5 / (3.0 * PI);
    assert!((strip(1.5, 0.0, 1.5).centroid().si() - at).abs() < 1e-15);
    let (x, y) = strip(1.5, 0.0, 1.5).corner(m(0.0)).centroid().unwrap();
    assert!((x.si() - at).abs() < 1e-15 && (y.si() - at).abs() < 1e-15);
    let (x, y) = disc(1.5).whole().unwrap().corner(m(0.0)).centroid().unwrap();
    assert!(x.si().abs() < 1e-15 && (y.si() - at).abs() < 1e-15);
    let quarter = strip(1.5, 0.0, 1.5).corner(m(0.0)).area();
    assert!((quarter - m2(PI * 1.5 * 1.5 / 4.0)).si().abs() < 1e-15);
}
