//! The whole way from a checked case to an answer.

use super::arrangement::Arrangement;
use super::column::end_drop_pa;
use super::judge::Bench;
use super::limits::Limit;
use super::model::{CompiledSection, Model};
use super::place_wall::{Positions, equal_drop, positions};
use super::rate::rate;
use super::remedy::remedies;
use super::size::{Margin, PARTS, Part, Sized, required_area_m2, size};
use super::state::{PointState, absent_because, no_answer_at, share_per_m};
use super::zone::Beyond;
use crate::engine::case::{Case, Diameter, Place, Position, Reach};
use crate::engine::correlation::catalogue::Catalogue;
use crate::engine::correlation::form::Form;
use crate::engine::error::{EngineError, EngineResult, finite};
use crate::engine::findings::{Criterion, Finding, LimitUsed, Status};
use crate::engine::geometry::{Disc, TrayLayout};
use crate::engine::hydraulics::load::StageLoad;
use crate::engine::hydraulics::packing::first_of;
use crate::engine::hydraulics::section::{Hydraulics, SectionGeometry};
use crate::engine::hydraulics::tray::SieveTray;
use crate::engine::result::{
    Answer, BalanceResult, CompartmentResult, GovernedBy, SectionResult, ShellResult, Solution, StageResult,
    TrayResult, WallResult,
};
use crate::engine::units::{
    Area, FFactor, Length, MassRate, Pressure, PressureGradient, Si, Time, Velocity, VolumeRate, WeirLoad,
};

/// The design point, at which the figures of an answer stand.
const DESIGN: usize = 0;

/// Sizes what the case leaves open, places the wall, balances the vapour and judges every criterion.
///
/// # Errors
/// [`EngineError::NoAnswer`] where a correlation is beyond flood at the required shares, [`EngineError::NoMethod`] where a method
/// cannot serve its internals, [`EngineError::Geometry`] where a given wall does not fit the shell, [`EngineError::Search`] where
/// no shell or position answers.
pub fn work(case: &Case, catalogue: &Catalogue) -> EngineResult<Answer> {
    let model = Model::new(case, catalogue)?;
    let sized = size(&model)?;
    let [_, zone_m, _] = sized.diameters_m;
    let by_rule = positions(&model, zone_m)?;
    let arrangement = Arrangement::new(&model, sized.diameters_m, by_rule.standing.clone())?;
    let states = (0..model.points.len())
        .map(|point| PointState::new(&model, &arrangement.zone, point))
        .collect::<EngineResult<Vec<_>>>()?;
    let bench = Bench { model: &model, arrangement: &arrangement, states: &states };
    let findings = bench.findings()?;
    let verdict = findings.iter().map(|f| f.status).max().unwrap_or(Status::Met);
    let design = states.first().cloned().unwrap_or_default();
    let split_missed = findings.iter().any(|f| f.criterion == Criterion::VapourShareWithin && f.status != Status::Met)
        || (absent_because(&model).is_none() && design.actual.is_none());
    let remedies = if split_missed { remedies(&model, &arrangement.zone, &design) } else { Vec::new() };
    let records = records(&model)?;
    let answer = Answer {
        verdict,
        shell: shell(&model, &sized),
        walls: walls(&model, &arrangement, &by_rule, &design)?,
        compartments: compartments(&model, &arrangement, &design),
        sections: sections(&bench)?,
        balance: balance(&model, &design),
        column_pressure_drop: bench.actual_drop_pa(DESIGN).map(Pressure::from_si),
        limits: limits(&model),
        from_memory: from_memory(&model, &records, &findings),
        notes: notes(&model, &arrangement),
        findings: with_remedies(findings, &remedies),
        remedies,
        correlations: records,
    };
    check_finite(&answer)?;
    Ok(answer)
}

/// Says at each missed share what would bring it back.
fn with_remedies(mut findings: Vec<Finding>, remedies: &[crate::engine::result::Remedy]) -> Vec<Finding> {
    if remedies.is_empty() {
        return findings;
    }
    let ways: Vec<&str> = remedies.iter().map(|r| r.what.as_str()).collect();
    for finding in &mut findings {
        if finding.status != Status::Met
            && matches!(finding.criterion, Criterion::VapourShareWithin | Criterion::Balance)
        {
            finding.because += &format!("; cure: {}", ways.join(", or "));
        }
    }
    findings
}

