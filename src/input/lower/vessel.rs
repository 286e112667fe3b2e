//! Shell, wall, bands and compartments.

use super::context::{Context, INNER_FRACTION, SHARE};
use crate::engine::case::{Band, Compartment, Diameter, Position, Reach, Shell, Wall};
use crate::engine::units::{Length, Si};
use crate::input::quantity as kind;
use crate::input::quantity::Sign::{Any, NotNegative, Positive};
use crate::input::raw::{DiameterText, PositionText, RawBand, RawCompartment, RawShell, RawWall};
use crate::input::reader::{At, Span, nearest};
use crate::input::write_back::POSITION_RULES;

/// A sized diameter is rounded up to a multiple of this unless the case says otherwise (common practice, no source).
const DEFAULT_STEP_M: f64 = 0.050;
/// Words that a compartment cannot be named, since `place` uses them.
pub(super) const OPEN_PLACES: [&str; 2] = ["above wall", "below wall"];

/// Compartments; None for one that could not be read, so that the count and the names stay.
pub(super) fn compartments(context: &mut Context<'_>, raw: &[RawCompartment]) -> Vec<(String, Option<Compartment>)> {
    let mut names: Vec<(String, Span)> = Vec::new();
    let mut read = Vec::new();
    for compartment in raw {
        let typed = context.need(compartment, &compartment.name, "name", "e.g. name = \"feed side\"");
        let name = typed.and_then(|typed| context.name(typed, "the name of a compartment").map(str::to_owned));
        if let (Some(typed), Some(name)) = (typed, &name) {
            if OPEN_PLACES.contains(&name.as_str()) {
                let message = format!("a compartment cannot be named \"{name}\": that is a place without wall");
                context.sink.help(typed.span.clone(), message, "taken", "e.g. name = \"feed side\"");
            }
            names.push((name.clone(), typed.span.clone()));
        }
        let lowered = Compartment {
            name: name.clone().unwrap_or_default(),
            vapour_share: context.number(compartment.vapour_share.as_ref(), "vapour_share", INNER_FRACTION),
            vapour_share_band: context.range(compartment.vapour_share_band.as_ref(), "vapour_share_band"),
            liquid_share: context.number(compartment.liquid_share.as_ref(), "liquid_share", SHARE),
            liquid_share_range: context.range(compartment.liquid_share_range.as_ref(), "liquid_share_range"),
            liquid_share_accuracy: context.number(
                compartment.liquid_share_accuracy.as_ref(),
                "liquid_share_accuracy",
                INNER_FRACTION,
            ),
        };
        if let (Some(share), Some((low, high)), Some(at)) =
            (lowered.vapour_share, lowered.vapour_share_band, &compartment.vapour_share_band)
            && !(low..=high).contains(&share)
        {
            let message = format!("the band {low} to {high} does not hold the required vapour_share {share} itself");
            context.sink.help(at.span.clone(), message, "share outside", "widen the band, or correct the share");
        }
        read.push((name.clone().unwrap_or_default(), name.map(|_| lowered)));
    }
    context.unique(&names, "compartments");
    read
}

/// `[shell]`.
pub(super) fn shell(context: &mut Context<'_>, raw: &RawShell) -> Option<Shell> {
    let step = match &raw.step {
        Some(step) => context.quantity(Some(step), Positive),
        None => Some(Length::from_si(DEFAULT_STEP_M)),
    };
    let example = "diameter = \"size\", or a length such as diameter = \"3.10 m\"";
    match context.need(raw, &raw.diameter, "diameter", example)? {
        DiameterText::One(text) => {
            let diameter = diameter(context, text)?;
            Some(Shell { above: diameter, wall_zone: diameter, below: diameter, one_diameter: true, step: step? })
        }
        DiameterText::Parts(parts) => {
            let mut part = |typed: &Option<At<String>>, key: &str| {
                let example = format!("{key} = \"size\" or a length");
                let text = context.need(&**parts, typed, key, &example)?;
                diameter(context, text)
            };
            let above = part(&parts.above, "above");
            let wall_zone = part(&parts.wall_zone, "wall_zone");
            let below = part(&parts.below, "below");
            Some(Shell { above: above?, wall_zone: wall_zone?, below: below?, one_diameter: false, step: step? })
        }
    }
}

fn diameter(context: &mut Context<'_>, typed: &At<String>) -> Option<Diameter> {
    if typed.value == "size" {
        return Some(Diameter::Size);
    }
    if is_word(&typed.value) {
        let message = format!("\"{}\" is neither \"size\" nor a length", typed.value);
        let help = "write \"size\" to have it found, or a length such as \"3.10 m\"";
        context.sink.help(typed.span.clone(), message, "not a diameter", help);
        return None;
    }
    let si = context.parse::<kind::Length>(&typed.value, &typed.span, Positive)?;
    Some(Diameter::Given(Length::from_si(si)))
}

/// A text that is meant as a word, not as a number with a unit.
fn is_word(text: &str) -> bool {
    text.trim_start().starts_with(|c: char| c.is_alphabetic()) && !text.trim().eq_ignore_ascii_case("nan m")
}

