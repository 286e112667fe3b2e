//! One case held ready for repeated evaluation: what benches time, and what a sampling of the same case calls again and again.

use super::arrangement::Arrangement;
use super::balance::all_balances;
use super::model::Model;
use super::place_wall::Placer;
use super::size::size;
use super::zone::Zone;
use crate::engine::case::Case;
use crate::engine::correlation::catalogue::Catalogue;
use crate::engine::error::EngineResult;
use crate::engine::result::Solution;
use crate::engine::units::{Pressure, Si};

/// A compiled case in its shell.
pub struct Probe<'a> {
    model: Model<'a>,
    arrangement: Arrangement,
}

impl<'a> Probe<'a> {
    /// Compiles and sizes a case.
    ///
    /// # Errors
    /// As [`super::work`].
    pub fn new(case: &'a Case, catalogue: &'a Catalogue) -> EngineResult<Self> {
        let model = Model::new(case, catalogue)?;
        let placer = Placer::new(&model);
        let sized = size(&model, &placer)?;
        let [_, zone_m, _] = sized.diameters_m;
        let standing = placer.standing(zone_m)?;
        let arrangement = Arrangement::new(&model, sized.diameters_m, standing)?;
        Ok(Self { model, arrangement })
    }

    /// Rows beside the wall at a point.
    pub fn rows(&self, point: usize) -> usize {
        self.model.sides.iter().flat_map(|side| &side.sections).map(|section| section.loads_at(point).len()).sum()
    }

    /// Pressure drop of one compartment with its vapour multiplied; none beyond flood.
    pub fn pressure_drop(&self, point: usize, side: usize, factor: f64) -> Option<Pressure> {
        let zone = Zone::new(&self.model, &self.arrangement.zone, point);
        zone.sides.get(side)?.drop_pa(factor).ok().map(Pressure::from_si)
    }

    /// All balances at a point, and how often both sides' drops were worked out for them.
    pub fn balances(&self, point: usize) -> (Vec<Solution>, usize) {
        let found = all_balances(&Zone::new(&self.model, &self.arrangement.zone, point));
        let solutions = found.all.into_iter().map(|b| Solution {
            shares: b.shares,
            pressure_drop: Pressure::from_si(b.pressure_pa),
            stable: b.stable,
        });
        (solutions.collect(), found.evaluations)
    }

    /// The bare correlation calls of one evaluation of both sides: every row's friction once, straight from its evaluator, added
    /// up so that nothing is optimised away. Pa per metre or per tray, of no meaning beyond that.
    pub fn bare_rows(&self, point: usize, factor: f64) -> f64 {
        let mut sum = 0.0;
        for (side, geometry) in self.model.sides.iter().zip(&self.arrangement.zone.sides) {
            for (section, geometry) in side.sections.iter().zip(&geometry.sections) {
                for load in section.loads_at(point) {
                    sum += section.model.row_friction(geometry, &load.with_vapour(factor), None).unwrap_or(0.0);
                }
            }
        }
        sum
    }
}
