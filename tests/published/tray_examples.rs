//! Worked examples on trays, step by step.
//!
//! "Unrounded" figures are the book's example worked out again from the same inputs without rounding, apart from this
//! program; they are compared to their last digit. Printed ones are compared to theirs, or within a band that says why.

use crate::support::{printed, si, within};

const G: f64 = 9.80665;

fn flow_parameter(liquid_kg_s: f64, vapour_kg_s: f64, rho_v: f64, rho_l: f64) -> f64 {
    liquid_kg_s / vapour_kg_s * (rho_v / rho_l).sqrt()
}

fn csb(spacing_m: f64, flow_parameter: f64) -> f64 {
    let at = [("tray_spacing", spacing_m), ("flow_parameter", flow_parameter)];
    let exponential = si("fair-1961-capacity", "csb", &at);
    if si("fair-1961-capacity-cubic", "applies", &at[1..]) == 1.0 {
        exponential.min(si("fair-1961-capacity-cubic", "csb", &at))
    } else {
        exponential
    }
}

fn sigma_factor(sigma_n_m: f64) -> f64 {
    si("fair-1961-surface-tension", "factor", &[("surface_tension", sigma_n_m)])
}

fn dry_head(co: f64, rho_v: f64, rho_l: f64, hole_velocity: f64) -> f64 {
    let densities = [("vapour_density", rho_v), ("liquid_density", rho_l)];
    let at = [("orifice_coefficient", co), densities[0], densities[1], ("hole_velocity", hole_velocity)];
    si("fair-1963-dry-head", "head", &at)
}

fn froth_density(ks: f64) -> f64 {
    si("bennett-1983-aerated-liquid", "froth_density", &[("ks", ks)])
}

fn clear_liquid(ks: f64, weir_height: f64, weir_load: f64) -> f64 {
    let at = [("ks", ks), ("weir_height", weir_height), ("weir_load", weir_load)];
    si("bennett-1983-aerated-liquid", "head", &at)
}

fn sigma_head(sigma_n_m: f64, rho_l: f64, hole_m: f64) -> f64 {
    let at = [("surface_tension", sigma_n_m), ("liquid_density", rho_l), ("hole_diameter", hole_m)];
    si("treybal-1980-surface-tension-head", "head", &at)
}

fn crest(weir_load: f64, constriction: f64) -> f64 {
    si("francis-weir-crest", "crest", &[("weir_load", weir_load), ("constriction_factor", constriction)])
}

fn apron(flow: f64, area: f64) -> f64 {
    si("downcomer-apron-loss", "head", &[("liquid_flow", flow), ("area", area)])
}

fn psi(flood: f64, flow_parameter: f64) -> f64 {
    si("fair-1961-entrainment", "psi", &[("flood", flood), ("flow_parameter", flow_parameter)])
}

/// Sinnott 2005 (Coulson and Richardson vol. 6): acetone-water sieve plate, base and top.
#[test]
fn acetone_water_sieve_plate_of_sinnott() {
    let (vapour, liquid) = (0.04508 * 18.0, 0.22544 * 18.0);
    let base = flow_parameter(liquid, vapour, 0.72, 954.0);
    printed(base, 0.1374, 1e-4);
    printed(base, 0.14, 1e-2);
    // K1 0.075 m/s was read off the chart; the equation stands 4 % above that reading and 3 % at the top.
    within(csb(0.5, base), 0.075, 0.05);
    // Top: the flow parameter 0.0297 lies below 0.03, so the lower of the two fits counts.
    within(csb(0.5, 0.0297), 0.090, 0.05);
    // From the readings on, step by step.
    let corrected = [(0.075, 57e-3, 0.0925), (0.090, 23e-3, 0.0926)];
    let velocities = [(954.0, 0.72, 3.365, 3.38), (753.0, 2.05, 1.771, 1.78)];
    for ((k1, sigma, c), (rho_l, rho_v, unrounded, book)) in corrected.into_iter().zip(velocities) {
        let capacity = k1 * sigma_factor(sigma);
        printed(capacity, c, 1e-4);
        let flood = capacity * f64::sqrt((rho_l - rho_v) / rho_v);
        printed(flood, unrounded, 1e-3);
        // The book rounds the corrected factor to 0.093 first.
        within(flood, book, 0.006);
    }

    // Plate of 0.79 m with the book's areas: turndown 70 %.
    let q = liquid / 954.0;
    // Dry drop: the book has 51 for 50.8, so 0.4 % less here; Co 0.84 read off the chart, 0.836 by the regression.
    let co =
        si("leibson-1957-orifice-coefficient", "coefficient", &[("thickness_over_diameter", 1.0), ("hole_area", 0.1)]);
    within(co, 0.84, 0.006);
    let hole_velocity = vapour / 0.72 / 0.038;
    printed(hole_velocity, 29.66, 1e-2);
    within(dry_head(0.84, 0.72, 954.0, hole_velocity) * 1e3, 48.1, 0.007);
    // Crest: the book's 750 has a constriction of about 1.13 in it; free weir here, so the ratio is 664/750.
    within(crest(q / 0.60, 1.0) * 1e3 * 750.0 / 664.0, 27.7, 0.01);
    // Weep point at turndown, h = 72 mm: K2 30.6 and 14 m/s printed, 14.42 unrounded.
    let at = [("liquid_head", 0.0718), ("hole_diameter", 0.005), ("vapour_density", 0.72)];
    printed(si("eduljee-1959-weep", "k2", &at[..1]), 30.6, 0.1);
    let least = si("eduljee-1959-weep", "least_hole_velocity", &at);
    printed(least, 14.42, 1e-2);
    printed(least, 14.0, 1.0);
    // Apron, 40 mm over 0.60 m: 165 here, 166 in the book; it prints 6 after rounding, 5.2 unrounded.
    printed(apron(q, 0.024) * 1e3, 5.2, 0.1);
    // Entrainment at 76 % of flood: 0.018 read off the chart, 0.0185 by the equation.
    printed(psi(0.76, 0.14), 0.0185, 1e-4);
}

