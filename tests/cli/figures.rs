//! Every format and every screen says the same figures.

use super::*;
use serde_json::Value;

fn document(args: &[&str]) -> Value {
    let run = run(&[args, &["--json"]].concat());
    assert!(run.status <= 1, "{args:?}: {}", run.err);
    serde_json::from_str(&run.out).unwrap()
}

fn list<'a>(document: &'a Value, key: &str) -> &'a [Value] {
    document[key].as_array().unwrap()
}

fn number(value: &Value) -> f64 {
    value.as_f64().unwrap_or_else(|| panic!("no figure: {value}"))
}

/// Text without blanks and line ends: wrapping may put one anywhere.
fn bare(text: &str) -> String {
    text.chars().filter(|c| !c.is_whitespace()).collect()
}

/// The line of a text that begins with a name, within the table of this title.
fn row<'a>(text: &'a str, title: &str, name: &str) -> &'a str {
    let table = text.split_once(&format!("\n{title}")).unwrap_or_else(|| panic!("no table {title}")).1;
    let table = table.split("\n\n").next().unwrap();
    table.lines().find(|line| line.starts_with(name)).unwrap_or_else(|| panic!("no row {name} in {title}"))
}

#[test]
fn the_head_and_the_tables_show_the_figures_of_the_json() {
    for name in SHIPPED {
        let json = document(&["check", &shipped(name)]);
        let text = run(&["check", &shipped(name)]).out;
        let head = text.lines().take(2).map(str::trim).collect::<Vec<_>>().join(" ");
        let (shell, side) = (&json["shell"], &json["compartments"][0]);
        for part in [
            format!("{}, {}: ", json["case"]["tag"].as_str().unwrap(), json["verdict"].as_str().unwrap()),
            format!("shell {:.3} m", number(&shell["diameter_wall_zone_m"])),
            format!("by {} of ", shell["governed_by"]["criterion"].as_str().unwrap()),
            format!("wall at {:+.1} mm", 1e3 * number(&json["walls"][0]["position_m"])),
            format!(
                "{:.3} required, {:.3} actual",
                number(&side["vapour_share_required"]),
                number(&side["vapour_share"])
            ),
        ] {
            assert!(head.contains(&part), "{part} in {head}");
        }
        assert!(text.lines().next().unwrap().contains(json["verdict"].as_str().unwrap()), "the first line says so");
        for side in list(&json, "compartments") {
            let line = row(&text, "Compartments", side["name"].as_str().unwrap());
            for part in [
                format!("{:.1} mm", 1e3 * number(&side["clear_depth_m"])),
                format!("{:.4}", number(&side["vapour_share_required"])),
                format!("{:.4}", number(&side["vapour_share"])),
                format!("{:.2}", number(&side["response_exponent"])),
            ] {
                assert!(line.contains(&part), "{part} in {line}");
            }
        }
        for section in list(&json, "sections") {
            let line = row(&text, "Sections", section["name"].as_str().unwrap());
            for part in [
                format!("{:.1} %", 100.0 * number(&section["flood"])),
                format!("{:.1} %", 100.0 * number(&section["flood_actual"])),
                format!(" {} ", section["governing_stage"].as_str().unwrap()),
                section["internals"].as_str().unwrap().to_owned(),
            ] {
                assert!(line.contains(&part), "{part} in {line}");
            }
            assert_eq!(line.ends_with("yes"), section["in_range"].as_bool().unwrap(), "{line}");
        }
    }
}

