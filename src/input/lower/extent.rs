//! Height of a bed or number of trays: stated, or from theoretical stages.

use super::context::{Allowed, Context, FRACTION};
use super::internals::Kind;
use crate::engine::case::Extent;
use crate::engine::units::{Length, Si};
use crate::input::quantity::Sign::Positive;
use crate::input::raw::RawSection;
use crate::input::reader::{FromTable, Span};

/// More trays or stages than this in one section are a slip of the pen.
const MOST: f64 = 1000.0;
const STAGES: Allowed = Allowed { test: |x| x > 0.0 && x <= MOST, words: "above 0 and at most 1000" };

/// The extent of a section with internals of this kind.
pub(super) fn extent(context: &mut Context<'_>, raw: &RawSection, kind: Kind) -> Option<Extent> {
    let (own, with, other, other_with) = if kind.is_tray() {
        ("trays", "efficiency", "height", "hetp")
    } else {
        ("height", "hetp", "trays", "efficiency")
    };
    let rule = if kind.is_tray() {
        "trays = 24, or stages = 12 with efficiency = 0.7"
    } else {
        "height = \"4.2 m\", or stages = 12 with hetp = \"350 mm\""
    };
    let span_of = |key: &str| -> Option<Span> {
        raw.typed().iter().find(|(typed, _)| typed == key).map(|(_, span)| span.clone())
    };
    let mut foreign = false;
    for key in [other, other_with] {
        if let Some(span) = span_of(key) {
            let message = format!("{key} does not belong to a section with a {}", kind.words());
            context.sink.help(span, message, "not for these internals", format!("say {rule}"));
            foreign = true;
        }
    }
    let stated = span_of(own);
    let by_stages = span_of("stages").or_else(|| span_of(with));
    match (stated, by_stages) {
        (Some(_), Some(span)) => {
            let message = format!("the extent of this section is stated twice: by {own} and by stages");
            context.sink.help(span, message, "stated twice", format!("say {rule}"));
            None
        }
        (None, None) if foreign => None,
        (None, None) => {
            let message = format!("this section has no {own}");
            let span = super::context::header(context.text, raw.span.clone());
            context.sink.help(span, message, "extent missing", format!("add {rule}"));
            None
        }
        (Some(_), None) if kind.is_tray() => trays(context, raw),
        (Some(_), None) => context.quantity(raw.height.as_ref(), Positive).map(Extent::Height),
        (None, Some(_)) => stages(context, raw, kind),
    }
}

fn trays(context: &mut Context<'_>, raw: &RawSection) -> Option<Extent> {
    let typed = raw.trays.as_ref()?;
    let count = typed.value as f64;
    if (1.0..=MOST).contains(&count) {
        return Some(Extent::Trays(count));
    }
    let message = format!("trays must be a whole number from 1 to {MOST}, but this is {}", typed.value);
    context.sink.add(typed.span.clone(), message, "not a number of trays");
    None
}

fn stages(context: &mut Context<'_>, raw: &RawSection, kind: Kind) -> Option<Extent> {
    let example = if kind.is_tray() { "stages = 12 beside efficiency" } else { "stages = 12 beside hetp" };
    let typed = context.need(raw, &raw.stages, "stages", example);
    let stages = context.number(typed, "stages", STAGES);
    if kind.is_tray() {
        let typed = context.need(raw, &raw.efficiency, "efficiency", "efficiency = 0.7 beside stages");
        let efficiency = context.number(typed, "efficiency", FRACTION);
        // A hair below the quotient, so that 7 stages at 0.7 are 10 trays and not 11.
        let trays = (stages? / efficiency? - 1e-9).ceil().max(1.0);
        if trays <= MOST {
            return Some(Extent::Trays(trays));
        }
        let span = typed.map(|typed| typed.span.clone()).unwrap_or_default();
        context.sink.add(
            span,
            format!("these stages and this efficiency make {trays} trays in one section"),
            "too many",
        );
        return None;
    }
    let typed = context.need(raw, &raw.hetp, "hetp", "hetp = \"350 mm\" beside stages");
    let hetp: Option<Length> = context.quantity(typed, Positive);
    Some(Extent::Height(Length::from_si(stages? * hetp?.si())))
}
