//! Weeping: its onset and its rate.

use super::super::range::{Domain, Outside};
use super::super::record::{Dimension as D, Record};
use super::{Arguments, Evaluator, Shape};
use crate::engine::error::EngineResult;

/// Least hole velocity: uh = (K2 - a (d0 - dh))/rhoV^0.5, K2 = k0 + k1 ln h + k2 (ln h)^2, h = weir height + crest.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct EduljeeWeep {
    domain: Domain,
    head_unit_m: f64,
    diameter_unit_m: f64,
    density_unit_kg_m3: f64,
    velocity_unit_m_s: f64,
    constant: f64,
    linear: f64,
    quadratic: f64,
    diameter_factor: f64,
    diameter_reference: f64,
}

impl EduljeeWeep {
    /// K2, in the units of the chart.
    pub fn k2(&self, liquid_head_m: f64) -> f64 {
        let x = (liquid_head_m / self.head_unit_m).ln();
        self.constant + x * (self.linear + x * self.quadratic)
    }

    /// Least velocity through the holes without significant weeping, m/s. Negative where the chart ends: then nothing
    /// weeps by this criterion.
    pub fn least_hole_velocity_m_s(&self, liquid_head_m: f64, hole_diameter_m: f64, rho_v_kg_m3: f64) -> f64 {
        let diameter = hole_diameter_m / self.diameter_unit_m;
        let numerator = self.k2(liquid_head_m) - self.diameter_factor * (self.diameter_reference - diameter);
        numerator / (rho_v_kg_m3 / self.density_unit_kg_m3).sqrt() * self.velocity_unit_m_s
    }

    /// What lies outside the chart.
    pub fn outside(&self, liquid_head_m: f64, hole_diameter_m: f64, rho_v_kg_m3: f64, found: &mut Vec<Outside>) {
        let arguments =
            [("liquid_head", liquid_head_m), ("hole_diameter", hole_diameter_m), ("vapour_density", rho_v_kg_m3)];
        self.domain.outside(&arguments, found);
    }
}

impl Evaluator for EduljeeWeep {
    const SHAPE: Shape = Shape {
        name: "eduljee_weep",
        coefficients: &[
            ("constant", 1),
            ("linear", 1),
            ("quadratic", 1),
            ("diameter_factor", 1),
            ("diameter_reference", 1),
        ],
        inputs: &[("liquid_head", D::Length), ("hole_diameter", D::Length), ("vapour_density", D::Density)],
        outputs: &[("least_hole_velocity", D::Velocity), ("k2", D::Dimensionless)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            domain: Domain::new(record),
            head_unit_m: record.input_unit("liquid_head")?,
            diameter_unit_m: record.input_unit("hole_diameter")?,
            density_unit_kg_m3: record.input_unit("vapour_density")?,
            velocity_unit_m_s: record.output_unit("least_hole_velocity")?,
            constant: record.number("constant")?,
            linear: record.number("linear")?,
            quadratic: record.number("quadratic")?,
            diameter_factor: record.number("diameter_factor")?,
            diameter_reference: record.number("diameter_reference")?,
        })
    }

    fn evaluate(&self, output: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let liquid_head_m = at.get("liquid_head")?;
        if output == "k2" {
            self.domain.outside(&[("liquid_head", liquid_head_m)], found);
            return Ok(self.k2(liquid_head_m));
        }
        let (hole_diameter_m, rho_v_kg_m3) = (at.get("hole_diameter")?, at.get("vapour_density")?);
        self.outside(liquid_head_m, hole_diameter_m, rho_v_kg_m3, found);
        Ok(self.least_hole_velocity_m_s(liquid_head_m, hole_diameter_m, rho_v_kg_m3))
    }
}

/// Weep rate per hole area in two branches of Fr = c (uh^2/hc) rhoV/(rhoL - rhoV):
/// a Fr^-0.5 - b below the switch, k Fr^-n from it on.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct LockettBanikWeep {
    domain: Domain,
    velocity_unit_m_s: f64,
    head_unit_m: f64,
    rate_unit_m_s: f64,
    froude_factor: f64,
    switch: f64,
    low_factor: f64,
    low_exponent: f64,
    low_constant: f64,
    high_factor: f64,
    high_exponent: f64,
}

impl LockettBanikWeep {
    /// Liquid that weeps, m3/s per m2 of holes. Grows without bound as the vapour stops; zero liquid head weeps nothing.
    pub fn rate_m_s(&self, hole_velocity_m_s: f64, clear_liquid_m: f64, rho_v_kg_m3: f64, rho_l_kg_m3: f64) -> f64 {
        let velocity = hole_velocity_m_s / self.velocity_unit_m_s;
        let head = clear_liquid_m / self.head_unit_m;
        let froude = self.froude_factor * velocity * velocity / head * rho_v_kg_m3 / (rho_l_kg_m3 - rho_v_kg_m3);
        let rate = if froude < self.switch {
            self.low_factor * froude.powf(self.low_exponent) - self.low_constant
        } else {
            self.high_factor * froude.powf(self.high_exponent)
        };
        rate * self.rate_unit_m_s
    }

    /// What lies outside the stated range.
    pub fn outside(&self, hole_diameter_m: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("hole_diameter", hole_diameter_m)], found);
    }
}

impl Evaluator for LockettBanikWeep {
    const SHAPE: Shape = Shape {
        name: "lockett_banik_weep",
        coefficients: &[
            ("froude_factor", 1),
            ("switch", 1),
            ("low_factor", 1),
            ("low_exponent", 1),
            ("low_constant", 1),
            ("high_factor", 1),
            ("high_exponent", 1),
        ],
        inputs: &[
            ("hole_velocity", D::Velocity),
            ("clear_liquid", D::Length),
            ("vapour_density", D::Density),
            ("liquid_density", D::Density),
            ("hole_diameter", D::Length),
        ],
        outputs: &[("rate", D::Velocity)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            domain: Domain::new(record),
            velocity_unit_m_s: record.input_unit("hole_velocity")?,
            head_unit_m: record.input_unit("clear_liquid")?,
            rate_unit_m_s: record.output_unit("rate")?,
            froude_factor: record.number("froude_factor")?,
            switch: record.number("switch")?,
            low_factor: record.number("low_factor")?,
            low_exponent: record.number("low_exponent")?,
            low_constant: record.number("low_constant")?,
            high_factor: record.number("high_factor")?,
            high_exponent: record.number("high_exponent")?,
        })
    }

    fn evaluate(&self, _: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let (velocity_m_s, liquid_m) = (at.get("hole_velocity")?, at.get("clear_liquid")?);
        // The rate does not depend on the holes' size; a caller who gives it wants its range checked.
        if let Ok(hole_diameter_m) = at.get("hole_diameter") {
            self.outside(hole_diameter_m, found);
        }
        Ok(self.rate_m_s(velocity_m_s, liquid_m, at.get("vapour_density")?, at.get("liquid_density")?))
    }
}
