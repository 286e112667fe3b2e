//! What is read and written.

use super::*;
use serde_json::Value;

#[test]
fn out_files_hold_the_answer_and_nothing_else_is_left() {
    let folder = tempfile::tempdir().unwrap();
    let file = |name: &str| folder.path().join(name);
    for (name, status) in [("ketone", 0), ("alcohol", 1), ("hydrocarbon", 0)] {
        let json = run(&["check", &shipped(name), "--json"]).out;
        for ending in ["json", "csv", "md"] {
            let out = file(&format!("{name}.{ending}"));
            assert_eq!(run(&["check", &shipped(name), "--out", path(&out)]).status, status);
        }
        assert_eq!(std::fs::read_to_string(file(&format!("{name}.json"))).unwrap(), json);
        let document: Value = serde_json::from_str(&json).unwrap();
        csv_holds_the_figures(&std::fs::read_to_string(file(&format!("{name}.csv"))).unwrap(), &document);
        let markdown = std::fs::read_to_string(file(&format!("{name}.md"))).unwrap();
        assert!(markdown.starts_with("# C-") && markdown.contains("Caution: a process sizing aid"));
        for finding in document["findings"].as_array().unwrap().iter().filter(|f| f["status"] != "met") {
            let criterion = finding["criterion"].as_str().unwrap().replace('_', "\\_");
            assert!(markdown.contains(&criterion), "{criterion}");
        }
    }
    assert_eq!(listing(folder.path()).len(), 9, "no temporary file is left");
}

fn csv_holds_the_figures(text: &str, document: &Value) {
    let mut reader = csv::ReaderBuilder::new().has_headers(false).flexible(true).from_reader(text.as_bytes());
    let rows: Vec<Vec<String>> = reader.records().map(|r| r.unwrap().iter().map(str::to_owned).collect()).collect();
    let of = |kind: &str| rows.iter().filter(|r| r[0] == kind).collect::<Vec<_>>();
    let sections = document["sections"].as_array().unwrap();
    assert_eq!(of("section").len(), sections.len());
    for (row, section) in of("section").iter().zip(sections) {
        assert_eq!(row[1], section["name"].as_str().unwrap());
        for (column, key) in [(4, "area_m2"), (6, "flood"), (7, "flood_actual"), (12, "friction_pa")] {
            assert_eq!(row[column].parse::<f64>().unwrap(), section[key].as_f64().unwrap(), "{key}");
        }
    }
    let findings = document["findings"].as_array().unwrap();
    assert_eq!(of("finding").len(), findings.len());
    for (row, finding) in of("finding").iter().zip(findings) {
        assert_eq!(row[1], finding["status"].as_str().unwrap());
        assert_eq!(row[6].parse::<f64>().ok(), finding["value"].as_f64());
    }
    assert!(of("caution").len() == 2 && of("verdict")[0][1] == document["verdict"].as_str().unwrap());
}

#[test]
fn an_unknown_ending_is_refused_before_anything_is_written() {
    let folder = tempfile::tempdir().unwrap();
    for ending in ["html", "xlsx", "txt", ""] {
        let out = folder.path().join(format!("x.{ending}"));
        let written = folder.path().join("w.toml");
        let run = run(&["size", &shipped("ketone"), "--out", path(&out), "--write", path(&written)]);
        assert_eq!(run.status, 2);
        assert!(run.err.contains(".json, .csv or .md"), "{}", run.err);
        assert!(listing(folder.path()).is_empty());
    }
    let nowhere = folder.path().join("no/such/folder/x.json");
    assert_eq!(run(&["size", &shipped("ketone"), "--out", path(&nowhere)]).status, 2);
}

#[test]
fn a_written_case_keeps_its_comments_and_checks_to_the_same_answer() {
    for name in SHIPPED {
        let folder = tempfile::tempdir().unwrap();
        let case = copy(name, folder.path(), str::to_owned);
        let written = folder.path().join("sized.toml");
        let before = run(&["size", path(&case), "--json", "--write", path(&written)]);
        let text = std::fs::read_to_string(&written).unwrap();
        assert!(text.starts_with("# ") && text.contains("an invented scenario"), "the header comment stays");
        assert!(!text.contains("\"size\""), "{text}");
        let after = run(&["check", path(&written), "--json"]);
        assert_eq!(before.status, after.status);
        let (a, b): (Value, Value) =
            (serde_json::from_str(&before.out).unwrap(), serde_json::from_str(&after.out).unwrap());
        assert_eq!(a["verdict"], b["verdict"]);
        assert_eq!(a["shell"]["diameter_wall_zone_m"], b["shell"]["diameter_wall_zone_m"]);
        let position = |v: &Value| v["walls"][0]["position_m"].as_f64().unwrap();
        assert!((position(&a) - position(&b)).abs() < 1e-6);
        // Written over itself, nothing changes any more.
        assert_eq!(run(&["size", path(&written), "--write", path(&written)]).status, before.status);
        assert_eq!(std::fs::read_to_string(&written).unwrap(), text);
    }
}