/// `[wall]`. `walls` is the number of compartments less one.
pub(super) fn wall(context: &mut Context<'_>, raw: &RawWall, walls: usize, shell: Option<&Shell>) -> Option<Wall> {
    let reach = match &raw.reach {
        None => Some(Reach::Middle),
        Some(typed) => context.choice(
            typed,
            "reach of the wall",
            &[("middle", Reach::Middle), ("top", Reach::Top), ("bottom", Reach::Bottom)],
        ),
    };
    let typed_thickness = context.need(raw, &raw.thickness, "thickness", "e.g. thickness = \"10 mm\"");
    let thickness: Option<Length> = context.quantity(typed_thickness, NotNegative);
    let setting = Setting { walls, thickness: thickness.map(Si::si), radius: radius(shell) };
    let bands = match &raw.band {
        Some(bands) => {
            if let Some(position) = &raw.position {
                let message = "position stands in [wall] and in its bands; only one of them can hold";
                context.sink.help(position.span(), message, "stated twice", "leave it out here: each band has its own");
            }
            if bands.items.is_empty() {
                context.sink.add(raw.span.clone(), "band is empty", "no band");
            }
            lower_bands(context, &bands.items, &setting)
        }
        None => {
            let example = "position = \"equal flood\" (or \"equal pressure drop\", \"vapour load\", a length)";
            let typed = context.need(raw, &raw.position, "position", example)?;
            vec![Some(Band { name: String::new(), position: position(context, typed, &setting)? })]
        }
    };
    let bands: Option<Vec<Band>> = bands.into_iter().collect();
    Some(Wall { reach: reach?, thickness: thickness?, bands: bands? })
}

/// Radius of a given wall zone, m.
fn radius(shell: Option<&Shell>) -> Option<f64> {
    match shell?.wall_zone {
        Diameter::Given(diameter) => Some(diameter.si() / 2.0),
        Diameter::Size => None,
    }
}

/// What positions must fit.
struct Setting {
    walls: usize,
    thickness: Option<f64>,
    radius: Option<f64>,
}

fn lower_bands(context: &mut Context<'_>, raw: &[RawBand], setting: &Setting) -> Vec<Option<Band>> {
    let mut names: Vec<(String, Span)> = Vec::new();
    let mut bands = Vec::new();
    for band in raw {
        let typed = context.need(band, &band.name, "name", "e.g. name = \"upper\"");
        let name = typed.and_then(|typed| context.name(typed, "the name of a band").map(str::to_owned));
        if let (Some(typed), Some(name)) = (typed, &name) {
            names.push((name.clone(), typed.span.clone()));
        }
        let typed = context.need(band, &band.position, "position", "e.g. position = \"equal flood\"");
        let position = typed.and_then(|typed| position(context, typed, setting));
        bands.push(name.zip(position).map(|(name, position)| Band { name, position }));
    }
    context.unique(&names, "bands");
    bands
}

/// Names of the bands that were typed, for the sections to refer to.
pub(super) fn band_names(raw: Option<&RawWall>) -> Vec<String> {
    let bands = raw.and_then(|wall| wall.band.as_ref()).map(|bands| bands.items.as_slice()).unwrap_or_default();
    bands.iter().map(|band| band.name.as_ref().map(|name| name.value.clone()).unwrap_or_default()).collect()
}

fn position(context: &mut Context<'_>, typed: &PositionText, setting: &Setting) -> Option<Position> {
    match typed {
        PositionText::One(text) => {
            let rules = [Position::EqualFlood, Position::EqualPressureDrop, Position::VapourLoad];
            if let Some((_, rule)) = POSITION_RULES.iter().zip(rules).find(|(word, _)| **word == text.value) {
                return Some(rule);
            }
            if is_word(&text.value) {
                let message = format!("\"{}\" is neither a rule for the wall's position nor a length", text.value);
                let meant = nearest(&text.value, &POSITION_RULES);
                let near = meant.map(|word| format!("did you mean \"{word}\"? ")).unwrap_or_default();
                let help = format!("{near}(\"{}\", or a length such as \"0.210 m\")", POSITION_RULES.join("\", \""));
                context.sink.help(text.span.clone(), message, "not a position", help);
                return None;
            }
            let si = context.parse::<kind::Length>(&text.value, &text.span, Any)?;
            given(context, vec![(si, text.span.clone())], &text.span, setting)
        }
        PositionText::Many(list) => {
            let positions: Vec<(f64, Span)> = list
                .items
                .iter()
                .filter_map(|item| context.si(Some(item), Any).map(|si| (si, item.span.clone())))
                .collect();
            if positions.len() < list.typed {
                return None;
            }
            given(context, positions, &list.span, setting)
        }
    }
}

fn given(context: &mut Context<'_>, positions: Vec<(f64, Span)>, whole: &Span, setting: &Setting) -> Option<Position> {
    if positions.len() != setting.walls {
        let message = format!(
            "{} compartments have {} wall(s) between them, but {} position(s) are given",
            setting.walls + 1,
            setting.walls,
            positions.len()
        );
        let help =
            if setting.walls == 1 { "give one length" } else { "give a list with one length for each wall, rising" };
        context.sink.help(whole.clone(), message, "wrong number of positions", help);
        return None;
    }
    let thickness = setting.thickness.unwrap_or(0.0);
    let mut sound = true;
    for ((before, _), (here, span)) in positions.iter().zip(positions.iter().skip(1)) {
        if here - before <= thickness {
            let message = "walls must stand in rising order of position, each clear of the one before it";
            let help = "the first-listed compartment lies at the most negative positions";
            context.sink.help(span.clone(), message, "not beyond the wall before", help);
            sound = false;
        }
    }
    if let Some(radius) = setting.radius {
        for (position, span) in &positions {
            if position.abs() + thickness / 2.0 >= radius {
                let message = format!("a wall at {position} m stands outside a shell of {} m", 2.0 * radius);
                let help = "a position is the signed distance from the shell's axis to the wall's mid-plane";
                context.sink.help(span.clone(), message, "outside the shell", help);
                sound = false;
            }
        }
    }
    sound.then(|| Position::Given(positions.into_iter().map(|(si, _)| Length::from_si(si)).collect()))
}
