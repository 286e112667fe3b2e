//! Figures for people: significant digits and display units. JSON never passes through here.

use crate::engine::findings::{Amount, Criterion};
use crate::engine::units::{
    Area, Length, MassRate, Pressure, PressureGradient, STANDARD_GRAVITY_M_S2, Si, Time, Velocity, WeirLoad,
};

/// Which units a person sees.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Display {
    /// m, mbar, m3/(m2 h) ...
    #[default]
    Si,
    /// ft, psi, gpm/ft2 ...
    Us,
}

/// Exact lengths of the customary units, m.
const FOOT_M: f64 = 0.3048;
const INCH_M: f64 = 0.0254;
/// One US gallon, m3 (231 cubic inches).
const GALLON_M3: f64 = 231.0 * INCH_M * INCH_M * INCH_M;
/// One pound-force per square inch, Pa.
const PSI_PA: f64 = 0.45359237 * STANDARD_GRAVITY_M_S2 / (INCH_M * INCH_M);
/// One conventional inch of water, Pa.
const INCH_OF_WATER_PA: f64 = 25.4 * STANDARD_GRAVITY_M_S2;

/// A number with this many significant digits, without exponent in the range of the trade.
pub fn significant(value: f64, digits: usize) -> String {
    if value == 0.0 {
        return "0".to_owned();
    }
    if !value.is_finite() {
        return "n/a".to_owned();
    }
    // Rounded first: 9.9996 with four digits is 10.00, not 10.000.
    let rounded = format!("{value:.*e}", digits.saturating_sub(1));
    let magnitude = rounded.rsplit_once('e').and_then(|(_, exponent)| exponent.parse::<i32>().ok()).unwrap_or(0);
    if !(-5..9).contains(&magnitude) {
        return rounded;
    }
    let decimals = usize::try_from(digits as i32 - 1 - magnitude).unwrap_or(0);
    format!("{value:.decimals$}")
}

/// A number with its unit.
fn with(value: f64, digits: usize, unit: &str) -> String {
    format!("{} {unit}", significant(value, digits))
}

impl Display {
    /// A diameter or a height.
    pub fn length(self, length: Length) -> String {
        match self {
            Self::Si => format!("{:.3} m", length.si()),
            Self::Us => format!("{:.2} ft", length.si() / FOOT_M),
        }
    }

    /// A position or a small length, with sign if wanted.
    pub fn small_length(self, length: Length, signed: bool) -> String {
        let (value, unit) = match self {
            Self::Si => (length.si() * 1e3, "mm"),
            Self::Us => (length.si() / INCH_M, "in"),
        };
        // What rounds to nothing has no sign.
        let value = if value.abs() < 0.05 { 0.0 } else { value };
        if signed { format!("{value:+.1} {unit}") } else { format!("{value:.1} {unit}") }
    }

    /// An area.
    pub fn area(self, area: Area) -> String {
        match self {
            Self::Si => with(area.si(), 4, "m2"),
            Self::Us => with(area.si() / (FOOT_M * FOOT_M), 4, "ft2"),
        }
    }

    /// A pressure drop; a difference below a millionth of a pascal is rounding and shows as none.
    pub fn pressure(self, pressure: Pressure) -> String {
        let pressure = if pressure.si().abs() < 1e-6 { Pressure::from_si(0.0) } else { pressure };
        match self {
            Self::Si => with(pressure.si() / 100.0, 4, "mbar"),
            Self::Us => with(pressure.si() / PSI_PA, 4, "psi"),
        }
    }

    /// A pressure drop per height.
    pub fn gradient(self, gradient: PressureGradient) -> String {
        match self {
            Self::Si => with(gradient.si() / 100.0, 3, "mbar/m"),
            Self::Us => with(gradient.si() * FOOT_M / INCH_OF_WATER_PA, 3, "inH2O/ft"),
        }
    }

    /// A mass flow.
    pub fn mass_rate(self, rate: MassRate) -> String {
        match self {
            Self::Si => with(rate.si() * 3.6, 4, "t/h"),
            Self::Us => with(rate.si() * 3600.0 / 0.45359237, 5, "lb/h"),
        }
    }

    /// A velocity.
    pub fn velocity(self, velocity: Velocity) -> String {
        match self {
            Self::Si => with(velocity.si(), 3, "m/s"),
            Self::Us => with(velocity.si() / FOOT_M, 3, "ft/s"),
        }
    }

