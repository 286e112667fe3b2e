//! Against the Python package fluids 1.3.1: vectors committed beside their generator under tests/reference/fluids.

use chordwall::input::builtin;

/// Rows of a committed CSV file, each value with its column's name.
fn rows(text: &'static str) -> impl Iterator<Item = Vec<(&'static str, f64)>> {
    let mut lines = text.lines();
    let header: Vec<&str> = lines.next().unwrap().split(',').collect();
    lines.map(move |line| header.iter().copied().zip(line.split(',').map(|v| v.parse().unwrap())).collect())
}

/// Largest relative difference of an output (its column has the same name) over all rows.
fn largest_difference(id: &str, output: &str, inputs: &[&str], text: &'static str) -> (usize, f64) {
    let catalogue = builtin::catalogue_of(&[id], &[]).unwrap();
    let record = catalogue.record(id).unwrap();
    rows(text).fold((0, 0.0), |(count, worst), row| {
        let at: Vec<(&str, f64)> = row.iter().copied().filter(|(name, _)| inputs.contains(name)).collect();
        assert_eq!(at.len(), inputs.len());
        let expected = row.iter().find(|(name, _)| *name == output).unwrap().1;
        let (got, _) = record.evaluate_output(output, &at).unwrap_or_else(|error| panic!("{error} at {row:?}"));
        (count + 1, f64::max(worst, (got / expected - 1.0).abs()))
    })
}

const STICHLMAIR: &str = include_str!("reference/fluids/stichlmair.csv");

#[test]
fn dry_pressure_drop_agrees_to_1e_12() {
    let inputs =
        ["specific_area", "void_fraction", "c1", "c2", "c3", "vapour_density", "vapour_viscosity", "vapour_velocity"];
    let (count, worst) = largest_difference("stichlmair-1989-pressure-drop", "dry_gradient", &inputs, STICHLMAIR);
    assert!(count > 400 && worst < 1e-12, "{count} rows, {worst:e}");
}

#[test]
fn irrigated_pressure_drop_agrees_to_1e_9() {
    let inputs = [
        "specific_area",
        "void_fraction",
        "c1",
        "c2",
        "c3",
        "liquid_velocity",
        "vapour_density",
        "liquid_density",
        "vapour_viscosity",
        "vapour_velocity",
    ];
    let (count, worst) = largest_difference("stichlmair-1989-pressure-drop", "wet_gradient", &inputs, STICHLMAIR);
    assert!(count > 400 && worst < 1e-9, "{count} rows, {worst:e}");
}

/// The dry head of a sieve is one velocity head through the holes: 50.8 mm per (m/s)^2 and density ratio where
/// 1000/(2 g) is 50.986, 0.4 % less. The package's orifice formula gives that velocity head.
#[test]
fn dry_head_is_the_orifice_formula_less_the_rounding_of_its_constant() {
    let catalogue = builtin::catalogue_of(&["fair-1963-dry-head"], &[]).unwrap();
    let record = catalogue.record("fair-1963-dry-head").unwrap();
    let rho_l = 800.0;
    let mut count = 0;
    for row in rows(include_str!("reference/fluids/orifice.csv")) {
        let [(_, coefficient), (_, rho_v), (_, velocity), (_, pressure_drop_pa)] = row[..] else { panic!("{row:?}") };
        let at = [
            ("orifice_coefficient", coefficient),
            ("vapour_density", rho_v),
            ("liquid_density", rho_l),
            ("hole_velocity", velocity),
        ];
        let head_mm = record.evaluate(&at).unwrap();
        let exact = head_mm / 50.8 * 1000.0 / (2.0 * 9.80665);
        assert!((exact * 1e-3 * rho_l * 9.80665 / pressure_drop_pa - 1.0).abs() < 1e-9, "{row:?}");
        count += 1;
    }
    assert_eq!(count, 27);
}
