//! The only list of units of the case file and the loads table: symbol, exact factor to SI, dimension.
//!
//! Factors are exact by definition: international foot and pound (1959), standard gravity (CGPM 1901), litre and bar (SI
//! brochure), US gallon 231 in3. Conventional columns of water and mercury are those of NIST SP 811, annex B: 1 inH2O and
//! 1 mmH2O at 1000 kg/m3 and standard gravity (exact), 1 mmHg at 13 595.1 kg/m3 (exact by that convention).

/// Dimension as doubled exponents of length, mass, time, temperature and plane angle, so that half powers are whole.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Dimension {
    /// Twice the exponents: length, mass, time, temperature, angle.
    pub(crate) doubled: [i16; 5],
}

impl Dimension {
    /// A dimension from whole exponents of length, mass and time.
    pub(crate) const fn lmt(length: i16, mass: i16, time: i16) -> Self {
        Self { doubled: [2 * length, 2 * mass, 2 * time, 0, 0] }
    }
    /// No dimension.
    pub(crate) const NONE: Self = Self::lmt(0, 0, 0);
    /// Temperature.
    pub(crate) const TEMPERATURE: Self = Self { doubled: [0, 0, 0, 2, 0] };
    /// Plane angle; kept apart from plain numbers, so that "45" is no angle.
    pub(crate) const ANGLE: Self = Self { doubled: [0, 0, 0, 0, 2] };

    /// Product with another dimension raised to half of `halves`.
    ///
    /// None if an exponent is not a multiple of one half or is beyond reason.
    pub(crate) fn times(self, other: Self, halves: i16) -> Option<Self> {
        let mut doubled = self.doubled;
        for (mine, theirs) in doubled.iter_mut().zip(other.doubled) {
            let product = theirs.checked_mul(halves)?;
            if product % 2 != 0 {
                return None;
            }
            *mine = mine.checked_add(product / 2)?;
        }
        doubled.iter().all(|exponent| exponent.abs() <= 24).then_some(Self { doubled })
    }
}

/// One unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct UnitRow {
    /// As typed.
    pub(crate) symbol: &'static str,
    /// SI value of one of it.
    pub(crate) si: f64,
    /// Dimension.
    pub(crate) dimension: Dimension,
    /// Added to the number before the factor (temperatures): SI = (number + offset) x si.
    pub(crate) offset: f64,
}

const fn row(symbol: &'static str, si: f64, dimension: Dimension) -> UnitRow {
    UnitRow { symbol, si, dimension, offset: 0.0 }
}

const LENGTH: Dimension = Dimension::lmt(1, 0, 0);
const VOLUME: Dimension = Dimension::lmt(3, 0, 0);
const MASS: Dimension = Dimension::lmt(0, 1, 0);
const TIME: Dimension = Dimension::lmt(0, 0, 1);
const FORCE: Dimension = Dimension::lmt(1, 1, -2);
const PRESSURE: Dimension = Dimension::lmt(-1, 1, -2);
const VISCOSITY: Dimension = Dimension::lmt(-1, 1, -1);
const VOLUME_RATE: Dimension = Dimension::lmt(3, 0, -1);
const SURFACE_TENSION: Dimension = Dimension::lmt(0, 1, -2);

const GRAVITY: f64 = 9.806_65;
const INCH: f64 = 0.0254;
const FOOT: f64 = 0.3048;
const POUND: f64 = 0.453_592_37;
const GALLON: f64 = 231.0 * INCH * INCH * INCH;

