//! The file as a whole, and its tables without a file of their own.

use super::choice::StageText;
use super::criteria::{RawCriteria, RawCriteriaTable};
use super::internals::RawInternals;
use super::vessel::{RawCompartment, RawShell, RawWall};
use crate::input::quantity as kind;
use crate::input::reader::{Anything, At, List, Many, Named, Quantity, raw_table};

raw_table! {
    /// A case: a dividing-wall column with its loads. Dimensional values are texts with a unit; bare numbers are dimensionless.
    RawFile, "the case file";
    /// Format of the file: 1.
    #[schemars(required, extend("const" = 1))]
    format "format": At<i64>,
    /// What the case is.
    #[schemars(required)]
    case "case": RawCase,
    /// Limits; what is not stated has a default or is not judged.
    criteria "criteria": RawCriteriaTable,
    /// Shell diameters.
    #[schemars(required)]
    shell "shell": RawShell,
    /// The wall or walls.
    #[schemars(required)]
    wall "wall": RawWall,
    /// Sides of the wall, at least two, in order of position.
    #[schemars(required, extend("minItems" = 2))]
    compartment "compartment": Many<RawCompartment>,
    /// Internals by name.
    #[schemars(required)]
    internals "internals": Named<RawInternals>,
    /// Beds and tray stacks; in each place from top to bottom.
    #[schemars(required, extend("minItems" = 3))]
    section "section": Many<RawSection>,
    /// Anything else that the vapour passes.
    device "device": Many<RawDevice>,
    /// Where the loads are.
    #[schemars(required)]
    loads "loads": RawLoads,
    /// Operating points beside the design.
    point "point": Many<RawPoint>,
    /// Which correlation answers what.
    methods "methods": RawMethods,
    /// Relative standard deviations of what is uncertain.
    uncertainty "uncertainty": RawUncertainty,
    /// The separation, to turn a wrong split into boil-up and purity.
    separation "separation": RawSeparation,
    /// Streams that enter or leave between sections.
    stream "stream": Many<RawStream>,
    /// Kept for later.
    search "search": Anything,
    /// Kept for later.
    evaluation "evaluation": Anything,
    /// Kept for later.
    vessel "vessel": Anything,
    /// Kept for later.
    elevation "elevation": Anything,
}

raw_table! {
    /// What the case is.
    RawCase, "[case]";
    /// Tag of the column.
    #[schemars(required)]
    tag "tag": At<String>,
    /// Title.
    #[schemars(required)]
    title "title": At<String>,
    /// Revision.
    revision "revision": At<String>,
    /// Where the loads come from.
    basis "basis": At<String>,
}

raw_table! {
    /// One bed or tray stack.
    RawSection, "[[section]]";
    /// Name.
    #[schemars(required)]
    name "name": At<String>,
    /// "above wall", "below wall" or the name of a compartment.
    #[schemars(required)]
    place "place": At<String>,
    /// Name of the internals.
    #[schemars(required)]
    internals "internals": At<String>,
    /// Band of a stepped wall, for a section in a compartment.
    band "band": At<String>,
    /// Height of a packed bed.
    height "height": Quantity<kind::Length>,
    /// Number of trays.
    trays "trays": At<i64>,
    /// Theoretical stages, with `hetp` or `efficiency`.
    stages "stages": At<f64>,
    /// Height of packing equivalent to a theoretical stage.
    hetp "hetp": Quantity<kind::Length>,
    /// Tray efficiency; trays = stages / efficiency, rounded up.
    efficiency "efficiency": At<f64>,
    /// Derating for foaming. Default 1.
    system_factor "system_factor": At<f64>,
    /// Criteria for this section.
    criteria "criteria": RawCriteria,
    /// Loads of this section, top to bottom, if they do not come from a table.
    load "load": Many<RawLoad>,
    /// Kept for later.
    beds "beds": Anything,
    /// Kept for later.
    bed_gap "bed_gap": Anything,
    /// Kept for later.
    layers "layers": Anything,
}

