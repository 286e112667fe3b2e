//! Outputs that cannot be written, must not be written, or must not steer what shows them.

use super::*;
use std::process::{Command as Process, Stdio};

/// The program with standard output or standard error on a disk that is full.
#[cfg(target_os = "linux")]
fn on_a_full_disk(args: &[&str], out: bool) -> i32 {
    let full = || Stdio::from(std::fs::OpenOptions::new().write(true).open("/dev/full").unwrap());
    let mut process = Process::new(assert_cmd::cargo::cargo_bin("chordwall"));
    process.args(args).stdout(Stdio::null()).stderr(Stdio::null());
    if out {
        process.stdout(full())
    } else {
        process.stderr(full())
    };
    process.status().unwrap().code().unwrap()
}

/// The program whose reader has gone before it says anything.
fn without_reader(args: &[&str]) -> (i32, Vec<u8>) {
    let mut process = Process::new(assert_cmd::cargo::cargo_bin("chordwall"))
        .args(args)
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    drop(process.stdout.take());
    let output = process.wait_with_output().unwrap();
    (output.status.code().unwrap(), output.stderr)
}

#[test]
fn an_output_never_replaces_an_input() {
    let folder = tempfile::tempdir().unwrap();
    let case = copy("ketone", folder.path(), str::to_owned);
    let table = folder.path().join("ketone-loads.csv");
    let before = (std::fs::read(&case).unwrap(), std::fs::read(&table).unwrap());
    let roundabout = folder.path().join("./ketone-loads.csv");
    let mut tries = vec![
        vec!["check", path(&case), "--out", path(&table)],
        vec!["size", path(&case), "--out", path(&roundabout)],
        vec!["size", path(&case), "--write", path(&table)],
    ];
    let link = folder.path().join("link.csv");
    #[cfg(unix)]
    {
        std::os::unix::fs::symlink(&table, &link).unwrap();
        tries.push(vec!["check", path(&case), "--out", path(&link)]);
    }
    for args in &tries {
        let run = run(args);
        assert_eq!(run.status, 2, "{args:?}");
        assert!(run.out.is_empty() && run.err.contains("the loads table itself"), "{args:?}: {}", run.err);
    }
    // A case may have any name; a report must not take its place either.
    let named = folder.path().join("case.md");
    std::fs::copy(&case, &named).unwrap();
    let refused = run(&["check", path(&named), "--out", path(&named)]);
    assert!(refused.status == 2 && refused.err.contains("the case itself"), "{}", refused.err);
    assert_eq!((std::fs::read(&named).unwrap(), std::fs::read(&table).unwrap()), before);
}

#[test]
fn either_all_files_of_a_run_are_written_or_none() {
    let folder = tempfile::Builder::new().prefix("run").tempdir().unwrap();
    let case = shipped("ketone");
    let file = |name: &str| folder.path().join(name);
    std::fs::create_dir(file("taken.json")).unwrap();
    for out in ["no/such/folder/x.json", "taken.json"] {
        let run = run(&["size", &case, "--write", path(&file("w.toml")), "--out", path(&file(out))]);
        assert_eq!(run.status, 2, "{out}");
        assert!(!run.err.contains(".tmp"), "the temporary file is nobody's business: {}", run.err);
        assert_eq!(listing(folder.path()), ["taken.json"]);
    }
    let twice = file("x.json");
    let run = run(&["size", &case, "--write", path(&twice), "--out", path(&twice)]);
    assert!(run.status == 2 && run.err.contains("named twice"), "{}", run.err);
    assert_eq!(listing(folder.path()), ["taken.json"]);
}

#[test]
#[cfg(target_os = "linux")]
fn a_full_disk_behind_standard_output_ends_with_2_and_no_file() {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("x.json");
    assert_eq!(on_a_full_disk(&["check", &shipped("ketone"), "--out", path(&out)], true), 2);
    assert!(listing(folder.path()).is_empty());
    assert_eq!(on_a_full_disk(&["--help"], true), 2);
    assert_eq!(on_a_full_disk(&["frobnicate"], false), 2, "a mistake stays one if nobody can read about it");
}

