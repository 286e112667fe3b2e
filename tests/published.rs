//! Every check point of every correlation file, and the published worked examples composed from the correlations.

use chordwall::input::builtin;

#[path = "published/packing_examples.rs"]
mod packing_examples;
#[path = "published/support.rs"]
mod support;
#[path = "published/tray_examples.rs"]
mod tray_examples;

#[test]
fn every_file_has_two_checks_and_a_located_source_and_all_checks_pass() {
    let catalogue = builtin::catalogue().unwrap_or_else(|error| panic!("{error}"));
    let bib = include_str!("../correlations/sources.bib");
    let mut failures = Vec::new();
    let mut checked = 0;
    for record in catalogue.records() {
        assert!(record.checks.len() >= 2, "{} has {} checks", record.id, record.checks.len());
        assert!(!record.source.location.is_empty() && !record.source.read_in.is_empty(), "{}", record.id);
        let key = format!("{{{},", record.source.key);
        assert!(bib.contains(&key), "{}: {} is not in sources.bib", record.id, record.source.key);
        for outcome in record.run_checks() {
            checked += 1;
            if !outcome.passed {
                let check = &outcome.check;
                failures.push(format!(
                    "{} {} at {:?}: {:?} for {} within {} ({})",
                    record.id, check.output, check.at, outcome.got, check.expect, check.tolerance, check.source
                ));
            }
        }
    }
    assert!(failures.is_empty(), "{} of {checked} checks fail:\n{}", failures.len(), failures.join("\n"));
    assert!(checked > 250, "only {checked} checks ran");
}

#[test]
fn every_output_of_every_record_is_checked() {
    for record in builtin::catalogue().unwrap().records() {
        for output in &record.outputs {
            assert!(
                record.checks.iter().any(|c| c.output == output.name),
                "{} {} has no check",
                record.id,
                output.name
            );
        }
    }
}

#[test]
fn records_and_packing_tables_together_are_the_files_of_the_directory() {
    let directory = concat!(env!("CARGO_MANIFEST_DIR"), "/correlations");
    let files = std::fs::read_dir(directory)
        .unwrap()
        .filter(|entry| entry.as_ref().unwrap().path().extension().is_some_and(|ending| ending == "toml"));
    let tables = builtin::FILES.iter().filter(|(_, text)| text.contains("\n[[packing]]\n")).count();
    let records = builtin::catalogue().unwrap().records().len();
    assert!(records > 0 && tables > 0);
    assert_eq!(records + tables, files.count());
}
