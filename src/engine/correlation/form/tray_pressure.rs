//! Pressure drop of trays: dry head, aerated liquid, weir crest, bubble-forming head.

use super::super::range::{Domain, Outside};
use super::super::record::{Dimension as D, Record};
use super::{Arguments, Evaluator, Shape};
use crate::engine::error::EngineResult;
use crate::engine::units::STANDARD_GRAVITY_M_S2;

/// Discharge coefficient of a sieve: Co = a + b Ah/Ap + c (t/dh)^2.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct OrificeCoefficient {
    domain: Domain,
    constant: f64,
    area_factor: f64,
    thickness_factor: f64,
}

impl OrificeCoefficient {
    /// Co for a deck thickness over hole diameter and holes over perforated area (a fraction).
    pub fn coefficient(&self, thickness_over_diameter: f64, hole_area: f64) -> f64 {
        self.constant + self.area_factor * hole_area + self.thickness_factor * thickness_over_diameter.powi(2)
    }

    /// What lies outside the chart.
    pub fn outside(&self, thickness_over_diameter: f64, hole_area: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("thickness_over_diameter", thickness_over_diameter), ("hole_area", hole_area)], found);
    }
}

impl Evaluator for OrificeCoefficient {
    const SHAPE: Shape = Shape {
        name: "orifice_coefficient",
        coefficients: &[("constant", 1), ("area_factor", 1), ("thickness_factor", 1)],
        inputs: &[("thickness_over_diameter", D::Dimensionless), ("hole_area", D::Dimensionless)],
        outputs: &[("coefficient", D::Dimensionless)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            domain: Domain::new(record),
            constant: record.number("constant")?,
            area_factor: record.number("area_factor")?,
            thickness_factor: record.number("thickness_factor")?,
        })
    }

    fn evaluate(&self, _: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let (thickness_over_diameter, hole_area) = (at.get("thickness_over_diameter")?, at.get("hole_area")?);
        self.outside(thickness_over_diameter, hole_area, found);
        Ok(self.coefficient(thickness_over_diameter, hole_area))
    }
}

/// Dry head of a sieve: hd = k/Co^2 (rhoV/rhoL) uh^2, uh on hole area.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct DryHead {
    velocity_unit_m_s: f64,
    head_unit_m: f64,
    factor: f64,
}

impl DryHead {
    /// Head in metres of the tray's liquid.
    pub fn head_m(&self, orifice_coefficient: f64, rho_v_kg_m3: f64, rho_l_kg_m3: f64, hole_velocity_m_s: f64) -> f64 {
        let velocity = hole_velocity_m_s / self.velocity_unit_m_s / orifice_coefficient;
        self.factor * (rho_v_kg_m3 / rho_l_kg_m3) * velocity * velocity * self.head_unit_m
    }
}

impl Evaluator for DryHead {
    const SHAPE: Shape = Shape {
        name: "dry_head",
        coefficients: &[("factor", 1)],
        inputs: &[
            ("orifice_coefficient", D::Dimensionless),
            ("vapour_density", D::Density),
            ("liquid_density", D::Density),
            ("hole_velocity", D::Velocity),
        ],
        outputs: &[("head", D::Length)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            velocity_unit_m_s: record.input_unit("hole_velocity")?,
            head_unit_m: record.output_unit("head")?,
            factor: record.number("factor")?,
        })
    }

    fn evaluate(&self, _: &str, at: &Arguments<'_>, _: &mut Vec<Outside>) -> EngineResult<f64> {
        let (rho_v, rho_l) = (at.get("vapour_density")?, at.get("liquid_density")?);
        Ok(self.head_m(at.get("orifice_coefficient")?, rho_v, rho_l, at.get("hole_velocity")?))
    }
}

/// Aerated liquid in the froth regime: phi = exp(-a Ks^n), hL = phi (hw + Cb (q/(lw phi))^m), Cb = b + c exp(-d hw);
/// Ks on active area.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct BennettLiquid {
    domain: Domain,
    ks_unit_m_s: f64,
    weir_height_unit_m: f64,
    weir_load_unit_m2_s: f64,
    head_unit_m: f64,
    froth_factor: f64,
    froth_exponent: f64,
    crest_constant: f64,
    crest_factor: f64,
    crest_decay: f64,
    crest_exponent: f64,
}

impl BennettLiquid {
    /// Relative froth density.
    pub fn froth_density(&self, ks_m_s: f64) -> f64 {
        (-self.froth_factor * (ks_m_s / self.ks_unit_m_s).powf(self.froth_exponent)).exp()
    }

    /// Clear liquid on the tray, m.
    pub fn head_m(&self, ks_m_s: f64, weir_height_m: f64, weir_load_m2_s: f64) -> f64 {
        let crest_coefficient = self.crest_coefficient(weir_height_m);
        self.head_at_density_m(self.froth_density(ks_m_s), crest_coefficient, weir_height_m, weir_load_m2_s)
    }

