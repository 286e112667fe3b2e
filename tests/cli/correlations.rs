//! Correlations and packings of the user's own, and what `methods` says of them.

use super::*;
use serde_json::Value;

/// The text of a built-in file.
fn built_in(id: &str) -> String {
    std::fs::read_to_string(format!("{}/correlations/{id}.toml", env!("CARGO_MANIFEST_DIR"))).unwrap()
}

/// A file with one packing of the user's own: the constants of "sheet 250/45" under another name.
fn house_packing() -> String {
    let text = built_in("packings-structured");
    let (head, packings) = text.split_once("[[packing]]").unwrap();
    let sheet = packings.split("[[packing]]").find(|p| p.contains("name = \"sheet 250/45\"")).unwrap();
    let head = head.replace("id = \"packings-structured\"", "id = \"house-packings\"");
    format!("{head}[[packing]]{}", sheet.replace("sheet 250/45", "house sheet"))
}

/// A record of the user's own: Fair's chart as one equation under another name.
fn house_record() -> String {
    built_in("fair-1961-capacity")
        .replace("id = \"fair-1961-capacity\"", "id = \"house-capacity\"")
        .replace("method = \"fair\"", "method = \"house\"")
}

#[test]
fn a_packing_of_the_user_serves_a_case_and_its_constants_count() {
    let (own, cases) = (tempfile::tempdir().unwrap(), tempfile::tempdir().unwrap());
    let file = own.path().join("house-packings.toml");
    std::fs::write(&file, house_packing()).unwrap();
    let case = copy("ketone", cases.path(), |t| t.replace("packing = \"sheet 250/45\"", "packing = \"house sheet\""));
    let without = run(&["check", path(&case)]);
    assert!(without.status == 2 && without.err.contains("house sheet"), "{}", without.err);
    let answer = |case: &str| -> Value {
        let run = run(&["check", case, "--json", "--correlations", path(own.path())]);
        assert!(run.status <= 1, "{}", run.err);
        serde_json::from_str(&run.out).unwrap()
    };
    let (built_in, same) = (answer(&shipped("ketone")), answer(path(&case)));
    for key in ["shell", "walls", "compartments", "balance", "column"] {
        assert_eq!(built_in[key], same[key], "the same constants give the same figures: {key}");
    }
    // Twice the packing factor of the later chart floods earlier.
    let text = house_packing();
    assert!(text.contains("packing_factor = { value = 20,"));
    std::fs::write(&file, text.replace("packing_factor = { value = 20,", "packing_factor = { value = 40,")).unwrap();
    let required = |v: &Value| v["shell"]["required"]["diameter_wall_zone_m"].as_f64().unwrap();
    assert!(required(&answer(path(&case))) > 1.05 * required(&same));
}

#[test]
fn broken_files_of_the_user_end_with_2_and_are_named_with_their_line() {
    let folder = tempfile::tempdir().unwrap();
    let packing = house_packing();
    let record = house_record();
    let tries = [
        ("house-packings", packing.replace("value = 250,", "value = \"many\",")),
        ("house-packings", packing.replace("value = 250,", "value = -250,")),
        ("house-packings", packing.replace("value = 250,", "value = nan,")),
        ("house-packings", packing.replace("specific_area", "specific_aera")),
        ("house-packings", packing.replace("source = \"table\"", "source = \"hearsay\"")),
        ("house-packings", packing.replace("[[packing]]", "[[packing")),
        ("house-capacity", record.replace("form = \"fair_capacity\"", "form = \"guess\"")),
        ("house-capacity", record.replace("standing = \"", "standing = \"quite ")),
        ("house-capacity", record.replace("[coefficients]", "[coefficents]")),
    ];
    for (stem, text) in &tries {
        assert!(*text != packing && *text != record, "the edit takes effect");
        let file = folder.path().join(format!("{stem}.toml"));
        std::fs::write(&file, text).unwrap();
        for args in [vec!["methods"], vec!["check", &shipped("ketone")]] {
            let run = run(&[&args[..], &["--correlations", path(folder.path())]].concat());
            assert_eq!(run.status, 2, "{args:?}: {}", run.out);
            let place = run.err.split(&format!("{stem}.toml:")).nth(1).unwrap_or_else(|| panic!("{}", run.err));
            assert!(place.starts_with(|c: char| c.is_ascii_digit()), "a line: {}", run.err);
            assert!(run.out.is_empty());
        }
        std::fs::remove_file(&file).unwrap();
    }
    // A name that is built in is not replaced in silence.
    std::fs::write(folder.path().join("house-packings.toml"), packing.replace("house sheet", "sheet 250/45")).unwrap();
    let twice = run(&["check", &shipped("ketone"), "--correlations", path(folder.path())]);
    assert!(twice.status == 2 && twice.err.contains("sheet 250/45"), "{}", twice.err);
    // A folder without any such file is a slip of the pen.
    let empty = tempfile::tempdir().unwrap();
    let none = run(&["methods", "--correlations", path(empty.path())]);
    assert!(none.status == 2 && none.err.contains("no .toml file"), "{}", none.err);
}

#[test]
fn a_check_point_that_does_not_come_out_ends_with_1_and_is_shown() {
    let folder = tempfile::tempdir().unwrap();
    let record = house_record();
    let (before, check) = record.split_once("expect = \"").unwrap();
    let wrong = format!("{before}expect = \"9{check}");
    std::fs::write(folder.path().join("house-capacity.toml"), wrong).unwrap();
    let shown = run(&["methods", "house-capacity", "--correlations", path(folder.path())]);
    assert_eq!(shown.status, 1, "{}", shown.err);
    assert_eq!(shown.out.matches("  FAILS: ").count(), 1, "{}", shown.out);
    let list = run(&["methods", "--correlations", path(folder.path())]);
    let first = list.out.lines().next().unwrap();
    let numbers: Vec<usize> = first.split(|c: char| !c.is_ascii_digit()).filter_map(|w| w.parse().ok()).collect();
    assert!(list.status == 1 && numbers[1] + 1 == numbers[2], "{first}");
}

#[test]
fn every_correlation_is_shown_in_full_within_100_columns() {
    let all: Value = serde_json::from_str(&run(&["methods", "--json"]).out).unwrap();
    for method in all["methods"].as_array().unwrap() {
        let id = method["id"].as_str().unwrap();
        let shown = run(&["methods", id]);
        assert_eq!(shown.status, 0, "{id}");
        for line in shown.out.lines() {
            assert!(line.chars().count() <= 100, "{id}: {line}");
        }
        assert_eq!(shown.out.matches("\n  holds: ").count(), method["checks"].as_array().unwrap().len(), "{id}");
        let one: Value = serde_json::from_str(&run(&["methods", id, "--json"]).out).unwrap();
        assert_eq!(&one["methods"][0], method, "{id}");
        assert_eq!(one["methods"].as_array().unwrap().len(), 1);
    }
}

#[test]
fn an_unknown_name_brings_the_nearest() {
    for (typed, nearest) in
        [("stichlmair-1989-presure-drop", "stichlmair-1989-pressure-drop"), ("eduljee-weep", "eduljee-1959-weep")]
    {
        let run = run(&["methods", typed]);
        assert!(run.status == 2 && run.out.is_empty());
        let squeezed: String = run.err.chars().filter(|c| !c.is_whitespace()).collect();
        assert!(squeezed.contains(&format!("thenearestis\"{nearest}\"")), "{}", run.err);
    }
}
