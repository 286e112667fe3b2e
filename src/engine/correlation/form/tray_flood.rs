//! Flood of trays: capacity factor, its corrections, entrainment, and the limit that no tray escapes.

use super::super::range::{Domain, Outside};
use super::super::record::{Dimension as D, Record};
use super::{Arguments, Evaluator, Shape};
use crate::engine::error::EngineResult;

/// Csb = a + b TS^c exp(d FLV^e), on net area, at 20 mN/m.
///
/// Fair's 1961 chart as an equation; symbols, range and source are in its record. TS and FLV beyond the record's clamps
/// are held at them (the method's own rule), which [`FairCapacity::outside`] reports.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct FairCapacity {
    domain: Domain,
    spacing_unit_m: f64,
    csb_unit_m_s: f64,
    constant: f64,
    factor: f64,
    spacing_exponent: f64,
    decay: f64,
    flow_parameter_exponent: f64,
    spacing_least: f64,
    spacing_greatest: f64,
    flow_parameter_least: f64,
}

impl FairCapacity {
    /// Capacity factor at flood on net area, m/s, at a surface tension of 20 mN/m.
    pub fn csb_m_s(&self, spacing_m: f64, flow_parameter: f64) -> f64 {
        let spacing = (spacing_m / self.spacing_unit_m).clamp(self.spacing_least, self.spacing_greatest);
        let fp = flow_parameter.max(self.flow_parameter_least);
        let decay = (self.decay * fp.powf(self.flow_parameter_exponent)).exp();
        (self.constant + self.factor * spacing.powf(self.spacing_exponent) * decay) * self.csb_unit_m_s
    }

    /// What lies outside the chart.
    pub fn outside(&self, spacing_m: f64, flow_parameter: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("tray_spacing", spacing_m), ("flow_parameter", flow_parameter)], found);
    }
}

impl Evaluator for FairCapacity {
    const SHAPE: Shape = Shape {
        name: "fair_capacity",
        coefficients: &[
            ("constant", 1),
            ("factor", 1),
            ("spacing_exponent", 1),
            ("decay", 1),
            ("flow_parameter_exponent", 1),
            ("spacing_least", 1),
            ("spacing_greatest", 1),
            ("flow_parameter_least", 1),
        ],
        inputs: &[("tray_spacing", D::Length), ("flow_parameter", D::Dimensionless)],
        outputs: &[("csb", D::Velocity)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        let (spacing_least, spacing_greatest) = (record.number("spacing_least")?, record.number("spacing_greatest")?);
        ordered(record, spacing_least, spacing_greatest)?;
        Ok(Self {
            domain: Domain::new(record),
            spacing_unit_m: record.input_unit("tray_spacing")?,
            csb_unit_m_s: record.output_unit("csb")?,
            constant: record.number("constant")?,
            factor: record.number("factor")?,
            spacing_exponent: record.number("spacing_exponent")?,
            decay: record.number("decay")?,
            flow_parameter_exponent: record.number("flow_parameter_exponent")?,
            spacing_least,
            spacing_greatest,
            flow_parameter_least: record.number("flow_parameter_least")?,
        })
    }

    fn evaluate(&self, _: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let (spacing_m, flow_parameter) = (at.get("tray_spacing")?, at.get("flow_parameter")?);
        self.outside(spacing_m, flow_parameter, found);
        Ok(self.csb_m_s(spacing_m, flow_parameter))
    }
}

/// `f64::clamp` panics on a reversed interval, so a record with one is refused.
fn ordered(record: &Record, least: f64, greatest: f64) -> EngineResult<()> {
    if least <= greatest { Ok(()) } else { Err(record.unusable("spacing_least exceeds spacing_greatest")) }
}

/// Csb as a cubic in ln FLV whose coefficients are linear in TS; the remedy where the flow parameter is low.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct CubicCapacity {
    domain: Domain,
    spacing_unit_m: f64,
    csb_unit_m_s: f64,
    rows: [[f64; 2]; 4],
    spacing_least: f64,
    spacing_greatest: f64,
    flow_parameter_least: f64,
    /// Below this flow parameter the lower of this and the exponential fit counts.
    pub below_flow_parameter: f64,
}

