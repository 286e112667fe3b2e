//! Sections: names, places, internals, bands and extent.

use super::context::{Allowed, Context};
use super::criteria::criteria;
use super::extent::extent;
use super::internals::NamedInternals;
use super::vessel::OPEN_PLACES;
use crate::engine::case::{Criteria, Extent, Place, Reach};
use crate::input::raw::RawSection;
use crate::input::reader::{At, Span};

const SYSTEM_FACTOR: Allowed = Allowed { test: |x| x > 0.0 && x <= 1.2, words: "above 0 and at most 1.2" };

/// A section as far as it could be read. Its place in the list is that of the file.
pub(super) struct Sketch {
    pub(super) name: String,
    pub(super) place: Option<Place>,
    pub(super) internals: Option<usize>,
    pub(super) band: Option<usize>,
    pub(super) extent: Option<Extent>,
    pub(super) system_factor: Option<f64>,
    pub(super) criteria: Criteria,
}

/// What sections refer to.
pub(super) struct Surroundings<'a> {
    pub(super) compartments: &'a [String],
    pub(super) bands: &'a [String],
    pub(super) internals: &'a [NamedInternals],
    pub(super) reach: Reach,
}

/// All sections, in the order of the file, and whether every place has what it needs.
pub(super) fn sections(
    context: &mut Context<'_>,
    raw: &[RawSection],
    around: &Surroundings<'_>,
) -> (Vec<Sketch>, bool) {
    let mut names: Vec<(String, Span)> = Vec::new();
    let mut sketches = Vec::new();
    for section in raw {
        let typed = context.need(section, &section.name, "name", "e.g. name = \"rectifying\"");
        let name = typed.and_then(|typed| context.name(typed, "the name of a section").map(str::to_owned));
        let span = typed.map_or_else(|| section.span.clone(), |typed| typed.span.clone());
        if let Some(name) = &name {
            names.push((name.clone(), span.clone()));
        }
        let typed_place =
            context.need(section, &section.place, "place", "place = \"above wall\", \"below wall\" or a compartment");
        let place = typed_place.and_then(|typed| place(context, typed, around.compartments));
        if let (Some(place), Some(typed)) = (place, typed_place) {
            closed_end(context, place, typed, around.reach);
        }
        let known: Vec<&str> = around.internals.iter().map(|internals| internals.name.as_str()).collect();
        let typed = context.need(
            section,
            &section.internals,
            "internals",
            "internals = \"...\", a name under [internals.NAME]",
        );
        let internals = typed.and_then(|typed| {
            let found = known.iter().position(|name| *name == typed.value);
            if found.is_none() {
                let message = format!("there are no internals \"{}\"", typed.value);
                context.unknown_name(typed, &message, &known, "internals of this case");
            }
            found
        });
        let kind = internals.and_then(|index| around.internals.get(index)).and_then(|internals| internals.kind);
        sketches.push(Sketch {
            name: name.unwrap_or_default(),
            place,
            internals,
            band: band(context, section, place, around.bands),
            extent: kind.and_then(|kind| extent(context, section, kind)),
            system_factor: match &section.system_factor {
                Some(typed) => context.number(Some(typed), "system_factor", SYSTEM_FACTOR),
                None => Some(1.0),
            },
            criteria: criteria(context, section.criteria.as_ref()),
        });
    }
    context.unique(&names, "sections");
    let complete = every_place(context, &sketches, around);
    band_order(context, raw, &sketches, around);
    (sketches, complete)
}

/// A place by its name.
pub(super) fn place(context: &mut Context<'_>, typed: &At<String>, compartments: &[String]) -> Option<Place> {
    match typed.value.as_str() {
        "above wall" => return Some(Place::Above),
        "below wall" => return Some(Place::Below),
        _ => {}
    }
    if let Some(index) = compartments.iter().position(|name| *name == typed.value) {
        return Some(Place::Compartment(index));
    }
    let known: Vec<&str> = OPEN_PLACES.into_iter().chain(compartments.iter().map(String::as_str)).collect();
    context.unknown_name(typed, &format!("there is no place \"{}\"", typed.value), &known, "places");
    None
}

/// The words of a place.
pub(super) fn place_words(place: Place, compartments: &[String]) -> String {
    match place {
        Place::Above => "above wall".to_owned(),
        Place::Below => "below wall".to_owned(),
        Place::Compartment(index) => compartments.get(index).cloned().unwrap_or_default(),
    }
}

