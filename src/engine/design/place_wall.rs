//! Where the wall stands: equal flood, equal pressure drop, by vapour load.

use super::arrangement::ZoneGeometry;
use super::model::Model;
use super::zone::Zone;
use crate::engine::case::Position;
use crate::engine::error::{EngineError, EngineResult};
use crate::engine::geometry::{Disc, positions_for_shares};
use crate::engine::solve::optimise::{DesignRoot, design_root};
use crate::engine::units::{Length, Si};

/// Least distance of a wall's face from its neighbour or the shell while searching, as part of the diameter.
const LEAST_GAP: f64 = 1e-6;
/// Tolerance of a position as part of the diameter.
const POSITION_TOLERANCE: f64 = 1e-14;
/// Sweeps over several walls, each of which is put right with the others held; two compartments need one.
const SWEEPS: usize = 200;
/// Stands for the logarithm of an endless pressure drop (a flooded side); beyond any real ratio of drops.
const FLOODED: f64 = 60.0;

/// The design point, at which pressure drops are made equal (definition 3).
const DESIGN: usize = 0;

/// Positions by rule in every band, and those that stand.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct Positions {
    pub equal_flood: Vec<Vec<f64>>,
    pub vapour_load: Vec<Vec<f64>>,
    pub standing: Vec<Vec<f64>>,
}

/// Positions by equal flood and by vapour load, and the standing ones, in a shell of this diameter.
pub(crate) fn positions(model: &Model<'_>, diameter_m: f64) -> EngineResult<Positions> {
    let mut out = Positions::default();
    let mut wants_drop: Option<usize> = None;
    for (band, stated) in model.case.wall.bands.iter().enumerate() {
        let flood = by_weight(model, diameter_m, &weights(model, band, Weight::Flood))?;
        let load = by_weight(model, diameter_m, &weights(model, band, Weight::VapourLoad))?;
        out.standing.push(match &stated.position {
            Position::EqualFlood => flood.clone(),
            Position::VapourLoad => load.clone(),
            Position::Given(given) => given.iter().map(|x| x.si()).collect(),
            Position::EqualPressureDrop => {
                if wants_drop.replace(band).is_some() {
                    return Err(EngineError::Search {
                        what: "wall positions".to_owned(),
                        why: "several bands say \"equal pressure drop\", and one equation cannot place them all; give all but one \
                              a length or another rule"
                            .to_owned(),
                    });
                }
                flood.clone()
            }
        });
        out.equal_flood.push(flood);
        out.vapour_load.push(load);
    }
    if let Some(band) = wants_drop {
        out.standing = equal_drop(model, diameter_m, &out.standing, band)?;
    }
    Ok(out)
}

/// The standing positions alone.
pub(crate) fn standing(model: &Model<'_>, diameter_m: f64) -> EngineResult<Vec<Vec<f64>>> {
    positions(model, diameter_m).map(|p| p.standing)
}

/// What areas go in proportion to.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Weight {
    /// The area at which the worst row of all points stands at its flood limit.
    Flood,
    /// The greatest vapour load.
    VapourLoad,
}

fn weights(model: &Model<'_>, band: usize, weight: Weight) -> Vec<f64> {
    let of_side = |side: &super::model::Stack<'_>, any_band: bool| {
        let mut greatest = 0.0_f64;
        for section in side.sections.iter().filter(|s| any_band || s.section.band == band) {
            for (point, limits) in section.limits.iter().enumerate() {
                for load in section.loads_at(point) {
                    greatest = greatest.max(match weight {
                        Weight::Flood => section.model.flooding_area_m2(load) / limits.flood.si,
                        Weight::VapourLoad => load.vapour_load_m3_s(),
                    });
                }
            }
        }
        greatest
    };
    model
        .sides
        .iter()
        .map(|side| {
            let in_band = of_side(side, false);
            // A compartment without a section in this band takes the load of the whole compartment.
            if in_band > 0.0 { in_band } else { of_side(side, true) }
        })
        .collect()
}

/// Areas in proportion to weights.
fn by_weight(model: &Model<'_>, diameter_m: f64, weights: &[f64]) -> EngineResult<Vec<f64>> {
    let disc = Disc::from_diameter(Length::from_si(diameter_m))?;
    let sum: f64 = weights.iter().sum();
    let shares: Vec<f64> = weights.iter().map(|weight| weight / sum).collect();
    let positions = positions_for_shares(&disc, &shares, model.case.wall.thickness)?;
    Ok(positions.into_iter().map(Si::si).collect())
}

