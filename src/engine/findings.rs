//! Findings: what was judged against which limit, where, and because of what. Data, never printed here.

use super::units::{Length, Pressure, PressureGradient, Time, Velocity, WeirLoad};

/// A figure with its dimension.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Amount {
    /// Dimensionless.
    Fraction(f64),
    /// Pressure.
    Pressure(Pressure),
    /// Pressure per height.
    Gradient(PressureGradient),
    /// Velocity, liquid load of a packing, capacity factor.
    Velocity(Velocity),
    /// Time.
    Time(Time),
    /// Length.
    Length(Length),
    /// Volume flow per length of weir.
    WeirLoad(WeirLoad),
}

/// What is judged. The names are the keys of `[criteria]` where there is one.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Criterion {
    /// Flood over its limit (trays: jet flood).
    ApproachToFlood,
    /// System limit of trays over the same limit.
    SystemLimit,
    /// Entrained fraction.
    Entrainment,
    /// Deviation of the actual vapour share from the required one.
    VapourShareWithin,
    /// The balance itself: none, or several.
    Balance,
    /// Response exponent of the total pressure drop.
    ResponseExponent,
    /// Pressure drop of the column.
    PressureDrop,
    /// Pressure drop of a bed per height.
    BedPressureDrop,
    /// Froth in the downcomer.
    DowncomerFroth,
    /// Clear liquid velocity at the downcomer's top.
    DowncomerVelocity,
    /// Residence time in the downcomer.
    DowncomerResidence,
    /// Velocity under the apron.
    ApronVelocity,
    /// Weir load, greatest.
    WeirLoad,
    /// Weir load, least.
    WeirLoadLeast,
    /// Flow path.
    FlowPath,
    /// Weep.
    Weep,
    /// Liquid load of a packing.
    Wetting,
    /// Clear depth.
    ClearDepth,
    /// Vapour less liquid at the ends of the wall.
    LoadsAgree,
    /// A correlation used outside its published range.
    Range,
}

impl Criterion {
    /// The name used in JSON and in text.
    pub fn name(self) -> &'static str {
        match self {
            Self::ApproachToFlood => "approach_to_flood",
            Self::SystemLimit => "system_limit",
            Self::Entrainment => "entrainment",
            Self::VapourShareWithin => "vapour_share_within",
            Self::Balance => "balance",
            Self::ResponseExponent => "response_exponent",
            Self::PressureDrop => "pressure_drop",
            Self::BedPressureDrop => "bed_pressure_drop",
            Self::DowncomerFroth => "downcomer_froth",
            Self::DowncomerVelocity => "downcomer_velocity",
            Self::DowncomerResidence => "downcomer_residence",
            Self::ApronVelocity => "apron_velocity",
            Self::WeirLoad => "weir_load",
            Self::WeirLoadLeast => "weir_load_least",
            Self::FlowPath => "flow_path",
            Self::Weep => "weep",
            Self::Wetting => "wetting",
            Self::ClearDepth => "clear_depth",
            Self::LoadsAgree => "loads_agree",
            Self::Range => "range",
        }
    }

    /// True if the limit is a least figure, false if it is a greatest one.
    pub fn is_least(self) -> bool {
        matches!(
            self,
            Self::ResponseExponent
                | Self::DowncomerResidence
                | Self::WeirLoadLeast
                | Self::FlowPath
                | Self::Wetting
                | Self::ClearDepth
        )
    }
}

/// How a criterion came out; ordered from good to bad.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Status {
    /// Held.
    Met,
    /// To be looked at; does not fail the case.
    Attention,
    /// Missed.
    NotMet,
}

impl Status {
    /// The words used in JSON and in text.
    pub fn name(self) -> &'static str {
        match self {
            Self::Met => "met",
            Self::Attention => "attention",
            Self::NotMet => "not met",
        }
    }
}

/// Shares at which a figure was worked out.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Shares {
    /// Those that the loads need.
    Required,
    /// Those that equal pressure drop gives.
    Actual,
}

impl Shares {
    /// The word used in JSON and in text.
    pub fn name(self) -> &'static str {
        match self {
            Self::Required => "required",
            Self::Actual => "actual",
        }
    }
}

/// One judged criterion.
#[derive(Clone, Debug, PartialEq)]
pub struct Finding {
    /// What was judged.
    pub criterion: Criterion,
    /// Section, compartment, "column", "wall" ...: the subject, as named in the case.
    pub subject: String,
    /// Operating point.
    pub point: String,
    /// The worse of the two sets of shares; for criteria that do not depend on them, `Required`.
    pub shares: Shares,
    /// The figure, if it could be worked out.
    pub value: Option<Amount>,
    /// Its limit, if it has one.
    pub limit: Option<Amount>,
    /// How it came out.
    pub status: Status,
    /// Because of what: stage, load, method, origin of the limit, remedy.
    pub because: String,
}

/// A limit that was used, and where it comes from.
#[derive(Clone, Debug, PartialEq)]
pub struct LimitUsed {
    /// What it limits.
    pub criterion: Criterion,
    /// Where it applies: "all trays", a section, a point ...
    pub scope: String,
    /// The limit.
    pub limit: Amount,
    /// Origin: where the case states it, or the source of the default.
    pub origin: String,
}
