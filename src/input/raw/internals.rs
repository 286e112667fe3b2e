//! `[internals.NAME]`: one struct for all kinds; lowering says which keys belong to which kind.

use super::choice::{CapacityText, ResistanceText};
use crate::input::quantity as kind;
use crate::input::reader::{At, List, Quantity, raw_table};

raw_table! {
    /// Named internals; a section refers to them. Which keys belong depends on `kind`.
    RawInternals, "[internals.NAME]";
    /// What they are.
    #[schemars(required, extend("enum" = ["sieve tray", "valve tray", "random packing", "structured packing", "declared"]))]
    kind "kind": At<String>,
    /// Packing: an entry of the packing table. Constants given here win over the entry's.
    packing "packing": At<String>,
    /// Packing: surface per volume.
    specific_area "specific_area": Quantity<kind::SpecificArea>,
    /// Packing: void fraction.
    void_fraction "void_fraction": At<f64>,
    /// Packing: factor of the later generalized chart.
    packing_factor "packing_factor": Quantity<kind::PackingFactor>,
    /// Packing: factor of the older generalized chart.
    packing_factor_older "packing_factor_older": Quantity<kind::PackingFactor>,
    /// Structured packing: side of the corrugation.
    corrugation_side "corrugation_side": Quantity<kind::Length>,
    /// Structured packing: angle of the corrugation from the horizontal.
    corrugation_angle "corrugation_angle": Quantity<kind::Angle>,
    /// Random packing: nominal size.
    nominal_size "nominal_size": Quantity<kind::Length>,
    /// Packing: "metal", "plastic" or "ceramic".
    #[schemars(extend("enum" = ["metal", "plastic", "ceramic"]))]
    material "material": At<String>,
    /// Packing: Stichlmair's three constants.
    stichlmair "stichlmair": List<At<f64>>,
    /// Packing: constants of Billet and Schultes.
    billet_schultes "billet_schultes": RawBilletSchultes,
    /// Tray: spacing.
    tray_spacing "tray_spacing": Quantity<kind::Length>,
    /// Tray: height of the outlet weir.
    weir_height "weir_height": Quantity<kind::Length>,
    /// Tray: diameter of a hole, or of a valve's orifice.
    hole_diameter "hole_diameter": Quantity<kind::Length>,
    /// Tray: holes over active area.
    hole_area "hole_area": At<f64>,
    /// Tray: thickness of the deck.
    deck_thickness "deck_thickness": Quantity<kind::Length>,
    /// Tray: tops of all downcomers of one tray over the area of the place.
    downcomer_area "downcomer_area": At<f64>,
    /// Tray: bottoms of the downcomers likewise. Default: as the tops.
    downcomer_bottom_area "downcomer_bottom_area": At<f64>,
    /// Tray: clearance under the downcomer apron.
    downcomer_clearance "downcomer_clearance": Quantity<kind::Length>,
    /// Tray: liquid passes, 1 or 2. Default 1.
    #[schemars(extend("enum" = [1, 2]))]
    passes "passes": At<i64>,
    /// Tray: direction of the liquid. Default "along wall".
    #[schemars(extend("enum" = ["along wall", "across wall"]))]
    flow "flow": At<String>,
    /// Tray: width of the unperforated strip along shell and wall. Default none.
    edge_strip "edge_strip": Quantity<kind::Length>,
    /// Tray: open fraction of the weir's length (picket fence). Default 1.
    weir_open "weir_open": At<f64>,
    /// Tray: foaming class.
    #[schemars(extend("enum" = ["low", "moderate", "high"]))]
    foaming "foaming": At<String>,
    /// Valve tray: "flat" (default) or "venturi".
    #[schemars(extend("enum" = ["flat", "venturi"]))]
    orifice "orifice": At<String>,
    /// Valve tray: "movable" (default) or "fixed".
    #[schemars(extend("enum" = ["movable", "fixed"]))]
    valve "valve": At<String>,
    /// Valve tray: thickness of the valve's disc.
    valve_thickness "valve_thickness": Quantity<kind::Length>,
    /// Valve tray: density of the valve's metal.
    valve_density "valve_density": Quantity<kind::MassDensity>,
    /// Valve tray: legs of a valve; 0 for caged valves.
    #[schemars(extend("enum" = [0, 3, 4]))]
    valve_legs "valve_legs": At<i64>,
    /// Declared: capacity factor at flood on the area of the place, or a list of [flow parameter, "capacity factor"].
    capacity "capacity": CapacityText,
    /// Declared: Pa/m at F = 1 Pa^0.5, or a list of measured points ["F-factor", "pressure drop per height"].
    resistance "resistance": ResistanceText,
    /// Declared: exponent of the resistance on the F-factor.
    exponent "exponent": At<f64>,
}

raw_table! {
    /// Constants of Billet and Schultes.
    RawBilletSchultes, "billet_schultes";
    /// Loading.
    c_s "C_S": At<f64>,
    /// Flooding.
    c_fl "C_Fl": At<f64>,
    /// Hold-up.
    c_h "C_h": At<f64>,
    /// Pressure drop.
    c_p0 "C_p0": At<f64>,
}