    /// A liquid load of a packing.
    pub fn liquid_load(self, load: Velocity) -> String {
        match self {
            Self::Si => with(load.si() * 3600.0, 3, "m3/m2/h"),
            Self::Us => with(load.si() * 60.0 * FOOT_M * FOOT_M / GALLON_M3, 3, "gpm/ft2"),
        }
    }

    /// The step of a wall for which a change of share is stated, and the heading that says so.
    pub fn share_step(self) -> (Length, &'static str) {
        match self {
            Self::Si => (Length::from_si(0.01), "share/10 mm"),
            Self::Us => (Length::from_si(INCH_M), "share/in"),
        }
    }

    /// A weir load.
    pub fn weir_load(self, load: WeirLoad) -> String {
        match self {
            Self::Si => with(load.si() * 3600.0, 3, "m3/h/m"),
            Self::Us => with(load.si() * 60.0 * INCH_M / GALLON_M3, 3, "gpm/in"),
        }
    }

    /// An F-factor given in Pa^0.5, as a bare number in [`Display::f_factor_unit`], which is too long for a cell.
    pub fn f_factor(self, root_pascal: f64) -> String {
        match self {
            Self::Si => significant(root_pascal, 3),
            // (ft/s)(lb/ft3)^0.5 in Pa^0.5.
            Self::Us => significant(root_pascal / (FOOT_M * (0.45359237 / FOOT_M.powi(3)).sqrt()), 3),
        }
    }

    /// Unit of [`Display::f_factor`].
    pub fn f_factor_unit(self) -> &'static str {
        match self {
            Self::Si => "Pa^0.5",
            Self::Us => "(ft/s)(lb/ft3)^0.5",
        }
    }

    /// The figure of a criterion.
    pub fn amount(self, criterion: Criterion, amount: Amount) -> String {
        match amount {
            Amount::Fraction(value) => significant(value, 3),
            Amount::Pressure(pressure) => self.pressure(pressure),
            Amount::Gradient(gradient) => self.gradient(gradient),
            Amount::Velocity(velocity) if criterion == Criterion::Wetting => self.liquid_load(velocity),
            Amount::Velocity(velocity) => self.velocity(velocity),
            Amount::Time(time) => with(Time::si(time), 3, "s"),
            Amount::Length(length) => self.small_length(length, false),
            Amount::WeirLoad(load) => self.weir_load(load),
        }
    }
}

/// A fraction as per cent.
pub fn percent(fraction: f64) -> String {
    format!("{:.1} %", 100.0 * fraction)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn significant_digits_keep_their_number_over_the_range_of_the_trade() {
        for (value, digits, text) in [
            (2.71928, 3, "2.72"),
            (0.00027192, 3, "0.000272"),
            (27192.8, 3, "27193"),
            (-0.05, 2, "-0.050"),
            (0.0, 3, "0"),
            (0.99996, 3, "1.00"),
            (1.5e-9, 3, "1.50e-9"),
            (9.9996, 4, "10.00"),
            (-0.099996, 3, "-0.100"),
            (999.96, 4, "1000"),
        ] {
            assert_eq!(significant(value, digits), text);
        }
        assert_eq!(significant(f64::NAN, 3), "n/a");
        assert_eq!(Display::Si.small_length(Length::from_si(-1e-6), true), "+0.0 mm");
        assert_eq!(Display::Si.small_length(Length::from_si(-2.46e-2), true), "-24.6 mm");
    }

    #[test]
    fn customary_units_are_the_published_bridges() {
        // 1 US gpm per inch of weir = 8.942 m3/(h m); 100 gpm/ft2 = 0.0679 m/s; 1 inH2O/ft = 817.22 Pa/m (methods notes).
        assert_eq!(Display::Us.weir_load(WeirLoad::from_si(8.942 / 3600.0)), "1.00 gpm/in");
        assert_eq!(Display::Us.liquid_load(Velocity::from_si(0.0679)), "100 gpm/ft2");
        assert_eq!(Display::Us.gradient(PressureGradient::from_si(817.22)), "1.00 inH2O/ft");
        assert_eq!(Display::Us.f_factor(1.2199), "1.00");
        assert_eq!(Display::Us.pressure(Pressure::from_si(6894.757)), "1.000 psi");
    }
}
