//! Geometry against values from outside: 80-digit reference tables, handbook figures, numerical integration, properties.

#[path = "geometry/handbook.rs"]
mod handbook;
#[path = "geometry/properties.rs"]
mod properties;
#[path = "geometry/reference.rs"]
mod reference;
#[path = "geometry/trays.rs"]
mod trays;

use chordwall::engine::geometry::{Disc, Strip};
use chordwall::engine::units::{Area, Length, Si};

fn m(metres: f64) -> Length {
    Length::from_si(metres)
}

fn m2(square_metres: f64) -> Area {
    Area::from_si(square_metres)
}

fn disc(radius_m: f64) -> Disc {
    Disc::from_diameter(m(2.0 * radius_m)).unwrap()
}

fn strip(radius_m: f64, left_m: f64, right_m: f64) -> Strip {
    disc(radius_m).strip(m(left_m), m(right_m)).unwrap()
}