fn closed_end(context: &mut Context<'_>, place: Place, typed: &At<String>, reach: Reach) {
    let (message, help) = match (place, reach) {
        (Place::Above, Reach::Top) => (
            "the wall reaches the top head, so nothing can stand above it",
            "put this section into a compartment, or write reach = \"middle\"",
        ),
        (Place::Below, Reach::Bottom) => (
            "the wall reaches the bottom head, so nothing can stand below it",
            "put this section into a compartment, or write reach = \"middle\"",
        ),
        _ => return,
    };
    context.sink.help(typed.span.clone(), message, "closed end", help);
}

fn band(context: &mut Context<'_>, raw: &RawSection, place: Option<Place>, bands: &[String]) -> Option<usize> {
    let in_compartment = matches!(place, Some(Place::Compartment(_)));
    match &raw.band {
        Some(typed) if bands.is_empty() => {
            let message = "this section names a band, but the wall has none";
            context.sink.help(typed.key.clone(), message, "no bands", "take it out, or add [[wall.band]] tables");
            None
        }
        Some(typed) if place.is_some() && !in_compartment => {
            let message = "only a section beside the wall stands in a band of it";
            context.sink.help(typed.key.clone(), message, "not beside the wall", "take it out");
            None
        }
        Some(typed) => {
            let found = bands.iter().position(|name| *name == typed.value);
            if found.is_none() {
                let known: Vec<&str> = bands.iter().map(String::as_str).collect();
                context.unknown_name(typed, &format!("the wall has no band \"{}\"", typed.value), &known, "bands");
            }
            found
        }
        None if bands.is_empty() || !in_compartment => Some(0),
        None => {
            let message = "this section stands beside a stepped wall, but does not say in which band";
            let help = format!("add band = \"...\", one of: {}", bands.join(", "));
            let span = super::context::header(context.text, raw.span.clone());
            context.sink.help(span, message, "band missing", help);
            None
        }
    }
}

fn every_place(context: &mut Context<'_>, sketches: &[Sketch], around: &Surroundings<'_>) -> bool {
    // A place that could not be read may be the one that seems empty, and no section at all has been reported already.
    if sketches.is_empty() || sketches.iter().any(|sketch| sketch.place.is_none()) {
        return false;
    }
    let mut complete = true;
    let mut wanted: Vec<Place> = (0..around.compartments.len()).map(Place::Compartment).collect();
    if around.reach != Reach::Top {
        wanted.insert(0, Place::Above);
    }
    if around.reach != Reach::Bottom {
        wanted.push(Place::Below);
    }
    for place in wanted {
        let words = place_words(place, around.compartments);
        if !words.is_empty() && !sketches.iter().any(|sketch| sketch.place == Some(place)) {
            complete = false;
            let message = format!("no section stands in the place \"{words}\"");
            let help = format!("add a [[section]] with place = \"{words}\"");
            let end = context.text.len();
            context.sink.help(end..end, message, "end of the case", help);
        }
    }
    complete
}

/// In each compartment the bands run from top to bottom, as the sections do; each band has a section.
fn band_order(context: &mut Context<'_>, raw: &[RawSection], sketches: &[Sketch], around: &Surroundings<'_>) {
    for compartment in 0..around.compartments.len() {
        let mut last = 0;
        for (section, sketch) in raw.iter().zip(sketches) {
            if sketch.place != Some(Place::Compartment(compartment)) {
                continue;
            }
            if let (Some(band), Some(typed)) = (sketch.band, &section.band) {
                if band < last {
                    let message =
                        "sections of a compartment run from top to bottom, and so do the bands; this one goes back up";
                    context.sink.help(typed.span.clone(), message, "above the band before", "sort the sections");
                }
                last = last.max(band);
            }
        }
    }
    if sketches.iter().any(|sketch| sketch.band.is_none() || sketch.place.is_none()) {
        return;
    }
    for (index, name) in around.bands.iter().enumerate() {
        let beside = |sketch: &Sketch| matches!(sketch.place, Some(Place::Compartment(_)));
        if !sketches.iter().any(|sketch| beside(sketch) && sketch.band == Some(index)) {
            let end = context.text.len();
            let message = format!("no section stands in the band \"{name}\"");
            context.sink.help(end..end, message, "end of the case", "add a section in it, or take the band out");
        }
    }
}
