//! The answer as JSON: SI, keys end in their unit, `null` where there is no figure.

use super::findings::{si, unit};
use super::model::{Meta, Show};
use super::text::steers;
use crate::engine::case::Case;
use crate::engine::findings::{Finding, LimitUsed};
use crate::engine::result::{Answer, CompartmentResult, Remedy, SectionResult, StageResult, TrayResult, WallResult};
use crate::engine::units::Si;
use serde_json::{Value, json};

/// The whole document.
pub fn document(case: &Case, answer: &Answer, meta: &Meta, show: Show) -> Value {
    let shell = &answer.shell;
    let [above, zone, below] = shell.required;
    let governed = &shell.governed_by;
    json!({
        "program": { "name": "chordwall", "version": meta.version },
        "case": { "tag": case.tag, "title": case.title, "revision": case.revision, "input_sha256": meta.input_sha256 },
        "verdict": answer.verdict.name(),
        "shell": {
            "diameter_above_m": shell.above.si(),
            "diameter_wall_zone_m": shell.wall_zone.si(),
            "diameter_below_m": shell.below.si(),
            "required": {
                "diameter_above_m": above.si(),
                "diameter_wall_zone_m": zone.si(),
                "diameter_below_m": below.si(),
            },
            "governed_by": {
                "criterion": governed.criterion,
                "section": governed.section,
                "point": governed.point,
                "runner_up": governed.runner_up_diameter.map_or_else(
                    || governed.runner_up.clone(),
                    |d| format!("{}, about {:.3} m", governed.runner_up, d.si()),
                ),
                "slack_m": governed.slack.si(),
            },
        },
        "walls": answer.walls.iter().map(wall).collect::<Vec<_>>(),
        "compartments": answer.compartments.iter().map(compartment).collect::<Vec<_>>(),
        "sections": answer.sections.iter().map(|s| section(s, show.stages)).collect::<Vec<_>>(),
        "balance": {
            "pressure_drop_pa": answer.balance.pressure_drop.map(Si::si),
            "imbalance_at_required_pa": answer.balance.imbalance_at_required.map(Si::si),
            "solutions": answer.balance.solutions.iter().map(|s| json!({
                "shares": s.shares,
                "pressure_drop_pa": s.pressure_drop.si(),
                "stable": s.stable,
            })).collect::<Vec<_>>(),
            "least_imbalance_pa": answer.balance.least_imbalance.map(Si::si),
            "absent_because": answer.balance.absent_because,
        },
        "column": { "pressure_drop_pa": answer.column_pressure_drop.map(Si::si) },
        "findings": answer.findings.iter().map(finding).collect::<Vec<_>>(),
        "remedies": answer.remedies.iter().map(remedy).collect::<Vec<_>>(),
        "limits": answer.limits.iter().map(limit).collect::<Vec<_>>(),
        "correlations": answer.correlations,
        "from_memory": answer.from_memory,
        "notes": answer.notes,
        "caution": super::caution::CAUTION,
    })
}

/// A document as bytes, one figure a line.
///
/// # Errors
/// Never for documents of this module; the type says so of serde.
pub fn bytes(document: &Value) -> Result<Vec<u8>, serde_json::Error> {
    Ok(quiet(&serde_json::to_string_pretty(document)?).into_bytes())
}

/// Characters that steer a terminal or an eye as escapes of JSON, with a line end behind the document: what a program reads is the
/// same, and a person who looks at it is not misled. Such characters stand only inside strings, but for the ends of lines.
fn quiet(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 1);
    for c in text.chars() {
        if c != '\n' && steers(c) {
            let mut units = [0; 2];
            out.extend(c.encode_utf16(&mut units).iter().map(|unit| format!("\\u{unit:04x}")));
        } else {
            out.push(c);
        }
    }
    out.push('\n');
    out
}

fn wall(w: &WallResult) -> Value {
    json!({
        "band": w.band,
        "position_m": w.position.si(),
        "chord_m": w.chord.si(),
        "thickness_m": w.thickness.si(),
        "positions": {
            "equal_flood_m": w.equal_flood.map(Si::si),
            "equal_pressure_drop_m": w.equal_pressure_drop.map(Si::si),
            "vapour_load_m": w.vapour_load.map(Si::si),
        },
        "share_per_m": w.share_per_m,
        "placed_by": w.placed_by,
    })
}

fn compartment(c: &CompartmentResult) -> Value {
    json!({
        "name": c.name,
        "area_m2": c.area.si(),
        "area_share": c.area_share,
        "clear_depth_m": c.clear_depth.si(),
        "vapour_share_required": c.vapour_share_required,
        "vapour_share": c.vapour_share,
        "liquid_share": c.liquid_share,
        "pressure_drop_at_required_pa": c.pressure_drop_at_required.map(Si::si),
        "friction_at_required_pa": c.friction_at_required.map(Si::si),
        "static_head_pa": c.static_head.si(),
        "response_exponent": c.response_exponent,
        "response_exponent_friction": c.response_exponent_friction,
        "height_m": c.height.si(),
    })
}

