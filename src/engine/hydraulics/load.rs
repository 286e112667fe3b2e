//! Loads of one row as bare SI numbers, for the numeric kernels.

use crate::engine::case::Row;
use crate::engine::units::Si;

/// One row of the loads in SI. Kernels read it; nothing outside the engine sees it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct StageLoad {
    pub vapour_kg_s: f64,
    pub liquid_kg_s: f64,
    pub rho_v_kg_m3: f64,
    pub rho_l_kg_m3: f64,
    pub mu_v_pa_s: f64,
    pub mu_l_pa_s: f64,
    pub sigma_n_m: f64,
}

impl StageLoad {
    /// Reads a checked row.
    pub fn new(row: &Row) -> Self {
        Self {
            vapour_kg_s: row.vapour_flow.si(),
            liquid_kg_s: row.liquid_flow.si(),
            rho_v_kg_m3: row.vapour_density.si(),
            rho_l_kg_m3: row.liquid_density.si(),
            mu_v_pa_s: row.vapour_viscosity.si(),
            mu_l_pa_s: row.liquid_viscosity.si(),
            sigma_n_m: row.surface_tension.si(),
        }
    }

    /// The same row with its vapour multiplied; the liquid stays.
    pub fn with_vapour(self, factor: f64) -> Self {
        Self { vapour_kg_s: self.vapour_kg_s * factor, ..self }
    }

    /// Vapour volume flow, m3/s.
    pub fn vapour_m3_s(self) -> f64 {
        self.vapour_kg_s / self.rho_v_kg_m3
    }

    /// Liquid volume flow, m3/s.
    pub fn liquid_m3_s(self) -> f64 {
        self.liquid_kg_s / self.rho_l_kg_m3
    }

    /// (L/V) sqrt(rhoV/rhoL), mass rates.
    pub fn flow_parameter(self) -> f64 {
        self.liquid_kg_s / self.vapour_kg_s * (self.rho_v_kg_m3 / self.rho_l_kg_m3).sqrt()
    }

    /// sqrt(rhoV/(rhoL - rhoV)): turns a velocity into a capacity factor.
    pub fn capacity_group(self) -> f64 {
        (self.rho_v_kg_m3 / (self.rho_l_kg_m3 - self.rho_v_kg_m3)).sqrt()
    }

    /// Vapour load Q_V sqrt(rhoV/(rhoL - rhoV)), m3/s.
    pub fn vapour_load_m3_s(self) -> f64 {
        self.vapour_m3_s() * self.capacity_group()
    }

    /// Kinematic viscosity of the liquid, m2/s.
    pub fn nu_l_m2_s(self) -> f64 {
        self.mu_l_pa_s / self.rho_l_kg_m3
    }
}
