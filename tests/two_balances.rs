//! Trays whose aerated liquid falls faster than their dry drop rises: several divisions of the vapour balance, or none does.
#![allow(missing_docs)]

mod common;

use chordwall::engine::case::*;
use chordwall::engine::correlation::catalogue::Catalogue;
use chordwall::engine::design::{Probe, work};
use chordwall::engine::findings::{Criterion, Status};
use chordwall::engine::result::Answer;
use chordwall::engine::units::*;
use common::*;
use std::sync::OnceLock;

fn catalogue() -> &'static Catalogue {
    static CATALOGUE: OnceLock<Catalogue> = OnceLock::new();
    CATALOGUE.get_or_init(|| chordwall::input::builtin::catalogue().unwrap())
}

/// A well-open tray with a high weir.
fn deck(name: &str, hole_area: f64, weir_m: f64) -> Internals {
    let m = Length::from_si;
    Internals {
        name: name.into(),
        kind: InternalsKind::Tray(Tray {
            deck: Deck::Sieve,
            spacing: m(0.61),
            weir_height: m(weir_m),
            hole_diameter: m(0.006),
            hole_area,
            deck_thickness: m(0.003),
            downcomer_area: 0.15,
            downcomer_bottom_area: 0.15,
            downcomer_clearance: m(0.05),
            passes: 1,
            flow: LiquidFlow::AlongWall,
            edge_strip: m(0.0),
            weir_open: 1.0,
            foaming: None,
        }),
    }
}

/// Ten trays a side in a shell of 3.6 m with a central wall; `vapour` is what both sides get together, kg/s.
fn trays(vapour: f64, share: f64, hole_area: [f64; 2], weir_m: [f64; 2]) -> Case {
    let trays = |name: &str, place: Place, internals: usize| Section {
        extent: Extent::Trays(10.0),
        ..section(name, place, internals, 1.0)
    };
    let r = |v: f64, l: f64| vec![row(v, l, 17.0, 537.0)];
    case(
        vec![deck("first", hole_area[0], weir_m[0]), deck("second", hole_area[1], weir_m[1]), deck("ends", 0.10, 0.04)],
        &["one", "two"],
        vec![
            (trays("top", Place::Above, 2), r(vapour, 20.0)),
            (trays("s1", Place::Compartment(0), 0), r(share * vapour, 14.0)),
            (trays("s2", Place::Compartment(1), 1), r((1.0 - share) * vapour, 14.0)),
            (trays("bottom", Place::Below, 2), r(vapour, 20.0)),
        ],
        Diameter::Given(Length::from_si(3.6)),
        Position::Given(vec![Length::from_si(0.0)]),
        0.010,
    )
}

/// Shares at which the two drops cross, by a fine grid apart from the engine's own search; true where the difference rises.
fn crossings(case: &Case) -> Vec<(f64, bool)> {
    let probe = Probe::new(case, catalogue()).unwrap();
    let required = |side: usize| {
        let loads = &case.points[0].loads;
        let of = |section: usize| loads[section].last().unwrap().vapour_flow.si();
        of(1 + side) / (of(1) + of(2))
    };
    let gap = |share: f64| -> f64 {
        let first = probe.pressure_drop(0, 0, share / required(0)).unwrap().si();
        let second = probe.pressure_drop(0, 1, (1.0 - share) / required(1)).unwrap().si();
        first - second
    };
    let grid: Vec<f64> =
        (1..4000).map(|i| (f64::from(i) + 0.37) / 4000.0).filter(|s| (0.001..=0.999).contains(s)).collect();
    let mut out = Vec::new();
    for pair in grid.windows(2) {
        let (a, b) = (gap(pair[0]), gap(pair[1]));
        if a * b < 0.0 {
            out.push((0.5 * (pair[0] + pair[1]), b > a));
        }
    }
    out
}

fn agrees_with_the_grid(case: &Case, answer: &Answer) {
    let wanted = crossings(case);
    let found = &answer.balance.solutions;
    assert_eq!(found.len(), wanted.len(), "{found:?} against {wanted:?}");
    for (solution, (share, rises)) in found.iter().zip(&wanted) {
        assert!((solution.shares[0] - share).abs() < 1.0 / 4000.0, "{solution:?} against {share}");
        assert_eq!(solution.stable, *rises, "{solution:?}");
    }
}

fn balance_status(answer: &Answer) -> Status {
    answer.findings.iter().find(|f| f.criterion == Criterion::Balance).unwrap().status
}