#[test]
fn every_finding_constant_and_correlation_of_the_json_stands_on_the_screen() {
    for name in SHIPPED {
        let json = document(&["check", &shipped(name)]);
        let text = run(&["check", &shipped(name)]).out;
        let squeezed = bare(&text);
        let mut shown = 0;
        for finding in list(&json, "findings") {
            let of = |key: &str| finding[key].as_str().unwrap();
            if of("status") == "met" {
                assert!(squeezed.contains(&bare(of("criterion"))), "{}", of("criterion"));
            } else {
                let lead =
                    format!("{}: {} of \"{}\" at \"{}\"", of("status"), of("criterion"), of("where"), of("point"));
                assert!(squeezed.contains(&bare(&lead)) && squeezed.contains(&bare(of("because"))), "{lead}");
                shown += 1;
            }
        }
        let begins = |line: &&str| line.starts_with("not met: ") || line.starts_with("attention: ");
        assert_eq!(text.lines().filter(begins).count(), shown, "{name}: no more and no less than those");
        for key in ["correlations", "from_memory", "notes"] {
            for item in list(&json, key) {
                assert!(squeezed.contains(&bare(item.as_str().unwrap())), "{name}: {key} {item}");
            }
        }
        assert!(!list(&json, "from_memory").is_empty() && squeezed.contains(&bare(json["caution"].as_str().unwrap())));
    }
}

/// Paths of all nulls, indexes left out.
fn nulls(value: &Value, at: &str, out: &mut Vec<String>) {
    match value {
        Value::Null => out.push(at.to_owned()),
        Value::Array(list) => list.iter().for_each(|v| nulls(v, at, out)),
        Value::Object(map) => map.iter().for_each(|(k, v)| nulls(v, &format!("{at}/{k}"), out)),
        _ => {}
    }
}

/// Strings of a document.
fn strings<'a>(value: &'a Value, out: &mut Vec<&'a str>) {
    match value {
        Value::String(text) => out.push(text),
        Value::Array(list) => list.iter().for_each(|v| strings(v, out)),
        Value::Object(map) => map.values().for_each(|v| strings(v, out)),
        _ => {}
    }
}

#[test]
fn a_figure_is_missing_only_where_there_can_be_none() {
    for name in SHIPPED {
        for command in ["size", "check"] {
            let mut json = document(&[command, &shipped(name), "--stages"]);
            // A remedy moves a wall or changes a resistance; it has the figures of one of the two.
            for remedy in json["remedies"].as_array().unwrap() {
                assert!(remedy["position_m"].is_null() != remedy["pressure_pa"].is_null(), "{remedy}");
            }
            for finding in json["findings"].as_array().unwrap() {
                assert!(finding["value"].is_number(), "{finding}");
                let without = ["balance", "range"].contains(&finding["criterion"].as_str().unwrap());
                assert_eq!(finding["limit"].is_null(), without, "{finding}");
            }
            json.as_object_mut().unwrap().retain(|key, _| key != "remedies" && key != "findings");
            let mut missing = Vec::new();
            nulls(&json, "", &mut missing);
            missing.sort();
            missing.dedup();
            let mut expected = vec!["/balance/absent_because", "/balance/least_imbalance_pa"];
            if name != "hydrocarbon" {
                expected.push("/sections/tray");
            }
            assert_eq!(missing, expected, "{command} {name}");
            let mut texts = Vec::new();
            strings(&json, &mut texts);
            for text in texts {
                let words = || text.split(|c: char| !c.is_alphanumeric());
                assert!(!words().any(|w| ["NaN", "nan", "inf", "infinity"].contains(&w)), "{text}");
            }
        }
    }
}

