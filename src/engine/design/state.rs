//! The wall zone at one point: drops at the required shares, the balances, and the shares that will really stand.

use super::arrangement::ZoneGeometry;
use super::balance::{Balances, all_balances};
use super::model::Model;
use super::zone::{Beyond, Exponents, Zone};
use crate::engine::case::Reach;
use crate::engine::error::{EngineError, EngineResult};

/// What holds at one point.
#[derive(Clone, Debug, Default)]
pub(crate) struct PointState {
    /// Total drop of each side at the required shares, Pa; empty if there is no friction to work with.
    pub required_drop_pa: Vec<f64>,
    /// Friction likewise.
    pub required_friction_pa: Vec<f64>,
    /// Response exponents at the required shares; none at the brink of flood.
    pub required_exponents: Vec<Option<Exponents>>,
    /// All balances.
    pub balances: Balances,
    /// The actual shares, if there are any.
    pub actual: Option<Vec<f64>>,
    /// Common drop at the actual shares, Pa.
    pub actual_drop_pa: Option<f64>,
    /// Response exponents at the actual shares.
    pub actual_exponents: Vec<Option<Exponents>>,
}

/// Why a case has no balance at all, if so.
pub(crate) fn absent_because(model: &Model<'_>) -> Option<String> {
    match model.case.wall.reach {
        Reach::Top => Some("the wall is closed at the top head: nothing equalizes the pressure drops, condensers and their control set the split".to_owned()),
        Reach::Bottom => Some("the wall is closed at the bottom head: nothing equalizes the pressure drops, each side's own reboiler sets its vapour".to_owned()),
        Reach::Middle => {
            let silent: Vec<&str> = model
                .sides
                .iter()
                .flat_map(|side| &side.sections)
                .filter(|section| !section.model.has_friction())
                .map(|section| section.section.name.as_str())
                .collect();
            (!silent.is_empty()).then(|| format!("no resistance is declared for {}, so there is no balance", silent.join(", ")))
        }
    }
}

impl PointState {
    /// Works out one point.
    ///
    /// # Errors
    /// [`EngineError::NoAnswer`] if a row is beyond flood at the required shares.
    pub fn new(model: &Model<'_>, geometry: &ZoneGeometry, point: usize) -> EngineResult<Self> {
        if !model.has_friction() {
            return Ok(Self::default());
        }
        let zone = Zone::new(model, geometry, point);
        let mut state = Self::default();
        for (index, side) in zone.sides.iter().enumerate() {
            let friction_pa =
                side.friction_pa(1.0).map_err(|beyond| no_answer(model, geometry, point, index, beyond))?;
            state.required_friction_pa.push(friction_pa);
            state.required_drop_pa.push(friction_pa + side.static_pa);
            state.required_exponents.push(side.exponents_at(1.0, friction_pa).ok());
        }
        if model.case.wall.reach == Reach::Middle {
            state.balance(&zone);
        }
        Ok(state)
    }

    fn balance(&mut self, zone: &Zone<'_>) {
        self.balances = all_balances(zone);
        if let Some(balance) = self.balances.actual(zone.required) {
            let (shares, pressure_pa) = (balance.shares.clone(), balance.pressure_pa);
            self.actual_exponents = zone
                .sides
                .iter()
                .zip(shares.iter().zip(zone.required))
                .map(|(side, (share, required))| side.exponents_at(share / required, pressure_pa - side.static_pa).ok())
                .collect();
            self.actual_drop_pa = Some(pressure_pa);
            self.actual = Some(shares);
        }
    }

    /// Factor on the vapour at the lower edge of one side at the actual shares.
    pub fn actual_factor(&self, model: &Model<'_>, point: usize, side: usize) -> Option<f64> {
        let share = self.actual.as_ref()?.get(side)?;
        Some(share / model.required(point).get(side)?)
    }

    /// First-listed less last-listed drop at the required shares, Pa.
    pub fn imbalance_pa(&self) -> Option<f64> {
        Some(self.required_drop_pa.first()? - self.required_drop_pa.last()?)
    }
}

/// The error for a row of a compartment that is beyond flood at the required shares.
pub(crate) fn no_answer(
    model: &Model<'_>,
    geometry: &ZoneGeometry,
    point: usize,
    side: usize,
    beyond: Beyond,
) -> EngineError {
    let area_m2 = geometry.sides.get(side).map_or(f64::NAN, |g| g.area_m2);
    no_answer_at(model, point, beyond, area_m2, 1.0)
}

/// The error for a row beyond flood anywhere; `factor` is that on the section's vapour.
pub(crate) fn no_answer_at(model: &Model<'_>, point: usize, beyond: Beyond, area_m2: f64, factor: f64) -> EngineError {
    let compiled = model.stacks().flat_map(|stack| &stack.sections).find(|s| s.index == beyond.section);
    let case_point = model.case.points.get(point);
    let row = case_point.and_then(|p| p.loads.get(beyond.section)).and_then(|rows| rows.get(beyond.row));
    let load = compiled.and_then(|s| s.loads_at(point).get(beyond.row).map(|l| l.with_vapour(factor)));
    let flood = compiled.zip(load).map(|(s, load)| s.model.flooding_area_m2(&load) / area_m2);
    EngineError::NoAnswer {
        correlation: compiled.and_then(|s| s.model.drop_method()).unwrap_or("pressure drop").to_owned(),
        section: compiled.map_or_else(String::new, |s| s.section.name.clone()),
        stage: row.map_or_else(String::new, |r| r.stage.clone()),
        point: case_point.map_or_else(String::new, |p| p.name.clone()),
        why: format!(
            "the load is beyond flood, {:.0} % of the flooding velocity; a larger shell or a packing of greater capacity is needed",
            100.0 * flood.unwrap_or(f64::NAN)
        ),
        vapour_kg_s: load.map_or(f64::NAN, |l| l.vapour_kg_s),
        liquid_kg_s: load.map_or(f64::NAN, |l| l.liquid_kg_s),
        area_m2,
    }
}

/// d(actual share of the first-listed compartment)/d(position of one wall), 1/m, by implicit differentiation of the balance.
pub(crate) fn share_per_m(
    model: &Model<'_>,
    geometry: &ZoneGeometry,
    actual: &[f64],
    point: usize,
    band: usize,
    wall: usize,
) -> Option<f64> {
    let step_m = super::zone::DIFFERENCE_STEP * geometry.diameter_m;
    let up = geometry.moved(model, band, wall, step_m).ok()?;
    let down = geometry.moved(model, band, wall, -step_m).ok()?;
    let (up, down) = (Zone::new(model, &up, point), Zone::new(model, &down, point));
    let here = Zone::new(model, geometry, point);
    let mut sum_push = 0.0;
    let mut sum_yield = 0.0;
    let mut first: Option<(f64, f64)> = None;
    for (side, share) in actual.iter().enumerate() {
        let slope_pa = here.slope_pa(side, *share)?;
        let push_pa_m = (up.drop_pa(side, *share)? - down.drop_pa(side, *share)?) / (2.0 * step_m);
        sum_push += push_pa_m / slope_pa;
        sum_yield += 1.0 / slope_pa;
        first = first.or(Some((push_pa_m, slope_pa)));
    }
    // All drops stay equal to one pressure P and the shares keep their sum: dP follows, then each share's change.
    let pressure_pa_m = sum_push / sum_yield;
    first.map(|(push_pa_m, slope_pa)| (pressure_pa_m - push_pa_m) / slope_pa).filter(|d| d.is_finite())
}