#[test]
fn a_table_outside_the_folder_of_the_case_is_refused() {
    let outer = tempfile::tempdir().unwrap();
    let folder = outer.path().join("case");
    std::fs::create_dir(&folder).unwrap();
    std::fs::write(outer.path().join("x.csv"), "secret of another folder\n").unwrap();
    for name in ["../x.csv", "/etc/passwd", "..\\\\x.csv", "sub/x.csv", "..", ""] {
        let case = copy("ketone", &folder, |t| t.replace("ketone-loads.csv", name));
        let run = run(&["check", path(&case)]);
        assert_eq!(run.status, 2, "{name}");
        assert!(!run.err.contains("secret") && !run.err.contains("root:"), "{}", run.err);
    }
    #[cfg(unix)]
    {
        std::os::unix::fs::symlink(outer.path().join("x.csv"), folder.join("link.csv")).unwrap();
        let case = copy("ketone", &folder, |t| t.replace("ketone-loads.csv", "link.csv"));
        let run = run(&["check", path(&case)]);
        assert_eq!(run.status, 2);
        assert!(run.err.contains("leads out of the case's folder") && !run.err.contains("secret"), "{}", run.err);
    }
}

#[test]
fn files_too_large_are_refused() {
    let folder = tempfile::tempdir().unwrap();
    let case = copy("ketone", folder.path(), |t| format!("{t}\n#{}\n", "x".repeat(5 << 20)));
    assert_eq!(run(&["check", path(&case)]).status, 2);
    let case = copy("ketone", folder.path(), str::to_owned);
    std::fs::write(folder.path().join("ketone-loads.csv"), "y".repeat(5 << 20)).unwrap();
    let refused = run(&["check", path(&case)]);
    assert_eq!(refused.status, 2);
    assert!(refused.err.contains("4 MiB"), "{}", refused.err);
}

#[test]
fn start_writes_a_case_that_runs_and_overwrites_nothing() {
    let folder = tempfile::tempdir().unwrap();
    let target = folder.path().join("new/first");
    let started = run(&["start", path(&target)]);
    assert_eq!(started.status, 0, "{}", started.err);
    assert_eq!(listing(&target), ["case.toml", "loads.csv"]);
    let case = target.join("case.toml");
    let text = std::fs::read_to_string(&case).unwrap();
    assert!(text.contains("invented") && text.matches('#').count() > 25, "commented line by line");
    for command in ["size", "check"] {
        assert_eq!(run(&[command, path(&case)]).status, 0);
    }
    let again = run(&["start", path(&target)]);
    assert_eq!(again.status, 2);
    assert!(again.err.contains("not overwritten"));
    assert_eq!(std::fs::read_to_string(&case).unwrap(), text);
}

#[test]
fn correlations_of_the_user_stand_beside_the_built_in_ones() {
    let folder = tempfile::tempdir().unwrap();
    let source = format!("{}/correlations", env!("CARGO_MANIFEST_DIR"));
    // The later chart under a name of the user's own, a tenth more cautious.
    let text = std::fs::read_to_string(format!("{source}/fair-1961-capacity.toml")).unwrap();
    let own = text
        .replace("id = \"fair-1961-capacity\"", "id = \"house-capacity\"")
        .replace("method = \"fair\"", "method = \"house\"");
    std::fs::write(folder.path().join("house-capacity.toml"), own).unwrap();
    let dir = path(folder.path());
    assert_eq!(run(&["methods", "house", "--correlations", dir]).status, 0);
    let cases = tempfile::tempdir().unwrap();
    let case = copy("hydrocarbon", cases.path(), |t| format!("{t}\n[methods]\ntray_flood = \"house\"\n"));
    assert_eq!(run(&["check", path(&case)]).status, 2, "unknown without the folder");
    let answer = run(&["check", path(&case), "--json", "--correlations", dir]);
    assert_eq!(answer.status, 0, "{}", answer.err);
    assert!(answer.out.contains("\"flood_method\": \"house\"") && answer.out.contains("house-capacity"));
    // A built-in id is not replaced, and a broken file is named with its line.
    std::fs::write(
        folder.path().join("fair-1961-capacity.toml"),
        text.replace("constant = 0.0105", "constant = 0.0205"),
    )
    .unwrap();
    assert_eq!(run(&["methods", "--correlations", dir]).status, 2);
    std::fs::write(folder.path().join("fair-1961-capacity.toml"), "id = 3\n").unwrap();
    let broken = run(&["methods", "--correlations", dir]);
    assert_eq!(broken.status, 2);
    assert!(broken.err.contains("fair-1961-capacity.toml:1"), "{}", broken.err);
}