fn shell(model: &Model<'_>, sized: &Sized) -> ShellResult {
    let [above_m, zone_m, below_m] = sized.diameters_m;
    let case_shell = &model.case.shell;
    let was_sized = [case_shell.above, case_shell.wall_zone, case_shell.below].map(|d| d == Diameter::Size);
    ShellResult {
        above: Length::from_si(above_m),
        wall_zone: Length::from_si(zone_m),
        below: Length::from_si(below_m),
        sized: was_sized,
        required: [Part::Above, Part::WallZone, Part::Below]
            .map(|part| Length::from_si(need_of(sized, part).by_flood_m)),
        governed_by: governed_by(model, sized),
    }
}

fn need_of(sized: &Sized, part: Part) -> &super::size::Need {
    let [above, zone, below] = &sized.needs;
    match part {
        Part::Above => above,
        Part::WallZone => zone,
        Part::Below => below,
    }
}

/// The criterion with the greatest least diameter of all parts; with different diameters, of the part with the least slack.
fn governed_by(model: &Model<'_>, sized: &Sized) -> GovernedBy {
    let stands = |part: Part| {
        let [above_m, zone_m, below_m] = sized.diameters_m;
        match part {
            Part::Above => above_m,
            Part::WallZone => zone_m,
            Part::Below => below_m,
        }
    };
    let mut candidates: Vec<(f64, f64, &Margin)> = Vec::new();
    for part in PARTS {
        let need = need_of(sized, part);
        candidates.push((need.diameter_m, stands(part), &need.governing));
        if let Some((margin, own_m)) = &need.runner_up {
            candidates.push((*own_m, stands(part), margin));
        }
    }
    if let Some((margin, enlarged_m)) = &sized.by_column {
        let [above_m, zone_m, below_m] = *enlarged_m;
        for (least_m, part) in [(above_m, Part::Above), (zone_m, Part::WallZone), (below_m, Part::Below)] {
            candidates.push((least_m, stands(part), margin));
        }
    }
    // What needs the most of the shell that stands: with one diameter, simply the greatest.
    candidates.sort_by(|a, b| (b.0 / b.1).total_cmp(&(a.0 / a.1)));
    let name = |margin: &Margin| {
        let section = margin.section.and_then(|i| model.case.sections.get(i)).map_or("column", |s| s.name.as_str());
        let point = model.points.get(margin.point).map_or("", |p| p.name);
        (section.to_owned(), point.to_owned())
    };
    let Some((least_m, stands_m, margin)) = candidates.first().copied() else {
        return GovernedBy {
            criterion: String::new(),
            section: String::new(),
            point: String::new(),
            diameter: Length::from_si(0.0),
            runner_up: String::new(),
            slack: Length::from_si(0.0),
        };
    };
    let runner_up = candidates.iter().find(|(_, _, m)| m.section != margin.section || m.criterion != margin.criterion);
    let runner_up = runner_up.map_or_else(String::new, |(own_m, _, m)| {
        let (section, point) = name(m);
        format!("{} of \"{section}\" at \"{point}\", {own_m:.4} m", m.criterion.name())
    });
    let (section, point) = name(margin);
    GovernedBy {
        criterion: margin.criterion.name().to_owned(),
        section,
        point,
        diameter: Length::from_si(least_m),
        runner_up,
        slack: Length::from_si(stands_m - least_m),
    }
}