#[test]
fn a_reader_that_goes_away_changes_no_status_and_keeps_no_file_back() {
    let folder = tempfile::tempdir().unwrap();
    for (name, status) in [("ketone", 0), ("alcohol", 1)] {
        let out = folder.path().join(format!("{name}.json"));
        let (got, err) = without_reader(&["check", &shipped(name), "--out", path(&out)]);
        assert_eq!((got, err.len()), (status, 0), "{name}");
        assert_eq!(std::fs::read_to_string(&out).unwrap(), run(&["check", &shipped(name), "--json"]).out);
    }
}

#[test]
#[cfg(unix)]
fn a_file_is_written_with_the_rights_of_any_new_file_and_keeps_those_it_has() {
    use std::os::unix::fs::PermissionsExt;
    let mode = |path: &Path| std::fs::metadata(path).unwrap().permissions().mode() & 0o777;
    let folder = tempfile::tempdir().unwrap();
    let usual = folder.path().join("usual");
    std::fs::write(&usual, "").unwrap();
    let out = folder.path().join("x.json");
    assert_eq!(run(&["check", &shipped("ketone"), "--out", path(&out)]).status, 0);
    assert_eq!(mode(&out), mode(&usual));
    std::fs::set_permissions(&out, std::fs::Permissions::from_mode(0o640)).unwrap();
    assert_eq!(run(&["check", &shipped("ketone"), "--out", path(&out)]).status, 0);
    assert_eq!(mode(&out), 0o640);
}

#[test]
#[cfg(unix)]
fn devices_and_pipes_are_refused_at_once() {
    let folder = tempfile::tempdir().unwrap();
    let pipe = folder.path().join("ketone-loads.csv");
    let case = copy("ketone", folder.path(), str::to_owned);
    std::fs::remove_file(&pipe).unwrap();
    assert!(Process::new("mkfifo").arg(&pipe).status().unwrap().success());
    for file in ["/dev/zero", "/dev/null", path(&case), path(&pipe)] {
        // A reader that waited for the pipe, or read the device to its end, would never come back.
        let output = chordwall(&["check", file]).timeout(std::time::Duration::from_secs(20)).output().unwrap();
        assert_eq!(output.status.code(), Some(2), "{file}");
        assert!(String::from_utf8_lossy(&output.stderr).contains("is a device or a pipe"), "{file}");
    }
}

#[test]
fn a_case_beyond_1_mib_is_refused() {
    let folder = tempfile::tempdir().unwrap();
    let padded = |bytes: usize| copy("ketone", folder.path(), |t| format!("{t}\n# {}\n", "x".repeat(bytes)));
    assert_eq!(run(&["check", path(&padded((1 << 20) - 20_000))]).status, 0);
    let refused = run(&["check", path(&padded(1 << 20))]);
    assert!(refused.status == 2 && refused.err.contains("larger than 1 MiB"), "{}", refused.err);
}

#[test]
fn start_writes_both_files_or_none() {
    let folder = tempfile::tempdir().unwrap();
    std::fs::write(folder.path().join("loads.csv"), "mine").unwrap();
    let run = run(&["start", path(folder.path())]);
    assert!(run.status == 2 && run.err.contains("not overwritten"), "{}", run.err);
    assert_eq!(listing(folder.path()), ["loads.csv"]);
    assert_eq!(std::fs::read_to_string(folder.path().join("loads.csv")).unwrap(), "mine");
}

#[test]
fn the_examples_of_the_help_run_as_they_stand() {
    let folder = tempfile::tempdir().unwrap();
    let help = run(&["--help"]).out;
    let examples: Vec<Vec<&str>> = help
        .lines()
        .filter_map(|line| line.strip_prefix("  chordwall "))
        .map(|line| line.split("  ").next().unwrap().split_whitespace().collect())
        .collect();
    assert_eq!(examples.iter().map(|e| e[0]).collect::<Vec<_>>(), ["start", "size", "check", "methods"]);
    for example in &examples {
        let output = chordwall(example).current_dir(folder.path()).output().unwrap();
        assert_eq!(output.status.code(), Some(0), "{example:?}: {}", String::from_utf8_lossy(&output.stderr));
    }
}

