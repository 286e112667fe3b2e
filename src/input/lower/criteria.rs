//! `[criteria]`, `[criteria.tray]`, `[criteria.packing]`, `[section.criteria]`, `criteria` of a point.

use super::context::{Allowed, Context, FRACTION, INNER_FRACTION, SHARE};
use crate::engine::case::{Criteria, CriteriaTable};
use crate::input::quantity::Sign::{NotNegative, Positive};
use crate::input::raw::{RawCriteria, RawCriteriaTable};

/// The flood limit may pass 1 a little: some rate to a flood that is defined by a pressure drop.
const FLOOD: Allowed = Allowed { test: |x| x > 0.0 && x <= 1.2, words: "above 0 and at most 1.2 (1 is flood)" };
const EXPONENT: Allowed = Allowed { test: |x| (-2.0..=2.0).contains(&x), words: "from -2 to 2" };

macro_rules! lower_criteria {
    ($context:expr, $raw:expr) => {{
        let (context, raw) = ($context, $raw);
        Criteria {
            approach_to_flood: context.number(raw.approach_to_flood.as_ref(), "approach_to_flood", FLOOD),
            vapour_share_within: context.number(
                raw.vapour_share_within.as_ref(),
                "vapour_share_within",
                INNER_FRACTION,
            ),
            response_exponent: context.number(raw.response_exponent.as_ref(), "response_exponent", EXPONENT),
            pressure_drop: context.quantity(raw.pressure_drop.as_ref(), Positive),
            bed_pressure_drop: context.quantity(raw.bed_pressure_drop.as_ref(), Positive),
            entrainment: context.number(raw.entrainment.as_ref(), "entrainment", INNER_FRACTION),
            downcomer_froth: context.number(raw.downcomer_froth.as_ref(), "downcomer_froth", FRACTION),
            downcomer_velocity: context.quantity(raw.downcomer_velocity.as_ref(), Positive),
            downcomer_residence: context.quantity(raw.downcomer_residence.as_ref(), Positive),
            apron_velocity: context.quantity(raw.apron_velocity.as_ref(), Positive),
            weir_load: context.quantity(raw.weir_load.as_ref(), Positive),
            weir_load_least: context.quantity(raw.weir_load_least.as_ref(), NotNegative),
            flow_path: context.quantity(raw.flow_path.as_ref(), NotNegative),
            weep: context.number(raw.weep.as_ref(), "weep", SHARE),
            wetting: context.quantity(raw.wetting.as_ref(), NotNegative),
            clear_depth: context.quantity(raw.clear_depth.as_ref(), NotNegative),
        }
    }};
}

/// A narrower statement; empty if there is none.
pub(super) fn criteria(context: &mut Context<'_>, raw: Option<&RawCriteria>) -> Criteria {
    raw.map_or_else(Criteria::default, |raw| lower_criteria!(context, raw))
}

/// The general table with its two kinds.
pub(super) fn criteria_table(context: &mut Context<'_>, raw: Option<&RawCriteriaTable>) -> CriteriaTable {
    let Some(raw) = raw else {
        return CriteriaTable::default();
    };
    let general: Criteria = lower_criteria!(&mut *context, raw);
    let tray = criteria(context, raw.tray.as_ref());
    let packing = criteria(context, raw.packing.as_ref());
    CriteriaTable { general, tray, packing }
}
