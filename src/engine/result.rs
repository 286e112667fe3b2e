//! Figures of `size` and `check`, as data. Nothing here is formatted; `report` does that.
//!
//! Figures without "actual" in their name are at the design point and the required shares, except where said.

use super::findings::{Finding, LimitUsed, Status};
use super::units::{Area, FFactor, Length, MassRate, Pressure, PressureGradient, Time, Velocity, VolumeRate, WeirLoad};

/// The whole answer.
#[derive(Clone, Debug, PartialEq)]
pub struct Answer {
    /// The worst status of all findings.
    pub verdict: Status,
    /// Shell.
    pub shell: ShellResult,
    /// One entry for each wall of each band, bands from top to bottom.
    pub walls: Vec<WallResult>,
    /// In the order of the case.
    pub compartments: Vec<CompartmentResult>,
    /// In the order of the case.
    pub sections: Vec<SectionResult>,
    /// The balance at the design point.
    pub balance: BalanceResult,
    /// Pressure drop of the whole column at the actual shares (design point), if there are any.
    pub column_pressure_drop: Option<Pressure>,
    /// Every criterion judged, worst first.
    pub findings: Vec<Finding>,
    /// What would bring a missed split back, each re-rated; empty if the split holds.
    pub remedies: Vec<Remedy>,
    /// Each limit that was used, with its origin.
    pub limits: Vec<LimitUsed>,
    /// Identifiers of the correlations used, sorted.
    pub correlations: Vec<String>,
    /// Constants from memory on which the verdict rests, in words.
    pub from_memory: Vec<String>,
    /// What the reader of the result must know: shifts of the loads, filled height and the like.
    pub notes: Vec<String>,
}

/// Shell diameters.
#[derive(Clone, Debug, PartialEq)]
pub struct ShellResult {
    /// Diameter above the wall.
    pub above: Length,
    /// Diameter beside the wall.
    pub wall_zone: Length,
    /// Diameter below the wall.
    pub below: Length,
    /// True for the parts (above, wall zone, below) whose diameter was found here, not given.
    pub sized: [bool; 3],
    /// Least diameters by the flood criterion alone: above, wall zone, below.
    pub required: [Length; 3],
    /// What set (or would set) the diameter.
    pub governed_by: GovernedBy,
}

/// What set the diameter.
#[derive(Clone, Debug, PartialEq)]
pub struct GovernedBy {
    /// Sizing criterion.
    pub criterion: String,
    /// Section (or "column").
    pub section: String,
    /// Operating point.
    pub point: String,
    /// Least diameter by that criterion.
    pub diameter: Length,
    /// The next one in words: criterion, section, point; empty if there is none.
    pub runner_up: String,
    /// About the least diameter by that one.
    pub runner_up_diameter: Option<Length>,
    /// The shell's diameter less the least one (negative if the given shell is too small).
    pub slack: Length,
}

/// One wall in one band.
#[derive(Clone, Debug, PartialEq)]
pub struct WallResult {
    /// Band; empty for a straight wall.
    pub band: String,
    /// Which rule or length of the case placed it, in the case's words ("equal flood", "given").
    pub placed_by: String,
    /// Signed distance from the axis to the mid-plane.
    pub position: Length,
    /// Length of the chord at the mid-plane.
    pub chord: Length,
    /// Thickness.
    pub thickness: Length,
    /// Position for equal flood.
    pub equal_flood: Option<Length>,
    /// Position for equal pressure drop at the required shares.
    pub equal_pressure_drop: Option<Length>,
    /// Position by vapour load.
    pub vapour_load: Option<Length>,
    /// d(actual share of the first-listed compartment)/d(position), 1/m.
    pub share_per_m: Option<f64>,
}

/// One compartment. Areas and depth are of the narrowest band.
#[derive(Clone, Debug, PartialEq)]
pub struct CompartmentResult {
    /// Name.
    pub name: String,
    /// Net area.
    pub area: Area,
    /// Part of all compartments' area.
    pub area_share: f64,
    /// Clear depth across the wall.
    pub clear_depth: Length,
    /// Required vapour share.
    pub vapour_share_required: f64,
    /// Actual vapour share, if there is a balance.
    pub vapour_share: Option<f64>,
    /// Liquid share.
    pub liquid_share: f64,
    /// Pressure drop at the required shares (friction, devices, static head), if the internals have one.
    pub pressure_drop_at_required: Option<Pressure>,
    /// Friction part of it, devices included.
    pub friction_at_required: Option<Pressure>,
    /// Static head of the vapour, filled height included.
    pub static_head: Pressure,
    /// Height of sections and devices.
    pub height: Length,
    /// d ln(pressure drop)/d ln(vapour).
    pub response_exponent: Option<f64>,
    /// The same of friction alone.
    pub response_exponent_friction: Option<f64>,
}

