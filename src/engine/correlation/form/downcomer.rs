//! Downcomers: loss under the apron and the practice figures by foaming class.

use super::super::range::{Domain, Outside};
use super::super::record::{Dimension as D, Record};
use super::{Arguments, Evaluator, Shape};
use crate::engine::error::EngineResult;

/// Loss under the apron: h = k (q/A)^n, A the lesser of downcomer bottom and clearance area.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct ApronLoss {
    flow_unit_m3_s: f64,
    area_unit_m2: f64,
    head_unit_m: f64,
    factor: f64,
    exponent: f64,
}

impl ApronLoss {
    /// Head in metres of clear liquid.
    pub fn head_m(&self, flow_m3_s: f64, area_m2: f64) -> f64 {
        let velocity = (flow_m3_s / self.flow_unit_m3_s) / (area_m2 / self.area_unit_m2);
        self.factor * velocity.powf(self.exponent) * self.head_unit_m
    }
}

impl Evaluator for ApronLoss {
    const SHAPE: Shape = Shape {
        name: "apron_loss",
        coefficients: &[("factor", 1), ("exponent", 1)],
        inputs: &[("liquid_flow", D::VolumeRate), ("area", D::Area)],
        outputs: &[("head", D::Length)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            flow_unit_m3_s: record.input_unit("liquid_flow")?,
            area_unit_m2: record.input_unit("area")?,
            head_unit_m: record.output_unit("head")?,
            factor: record.number("factor")?,
            exponent: record.number("exponent")?,
        })
    }

    fn evaluate(&self, _: &str, at: &Arguments<'_>, _: &mut Vec<Outside>) -> EngineResult<f64> {
        Ok(self.head_m(at.get("liquid_flow")?, at.get("area")?))
    }
}

/// Foaming class of a downcomer.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum FoamingClass {
    /// Not stated.
    Unstated,
    /// Hardly any.
    Low,
    /// Some.
    Moderate,
    /// Much.
    High,
}

impl FoamingClass {
    const ALL: [(Self, &'static str); 4] =
        [(Self::Unstated, "unstated"), (Self::Low, "low"), (Self::Moderate, "moderate"), (Self::High, "high")];

    fn of_output(output: &str) -> Self {
        Self::ALL.iter().find(|(_, name)| output.ends_with(name)).map_or(Self::Unstated, |(class, _)| *class)
    }
}

/// Figures of one kind by foaming class.
#[derive(Clone, Copy, Debug, PartialEq)]
struct ByClass<T> {
    unstated: T,
    low: T,
    moderate: T,
    high: T,
}

impl<T: Copy> ByClass<T> {
    fn get(&self, class: FoamingClass) -> T {
        match class {
            FoamingClass::Unstated => self.unstated,
            FoamingClass::Low => self.low,
            FoamingClass::Moderate => self.moderate,
            FoamingClass::High => self.high,
        }
    }
}

/// Velocity limit, residence time and froth density of downcomers by foaming class.
///
/// The velocity limit is the lower end of each printed range, linear between the printed spacings and held at the first
/// and last of them, which [`DowncomerPractice::outside`] reports.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct DowncomerPractice {
    domain: Domain,
    spacing_unit_m: f64,
    velocity_unit_m_s: f64,
    residence_unit_s: f64,
    spacing: [f64; 3],
    velocity: ByClass<[f64; 3]>,
    residence: ByClass<f64>,
    froth_density: ByClass<f64>,
}

impl DowncomerPractice {
    /// Greatest velocity of clear liquid at the downcomer's top, m/s.
    pub fn velocity_m_s(&self, class: FoamingClass, spacing_m: f64) -> f64 {
        let spacing = spacing_m / self.spacing_unit_m;
        let [s0, s1, s2] = self.spacing;
        let [v0, v1, v2] = self.velocity.get(class);
        let between = |sa: f64, sb: f64, va: f64, vb: f64| va + (vb - va) * (spacing - sa) / (sb - sa);
        let velocity = if spacing <= s0 {
            v0
        } else if spacing <= s1 {
            between(s0, s1, v0, v1)
        } else if spacing <= s2 {
            between(s1, s2, v1, v2)
        } else {
            v2
        };
        velocity * self.velocity_unit_m_s
    }

    /// Least apparent residence time (downcomer volume over liquid flow), s.
    pub fn residence_s(&self, class: FoamingClass) -> f64 {
        self.residence.get(class) * self.residence_unit_s
    }

    /// Relative density of the froth in the downcomer.
    pub fn froth_density(&self, class: FoamingClass) -> f64 {
        self.froth_density.get(class)
    }

    /// Whether the spacing lies outside the printed ones.
    pub fn outside(&self, spacing_m: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("tray_spacing", spacing_m)], found);
    }
}

impl Evaluator for DowncomerPractice {
    const SHAPE: Shape = Shape {
        name: "downcomer_practice",
        coefficients: &[
            ("spacing", 3),
            ("velocity_unstated", 3),
            ("velocity_low", 3),
            ("velocity_moderate", 3),
            ("velocity_high", 3),
            ("residence_unstated", 1),
            ("residence_low", 1),
            ("residence_moderate", 1),
            ("residence_high", 1),
            ("froth_density_unstated", 1),
            ("froth_density_low", 1),
            ("froth_density_moderate", 1),
            ("froth_density_high", 1),
        ],
        inputs: &[("tray_spacing", D::Length)],
        outputs: &[
            ("velocity_unstated", D::Velocity),
            ("velocity_low", D::Velocity),
            ("velocity_moderate", D::Velocity),
            ("velocity_high", D::Velocity),
            ("residence_unstated", D::Time),
            ("residence_low", D::Time),
            ("residence_moderate", D::Time),
            ("residence_high", D::Time),
            ("froth_density_unstated", D::Dimensionless),
            ("froth_density_low", D::Dimensionless),
            ("froth_density_moderate", D::Dimensionless),
            ("froth_density_high", D::Dimensionless),
        ],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        let spacing: [f64; 3] = record.numbers("spacing")?;
        let [s0, s1, s2] = spacing;
        if !(s0 < s1 && s1 < s2) {
            return Err(record.unusable("spacing must rise"));
        }
        Ok(Self {
            domain: Domain::new(record),
            spacing_unit_m: record.input_unit("tray_spacing")?,
            velocity_unit_m_s: record.output_unit("velocity_unstated")?,
            residence_unit_s: record.output_unit("residence_unstated")?,
            spacing,
            velocity: ByClass {
                unstated: record.numbers("velocity_unstated")?,
                low: record.numbers("velocity_low")?,
                moderate: record.numbers("velocity_moderate")?,
                high: record.numbers("velocity_high")?,
            },
            residence: ByClass {
                unstated: record.number("residence_unstated")?,
                low: record.number("residence_low")?,
                moderate: record.number("residence_moderate")?,
                high: record.number("residence_high")?,
            },
            froth_density: ByClass {
                unstated: record.number("froth_density_unstated")?,
                low: record.number("froth_density_low")?,
                moderate: record.number("froth_density_moderate")?,
                high: record.number("froth_density_high")?,
            },
        })
    }

    fn evaluate(&self, output: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let class = FoamingClass::of_output(output);
        if output.starts_with("residence") {
            return Ok(self.residence_s(class));
        }
        if output.starts_with("froth_density") {
            return Ok(self.froth_density(class));
        }
        let spacing_m = at.get("tray_spacing")?;
        self.outside(spacing_m, found);
        Ok(self.velocity_m_s(class, spacing_m))
    }
}