    /// Cb of a weir height: a tray has one, so it need not be worked out for every load.
    pub fn crest_coefficient(&self, weir_height_m: f64) -> f64 {
        let weir_height = weir_height_m / self.weir_height_unit_m;
        self.crest_constant + self.crest_factor * (-self.crest_decay * weir_height).exp()
    }

    /// Clear liquid at a known froth density and Cb, m.
    #[inline]
    pub fn head_at_density_m(&self, phi: f64, crest_coefficient: f64, weir_height_m: f64, weir_load_m2_s: f64) -> f64 {
        let crest = crest_coefficient * (weir_load_m2_s / self.weir_load_unit_m2_s / phi).powf(self.crest_exponent);
        phi * (weir_height_m + crest * self.head_unit_m)
    }

    /// What lies outside the stated range.
    pub fn outside(&self, ks_m_s: f64, weir_height_m: f64, weir_load_m2_s: f64, found: &mut Vec<Outside>) {
        let arguments = [("ks", ks_m_s), ("weir_height", weir_height_m), ("weir_load", weir_load_m2_s)];
        self.domain.outside(&arguments, found);
    }
}

impl Evaluator for BennettLiquid {
    const SHAPE: Shape = Shape {
        name: "bennett_liquid",
        coefficients: &[
            ("froth_factor", 1),
            ("froth_exponent", 1),
            ("crest_constant", 1),
            ("crest_factor", 1),
            ("crest_decay", 1),
            ("crest_exponent", 1),
        ],
        inputs: &[("ks", D::Velocity), ("weir_height", D::Length), ("weir_load", D::WeirLoad)],
        outputs: &[("head", D::Length), ("froth_density", D::Dimensionless)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            domain: Domain::new(record),
            ks_unit_m_s: record.input_unit("ks")?,
            weir_height_unit_m: record.input_unit("weir_height")?,
            weir_load_unit_m2_s: record.input_unit("weir_load")?,
            head_unit_m: record.output_unit("head")?,
            froth_factor: record.number("froth_factor")?,
            froth_exponent: record.number("froth_exponent")?,
            crest_constant: record.number("crest_constant")?,
            crest_factor: record.number("crest_factor")?,
            crest_decay: record.number("crest_decay")?,
            crest_exponent: record.number("crest_exponent")?,
        })
    }

    fn evaluate(&self, output: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let ks_m_s = at.get("ks")?;
        if output == "froth_density" {
            return Ok(self.froth_density(ks_m_s));
        }
        let (weir_height_m, weir_load_m2_s) = (at.get("weir_height")?, at.get("weir_load")?);
        self.outside(ks_m_s, weir_height_m, weir_load_m2_s, found);
        Ok(self.head_m(ks_m_s, weir_height_m, weir_load_m2_s))
    }
}

/// Aeration factor: beta = 1 - a F^n, F on active area; the clear liquid is beta (hw + crest).
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct FairAeration {
    domain: Domain,
    f_factor_unit_root_pa: f64,
    factor: f64,
    exponent: f64,
}

impl FairAeration {
    /// Aeration factor at F = Ua sqrt(rhoV) in Pa^0.5.
    pub fn beta(&self, f_factor_root_pa: f64) -> f64 {
        1.0 - self.factor * (f_factor_root_pa / self.f_factor_unit_root_pa).powf(self.exponent)
    }

    /// What lies outside the stated range.
    pub fn outside(&self, f_factor_root_pa: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("f_factor", f_factor_root_pa)], found);
    }
}

impl Evaluator for FairAeration {
    const SHAPE: Shape = Shape {
        name: "fair_aeration",
        coefficients: &[("factor", 1), ("exponent", 1)],
        inputs: &[("f_factor", D::FFactor)],
        outputs: &[("beta", D::Dimensionless)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            domain: Domain::new(record),
            f_factor_unit_root_pa: record.input_unit("f_factor")?,
            factor: record.number("factor")?,
            exponent: record.number("exponent")?,
        })
    }

    fn evaluate(&self, _: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        let f_factor_root_pa = at.get("f_factor")?;
        self.outside(f_factor_root_pa, found);
        Ok(self.beta(f_factor_root_pa))
    }
}

/// Crest over a straight weir: how = k Fw (q/lw)^n; and the form h1 = k1 (q/Weff)^n from which the constriction of a
/// chord is iterated.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct FrancisWeir {
    weir_load_unit_m2_s: f64,
    crest_unit_m: f64,
    first_crest_unit_m: f64,
    factor: f64,
    exponent: f64,
    first_factor: f64,
}

impl FrancisWeir {
    /// Passes of the constriction's iteration; it contracts by a factor of about ten each.
    const PASSES: usize = 60;
    /// Relative change of the effective weir length at which it ends.
    const TOLERANCE: f64 = 1e-13;