#[test]
fn stages_are_the_rows_of_the_table_at_design() {
    for name in SHIPPED {
        let table = format!("{}/cases/{name}-loads.csv", env!("CARGO_MANIFEST_DIR"));
        let mut reader = csv::Reader::from_path(table).unwrap();
        let heads = reader.headers().unwrap().clone();
        let column = |head: &str| heads.iter().position(|h| h == head).unwrap();
        let columns = ["section", "point", "stage", "vapour_flow [t/h]", "liquid_flow [t/h]"].map(column);
        let rows: Vec<[String; 5]> =
            reader.records().map(|r| r.map(|r| columns.map(|c| r[c].to_owned())).unwrap()).collect();
        let json = document(&["check", &shipped(name), "--stages"]);
        let mut seen = 0;
        for section in list(&json, "sections") {
            let of = |row: &&[String; 5]| row[0] == section["name"].as_str().unwrap() && row[1] == "design";
            let wanted: Vec<&[String; 5]> = rows.iter().filter(of).collect();
            let stages = list(section, "stages");
            assert_eq!(stages.len(), wanted.len(), "{name} {}", section["name"]);
            for (stage, row) in stages.iter().zip(&wanted) {
                assert_eq!(stage["stage"].as_str().unwrap(), row[2]);
                for (key, cell) in [("vapour_flow_kg_s", &row[3]), ("liquid_flow_kg_s", &row[4])] {
                    let kg_s = cell.parse::<f64>().unwrap() / 3.6;
                    assert!((number(&stage[key]) / kg_s - 1.0).abs() < 1e-12, "{name} {key} {stage}");
                }
                seen += 1;
            }
            // The worst row is the section's figure.
            let worst = stages.iter().map(|s| number(&s["flood"])).fold(0.0, f64::max);
            assert!((worst - number(&section["flood"])).abs() < 1e-12, "{name} {}", section["name"]);
        }
        assert!(seen > 30);
        let text = run(&["check", &shipped(name), "--stages"]).out;
        assert_eq!(text.matches("\nStages of \"").count(), list(&json, "sections").len());
        assert!(!run(&["check", &shipped(name)]).out.contains("\nStages of \""));
    }
}

/// Cells of the rows of a Markdown table below this heading, markup taken off.
fn markdown_rows(text: &str, heading: &str) -> Vec<Vec<String>> {
    let part = text.split_once(&format!("\n## {heading}")).unwrap_or_else(|| panic!("no {heading}")).1;
    let part = part.split("\n## ").next().unwrap();
    let cells = |line: &str| line.trim_matches('|').split(" | ").map(|c| c.trim().replace('\\', "")).collect();
    part.lines().filter(|line| line.starts_with("| ")).skip(2).map(cells).collect()
}

#[test]
fn markdown_tables_hold_the_figures_of_the_json() {
    let folder = tempfile::tempdir().unwrap();
    for name in SHIPPED {
        let out = folder.path().join(format!("{name}.md"));
        run(&["check", &shipped(name), "--out", path(&out)]);
        let text = std::fs::read_to_string(&out).unwrap();
        let json = document(&["check", &shipped(name)]);
        let rows = markdown_rows(&text, "Sections");
        assert_eq!(rows.len(), list(&json, "sections").len());
        for (cells, section) in rows.iter().zip(list(&json, "sections")) {
            assert_eq!(cells[0], section["name"].as_str().unwrap());
            assert_eq!(cells[3], format!("{:.1} %", 100.0 * number(&section["flood"])));
            assert_eq!(cells[4], format!("{:.1} %", 100.0 * number(&section["flood_actual"])));
            let mbar: f64 = cells[8].trim_end_matches(" mbar").parse().unwrap();
            // Four significant digits are shown.
            assert!((mbar * 100.0 / number(&section["friction_pa"]) - 1.0).abs() < 6e-4, "{name} {cells:?}");
        }
        let rows = markdown_rows(&text, "Compartments");
        for (cells, side) in rows.iter().zip(list(&json, "compartments")) {
            assert_eq!(cells[0], side["name"].as_str().unwrap());
            assert_eq!(cells[4], format!("{:.4}", number(&side["vapour_share_required"])));
            assert_eq!(cells[5], format!("{:.4}", number(&side["vapour_share"])));
        }
        assert_eq!(rows.len(), list(&json, "compartments").len());
        let verdict = json["verdict"].as_str().unwrap();
        assert!(text.contains(&format!("Verdict: **{verdict}**")));
        let asked = |f: &&Value| f["status"] != "met";
        let listed =
            text.lines().filter(|l| l.starts_with("- **not met**") || l.starts_with("- **attention**")).count();
        assert_eq!(listed, list(&json, "findings").iter().filter(asked).count());
    }
}