/// Weep rate at the onset by the line (14.4 m/s) on the same plate: 4.3 % of the liquid, worked out apart from this
/// program; it needs the clear liquid, for which the froth-density head at the real turndown load (20.76 m/s through the
/// holes) stands in that figure.
#[test]
fn weep_at_the_onset_is_about_four_percent_of_the_liquid() {
    let q = 0.7 * 0.22544 * 18.0 / 954.0;
    let ua = 20.76 * 0.038 / 0.38;
    let ks = ua * f64::sqrt(0.72 / (954.0 - 0.72));
    let liquid = clear_liquid(ks, 0.05, q / 0.60);
    let froude = 14.4f64.powi(2) * 0.72 / (G * liquid * (954.0 - 0.72));
    printed(froude, 0.52, 1e-2);
    let at = [("hole_velocity", 14.4), ("clear_liquid", liquid), ("vapour_density", 0.72), ("liquid_density", 954.0)];
    let rate = si("lockett-banik-1986-weep", "rate", &at);
    printed(rate * 0.038 / q, 0.043, 1e-3);
}

/// Benitez 2009, examples 4.6 to 4.9: ethanol absorber, from the tray's heads on (its flood and dry drop use other
/// methods).
#[test]
fn ethanol_absorber_of_benitez() {
    let (rho_v, rho_l, sigma) = (1.923, 986.0, 0.070);
    let ks = 1.863 * f64::sqrt(rho_v / (rho_l - rho_v));
    printed(ks, 0.08235, 1e-5);
    let phi = froth_density(ks);
    printed(phi, 0.2742, 1e-4);
    printed(phi, 0.274, 1e-3);
    let liquid = clear_liquid(ks, 0.05, 8.15e-4 / 0.7187);
    printed(liquid * 100.0, 1.725, 1e-3);
    let sigma_m = sigma_head(sigma, rho_l, 0.005);
    printed(sigma_m * 100.0, 0.869, 1e-3);
    // Total with the book's own dry head 5.860 cm: 8.454 cm unrounded (8.44 printed), 817 Pa (816 printed).
    let total = 0.05860 + liquid + sigma_m;
    printed(total * 100.0, 8.454, 1e-3);
    printed(total * rho_l * G, 817.0, 1.0);
    // Froude criterion of the same example: 1.984 unrounded, no weep.
    printed(f64::sqrt(rho_v * 18.48f64.powi(2) / (rho_l * 9.81 * liquid)), 1.984, 2e-3);
}

