//! Shell diameters: the smallest at which the sizing criteria hold at every point and the required shares (definition 4).

use super::arrangement::{EndGeometry, ZoneGeometry};
use super::column::{required_column, required_drop_pa};
use super::model::{Model, Stack};
use super::place_wall::Placer;
use super::rate::{AT_LIMIT, rate, sizes_the_shell};
use crate::engine::case::Diameter;
use crate::engine::error::{EngineError, EngineResult};
use crate::engine::findings::Criterion;
use crate::engine::hydraulics::section::SectionGeometry;
use crate::engine::solve::optimise::{DesignRoot, design_root};
use crate::engine::units::Si;
use std::f64::consts::PI;

/// Tolerance of ln(diameter).
const LOG_TOLERANCE: f64 = 1e-11;
/// Logarithm that stands for "no answer at all in so small a shell"; far beyond any real miss.
const HOPELESS: f64 = 20.0;
/// Factor on the diameter over which the power of each figure is taken.
const NEARBY: f64 = 1.01;
/// Doublings of the diameter before sizing gives up.
const DOUBLINGS: usize = 12;

/// Part of the shell.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Part {
    Above,
    WallZone,
    Below,
}

/// The three parts, in the order of every array of diameters.
pub(crate) const PARTS: [Part; 3] = [Part::Above, Part::WallZone, Part::Below];

/// One criterion at its worst, as far as it may enlarge the shell.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Margin {
    pub criterion: Criterion,
    /// Section index in the case; none for the whole column.
    pub section: Option<usize>,
    pub point: usize,
    /// Figure over limit.
    pub ratio: f64,
}

/// What a part of the shell needs.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Need {
    /// Least diameter by the flood criterion alone, m.
    pub by_flood_m: f64,
    /// Least diameter by all sizing criteria, m.
    pub diameter_m: f64,
    /// What sets it.
    pub governing: Margin,
    /// The next one and about its own least diameter.
    pub runner_up: Option<(Margin, f64)>,
}

/// Diameters found or given, with what each part needs.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Sized {
    /// Above, wall zone, below; m.
    pub diameters_m: [f64; 3],
    pub needs: [Need; 3],
    /// Set if the column's pressure drop enlarged the shell: its margin, and the least diameter of each part.
    pub by_column: Option<(Margin, [f64; 3])>,
}

/// Sizes what the case leaves open.
pub(crate) fn size(model: &Model<'_>, placer: &Placer<'_, '_>) -> EngineResult<Sized> {
    let zone = need(model, placer, Part::WallZone)?;
    // At a head where the wall is closed there is no section: the shell there is the wall zone's.
    let of_end = |stack: &Stack<'_>, part: Part| match stack.sections.is_empty() {
        true => Ok(zone.clone()),
        false => need(model, placer, part),
    };
    let (above, below) = (of_end(&model.above, Part::Above)?, of_end(&model.below, Part::Below)?);
    let needs = [above, zone, below];
    let [above, zone, below] = &needs;
    let shell = &model.case.shell;
    let mut least_m = [above.diameter_m, zone.diameter_m, below.diameter_m];
    if shell.one_diameter {
        least_m = [least_m.iter().copied().fold(0.0, f64::max); 3];
    }
    let given = [shell.above, shell.wall_zone, shell.below];
    let with_given = |least_m: [f64; 3]| {
        let mut diameters_m = least_m;
        for (diameter, given) in diameters_m.iter_mut().zip(given) {
            if let Diameter::Given(length) = given {
                *diameter = length.si();
            }
        }
        diameters_m
    };
    let by_column = for_the_column(model, placer, least_m, &with_given)?;
    if let Some((_, enlarged_m)) = &by_column {
        least_m = *enlarged_m;
    }
    let step_m = shell.step.si();
    // A hair below a multiple is that multiple: rounding noise must not cost a step.
    let rounded_m = least_m.map(|least| to_nanometre((least / step_m - 1e-9).ceil() * step_m));
    Ok(Sized { diameters_m: with_given(rounded_m), needs, by_column })
}

/// 34 steps of 0.1 m are 3.4 m, not the double beside it.
fn to_nanometre(length_m: f64) -> f64 {
    (length_m * 1e9).round() / 1e9
}

