//! Later packing chart as one equation, and the pressure drop at which packings flood.

use super::super::range::{Domain, Outside};
use super::super::record::{Dimension as D, Record};
use super::{Arguments, Evaluator, Shape};
use crate::engine::error::EngineResult;

/// CP = C1 x^C2 E/(1 + C3 x^(C2/C4) F^C5)^C4, E = 1 - exp(C6 F^C7), x the gradient in inH2O/ft.
///
/// CP rises with x towards CP_max(F), at and above which there is no answer: flooded beyond the chart. Both directions are
/// closed. Below the record's least flow parameter it is evaluated there (the lower, cautious side), which
/// [`GpdLater::outside`] reports.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct GpdLater {
    domain: Domain,
    gradient_unit_pa_m: f64,
    cp_unit: f64,
    nu_unit_m2_s: f64,
    c: [f64; 7],
    viscosity_exponent: f64,
    flow_parameter_least: f64,
}

impl GpdLater {
    fn pieces(&self, flow_parameter: f64) -> (f64, f64) {
        let [_, _, c3, _, c5, c6, c7] = self.c;
        let f = flow_parameter.max(self.flow_parameter_least);
        (1.0 - (c6 * f.powf(c7)).exp(), c3 * f.powf(c5))
    }

    /// Capacity parameter at a gradient and flow parameter; 0 for no gradient.
    pub fn capacity_parameter(&self, gradient_pa_m: f64, flow_parameter: f64) -> f64 {
        let [c1, c2, _, c4, ..] = self.c;
        let (e, b) = self.pieces(flow_parameter);
        let power = (gradient_pa_m / self.gradient_unit_pa_m).powf(c2 / c4);
        c1 * e * (power / (1.0 + b * power)).powf(c4)
    }

    /// Greatest capacity parameter of the chart at a flow parameter.
    pub fn greatest_capacity_parameter(&self, flow_parameter: f64) -> f64 {
        let [c1, _, _, c4, ..] = self.c;
        let (e, b) = self.pieces(flow_parameter);
        c1 * e / b.powf(c4)
    }

    /// Pressure drop per height, Pa/m; `None` beyond the chart (flooded).
    pub fn gradient_pa_m(&self, capacity_parameter: f64, flow_parameter: f64) -> Option<f64> {
        let [c1, c2, _, c4, ..] = self.c;
        let (e, b) = self.pieces(flow_parameter);
        let k = (capacity_parameter / (c1 * e)).powf(1.0 / c4);
        let room = 1.0 - b * k;
        (room > 0.0).then(|| (k / room).powf(c4 / c2) * self.gradient_unit_pa_m)
    }

    /// Capacity parameter of a capacity factor C = u (rhoV/(rhoL - rhoV))^0.5, with the later chart's packing factor.
    pub fn cp_from_si(&self, c_m_s: f64, factor_per_m: f64, nu_m2_s: f64) -> f64 {
        c_m_s * factor_per_m.sqrt() / self.cp_unit * (nu_m2_s / self.nu_unit_m2_s).powf(self.viscosity_exponent)
    }

    /// The capacity factor of a capacity parameter, m/s: inverse of [`GpdLater::cp_from_si`].
    pub fn c_m_s(&self, capacity_parameter: f64, factor_per_m: f64, nu_m2_s: f64) -> f64 {
        capacity_parameter / self.cp_from_si(1.0, factor_per_m, nu_m2_s)
    }

    /// What lies outside the chart.
    pub fn outside(&self, gradient_pa_m: f64, flow_parameter: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("gradient", gradient_pa_m), ("flow_parameter", flow_parameter)], found);
    }
}