#[test]
fn names_in_wide_characters_keep_the_report_within_100_columns() {
    let folder = tempfile::tempdir().unwrap();
    let wide = "液相".repeat(14);
    let case = copy("ketone", folder.path(), |t| t.replace("\"draw upper\"", &format!("\"{wide}\"")));
    let table = folder.path().join("ketone-loads.csv");
    let loads = std::fs::read_to_string(&table).unwrap().replace("draw upper", &wide);
    std::fs::write(&table, loads).unwrap();
    let run = run(&["check", path(&case), "--stages"]);
    assert_eq!(run.status, 0, "{}", run.err);
    assert!(run.out.contains("液相液相"));
    for line in run.out.lines() {
        assert!(textwrap::core::display_width(line) <= 100, "{line}");
    }
}

#[test]
fn nothing_from_a_case_steers_the_reader_of_any_format() {
    let folder = tempfile::tempdir().unwrap();
    let steering = ['\u{9b}', '\u{7f}', '\u{61c}', '\u{2028}', '\u{202e}', '\u{2066}', '\u{ad}', '\u{e0041}'];
    let title: String = steering.iter().map(|c| format!("{c}x")).collect();
    let case = copy("ketone", folder.path(), |t| {
        let escaped: String = title.chars().map(|c| format!("\\U{:08X}", u32::from(c))).collect();
        t.replace("\"Ketone solvent splitter\"", &format!("\"- {escaped} www.a.example\""))
    });
    let read = |name: &str| {
        let out = folder.path().join(name);
        assert_eq!(run(&["check", path(&case), "--out", path(&out)]).status, 0);
        std::fs::read_to_string(&out).unwrap()
    };
    let (json, markdown) = (read("x.json"), read("x.md"));
    for text in [&json, &markdown, &read("x.csv"), &run(&["check", path(&case)]).out] {
        assert!(!text.contains(steering), "{text}");
    }
    let document: serde_json::Value = serde_json::from_str(&json).unwrap();
    // Reading a case makes blanks of controls; whatever else the name holds, JSON carries as it is.
    let title = title.replace(char::is_control, " ");
    assert_eq!(document["case"]["title"], format!("- {title} www.a.example"));
    assert!(markdown.contains("\n\\- ") && markdown.contains("www&#46;a"), "{markdown}");
}

#[test]
fn a_message_drawn_in_colour_steers_nothing_with_the_text_it_quotes() {
    let folder = tempfile::tempdir().unwrap();
    let case = copy("ketone", folder.path(), |t| {
        t.replace("thickness = \"10 mm\"", "thicknes = \"10 mm\" # \u{202e}a \u{2066}b")
    });
    let output = chordwall(&["check", path(&case)]).env("CLICOLOR_FORCE", "1").output().unwrap();
    let text = String::from_utf8(output.stderr).unwrap();
    assert_eq!(output.status.code(), Some(2));
    assert!(text.contains("\u{1b}[") && text.contains("thicknes"), "drawn: {text}");
    assert!(!text.contains(['\u{202e}', '\u{2066}']), "{text:?}");
    let plain = chordwall(&["check", path(&case)]).env("CLICOLOR_FORCE", "1").env("NO_COLOR", "1").output().unwrap();
    let plain = String::from_utf8(plain.stderr).unwrap();
    assert!(!plain.contains(['\u{1b}', '\u{202e}', '\u{2066}']), "{plain:?}");
}

#[test]
fn the_list_of_methods_states_ranges_as_their_records_do() {
    let list = run(&["methods"]).out;
    let words = list.split_whitespace().collect::<Vec<_>>().join(" ");
    assert!(words.contains("range checks") && words.contains("tray spacing 150 to 915"), "{list}");
    assert!(words.contains("none stated"), "{list}");
}
