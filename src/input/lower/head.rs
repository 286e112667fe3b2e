//! Format, `[case]`, `[methods]`, and the tables that later work reads: checked here, kept out of the engine's case.

use super::context::{Context, NOT_NEGATIVE, POSITIVE, SHARE};
use crate::engine::case::Methods;
use crate::engine::correlation::record::Task;
use crate::input::quantity::Sign::Positive;
use crate::input::raw::{RawFile, RawMethods, RawSeparation};
use crate::input::reader::At;

/// The four texts of `[case]`.
pub(super) struct Head {
    pub(super) tag: String,
    pub(super) title: String,
    pub(super) revision: String,
    pub(super) basis: String,
}

/// Format and `[case]`.
pub(super) fn head(context: &mut Context<'_>, raw: &RawFile) -> Option<Head> {
    if let Some(format) = context.need(raw, &raw.format, "format", "\"format = 1\" as the first line")
        && format.value != 1
    {
        let message = format!("this program reads format 1, but the file says {}", format.value);
        context.sink.help(format.span.clone(), message, "not 1", "write \"format = 1\"");
    }
    let case = context.need(raw, &raw.case, "[case]", "a table [case] with tag and title")?;
    let tag = context.need(case, &case.tag, "tag", "the column's tag, e.g. tag = \"C-340\"");
    let tag = tag.and_then(|tag| context.name(tag, "tag").map(str::to_owned));
    let title = context.need(case, &case.title, "title", "what the column does, e.g. title = \"Solvent splitter\"");
    let title = title.map(|title| one_line(&title.value));
    let text = |typed: Option<&At<String>>| typed.map(|text| one_line(&text.value)).unwrap_or_default();
    Some(Head { tag: tag?, title: title?, revision: text(case.revision.as_ref()), basis: text(case.basis.as_ref()) })
}

/// Control characters become spaces, so that a title never breaks a sheet.
fn one_line(text: &str) -> String {
    text.chars().map(|c| if c.is_control() { ' ' } else { c }).collect()
}

/// `[methods]` with its defaults.
pub(super) fn methods(context: &mut Context<'_>, raw: Option<&RawMethods>) -> Methods {
    let none = RawMethods::default();
    let raw = raw.unwrap_or(&none);
    Methods {
        tray_flood: method(context, raw.tray_flood.as_ref(), Task::TrayFlood).unwrap_or_else(|| "fair".to_owned()),
        packing_flood: method(context, raw.packing_flood.as_ref(), Task::PackingFlood)
            .unwrap_or_else(|| "generalized pressure drop".to_owned()),
        packing_pressure_drop: method(context, raw.packing_pressure_drop.as_ref(), Task::PackingPressureDrop),
        aerated_liquid: method(context, raw.aerated_liquid.as_ref(), Task::AeratedLiquid)
            .unwrap_or_else(|| "bennett".to_owned()),
    }
}

fn method(context: &mut Context<'_>, typed: Option<&At<String>>, task: Task) -> Option<String> {
    let typed = typed?;
    let known = context.catalogue.methods(task);
    if known.contains(&typed.value.as_str()) {
        return Some(typed.value.clone());
    }
    let message = format!("\"{}\" is not a method for {}", typed.value, task.name());
    context.unknown_name(typed, &message, &known, "methods");
    None
}

/// Checks what the engine does not read yet, so that a mistake there is said today and not with a later version.
pub(super) fn kept_tables(context: &mut Context<'_>, raw: &RawFile) {
    if let Some(uncertainty) = &raw.uncertainty {
        context.number(uncertainty.packing_pressure_drop.as_ref(), "packing_pressure_drop", NOT_NEGATIVE);
        context.number(uncertainty.common.as_ref(), "common", SHARE);
    }
    if let Some(plate) = raw.wall.as_ref().and_then(|wall| wall.plate.as_ref()) {
        let pressure = context.need(
            plate,
            &plate.pressure_difference,
            "pressure_difference",
            "e.g. pressure_difference = \"50 mbar\"",
        );
        context.quantity(pressure, Positive);
    }
    if let Some(separation) = &raw.separation {
        separation_table(context, separation);
    }
}

fn separation_table(context: &mut Context<'_>, raw: &RawSeparation) {
    let volatility = context.need(raw, &raw.volatility, "volatility", "e.g. volatility = [4.0, 2.0, 1.0]");
    let feed = context.need(raw, &raw.feed, "feed", "the feed's mole fractions, e.g. feed = [0.3, 0.3, 0.4]");
    context.number(
        raw.feed_liquid.as_ref(),
        "feed_liquid",
        super::context::Allowed {
            test: |q| (-5.0..=5.0).contains(&q),
            words: "from -5 to 5 (0 saturated vapour, 1 saturated liquid)",
        },
    );
    if let Some(list) = volatility {
        let values: Vec<f64> = list
            .items
            .iter()
            .filter_map(|item| context.number(Some(item), "each entry of volatility", POSITIVE))
            .collect();
        let falls = values.iter().zip(values.iter().skip(1)).all(|(light, heavy)| light > heavy);
        if values.len() == list.typed && !falls {
            let message = "volatility must fall from the lightest component to the heaviest";
            context.sink.help(list.span.clone(), message, "does not fall", "e.g. volatility = [4.0, 2.0, 1.0]");
        }
    }
    if let Some(list) = feed {
        let values: Vec<f64> =
            list.items.iter().filter_map(|item| context.number(Some(item), "each entry of feed", SHARE)).collect();
        let sum: f64 = values.iter().sum();
        if values.len() == list.typed && (sum - 1.0).abs() > 0.002 {
            let message = format!("the mole fractions of feed must sum to 1, but sum to {sum:.4}");
            context.sink.help(list.span.clone(), message, "do not sum to 1", "e.g. feed = [0.3, 0.3, 0.4]");
        }
        if let Some(volatility) = volatility
            && volatility.typed != list.typed
        {
            let message = format!(
                "volatility names {} components, but feed {}; both need one entry for each",
                volatility.typed, list.typed
            );
            context.sink.help(
                list.span.clone(),
                message,
                "another number of components",
                "list the same components in both",
            );
        }
    }
}
