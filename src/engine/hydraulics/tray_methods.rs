//! The correlations a sieve tray needs, resolved once from the catalogue.

use crate::engine::correlation::catalogue::Catalogue;
use crate::engine::correlation::form::downcomer::{ApronLoss, DowncomerPractice};
use crate::engine::correlation::form::tray_flood::{
    CubicCapacity, FairCapacity, FairEntrainment, HoleAreaFactor, SurfaceTensionFactor, SystemLimit,
};
use crate::engine::correlation::form::tray_pressure::{
    BennettLiquid, DryHead, FairAeration, FrancisWeir, OrificeCoefficient, SurfaceTensionHead,
};
use crate::engine::correlation::form::weep::{EduljeeWeep, LockettBanikWeep};
use crate::engine::correlation::record::{Form, Task};
use crate::engine::error::{EngineError, EngineResult};

/// Record ids that every sieve tray needs beside the methods a case selects.
pub(crate) const TRAY_COMPANIONS: [&str; 13] = [
    "fair-low-flow-capacity",
    "surface-tension-factor",
    "hole-area-factor",
    "fair-entrainment",
    "orifice-coefficient",
    "dry-head",
    "bennett-liquid-head",
    "francis-weir",
    "surface-tension-head",
    "eduljee-weep",
    "lockett-banik-weep",
    "apron-loss",
    "downcomer-practice",
];

/// Which model gives the aerated liquid on the tray.
#[derive(Clone, Copy, Debug)]
pub(crate) enum LiquidHead {
    /// Bennett, Agrawal and Cook.
    Bennett(BennettLiquid),
    /// Fair's aeration factor.
    Aeration(FairAeration),
}

/// The correlations of a sieve tray.
#[derive(Clone, Debug)]
pub(crate) struct TrayMethods {
    pub capacity: FairCapacity,
    pub low_flow: CubicCapacity,
    pub surface_tension: SurfaceTensionFactor,
    pub hole_area: HoleAreaFactor,
    pub entrainment: FairEntrainment,
    pub orifice: OrificeCoefficient,
    pub dry: DryHead,
    pub liquid_head: LiquidHead,
    pub bennett: BennettLiquid,
    pub weir: FrancisWeir,
    pub residual: SurfaceTensionHead,
    pub onset: EduljeeWeep,
    pub weep: LockettBanikWeep,
    pub apron: ApronLoss,
    pub downcomer: DowncomerPractice,
    pub system_limit: SystemLimit,
    /// Id of the flood record.
    pub flood_id: String,
    /// Id of the liquid-head record.
    pub liquid_head_id: String,
}