#[test]
fn low_vapour_on_open_trays_balances_evenly_only_in_a_state_that_does_not_last() {
    // Mirror-like sides at low load: the even division balances, but more vapour on one side lowers its drop.
    let case = trays(7.0, 0.5, [0.14, 0.14], [0.075, 0.075]);
    let answer = work(&case, catalogue()).unwrap();
    agrees_with_the_grid(&case, &answer);
    let even = answer.balance.solutions.iter().find(|s| (s.shares[0] - 0.5).abs() < 1e-9).unwrap();
    assert!(!even.stable, "{:?}", answer.balance.solutions);
    // Contract: the actual shares are those of a stable balance, never of this one.
    assert!(answer.compartments.iter().all(|c| c.vapour_share != Some(even.shares[0])));
    assert_eq!(balance_status(&answer), Status::NotMet);
    assert_eq!(answer.verdict, Status::NotMet);
}

/// On each side open trays above a bed whose friction rises with the sixth power of the vapour: falling in the middle of the
/// range, steep at its end.
fn trays_over_beds(vapour: f64, k: f64) -> Case {
    let mut case = trays(vapour, 0.5, [0.14, 0.14], [0.075, 0.075]);
    case.internals.push(declared("steep", 0.3, Some((k, 6.0))));
    for side in [0, 1] {
        case.sections.push(section(&format!("bed {side}"), Place::Compartment(side), 3, 1.0));
        case.points[0].loads.push(vec![row(0.5 * vapour, 14.0, 17.0, 537.0)]);
    }
    case
}

#[test]
fn two_stable_balances_are_not_met_and_all_three_are_listed() {
    let case = trays_over_beds(30.0, 300.0);
    let answer = work(&case, catalogue()).unwrap();
    agrees_with_the_grid(&case, &answer);
    let stable: Vec<bool> = answer.balance.solutions.iter().map(|s| s.stable).collect();
    assert_eq!(stable, [true, false, true]);
    // Equal sides: the solutions mirror each other.
    let shares: Vec<f64> = answer.balance.solutions.iter().map(|s| s.shares[0]).collect();
    assert!((shares[0] + shares[2] - 1.0).abs() < 1e-9 && (shares[1] - 0.5).abs() < 1e-9, "{shares:?}");
    assert_eq!(balance_status(&answer), Status::NotMet);
    // One of the two stable ones stands, both being as near to the required share.
    let actual = answer.compartments[0].vapour_share.unwrap();
    assert!(actual == shares[0] || actual == shares[2]);
}

#[test]
fn one_stable_balance_between_two_unstable_ones_asks_for_attention() {
    let case = trays(43.0, 0.5, [0.14, 0.14], [0.075, 0.075]);
    let answer = work(&case, catalogue()).unwrap();
    agrees_with_the_grid(&case, &answer);
    assert_eq!(answer.balance.solutions.iter().map(|s| s.stable).collect::<Vec<_>>(), [false, true, false]);
    assert_eq!(balance_status(&answer), Status::Attention);
    assert!((answer.compartments[0].vapour_share.unwrap() - 0.5).abs() < 1e-9);
}

#[test]
fn unlike_trays_may_not_balance_at_all_and_the_least_imbalance_is_given() {
    // One side with high weirs and little vapour to lose: its drop stays above the other's at every division.
    let case = trays(6.0, 0.5, [0.14, 0.05], [0.015, 0.150]);
    let answer = work(&case, catalogue()).unwrap();
    agrees_with_the_grid(&case, &answer);
    assert!(answer.balance.solutions.iter().all(|s| !s.stable), "{:?}", answer.balance.solutions);
    assert!(answer.compartments.iter().all(|c| c.vapour_share.is_none()));
    assert!(answer.column_pressure_drop.is_none() && answer.balance.pressure_drop.is_none());
    assert_eq!(balance_status(&answer), Status::NotMet);
    if answer.balance.solutions.is_empty() {
        assert!(answer.balance.least_imbalance.unwrap().si().abs() > 0.0);
    }
}

#[test]
fn trays_with_a_firm_dry_drop_have_one_stable_balance() {
    let case = trays(30.0, 0.5, [0.08, 0.07], [0.04, 0.05]);
    let answer = work(&case, catalogue()).unwrap();
    agrees_with_the_grid(&case, &answer);
    assert_eq!(answer.balance.solutions.len(), 1);
    assert_eq!(balance_status(&answer), Status::Met);
}

#[test]
fn falling_characteristics_are_told_by_a_negative_response_exponent() {
    let case = trays(7.0, 0.5, [0.14, 0.14], [0.075, 0.075]);
    let answer = work(&case, catalogue()).unwrap();
    assert!(answer.compartments.iter().all(|c| c.response_exponent.unwrap() < 0.0));
    let exponents: Vec<_> = answer.findings.iter().filter(|f| f.criterion == Criterion::ResponseExponent).collect();
    // Both compartments by both liquid-head models.
    assert_eq!(exponents.len(), 4);
    assert!(exponents.iter().any(|f| f.status == Status::NotMet));
}
