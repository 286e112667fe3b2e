//! Where the wall stands: equal flood, equal pressure drop, by vapour load.

use super::arrangement::ZoneGeometry;
use super::model::{Model, Stack};
use super::state::no_answer;
use super::zone::Zone;
use crate::engine::case::Position;
use crate::engine::error::{EngineError, EngineResult};
use crate::engine::geometry::{Disc, positions_for_shares};
use crate::engine::solve::optimise::{DesignRoot, design_root};
use crate::engine::units::{Length, Si};
use std::cell::RefCell;

/// Least distance of a wall's face from its neighbour or the shell while searching, as part of the diameter.
const LEAST_GAP: f64 = 1e-6;
/// Tolerance of a position as part of the diameter.
const POSITION_TOLERANCE: f64 = 1e-12;
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

/// Positions by equal flood and by vapour load in a shell of this diameter, beside those that stand there.
pub(crate) fn positions(model: &Model<'_>, diameter_m: f64, standing: Vec<Vec<f64>>) -> EngineResult<Positions> {
    let by = |pick: fn(&BandWeights) -> &[f64]| -> EngineResult<Vec<Vec<f64>>> {
        model.weights.iter().map(|weights| by_weight(model, diameter_m, pick(weights))).collect()
    };
    Ok(Positions { equal_flood: by(|w| &w.flood)?, vapour_load: by(|w| &w.vapour_load)?, standing })
}

/// Places the walls by the case's rules, in one shell after another. What was found in the last shell is where the search in the
/// next one begins, which saves most of it.
pub(crate) struct Placer<'m, 'a> {
    model: &'m Model<'a>,
    /// Diameter and positions of the last search for equal pressure drop.
    last: RefCell<Option<(f64, Vec<f64>)>>,
}

impl<'m, 'a> Placer<'m, 'a> {
    /// Of a case.
    pub fn new(model: &'m Model<'a>) -> Self {
        Self { model, last: RefCell::new(None) }
    }

    /// The standing positions in a shell of this diameter, by band and wall.
    ///
    /// # Errors
    /// Where no position answers, or several bands ask for equal pressure drop.
    pub fn standing(&self, diameter_m: f64) -> EngineResult<Vec<Vec<f64>>> {
        let mut standing = Vec::with_capacity(self.model.weights.len());
        let mut wants_drop: Option<usize> = None;
        for (band, (stated, weights)) in self.model.case.wall.bands.iter().zip(&self.model.weights).enumerate() {
            standing.push(match &stated.position {
                Position::EqualFlood => by_weight(self.model, diameter_m, &weights.flood)?,
                Position::VapourLoad => by_weight(self.model, diameter_m, &weights.vapour_load)?,
                Position::Given(given) => given.iter().map(|x| x.si()).collect(),
                Position::EqualPressureDrop => {
                    if wants_drop.replace(band).is_some() {
                        return Err(EngineError::Search {
                            what: "wall positions".to_owned(),
                            why: "several bands say \"equal pressure drop\", and one equation cannot place them all; give all but \
                                  one a length or another rule"
                                .to_owned(),
                        });
                    }
                    self.start(diameter_m, weights)?
                }
            });
        }
        if let Some(band) = wants_drop {
            let same = self.last.borrow().as_ref().is_some_and(|(last_m, _)| *last_m == diameter_m);
            if same {
                return Ok(standing);
            }
            standing = equal_drop(self.model, diameter_m, &standing, band)?;
            *self.last.borrow_mut() = standing.get(band).map(|found| (diameter_m, found.clone()));
        }
        Ok(standing)
    }

    /// The standing positions carried over in proportion from the last shell, where a figure need only be about right.
    pub fn about(&self, diameter_m: f64) -> EngineResult<Vec<Vec<f64>>> {
        let last = self.last.borrow().clone();
        match last {
            Some((last_m, found)) => {
                *self.last.borrow_mut() = Some((diameter_m, found.iter().map(|x| x * diameter_m / last_m).collect()));
                let about = self.standing(diameter_m);
                *self.last.borrow_mut() = Some((last_m, found));
                about
            }
            None => self.standing(diameter_m),
        }
    }

