//! Least liquid load of packings.

use super::super::packing::{Material, PackingKind};
use super::super::range::Outside;
use super::super::record::{Dimension as D, Record};
use super::{Arguments, Evaluator, Shape};
use crate::engine::error::EngineResult;

/// Least liquid load by kind and material, as an areal rate.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct WettingMinimum {
    unit_m_s: f64,
    structured: f64,
    random_metal: f64,
    random_plastic: f64,
    random_ceramic: f64,
}

impl WettingMinimum {
    /// Least liquid load, m3/s per m2 of bed.
    pub fn least_m_s(&self, kind: PackingKind, material: Material) -> f64 {
        let rate = match (kind, material) {
            (PackingKind::Structured, _) => self.structured,
            (PackingKind::Random, Material::Metal) => self.random_metal,
            (PackingKind::Random, Material::Plastic) => self.random_plastic,
            (PackingKind::Random, Material::Ceramic) => self.random_ceramic,
        };
        rate * self.unit_m_s
    }
}

impl Evaluator for WettingMinimum {
    const SHAPE: Shape = Shape {
        name: "wetting_minimum",
        coefficients: &[("structured", 1), ("random_metal", 1), ("random_plastic", 1), ("random_ceramic", 1)],
        inputs: &[],
        outputs: &[
            ("structured", D::Velocity),
            ("random_metal", D::Velocity),
            ("random_plastic", D::Velocity),
            ("random_ceramic", D::Velocity),
        ],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            unit_m_s: record.output_unit("structured")?,
            structured: record.number("structured")?,
            random_metal: record.number("random_metal")?,
            random_plastic: record.number("random_plastic")?,
            random_ceramic: record.number("random_ceramic")?,
        })
    }

    fn evaluate(&self, output: &str, _: &Arguments<'_>, _: &mut Vec<Outside>) -> EngineResult<f64> {
        Ok(match output {
            "random_metal" => self.least_m_s(PackingKind::Random, Material::Metal),
            "random_plastic" => self.least_m_s(PackingKind::Random, Material::Plastic),
            "random_ceramic" => self.least_m_s(PackingKind::Random, Material::Ceramic),
            _ => self.least_m_s(PackingKind::Structured, Material::Metal),
        })
    }
}