    /// Crest in metres of clear liquid; `constriction_factor` is 1 for a free weir.
    pub fn crest_m(&self, weir_load_m2_s: f64, constriction_factor: f64) -> f64 {
        let load = weir_load_m2_s / self.weir_load_unit_m2_s;
        self.factor * constriction_factor * load.powf(self.exponent) * self.crest_unit_m
    }

    /// Crest of the constriction's own form (no factor), m.
    pub fn first_crest_m(&self, weir_load_m2_s: f64) -> f64 {
        self.first_factor * (weir_load_m2_s / self.weir_load_unit_m2_s).powf(self.exponent) * self.first_crest_unit_m
    }

    /// Effective length of a weir on a chord of a full circle, m; `None` if the crest leaves none of it.
    ///
    /// (Weff/W)^2 = (D/W)^2 - (((D/W)^2 - 1)^0.5 + 2 (h1/D)(D/W))^2 with h1 = first crest over Weff.
    pub fn effective_length_m(&self, flow_m3_s: f64, weir_m: f64, diameter_m: f64) -> Option<f64> {
        let ratio = diameter_m / weir_m;
        let height = (ratio * ratio - 1.0).max(0.0).sqrt();
        let mut effective_m = weir_m;
        for _ in 0..Self::PASSES {
            let crest_m = self.first_crest_m(flow_m3_s / effective_m);
            let square = ratio * ratio - (height + 2.0 * crest_m / weir_m).powi(2);
            if square.is_nan() || square <= 0.0 {
                return None;
            }
            let next_m = weir_m * square.sqrt();
            if (next_m - effective_m).abs() <= Self::TOLERANCE * weir_m {
                return Some(next_m);
            }
            effective_m = next_m;
        }
        None
    }

    /// Constriction factor of a weir on a chord of a full circle: (W/Weff)^n; `None` if the crest leaves no weir.
    pub fn constriction_of_chord(&self, flow_m3_s: f64, weir_m: f64, diameter_m: f64) -> Option<f64> {
        let effective_m = self.effective_length_m(flow_m3_s, weir_m, diameter_m)?;
        Some((weir_m / effective_m).powf(self.exponent))
    }
}

impl Evaluator for FrancisWeir {
    const SHAPE: Shape = Shape {
        name: "francis_weir",
        coefficients: &[("factor", 1), ("exponent", 1), ("first_factor", 1)],
        inputs: &[
            ("weir_load", D::WeirLoad),
            ("constriction_factor", D::Dimensionless),
            ("liquid_flow", D::VolumeRate),
            ("weir_length", D::Length),
            ("diameter", D::Length),
        ],
        outputs: &[
            ("crest", D::Length),
            ("first_crest", D::Length),
            ("constriction_of_chord", D::Dimensionless),
            ("effective_length", D::Length),
        ],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            weir_load_unit_m2_s: record.input_unit("weir_load")?,
            crest_unit_m: record.output_unit("crest")?,
            first_crest_unit_m: record.output_unit("first_crest")?,
            factor: record.number("factor")?,
            exponent: record.number("exponent")?,
            first_factor: record.number("first_factor")?,
        })
    }

    fn evaluate(&self, output: &str, at: &Arguments<'_>, _: &mut Vec<Outside>) -> EngineResult<f64> {
        match output {
            "crest" => Ok(self.crest_m(at.get("weir_load")?, at.get("constriction_factor")?)),
            "first_crest" => Ok(self.first_crest_m(at.get("weir_load")?)),
            _ => {
                let (flow, weir, diameter) = (at.get("liquid_flow")?, at.get("weir_length")?, at.get("diameter")?);
                let answer = if output == "effective_length" {
                    self.effective_length_m(flow, weir, diameter)
                } else {
                    self.constriction_of_chord(flow, weir, diameter)
                };
                answer.ok_or_else(|| at.no_answer("the crest leaves no effective weir"))
            }
        }
    }
}

/// Head to form bubbles: h = k sigma/(g rhoL dh).
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct SurfaceTensionHead {
    factor: f64,
}

impl SurfaceTensionHead {
    /// Head in metres of the tray's liquid.
    pub fn head_m(&self, sigma_n_m: f64, rho_l_kg_m3: f64, hole_diameter_m: f64) -> f64 {
        self.factor * sigma_n_m / (STANDARD_GRAVITY_M_S2 * rho_l_kg_m3 * hole_diameter_m)
    }
}

impl Evaluator for SurfaceTensionHead {
    const SHAPE: Shape = Shape {
        name: "surface_tension_head",
        coefficients: &[("factor", 1)],
        inputs: &[("surface_tension", D::SurfaceTension), ("liquid_density", D::Density), ("hole_diameter", D::Length)],
        outputs: &[("head", D::Length)],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self { factor: record.number("factor")? })
    }

    fn evaluate(&self, _: &str, at: &Arguments<'_>, _: &mut Vec<Outside>) -> EngineResult<f64> {
        Ok(self.head_m(at.get("surface_tension")?, at.get("liquid_density")?, at.get("hole_diameter")?))
    }
}
