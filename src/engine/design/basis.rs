//! What an answer rests on: correlations, constants from memory, limits with their origin, notes for its reader.

use super::arrangement::Arrangement;
use super::column::end_drop_pa;
use super::limits::Limit;
use super::model::Model;
use super::state::absent_because;
use crate::engine::case::{InternalsKind, Reach};
use crate::engine::correlation::form::Form;
use crate::engine::error::EngineResult;
use crate::engine::findings::{Finding, LimitUsed};
use crate::engine::hydraulics::load::StageLoad;
use crate::engine::hydraulics::packing::first_of;
use crate::engine::hydraulics::section::Hydraulics;

/// The design point, at which notes are made.
const DESIGN: usize = 0;

/// Ids of the records that the answer rests on, sorted.
pub(crate) fn records(model: &Model<'_>) -> EngineResult<Vec<String>> {
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
pub(crate) fn from_memory(model: &Model<'_>, records: &[String], findings: &[Finding]) -> Vec<String> {
    let mut out = Vec::new();
    for record in records.iter().filter_map(|id| model.catalogue.record(id).ok()) {
        let constants = record.from_memory();
        if constants.len() == record.coefficients.len() {
            out.push(format!("{}: all constants", record.id));
        } else if !constants.is_empty() {
            out.push(format!("{}: {}", record.id, constants.join(", ")));
        }
    }
    for section in model.stacks().flat_map(|stack| &stack.sections) {
        if let (Hydraulics::Packing(bed), Some(internals)) =
            (&section.model.hydraulics, model.case.internals.get(section.section.internals))
            && let InternalsKind::Packing(packing) = &internals.kind
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
pub(crate) fn limits(model: &Model<'_>) -> Vec<LimitUsed> {
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
    list.sort_by_key(|used| used.criterion);
    list
}

pub(crate) fn notes(model: &Model<'_>, arrangement: &Arrangement) -> Vec<String> {
    let mut out = model.case.reading_notes.clone();
    for (side, compartment) in model.sides.iter().zip(&model.case.compartments) {
        if side.filled_m > 0.0 {
            out.push(format!(
                "\"{}\" is {:.3} m shorter than the highest compartment; filled up with empty height at the density of its bottom row",
                compartment.name, side.filled_m
            ));
        }
    }
    out.extend(chart_notes(model));
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

/// Flow parameter below which the packing charts are optimistic with non-aqueous liquids (published handbook remark).
const CHART_OPTIMISTIC_BELOW: f64 = 0.03;
/// Flow parameter above which the packing charts disagree by up to 47 % in capacity (comparison in the methods' sources).
const CHARTS_DISAGREE_ABOVE: f64 = 0.5;
/// Surface tension of anything but water-rich liquids lies below this, N/m (trade knowledge, from memory).
const NON_AQUEOUS_BELOW_N_M: f64 = 0.04;

/// What the charts' own readers warn of inside their range.
fn chart_notes(model: &Model<'_>) -> Vec<String> {
    let mut low: Vec<&str> = Vec::new();
    let mut high: Vec<&str> = Vec::new();
    for section in model.stacks().flat_map(|stack| &stack.sections) {
        if !matches!(section.model.hydraulics, Hydraulics::Packing(_)) {
            continue;
        }
        let loads = section.loads_at(DESIGN);
        let non_aqueous = |load: &StageLoad| load.sigma_n_m < NON_AQUEOUS_BELOW_N_M;
        if loads.iter().any(|load| load.flow_parameter() < CHART_OPTIMISTIC_BELOW && non_aqueous(load)) {
            low.push(&section.section.name);
        }
        if loads.iter().any(|load| load.flow_parameter() > CHARTS_DISAGREE_ABOVE) {
            high.push(&section.section.name);
        }
    }
    let mut out = Vec::new();
    if !low.is_empty() {
        out.push(format!(
            "flow parameter below {CHART_OPTIMISTIC_BELOW} in {}: the flood chart is optimistic there with non-aqueous liquids \
             (published handbook remark)",
            low.join(", ")
        ));
    }
    if !high.is_empty() {
        out.push(format!(
            "flow parameter above {CHARTS_DISAGREE_ABOVE} in {}: published charts disagree there by up to 47 % in capacity",
            high.join(", ")
        ));
    }
    out
}