#[test]
fn customary_units_reach_every_figure_that_a_person_sees() {
    for name in SHIPPED {
        let text = run(&["check", &shipped(name), "--display", "us", "--stages"]).out;
        let tables: Vec<&str> = text.split("\n\n").filter(|part| part.contains("\n-----")).collect();
        assert!(tables.len() >= 11, "{name}");
        // Where a limit comes from is told in the words of its source.
        for table in tables.iter().filter(|t| !t.starts_with("Limits")) {
            for unit in [" m ", " mm ", " mbar", " m2 ", " t/h", " m/s", " m3/"] {
                let found = table.lines().find(|line| format!("{line} ").contains(unit));
                assert!(found.is_none(), "{name}: {unit} in {found:?}");
            }
        }
        let json = document(&["check", &shipped(name)]);
        let feet = format!("shell {:.2} ft", number(&json["shell"]["diameter_wall_zone_m"]) / 0.3048);
        assert!(text.starts_with(json["case"]["tag"].as_str().unwrap()) && text.contains(&feet), "{feet}");
        // 1 psi = 6894.757 Pa (NIST SP 811, appendix B.8).
        let psi = number(&json["balance"]["pressure_drop_pa"]) / 6894.757;
        let shown = text.split_once("agree at ").unwrap().1.split(' ').next().unwrap().parse::<f64>().unwrap();
        assert!((shown / psi - 1.0).abs() < 6e-4, "{shown} against {psi}");
    }
}

#[test]
fn csv_holds_every_table_of_the_json() {
    let folder = tempfile::tempdir().unwrap();
    for name in SHIPPED {
        for more in [&[][..], &["--stages"]] {
            let out = folder.path().join("x.csv");
            run(&[&["check", &shipped(name), "--out", path(&out)], more].concat());
            let json = document(&[&["check", &shipped(name)], more].concat());
            let mut reader = csv::ReaderBuilder::new().has_headers(false).flexible(true).from_path(&out).unwrap();
            let mut heads = Vec::new();
            let mut tables: std::collections::BTreeMap<String, Vec<Vec<(String, String)>>> = Default::default();
            for record in reader.records() {
                let cells: Vec<String> = record.unwrap().iter().map(str::to_owned).collect();
                if cells[0] == "table" {
                    heads = cells;
                } else {
                    let row = heads.iter().cloned().zip(cells.iter().cloned()).skip(1).collect();
                    tables.entry(cells[0].clone()).or_default().push(row);
                }
            }
            let mut compared = 0;
            let mut same = |rows: &[Vec<(String, String)>], items: Vec<&Value>| {
                assert_eq!(rows.len(), items.len(), "{name}");
                for (row, item) in rows.iter().zip(items) {
                    for (key, cell) in row {
                        let value = item.pointer(&format!("/{}", key.replace('.', "/"))).unwrap_or(&Value::Null);
                        match value {
                            Value::Number(figure) => {
                                assert_eq!(cell.parse::<f64>().ok(), figure.as_f64(), "{name} {key}");
                                compared += 1;
                            }
                            Value::String(text) => assert_eq!(cell.trim_start_matches('\''), text, "{name} {key}"),
                            _ => {}
                        }
                    }
                }
            };
            same(&tables["section"], list(&json, "sections").iter().collect());
            same(&tables["wall"], list(&json, "walls").iter().collect());
            same(&tables["compartment"], list(&json, "compartments").iter().collect());
            same(&tables["shell"], vec![&json["shell"]]);
            same(&tables["balance"], vec![&json["balance"]]);
            same(&tables["column"], vec![&json["column"]]);
            same(&tables["finding"], list(&json, "findings").iter().collect());
            let stages: Vec<&Value> = list(&json, "sections").iter().flat_map(|s| list(s, "stages")).collect();
            assert_eq!(stages.is_empty(), more.is_empty());
            same(tables.get("stage").map_or(&[][..], Vec::as_slice), stages);
            let trays: Vec<&Value> =
                list(&json, "sections").iter().map(|s| &s["tray"]).filter(|t| t.is_object()).collect();
            same(tables.get("tray").map_or(&[][..], Vec::as_slice), trays);
            assert!(compared > 200, "{name}: {compared} figures");
        }
    }
}
