//! Figures of every section for the answer: floods, loads on the place, trays, rows.

use super::judge::{Bench, BothRatings};
use super::model::{CompiledSection, Model};
use crate::engine::case::Place;
use crate::engine::error::{EngineError, EngineResult};
use crate::engine::findings::{Criterion, Finding};
use crate::engine::geometry::{Deck, TrayLayout};
use crate::engine::hydraulics::load::StageLoad;
use crate::engine::hydraulics::section::SectionGeometry;
use crate::engine::hydraulics::tray::{SieveTray, TrayFigures};
use crate::engine::result::{SectionResult, StageResult, TrayResult};
use crate::engine::units::{
    Area, FFactor, Length, MassRate, Pressure, PressureGradient, Si, Time, Velocity, VolumeRate, WeirLoad,
};

/// The design point, at which the figures of an answer stand.
const DESIGN: usize = 0;

pub(crate) fn sections(bench: &Bench<'_, '_>, findings: &[Finding]) -> EngineResult<Vec<SectionResult>> {
    let design = bench.model.points.first().map_or("", |p| p.name);
    let in_range = |section: &str| {
        !findings.iter().any(|f| f.criterion == Criterion::Range && f.point == design && f.subject == section)
    };
    let mut out: Vec<(usize, SectionResult)> = Vec::new();
    let mut ratings = bench.ratings(DESIGN).iter();
    for (stack, (geometry, _)) in bench.model.stacks().zip(bench.arrangement.stacks()) {
        for ((section, geometry), ratings) in stack.sections.iter().zip(geometry).zip(ratings.by_ref()) {
            let in_range = in_range(&section.section.name);
            let place = (stack.place, in_range);
            let result = section_result(bench.model, section, geometry, place, ratings)?;
            out.push((section.index, result));
        }
    }
    out.sort_by_key(|(index, _)| *index);
    Ok(out.into_iter().map(|(_, result)| result).collect())
}

fn section_result(
    model: &Model<'_>,
    section: &CompiledSection<'_>,
    geometry: &SectionGeometry,
    (place, in_range): (Place, bool),
    (required, at_actual): &BothRatings<'_>,
) -> EngineResult<SectionResult> {
    let loads = section.loads_at(DESIGN);
    let flood = required.flood();
    let row = flood.and_then(|f| f.row).unwrap_or(0);
    let load = loads.get(row).copied().ok_or_else(|| EngineError::Search {
        what: format!("rows of section \"{}\"", section.section.name),
        why: "the design point has none".to_owned(),
    })?;
    let rows = model.case.points.first().and_then(|p| p.loads.get(section.index));
    let stage = |row: usize| rows.and_then(|rows| rows.get(row)).map_or_else(String::new, |r| r.stage.clone());
    let (f_factor, capacity_factor, liquid_load) = on_place(&load, geometry.area_m2);
    Ok(SectionResult {
        name: section.section.name.clone(),
        place: model.place_name(place).to_owned(),
        internals: model.case.internals.get(section.section.internals).map_or_else(String::new, |i| i.name.clone()),
        flood_method: section.model.flood_method().to_owned(),
        pressure_drop_method: section.model.drop_method().map(str::to_owned),
        area: Area::from_si(geometry.area_m2),
        required_area: Area::from_si(section.required_area_m2),
        flood: flood.map_or(f64::NAN, |f| f.si),
        flood_actual: at_actual.as_ref().and_then(|r| r.flood().map(|f| f.si)),
        f_factor,
        capacity_factor,
        flow_parameter: load.flow_parameter(),
        liquid_load,
        friction: required.friction_pa.map(Pressure::from_si),
        friction_actual: at_actual.as_ref().and_then(|r| r.friction_pa).map(Pressure::from_si),
        static_head: Pressure::from_si(section.static_pa(DESIGN)),
        governing_stage: stage(row),
        in_range,
        tray: section
            .model
            .tray()
            .zip(geometry.layout.as_ref())
            .map(|(tray, layout)| tray_result(tray, layout, loads, geometry.area_m2)),
        stages: loads.iter().enumerate().map(|(row, load)| stage_result(section, geometry, load, stage(row))).collect(),
    })
}

