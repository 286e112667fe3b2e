//! Every broken file under `tests/diagnostics` gives the message text beside it, and nothing that is mutated panics.
//!
//! `case/NAME.toml` is a broken case, checked with `good.csv`; `table/NAME.csv` is a broken table, checked with
//! `good.toml`. The expected text is `NAME.txt`. With the environment variable `REWRITE_DIAGNOSTICS` set, the texts are
//! written instead of compared: read every one of them before committing it.

use chordwall::engine::correlation::catalogue::Catalogue;
use chordwall::input;
use std::fs;
use std::path::{Path, PathBuf};

fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/diagnostics")
}

fn good(name: &str) -> String {
    fs::read_to_string(folder().join(name)).expect("the good files exist")
}

fn catalogue() -> Catalogue {
    input::builtin::catalogue().expect("the built-in correlations can be read")
}

/// The messages of a case with its table; None if nothing is wrong.
fn messages(case: &str, table: &str, catalogue: &Catalogue) -> Option<String> {
    let opened = match input::open("case.toml", case) {
        Ok(opened) => opened,
        Err(diagnostics) => return Some(diagnostics.to_plain_text()),
    };
    let table = opened.table().is_some().then_some(table);
    opened.check(table, catalogue).err().map(|diagnostics| diagnostics.to_plain_text())
}

fn files(kind: &str, ending: &str) -> Vec<PathBuf> {
    let entries = fs::read_dir(folder().join(kind)).expect("the folder exists");
    let paths = entries.map(|entry| entry.expect("an entry can be read").path());
    let mut files: Vec<PathBuf> = paths.filter(|path| path.extension().is_some_and(|found| found == ending)).collect();
    files.sort();
    files
}

/// Compares (or rewrites) the text beside a file; what differs is returned.
fn compare(path: &Path, found: &str) -> Option<String> {
    let expected_path = path.with_extension("txt");
    if std::env::var_os("REWRITE_DIAGNOSTICS").is_some() {
        fs::write(&expected_path, found).expect("the text can be written");
        return None;
    }
    let expected = fs::read_to_string(&expected_path).unwrap_or_default();
    (expected != found).then(|| format!("{}\n--- expected\n{expected}\n--- found\n{found}", path.display()))
}

#[test]
fn every_broken_file_gives_its_message() {
    let catalogue = catalogue();
    let cases = files("case", "toml");
    let tables = files("table", "csv");
    assert!(cases.len() + tables.len() >= 40, "only {} + {} broken files", cases.len(), tables.len());
    let mut differing = Vec::new();
    for path in &cases {
        let text = fs::read_to_string(path).expect("the case can be read");
        let found = messages(&text, &good("good.csv"), &catalogue);
        differing.extend(compare(path, &found.unwrap_or_else(|| panic!("{} is not broken", path.display()))));
    }
    for path in &tables {
        let text = fs::read_to_string(path).expect("the table can be read");
        let found = messages(&good("good.toml"), &text, &catalogue);
        differing.extend(compare(path, &found.unwrap_or_else(|| panic!("{} is not broken", path.display()))));
    }
    assert!(differing.is_empty(), "{}", differing.join("\n\n"));
}

#[test]
fn the_good_files_are_good() {
    assert_eq!(messages(&good("good.toml"), &good("good.csv"), &catalogue()), None);
}

#[test]
fn every_message_marks_something_and_says_what_would_be_right_or_why() {
    for (kind, _) in [("case", "toml"), ("table", "csv")] {
        for path in files(kind, "txt") {
            let text = fs::read_to_string(&path).expect("the text can be read");
            for item in text.split("\n\n") {
                assert!(item.contains('^'), "{}: no mark in\n{item}", path.display());
                assert!(
                    item.contains("help:")
                        || item.contains("must be")
                        || item.contains("cannot be")
                        || item.contains("beyond"),
                    "{}: no help in\n{item}",
                    path.display()
                );
            }
        }
    }
}
