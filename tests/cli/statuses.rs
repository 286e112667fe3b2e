//! Exit statuses and what is said with them.

use super::*;

#[test]
fn shipped_cases_end_as_their_headers_say() {
    for (name, status, verdict) in [("ketone", 0, "met"), ("alcohol", 1, "not met"), ("hydrocarbon", 0, "attention")] {
        for command in ["size", "check"] {
            let run = run(&[command, &shipped(name)]);
            assert_eq!(run.status, status, "{command} {name}: {}", run.err);
            let first = run.out.lines().next().unwrap();
            assert!(first.contains(&format!(", {verdict}: shell ")), "{first}");
            assert!(run.err.is_empty());
        }
    }
}

#[test]
fn first_sentence_answers_the_question() {
    let out = run(&["size", &shipped("alcohol")]).out;
    let head: String = out.lines().take(2).collect::<Vec<_>>().join(" ");
    for part in ["C-410", "3.400 m", "bed_pressure_drop", "draw upper", "wall at +", "0.680 required", "0.713 actual"] {
        assert!(head.contains(part), "{part} in {head}");
    }
}

#[test]
fn unusable_input_ends_with_2_and_names_file_and_line() {
    let folder = tempfile::tempdir().unwrap();
    let case = copy("ketone", folder.path(), |text| text.replace("thickness = \"10 mm\"", "thicknes = \"10 mm\""));
    let out = folder.path().join("x.json");
    let run = run(&["size", path(&case), "--out", path(&out), "--write", path(&folder.path().join("w.toml"))]);
    assert_eq!(run.status, 2);
    assert!(run.out.is_empty());
    assert!(run.err.contains("ketone.toml:"), "{}", run.err);
    assert!(run.err.contains("thickness"), "the nearest key is named: {}", run.err);
    assert!(run.err.contains("nothing was written"));
    assert_eq!(listing(folder.path()), ["ketone-loads.csv", "ketone.toml"]);
}

#[test]
fn a_shell_beyond_flood_ends_with_3_and_says_which_correlation_where_and_at_what_load() {
    let folder = tempfile::tempdir().unwrap();
    let case = copy("ketone", folder.path(), |text| {
        text.replace("diameter = \"size\"", "diameter = \"1.1 m\"")
            .replace("\"equal pressure drop\"", "\"equal flood\"")
    });
    let out = folder.path().join("x.json");
    let run = run(&["check", path(&case), "--out", path(&out)]);
    assert_eq!(run.status, 3, "{}{}", run.out, run.err);
    for part in ["stichlmair", "section \"", "stage", "kg/s", "beyond flood", "larger shell"] {
        assert!(run.err.contains(part), "{part} in {}", run.err);
    }
    assert!(!out.exists());
}

#[test]
fn what_cannot_be_read_ends_with_2() {
    for args in [
        &["size", "no-such-case.toml"][..],
        &["size"],
        &["frobnicate"],
        &["check", &shipped("ketone"), "--display", "imperial"],
        &["methods", "no-such-method"],
        &["size", &shipped("ketone"), "--correlations", "no-such-folder"],
    ] {
        let run = run(args);
        assert_eq!(run.status, 2, "{args:?}");
        assert!(run.out.is_empty() && !run.err.is_empty(), "{args:?}");
    }
}

#[test]
fn help_and_version_end_with_0_and_help_carries_the_caution() {
    let help = run(&["--help"]);
    assert_eq!(help.status, 0);
    assert!(help.out.contains("local codes and licensed practice decide"));
    assert!(!help.out.contains("generate"), "the hidden command stays hidden");
    assert_eq!(run(&["--version"]).out.trim(), format!("chordwall {}", env!("CARGO_PKG_VERSION")));
}

#[test]
fn every_check_point_of_every_correlation_holds() {
    let list = run(&["methods"]);
    assert_eq!(list.status, 0, "{}", list.out);
    let document: serde_json::Value = serde_json::from_str(&run(&["methods", "--json"]).out).unwrap();
    assert_eq!(document["check_points_failed"], 0);
    assert!(document["methods"].as_array().unwrap().len() >= 20);
}

#[test]
fn one_method_is_shown_with_equation_source_range_and_checks() {
    let shown = run(&["methods", "fair-1961-capacity"]);
    assert_eq!(shown.status, 0);
    for part in [
        "Equation",
        "Source",
        "Arguments",
        "tray_spacing [mm]: 150",
        "Coefficients",
        "Check points",
        "holds",
        "Caution",
    ] {
        assert!(shown.out.contains(part), "{part}");
    }
    // A method's name works as well as a record's.
    assert!(run(&["methods", "stichlmair"]).out.contains("Stichlmair, Bravo and Fair"));
    assert!(run(&["methods", "fair-1961-capacty"]).err.contains("fair-1961-capacity"));
}

#[test]
fn completions_and_man_page_are_printed() {
    let shells = ["bash", "zsh", "fish", "powershell"].map(|shell| vec!["completions", shell]);
    let pages = ["start", "size", "check", "methods", "schema"].map(|command| vec!["man", command]);
    for what in shells.into_iter().chain(pages).chain([vec!["man"]]) {
        let shown = run(&[&["generate"], &what[..]].concat());
        assert_eq!(shown.status, 0, "{what:?}: {}", shown.err);
        assert!(shown.out.len() > 500 && shown.out.contains("chordwall"), "{what:?}");
    }
    let size = run(&["generate", "man", "size"]).out;
    assert!(size.contains(".TH chordwall-size 1") && size.contains("write") && size.contains("stages"), "{size}");
    assert_eq!(run(&["generate", "man", "frobnicate"]).status, 2);
}

#[test]
fn a_reader_that_goes_away_is_no_error() {
    use std::process::{Command, Stdio};
    let mut child = Command::new(assert_cmd::cargo::cargo_bin("chordwall"))
        .args(["methods", "--json"])
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    drop(child.stdout.take());
    let output = child.wait_with_output().unwrap();
    assert_eq!(output.status.code(), Some(0));
    assert!(output.stderr.is_empty());
}

#[test]
fn a_packing_stated_by_its_constants_alone_is_worked_like_an_entry() {
    let folder = tempfile::tempdir().unwrap();
    let constants = "specific_area = \"250 m2/m3\"\nvoid_fraction = 0.97\npacking_factor = \"20 1/ft\"\nstichlmair = [5.0, 3.0, 0.45]";
    let case = copy("ketone", folder.path(), |text| text.replace("packing = \"sheet 250/45\"", constants));
    let (stated, entry) = (run(&["check", path(&case), "--json"]), run(&["check", &shipped("ketone"), "--json"]));
    assert_eq!(stated.status, 0, "{}", stated.err);
    let of = |run: &Run| -> serde_json::Value {
        serde_json::from_str::<serde_json::Value>(&run.out).unwrap()["sections"].clone()
    };
    assert_eq!(of(&stated), of(&entry));
}
