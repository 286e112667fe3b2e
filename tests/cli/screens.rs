//! What people read: width, colour, caution, hostile names, snapshots.

use super::*;

#[test]
fn no_line_is_wider_than_100_columns() {
    let long = "a section with a name of forty letters..";
    let folder = tempfile::tempdir().unwrap();
    let named = copy("hydrocarbon", folder.path(), |t| {
        t.replace("\"feed upper\"", &format!("\"{long}\""))
            .replace("half-moon", "half-moon-trays-of-a-long-name-indeed-it-is")
    });
    let table = folder.path().join("hydrocarbon-loads.csv");
    let loads = std::fs::read_to_string(&table).unwrap().replace("feed upper", long);
    std::fs::write(&table, loads).unwrap();
    let mut cases: Vec<String> = SHIPPED.iter().map(|name| shipped(name)).collect();
    cases.push(path(&named).to_owned());
    for case in &cases {
        for command in ["size", "check"] {
            for display in ["si", "us"] {
                for more in [&[][..], &["--stages"]] {
                    let run = run(&[&[command, case, "--display", display], more].concat());
                    assert!(run.status <= 1, "{}", run.err);
                    for line in run.out.lines() {
                        assert!(line.chars().count() <= 100, "{command} {display} {case}: {line}");
                    }
                }
            }
        }
    }
    for line in run(&["methods"]).out.lines().chain(run(&["methods", "stichlmair"]).out.lines()) {
        assert!(line.chars().count() <= 100, "{line}");
    }
}

#[test]
fn piped_output_has_no_escape_sequences() {
    for args in [&["check", &shipped("alcohol")][..], &["methods"], &["--help"], &["check", "missing.toml"]] {
        let run = run(args);
        assert!(!run.out.contains('\u{1b}') && !run.err.contains('\u{1b}'), "{args:?}");
    }
    let plain = chordwall(&["check", &shipped("alcohol")]).env("NO_COLOR", "1").output().unwrap();
    assert!(!plain.stdout.contains(&0x1b));
}

#[test]
fn caution_and_constants_from_memory_stand_on_every_screen() {
    for name in SHIPPED {
        let out = run(&["size", &shipped(name)]).out.replace("\n  ", " ");
        for part in [
            "process sizing aid",
            "Local codes and licensed engineering practice decide",
            "qualified person",
            "from memory",
        ] {
            assert!(out.contains(part), "{name}: {part}");
        }
    }
    assert!(run(&["methods"]).out.contains("process sizing aid"));
}

#[test]
fn names_from_a_case_cannot_steer_a_terminal_or_a_spreadsheet() {
    let folder = tempfile::tempdir().unwrap();
    let case = copy("ketone", folder.path(), |t| {
        t.replace("title = \"Ketone solvent splitter\"", "title = \"a\\u001b[31mred\\u202Ereversed\"")
            .replace("tag = \"C-210\"", "tag = \"=1+1\"")
            .replace("\"draw collector\"", "\"<b>collector</b>\"")
    });
    for ending in ["csv", "md", "json"] {
        let out = folder.path().join(format!("x.{ending}"));
        let run = run(&["check", path(&case), "--out", path(&out)]);
        assert!(run.status <= 2);
        let file = std::fs::read_to_string(&out).unwrap_or_default();
        assert!(!file.contains("\n=1+1") && !file.contains(",=1+1"), "{ending}");
        for text in [run.out, run.err, file] {
            assert!(!text.contains('\u{1b}'), "{ending}");
            if ending != "json" {
                assert!(!text.contains('\u{202e}') && !text.contains("<b>"), "{ending}");
            }
        }
    }
}

/// What stands on the screen, with the hash and version of the last line taken out.
fn screen(args: &[&str]) -> String {
    let run = run(args);
    let text = if run.out.is_empty() { run.err } else { run.out };
    match text.find("\nchordwall 0") {
        Some(at) => text[..=at].to_owned(),
        None => text,
    }
}

macro_rules! screen_is {
    ($name:literal, $args:expr) => {
        insta::with_settings!({ snapshot_path => "snapshots", prepend_module_to_snapshot => false, omit_expression => true }, {
            insta::assert_snapshot!($name, screen($args));
        });
    };
}

#[test]
fn screens_are_as_they_were_read_and_approved() {
    for name in SHIPPED {
        insta::with_settings!({ snapshot_path => "snapshots", prepend_module_to_snapshot => false, omit_expression => true }, {
            insta::assert_snapshot!(format!("size-{name}"), screen(&["size", &shipped(name)]));
            insta::assert_snapshot!(format!("check-{name}"), screen(&["check", &shipped(name)]));
        });
    }
    screen_is!("check-hydrocarbon-us-stages", &["check", &shipped("hydrocarbon"), "--display", "us", "--stages"]);
    screen_is!("methods", &["methods"]);
    screen_is!("methods-stichlmair", &["methods", "stichlmair"]);
    screen_is!("help", &["--help"]);
}

#[test]
fn the_first_case_and_the_messages_that_stop_a_run_read_well() {
    let folder = tempfile::tempdir().unwrap();
    assert_eq!(run(&["start", path(folder.path())]).status, 0);
    let first = folder.path().join("case.toml");
    screen_is!("size-start", &["size", path(&first)]);
    screen_is!("check-start", &["check", path(&first)]);
    let mistyped = copy("ketone", folder.path(), |text| {
        text.replace("thickness = \"10 mm\"", "thicknes = \"10 mm\"").replace("\"80 mbar\"", "\"80 mm\"")
    });
    screen_is!("stop-2", &["size", path(&mistyped)]);
    let narrow = copy("ketone", folder.path(), |text| text.replace("diameter = \"size\"", "diameter = \"1.2 m\""));
    assert_eq!(run(&["check", path(&narrow)]).status, 3);
    screen_is!("stop-3", &["check", path(&narrow)]);
}

#[test]
fn readme_shows_what_the_program_prints() {
    let readme = std::fs::read_to_string(concat!(env!("CARGO_MANIFEST_DIR"), "/README.md")).unwrap();
    let shown = readme.split("```text\n").nth(1).unwrap().split("```").next().unwrap();
    let printed = run(&["size", &shipped("ketone")]).out;
    let lines: Vec<&str> = shown.lines().filter(|line| *line != "...").collect();
    assert!(lines.len() >= 6);
    for line in lines {
        assert!(printed.lines().any(|p| p == line), "README shows a line that is not printed: {line}");
    }
}
