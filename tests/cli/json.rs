//! The JSON contract.

use super::*;
use serde_json::Value;

fn answer(command: &str, case: &str, more: &[&str]) -> Value {
    let run = run(&[&[command, case, "--json"], more].concat());
    assert!(run.status <= 1, "{}", run.err);
    serde_json::from_str(&run.out).unwrap()
}

/// The contract's keys come first and in its order; others may follow.
fn keys_begin(value: &Value, keys: &[&str], what: &str) {
    let got: Vec<&str> = value.as_object().unwrap().keys().map(String::as_str).collect();
    assert!(got.starts_with(keys), "{what}: {got:?}");
}

#[test]
fn keys_are_those_of_the_contract() {
    for name in SHIPPED {
        for command in ["size", "check"] {
            let a = answer(command, &shipped(name), &["--stages"]);
            keys_begin(
                &a,
                &[
                    "program",
                    "case",
                    "verdict",
                    "shell",
                    "walls",
                    "compartments",
                    "sections",
                    "balance",
                    "column",
                    "findings",
                ],
                "top",
            );
            keys_begin(&a["program"], &["name", "version"], "program");
            keys_begin(&a["case"], &["tag", "title", "revision", "input_sha256"], "case");
            let diameters = ["diameter_above_m", "diameter_wall_zone_m", "diameter_below_m"];
            keys_begin(&a["shell"], &[&diameters[..], &["required", "governed_by"]].concat(), "shell");
            keys_begin(&a["shell"]["required"], &diameters, "required");
            keys_begin(
                &a["shell"]["governed_by"],
                &["criterion", "section", "point", "runner_up", "slack_m"],
                "governed_by",
            );
            for wall in a["walls"].as_array().unwrap() {
                keys_begin(wall, &["band", "position_m", "chord_m", "thickness_m", "positions", "share_per_m"], "wall");
                keys_begin(
                    &wall["positions"],
                    &["equal_flood_m", "equal_pressure_drop_m", "vapour_load_m"],
                    "positions",
                );
            }
            for side in a["compartments"].as_array().unwrap() {
                keys_begin(
                    side,
                    &[
                        "name",
                        "area_m2",
                        "area_share",
                        "clear_depth_m",
                        "vapour_share_required",
                        "vapour_share",
                        "liquid_share",
                        "pressure_drop_at_required_pa",
                        "friction_at_required_pa",
                        "static_head_pa",
                        "response_exponent",
                        "response_exponent_friction",
                    ],
                    "compartment",
                );
            }
            for section in a["sections"].as_array().unwrap() {
                keys_begin(
                    section,
                    &[
                        "name",
                        "place",
                        "internals",
                        "flood_method",
                        "pressure_drop_method",
                        "area_m2",
                        "required_area_m2",
                        "flood",
                        "flood_actual",
                        "f_factor",
                        "capacity_factor_m_s",
                        "flow_parameter",
                        "liquid_load_m_s",
                        "friction_pa",
                        "friction_actual_pa",
                        "static_head_pa",
                        "governing_stage",
                        "in_range",
                        "tray",
                        "stages",
                    ],
                    "section",
                );
                assert!(!section["stages"].as_array().unwrap().is_empty());
                assert_eq!(section["tray"].is_object(), name == "hydrocarbon");
            }
            keys_begin(&a["balance"], &["pressure_drop_pa", "imbalance_at_required_pa", "solutions"], "balance");
            for solution in a["balance"]["solutions"].as_array().unwrap() {
                keys_begin(solution, &["shares", "pressure_drop_pa", "stable"], "solution");
            }
            keys_begin(&a["column"], &["pressure_drop_pa"], "column");
            for finding in a["findings"].as_array().unwrap() {
                keys_begin(
                    finding,
                    &["criterion", "where", "point", "shares", "value", "limit", "unit", "status", "because"],
                    "finding",
                );
            }
        }
    }
}

#[test]
fn stages_are_empty_unless_asked_for() {
    let a = answer("size", &shipped("ketone"), &[]);
    assert!(a["sections"].as_array().unwrap().iter().all(|s| s["stages"].as_array().unwrap().is_empty()));
}

/// Every number of a document, with its path.
fn numbers(value: &Value, at: &str, out: &mut Vec<(String, f64)>) {
    match value {
        Value::Number(number) => out.push((at.to_owned(), number.as_f64().unwrap())),
        Value::Array(list) => list.iter().enumerate().for_each(|(i, v)| numbers(v, &format!("{at}[{i}]"), out)),
        Value::Object(map) => map.iter().for_each(|(k, v)| numbers(v, &format!("{at}.{k}"), out)),
        _ => {}
    }
}

