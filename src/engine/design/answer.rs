//! The whole way from a checked case to an answer.

use super::arrangement::Arrangement;
use super::basis::{from_memory, limits, notes, records};
use super::figures::sections;
use super::judge::Bench;
use super::model::Model;
use super::place_wall::{Placer, Positions, equal_drop, positions};
use super::remedy::remedies;
use super::size::{Margin, PARTS, Part, Sized, size};
use super::state::{PointState, absent_because, share_per_m};
use crate::engine::case::{Case, Diameter, Position};
use crate::engine::correlation::catalogue::Catalogue;
use crate::engine::error::{EngineResult, finite};
use crate::engine::findings::{Criterion, Finding, Status};
use crate::engine::geometry::Disc;
use crate::engine::result::{
    Answer, BalanceResult, CompartmentResult, GovernedBy, Remedy, ShellResult, Solution, WallResult,
};
use crate::engine::units::{Area, Length, Pressure, Si};

/// The design point, at which the figures of an answer stand.
const DESIGN: usize = 0;

/// Sizes what the case leaves open, places the wall, balances the vapour and judges every criterion.
///
/// # Errors
/// `EngineError::NoAnswer` where a correlation is beyond flood at the required shares, `EngineError::NoMethod` where a method
/// cannot serve its internals, `EngineError::Geometry` where a given wall does not fit the shell, `EngineError::Search` where
/// no shell or position answers.
pub fn work(case: &Case, catalogue: &Catalogue) -> EngineResult<Answer> {
    let model = Model::new(case, catalogue)?;
    let placer = Placer::new(&model);
    let sized = size(&model, &placer)?;
    let [_, zone_m, _] = sized.diameters_m;
    let by_rule = positions(&model, zone_m, placer.standing(zone_m)?)?;
    let arrangement = Arrangement::new(&model, sized.diameters_m, by_rule.standing.clone())?;
    let states = (0..model.points.len())
        .map(|point| PointState::new(&model, &arrangement.zone, point))
        .collect::<EngineResult<Vec<_>>>()?;
    let bench = Bench::new(&model, &arrangement, &states)?;
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
        sections: sections(&bench, &findings)?,
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

/// A remedy in a few words; its re-rating stands with the remedies.
fn in_short(remedy: &Remedy) -> String {
    match (&remedy.compartment, remedy.pressure, remedy.factor, remedy.position) {
        (Some(compartment), Some(pressure), Some(factor), _) => {
            format!("{:+.2} mbar on \"{compartment}\" (friction x {factor:.3})", pressure.si() / 100.0)
        }
        (_, _, _, Some(position)) => format!("wall to {:+.1} mm", position.si() * 1e3),
        _ => remedy.what.clone(),
    }
}

/// Says at each missed share what would bring it back.
fn with_remedies(mut findings: Vec<Finding>, remedies: &[Remedy]) -> Vec<Finding> {
    if remedies.is_empty() {
        return findings;
    }
    let ways: Vec<String> = remedies.iter().map(in_short).collect();
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
            runner_up_diameter: None,
            slack: Length::from_si(0.0),
        };
    };
    let runner_up = candidates.iter().find(|(_, _, m)| m.section != margin.section || m.criterion != margin.criterion);
    let runner_up_diameter = runner_up.map(|(own_m, _, _)| Length::from_si(*own_m));
    let runner_up = runner_up.map_or_else(String::new, |(_, _, m)| {
        let (section, point) = name(m);
        format!("{} of \"{section}\" at \"{point}\"", m.criterion.name())
    });
    let (section, point) = name(margin);
    GovernedBy {
        criterion: margin.criterion.name().to_owned(),
        section,
        point,
        diameter: Length::from_si(least_m),
        runner_up,
        runner_up_diameter,
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
            match stated.position {
                Position::EqualPressureDrop => Some(zone.positions_m.clone()),
                _ => equal_drop(model, zone.diameter_m, &zone.positions_m, band).ok(),
            }
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