fn walls(
    model: &Model<'_>,
    arrangement: &Arrangement,
    by_rule: &Positions,
    design: &PointState,
) -> EngineResult<Vec<WallResult>> {
    let zone = &arrangement.zone;
    let disc = Disc::from_diameter(Length::from_si(zone.diameter_m))?;
    let mut out = Vec::new();
    for (band, stated) in model.case.wall.bands.iter().enumerate() {
        let drop = if absent_because(model).is_none() {
            equal_drop(model, zone.diameter_m, &zone.positions_m, band).ok()
        } else {
            None
        };
        let of =
            |list: &[Vec<f64>], wall: usize| list.get(band).and_then(|w| w.get(wall)).copied().map(Length::from_si);
        let count = zone.positions_m.get(band).map_or(0, Vec::len);
        for wall in 0..count {
            let Some(position) = of(&zone.positions_m, wall) else { continue };
            let share_per_m =
                design.actual.as_ref().and_then(|actual| share_per_m(model, zone, actual, DESIGN, band, wall));
            out.push(WallResult {
                band: stated.name.clone(),
                placed_by: match stated.position {
                    Position::EqualFlood => "equal flood",
                    Position::EqualPressureDrop => "equal pressure drop",
                    Position::VapourLoad => "vapour load",
                    Position::Given(_) => "given",
                }
                .to_owned(),
                position,
                chord: disc.chord_at(position),
                thickness: model.case.wall.thickness,
                equal_flood: of(&by_rule.equal_flood, wall),
                equal_pressure_drop: drop.as_ref().and_then(|d| of(d, wall)),
                vapour_load: of(&by_rule.vapour_load, wall),
                share_per_m,
            });
        }
    }
    Ok(out)
}

fn compartments(model: &Model<'_>, arrangement: &Arrangement, design: &PointState) -> Vec<CompartmentResult> {
    let total_m2: f64 = arrangement.zone.sides.iter().map(|side| side.area_m2).sum();
    let required = model.required(DESIGN);
    model
        .case
        .compartments
        .iter()
        .zip(&model.sides)
        .zip(&arrangement.zone.sides)
        .enumerate()
        .map(|(i, ((compartment, stack), geometry))| {
            let exponents = design.required_exponents.get(i).copied().flatten();
            CompartmentResult {
                name: compartment.name.clone(),
                area: Area::from_si(geometry.area_m2),
                area_share: geometry.area_m2 / total_m2,
                clear_depth: Length::from_si(geometry.clear_depth_m),
                vapour_share_required: required.get(i).copied().unwrap_or(f64::NAN),
                vapour_share: design.actual.as_ref().and_then(|a| a.get(i)).copied(),
                liquid_share: model.points.first().and_then(|p| p.liquid.get(i)).copied().unwrap_or(f64::NAN),
                pressure_drop_at_required: design.required_drop_pa.get(i).map(|pa| Pressure::from_si(*pa)),
                friction_at_required: design.required_friction_pa.get(i).map(|pa| Pressure::from_si(*pa)),
                static_head: Pressure::from_si(stack.static_pa(DESIGN)),
                height: Length::from_si(stack.height_m),
                response_exponent: exponents.map(|e| e.total),
                response_exponent_friction: exponents.map(|e| e.friction),
            }
        })
        .collect()
}

fn balance(model: &Model<'_>, design: &PointState) -> BalanceResult {
    let all = &design.balances.all;
    BalanceResult {
        pressure_drop: design.actual_drop_pa.map(Pressure::from_si),
        imbalance_at_required: design.imbalance_pa().map(Pressure::from_si),
        solutions: all
            .iter()
            .map(|b| Solution {
                shares: b.shares.clone(),
                pressure_drop: Pressure::from_si(b.pressure_pa),
                stable: b.stable,
            })
            .collect(),
        least_imbalance: if all.is_empty() { design.balances.least_imbalance_pa.map(Pressure::from_si) } else { None },
        absent_because: absent_because(model),
    }
}