#[test]
fn figures_of_the_answer_agree_with_each_other() {
    for name in SHIPPED {
        let a = answer("check", &shipped(name), &[]);
        let mut all = Vec::new();
        numbers(&a, "", &mut all);
        assert!(all.len() > 200 && all.iter().all(|(_, x)| x.is_finite()));
        let sum =
            |key: &str| a["compartments"].as_array().unwrap().iter().map(|c| c[key].as_f64().unwrap()).sum::<f64>();
        for key in ["area_share", "vapour_share_required", "vapour_share"] {
            assert!((sum(key) - 1.0).abs() < 1e-12, "{name} {key}");
        }
        // Verdict and status are the worst finding's.
        let worst = |s: &str| a["findings"].as_array().unwrap().iter().any(|f| f["status"] == s);
        let verdict = if worst("not met") {
            "not met"
        } else if worst("attention") {
            "attention"
        } else {
            "met"
        };
        assert_eq!(a["verdict"], verdict);
        // The common drop is each side's friction at the actual shares with its static head.
        for (c, side) in a["compartments"].as_array().unwrap().iter().enumerate() {
            let friction: f64 = a["sections"]
                .as_array()
                .unwrap()
                .iter()
                .filter(|s| s["place"] == side["name"])
                .map(|s| s["friction_actual_pa"].as_f64().unwrap())
                .sum();
            let with_static = friction + side["static_head_pa"].as_f64().unwrap();
            let common = a["balance"]["pressure_drop_pa"].as_f64().unwrap();
            assert!(
                with_static <= common * (1.0 + 1e-9) && with_static > 0.9 * common,
                "{name} {c}: devices are the rest"
            );
        }
    }
}

/// Text figures with a unit, SI to US customary, in a case's TOML.
fn to_us(text: &str) -> String {
    let factors = [
        (" mm\"", 1.0 / 25.4, " in\""),
        (" m\"", 1.0 / 0.3048, " ft\""),
        (" mbar/m\"", 100.0 * 0.3048 / (25.4 * 9.80665), " inH2O/ft\""),
        (" mbar\"", 100.0 / (0.45359237 * 9.80665 / (0.0254 * 0.0254)), " psi\""),
    ];
    let mut out = String::new();
    for line in text.lines() {
        let mut line = line.to_owned();
        for (si, factor, us) in factors {
            if let (Some(end), Some(start)) = (line.find(si), line.find('"'))
                && let Ok(value) = line[start + 1..end].trim().parse::<f64>()
            {
                line = format!("{}\"{:.17e}{us}{}", &line[..start], value * factor, &line[end + si.len()..]);
                break;
            }
        }
        out += &line;
        out.push('\n');
    }
    out
}

/// A loads table in US customary units.
fn table_to_us(text: &str) -> String {
    let pound = 0.45359237;
    let columns = [
        ("[t/h]", 1000.0 / pound, "[lb/h]"),
        ("[kg/m3]", 0.3048_f64.powi(3) / pound, "[lb/ft3]"),
        ("[mPa.s]", 1.0, "[cP]"),
        ("[mN/m]", 1.0, "[dyn/cm]"),
    ];
    let mut lines = text.lines();
    let heads: Vec<&str> = lines.next().unwrap().split(',').collect();
    let of = |head: &str| columns.iter().find(|(si, _, _)| head.ends_with(si));
    let renamed: Vec<String> =
        heads.iter().map(|h| of(h).map_or((*h).to_owned(), |(si, _, us)| h.replace(si, us))).collect();
    let mut out = renamed.join(",") + "\n";
    for line in lines {
        let cells: Vec<String> = line
            .split(',')
            .zip(&heads)
            .map(|(cell, head)| {
                of(head).map_or(cell.to_owned(), |(_, f, _)| format!("{:.17e}", cell.parse::<f64>().unwrap() * f))
            })
            .collect();
        out += &(cells.join(",") + "\n");
    }
    out
}

#[test]
fn the_same_case_in_us_customary_units_gives_the_same_json() {
    for name in SHIPPED {
        let folder = tempfile::tempdir().unwrap();
        let case = copy(name, folder.path(), to_us);
        let table = folder.path().join(format!("{name}-loads.csv"));
        let text = std::fs::read_to_string(&table).unwrap();
        std::fs::write(&table, table_to_us(&text)).unwrap();
        assert!(std::fs::read_to_string(&case).unwrap().contains(" in\"") && table_to_us(&text).contains("[lb/h]"));
        for command in ["size", "check"] {
            let (mut si, mut us) = (Vec::new(), Vec::new());
            numbers(&answer(command, &shipped(name), &["--stages"]), "", &mut si);
            numbers(&answer(command, path(&case), &["--stages"]), "", &mut us);
            assert_eq!(si.len(), us.len());
            for ((key, a), (other, b)) in si.iter().zip(&us) {
                assert_eq!(key, other);
                // What vanishes at the position that makes it zero (the imbalance in Pa, a share less the required one) is rounding
                // in either system, and no digit of it means anything.
                let nothing = a.abs() < 1e-10 && b.abs() < 1e-10;
                assert!(nothing || (a - b).abs() <= 1e-9 * a.abs(), "{command} {name} {key}: {a} against {b}");
            }
        }
    }
}

#[test]
fn display_units_leave_json_alone_and_runs_repeat_to_the_byte() {
    for name in SHIPPED {
        let si = run(&["check", &shipped(name), "--json"]).out;
        assert_eq!(si, run(&["check", &shipped(name), "--json", "--display", "us"]).out);
        assert_eq!(run(&["size", &shipped(name)]).out, run(&["size", &shipped(name)]).out);
    }
}

#[test]
fn schemas_are_schemas_and_take_the_shipped_cases() {
    for of in ["case", "bid"] {
        let schema: Value = serde_json::from_str(&run(&["schema", of]).out).unwrap();
        assert!(jsonschema::meta::is_valid(&schema), "{of}");
        let validator = jsonschema::validator_for(&schema).unwrap();
        for name in SHIPPED {
            let text = std::fs::read_to_string(shipped(name)).unwrap();
            let case: Value = toml::from_str::<Value>(&text).unwrap();
            assert_eq!(validator.is_valid(&case), of == "case", "{name} by the schema of a {of}");
        }
    }
}
