//! Declared internals: measured or guaranteed figures.

use super::context::{Allowed, Context, NOT_NEGATIVE};
use crate::engine::case::{Declared, Resistance};
use crate::engine::units::{PressureGradient, Si, Velocity};
use crate::input::quantity::BEYOND_REASON;
use crate::input::quantity::Sign::Positive;
use crate::input::raw::{CapacityText, RawInternals, ResistanceText};
use crate::input::reader::{FromTable, Span};

const EXPONENT: Allowed = Allowed { test: |x| x > 0.0 && x <= 10.0, words: "above 0 and at most 10" };
const RESISTANCE: Allowed = Allowed { test: |x| x > 0.0 && x < BEYOND_REASON, words: "above 0" };

/// Capacity, and resistance if there is one.
pub(super) fn declared(context: &mut Context<'_>, raw: &RawInternals) -> Option<Declared> {
    let capacity = capacity(context, raw);
    let resistance = match &raw.resistance {
        None => {
            if let Some(exponent) = &raw.exponent {
                let message = "exponent stands here without a resistance";
                let help = "add resistance = ... (Pa/m at F = 1 Pa^0.5), or take the exponent out";
                context.sink.help(exponent.key.clone(), message, "of what?", help);
            }
            Some(None)
        }
        Some(typed) => resistance(context, raw, typed).map(Some),
    };
    Some(Declared { capacity: capacity?, resistance: resistance? })
}

fn capacity(context: &mut Context<'_>, raw: &RawInternals) -> Option<Vec<(f64, Velocity)>> {
    match context.need(raw, &raw.capacity, "capacity", "the capacity factor at flood, e.g. capacity = \"0.090 m/s\"")? {
        // One value holds at every flow parameter, so the one in the pair says nothing.
        CapacityText::One(typed) => context.quantity(Some(typed), Positive).map(|velocity| vec![(0.0, velocity)]),
        CapacityText::Pairs(list) => {
            let mut pairs: Vec<(f64, Velocity)> = Vec::new();
            let mut spans: Vec<(f64, Span)> = Vec::new();
            for pair in &list.items {
                let parameter = context.number(Some(&pair.first), "the flow parameter", NOT_NEGATIVE);
                let velocity = context.quantity(Some(&pair.second), Positive);
                if let (Some(parameter), Some(velocity)) = (parameter, velocity) {
                    pairs.push((parameter, velocity));
                    spans.push((parameter, pair.span.clone()));
                }
            }
            let complete = pairs.len() == list.typed;
            let rising = rises(context, &spans, "flow parameters of capacity");
            if list.typed == 0 {
                context.sink.add(list.span.clone(), "capacity is an empty list", "no pair");
            }
            (complete && rising && !pairs.is_empty()).then_some(pairs)
        }
    }
}

fn resistance(context: &mut Context<'_>, raw: &RawInternals, typed: &ResistanceText) -> Option<Resistance> {
    let coefficient: Option<PressureGradient> = match typed {
        ResistanceText::Number(number) => {
            context.number(Some(number), "resistance (in Pa/m at F = 1 Pa^0.5)", RESISTANCE).map(Si::from_si)
        }
        ResistanceText::Gradient(gradient) => context.quantity(Some(gradient), Positive),
        ResistanceText::Pairs(list) => {
            let mut points: Vec<(f64, PressureGradient)> = Vec::new();
            let mut factors: Vec<(f64, Span)> = Vec::new();
            let mut drops: Vec<(f64, Span)> = Vec::new();
            for pair in &list.items {
                let factor = context.quantity(Some(&pair.first), Positive);
                let drop: Option<PressureGradient> = context.quantity(Some(&pair.second), Positive);
                if let (Some(factor), Some(drop)) = (factor, drop) {
                    points.push((factor, drop));
                    factors.push((factor, pair.span.clone()));
                    drops.push((drop.si(), pair.span.clone()));
                }
            }
            if let Some((_, span)) = raw.typed().iter().find(|(key, _)| key == "exponent") {
                let message = "exponent does not go with measured points: they give the exponent themselves";
                context.sink.help(span.clone(), message, "not with points", "take the exponent out");
            }
            if list.typed < 2 {
                let message = format!("resistance has {} measured point(s), but needs at least two", list.typed);
                context.sink.add(list.span.clone(), message, "too few");
            }
            let rising = rises(context, &factors, "F-factors of resistance")
                && rises(context, &drops, "pressure drops of resistance");
            let complete = points.len() == list.typed && list.typed >= 2;
            return (complete && rising).then_some(Resistance::Points(points));
        }
    };
    let typed = context.need(raw, &raw.exponent, "exponent", "the exponent on the F-factor, e.g. exponent = 2.0");
    let exponent = context.number(typed, "exponent", EXPONENT);
    Some(Resistance::Power { coefficient: coefficient?, exponent: exponent? })
}

fn rises(context: &mut Context<'_>, values: &[(f64, Span)], what: &str) -> bool {
    let mut rises = true;
    for ((before, _), (here, span)) in values.iter().zip(values.iter().skip(1)) {
        if here <= before {
            let message = format!("the {what} must rise from pair to pair");
            context.sink.help(span.clone(), message, "not above the pair before", "sort the pairs, each value once");
            rises = false;
        }
    }
    rises
}
