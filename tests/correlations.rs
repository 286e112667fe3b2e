//! Behaviour of the correlations between and beyond their check points.

use chordwall::engine::correlation::catalogue::Catalogue;
use chordwall::input::builtin;

fn catalogue() -> Catalogue {
    builtin::catalogue().unwrap_or_else(|error| panic!("{error}"))
}

fn outside(id: &str, output: &str, at: &[(&str, f64)]) -> Vec<String> {
    let catalogue = catalogue();
    let (_, outside) = catalogue.record(id).unwrap().evaluate_output(output, at).unwrap();
    outside.iter().map(ToString::to_string).collect()
}

#[test]
fn what_a_method_holds_at_a_limit_is_reported() {
    let said = outside("fair-1961-capacity", "csb", &[("tray_spacing", 1000.0), ("flow_parameter", 0.003)]);
    assert_eq!(
        said,
        [
            "fair-1961-capacity: tray spacing 1000 mm is outside 150 to 915 mm (range of the chart from memory; beyond it \
             the spacing is held at its end)",
            "fair-1961-capacity: flow parameter 0.003 is outside 0.01 to 1 (range of the chart from memory; below 0.005 \
             held at 0.005)",
        ]
    );
    let said = outside(
        "kister-2007-later-chart-structured",
        "capacity_parameter",
        &[("gradient", 0.5), ("flow_parameter", 0.004)],
    );
    assert_eq!(
        said,
        [
            "kister-2007-later-chart-structured: flow parameter 0.004 is outside 0.01 to 2 (ends of the chart; below 0.01 \
          evaluated at 0.01)"
        ]
    );
    assert_eq!(outside("downcomer-practice", "velocity_low", &[("tray_spacing", 36.0)]).len(), 1);
    assert_eq!(outside("fair-1961-entrainment", "psi", &[("flood", 0.95), ("flow_parameter", 0.05)]).len(), 1);
}

#[test]
fn ends_of_a_range_belong_to_it() {
    for (spacing, fp) in [(150.0, 0.01), (915.0, 1.0)] {
        assert!(outside("fair-1961-capacity", "csb", &[("tray_spacing", spacing), ("flow_parameter", fp)]).is_empty());
    }
}

#[test]
fn missing_and_unknown_arguments_and_numbers_that_are_none_are_refused() {
    let catalogue = catalogue();
    let record = catalogue.record("fair-1961-capacity").unwrap();
    let say = |at: &[(&str, f64)]| record.evaluate(at).unwrap_err().to_string();
    assert_eq!(
        say(&[("tray_spacing", 500.0)]),
        "correlation \"fair-1961-capacity\": argument \"flow_parameter\" was not given"
    );
    assert_eq!(
        say(&[("spacing", 500.0)]),
        "correlation \"fair-1961-capacity\": it takes no argument \"spacing\"; it takes tray_spacing, flow_parameter"
    );
    assert_eq!(
        say(&[("tray_spacing", f64::NAN), ("flow_parameter", 0.1)]),
        "tray_spacing came out as NaN, not a finite number"
    );
    assert!(record.evaluate_output("csp", &[]).is_err());
}

/// Every curve and everything between: the older chart rises with the gradient at every abscissa, its inverse finds the
/// way back, and its local exponent has no jump at a curve.
#[test]
fn older_chart_is_monotone_smooth_and_invertible() {
    let catalogue = catalogue();
    let record = catalogue.record("blackwell-1984-older-chart").unwrap();
    let y = |gradient: f64, x: f64| record.evaluate(&[("gradient", gradient), ("abscissa", x)]).unwrap();
    for x in [0.01, 0.03, 0.1, 0.4, 1.0, 2.0] {
        let mut last = 0.0;
        for step in 0..=200 {
            let gradient = 0.03 * (1.5f64 / 0.03).powf(f64::from(step) / 200.0);
            let ordinate = y(gradient, x);
            assert!(ordinate > last, "{x} {gradient}");
            last = ordinate;
            if step < 200 {
                let at = [("ordinate", ordinate), ("abscissa", x)];
                let (back, _) = record.evaluate_output("gradient", &at).unwrap();
                assert!((back / gradient - 1.0).abs() < 1e-11, "{x} {gradient} {back}");
            }
        }
        for curve in [0.05f64, 0.1, 0.25, 0.5, 1.0] {
            let d = 1e-6f64;
            let below = (y(curve, x) / y(curve * (1.0 - d), x)).ln() / -(1.0 - d).ln();
            let above = (y(curve * (1.0 + d), x) / y(curve, x)).ln() / (1.0 + d).ln();
            assert!((below - above).abs() < 1e-3, "kink at {curve}, {x}: {below} {above}");
        }
    }
}

