//! Balanced shares against closed-form solutions by a separate script, with areas of its own: `tests/reference/balance`.

mod common;

use approx::assert_relative_eq;
use chordwall::engine::case::{Case, Diameter, Place, Position};
use chordwall::engine::correlation::catalogue::Catalogue;
use chordwall::engine::design::work;
use chordwall::engine::units::{Length, Si};
use common::{case, declared, row, section};
use serde_json::Value;

const REFERENCE: &str = include_str!("reference/balance/balance.json");

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().unwrap().iter().map(|v| v.as_f64().unwrap()).collect()
}

/// The reference's case, each section with internals of its own; sections above and below the wall carry no part of the balance.
fn case_of(given: &Value) -> Case {
    let number = |value: &Value, key: &str| value[key].as_f64().unwrap();
    let sides = given["compartments"].as_array().unwrap();
    let vapour = number(given, "vapour_kg_s");
    let mut internals = vec![declared("ends", 0.3, Some((50.0, 2.0)))];
    let mut sections = Vec::new();
    let mut rising = 0.0;
    for (i, side) in sides.iter().enumerate() {
        for (j, given) in side.as_array().unwrap().iter().enumerate() {
            let name = format!("{i}.{j}");
            let load = number(given, "vapour_kg_s");
            rising += if j == 0 { load } else { 0.0 };
            sections.push((
                section(&name, Place::Compartment(i), internals.len(), number(given, "height_m")),
                vec![row(load, 5.0, number(given, "vapour_density"), 700.0)],
            ));
            internals.push(declared(&name, 0.2, Some((number(given, "resistance"), 2.0))));
        }
    }
    sections.insert(0, (section("top", Place::Above, 0, 3.0), vec![row(rising, 10.0, 3.0, 700.0)]));
    sections.push((section("bottom", Place::Below, 0, 3.0), vec![row(vapour, 10.0, 3.0, 700.0)]));
    let names = ["one", "two", "three"];
    case(
        internals,
        &names[..sides.len()],
        sections,
        Diameter::Given(Length::from_si(number(given, "diameter_m"))),
        Position::Given(numbers(&given["positions_m"]).into_iter().map(Length::from_si).collect()),
        number(given, "thickness_m"),
    )
}

#[test]
fn balanced_shares_are_those_solved_by_hand() {
    let reference: Value = serde_json::from_str(REFERENCE).unwrap();
    let cases = reference["cases"].as_array().unwrap();
    assert_eq!(cases.len(), 8);
    for given in cases {
        let name = given["name"].as_str().unwrap();
        let answer = work(&case_of(given), &Catalogue::default()).unwrap();
        let (areas, shares) = (numbers(&given["area_m2"]), numbers(&given["share"]));
        assert_eq!((areas.len(), shares.len()), (answer.compartments.len(), answer.compartments.len()), "{name}");
        for ((compartment, area), share) in answer.compartments.iter().zip(&areas).zip(&shares) {
            let (got_m2, got) = (compartment.area.si(), compartment.vapour_share.unwrap());
            assert!((got_m2 - area).abs() <= 1e-12 * area, "{name}, {}: {got_m2} against {area} m2", compartment.name);
            assert!((got - share).abs() <= 1e-9, "{name}, {}: {got} against {share}", compartment.name);
        }
        let drop = given["pressure_drop_pa"].as_f64().unwrap();
        assert_relative_eq!(answer.balance.pressure_drop.unwrap().si(), drop, max_relative = 1e-9);
        let [only] = answer.balance.solutions.as_slice() else { panic!("{name}: {:?}", answer.balance.solutions) };
        assert!(only.stable, "{name}");
    }
}
