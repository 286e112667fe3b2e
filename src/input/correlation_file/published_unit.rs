//! Units in which publications state correlations, with exact factors.

use crate::engine::correlation::record::{Dimension, Unit};

const FOOT: f64 = 0.3048;
const POUND: f64 = 0.453_592_37;
const US_GALLON_PER_MINUTE: f64 = 3.785_411_784e-3 / 60.0;
/// Conventional inch of water: 25.4 mm at 1000 kg/m3 and standard gravity.
const INCH_OF_WATER: f64 = 0.0254 * 1000.0 * 9.806_65;

/// Symbol, dimension, factor to SI; for half powers the value of the group under the root.
const UNITS: &[(&str, Dimension, f64)] = &[
    ("1", Dimension::Dimensionless, 1.0),
    ("mm", Dimension::Length, 1e-3),
    ("cm", Dimension::Length, 1e-2),
    ("m", Dimension::Length, 1.0),
    ("in", Dimension::Length, 0.0254),
    ("ft", Dimension::Length, FOOT),
    ("m2", Dimension::Area, 1.0),
    ("ft2", Dimension::Area, FOOT * FOOT),
    ("m3/s", Dimension::VolumeRate, 1.0),
    ("m3/h", Dimension::VolumeRate, 1.0 / 3600.0),
    ("gpm", Dimension::VolumeRate, US_GALLON_PER_MINUTE),
    ("m/s", Dimension::Velocity, 1.0),
    ("ft/s", Dimension::Velocity, FOOT),
    ("m3/m2/h", Dimension::Velocity, 1.0 / 3600.0),
    ("gpm/ft2", Dimension::Velocity, US_GALLON_PER_MINUTE / (FOOT * FOOT)),
    ("kg/m3", Dimension::Density, 1.0),
    ("lb/ft3", Dimension::Density, POUND / (FOOT * FOOT * FOOT)),
    ("Pa.s", Dimension::Viscosity, 1.0),
    ("mPa.s", Dimension::Viscosity, 1e-3),
    ("cP", Dimension::Viscosity, 1e-3),
    ("m2/s", Dimension::KinematicViscosity, 1.0),
    ("cSt", Dimension::KinematicViscosity, 1e-6),
    ("N/m", Dimension::SurfaceTension, 1.0),
    ("mN/m", Dimension::SurfaceTension, 1e-3),
    ("dyn/cm", Dimension::SurfaceTension, 1e-3),
    ("Pa^0.5", Dimension::FFactor, 1.0),
    ("m3/m/s", Dimension::WeirLoad, 1.0),
    ("m3/m/h", Dimension::WeirLoad, 1.0 / 3600.0),
    ("gpm/in", Dimension::WeirLoad, US_GALLON_PER_MINUTE / 0.0254),
    ("Pa/m", Dimension::Gradient, 1.0),
    ("mbar/m", Dimension::Gradient, 100.0),
    ("mmH2O/m", Dimension::Gradient, 9.806_65),
    ("inH2O/ft", Dimension::Gradient, INCH_OF_WATER / FOOT),
    ("1/m", Dimension::PerLength, 1.0),
    ("1/ft", Dimension::PerLength, 1.0 / FOOT),
    ("s", Dimension::Time, 1.0),
    ("deg", Dimension::Angle, std::f64::consts::PI / 180.0),
    ("(m/s)(1/m)^0.5", Dimension::CapacityParameter, 1.0),
];

/// Units whose factor is a root, so not a constant expression: symbol, dimension, factor, group under the root.
const ROOT_UNITS: &[(&str, Dimension, f64, f64)] = &[
    ("(ft/s)(lb/ft3)^0.5", Dimension::FFactor, FOOT, POUND / (FOOT * FOOT * FOOT)),
    ("(ft/s)(1/ft)^0.5", Dimension::CapacityParameter, FOOT, 1.0 / FOOT),
];

/// The unit of this symbol.
pub(super) fn unit(symbol: &str) -> Option<Unit> {
    let plain = UNITS.iter().find(|(known, ..)| *known == symbol).map(|(_, dimension, si)| (*dimension, *si));
    let root = || {
        ROOT_UNITS
            .iter()
            .find(|(known, ..)| *known == symbol)
            .map(|(_, dimension, factor, group)| (*dimension, factor * group.sqrt()))
    };
    plain.or_else(root).map(|(dimension, si)| Unit { symbol: symbol.to_owned(), si, dimension })
}

/// Symbols of the units of a dimension.
pub(super) fn symbols(dimension: Dimension) -> Vec<&'static str> {
    let plain = UNITS.iter().filter(|(_, d, _)| *d == dimension).map(|(symbol, ..)| *symbol);
    plain.chain(ROOT_UNITS.iter().filter(|(_, d, ..)| *d == dimension).map(|(symbol, ..)| *symbol)).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bridges_agree_with_rounded_handbook_factors() {
        // Printed conversion factors of the trade, as many digits as they are commonly given with.
        for (symbol, printed, half_digit) in [
            ("inH2O/ft", 817.22, 0.005),
            ("gpm/in", 2.484e-3, 0.5e-6),
            ("lb/ft3", 16.0185, 0.5e-4),
            ("gpm/ft2", 6.79e-4, 0.5e-6),
            ("(ft/s)(lb/ft3)^0.5", 1.2199, 0.5e-4),
            ("(ft/s)(1/ft)^0.5", 0.55209, 0.5e-5),
        ] {
            let si = unit(symbol).unwrap().si;
            assert!((si - printed).abs() <= half_digit, "{symbol}: {si} against {printed}");
        }
    }

    #[test]
    fn symbols_are_distinct() {
        let mut all: Vec<&str> = UNITS.iter().map(|u| u.0).chain(ROOT_UNITS.iter().map(|u| u.0)).collect();
        let count = all.len();
        all.sort_unstable();
        all.dedup();
        assert_eq!(all.len(), count);
    }
}