fn section(s: &SectionResult, stages: bool) -> Value {
    json!({
        "name": s.name,
        "place": s.place,
        "internals": s.internals,
        "flood_method": s.flood_method,
        "pressure_drop_method": s.pressure_drop_method,
        "area_m2": s.area.si(),
        "required_area_m2": s.required_area.si(),
        "flood": s.flood,
        "flood_actual": s.flood_actual,
        "f_factor": s.f_factor.root_pascal(),
        "capacity_factor_m_s": s.capacity_factor.si(),
        "flow_parameter": s.flow_parameter,
        "liquid_load_m_s": s.liquid_load.si(),
        "friction_pa": s.friction.map(Si::si),
        "friction_actual_pa": s.friction_actual.map(Si::si),
        "static_head_pa": s.static_head.si(),
        "governing_stage": s.governing_stage,
        "in_range": s.in_range,
        "tray": s.tray.as_ref().map(tray),
        "stages": if stages { s.stages.iter().map(stage).collect::<Vec<_>>() } else { Vec::new() },
    })
}

fn tray(t: &TrayResult) -> Value {
    json!({
        "net_area_m2": t.net_area.si(),
        "active_area_m2": t.active_area.si(),
        "hole_area_m2": t.hole_area.si(),
        "downcomer_area_m2": t.downcomer_area.si(),
        "weir_length_m": t.weir_length.si(),
        "flow_path_m": t.flow_path.si(),
        "pressure_drop_per_tray_pa": t.pressure_drop_per_tray.si(),
        "dry_head_m": t.dry_head.si(),
        "liquid_head_m": t.liquid_head.si(),
        "entrainment": t.entrainment,
        "system_limit": t.system_limit,
        "downcomer_froth": t.downcomer_froth,
        "downcomer_velocity_m_s": t.downcomer_velocity.si(),
        "downcomer_residence_s": finite(t.downcomer_residence.si()),
        "apron_velocity_m_s": t.apron_velocity.si(),
        "weir_load_m2_s": t.weir_load.si(),
        "weep": t.weep,
        "hole_velocity_over_weep_onset": finite(t.hole_velocity_over_weep_onset),
    })
}

/// A tray without liquid has no residence time and no onset of weeping.
fn finite(value: f64) -> Option<f64> {
    Some(value).filter(|v| v.is_finite())
}

fn stage(r: &StageResult) -> Value {
    json!({
        "stage": r.stage,
        "vapour_flow_kg_s": r.vapour_flow.si(),
        "liquid_flow_kg_s": r.liquid_flow.si(),
        "vapour_volume_flow_m3_s": r.vapour_volume_flow.si(),
        "flood": r.flood,
        "f_factor": r.f_factor.root_pascal(),
        "capacity_factor_m_s": r.capacity_factor.si(),
        "flow_parameter": r.flow_parameter,
        "liquid_load_m_s": r.liquid_load.si(),
        "friction_pa_m": r.friction_gradient.map(Si::si),
    })
}

fn finding(f: &Finding) -> Value {
    json!({
        "criterion": f.criterion.name(),
        "where": f.subject,
        "point": f.point,
        "shares": f.shares.name(),
        "value": f.value.map(si),
        "limit": f.limit.map(si),
        "unit": f.limit.or(f.value).map_or("", unit),
        "status": f.status.name(),
        "because": f.because,
    })
}

fn limit(l: &LimitUsed) -> Value {
    json!({
        "criterion": l.criterion.name(),
        "for": l.scope,
        "limit": si(l.limit),
        "unit": unit(l.limit),
        "origin": l.origin,
    })
}

fn remedy(r: &Remedy) -> Value {
    json!({
        "what": r.what,
        "compartment": r.compartment,
        "pressure_pa": r.pressure.map(Si::si),
        "factor": r.factor,
        "position_m": r.position.map(Si::si),
        "points": r.points.iter().map(|p| json!({
            "point": p.point,
            "shares": p.shares,
            "floods": p.floods,
        })).collect::<Vec<_>>(),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn characters_that_steer_are_escaped_and_read_back_the_same() {
        let document = json!({ "tag": "a\u{9b}31m\u{202e}b\u{e0041}\u{7f}c\nd ä" });
        let bytes = bytes(&document).unwrap();
        let text = std::str::from_utf8(&bytes).unwrap();
        assert!(text.contains("\\u009b31m\\u202eb\\udb40\\udc41\\u007fc\\nd ä"), "{text}");
        assert_eq!(serde_json::from_slice::<Value>(&bytes).unwrap(), document);
    }
}