    fn start(&self, diameter_m: f64, weights: &BandWeights) -> EngineResult<Vec<f64>> {
        match &*self.last.borrow() {
            Some((last_m, found)) => Ok(found.iter().map(|x| x * diameter_m / last_m).collect()),
            None => by_weight(self.model, diameter_m, &weights.flood),
        }
    }
}

/// How far the wall moves, as part of the diameter, for a unit of the residual ln(drop 1/drop 2): with drops going with the square of
/// the velocity and a wall near the axis, a tenth; a little more, so that the first step mostly crosses the root.
const STEP_PER_RESIDUAL: f64 = 0.13;
/// Least and greatest first step, as part of the diameter.
const FIRST_STEPS: (f64, f64) = (1e-10, 0.05);

/// What areas go in proportion to in one band, by compartment.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct BandWeights {
    /// The area at which the worst row of all points stands at its flood limit.
    pub flood: Vec<f64>,
    /// The greatest vapour load.
    pub vapour_load: Vec<f64>,
}

impl BandWeights {
    /// Of one band. A compartment without a section in the band takes the figure of the whole compartment.
    pub fn new(sides: &[Stack<'_>], band: usize) -> Self {
        let mut out = Self::default();
        for side in sides {
            let of = |any_band: bool| {
                let (mut flood, mut vapour_load) = (0.0_f64, 0.0_f64);
                for section in side.sections.iter().filter(|s| any_band || s.section.band == band) {
                    flood = flood.max(section.required_area_m2);
                    for point in 0..section.limits.len() {
                        let loads = section.loads_at(point).iter().map(|load| load.vapour_load_m3_s());
                        vapour_load = loads.fold(vapour_load, f64::max);
                    }
                }
                (flood, vapour_load)
            };
            let in_band = of(false);
            let (flood, vapour_load) = if in_band.0 > 0.0 { in_band } else { of(true) };
            out.flood.push(flood);
            out.vapour_load.push(vapour_load);
        }
        out
    }
}

/// Areas in proportion to weights.
fn by_weight(model: &Model<'_>, diameter_m: f64, weights: &[f64]) -> EngineResult<Vec<f64>> {
    let disc = Disc::from_diameter(Length::from_si(diameter_m))?;
    let positions = positions_for_shares(&disc, weights, model.case.wall.thickness)?;
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
        let geometry = ZoneGeometry::new(model, diameter_m, with(positions))?;
        let zone = Zone::new(model, &geometry, DESIGN);
        let (Some(first), Some(second)) = (zone.sides.get(wall), zone.sides.get(wall + 1)) else {
            return Err(EngineError::Geometry { what: format!("wall {wall} does not stand between two compartments") });
        };
        match (first.drop_pa(1.0), second.drop_pa(1.0)) {
            (Ok(first_pa), Ok(second_pa)) => Ok((first_pa / second_pa).ln()),
            (Err(_), Ok(_)) => Ok(FLOODED),
            (Ok(_), Err(_)) => Ok(-FLOODED),
            // Wherever the wall stands in this shell, some row is beyond flood.
            (Err(beyond), Err(_)) => Err(no_answer(model, &geometry, DESIGN, wall, beyond)),
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
            let found = place_one(model, diameter_m, (&positions, wall), &residual)?;
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
    (positions, wall): (&[f64], usize),
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
    let (least, greatest) = FIRST_STEPS;
    let first_step = (STEP_PER_RESIDUAL * first.abs()).clamp(least, greatest);
    let (mut near, mut at_near, mut step) = (start, first, first_step * diameter_m);
    let mut bracket = None;
    for _ in 0..60 {
        let far = (near + direction * step).clamp(low, high);
        match at(far) {
            Ok(value) if value * direction <= 0.0 => {
                bracket = Some(((near, at_near), (far, value)));
                break;
            }
            Ok(_) if far == low || far == high => break,
            Ok(value) => {
                (near, at_near) = (far, value);
                step *= 2.0;
            }
            Err(_) => step *= 0.5,
        }
    }
    let ((from, at_from), (to, at_to)) = bracket.ok_or_else(|| EngineError::Search {
        what: "the position of the wall".to_owned(),
        why: "no position within the shell makes the two sides equal".to_owned(),
    })?;
    let tolerance = POSITION_TOLERANCE * diameter_m;
    let root = DesignRoot { what: "position of the wall", from, to, tolerance, at_ends: (at_from, at_to) };
    design_root(root, at)
}