impl CubicCapacity {
    /// Capacity factor at flood on net area, m/s, at a surface tension of 20 mN/m.
    pub fn csb_m_s(&self, spacing_m: f64, flow_parameter: f64) -> f64 {
        let y = (spacing_m / self.spacing_unit_m).clamp(self.spacing_least, self.spacing_greatest);
        let x = flow_parameter.max(self.flow_parameter_least).ln();
        self.rows.iter().fold(0.0, |sum, [slope, constant]| sum * x + (slope * y + constant)) * self.csb_unit_m_s
    }

    /// What lies outside the chart.
    pub fn outside(&self, spacing_m: f64, flow_parameter: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("tray_spacing", spacing_m), ("flow_parameter", flow_parameter)], found);
    }
}

impl Evaluator for CubicCapacity {
    const SHAPE: Shape = Shape {
        name: "cubic_capacity",
        coefficients: &[
            ("a", 2),
            ("b", 2),
            ("c", 2),
            ("d", 2),
            ("spacing_least", 1),
            ("spacing_greatest", 1),
            ("flow_parameter_least", 1),
            ("below_flow_parameter", 1),
        ],
        inputs: &[("tray_spacing", D::Length), ("flow_parameter", D::Dimensionless)],
        outputs: &[("csb", D::Velocity), ("applies", D::Dimensionless)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        let (spacing_least, spacing_greatest) = (record.number("spacing_least")?, record.number("spacing_greatest")?);
        ordered(record, spacing_least, spacing_greatest)?;
        Ok(Self {
            domain: Domain::new(record),
            spacing_unit_m: record.input_unit("tray_spacing")?,
            csb_unit_m_s: record.output_unit("csb")?,
            rows: [record.numbers("a")?, record.numbers("b")?, record.numbers("c")?, record.numbers("d")?],
            spacing_least,
            spacing_greatest,
            flow_parameter_least: record.number("flow_parameter_least")?,
            below_flow_parameter: record.number("below_flow_parameter")?,
        })
    }

    fn evaluate(&self, output: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let flow_parameter = at.get("flow_parameter")?;
        if output == "applies" {
            return Ok(if flow_parameter < self.below_flow_parameter { 1.0 } else { 0.0 });
        }
        let spacing_m = at.get("tray_spacing")?;
        self.outside(spacing_m, flow_parameter, found);
        Ok(self.csb_m_s(spacing_m, flow_parameter))
    }
}

/// (sigma/sigma0)^n on the capacity factor.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct SurfaceTensionFactor {
    sigma_unit_n_m: f64,
    reference: f64,
    exponent: f64,
}

impl SurfaceTensionFactor {
    /// Factor on the capacity factor.
    pub fn factor(&self, sigma_n_m: f64) -> f64 {
        (sigma_n_m / self.sigma_unit_n_m / self.reference).powf(self.exponent)
    }
}

impl Evaluator for SurfaceTensionFactor {
    const SHAPE: Shape = Shape {
        name: "surface_tension_factor",
        coefficients: &[("reference", 1), ("exponent", 1)],
        inputs: &[("surface_tension", D::SurfaceTension)],
        outputs: &[("factor", D::Dimensionless)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            sigma_unit_n_m: record.input_unit("surface_tension")?,
            reference: record.number("reference")?,
            exponent: record.number("exponent")?,
        })
    }

    fn evaluate(&self, _: &str, at: &Arguments<'_>, _: &mut Vec<Outside>) -> EngineResult<f64> {
        Ok(self.factor(at.get("surface_tension")?))
    }
}

/// min(1, slope Af + constant) on the capacity factor; straight on below the tabled hole areas, which is reported.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct HoleAreaFactor {
    domain: Domain,
    slope: f64,
    constant: f64,
    greatest: f64,
}

