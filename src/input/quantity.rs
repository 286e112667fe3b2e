//! A number with its unit, from text: what kinds there are, and how one is read.

use super::unit_expr::parse_unit_of;
use super::unit_table::{Dimension, name};
use crate::engine::units::{self, Si};
use std::ops::Range;

/// A kind of quantity that the case file may ask for.
pub(crate) trait Kind {
    /// Type in the engine.
    type Quantity: Copy;
    /// Dimension.
    const DIMENSION: Dimension;
    /// What messages call it.
    const NOUN: &'static str;
    /// A sensible example, in quotes.
    const EXAMPLE: &'static str;
    /// Units to name in the schema and in help.
    const UNITS: &'static str;
    /// From coherent SI.
    fn quantity(si: f64) -> Self::Quantity;
}

macro_rules! kinds {
    ($($(#[$doc:meta])* $kind:ident -> $quantity:ty, $dimension:expr, $noun:literal, $example:literal, $units:literal;)+) => {
        $(
            $(#[$doc])*
            #[derive(Clone, Copy, Debug, Default, PartialEq)]
            pub(crate) struct $kind;
            impl Kind for $kind {
                type Quantity = $quantity;
                const DIMENSION: Dimension = $dimension;
                const NOUN: &'static str = $noun;
                const EXAMPLE: &'static str = $example;
                const UNITS: &'static str = $units;
                fn quantity(si: f64) -> $quantity {
                    <$quantity as Si>::from_si(si)
                }
            }
        )+
    };
}

kinds! {
    /// Length.
    Length -> units::Length, Dimension::lmt(1, 0, 0), "a length", "2.60 m", "m, mm, cm, ft, in";
    /// Mass.
    Mass -> units::Mass, Dimension::lmt(0, 1, 0), "a mass", "18.2 t", "kg, t, lb";
    /// Mass flow.
    MassRate -> units::MassRate, Dimension::lmt(0, 1, -1), "a mass flow", "18.4 t/h", "t/h, kg/h, kg/s, lb/h";
    /// Density.
    MassDensity -> units::MassDensity, Dimension::lmt(-3, 1, 0), "a density", "740 kg/m3", "kg/m3, lb/ft3";
    /// Dynamic viscosity.
    Viscosity -> units::DynamicViscosity, Dimension::lmt(-1, 1, -1), "a dynamic viscosity", "0.31 mPa.s", "mPa.s, cP, Pa.s";
    /// Surface tension.
    SurfaceTension -> units::SurfaceTension, Dimension::lmt(0, 1, -2), "a surface tension", "19 mN/m", "mN/m, dyn/cm, N/m";
    /// Temperature.
    Temperature -> units::ThermodynamicTemperature, Dimension::TEMPERATURE, "a temperature", "85 degC", "degC, degF, K";
    /// Pressure or pressure drop.
    Pressure -> units::Pressure, Dimension::lmt(-1, 1, -2), "a pressure", "35 mbar", "mbar, bar, Pa, kPa, psi, inH2O, mmHg";
    /// Pressure drop per height.
    Gradient -> units::PressureGradient, Dimension::lmt(-2, 1, -2), "a pressure drop per height", "2.5 mbar/m", "mbar/m, Pa/m, inH2O/ft";
    /// Velocity.
    Velocity -> units::Velocity, Dimension::lmt(1, 0, -1), "a velocity", "0.10 m/s", "m/s, ft/s";
    /// Volume flow of liquid on an area: a velocity in other words.
    LiquidLoad -> units::Velocity, Dimension::lmt(1, 0, -1), "a liquid load", "0.5 m3/m2/h", "m3/m2/h, m/s, gpm/ft2";
    /// Volume flow per length of weir.
    WeirLoad -> units::WeirLoad, Dimension::lmt(2, 0, -1), "a weir load", "90 m3/h/m", "m3/h/m, gpm/in";
    /// Time.
    Time -> units::Time, Dimension::lmt(0, 0, 1), "a time", "3 s", "s, min, h";
    /// Surface per volume.
    SpecificArea -> units::PerLength, Dimension::lmt(-1, 0, 0), "a specific area", "250 m2/m3", "m2/m3, ft2/ft3";
    /// Packing factor.
    PackingFactor -> units::PerLength, Dimension::lmt(-1, 0, 0), "a packing factor", "66 1/m", "1/m, 1/ft";
}

/// Plane angle; the engine keeps it as a bare number in rad.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(crate) struct Angle;

impl Kind for Angle {
    type Quantity = f64;
    const DIMENSION: Dimension = Dimension::ANGLE;
    const NOUN: &'static str = "an angle";
    const EXAMPLE: &'static str = "45 deg";
    const UNITS: &'static str = "deg, rad";
    fn quantity(si: f64) -> f64 {
        si
    }
}

/// Gas load factor; the engine keeps it as a bare number in Pa^0.5.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(crate) struct FFactor;

impl Kind for FFactor {
    type Quantity = f64;
    const DIMENSION: Dimension = Dimension { doubled: [-1, 1, -2, 0, 0] };
    const NOUN: &'static str = "an F-factor";
    const EXAMPLE: &'static str = "1.8 Pa^0.5";
    const UNITS: &'static str = "Pa^0.5";
    fn quantity(si: f64) -> f64 {
        si
    }
}

/// Which numbers are allowed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Sign {
    /// Above zero.
    Positive,
    /// Zero or above.
    NotNegative,
    /// Any.
    Any,
}

/// Numbers whose SI value is beyond this, or nearer to zero than its inverse, are no column's.
pub(crate) const BEYOND_REASON: f64 = 1e12;

/// Why a text is no quantity of the kind asked for.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct QuantityError {
    /// Bytes of the text that are meant.
    pub(crate) span: Range<usize>,
    /// What is wrong.
    pub(crate) message: String,
    /// What the marked text is.
    pub(crate) label: String,
    /// What would be right.
    pub(crate) help: String,
}

/// Reads a quantity of kind `K`; the result is in coherent SI.
pub(crate) fn parse<K: Kind>(text: &str, sign: Sign) -> Result<f64, QuantityError> {
    let expected = || format!("expected {}, e.g. \"{}\"", K::NOUN, K::EXAMPLE);
    let (number, unit_from) = match leading_number(text) {
        Ok(found) => found,
        Err((span, message)) => {
            return Err(QuantityError { span, message, label: "not a number".to_owned(), help: expected() });
        }
    };
    let unit_text = text.get(unit_from..).unwrap_or_default();
    if unit_text.trim().is_empty() {
        let message = format!("\"{}\" has no unit", text.trim());
        return Err(QuantityError { span: 0..text.len(), message, label: "unit missing".to_owned(), help: expected() });
    }
    let unit = parse_unit_of(unit_text, Some(K::DIMENSION)).map_err(|error| QuantityError {
        span: unit_from + error.span.start..unit_from + error.span.end,
        message: error.message,
        label: "in this unit".to_owned(),
        help: error.help.map_or_else(expected, |help| format!("{help} ({})", expected())),
    })?;
    let lead = unit_text.len() - unit_text.trim_start().len();
    let unit_span = unit_from + lead..unit_from + unit_text.trim_end().len();
    if unit.dimension != K::DIMENSION {
        return Err(QuantityError {
            span: unit_span,
            message: format!("\"{}\" is the unit of {}, not of {}", unit_text.trim(), name(unit.dimension), K::NOUN),
            label: format!("wrong for {}", K::NOUN),
            help: expected(),
        });
    }
    let si = (number + unit.offset) * unit.si;
    check_number(text, number, si, sign, K::NOUN).map_err(|(message, label)| QuantityError {
        span: 0..text.len(),
        message,
        label,
        help: expected(),
    })?;
    Ok(si)
}

/// Sign and size of a number that has been read.
pub(crate) fn check_number(text: &str, number: f64, si: f64, sign: Sign, noun: &str) -> Result<(), (String, String)> {
    let text = text.trim();
    if sign != Sign::Any && si < 0.0 {
        return Err((format!("{noun} cannot be negative here, but this is {text}"), "negative".to_owned()));
    }
    if sign == Sign::Positive && si == 0.0 {
        return Err((format!("{noun} cannot be zero here"), "zero".to_owned()));
    }
    let beyond = !si.is_finite() || si.abs() > BEYOND_REASON || (si != 0.0 && si.abs() < 1.0 / BEYOND_REASON);
    if beyond || (si == 0.0 && number != 0.0) {
        return Err((format!("{text} is beyond anything that {noun} can be"), "not a figure of a column".to_owned()));
    }
    Ok(())
}

/// The number at the start of a text and the byte at which it ends; else what is marked and why.
pub(crate) fn leading_number(text: &str) -> Result<(f64, usize), (Range<usize>, String)> {
    let start = text.len() - text.trim_start().len();
    let body = text.get(start..).unwrap_or_default();
    let unsigned = body.strip_prefix(['+', '-', '\u{2212}']).unwrap_or(body);
    let sign_width = body.len() - unsigned.len();
    let negative = sign_width > 0 && !body.starts_with('+');
    let digits = |from: &str| from.bytes().take_while(u8::is_ascii_digit).count();
    let whole = digits(unsigned);
    let after = unsigned.get(whole..).unwrap_or_default();
    let fraction = after.strip_prefix('.').map_or(0, digits);
    let mut length = whole + if fraction > 0 || (whole > 0 && after.starts_with('.')) { 1 + fraction } else { 0 };
    if whole + fraction == 0 {
        let word_end = body.find(char::is_whitespace).map_or(text.len(), |end| start + end);
        let word = text.get(start..word_end).unwrap_or_default();
        let message = match word.trim_start_matches(['+', '-']).to_ascii_lowercase().as_str() {
            "" => "there is no number here".to_owned(),
            "nan" | "inf" | "infinity" | "∞" => format!("\"{word}\" is not a finite number"),
            _ => format!("\"{}\" does not begin with a number", text.trim()),
        };
        return Err((start..word_end, message));
    }
    let tail = unsigned.get(length..).unwrap_or_default();
    if let Some(power) = tail.strip_prefix(['e', 'E']) {
        let unsigned_power = power.strip_prefix(['+', '-']).unwrap_or(power);
        let count = digits(unsigned_power);
        if count > 0 {
            length += 1 + (power.len() - unsigned_power.len()) + count;
        }
    }
    let end = start + sign_width + length;
    let tail = text.get(end..).unwrap_or_default();
    if let Some(rest) = tail.strip_prefix(',')
        && rest.starts_with(|c: char| c.is_ascii_digit())
    {
        let whole_span = start..end + 1 + digits(rest);
        let message = format!("\"{}\" has a comma in its number", text.trim());
        return Err((whole_span, format!("{message}; the decimal sign is a point, and thousands are not grouped")));
    }
    let written = unsigned.get(..length).unwrap_or_default();
    let mantissa = written.split(['e', 'E']).next().unwrap_or_default();
    let not_zero = mantissa.contains(|c: char| ('1'..='9').contains(&c));
    match written.parse::<f64>() {
        Ok(number) if number.is_finite() && (number != 0.0 || !not_zero) => {
            Ok((if negative { -number } else { number }, end))
        }
        _ => Err((start..end, format!("\"{written}\" is not a number that can be worked with"))),
    }
}
