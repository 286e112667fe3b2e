//! `[criteria]` and its narrower statements.

use crate::input::quantity as kind;
use crate::input::reader::{At, Quantity, raw_table};

macro_rules! criteria_table {
    ($(#[$meta:meta])* $name:ident, $title:literal; $($(#[$more_meta:meta])* $more:ident $more_key:literal: $more_type:ty),* $(,)?) => {
        raw_table! {
            $(#[$meta])*
            $name, $title;
            /// Greatest flood at constant L/V, a fraction. Default 0.80 for trays, 0.75 for packing and for trays below 0.2 bar.
            approach_to_flood "approach_to_flood": At<f64>,
            /// Greatest deviation of an actual vapour share from the required one, absolute. Default 0.02.
            vapour_share_within "vapour_share_within": At<f64>,
            /// Least response exponent of a compartment's whole pressure drop. Default 0.5.
            response_exponent "response_exponent": At<f64>,
            /// Greatest pressure drop of the whole column. No default.
            pressure_drop "pressure_drop": Quantity<kind::Pressure>,
            /// Greatest pressure drop of a bed per height. No default; 2 mbar/m where the table gives pressures below 0.2 bar.
            bed_pressure_drop "bed_pressure_drop": Quantity<kind::Gradient>,
            /// Greatest entrained fraction of the liquid. Default 0.10.
            entrainment "entrainment": At<f64>,
            /// Greatest froth height in the downcomer over (tray spacing + weir height). Default 0.80.
            downcomer_froth "downcomer_froth": At<f64>,
            /// Greatest velocity of clear liquid at the downcomer's top. Default by foaming class and tray spacing.
            downcomer_velocity "downcomer_velocity": Quantity<kind::Velocity>,
            /// Least residence time in the downcomer. Default by foaming class.
            downcomer_residence "downcomer_residence": Quantity<kind::Time>,
            /// Greatest velocity under the downcomer apron. Default 0.45 m/s.
            apron_velocity "apron_velocity": Quantity<kind::Velocity>,
            /// Greatest weir load. Default 90 m3/h/m.
            weir_load "weir_load": Quantity<kind::WeirLoad>,
            /// Least weir load. Default 4.5 m3/h/m.
            weir_load_least "weir_load_least": Quantity<kind::WeirLoad>,
            /// Least flow path. Default 400 mm.
            flow_path "flow_path": Quantity<kind::Length>,
            /// Greatest weep, a fraction of the liquid. Default 0.07; 0.03 below 0.2 bar.
            weep "weep": At<f64>,
            /// Least liquid load of a packing. Default by kind and material.
            wetting "wetting": Quantity<kind::LiquidLoad>,
            /// Least clear depth of the shallowest compartment. Default 600 mm, then attention only.
            clear_depth "clear_depth": Quantity<kind::Length>,
            $($(#[$more_meta])* $more $more_key: $more_type,)*
        }
    };
}

criteria_table! {
    /// Criteria for one kind of internals, one section or one point; the narrowest statement wins.
    RawCriteria, "criteria";
}

criteria_table! {
    /// Criteria for the whole case.
    RawCriteriaTable, "[criteria]";
    /// For trays only.
    tray "tray": RawCriteria,
    /// For packing only.
    packing "packing": RawCriteria,
}