/// Dutta 2007, example 5.1.
#[test]
fn sieve_tray_of_dutta() {
    let (liquid, vapour, rho_v, rho_l) = (15300.0 / 3600.0, 24500.0 / 3600.0, 2.643, 807.3);
    let fp = flow_parameter(liquid, vapour, rho_v, rho_l);
    printed(fp, 0.0357, 1e-4);
    // Chart reading 0.0869 m/s; the equation lies 1 % below it.
    within(csb(0.4572, fp), 0.0869, 0.015);
    let flood = 0.285 * 0.3048 * sigma_factor(0.0205) * f64::sqrt((rho_l - rho_v) / rho_v);
    printed(flood, 1.523, 1e-3);
    printed(flood / 0.3048, 5.00, 1e-2);
    let q = liquid / rho_l;
    printed(crest(q / 1.143, 1.27) * 1e3, 23.3, 0.1);
    printed(crest(q / 1.143, 1.27) / 0.0254, 0.92, 1e-2);
    printed(dry_head(0.73, rho_v, rho_l, 39.1 * 0.3048) / 0.0254, 1.75, 1e-2);
    // Aeration factor 0.6 read off the chart at the tray's F; 0.610 by the fit.
    let f = 1.6 * 0.3048 * f64::sqrt(0.45359237 / 0.3048f64.powi(3));
    printed(si("fair-1963-aeration", "beta", &[("f_factor", f)]), 0.610, 1e-3);
    // Apron: 0.85 in (21.6 mm) printed; 165 and the rounded area give 21.75.
    within(apron(q, 0.0145), 0.85 * 0.0254, 0.012);
}

/// Seader and Henley 2006, exercises 7.48 and 7.49: one column, four duties. Figures in mm are unrounded, those in
/// inches printed.
#[test]
fn methanol_water_column_of_seader_and_henley() {
    struct Duty {
        vapour_kmol_s: f64,
        liquid_kmol_s: f64,
        molar: f64,
        rho_v: f64,
        rho_l: f64,
        sigma: f64,
        heads_mm: [(f64, f64); 4],
        inches: Option<[f64; 3]>,
        phi: f64,
    }
    let bottom = |v, l, heads_mm, inches, phi| Duty {
        vapour_kmol_s: v,
        liquid_kmol_s: l,
        molar: 18.1,
        rho_v: 0.6536,
        rho_l: 953.1,
        sigma: 0.058,
        heads_mm,
        inches,
        phi,
    };
    let top = |v, l, heads_mm, inches, phi| Duty {
        vapour_kmol_s: v,
        liquid_kmol_s: l,
        molar: 30.9,
        rho_v: 1.1261,
        rho_l: 756.1,
        sigma: 0.020,
        heads_mm,
        inches,
        phi,
    };
    // (figure, last place): dry, liquid, bubble-forming, total. The inputs carry four digits, hence the places.
    let duties = [
        bottom(0.17337, 0.32482, [(34.2, 0.1), (30.9, 0.1), (7.8, 0.1), (72.9, 0.1)], Some([1.35, 1.22, 2.88]), 0.380),
        top(0.1884, 0.09160, [(86.0, 0.2), (18.6, 0.2), (3.4, 0.1), (108.1, 0.2)], Some([3.39, 0.74, 4.26]), 0.229),
        top(0.24494, 0.11907, [(145.5, 0.2), (15.1, 0.1), (3.4, 0.1), (164.0, 0.2)], None, 0.154),
        bottom(0.22541, 0.42222, [(57.8, 0.1), (27.5, 0.1), (7.8, 0.1), (93.1, 0.1)], None, 0.292),
    ];
    let mut bottom_of_first = None;
    for duty in duties {
        let q_v = duty.vapour_kmol_s * duty.molar / duty.rho_v;
        let q_l = duty.liquid_kmol_s * duty.molar / duty.rho_l;
        let ks = q_v / 2.0996 * f64::sqrt(duty.rho_v / (duty.rho_l - duty.rho_v));
        printed(froth_density(ks), duty.phi, 2e-3);
        let dry = dry_head(0.73, duty.rho_v, duty.rho_l, q_v / 0.20996);
        let liquid = clear_liquid(ks, 0.0508, q_l / 1.0795);
        let bubbles = sigma_head(duty.sigma, duty.rho_l, 0.004763);
        let total = dry + liquid + bubbles;
        for (head, (figure, place)) in [dry, liquid, bubbles, total].into_iter().zip(duty.heads_mm) {
            printed(head * 1e3, figure, place);
        }
        bottom_of_first.get_or_insert([liquid, total]);
        if let Some(inches) = duty.inches {
            // Rounded at every step, and with 0.186 in (50.85 mm) for the dry drop: within 1 %.
            for (head, inch) in [dry, liquid, total].into_iter().zip(inches) {
                within(head / 0.0254, inch, 0.01);
            }
        }
    }
    // Pressure drop of the bottom tray, 7.48: 681 Pa unrounded (g 9.80665 to 9.81), 0.098 psi printed.
    let [bottom_liquid, bottom_total] = bottom_of_first.unwrap();
    within(bottom_total * 953.1 * G, 681.0, 0.001);
    within(bottom_total * 953.1 * G / 6894.757, 0.098, 0.01);
    // Flood chain of the bottom of 7.49 from the chart reading 0.37 ft/s: 1.237, 0.46 ft/s, 17.5 ft/s (printed 17.6).
    let capacity = 0.37 * sigma_factor(0.058);
    printed(capacity, 0.46, 1e-2);
    printed(capacity * f64::sqrt((953.1 - 0.6536) / 0.6536), 17.5, 0.1);
    // Downcomer of the bottom tray, 7.48: apron 3.7 mm, froth (ht + hL + hda)/0.5 215 mm (printed 8.5 in, 216 mm).
    let loss = apron(0.00617, 0.0411);
    printed(loss * 1e3, 3.7, 0.1);
    let froth = si("downcomer-practice", "froth_density_unstated", &[]);
    printed((bottom_total + bottom_liquid + loss) / froth * 1e3, 215.0, 1.0);
    within((bottom_total + bottom_liquid + loss) / froth / 0.0254, 8.5, 0.005);
    // Entrainment, chart readings: within 25 %, except at 95 % of flood, where the equation is out of range and 40 % low.
    for (flood, fp, reading) in [(0.39, 0.0473, 0.0065), (0.73, 0.0192, 0.11), (0.51, 0.0473, 0.017)] {
        within(psi(flood, fp), reading, 0.25);
    }
    printed(psi(0.95, 0.0192), 0.291, 1e-3);
}