raw_table! {
    /// One row of a section's loads, with the columns of the loads table as keys.
    RawLoad, "[[section.load]]";
    /// Operating point. Default "design".
    point "point": At<String>,
    /// Label of the stage. Default: counted from 1 in the section.
    stage "stage": StageText,
    /// Vapour mass flow.
    #[schemars(required)]
    vapour_flow "vapour_flow": Quantity<kind::MassRate>,
    /// Liquid mass flow.
    #[schemars(required)]
    liquid_flow "liquid_flow": Quantity<kind::MassRate>,
    /// Vapour density.
    #[schemars(required)]
    vapour_density "vapour_density": Quantity<kind::MassDensity>,
    /// Liquid density.
    #[schemars(required)]
    liquid_density "liquid_density": Quantity<kind::MassDensity>,
    /// Vapour viscosity.
    #[schemars(required)]
    vapour_viscosity "vapour_viscosity": Quantity<kind::Viscosity>,
    /// Liquid viscosity.
    #[schemars(required)]
    liquid_viscosity "liquid_viscosity": Quantity<kind::Viscosity>,
    /// Surface tension.
    #[schemars(required)]
    surface_tension "surface_tension": Quantity<kind::SurfaceTension>,
    /// Temperature.
    temperature "temperature": Quantity<kind::Temperature>,
    /// Pressure, absolute.
    pressure "pressure": Quantity<kind::Pressure>,
}

raw_table! {
    /// Anything beside the sections that the vapour passes.
    RawDevice, "[[device]]";
    /// Name.
    #[schemars(required)]
    name "name": At<String>,
    /// Place; that of its section.
    place "place": At<String>,
    /// Section whose last row rises into it.
    below "below": At<String>,
    /// Section whose first row leaves into it.
    above "above": At<String>,
    /// What it is.
    #[schemars(required, extend("enum" = ["support", "collector", "distributor", "feed inlet", "restriction"]))]
    kind "kind": At<String>,
    /// Open area over the area of the place; with `loss`.
    free_area "free_area": At<f64>,
    /// Velocity heads on the velocity through the open area.
    loss "loss": At<f64>,
    /// Instead of the two: pressure drop at the design load, then by the square of the vapour rate.
    pressure_drop "pressure_drop": Quantity<kind::Pressure>,
    /// Height it takes. Default none.
    height "height": Quantity<kind::Length>,
}

raw_table! {
    /// Where the loads are.
    RawLoads, "[loads]";
    /// CSV file beside the case file; without it, each section has `[[section.load]]` rows.
    table "table": At<String>,
    /// What a row is: "below stage" or "leaving stage".
    #[schemars(required, extend("enum" = ["below stage", "leaving stage"]))]
    rows "rows": At<String>,
}

raw_table! {
    /// An operating point.
    RawPoint, "[[point]]";
    /// Name.
    #[schemars(required)]
    name "name": At<String>,
    /// Factor on the design vapour; not for a point that the table names.
    vapour "vapour": At<f64>,
    /// Factor on the design liquid; not for a point that the table names.
    liquid "liquid": At<f64>,
    /// Criteria for this point.
    criteria "criteria": RawCriteria,
}

raw_table! {
    /// Which correlation answers what.
    RawMethods, "[methods]";
    /// Jet flood of trays. Default "fair".
    tray_flood "tray_flood": At<String>,
    /// Flood of packings. Default "generalized pressure drop".
    packing_flood "packing_flood": At<String>,
    /// Pressure drop of packings. Default "stichlmair" where the packing has constants, else "generalized pressure drop".
    packing_pressure_drop "packing_pressure_drop": At<String>,
    /// Aerated liquid on trays. Default "bennett".
    aerated_liquid "aerated_liquid": At<String>,
}

raw_table! {
    /// Relative standard deviations of what is uncertain.
    RawUncertainty, "[uncertainty]";
    /// Of the pressure drop of packings.
    packing_pressure_drop "packing_pressure_drop": At<f64>,
    /// Part of an error that two beds of the same packing and method share.
    common "common": At<f64>,
}

raw_table! {
    /// The separation.
    RawSeparation, "[separation]";
    /// Relative volatilities, lightest first, the heaviest 1.
    volatility "volatility": List<At<f64>>,
    /// Mole fractions of the feed, lightest first.
    feed "feed": List<At<f64>>,
    /// Liquid fraction of the feed.
    feed_liquid "feed_liquid": At<f64>,
}

raw_table! {
    /// A stream that enters or leaves between two sections.
    RawStream, "[[stream]]";
    /// Name.
    #[schemars(required)]
    name "name": At<String>,
    /// What it is.
    #[schemars(required, extend("enum" = ["feed", "liquid draw", "vapour draw", "return"]))]
    kind "kind": At<String>,
    /// "above wall", "below wall" or the name of a compartment.
    place "place": At<String>,
    /// Section that it enters or leaves below.
    below "below": At<String>,
    /// Mass flow.
    flow "flow": Quantity<kind::MassRate>,
    /// Vapour part of that flow.
    vapour_flow "vapour_flow": Quantity<kind::MassRate>,
}
