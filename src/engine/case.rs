//! The checked case: what the user means, in quantities, with every reference resolved.
//!
//! `input` builds it and guarantees the invariants named at each field; the engine relies on them. Vectors that are
//! referred to by index (`internals`, `sections`, `points`, bands) never change after that.

use super::correlation::packing::Packing;
use super::units::{
    DynamicViscosity, Length, MassDensity, MassRate, Pressure, PressureGradient, SurfaceTension,
    ThermodynamicTemperature, Time, Velocity, WeirLoad,
};

/// A whole case. `points[0]` is always the design point.
#[derive(Clone, Debug, PartialEq)]
pub struct Case {
    /// Tag of the column.
    pub tag: String,
    /// Title, may be empty.
    pub title: String,
    /// Revision, may be empty.
    pub revision: String,
    /// Where the loads come from, may be empty.
    pub basis: String,
    /// Criteria as the case states them in `[criteria]`, `[criteria.tray]`, `[criteria.packing]`.
    pub criteria: CriteriaTable,
    /// Shell diameters, given or to be sized.
    pub shell: Shell,
    /// The wall or walls.
    pub wall: Wall,
    /// Side by side in order of position, at least two; the first lies at the most negative positions.
    pub compartments: Vec<Compartment>,
    /// Named internals.
    pub internals: Vec<Internals>,
    /// In the order of the file; those of one place run from top to bottom. Every place has at least one.
    pub sections: Vec<Section>,
    /// Devices, in the order of the file.
    pub devices: Vec<Device>,
    /// Operating points; the first is "design".
    pub points: Vec<Point>,
    /// Which correlation answers what.
    pub methods: Methods,
    /// What was done to the loads on reading (a shift of the vapour rows, say), in sentences for the reader of a result.
    pub reading_notes: Vec<String>,
}

/// Where a section or device stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Place {
    /// Above the wall.
    Above,
    /// In the compartment of this index.
    Compartment(usize),
    /// Below the wall.
    Below,
}

/// The three shell diameters and the step of a sized one.
#[derive(Clone, Debug, PartialEq)]
pub struct Shell {
    /// Above the wall.
    pub above: Diameter,
    /// Beside the wall.
    pub wall_zone: Diameter,
    /// Below the wall.
    pub below: Diameter,
    /// True if the case states one diameter for all three (then a sized one takes the largest of the three parts).
    pub one_diameter: bool,
    /// A sized diameter is rounded up to a multiple of this; positive.
    pub step: Length,
}

/// A diameter that is given or wanted.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Diameter {
    /// To be sized.
    Size,
    /// Given; positive.
    Given(Length),
}

/// How far the wall reaches.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Reach {
    /// Open above and below: equal pressure drop divides the vapour.
    Middle,
    /// Closed at the top head.
    Top,
    /// Closed at the bottom head.
    Bottom,
}

/// The wall or walls.
#[derive(Clone, Debug, PartialEq)]
pub struct Wall {
    /// Where the wall ends.
    pub reach: Reach,
    /// Thickness; not negative.
    pub thickness: Length,
    /// Bands from top to bottom; at least one, one without a name for a straight wall.
    pub bands: Vec<Band>,
}

/// A band of a stepped wall, or the whole of a straight one.
#[derive(Clone, Debug, PartialEq)]
pub struct Band {
    /// Name; empty for a straight wall.
    pub name: String,
    /// How the walls stand in this band.
    pub position: Position,
}

/// Where the walls of one band stand.
#[derive(Clone, Debug, PartialEq)]
pub enum Position {
    /// Every compartment at the same fraction of its flood limit.
    EqualFlood,
    /// Equal pressure drop at the required shares.
    EqualPressureDrop,
    /// Areas in proportion to the greatest vapour load.
    VapourLoad,
    /// Given; one for each wall, rising.
    Given(Vec<Length>),
}

/// One side of the wall.
#[derive(Clone, Debug, PartialEq)]
pub struct Compartment {
    /// Name.
    pub name: String,
    /// What the simulation used, if stated (it then agrees with the loads within 0.002).
    pub vapour_share: Option<f64>,
    /// Least and greatest share allowed, if stated.
    pub vapour_share_band: Option<(f64, f64)>,
    /// What the simulation used, if stated.
    pub liquid_share: Option<f64>,
    /// What the liquid splitter can do, if stated.
    pub liquid_share_range: Option<(f64, f64)>,
    /// Accuracy of the liquid splitter, if stated.
    pub liquid_share_accuracy: Option<f64>,
}

/// Named internals.
#[derive(Clone, Debug, PartialEq)]
pub struct Internals {
    /// Name in the case.
    pub name: String,
    /// What they are.
    pub kind: InternalsKind,
}

