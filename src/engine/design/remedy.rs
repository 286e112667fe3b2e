//! What would bring a missed split back, each way re-rated at every point.

use super::arrangement::ZoneGeometry;
use super::balance::all_balances;
use super::model::Model;
use super::place_wall::equal_drop;
use super::state::PointState;
use super::zone::Zone;
use crate::engine::result::{Remedy, RemedyPoint};
use crate::engine::units::{Length, Pressure, Si};

/// The design point, for which remedies are worked out.
const DESIGN: usize = 0;

/// One change of one side's resistance.
#[derive(Clone, Copy, Debug)]
struct Change {
    side: usize,
    /// Loss added at the design load and required share, Pa.
    added_pa: f64,
    /// Factor on the side's friction.
    scale: f64,
}

/// All remedies for two compartments and more: the wall moved; for each compartment whose drop is off the mean of the others,
/// the resistance that would do it.
pub(crate) fn remedies(model: &Model<'_>, geometry: &ZoneGeometry, state: &PointState) -> Vec<Remedy> {
    let mut out = Vec::new();
    for band in 0..geometry.positions_m.len() {
        out.extend(move_wall(model, geometry, band));
    }
    let highest = extreme(&state.required_drop_pa, |a, b| a > b);
    let lowest = extreme(&state.required_drop_pa, |a, b| a < b);
    if let (Some((high, high_pa)), Some((low, low_pa))) = (highest, lowest)
        && high != low
    {
        // With two sides this balances exactly; with more, the extreme ones are brought together and the rest reported.
        let gap_pa = high_pa - low_pa;
        out.extend(resistance(model, geometry, state, Change { side: low, added_pa: gap_pa, scale: 1.0 }));
        let friction_pa = state.required_friction_pa.get(high).copied().unwrap_or(0.0);
        if friction_pa > gap_pa {
            let scale = (friction_pa - gap_pa) / friction_pa;
            out.extend(resistance(model, geometry, state, Change { side: high, added_pa: 0.0, scale }));
        }
    }
    out
}

fn extreme(values: &[f64], better: impl Fn(f64, f64) -> bool) -> Option<(usize, f64)> {
    let mut best: Option<(usize, f64)> = None;
    for (index, value) in values.iter().enumerate() {
        if best.is_none_or(|(_, b)| better(*value, b)) {
            best = Some((index, *value));
        }
    }
    best
}

fn move_wall(model: &Model<'_>, geometry: &ZoneGeometry, band: usize) -> Option<Remedy> {
    let positions_m = equal_drop(model, geometry.diameter_m, &geometry.positions_m, band).ok()?;
    let moved = ZoneGeometry::new(model, geometry.diameter_m, positions_m).ok()?;
    let walls = moved.positions_m.get(band)?;
    let name = model.case.wall.bands.get(band).map_or("", |b| b.name.as_str());
    let place = if name.is_empty() { String::new() } else { format!(" in band \"{name}\"") };
    let listed: Vec<String> = walls.iter().map(|x| format!("{:+.1} mm", x * 1e3)).collect();
    Some(Remedy {
        what: format!("move the wall{place} to {} (equal pressure drop)", listed.join(" and ")),
        compartment: None,
        pressure: None,
        factor: None,
        position: walls.first().map(|x| Length::from_si(*x)),
        points: rate_points(model, &moved, None),
    })
}

fn resistance(model: &Model<'_>, geometry: &ZoneGeometry, state: &PointState, change: Change) -> Option<Remedy> {
    let friction_pa = *state.required_friction_pa.get(change.side)?;
    let name = model.case.compartments.get(change.side).map(|c| c.name.clone())?;
    let pressure_pa = if change.added_pa > 0.0 { change.added_pa } else { friction_pa * (change.scale - 1.0) };
    let factor = (friction_pa + pressure_pa) / friction_pa;
    let what = if change.added_pa > 0.0 {
        format!(
            "add {:.2} mbar to \"{name}\" at the design load (friction x {factor:.3}), by a restriction at its lower edge",
            pressure_pa / 100.0
        )
    } else {
        format!(
            "take {:.2} mbar off \"{name}\" at the design load (friction x {factor:.3}), by shorter beds or more open internals",
            -pressure_pa / 100.0
        )
    };
    Some(Remedy {
        what,
        compartment: Some(name),
        pressure: Some(Pressure::from_si(pressure_pa)),
        factor: Some(factor),
        position: None,
        points: rate_points(model, geometry, Some(change)),
    })
}

fn rate_points(model: &Model<'_>, geometry: &ZoneGeometry, change: Option<Change>) -> Vec<RemedyPoint> {
    let design_kg_s = |side: usize| model.sides.get(side).and_then(|s| s.bottom(DESIGN)).map_or(1.0, |l| l.vapour_kg_s);
    model
        .points
        .iter()
        .enumerate()
        .map(|(point, of_point)| {
            let mut zone = Zone::new(model, geometry, point);
            if let Some(change) = change
                && let Some(side) = zone.sides.get_mut(change.side)
            {
                let here_kg_s =
                    model.sides.get(change.side).and_then(|s| s.bottom(point)).map_or(1.0, |l| l.vapour_kg_s);
                side.add_restriction(change.added_pa * (here_kg_s / design_kg_s(change.side)).powi(2));
                side.friction_scale = change.scale;
            }
            let balances = all_balances(&zone);
            let shares = balances.actual(&of_point.required).map(|b| b.shares.clone());
            let floods = shares.as_ref().map_or_else(Vec::new, |shares| floods(model, geometry, point, shares));
            RemedyPoint { point: of_point.name.to_owned(), shares, floods }
        })
        .collect()
}

/// Worst flood of each compartment at these shares.
fn floods(model: &Model<'_>, geometry: &ZoneGeometry, point: usize, shares: &[f64]) -> Vec<f64> {
    model
        .sides
        .iter()
        .zip(&geometry.sides)
        .zip(shares.iter().zip(model.required(point)))
        .map(|((side, geometry), (share, required))| {
            let mut worst = 0.0_f64;
            for (section, geometry) in side.sections.iter().zip(&geometry.sections) {
                let factor = section.factor(point, share / required);
                for load in section.loads_at(point) {
                    worst = worst.max(section.model.flooding_area_m2(&load.with_vapour(factor)) / geometry.area_m2);
                }
            }
            worst
        })
        .collect()
}