/// F-factor, capacity factor and liquid load on the area of the place.
fn on_place(load: &StageLoad, area_m2: f64) -> (FFactor, Velocity, Velocity) {
    let velocity_m_s = load.vapour_m3_s() / area_m2;
    (
        FFactor::from_root_pascal(velocity_m_s * load.rho_v_kg_m3.sqrt()),
        Velocity::from_si(velocity_m_s * load.capacity_group()),
        Velocity::from_si(load.liquid_m3_s() / area_m2),
    )
}

fn stage_result(
    section: &CompiledSection<'_>,
    geometry: &SectionGeometry,
    load: &StageLoad,
    stage: String,
) -> StageResult {
    let (f_factor, capacity_factor, liquid_load) = on_place(load, geometry.area_m2);
    let gradient =
        if section.model.has_friction() { section.model.friction_gradient_pa_m(geometry, load) } else { None };
    StageResult {
        stage,
        vapour_flow: MassRate::from_si(load.vapour_kg_s),
        liquid_flow: MassRate::from_si(load.liquid_kg_s),
        vapour_volume_flow: VolumeRate::from_si(load.vapour_m3_s()),
        flood: section.model.flooding_area_m2(load) / geometry.area_m2,
        f_factor,
        capacity_factor,
        flow_parameter: load.flow_parameter(),
        liquid_load,
        friction_gradient: gradient.map(PressureGradient::from_si),
    }
}

fn tray_result(tray: &SieveTray, layout: &TrayLayout, loads: &[StageLoad], area_m2: f64) -> TrayResult {
    let least = |pick: fn(&Deck) -> f64| layout.decks().iter().map(pick).fold(f64::INFINITY, f64::min);
    let all: Vec<_> = loads.iter().map(|load| (load, tray.figures(layout, load))).collect();
    let greatest = |pick: &dyn Fn(&StageLoad, &TrayFigures) -> f64| {
        all.iter().map(|(load, figures)| pick(load, figures)).fold(0.0, f64::max)
    };
    let smallest =
        |pick: &dyn Fn(&TrayFigures) -> f64| all.iter().map(|(_, figures)| pick(figures)).fold(f64::INFINITY, f64::min);
    let worst_drop = all.iter().max_by(|a, b| a.1.drop_pa.total_cmp(&b.1.drop_pa));
    TrayResult {
        net_area: Area::from_si(least(|d| d.net_area.si())),
        active_area: Area::from_si(least(|d| d.active_area.si())),
        hole_area: Area::from_si(least(|d| d.hole_area.si())),
        downcomer_area: Area::from_si(least(|d| d.downcomer_area.si())),
        weir_length: Length::from_si(least(|d| {
            d.passes().iter().map(|p| p.weir.length().si()).fold(f64::INFINITY, f64::min)
        })),
        flow_path: Length::from_si(shortest_path_m(layout)),
        pressure_drop_per_tray: Pressure::from_si(greatest(&|_, f| f.drop_pa)),
        dry_head: Length::from_si(greatest(&|_, f| f.dry_head_m)),
        liquid_head: Length::from_si(worst_drop.map_or(0.0, |(_, f)| f.liquid_head_m)),
        entrainment: greatest(&|load, _| tray.entrainment(load, tray.flooding_area_m2(load) / area_m2)),
        system_limit: greatest(&|load, _| tray.system_limit_area_m2(load) / area_m2),
        downcomer_froth: greatest(&|_, f| f.froth),
        downcomer_velocity: Velocity::from_si(greatest(&|_, f| f.downcomer_velocity_m_s)),
        downcomer_residence: Time::from_si(smallest(&|f| f.downcomer_residence_s)),
        apron_velocity: Velocity::from_si(greatest(&|_, f| f.apron_velocity_m_s)),
        weir_load: WeirLoad::from_si(greatest(&|_, f| f.weir_load_m2_s)),
        weep: greatest(&|_, f| f.weep),
        hole_velocity_over_weep_onset: smallest(&|f| f.hole_velocity_over_onset),
    }
}

/// Shortest flow path of all decks and passes, m.
pub(crate) fn shortest_path_m(layout: &TrayLayout) -> f64 {
    let paths = layout.decks().iter().flat_map(|deck| deck.passes().iter().map(|pass| pass.flow_path.si()));
    paths.fold(f64::INFINITY, f64::min)
}