/// What one part needs.
fn need(model: &Model<'_>, placer: &Placer<'_, '_>, part: Part) -> EngineResult<Need> {
    let by_flood_m = flood_diameter_m(model, placer, part)?;
    let worst = |diameter_m: f64| -> EngineResult<f64> {
        Ok(margins(model, placer, part, diameter_m)?
            .map_or(HOPELESS, |list| list.iter().map(|m| m.ratio.ln()).fold(f64::NEG_INFINITY, f64::max).min(HOPELESS)))
    };
    let diameter_m = least_diameter_m(by_flood_m, worst)?;
    let mut list = margins(model, placer, part, diameter_m)?.ok_or_else(|| EngineError::Search {
        what: "shell diameter".to_owned(),
        why: "a correlation has no answer even at the diameter found".to_owned(),
    })?;
    list.sort_by(|a, b| b.ratio.total_cmp(&a.ratio));
    let mut list = list.into_iter();
    let governing = list.next().ok_or_else(|| EngineError::Search {
        what: "shell diameter".to_owned(),
        why: "no criterion concerns this part of the shell".to_owned(),
    })?;
    let runner_up = runner_up(model, placer, part, diameter_m, list)?;
    Ok(Need { by_flood_m, diameter_m, governing, runner_up })
}

/// The criterion that would govern next, and about at which diameter: each figure is carried on as the power of the diameter that
/// it follows here.
fn runner_up(
    model: &Model<'_>,
    placer: &Placer<'_, '_>,
    part: Part,
    diameter_m: f64,
    rest: impl Iterator<Item = Margin>,
) -> EngineResult<Option<(Margin, f64)>> {
    let nearby_m = diameter_m * NEARBY;
    let about = if part == Part::WallZone { placer.about(nearby_m).ok() } else { None };
    let Some(wider) = margins_at(model, part, nearby_m, about)? else { return Ok(None) };
    let mut best: Option<(Margin, f64)> = None;
    for margin in rest {
        let there = wider.iter().find(|m| m.criterion == margin.criterion && m.section == margin.section);
        let power = there.map_or(0.0, |there| (margin.ratio / there.ratio).ln() / NEARBY.ln());
        let own_m = diameter_m * margin.ratio.powf(1.0 / power);
        if power > 0.0 && own_m.is_finite() && best.as_ref().is_none_or(|(_, best_m)| own_m > *best_m) {
            best = Some((margin, own_m));
        }
    }
    Ok(best)
}

/// Least diameter by flood alone.
fn flood_diameter_m(model: &Model<'_>, placer: &Placer<'_, '_>, part: Part) -> EngineResult<f64> {
    let end = |stack: &Stack<'_>| (4.0 / PI * required_area_m2(stack)).sqrt();
    match part {
        Part::Above => Ok(end(&model.above)),
        Part::Below => Ok(end(&model.below)),
        Part::WallZone => {
            let areas_m2: f64 = model.sides.iter().map(required_area_m2).sum();
            let sections_m2: Vec<f64> =
                model.sides.iter().flat_map(|side| &side.sections).map(|s| s.required_area_m2).collect();
            // The walls' own area makes the shell larger than this.
            let start_m = (4.0 / PI * areas_m2).sqrt();
            let worst = |diameter_m: f64| -> EngineResult<f64> {
                // A shell too small for a given wall is as bad as one that floods.
                let Ok(positions) = placer.standing(diameter_m) else { return Ok(HOPELESS) };
                let Ok(zone) = ZoneGeometry::new(model, diameter_m, positions) else { return Ok(HOPELESS) };
                let stands = zone.sides.iter().flat_map(|side| &side.sections);
                let ratios = sections_m2.iter().zip(stands).map(|(need, geometry)| (need / geometry.area_m2).ln());
                Ok(ratios.fold(f64::NEG_INFINITY, f64::max))
            };
            least_diameter_m(start_m, worst)
        }
    }
}

/// The greatest area that a section of the stack needs by flood, m2.
fn required_area_m2(stack: &Stack<'_>) -> f64 {
    stack.sections.iter().map(|section| section.required_area_m2).fold(0.0, f64::max)
}

/// Sizing margins of one part in a shell of this diameter; none if a row is beyond flood or the wall cannot stand in it.
fn margins(
    model: &Model<'_>,
    placer: &Placer<'_, '_>,
    part: Part,
    diameter_m: f64,
) -> EngineResult<Option<Vec<Margin>>> {
    // In a shell too small for the wall, or where both sides are beyond flood, nothing can be placed.
    let positions = if part == Part::WallZone { placer.standing(diameter_m).ok() } else { None };
    margins_at(model, part, diameter_m, positions)
}

/// The same with the walls at these positions.
fn margins_at(
    model: &Model<'_>,
    part: Part,
    diameter_m: f64,
    positions: Option<Vec<Vec<f64>>>,
) -> EngineResult<Option<Vec<Margin>>> {
    let mut out = Vec::new();
    let of_end = |stack: &Stack<'_>, out: &mut Vec<Margin>| -> EngineResult<bool> {
        let geometry = EndGeometry::new(stack, diameter_m)?;
        Ok(stack_margins(model, stack, &geometry.sections, out))
    };
    let fits = match part {
        Part::Above => of_end(&model.above, &mut out)?,
        Part::Below => of_end(&model.below, &mut out)?,
        Part::WallZone => {
            let Some(positions) = positions else { return Ok(None) };
            let Ok(zone) = ZoneGeometry::new(model, diameter_m, positions) else { return Ok(None) };
            let sides = model.sides.iter().zip(&zone.sides);
            sides.fold(true, |fits, (side, geometry)| stack_margins(model, side, &geometry.sections, &mut out) && fits)
        }
    };
    Ok(fits.then_some(out))
}

