//! Numbers and units against the definitions, and against `uom` as an independent table.

use super::quantity::{self as kind, Kind, Sign, parse};
use super::unit_expr::parse_unit;
use super::unit_table::{Dimension, UNITS};
use proptest::prelude::*;
use uom::si::f64 as uom_si;

fn si<K: Kind>(text: &str) -> f64 {
    parse::<K>(text, Sign::Any).unwrap_or_else(|error| panic!("{text}: {error:?}"))
}

fn close(found: f64, expected: f64, relative: f64) {
    assert!((found - expected).abs() <= relative * expected.abs(), "{found:e} is not {expected:e}");
}

/// Definitions: international foot and pound (1959), standard gravity (CGPM 1901), US gallon 231 in3, conventional water
/// and mercury columns (NIST SP 811, annex B.8: 1 inHg = 3.386 389 kPa, 1 mmHg = 133.3224 Pa, 1 inH2O = 249.0889 Pa).
#[test]
fn units_of_the_trade_have_their_exact_factors() {
    close(si::<kind::Length>("1 ft"), 0.3048, 0.0);
    close(si::<kind::Length>("1 in"), 0.0254, 0.0);
    close(si::<kind::Mass>("1 lb"), 0.453_592_37, 0.0);
    close(si::<kind::MassRate>("3600 lb/h"), 0.453_592_37, 1e-15);
    close(si::<kind::MassDensity>("1 lb/ft3"), 0.453_592_37 / 0.028_316_846_592, 1e-15);
    close(si::<kind::Pressure>("1 psi"), 6_894.757_293_168_361, 1e-15);
    close(si::<kind::Pressure>("1 inH2O"), 249.0889, 1e-6);
    close(si::<kind::Pressure>("1 inHg"), 3386.389, 2e-7);
    close(si::<kind::Pressure>("1 mmHg"), 133.3224, 2e-7);
    close(si::<kind::Pressure>("1 mmH2O"), 9.806_65, 1e-15);
    close(si::<kind::Viscosity>("1 cP"), 1e-3, 0.0);
    close(si::<kind::SurfaceTension>("1 dyn/cm"), 1e-3, 1e-15);
    close(si::<kind::Temperature>("32 degF"), 273.15, 1e-15);
    close(si::<kind::Temperature>("-40 degF"), si::<kind::Temperature>("-40 degC"), 1e-15);
    close(si::<kind::WeirLoad>("1 gpm/in"), 231.0 * 0.0254_f64.powi(2) / 60.0, 1e-15);
    close(si::<kind::Gradient>("1 inH2O/ft"), 249.088_91 / 0.3048, 1e-9);
    close(si::<kind::FFactor>("1 (ft/s)(lb/ft3)^0.5"), 0.3048 * 16.018_463_373_960_14_f64.sqrt(), 1e-14);
    close(si::<kind::Angle>("180 deg"), std::f64::consts::PI, 1e-15);
}

/// `uom` carries US factors to about seven digits, so it is an oracle to 1e-6 only.
#[test]
fn units_agree_with_an_independent_table() {
    fn agree<K: Kind<Quantity = Q>, Q>(text: &str, oracle: f64) {
        close(si::<K>(text), oracle, 1e-6);
    }
    use uom::si::dynamic_viscosity::{centipoise, pascal_second};
    use uom::si::length::{foot, inch, meter};
    use uom::si::mass_density::{kilogram_per_cubic_meter, pound_per_cubic_foot};
    use uom::si::mass_rate::{kilogram_per_second, pound_per_hour};
    use uom::si::pressure::{bar, millimeter_of_mercury, pascal, psi};
    use uom::si::surface_tension::{dyne_per_centimeter, newton_per_meter};
    use uom::si::thermodynamic_temperature::{degree_celsius, degree_fahrenheit, kelvin};
    use uom::si::velocity::{foot_per_second, meter_per_second};
    agree::<kind::Length, _>("7.3 ft", uom_si::Length::new::<foot>(7.3).get::<meter>());
    agree::<kind::Length, _>("7.3in", uom_si::Length::new::<inch>(7.3).get::<meter>());
    let flow = uom_si::MassRate::new::<pound_per_hour>(7.3).get::<kilogram_per_second>();
    agree::<kind::MassRate, _>("7.3 lb/h", flow);
    let density = uom_si::MassDensity::new::<pound_per_cubic_foot>(7.3).get::<kilogram_per_cubic_meter>();
    agree::<kind::MassDensity, _>("7.3 lb/ft³", density);
    agree::<kind::Pressure, _>("7.3 psi", uom_si::Pressure::new::<psi>(7.3).get::<pascal>());
    agree::<kind::Pressure, _>("7.3 bar", uom_si::Pressure::new::<bar>(7.3).get::<pascal>());
    let mercury = uom_si::Pressure::new::<millimeter_of_mercury>(7.3).get::<pascal>();
    agree::<kind::Pressure, _>("7.3 mmHg", mercury);
    let viscosity = uom_si::DynamicViscosity::new::<centipoise>(7.3).get::<pascal_second>();
    agree::<kind::Viscosity, _>("7.3 cP", viscosity);
    let tension = uom_si::SurfaceTension::new::<dyne_per_centimeter>(7.3).get::<newton_per_meter>();
    agree::<kind::SurfaceTension, _>("7.3 dyn/cm", tension);
    agree::<kind::Velocity, _>("7.3 ft/s", uom_si::Velocity::new::<foot_per_second>(7.3).get::<meter_per_second>());
    let celsius = uom_si::ThermodynamicTemperature::new::<degree_celsius>(7.3).get::<kelvin>();
    agree::<kind::Temperature, _>("7.3 degC", celsius);
    let fahrenheit = uom_si::ThermodynamicTemperature::new::<degree_fahrenheit>(7.3).get::<kelvin>();
    agree::<kind::Temperature, _>("7.3 degF", fahrenheit);
}