/// The later chart's closed inverse, over the chart.
#[test]
fn later_chart_inverse_is_exact_and_rises() {
    let catalogue = catalogue();
    for id in ["kister-2007-later-chart-structured", "kister-2007-later-chart-random"] {
        let record = catalogue.record(id).unwrap();
        for x in [0.003, 0.01, 0.1, 0.7, 2.0] {
            let mut last = 0.0;
            for gradient in [1e-3, 0.01, 0.1, 0.5, 1.5, 2.0] {
                let cp = record.evaluate(&[("gradient", gradient), ("flow_parameter", x)]).unwrap();
                assert!(cp > last);
                last = cp;
                let at = [("capacity_parameter", cp), ("flow_parameter", x)];
                let (back, _) = record.evaluate_output("gradient", &at).unwrap();
                assert!((back / gradient - 1.0).abs() < 1e-10, "{id} {x} {gradient} {back}");
            }
        }
    }
}

/// System limit at constant L/V: at the found capacity the plain form gives the same figure.
#[test]
fn system_limit_at_constant_ratio_is_where_the_plain_form_meets_itself() {
    let catalogue = catalogue();
    let record = catalogue.record("stupin-kister-2003-system-limit").unwrap();
    for ratio in [0.0, 0.05, 0.15, 0.3, 1.0, 4.0] {
        let fluids = [("vapour_density", 6.0), ("liquid_density", 550.0), ("surface_tension", 9.0)];
        let at = |name: &'static str, value: f64| [fluids.to_vec(), vec![(name, value)]].concat();
        let (c, _) =
            record.evaluate_output("capacity_at_constant_ratio", &at("liquid_velocity_over_c", ratio)).unwrap();
        let plain = record.evaluate(&at("liquid_velocity", ratio * c)).unwrap();
        assert!((plain / c - 1.0).abs() < 1e-12, "{ratio}: {plain} {c}");
    }
}

/// Both methods of aerated liquid on one grid: within a factor of 2.2 of each other for weirs of 25 to 75 mm and usual
/// loads. The widest gap is at high vapour and low liquid loads, where the froth density falls to a quarter while the
/// aeration factor stays near 0.6. They are rivals; a wider gap would mean a slip in one of them.
#[test]
fn the_two_aerated_liquid_methods_stay_within_a_band() {
    let catalogue = catalogue();
    let bennett = catalogue.record("bennett-1983-aerated-liquid").unwrap();
    let fair = catalogue.record("fair-1963-aeration").unwrap();
    let weir = catalogue.record("francis-weir-crest").unwrap();
    for (rho_v, rho_l) in [(1.2, 800.0), (3.0, 750.0), (10.0, 600.0)] {
        for ks in [0.03, 0.05, 0.08] {
            for weir_height in [0.025, 0.05, 0.075] {
                for weir_load in [0.002, 0.008, 0.02] {
                    let one = bennett
                        .evaluate(&[("ks", ks), ("weir_height", weir_height), ("weir_load", weir_load)])
                        .unwrap();
                    let f_si = ks * f64::sqrt(rho_l - rho_v);
                    let beta = fair.evaluate(&[("f_factor", f_si / fair.input_unit("f_factor").unwrap())]).unwrap();
                    let crest_mm = weir.evaluate(&[("weir_load", weir_load), ("constriction_factor", 1.0)]).unwrap();
                    let other = beta * (weir_height + crest_mm * 1e-3);
                    let gap = f64::max(one / other, other / one);
                    assert!(gap < 2.2, "{rho_v} {ks} {weir_height} {weir_load}: {one} {other}");
                }
            }
        }
    }
}