/// False if a row is beyond flood.
fn stack_margins(model: &Model<'_>, stack: &Stack<'_>, geometry: &[SectionGeometry], out: &mut Vec<Margin>) -> bool {
    for (section, geometry) in stack.sections.iter().zip(geometry) {
        let mut worst: Vec<Margin> = Vec::new();
        for point in 0..model.points.len() {
            let Ok(rating) = rate(section, geometry, point, 1.0) else { return false };
            for judged in rating.judged.iter().filter(|j| sizes_the_shell(j.criterion)) {
                let margin =
                    Margin { criterion: judged.criterion, section: Some(section.index), point, ratio: judged.severity };
                match worst.iter_mut().find(|m| m.criterion == margin.criterion) {
                    Some(known) if known.ratio < margin.ratio => *known = margin,
                    Some(_) => {}
                    None => worst.push(margin),
                }
            }
        }
        out.extend(worst);
    }
    true
}

/// The least diameter at or above `start_m` at which `worst` (falling with the diameter) is not positive.
fn least_diameter_m(start_m: f64, worst: impl Fn(f64) -> EngineResult<f64>) -> EngineResult<f64> {
    let at_start = worst(start_m)?;
    if at_start <= AT_LIMIT {
        return Ok(start_m);
    }
    let (mut low_m, mut at_low) = (start_m, at_start);
    // Most figures go with the area, that is with the square of the diameter; a little more crosses the root at once.
    let mut log_step = (0.51 * at_start).clamp(1e-9, 0.5);
    for _ in 0..DOUBLINGS * 8 {
        let high_m = low_m * log_step.exp();
        let at_high = worst(high_m)?;
        if at_high <= 0.0 {
            let root = DesignRoot {
                what: "shell diameter",
                from: low_m.ln(),
                to: high_m.ln(),
                tolerance: LOG_TOLERANCE,
                at_ends: (at_low, at_high),
            };
            return design_root(root, |log_m| worst(log_m.exp())).map(f64::exp);
        }
        (low_m, at_low) = (high_m, at_high);
        log_step = (2.0 * log_step).min(0.7);
        if high_m > start_m * f64::from(1 << DOUBLINGS) {
            break;
        }
    }
    Err(EngineError::Search {
        what: "shell diameter".to_owned(),
        why: format!("criteria are still missed at {low_m:.1} m; look at the limits and at the tray layout"),
    })
}

/// Enlarges all sized parts by one factor until the column's pressure drop holds; none if it holds already or has no limit.
fn for_the_column(
    model: &Model<'_>,
    placer: &Placer<'_, '_>,
    least_m: [f64; 3],
    with_given: &impl Fn([f64; 3]) -> [f64; 3],
) -> EngineResult<Option<(Margin, [f64; 3])>> {
    if !model.column_limits.iter().any(|limits| limits.pressure_drop.is_some()) {
        return Ok(None);
    }
    let any_sized = with_given(least_m) != with_given(least_m.map(|d| d * 2.0));
    let worst_margin = |factor: f64| -> EngineResult<Option<Margin>> {
        let diameters_m = with_given(least_m.map(|d| d * factor));
        let Some(column) = required_column(model, placer, diameters_m)? else { return Ok(None) };
        let mut worst: Option<Margin> = None;
        for (point, limits) in model.column_limits.iter().enumerate() {
            let Some(limit) = &limits.pressure_drop else { continue };
            let Some(drop_pa) = required_drop_pa(model, &column, point) else { return Ok(None) };
            let ratio = drop_pa / limit.si;
            if worst.as_ref().is_none_or(|w| ratio > w.ratio) {
                worst = Some(Margin { criterion: Criterion::PressureDrop, section: None, point, ratio });
            }
        }
        Ok(worst)
    };
    let Some(margin) = worst_margin(1.0)? else { return Ok(None) };
    if margin.ratio <= 1.0 + AT_LIMIT || !any_sized {
        return Ok(None);
    }
    let worst = |factor: f64| -> EngineResult<f64> {
        Ok(worst_margin(factor)?.map_or(HOPELESS, |m| m.ratio.ln().min(HOPELESS)))
    };
    let factor = least_diameter_m(1.0, worst)?;
    Ok(Some((margin, least_m.map(|d| d * factor))))
}