#[test]
fn spellings_of_one_unit_mean_the_same() {
    let expected = 0.5 / 3600.0;
    for text in [
        "0.5 m3/m2/h",
        "0.5 m³/m²/h",
        "0.5m^3/m^2/h",
        "0.5 m3/(m2.h)",
        "0.5 m³/(m²·h)",
        "0.5 m3/(m2 h)",
        "0.5 m3 m-2 h-1",
        "0.5 m³ m⁻² h⁻¹",
        "0.5 m3*m^-2*h^-1",
        " 0.5  m3 / m2 / h ",
        "5e-1 m/h",
        ".5 m/h",
        "+0.5 m/h",
        "0.5 m^1.0/h",
    ] {
        close(si::<kind::LiquidLoad>(text), expected, 1e-15);
    }
    close(si::<kind::Viscosity>("0.31 mPa.s"), si::<kind::Viscosity>("0.31 mPa s"), 0.0);
    close(si::<kind::PackingFactor>("66 1/m"), si::<kind::PackingFactor>("66 m^-1"), 0.0);
    close(si::<kind::SpecificArea>("250 m2/m3"), 250.0, 0.0);
    close(si::<kind::FFactor>("1.8 Pa^0.5"), 1.8, 0.0);
    close(si::<kind::FFactor>("1.8 m/s.(kg/m3)^0.5"), 1.8, 0.0);
    close(si::<kind::Length>("1.5m"), 1.5, 0.0);
}

#[test]
fn the_sign_of_every_number_is_kept() {
    for (text, expected) in [
        ("-1.5 m", -1.5),
        ("-0.25m", -0.25),
        ("-.5 m", -0.5),
        ("\u{2212}2 m", -2.0),
        ("-1e-3 m", -1e-3),
        ("-1e+3 mm", -1.0),
        ("+1.5 m", 1.5),
        ("-3 ft", -0.9144),
        ("1e-3 m", 1e-3),
        ("1E3 mm", 1.0),
    ] {
        close(si::<kind::Length>(text), expected, 1e-15);
        assert_eq!(si::<kind::Length>(text).is_sign_negative(), expected < 0.0, "{text}");
    }
    assert!(parse::<kind::Length>("-1.5 m", Sign::NotNegative).is_err());
    assert!(parse::<kind::Length>("\u{2212}1.5 m", Sign::Positive).is_err());
    assert!(parse::<kind::Length>("0 m", Sign::NotNegative).is_ok());
    assert!(parse::<kind::Length>("0 m", Sign::Positive).is_err());
    assert!(parse::<kind::Temperature>("-5 degC", Sign::Positive).is_ok(), "above absolute zero is positive");
    assert!(parse::<kind::Temperature>("-300 degC", Sign::Positive).is_err());
}

