//! Each coefficient of each correlation, moved by 1 % either way, must break a check point of its own file.
//!
//! This is the mutation test that mutating code cannot be: the numbers live in data.

use chordwall::engine::correlation::record::Record;
use chordwall::input::builtin;

/// Coefficients that no check can catch, with the reason: (record, coefficient, why).
const SURVIVORS: &[(&str, &str, &str)] = &[];

fn breaks(record: &Record) -> bool {
    record.run_checks().iter().any(|outcome| !outcome.passed)
}

fn moved(record: &Record, coefficient: usize, value: usize, factor: f64) -> Record {
    let mut moved = record.clone();
    moved.coefficients[coefficient].values[value] *= factor;
    moved
}

#[test]
fn every_coefficient_moved_by_one_percent_breaks_a_check() {
    let catalogue = builtin::catalogue().unwrap_or_else(|error| panic!("{error}"));
    let mut tried = 0;
    let mut survivors = Vec::new();
    for record in catalogue.records() {
        assert!(!breaks(record), "{} fails unmoved", record.id);
        for (place, coefficient) in record.coefficients.iter().enumerate() {
            for (item, value) in coefficient.values.iter().enumerate() {
                assert!(*value != 0.0, "{} {}: moving zero by a part proves nothing", record.id, coefficient.name);
                for factor in [0.99, 1.01] {
                    tried += 1;
                    if !breaks(&moved(record, place, item, factor)) {
                        survivors.push((record.id.as_str(), coefficient.name.as_str(), item, factor));
                    }
                }
            }
        }
    }
    assert!(tried > 200, "only {tried} moves were tried");
    survivors.retain(|(id, name, ..)| !SURVIVORS.iter().any(|(i, n, _)| i == id && n == name));
    assert!(survivors.is_empty(), "moved without breaking a check: {survivors:#?}");
}

#[test]
fn allowed_survivors_exist_and_survive() {
    let catalogue = builtin::catalogue().unwrap();
    for (id, name, why) in SURVIVORS {
        assert!(!why.is_empty());
        let record = catalogue.record(id).unwrap();
        let place = record.coefficients.iter().position(|c| c.name == *name).unwrap();
        let items = 0..record.coefficients[place].values.len();
        assert!(
            items
                .flat_map(|item| [(item, 0.99), (item, 1.01)])
                .any(|(item, f)| !breaks(&moved(record, place, item, f))),
            "{id} {name} is caught now: take it off the list"
        );
    }
}