impl HoleAreaFactor {
    /// Factor on the capacity factor for holes over active area.
    pub fn factor(&self, hole_area: f64) -> f64 {
        (self.slope * hole_area + self.constant).min(self.greatest)
    }

    /// What lies outside the table.
    pub fn outside(&self, hole_area: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("hole_area", hole_area)], found);
    }
}

impl Evaluator for HoleAreaFactor {
    const SHAPE: Shape = Shape {
        name: "hole_area_factor",
        coefficients: &[("slope", 1), ("constant", 1), ("greatest", 1)],
        inputs: &[("hole_area", D::Dimensionless)],
        outputs: &[("factor", D::Dimensionless)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            domain: Domain::new(record),
            slope: record.number("slope")?,
            constant: record.number("constant")?,
            greatest: record.number("greatest")?,
        })
    }

    fn evaluate(&self, _: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let hole_area = at.get("hole_area")?;
        self.outside(hole_area, found);
        Ok(self.factor(hole_area))
    }
}

/// psi = exp(-(a + b f) FLV^(c + d f)), f the fraction of flood.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct FairEntrainment {
    domain: Domain,
    constant: f64,
    flood_factor: f64,
    exponent_constant: f64,
    exponent_factor: f64,
}

impl FairEntrainment {
    /// Entrained liquid over entrained plus net downflow.
    pub fn psi(&self, flood: f64, flow_parameter: f64) -> f64 {
        let power = flow_parameter.powf(self.exponent_constant + self.exponent_factor * flood);
        (-(self.constant + self.flood_factor * flood) * power).exp()
    }

    /// What lies outside the chart.
    pub fn outside(&self, flood: f64, flow_parameter: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("flood", flood), ("flow_parameter", flow_parameter)], found);
    }
}

impl Evaluator for FairEntrainment {
    const SHAPE: Shape = Shape {
        name: "fair_entrainment",
        coefficients: &[("constant", 1), ("flood_factor", 1), ("exponent_constant", 1), ("exponent_factor", 1)],
        inputs: &[("flood", D::Dimensionless), ("flow_parameter", D::Dimensionless)],
        outputs: &[("psi", D::Dimensionless)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            domain: Domain::new(record),
            constant: record.number("constant")?,
            flood_factor: record.number("flood_factor")?,
            exponent_constant: record.number("exponent_constant")?,
            exponent_factor: record.number("exponent_factor")?,
        })
    }

    fn evaluate(&self, _: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let (flood, flow_parameter) = (at.get("flood")?, at.get("flow_parameter")?);
        self.outside(flood, flow_parameter, found);
        Ok(self.psi(flood, flow_parameter))
    }
}

/// System limit: C = min(C1, C2) on tower area, C1 = k1 (1 - F)(sigma/drho)^n - m LS, C2 = k2 (1 - F)(sigma/drho)^n,
/// F = 1/(1 + q (drho/rhoV)^0.5).
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct SystemLimit {
    sigma_unit_n_m: f64,
    density_unit_kg_m3: f64,
    velocity_unit_m_s: f64,
    density_ratio_factor: f64,
    first_factor: f64,
    second_factor: f64,
    exponent: f64,
    liquid_factor: f64,
}

impl SystemLimit {
    fn group(&self, rho_v_kg_m3: f64, rho_l_kg_m3: f64, sigma_n_m: f64) -> f64 {
        let difference_kg_m3 = rho_l_kg_m3 - rho_v_kg_m3;
        let f = 1.0 / (1.0 + self.density_ratio_factor * (difference_kg_m3 / rho_v_kg_m3).sqrt());
        let ratio = (sigma_n_m / self.sigma_unit_n_m) / (difference_kg_m3 / self.density_unit_kg_m3);
        (1.0 - f) * ratio.powf(self.exponent) * self.velocity_unit_m_s
    }