/// One section.
#[derive(Clone, Debug, PartialEq)]
pub struct SectionResult {
    /// Name.
    pub name: String,
    /// Place in the case's words.
    pub place: String,
    /// Internals' name.
    pub internals: String,
    /// Correlation that gave the flood.
    pub flood_method: String,
    /// Correlation that gave the friction, if any.
    pub pressure_drop_method: Option<String>,
    /// Area of the place.
    pub area: Area,
    /// Area of the place at which the worst flood of all points would stand at its limit.
    pub required_area: Area,
    /// Worst flood.
    pub flood: f64,
    /// Worst flood at the actual shares.
    pub flood_actual: Option<f64>,
    /// F-factor of the governing row on the area of the place.
    pub f_factor: FFactor,
    /// Capacity factor of the governing row on the area of the place.
    pub capacity_factor: Velocity,
    /// Flow parameter of the governing row.
    pub flow_parameter: f64,
    /// Liquid load of the governing row on the area of the place.
    pub liquid_load: Velocity,
    /// Friction.
    pub friction: Option<Pressure>,
    /// Friction at the actual shares.
    pub friction_actual: Option<Pressure>,
    /// Static head of the vapour.
    pub static_head: Pressure,
    /// Stage of the worst flood.
    pub governing_stage: String,
    /// False if any correlation left its published range at the design point (required shares).
    pub in_range: bool,
    /// Tray figures of the worst tray, for trays.
    pub tray: Option<TrayResult>,
    /// Every row at the design point, required shares.
    pub stages: Vec<StageResult>,
}

/// Worst figures of a tray section at the design point (each the worst over rows and over the two alternate trays).
#[derive(Clone, Debug, PartialEq)]
pub struct TrayResult {
    /// Net area: place less the tops of all downcomers of one tray.
    pub net_area: Area,
    /// Active area, the lesser of the two alternate trays.
    pub active_area: Area,
    /// Hole area, the lesser of the two alternate trays.
    pub hole_area: Area,
    /// Tops of all downcomers of one tray.
    pub downcomer_area: Area,
    /// Shortest weir.
    pub weir_length: Length,
    /// Shortest flow path.
    pub flow_path: Length,
    /// Greatest pressure drop of one tray (mean of the two alternate trays).
    pub pressure_drop_per_tray: Pressure,
    /// Greatest dry head, as height of the tray's liquid.
    pub dry_head: Length,
    /// Clear liquid that goes with the greatest pressure drop.
    pub liquid_head: Length,
    /// Greatest entrained fraction.
    pub entrainment: f64,
    /// Greatest system-limit ratio.
    pub system_limit: f64,
    /// Greatest froth over (spacing + weir height).
    pub downcomer_froth: f64,
    /// Greatest clear-liquid velocity at the downcomer's top.
    pub downcomer_velocity: Velocity,
    /// Least residence time.
    pub downcomer_residence: Time,
    /// Greatest velocity under the apron.
    pub apron_velocity: Velocity,
    /// Greatest weir load.
    pub weir_load: WeirLoad,
    /// Greatest weep, fraction of the liquid.
    pub weep: f64,
    /// Least hole velocity over the velocity at which weeping begins.
    pub hole_velocity_over_weep_onset: f64,
}

/// One row.
#[derive(Clone, Debug, PartialEq)]
pub struct StageResult {
    /// Stage label.
    pub stage: String,
    /// Vapour mass flow.
    pub vapour_flow: MassRate,
    /// Liquid mass flow.
    pub liquid_flow: MassRate,
    /// Vapour volume flow.
    pub vapour_volume_flow: VolumeRate,
    /// Flood.
    pub flood: f64,
    /// F-factor on the area of the place.
    pub f_factor: FFactor,
    /// Capacity factor on the area of the place.
    pub capacity_factor: Velocity,
    /// Flow parameter.
    pub flow_parameter: f64,
    /// Liquid load on the area of the place.
    pub liquid_load: Velocity,
    /// Friction per height, if the internals have one.
    pub friction_gradient: Option<PressureGradient>,
}

/// The balance at the design point.
#[derive(Clone, Debug, PartialEq)]
pub struct BalanceResult {
    /// Common pressure drop at the actual shares.
    pub pressure_drop: Option<Pressure>,
    /// First-listed less last-listed, at the required shares.
    pub imbalance_at_required: Option<Pressure>,
    /// All sets of shares that balance.
    pub solutions: Vec<Solution>,
    /// Least imbalance met, if nothing balances.
    pub least_imbalance: Option<Pressure>,
    /// Why there is no balance to speak of (declared internals without resistance, wall closed at a head), if so.
    pub absent_because: Option<String>,
}

/// One set of shares that balances.
#[derive(Clone, Debug, PartialEq)]
pub struct Solution {
    /// Shares, in the order of the compartments.
    pub shares: Vec<f64>,
    /// Common pressure drop.
    pub pressure_drop: Pressure,
    /// True if a disturbance dies out.
    pub stable: bool,
}

/// One way to bring the split back, re-rated.
#[derive(Clone, Debug, PartialEq)]
pub struct Remedy {
    /// In words: "move the wall to 0.112 m", "add 2.4 mbar to the draw side" ...
    pub what: String,
    /// Compartment acted on; none for the wall.
    pub compartment: Option<String>,
    /// Pressure added (positive) or taken away (negative) at the design load, if a resistance.
    pub pressure: Option<Pressure>,
    /// The same as a factor on the compartment's friction.
    pub factor: Option<f64>,
    /// New position of the wall, if moved.
    pub position: Option<Length>,
    /// What it gives at each point.
    pub points: Vec<RemedyPoint>,
}

/// What a remedy gives at one point.
#[derive(Clone, Debug, PartialEq)]
pub struct RemedyPoint {
    /// Point.
    pub point: String,
    /// New actual shares, if it balances.
    pub shares: Option<Vec<f64>>,
    /// Worst flood of each compartment at the new shares.
    pub floods: Vec<f64>,
}