/// Every unit that is known.
pub(crate) const UNITS: &[UnitRow] = &[
    row("m", 1.0, LENGTH),
    row("mm", 1e-3, LENGTH),
    row("cm", 1e-2, LENGTH),
    row("dm", 1e-1, LENGTH),
    row("km", 1e3, LENGTH),
    row("um", 1e-6, LENGTH),
    row("µm", 1e-6, LENGTH),
    row("in", INCH, LENGTH),
    row("inch", INCH, LENGTH),
    row("ft", FOOT, LENGTH),
    row("l", 1e-3, VOLUME),
    row("L", 1e-3, VOLUME),
    row("gal", GALLON, VOLUME),
    row("kg", 1.0, MASS),
    row("g", 1e-3, MASS),
    row("mg", 1e-6, MASS),
    row("t", 1e3, MASS),
    row("lb", POUND, MASS),
    row("lbm", POUND, MASS),
    row("klb", 1e3 * POUND, MASS),
    row("s", 1.0, TIME),
    row("sec", 1.0, TIME),
    row("min", 60.0, TIME),
    row("h", 3600.0, TIME),
    row("hr", 3600.0, TIME),
    row("d", 86_400.0, TIME),
    row("N", 1.0, FORCE),
    row("mN", 1e-3, FORCE),
    row("kN", 1e3, FORCE),
    row("dyn", 1e-5, FORCE),
    row("dyne", 1e-5, FORCE),
    row("lbf", POUND * GRAVITY, FORCE),
    row("Pa", 1.0, PRESSURE),
    row("hPa", 1e2, PRESSURE),
    row("kPa", 1e3, PRESSURE),
    row("MPa", 1e6, PRESSURE),
    row("mPa", 1e-3, PRESSURE),
    row("uPa", 1e-6, PRESSURE),
    row("µPa", 1e-6, PRESSURE),
    row("bar", 1e5, PRESSURE),
    row("mbar", 1e2, PRESSURE),
    row("atm", 101_325.0, PRESSURE),
    row("psi", POUND * GRAVITY / (INCH * INCH), PRESSURE),
    row("psia", POUND * GRAVITY / (INCH * INCH), PRESSURE),
    row("mmHg", 1e-3 * 13_595.1 * GRAVITY, PRESSURE),
    row("mmH2O", GRAVITY, PRESSURE),
    row("inH2O", INCH * 1000.0 * GRAVITY, PRESSURE),
    row("inHg", INCH * 13_595.1 * GRAVITY, PRESSURE),
    row("P", 0.1, VISCOSITY),
    row("cP", 1e-3, VISCOSITY),
    row("gpm", GALLON / 60.0, VOLUME_RATE),
    row("mJ", 1e-3, Dimension::lmt(2, 1, -2)),
    row("K", 1.0, Dimension::TEMPERATURE),
    UnitRow { symbol: "degC", si: 1.0, dimension: Dimension::TEMPERATURE, offset: 273.15 },
    UnitRow { symbol: "°C", si: 1.0, dimension: Dimension::TEMPERATURE, offset: 273.15 },
    UnitRow { symbol: "degF", si: 5.0 / 9.0, dimension: Dimension::TEMPERATURE, offset: 459.67 },
    UnitRow { symbol: "°F", si: 5.0 / 9.0, dimension: Dimension::TEMPERATURE, offset: 459.67 },
    row("rad", 1.0, Dimension::ANGLE),
    row("deg", std::f64::consts::PI / 180.0, Dimension::ANGLE),
    row("°", std::f64::consts::PI / 180.0, Dimension::ANGLE),
];

/// Units that people write and that cannot be taken, with what to write instead.
pub(crate) const REFUSED: &[(&str, &str)] = &[
    ("barg", "gauge pressures are not taken: write \"bar\" for an absolute pressure or a difference"),
    ("mbarg", "gauge pressures are not taken: write \"mbar\" for an absolute pressure or a difference"),
    ("kPag", "gauge pressures are not taken: write \"kPa\" for an absolute pressure or a difference"),
    ("psig", "gauge pressures are not taken: write \"psi\" for an absolute pressure or a difference"),
    ("bara", "write \"bar\"; every pressure is absolute"),
    ("meter", "write \"m\""),
    ("metre", "write \"m\""),
    ("mtr", "write \"m\""),
    ("feet", "write \"ft\""),
    ("foot", "write \"ft\""),
    ("inches", "write \"in\""),
    ("lbs", "write \"lb\""),
    ("hour", "write \"h\""),
    ("ton", "a ton may be 907, 1000 or 1016 kg; write \"t\" for 1000 kg, or \"lb\""),
    ("kmol", "flows are by mass; give \"t/h\", \"kg/h\" or \"lb/h\""),
    ("mol", "flows are by mass; give \"t/h\", \"kg/h\" or \"lb/h\""),
    ("lbmol", "flows are by mass; give \"t/h\", \"kg/h\" or \"lb/h\""),
    ("C", "write \"degC\""),
    ("F", "write \"degF\""),
    ("%", "give a fraction without a unit, 0.80 for 80 %"),
];

/// Dimensions that messages call by name.
pub(crate) const NAMED: &[(Dimension, &str)] = &[
    (LENGTH, "a length"),
    (Dimension::lmt(2, 0, 0), "an area"),
    (VOLUME, "a volume"),
    (MASS, "a mass"),
    (TIME, "a time"),
    (FORCE, "a force"),
    (PRESSURE, "a pressure"),
    (Dimension::lmt(-2, 1, -2), "a pressure drop per height"),
    (VISCOSITY, "a dynamic viscosity"),
    (Dimension::lmt(2, 0, -1), "a kinematic viscosity or weir load"),
    (VOLUME_RATE, "a volume flow"),
    (Dimension::lmt(0, 1, -1), "a mass flow"),
    (Dimension::lmt(-3, 1, 0), "a density"),
    (Dimension::lmt(1, 0, -1), "a velocity"),
    (SURFACE_TENSION, "a surface tension"),
    (Dimension::lmt(-1, 0, 0), "a reciprocal length"),
    (Dimension { doubled: [-1, 1, -2, 0, 0] }, "an F-factor"),
    (Dimension::TEMPERATURE, "a temperature"),
    (Dimension::ANGLE, "an angle"),
    (Dimension::NONE, "a number without unit"),
];

/// The unit of this symbol.
pub(crate) fn unit(symbol: &str) -> Option<&'static UnitRow> {
    UNITS.iter().find(|row| row.symbol == symbol)
}

/// What a dimension is called.
pub(crate) fn name(dimension: Dimension) -> &'static str {
    NAMED.iter().find(|(named, _)| *named == dimension).map_or("something else", |(_, name)| name)
}