    /// The branch that falls with the liquid, m/s on tower area.
    pub fn c1_m_s(&self, rho_v_kg_m3: f64, rho_l_kg_m3: f64, sigma_n_m: f64, liquid_velocity_m_s: f64) -> f64 {
        self.first_factor * self.group(rho_v_kg_m3, rho_l_kg_m3, sigma_n_m) - self.liquid_factor * liquid_velocity_m_s
    }

    /// The flat branch, m/s on tower area.
    pub fn c2_m_s(&self, rho_v_kg_m3: f64, rho_l_kg_m3: f64, sigma_n_m: f64) -> f64 {
        self.second_factor * self.group(rho_v_kg_m3, rho_l_kg_m3, sigma_n_m)
    }

    /// The lower of the two at a fixed liquid velocity on tower area.
    pub fn capacity_m_s(&self, rho_v_kg_m3: f64, rho_l_kg_m3: f64, sigma_n_m: f64, liquid_velocity_m_s: f64) -> f64 {
        let first = self.c1_m_s(rho_v_kg_m3, rho_l_kg_m3, sigma_n_m, liquid_velocity_m_s);
        first.min(self.c2_m_s(rho_v_kg_m3, rho_l_kg_m3, sigma_n_m))
    }

    /// The lower of the two when the liquid moves with the vapour: liquid velocity = `liquid_velocity_over_c` x C, so
    /// that C1 = k1 group/(1 + m r). This is the capacity for a flood at constant L/V.
    pub fn capacity_at_constant_ratio_m_s(
        &self,
        rho_v_kg_m3: f64,
        rho_l_kg_m3: f64,
        sigma_n_m: f64,
        liquid_velocity_over_c: f64,
    ) -> f64 {
        let group = self.group(rho_v_kg_m3, rho_l_kg_m3, sigma_n_m);
        (self.first_factor * group / (1.0 + self.liquid_factor * liquid_velocity_over_c))
            .min(self.second_factor * group)
    }
}

impl Evaluator for SystemLimit {
    const SHAPE: Shape = Shape {
        name: "system_limit",
        coefficients: &[
            ("density_ratio_factor", 1),
            ("first_factor", 1),
            ("second_factor", 1),
            ("exponent", 1),
            ("liquid_factor", 1),
        ],
        inputs: &[
            ("vapour_density", D::Density),
            ("liquid_density", D::Density),
            ("surface_tension", D::SurfaceTension),
            ("liquid_velocity", D::Velocity),
            ("liquid_velocity_over_c", D::Dimensionless),
        ],
        outputs: &[
            ("capacity", D::Velocity),
            ("c1", D::Velocity),
            ("c2", D::Velocity),
            ("capacity_at_constant_ratio", D::Velocity),
        ],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            sigma_unit_n_m: record.input_unit("surface_tension")?,
            density_unit_kg_m3: record.input_unit("liquid_density")?,
            velocity_unit_m_s: record.output_unit("capacity")?,
            density_ratio_factor: record.number("density_ratio_factor")?,
            first_factor: record.number("first_factor")?,
            second_factor: record.number("second_factor")?,
            exponent: record.number("exponent")?,
            liquid_factor: record.number("liquid_factor")?,
        })
    }

    fn evaluate(&self, output: &str, at: &Arguments<'_>, _: &mut Vec<Outside>) -> EngineResult<f64> {
        let (rho_v, rho_l) = (at.get("vapour_density")?, at.get("liquid_density")?);
        let sigma_n_m = at.get("surface_tension")?;
        Ok(match output {
            "c1" => self.c1_m_s(rho_v, rho_l, sigma_n_m, at.get("liquid_velocity")?),
            "c2" => self.c2_m_s(rho_v, rho_l, sigma_n_m),
            "capacity_at_constant_ratio" => {
                self.capacity_at_constant_ratio_m_s(rho_v, rho_l, sigma_n_m, at.get("liquid_velocity_over_c")?)
            }
            _ => self.capacity_m_s(rho_v, rho_l, sigma_n_m, at.get("liquid_velocity")?),
        })
    }
}