/// Perry 2008, section 14, examples 9 and 10: ethylbenzene-styrene vacuum column, about 80 % of flood at an operating
/// capacity factor of 0.0756 m/s.
#[test]
fn ethylbenzene_styrene_column_of_perry() {
    let fp = flow_parameter(22000.0, 25500.0, 0.481, 841.0);
    printed(fp, 0.0206, 1e-4);
    let operating = 25500.0 / 3600.0 / 0.481 / 4.66 * f64::sqrt(0.481 / (841.0 - 0.481));
    printed(operating, 0.0756, 1e-4);
    let capacity = csb(0.5, fp);
    // The exponential fit is the lower of the two here: 0.0943, and 77 % of flood.
    printed(capacity, 0.0943, 1e-4);
    // 0.0943 x 1.0456 = 0.0986; a table of the example worked out again has 0.0987, one off in its last place.
    printed(capacity * sigma_factor(0.025), 0.0986, 1e-4);
    let flood = operating / (capacity * sigma_factor(0.025));
    printed(flood, 0.77, 1e-2);
    within(flood, 0.80, 0.05);
    // Entrainment at 80 and 90 %: read 0.15 and 0.24.
    within(psi(0.80, 0.021), 0.15, 0.25);
    within(psi(0.90, 0.021), 0.24, 0.25);
    // System limit on tower area: far above the operating figure.
    let at = [("vapour_density", 0.481), ("liquid_density", 841.0), ("surface_tension", 0.025)];
    let limit = si("stupin-kister-2003-system-limit", "c2", &at);
    printed(limit, 0.1454, 1e-4);
}

/// Agreement of the two fits of the flooding chart over its grid, worked out apart from this program: (spacing in inches,
/// flow parameter, exponential fit in m/s, cubic over exponential).
#[test]
fn the_two_fits_of_the_flooding_chart_agree_as_tabled() {
    let table = [
        (12.0, 0.01, 0.0697, 0.88),
        (12.0, 0.1, 0.0599, 1.01),
        (12.0, 1.0, 0.0246, 0.94),
        (18.0, 0.01, 0.0909, 0.93),
        (18.0, 0.05, 0.0842, 1.03),
        (18.0, 0.5, 0.0471, 0.91),
        (24.0, 0.02, 0.1080, 1.05),
        (24.0, 0.2, 0.0811, 0.94),
        (24.0, 1.0, 0.0343, 0.94),
        (36.0, 0.01, 0.1462, 1.05),
        (36.0, 0.05, 0.1348, 1.08),
        (36.0, 1.0, 0.0429, 0.97),
    ];
    for (inches, fp, exponential, ratio) in table {
        let at = [("tray_spacing", inches * 0.0254), ("flow_parameter", fp)];
        let fit = si("fair-1961-capacity", "csb", &at);
        printed(fit, exponential, 1e-4);
        printed(si("fair-1961-capacity-cubic", "csb", &at) / fit, ratio, 1e-2);
    }
    // In vacuum the exponential fit is not conservative: 1/ratio at 12 in and 0.005 is 1.54.
    let at = [("tray_spacing", 0.3048), ("flow_parameter", 0.005)];
    printed(si("fair-1961-capacity", "csb", &at) / si("fair-1961-capacity-cubic", "csb", &at), 1.54, 1e-2);
}
