//! How long the engine takes. DEVELOPERS.md keeps the figures, as ratios within one run.
//!
//! `cargo bench --bench engine` prints criterion's times, then the two ratios that are goals: a balance over the bare
//! correlation calls it needs, and the growth of a balance with its rows.
#![expect(clippy::print_stdout, clippy::disallowed_types, reason = "a bench times and prints")]

#[path = "../common/mod.rs"]
mod common;

use chordwall::engine::case::*;
use chordwall::engine::correlation::catalogue::Catalogue;
use chordwall::engine::design::{Probe, work};
use chordwall::engine::units::*;
use chordwall::input::{builtin, open};
use common::*;
use criterion::{BenchmarkId, Criterion};
use std::hint::black_box;
use std::time::Duration;

/// A wall zone of `rows` rows of sheet packing, half on each side.
fn packed(catalogue: &Catalogue, rows: usize) -> Case {
    let packing = catalogue.packing("sheet 250/45").unwrap().clone();
    let sheet = Internals { name: "sheet".into(), kind: InternalsKind::Packing(packing) };
    let half = rows / 2;
    let bed = |v: f64, l: f64| -> Vec<Row> {
        (0..half).map(|i| row(v + 0.01 * i as f64, l, 2.6 + 0.005 * i as f64, 735.0)).collect()
    };
    case(
        vec![sheet],
        &["feed", "draw"],
        vec![
            (section("top", Place::Above, 0, 5.0), bed(9.0, 6.0)),
            (section("f", Place::Compartment(0), 0, 8.0), bed(7.0, 3.0)),
            (section("d", Place::Compartment(1), 0, 8.0), bed(4.4, 5.0)),
            (section("bottom", Place::Below, 0, 5.0), bed(10.0, 14.0)),
        ],
        Diameter::Given(Length::from_si(3.0)),
        Position::Given(vec![Length::from_si(0.2)]),
        0.01,
    )
}

/// A shipped case with its table.
fn shipped(name: &str, catalogue: &Catalogue) -> Case {
    let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/cases/");
    let text = std::fs::read_to_string(format!("{folder}{name}.toml")).unwrap();
    let opened = open(name, &text).unwrap();
    let table = std::fs::read_to_string(format!("{folder}{}", opened.table().unwrap())).unwrap();
    opened.check(Some(&table), catalogue).unwrap()
}

fn correlations(c: &mut Criterion, catalogue: &Catalogue) {
    let mut group = c.benchmark_group("one check point of each correlation, by name");
    for record in catalogue.records() {
        let check = record.checks.first().unwrap();
        let at: Vec<(&str, f64)> = check.at.iter().map(|(name, value)| (name.as_str(), *value)).collect();
        group.bench_function(&record.id, |b| b.iter(|| record.evaluate_output(&check.output, black_box(&at)).unwrap()));
    }
    group.finish();
}

fn main() {
    let catalogue = builtin::catalogue().unwrap();
    let mut c = Criterion::default()
        .measurement_time(Duration::from_secs(2))
        .warm_up_time(Duration::from_millis(500))
        .configure_from_args();
    correlations(&mut c, &catalogue);

    let sixty = packed(&catalogue, 60);
    let probe = Probe::new(&sixty, &catalogue).unwrap();
    c.bench_function("rows: bare friction calls of 60 rows", |b| b.iter(|| probe.bare_rows(0, black_box(1.01))));
    c.bench_function("compartment: pressure drop of 30 rows", |b| {
        b.iter(|| probe.pressure_drop(0, 0, black_box(1.01)))
    });
    c.bench_function("balance: 60 rows", |b| b.iter(|| probe.balances(black_box(0))));
    let mut group = c.benchmark_group("balance against rows");
    for rows in [30, 60, 120, 240, 480] {
        let case = packed(&catalogue, rows);
        let probe = Probe::new(&case, &catalogue).unwrap();
        group
            .bench_with_input(BenchmarkId::from_parameter(rows), &rows, |b, _| b.iter(|| probe.balances(black_box(0))));
    }
    group.finish();
    for name in ["ketone", "alcohol", "hydrocarbon"] {
        let case = shipped(name, &catalogue);
        c.bench_function(&format!("whole answer: {name}"), |b| b.iter(|| work(black_box(&case), &catalogue).unwrap()));
    }
    c.final_summary();
    ratios(&catalogue);
}

/// Shortest time of a few rounds, which is the least disturbed one.
fn time(mut act: impl FnMut()) -> f64 {
    (0..40)
        .map(|_| {
            let start = std::time::Instant::now();
            for _ in 0..50 {
                act();
            }
            start.elapsed().as_secs_f64() / 50.0
        })
        .fold(f64::INFINITY, f64::min)
}

fn ratios(catalogue: &Catalogue) {
    let mut per_row = Vec::new();
    for rows in [30, 60, 120, 240, 480] {
        let case = packed(catalogue, rows);
        let probe = Probe::new(&case, catalogue).unwrap();
        let (_, evaluations) = probe.balances(0);
        let balance = time(|| drop(black_box(probe.balances(black_box(0)))));
        let bare = time(|| {
            black_box(probe.bare_rows(0, black_box(1.01)));
        });
        let ratio = balance / (bare * evaluations as f64);
        println!("{rows} rows: balance over its {evaluations} x {rows} bare correlation calls: {ratio:.3}");
        per_row.push(balance / rows as f64);
    }
    let growth: Vec<String> = per_row.iter().map(|t| format!("{:.3}", t / per_row[0])).collect();
    println!("time a row, relative to 30 rows: {}", growth.join(", "));
}
