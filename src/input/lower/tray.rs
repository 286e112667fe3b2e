//! Sieve and valve trays.

use super::context::{Allowed, Context, FRACTION, INNER_FRACTION};
use crate::engine::case::{Deck, Foaming, LiquidFlow, Tray};
use crate::engine::units::{Length, Si};
use crate::input::quantity::Sign::{NotNegative, Positive};
use crate::input::raw::RawInternals;
use crate::input::reader::At;

const DOWNCOMER: Allowed = Allowed { test: |x| x > 0.0 && x < 0.5, words: "above 0 and below 0.5" };

/// A tray; `valve` for a valve tray.
pub(super) fn tray(context: &mut Context<'_>, raw: &RawInternals, valve: bool) -> Option<Tray> {
    macro_rules! length {
        ($field:ident, $sign:expr, $example:literal) => {{
            let example = concat!("e.g. ", stringify!($field), " = \"", $example, "\"");
            let typed = context.need(raw, &raw.$field, stringify!($field), example);
            context.quantity(typed, $sign)
        }};
    }
    macro_rules! fraction {
        ($field:ident, $allowed:expr, $example:literal) => {{
            let example = concat!("e.g. ", stringify!($field), " = ", $example);
            let typed = context.need(raw, &raw.$field, stringify!($field), example);
            context.number(typed, stringify!($field), $allowed)
        }};
    }
    let spacing: Option<Length> = length!(tray_spacing, Positive, "610 mm");
    let weir_height: Option<Length> = length!(weir_height, NotNegative, "50 mm");
    let hole_diameter = length!(hole_diameter, Positive, "6 mm");
    let hole_area = fraction!(hole_area, INNER_FRACTION, "0.07");
    let deck_thickness = length!(deck_thickness, Positive, "2 mm");
    let downcomer_area = fraction!(downcomer_area, DOWNCOMER, "0.12");
    let downcomer_clearance = length!(downcomer_clearance, Positive, "40 mm");
    let bottom = context.number(raw.downcomer_bottom_area.as_ref(), "downcomer_bottom_area", DOWNCOMER);
    let edge_strip = match &raw.edge_strip {
        Some(typed) => context.quantity(Some(typed), NotNegative),
        None => Some(Length::from_si(0.0)),
    };
    let weir_open = match &raw.weir_open {
        Some(typed) => context.number(Some(typed), "weir_open", FRACTION),
        None => Some(1.0),
    };
    let deck = deck(context, raw, valve);
    let passes = passes(context, raw.passes.as_ref());
    let flow = match &raw.flow {
        Some(typed) => {
            let words = [("along wall", LiquidFlow::AlongWall), ("across wall", LiquidFlow::AcrossWall)];
            context.choice(typed, "direction of the liquid", &words)
        }
        None => Some(LiquidFlow::AlongWall),
    };
    let classes = [("low", Foaming::Low), ("moderate", Foaming::Moderate), ("high", Foaming::High)];
    let foaming = raw.foaming.as_ref().and_then(|typed| context.choice(typed, "foaming class", &classes));
    if let (Some(weir), Some(spacing), Some(typed)) = (weir_height, spacing, &raw.weir_height)
        && weir >= spacing
    {
        let message = "weir_height must be less than tray_spacing";
        context.sink.help(typed.span.clone(), message, "as high as the spacing or higher", "e.g. \"50 mm\"");
    }
    if let (Some(bottom), Some(top), Some(typed)) = (bottom, downcomer_area, &raw.downcomer_bottom_area)
        && bottom > top
    {
        let message = format!("downcomer_bottom_area {bottom} is larger than the downcomers' tops, {top}");
        context.sink.help(typed.span.clone(), message, "wider below than above", "a downcomer is straight or narrows");
    }
    Some(Tray {
        deck: deck?,
        spacing: spacing?,
        weir_height: weir_height?,
        hole_diameter: hole_diameter?,
        hole_area: hole_area?,
        deck_thickness: deck_thickness?,
        downcomer_area: downcomer_area?,
        downcomer_bottom_area: bottom.or(downcomer_area)?,
        downcomer_clearance: downcomer_clearance?,
        passes: passes?,
        flow: flow?,
        edge_strip: edge_strip?,
        weir_open: weir_open?,
        foaming,
    })
}

fn passes(context: &mut Context<'_>, typed: Option<&At<i64>>) -> Option<u8> {
    match typed.map(|typed| (typed.value, typed)) {
        None | Some((1, _)) => Some(1),
        Some((2, _)) => Some(2),
        Some((other, typed)) => {
            let message = format!("a tray beside a wall has 1 or 2 passes, but passes is {other}");
            context.sink.help(typed.span.clone(), message, "not 1 or 2", "write passes = 1 or passes = 2");
            None
        }
    }
}

fn deck(context: &mut Context<'_>, raw: &RawInternals, valve: bool) -> Option<Deck> {
    if !valve {
        return Some(Deck::Sieve);
    }
    let venturi = match &raw.orifice {
        Some(typed) => context.choice(typed, "orifice", &[("flat", false), ("venturi", true)]),
        None => Some(false),
    };
    let movable = match &raw.valve {
        Some(typed) => context.choice(typed, "valve", &[("movable", true), ("fixed", false)]),
        None => Some(true),
    };
    let legs = raw.valve_legs.as_ref().and_then(|typed| match typed.value {
        0 => Some(0),
        3 => Some(3),
        4 => Some(4),
        other => {
            let message = format!("a valve has 3 or 4 legs, or 0 in a cage, but valve_legs is {other}");
            context.sink.help(typed.span.clone(), message, "not 0, 3 or 4", "write valve_legs = 3");
            None
        }
    });
    Some(Deck::Valve {
        venturi: venturi?,
        movable: movable?,
        thickness: context.quantity(raw.valve_thickness.as_ref(), Positive),
        density: context.quantity(raw.valve_density.as_ref(), Positive),
        legs,
    })
}
