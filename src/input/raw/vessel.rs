//! Shell, wall and compartments.

use super::choice::{DiameterText, PositionText};
use crate::input::quantity as kind;
use crate::input::reader::{At, List, Many, Quantity, raw_table};

raw_table! {
    /// Shell diameters.
    RawShell, "[shell]";
    /// "size", a length, or a table of the three parts.
    #[schemars(required)]
    diameter "diameter": DiameterText,
    /// A sized diameter is rounded up to a multiple of this. Default 50 mm.
    step "step": Quantity<kind::Length>,
}

raw_table! {
    /// Diameters of the three parts of the shell, each "size" or a length.
    RawDiameters, "diameter in [shell]";
    /// Above the wall.
    #[schemars(required)]
    above "above": At<String>,
    /// Beside the wall.
    #[schemars(required)]
    wall_zone "wall_zone": At<String>,
    /// Below the wall.
    #[schemars(required)]
    below "below": At<String>,
}

raw_table! {
    /// The wall or walls.
    RawWall, "[wall]";
    /// "middle" (default): open above and below; "top", "bottom": closed at that head.
    #[schemars(extend("enum" = ["middle", "top", "bottom"]))]
    reach "reach": At<String>,
    /// Thickness of the wall.
    #[schemars(required)]
    thickness "thickness": Quantity<kind::Length>,
    /// "equal flood", "equal pressure drop", "vapour load", a length, or a list of lengths for several walls.
    position "position": PositionText,
    /// Bands of a stepped wall, top to bottom.
    band "band": Many<RawBand>,
    /// Mechanical check of the wall.
    plate "plate": RawPlate,
}

raw_table! {
    /// One band of a stepped wall.
    RawBand, "[[wall.band]]";
    /// Name, to be used by sections.
    #[schemars(required)]
    name "name": At<String>,
    /// As `position` of the wall.
    #[schemars(required)]
    position "position": PositionText,
}

raw_table! {
    /// Mechanical check of the wall.
    RawPlate, "[wall.plate]";
    /// Pressure difference across the wall.
    pressure_difference "pressure_difference": Quantity<kind::Pressure>,
}

raw_table! {
    /// One side of the wall; listed side by side in order of position.
    RawCompartment, "[[compartment]]";
    /// Name.
    #[schemars(required)]
    name "name": At<String>,
    /// Its part, by mass, of the vapour that arrives at the wall's lower edge; must agree with the loads within 0.002.
    vapour_share "vapour_share": At<f64>,
    /// Least and greatest share allowed.
    vapour_share_band "vapour_share_band": List<At<f64>>,
    /// Its part of the liquid that leaves the wall's upper edge. Default in proportion to the compartments' first rows.
    liquid_share "liquid_share": At<f64>,
    /// What the liquid splitter can do.
    liquid_share_range "liquid_share_range": List<At<f64>>,
    /// Accuracy of the liquid splitter.
    liquid_share_accuracy "liquid_share_accuracy": At<f64>,
}
