//! Data of one packing: an entry of the packing table, with what the case states in its place.

use crate::engine::units::{Length, PerLength};

/// Random or structured.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PackingKind {
    /// Dumped bodies.
    Random,
    /// Corrugated sheets.
    Structured,
}

/// Material, as far as wetting asks.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Material {
    /// Metal.
    Metal,
    /// Plastic.
    Plastic,
    /// Ceramic.
    Ceramic,
}

/// Six constants of Billet and Schultes; a missing one is `None`.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct BilletSchultesConstants {
    /// Loading.
    pub c_s: Option<f64>,
    /// Flooding.
    pub c_fl: Option<f64>,
    /// Hold-up.
    pub c_h: Option<f64>,
    /// Pressure drop.
    pub c_p0: Option<f64>,
}

/// One packing. What is not known is `None`; a method that needs it then cannot serve the packing.
#[derive(Clone, Debug, PartialEq)]
pub struct Packing {
    /// Entry of the packing table, if the case names one.
    pub entry: Option<String>,
    /// Random or structured.
    pub kind: PackingKind,
    /// Material.
    pub material: Material,
    /// Geometric surface per volume.
    pub specific_area: Option<PerLength>,
    /// Void fraction, in (0, 1).
    pub void_fraction: Option<f64>,
    /// Packing factor of the later chart.
    pub factor_later: Option<PerLength>,
    /// Packing factor of the older chart.
    pub factor_older: Option<PerLength>,
    /// Dry packing factor (Robbins).
    pub factor_dry: Option<PerLength>,
    /// Corrugation side.
    pub corrugation_side: Option<Length>,
    /// Corrugation angle from the horizontal, rad.
    pub corrugation_angle_rad: Option<f64>,
    /// Nominal size of a random packing.
    pub nominal_size: Option<Length>,
    /// Stichlmair's C1, C2, C3.
    pub stichlmair: Option<[f64; 3]>,
    /// Billet and Schultes.
    pub billet_schultes: BilletSchultesConstants,
    /// Key names of constants in use that the table marks "from memory".
    pub from_memory: Vec<String>,
    /// Key names of constants that the case states itself.
    pub stated_in_case: Vec<String>,
}
