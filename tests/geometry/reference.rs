//! The reference tables of tests/reference/geometry (80-digit arithmetic, generator beside them), to 1e-12.

use super::{disc, m, m2, strip};
use chordwall::engine::units::Si;

const LIMIT: f64 = 1e-12;

/// Greatest error of each figure of a table, with the row where it occurs.
struct Errors {
    table: &'static str,
    groups: Vec<(&'static str, f64, String, usize)>,
}

impl Errors {
    fn of(table: &'static str) -> Self {
        Self { table, groups: Vec::new() }
    }

    /// Error of `value` relative to `scale`.
    fn add(&mut self, group: &'static str, value: f64, reference: f64, scale: f64, row: &[f64]) {
        let error = if value == reference { 0.0 } else { ((value - reference) / scale).abs() };
        let error = if error.is_nan() { f64::INFINITY } else { error };
        let at = match self.groups.iter().position(|(name, ..)| *name == group) {
            Some(at) => at,
            None => {
                self.groups.push((group, 0.0, String::new(), 0));
                self.groups.len() - 1
            }
        };
        let entry = &mut self.groups[at];
        entry.3 += 1;
        if error > entry.1 {
            entry.1 = error;
            entry.2 = format!("{value:e} against {reference:e} at {row:?}");
        }
    }

    fn relative(&mut self, group: &'static str, value: f64, reference: f64, row: &[f64]) {
        self.add(group, value, reference, reference, row);
    }

    fn judge(&self) {
        let report: Vec<String> = self
            .groups
            .iter()
            .map(|(name, worst, row, count)| format!("{}: {name}: {worst:.2e} of {count} rows, {row}", self.table))
            .collect();
        assert!(!report.is_empty(), "{} has no rows", self.table);
        assert!(self.groups.iter().all(|(_, worst, ..)| *worst < LIMIT), "{}", report.join("\n"));
    }
}

/// Rows of a table, all numbers; the header names the columns in the order in which a test takes them.
fn rows<const N: usize>(table: &str, header: [&str; N]) -> Vec<[f64; N]> {
    let path = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reference/geometry").join(table);
    let mut reader = csv::Reader::from_path(path).unwrap();
    assert_eq!(reader.headers().unwrap().iter().collect::<Vec<_>>(), header);
    let rows: Vec<[f64; N]> = reader
        .records()
        .map(|record| {
            let numbers: Vec<f64> = record.unwrap().iter().map(|field| field.parse().unwrap()).collect();
            numbers.try_into().unwrap()
        })
        .collect();
    assert!(rows.len() >= 80, "{table} is too short to mean anything");
    rows
}

#[test]
fn strips_agree_with_80_digit_values() {
    let mut errors = Errors::of("strips");
    let header = ["radius", "left", "right", "area", "left_chord", "right_chord", "arc", "centroid"];
    for row in rows("strips.csv", header) {
        let [radius, left, right, area, left_chord, right_chord, arc, centroid] = row;
        let strip = strip(radius, left, right);
        errors.relative("area", strip.area().si(), area, &row);
        errors.relative("left chord", strip.left_chord().si(), left_chord, &row);
        errors.relative("right chord", strip.chord_at(m(right)).si(), right_chord, &row);
        errors.relative("arc", strip.arc_length().si(), arc, &row);
        errors.add("centroid", strip.centroid().si(), centroid, radius, &row);
    }
    errors.judge();
}

#[test]
fn segments_agree_with_80_digit_values() {
    let mut errors = Errors::of("segments");
    for row in rows("segments.csv", ["radius", "depth", "area", "wanted_area", "depth_of_wanted"]) {
        let [radius, depth, area, wanted, depth_of_wanted] = row;
        errors.relative("area", disc(radius).segment_area(m(depth)).unwrap().si(), area, &row);
        errors.relative("depth", disc(radius).segment_depth(m2(wanted)).unwrap().si(), depth_of_wanted, &row);
    }
    errors.judge();
}

#[test]
fn corners_agree_with_80_digit_values() {
    let mut errors = Errors::of("corners");
    let header = ["radius", "left", "right", "line", "area", "length", "arc", "centroid_x", "centroid_y"];
    for row in rows("corners.csv", header) {
        let [radius, left, right, line, area, length, arc, x, y] = row;
        let strip = strip(radius, left, right);
        let corner = strip.corner(m(line));
        errors.relative("area", corner.area().si(), area, &row);
        errors.relative("length of the line", corner.line_length().si(), length, &row);
        errors.relative("arc", corner.arc_length().si(), arc, &row);
        let (found_x, found_y) = corner.centroid().unwrap();
        errors.add("centroid across", found_x.si(), x, radius, &row);
        errors.add("centroid along", found_y.si(), y, radius, &row);
    }
    errors.judge();
}

#[test]
fn bands_agree_with_80_digit_values() {
    let mut errors = Errors::of("bands");
    for row in rows("bands.csv", ["radius", "left", "right", "half_width", "area"]) {
        let [radius, left, right, half_width, area] = row;
        errors.relative("area", strip(radius, left, right).band_area(m(half_width)).si(), area, &row);
    }
    errors.judge();
}

#[test]
fn widths_from_areas_agree_with_80_digit_values() {
    let mut errors = Errors::of("inverse widths");
    for row in rows("inverse_widths.csv", ["radius", "left", "area", "width"]) {
        let [radius, left, area, width] = row;
        errors.relative("width", disc(radius).width_right_of(m(left), m2(area)).unwrap().si(), width, &row);
        let right_face = disc(radius).right_face_for_area(m(left), m2(area)).unwrap().si();
        errors.add("right face", right_face, left + width, radius, &row);
        let left_face = disc(radius).left_face_for_area(m(-left), m2(area)).unwrap().si();
        errors.add("left face", left_face, -left - width, radius, &row);
    }
    errors.judge();
}

#[test]
fn corner_lines_from_areas_agree_with_80_digit_values() {
    let mut errors = Errors::of("inverse corners");
    for row in rows("inverse_corners.csv", ["radius", "left", "right", "area", "line", "depth"]) {
        let [radius, left, right, area, line, depth] = row;
        let strip = strip(radius, left, right);
        let top = line + depth;
        errors.add("line", strip.line_for_corner_area(m2(area)).unwrap().si(), line, top, &row);
        if area <= 0.5 * strip.area().si() {
            errors.relative("depth", strip.depth_for_corner_area(m2(area)).unwrap().si(), depth, &row);
        }
    }
    errors.judge();
}

#[test]
fn band_half_widths_from_areas_agree_with_80_digit_values() {
    let mut errors = Errors::of("inverse bands");
    for row in rows("inverse_bands.csv", ["radius", "left", "right", "area", "half_width"]) {
        let [radius, left, right, area, half_width] = row;
        let found = strip(radius, left, right).half_width_for_band_area(m2(area)).unwrap().si();
        errors.relative("half-width", found, half_width, &row);
    }
    errors.judge();
}