impl Evaluator for GpdLater {
    const SHAPE: Shape = Shape {
        name: "gpd_later",
        coefficients: &[
            ("c1", 1),
            ("c2", 1),
            ("c3", 1),
            ("c4", 1),
            ("c5", 1),
            ("c6", 1),
            ("c7", 1),
            ("viscosity_exponent", 1),
            ("flow_parameter_least", 1),
        ],
        inputs: &[
            ("gradient", D::Gradient),
            ("flow_parameter", D::Dimensionless),
            ("capacity_parameter", D::Dimensionless),
            ("capacity_factor", D::Velocity),
            ("packing_factor", D::PerLength),
            ("kinematic_viscosity", D::KinematicViscosity),
        ],
        outputs: &[
            ("capacity_parameter", D::Dimensionless),
            ("gradient", D::Gradient),
            ("greatest_capacity_parameter", D::Dimensionless),
            ("cp", D::CapacityParameter),
            ("capacity_factor", D::Velocity),
        ],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            domain: Domain::new(record),
            gradient_unit_pa_m: record.input_unit("gradient")?,
            cp_unit: record.output_unit("cp")?,
            nu_unit_m2_s: record.input_unit("kinematic_viscosity")?,
            c: [
                record.number("c1")?,
                record.number("c2")?,
                record.number("c3")?,
                record.number("c4")?,
                record.number("c5")?,
                record.number("c6")?,
                record.number("c7")?,
            ],
            viscosity_exponent: record.number("viscosity_exponent")?,
            flow_parameter_least: record.number("flow_parameter_least")?,
        })
    }

    fn evaluate(&self, output: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        match output {
            "cp" => {
                let (factor, nu) = (at.get("packing_factor")?, at.get("kinematic_viscosity")?);
                Ok(self.cp_from_si(at.get("capacity_factor")?, factor, nu) * self.cp_unit)
            }
            "capacity_factor" => {
                let (factor, nu) = (at.get("packing_factor")?, at.get("kinematic_viscosity")?);
                Ok(self.c_m_s(at.get("capacity_parameter")?, factor, nu))
            }
            "greatest_capacity_parameter" => Ok(self.greatest_capacity_parameter(at.get("flow_parameter")?)),
            "gradient" => {
                let (cp, flow_parameter) = (at.get("capacity_parameter")?, at.get("flow_parameter")?);
                let gradient_pa_m = self
                    .gradient_pa_m(cp, flow_parameter)
                    .ok_or_else(|| at.no_answer("beyond the last curve of the chart, flooded"))?;
                self.outside(gradient_pa_m, flow_parameter, found);
                Ok(gradient_pa_m)
            }
            _ => {
                let (gradient_pa_m, flow_parameter) = (at.get("gradient")?, at.get("flow_parameter")?);
                self.outside(gradient_pa_m, flow_parameter, found);
                Ok(self.capacity_parameter(gradient_pa_m, flow_parameter))
            }
        }
    }
}

/// Pressure drop at flood: k Fp^n, Fp the factor of the chart in use.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct FloodPressureDrop {
    domain: Domain,
    factor_unit_per_m: f64,
    gradient_unit_pa_m: f64,
    factor: f64,
    exponent: f64,
    older_chart_greatest: f64,
}

impl FloodPressureDrop {
    /// Gradient at flood, Pa/m, for the later chart.
    pub fn gradient_pa_m(&self, factor_per_m: f64) -> f64 {
        self.factor * (factor_per_m / self.factor_unit_per_m).powf(self.exponent) * self.gradient_unit_pa_m
    }

    /// The same for the older chart, capped at its top curve (the method's own rule).
    pub fn older_gradient_pa_m(&self, factor_per_m: f64) -> f64 {
        self.gradient_pa_m(factor_per_m).min(self.older_chart_greatest * self.gradient_unit_pa_m)
    }

    /// Whether the packing factor lies outside the stated range.
    pub fn outside(&self, factor_per_m: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("packing_factor", factor_per_m)], found);
    }
}

impl Evaluator for FloodPressureDrop {
    const SHAPE: Shape = Shape {
        name: "flood_pressure_drop",
        coefficients: &[("factor", 1), ("exponent", 1), ("older_chart_greatest", 1)],
        inputs: &[("packing_factor", D::PerLength)],
        outputs: &[("gradient", D::Gradient), ("older_gradient", D::Gradient)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            domain: Domain::new(record),
            factor_unit_per_m: record.input_unit("packing_factor")?,
            gradient_unit_pa_m: record.output_unit("gradient")?,
            factor: record.number("factor")?,
            exponent: record.number("exponent")?,
            older_chart_greatest: record.number("older_chart_greatest")?,
        })
    }

    fn evaluate(&self, output: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let factor_per_m = at.get("packing_factor")?;
        self.outside(factor_per_m, found);
        Ok(if output == "older_gradient" {
            self.older_gradient_pa_m(factor_per_m)
        } else {
            self.gradient_pa_m(factor_per_m)
        })
    }
}