/// Kinds of internals.
#[derive(Clone, Debug, PartialEq)]
pub enum InternalsKind {
    /// Sieve or valve tray.
    Tray(Tray),
    /// Random or structured packing.
    Packing(Packing),
    /// Measured or guaranteed figures.
    Declared(Declared),
}

impl Internals {
    /// True for sieve and valve trays.
    pub fn is_tray(&self) -> bool {
        matches!(self.kind, InternalsKind::Tray(_))
    }
}

/// Sieve or valve tray.
#[derive(Clone, Debug, PartialEq)]
pub struct Tray {
    /// Sieve or valve.
    pub deck: Deck,
    /// Spacing; positive.
    pub spacing: Length,
    /// Outlet weir height; not negative, less than the spacing.
    pub weir_height: Length,
    /// Diameter of a hole, or of a valve's orifice; positive.
    pub hole_diameter: Length,
    /// Holes over active area; in (0, 1).
    pub hole_area: f64,
    /// Thickness of the deck; positive.
    pub deck_thickness: Length,
    /// Tops of all downcomers of one tray over the area of the place; in (0, 0.5).
    pub downcomer_area: f64,
    /// Bottoms likewise; equal to the tops unless stated.
    pub downcomer_bottom_area: f64,
    /// Clearance under the downcomer apron; positive.
    pub downcomer_clearance: Length,
    /// Liquid passes: 1 or 2.
    pub passes: u8,
    /// Direction of the liquid.
    pub flow: LiquidFlow,
    /// Width of the unperforated strip along shell and wall; not negative, zero unless stated.
    pub edge_strip: Length,
    /// Open fraction of the weir's length (picket fence); in (0, 1], 1 unless stated.
    pub weir_open: f64,
    /// Foaming class, if stated.
    pub foaming: Option<Foaming>,
}

/// Deck of a tray.
#[derive(Clone, Debug, PartialEq)]
pub enum Deck {
    /// Plain holes.
    Sieve,
    /// Round valves.
    Valve {
        /// True for a venturi (flared) orifice, false for a flat one.
        venturi: bool,
        /// True for movable valves, false for fixed ones.
        movable: bool,
        /// Thickness of the valve disc.
        thickness: Option<Length>,
        /// Density of the valve's metal.
        density: Option<MassDensity>,
        /// Legs of a valve: 3, 4, or 0 for caged.
        legs: Option<u8>,
    },
}

/// Direction of the liquid on a tray beside a wall.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LiquidFlow {
    /// Downcomers at the two ends of the compartment.
    AlongWall,
    /// Downcomers at wall and shell in turn.
    AcrossWall,
}

/// Foaming class.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Foaming {
    /// Hardly any.
    Low,
    /// Some.
    Moderate,
    /// Much.
    High,
}

/// Measured or guaranteed hydraulics: no geometry needed.
#[derive(Clone, Debug, PartialEq)]
pub struct Declared {
    /// Capacity factor at flood on the area of the place: (flow parameter, C), one entry or several by rising flow parameter.
    pub capacity: Vec<(f64, Velocity)>,
    /// Friction, if stated; without it there is no balance.
    pub resistance: Option<Resistance>,
}

/// Friction of declared internals.
#[derive(Clone, Debug, PartialEq)]
pub enum Resistance {
    /// friction = coefficient x height x F^exponent; coefficient in Pa/m at F = 1 Pa^0.5.
    Power {
        /// Pa/m at F = 1 Pa^0.5; positive.
        coefficient: PressureGradient,
        /// Exponent on F; positive.
        exponent: f64,
    },
    /// Measured points (F in Pa^0.5, friction per height), rising, at least two.
    Points(Vec<(f64, PressureGradient)>),
}

/// One bed or tray stack.
#[derive(Clone, Debug, PartialEq)]
pub struct Section {
    /// Name.
    pub name: String,
    /// Where it stands.
    pub place: Place,
    /// Index into [`Case::internals`].
    pub internals: usize,
    /// Index into [`Wall::bands`]; 0 outside the compartments.
    pub band: usize,
    /// Its extent.
    pub extent: Extent,
    /// Derating for foaming; in (0, 1.2], 1 unless stated.
    pub system_factor: f64,
    /// Criteria stated for this section.
    pub criteria: Criteria,
}

/// Extent of a section, already resolved (stages with HETP or efficiency become height or trays on reading).
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Extent {
    /// A bed of this height; positive.
    Height(Length),
    /// This many trays; positive, whole.
    Trays(f64),
}

/// Anything else that the vapour passes.
#[derive(Clone, Debug, PartialEq)]
pub struct Device {
    /// Name.
    pub name: String,
    /// Where it stands (that of its section).
    pub place: Place,
    /// Kind, for the reader.
    pub kind: DeviceKind,
    /// Section whose row gives the vapour (index), and which end of it.
    pub section: usize,
    /// Below the section (its last row) or above it (its first row).
    pub end: End,
    /// What it costs.
    pub loss: DeviceLoss,
    /// Height it takes; zero unless stated.
    pub height: Length,
}

