//! Pressure drop of the whole column.

use super::arrangement::{Arrangement, EndGeometry};
use super::model::{Model, Stack};
use super::place_wall::Placer;
use super::zone::Zone;
use crate::engine::error::EngineResult;

/// Pressure drop of the stack above or below the wall, Pa; none if its internals have no friction or are beyond flood.
pub(crate) fn end_drop_pa(stack: &Stack<'_>, geometry: &EndGeometry, point: usize) -> Option<f64> {
    let mut sum = stack.static_pa(point);
    for (section, geometry) in stack.sections.iter().zip(&geometry.sections) {
        if !section.model.has_friction() {
            return None;
        }
        sum += section.model.friction_pa(geometry, section.loads_at(point), 1.0).ok()?;
    }
    for device in &stack.devices {
        sum += device.loss_pa(point, geometry.area_m2);
    }
    Some(sum)
}

/// Pressure drop above and below the wall together, Pa.
pub(crate) fn ends_drop_pa(model: &Model<'_>, arrangement: &Arrangement, point: usize) -> Option<f64> {
    let above = end_drop_pa(&model.above, &arrangement.above, point)?;
    let below = end_drop_pa(&model.below, &arrangement.below, point)?;
    Some(above + below)
}

/// The column with its walls placed by the case's rules; none if its internals have no friction or the wall cannot stand.
pub(crate) fn required_column(
    model: &Model<'_>,
    placer: &Placer<'_, '_>,
    diameters_m: [f64; 3],
) -> EngineResult<Option<Arrangement>> {
    let [_, zone_m, _] = diameters_m;
    if !model.has_friction() {
        return Ok(None);
    }
    let Ok(positions) = placer.standing(zone_m) else { return Ok(None) };
    Arrangement::new(model, diameters_m, positions).map(Some)
}

/// Pressure drop of the column at the required shares, Pa: the wall zone counts with its greatest side. None if internals have
/// no friction or are beyond flood.
pub(crate) fn required_drop_pa(model: &Model<'_>, arrangement: &Arrangement, point: usize) -> Option<f64> {
    let zone = Zone::new(model, &arrangement.zone, point);
    let mut greatest = 0.0_f64;
    for side in &zone.sides {
        greatest = greatest.max(side.drop_pa(1.0).ok()?);
    }
    Some(ends_drop_pa(model, arrangement, point)? + greatest)
}