fn sections(bench: &Bench<'_, '_>) -> EngineResult<Vec<SectionResult>> {
    let mut out: Vec<(usize, SectionResult)> = Vec::new();
    for (stack, (geometry, _)) in bench.model.stacks().zip(bench.arrangement.stacks()) {
        let bottom = match stack.place {
            Place::Compartment(side) => bench.states.first().and_then(|s| s.actual_factor(bench.model, DESIGN, side)),
            // Above and below the wall nothing depends on the shares.
            _ => bench.states.first().and_then(|s| s.actual.as_ref()).map(|_| 1.0),
        };
        for (section, geometry) in stack.sections.iter().zip(geometry) {
            let actual = bottom.map(|bottom| section.factor(DESIGN, bottom));
            let result = section_result(
                bench.model,
                section,
                geometry,
                stack.place,
                required_area_m2(stack, |i| i == section.index),
                actual,
            )?;
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
    place: Place,
    required_area_m2: f64,
    actual: Option<f64>,
) -> EngineResult<SectionResult> {
    let rated = |factor: f64| {
        rate(section, geometry, DESIGN, factor).map_err(|beyond| {
            no_answer_at(model, DESIGN, Beyond { section: section.index, row: beyond.row }, geometry.area_m2, factor)
        })
    };
    let required = rated(1.0)?;
    let at_actual = actual.map(rated).transpose()?;
    let loads = section.loads_at(DESIGN);
    let flood = required.flood();
    let row = flood.and_then(|f| f.row).unwrap_or(0);
    let load = loads.get(row).copied().ok_or_else(|| EngineError::Search {
        what: format!("rows of section \"{}\"", section.section.name),
        why: "the design point has none".to_owned(),
    })?;
    let rows = model.case.points.first().and_then(|p| p.loads.get(section.index));
    let stage = |row: usize| rows.and_then(|rows| rows.get(row)).map_or_else(String::new, |r| r.stage.clone());
    let mut outside = (Vec::new(), Vec::new());
    for load in loads {
        section.model.outside(geometry, load, &mut outside.0, &mut outside.1);
    }
    let (f_factor, capacity_factor, liquid_load) = on_place(&load, geometry.area_m2);
    Ok(SectionResult {
        name: section.section.name.clone(),
        place: model.place_name(place).to_owned(),
        internals: model.case.internals.get(section.section.internals).map_or_else(String::new, |i| i.name.clone()),
        flood_method: section.model.flood_method().to_owned(),
        pressure_drop_method: section.model.drop_method().map(str::to_owned),
        area: Area::from_si(geometry.area_m2),
        required_area: Area::from_si(required_area_m2),
        flood: flood.map_or(f64::NAN, |f| f.si),
        flood_actual: at_actual.as_ref().and_then(|r| r.flood().map(|f| f.si)),
        f_factor,
        capacity_factor,
        flow_parameter: load.flow_parameter(),
        liquid_load,
        friction: required.friction_pa.map(Pressure::from_si),
        friction_actual: at_actual.and_then(|r| r.friction_pa).map(Pressure::from_si),
        static_head: Pressure::from_si(section.static_pa(DESIGN)),
        governing_stage: stage(row),
        in_range: outside.0.is_empty() && outside.1.is_empty(),
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
    let least =
        |pick: fn(&crate::engine::geometry::Deck) -> f64| layout.decks().iter().map(pick).fold(f64::INFINITY, f64::min);
    let all: Vec<_> = loads.iter().map(|load| (load, tray.figures(layout, load))).collect();
    let greatest = |pick: &dyn Fn(&StageLoad, &crate::engine::hydraulics::tray::TrayFigures) -> f64| {
        all.iter().map(|(load, figures)| pick(load, figures)).fold(0.0, f64::max)
    };
    let smallest = |pick: &dyn Fn(&crate::engine::hydraulics::tray::TrayFigures) -> f64| {
        all.iter().map(|(_, figures)| pick(figures)).fold(f64::INFINITY, f64::min)
    };
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

/// Ids of the records that the answer rests on, sorted.
fn records(model: &Model<'_>) -> EngineResult<Vec<String>> {
    let mut out: Vec<String> = Vec::new();
    for section in model.stacks().flat_map(|stack| &stack.sections) {
        match &section.model.hydraulics {
            Hydraulics::Tray(tray) => out.extend(tray.methods.records.iter().cloned()),
            Hydraulics::Packing(bed) => {
                out.extend(bed.records.iter().cloned());
                out.push(first_of(model.catalogue, Form::WettingMinimum)?.id.clone());
            }
            Hydraulics::Declared(_) => {}
        }
    }
    out.sort();
    out.dedup();
    Ok(out)
}

/// Constants from memory on which the verdict rests.
fn from_memory(model: &Model<'_>, records: &[String], findings: &[Finding]) -> Vec<String> {
    let mut out = Vec::new();
    for record in records.iter().filter_map(|id| model.catalogue.record(id).ok()) {
        let constants = record.from_memory();
        if !constants.is_empty() {
            out.push(format!("{}: {}", record.id, constants.join(", ")));
        }
    }
    for section in model.stacks().flat_map(|stack| &stack.sections) {
        if let (Hydraulics::Packing(bed), Some(internals)) =
            (&section.model.hydraulics, model.case.internals.get(section.section.internals))
            && let crate::engine::case::InternalsKind::Packing(packing) = &internals.kind
        {
            let used: Vec<&str> =
                packing.from_memory.iter().map(String::as_str).filter(|key| bed.constants.contains(key)).collect();
            if !used.is_empty() {
                out.push(format!(
                    "packing \"{}\": {}",
                    packing.entry.as_deref().unwrap_or(&internals.name),
                    used.join(", ")
                ));
            }
        }
    }
    for finding in findings.iter().filter(|f| f.because.contains("(from memory)")) {
        out.push(format!("default limit of {}", finding.criterion.name()));
    }
    out.sort();
    out.dedup();
    out
}

/// Every limit in use, each once for the sections and points that share it.
fn limits(model: &Model<'_>) -> Vec<LimitUsed> {
    let mut out: Vec<(LimitUsed, Vec<String>)> = Vec::new();
    let mut add = |limit: &Limit, scope: String| {
        let used = LimitUsed {
            criterion: limit.criterion,
            scope: String::new(),
            limit: limit.amount(),
            origin: limit.origin.clone(),
        };
        match out.iter_mut().find(|(known, _)| *known == used) {
            Some((_, scopes)) if !scopes.contains(&scope) => scopes.push(scope),
            Some(_) => {}
            None => out.push((used, vec![scope])),
        }
    };
    for section in model.stacks().flat_map(|stack| &stack.sections) {
        for limits in &section.limits {
            for limit in limits.all(section.tray.is_some()) {
                add(limit, section.section.name.clone());
            }
        }
    }
    for limits in &model.column_limits {
        for limit in limits.all() {
            add(limit, "column".to_owned());
        }
    }
    let mut list: Vec<LimitUsed> =
        out.into_iter().map(|(used, scopes)| LimitUsed { scope: scopes.join(", "), ..used }).collect();
    list.sort_by(|a, b| a.criterion.cmp(&b.criterion));
    list
}

fn notes(model: &Model<'_>, arrangement: &Arrangement) -> Vec<String> {
    let mut out = model.case.reading_notes.clone();
    for (side, compartment) in model.sides.iter().zip(&model.case.compartments) {
        if side.filled_m > 0.0 {
            out.push(format!(
                "\"{}\" is {:.3} m shorter than the highest compartment; filled up with empty height at the density of its bottom row",
                compartment.name, side.filled_m
            ));
        }
    }
    if model.case.wall.reach != Reach::Middle
        && let Some(because) = absent_because(model)
    {
        out.push(because);
    }
    if end_drop_pa(&model.above, &arrangement.above, DESIGN).is_none()
        || end_drop_pa(&model.below, &arrangement.below, DESIGN).is_none()
    {
        out.push("the column's pressure drop is not worked out: some internals have no declared resistance".to_owned());
    }
    out
}

/// Nothing leaves the engine that is not a number.
fn check_finite(answer: &Answer) -> EngineResult<()> {
    let [above, zone, below] = answer.shell.required;
    for (what, value) in
        [("diameter above the wall", above), ("diameter of the wall zone", zone), ("diameter below the wall", below)]
    {
        finite(value.si(), what)?;
    }
    for compartment in &answer.compartments {
        finite(compartment.area.si(), &format!("area of \"{}\"", compartment.name))?;
        finite(compartment.liquid_share, &format!("liquid share of \"{}\"", compartment.name))?;
        finite(compartment.static_head.si(), &format!("static head of \"{}\"", compartment.name))?;
    }
    for section in &answer.sections {
        finite(section.flood, &format!("flood of \"{}\"", section.name))?;
        finite(section.required_area.si(), &format!("required area of \"{}\"", section.name))?;
        for optional in [section.flood_actual, section.friction.map(Si::si), section.friction_actual.map(Si::si)] {
            finite(optional.unwrap_or(0.0), &format!("a figure of \"{}\" at the actual shares", section.name))?;
        }
    }
    Ok(())
}