#[test]
fn what_is_no_quantity_is_refused() {
    for text in [
        "",
        " ",
        "m",
        "NaN m",
        "nan m",
        "inf m",
        "-inf m",
        "infinity m",
        "1e999 m",
        "1e-400 m",
        "1,5 m",
        "1.5",
        "1.5 kg",
        "1.5 mm2",
        "1.5 m/",
        "1.5 /m",
        "1.5 m)",
        "1.5 (m",
        "1.5 m^",
        "1.5 m^x",
        "1.5 m^99",
        "1.5 m^0.3",
        "1.5 1",
        "1.5 10m",
        "5 10 m",
        "1.5 m m",
        "1.5 meter",
        "1.5 M",
        "--1 m",
        "1.5.2 m",
        "1 2 m",
        "0x10 m",
        "1_000 m",
        "1.5 m;",
        "1.5 m\u{0}",
        "((((((((((((m",
        "1.5 ((((((((((((m))))))))))))",
        "1.5 degC m",
    ] {
        assert!(parse::<kind::Length>(text, Sign::Any).is_err(), "{text} was taken");
    }
    for text in ["10 degC/m", "2 barg", "2 psig", "10 degC2"] {
        assert!(parse::<kind::Temperature>(text, Sign::Any).is_err(), "{text} was taken");
        assert!(parse::<kind::Pressure>(text, Sign::Any).is_err(), "{text} was taken");
    }
}

#[test]
fn errors_mark_the_part_that_is_meant() {
    let marked = |text: &str| {
        let error = parse::<kind::Length>(text, Sign::Positive).unwrap_err();
        (text[error.span.clone()].to_owned(), error.help)
    };
    assert_eq!(marked("3.0 mbar").0, "mbar");
    assert_eq!(marked("4,0 m").0, "4,0");
    assert_eq!(marked("-3 m").0, "-3 m");
    assert_eq!(marked("3 m/sek").0, "sek");
    let (word, help) = marked("3 MM");
    assert_eq!(word, "MM");
    assert!(help.contains("did you mean \"mm\"") && help.contains("expected a length, e.g. \"2.60 m\""), "{help}");
}

#[test]
fn symbols_are_listed_once_and_read_as_themselves() {
    for (place, row) in UNITS.iter().enumerate() {
        assert!(UNITS.iter().skip(place + 1).all(|other| other.symbol != row.symbol), "{} twice", row.symbol);
        let unit = parse_unit(row.symbol).unwrap_or_else(|error| panic!("{}: {error:?}", row.symbol));
        assert_eq!((unit.si, unit.dimension, unit.offset), (row.si, row.dimension, row.offset), "{}", row.symbol);
        if row.offset == 0.0 {
            let squared = parse_unit(&format!("{}²/{}", row.symbol, row.symbol)).expect("a quotient");
            assert_eq!(squared.dimension, row.dimension, "{}", row.symbol);
            close(squared.si, row.si, 1e-15);
        }
    }
}

proptest! {
    /// A number printed with any unit of any kind is read back to the same SI value.
    #[test]
    fn printed_quantities_are_read_back(number in -1e6..1e6_f64, place in 0..UNITS.len(), spaced: bool) {
        let row = UNITS[place];
        let text = format!("{number}{}{}", if spaced { " " } else { "" }, row.symbol);
        let (read, end) = kind::leading_number(&text).expect("a number");
        prop_assert_eq!(read, number);
        let unit = parse_unit(&text[end..]).expect("a unit");
        prop_assert_eq!(unit.si, row.si);
    }

    /// Products and quotients of units print and read back with their factors multiplied.
    #[test]
    fn products_of_units_are_products_of_factors(a in 0..UNITS.len(), b in 0..UNITS.len(), power in 1..4_i32, over: bool) {
        let (first, second) = (UNITS[a], UNITS[b]);
        prop_assume!(first.offset == 0.0 && second.offset == 0.0);
        let sign = if over { "/" } else { "." };
        let unit = parse_unit(&format!("{}{sign}{}^{power}", first.symbol, second.symbol)).expect("a unit");
        let power = if over { -power } else { power };
        close(unit.si, first.si * second.si.powi(power), 1e-14);
        let dimension = first.dimension.times(second.dimension, 2 * power as i16).expect("small powers");
        prop_assert_eq!(unit.dimension, dimension);
    }

    /// Nothing that can be typed panics, and what is taken is finite and of the sign that is allowed.
    #[test]
    fn any_text_is_taken_or_refused(text in "[-+0-9.eE,xNainf ]{0,6}[ a-zA-Z0-9/^.()·²³°µ*-]{0,12}|.{0,16}") {
        match parse::<kind::Length>(&text, Sign::NotNegative) {
            Ok(si) => prop_assert!(si.is_finite() && si >= 0.0),
            Err(error) => prop_assert!(text.get(error.span).is_some(), "span of {:?}", text),
        }
    }
}

#[test]
fn a_dimension_without_half_powers_cannot_be_halved_twice() {
    let root = Dimension::NONE.times(Dimension::lmt(1, 0, 0), 1).expect("a half power");
    assert_eq!(Dimension::NONE.times(root, 1), None);
}