/// Equal pressure drop at the design point and the required shares, moving the walls of one band.
pub(crate) fn equal_drop(
    model: &Model<'_>,
    diameter_m: f64,
    others: &[Vec<f64>],
    band: usize,
) -> EngineResult<Vec<Vec<f64>>> {
    let with = |positions: &[f64]| -> Vec<Vec<f64>> {
        let replace = |(b, walls): (usize, &Vec<f64>)| if b == band { positions.to_vec() } else { walls.clone() };
        others.iter().enumerate().map(replace).collect()
    };
    let start = others.get(band).cloned().unwrap_or_default();
    let found = sweep(model, diameter_m, start, |positions, wall| {
        let zone = ZoneGeometry::new(model, diameter_m, with(positions))?;
        let zone = Zone::new(model, &zone, DESIGN);
        let drop = |side: usize| zone.sides.get(side).and_then(|s| s.drop_pa(1.0).ok()).map(f64::ln);
        match (drop(wall), drop(wall + 1)) {
            (Some(first), Some(second)) => Ok(first - second),
            (None, Some(_)) => Ok(FLOODED),
            (Some(_), None) => Ok(-FLOODED),
            (None, None) => Err(EngineError::Search {
                what: "the position of equal pressure drop".to_owned(),
                why: "both sides are beyond flood in this shell".to_owned(),
            }),
        }
    })?;
    Ok(with(&found))
}

/// Puts every wall where `residual(positions, wall)` is zero. The residual compares the two neighbours of the wall (need of the
/// first less need of the second, as logarithms) and falls as the wall moves towards the second.
fn sweep(
    model: &Model<'_>,
    diameter_m: f64,
    mut positions: Vec<f64>,
    residual: impl Fn(&[f64], usize) -> EngineResult<f64>,
) -> EngineResult<Vec<f64>> {
    let walls = positions.len();
    for _ in 0..SWEEPS {
        let mut moved_m = 0.0_f64;
        for wall in 0..walls {
            let before = positions.get(wall).copied().unwrap_or(0.0);
            let found = place_one(model, diameter_m, &positions, wall, &residual)?;
            moved_m = moved_m.max((found - before).abs());
            if let Some(position) = positions.get_mut(wall) {
                *position = found;
            }
        }
        if walls == 1 || moved_m <= 1e-12 * diameter_m {
            return Ok(positions);
        }
    }
    Err(EngineError::Search {
        what: "wall positions".to_owned(),
        why: format!("{walls} walls did not settle within {SWEEPS} sweeps; give one of them a length"),
    })
}

fn place_one(
    model: &Model<'_>,
    diameter_m: f64,
    positions: &[f64],
    wall: usize,
    residual: impl Fn(&[f64], usize) -> EngineResult<f64>,
) -> EngineResult<f64> {
    let thickness_m = model.case.wall.thickness.si();
    let gap_m = LEAST_GAP * diameter_m;
    let neighbour = |index: Option<usize>, edge: f64, sign: f64| {
        index
            .and_then(|i| positions.get(i))
            .map_or(edge + sign * (0.5 * thickness_m + gap_m), |x| x + sign * (thickness_m + gap_m))
    };
    let low = neighbour(wall.checked_sub(1), -0.5 * diameter_m, 1.0);
    let high = neighbour(Some(wall + 1), 0.5 * diameter_m, -1.0);
    let start = positions.get(wall).copied().unwrap_or(0.0).clamp(low, high);
    let mut trial = positions.to_vec();
    let mut at = |x: f64| {
        if let Some(position) = trial.get_mut(wall) {
            *position = x;
        }
        residual(&trial, wall)
    };
    let first = at(start)?;
    // Walk from the start towards the sign change, so that shapes which cannot be built near the shell are never asked for.
    let direction = if first >= 0.0 { 1.0 } else { -1.0 };
    let (mut near, mut step) = (start, 0.02 * diameter_m);
    let mut bracket = None;
    for _ in 0..60 {
        let far = (near + direction * step).clamp(low, high);
        match at(far) {
            Ok(value) if value * direction <= 0.0 => {
                bracket = Some((near.min(far), near.max(far)));
                break;
            }
            Ok(_) if far == low || far == high => break,
            Ok(_) => {
                near = far;
                step *= 1.6;
            }
            Err(_) => step *= 0.5,
        }
    }
    let (from, to) = bracket.ok_or_else(|| EngineError::Search {
        what: "the position of the wall".to_owned(),
        why: "no position within the shell makes the two sides equal".to_owned(),
    })?;
    let root = DesignRoot { what: "position of the wall", from, to, tolerance: POSITION_TOLERANCE * diameter_m };
    design_root(root, at)
}