/// End of a section.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum End {
    /// Above the section: its first row.
    Above,
    /// Below the section: its last row.
    Below,
}

/// Kind of a device.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum DeviceKind {
    /// Bed support.
    Support,
    /// Liquid collector.
    Collector,
    /// Liquid distributor.
    Distributor,
    /// Feed inlet.
    FeedInlet,
    /// Restriction for the vapour.
    Restriction,
}

/// Pressure loss of a device.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum DeviceLoss {
    /// Velocity heads on the velocity through the open area.
    VelocityHeads {
        /// Open area over the area of the place; in (0, 1].
        free_area: f64,
        /// Velocity heads; not negative.
        heads: f64,
    },
    /// This much at the design load and required share, then by the square of the vapour rate.
    AtDesign(Pressure),
    /// None stated.
    None,
}

/// An operating point.
#[derive(Clone, Debug, PartialEq)]
pub struct Point {
    /// Name.
    pub name: String,
    /// Criteria stated for this point.
    pub criteria: Criteria,
    /// Rows of every section (outer index as in [`Case::sections`]), each from top to bottom, none empty.
    pub loads: Vec<Vec<Row>>,
}

/// One row of the loads: the cut directly below its stage. All finite; all positive except the liquid flow, which may be
/// zero; the vapour is lighter than the liquid.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    /// Stage label of the table.
    pub stage: String,
    /// Vapour that arrives at the stage from below.
    pub vapour_flow: MassRate,
    /// Liquid that leaves the stage downwards.
    pub liquid_flow: MassRate,
    /// Vapour density.
    pub vapour_density: MassDensity,
    /// Liquid density.
    pub liquid_density: MassDensity,
    /// Vapour viscosity.
    pub vapour_viscosity: DynamicViscosity,
    /// Liquid viscosity.
    pub liquid_viscosity: DynamicViscosity,
    /// Surface tension.
    pub surface_tension: SurfaceTension,
    /// Temperature, if the table gives it.
    pub temperature: Option<ThermodynamicTemperature>,
    /// Pressure, if the table gives it.
    pub pressure: Option<Pressure>,
}

/// Correlation ids by task; input has checked that each exists and answers that task.
#[derive(Clone, Debug, PartialEq)]
pub struct Methods {
    /// Jet flood of trays; "fair" by default.
    pub tray_flood: String,
    /// Flood of packings; "generalized pressure drop" by default.
    pub packing_flood: String,
    /// Pressure drop of packings; none: "stichlmair" where the packing has constants, else "generalized pressure drop".
    pub packing_pressure_drop: Option<String>,
    /// Aerated liquid on trays; "bennett" by default.
    pub aerated_liquid: String,
}

/// Criteria of `[criteria]` and its two tables by kind.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct CriteriaTable {
    /// `[criteria]`.
    pub general: Criteria,
    /// `[criteria.tray]`.
    pub tray: Criteria,
    /// `[criteria.packing]`.
    pub packing: Criteria,
}

/// Criteria as stated somewhere; what is not stated is `None`.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Criteria {
    /// Greatest flood, fraction.
    pub approach_to_flood: Option<f64>,
    /// Greatest deviation of a vapour share, absolute.
    pub vapour_share_within: Option<f64>,
    /// Least response exponent of the total pressure drop.
    pub response_exponent: Option<f64>,
    /// Greatest pressure drop of the column.
    pub pressure_drop: Option<Pressure>,
    /// Greatest pressure drop of a bed per height.
    pub bed_pressure_drop: Option<PressureGradient>,
    /// Greatest entrained fraction of the liquid.
    pub entrainment: Option<f64>,
    /// Greatest froth height over (tray spacing + weir height).
    pub downcomer_froth: Option<f64>,
    /// Greatest velocity of clear liquid at the downcomer's top.
    pub downcomer_velocity: Option<Velocity>,
    /// Least residence time in the downcomer.
    pub downcomer_residence: Option<Time>,
    /// Greatest velocity under the apron.
    pub apron_velocity: Option<Velocity>,
    /// Greatest weir load.
    pub weir_load: Option<WeirLoad>,
    /// Least weir load.
    pub weir_load_least: Option<WeirLoad>,
    /// Least flow path.
    pub flow_path: Option<Length>,
    /// Greatest weep, fraction of the liquid.
    pub weep: Option<f64>,
    /// Least liquid load of a packing.
    pub wetting: Option<Velocity>,
    /// Least clear depth of a compartment.
    pub clear_depth: Option<Length>,
}
