//! The balance and the sizing against cases that can be solved by hand.
#![allow(missing_docs)]

mod common;

use approx::assert_relative_eq;
use chordwall::engine::case::*;
use chordwall::engine::correlation::catalogue::Catalogue;
use chordwall::engine::design::work;
use chordwall::engine::units::*;
use common::*;

/// Case W1 of the design notes for dividing walls (constructed there): sections 1 and 2 beside the wall, common top and bottom.
fn w1() -> Case {
    let feed = Place::Compartment(0);
    let draw = Place::Compartment(1);
    case(
        vec![
            declared("one", 0.090, None),
            declared("two", 0.085, None),
            declared("top", 0.095, None),
            declared("bottom", 0.080, None),
        ],
        &["side 1", "side 2"],
        vec![
            (section("common top", Place::Above, 2, 5.0), vec![row(22.0, 10.0, 2.9, 680.0)]),
            (section("side 1", feed, 0, 5.0), vec![row(12.0, 10.0, 3.0, 700.0)]),
            (section("side 2", draw, 1, 5.0), vec![row(8.0, 10.0, 3.1, 690.0)]),
            (section("common bottom", Place::Below, 3, 5.0), vec![row(20.0, 10.0, 3.3, 720.0)]),
        ],
        Diameter::Size,
        Position::EqualFlood,
        0.010,
    )
}

#[test]
fn case_w1_gives_the_printed_diameters_floods_and_area_share() {
    let answer = work(&w1(), &Catalogue::default()).unwrap();
    let [above, zone, below] = answer.shell.required.map(Si::si);
    // Printed: 2.9786 above, 2.9068 wall zone, 2.9541 below; nominal 3.00 m.
    assert_relative_eq!(above, 2.9786, epsilon = 0.5e-4);
    assert_relative_eq!(zone, 2.9068, epsilon = 0.5e-4);
    assert_relative_eq!(below, 2.9541, epsilon = 0.5e-4);
    assert_eq!(answer.shell.wall_zone.si(), 3.0);
    // Printed: 70.40 % on both sides, 73.93 % top, 72.72 % bottom.
    let floods: Vec<f64> = answer.sections.iter().map(|s| s.flood).collect();
    assert_relative_eq!(floods[0], 0.7393, epsilon = 0.5e-4);
    assert_relative_eq!(floods[1], 0.7040, epsilon = 0.5e-4);
    assert_relative_eq!(floods[2], 0.7040, epsilon = 0.5e-4);
    assert_relative_eq!(floods[3], 0.7272, epsilon = 0.5e-4);
    // The note splits a net area on the gross segment share (209.0 mm); the exact wall gives 208.1 mm.
    assert_relative_eq!(answer.walls[0].position.si(), 0.2081, epsilon = 0.5e-4);
    assert_relative_eq!(answer.compartments[0].area_share, 0.58841, epsilon = 0.5e-5);
}

/// Two compartments, each of quadratic friction, in a shell of 3 m with the wall off the axis; the shares that the loads need are
/// not those that balance.
fn two_sides(rho: [f64; 2], k: [f64; 2], required: f64) -> Case {
    let total = 20.0;
    case(
        vec![
            declared("one", 0.2, Some((k[0], 2.0))),
            declared("two", 0.2, Some((k[1], 2.0))),
            declared("ends", 0.3, Some((50.0, 2.0))),
        ],
        &["one", "two"],
        vec![
            (section("top", Place::Above, 2, 3.0), vec![row(20.0, 10.0, 3.0, 700.0)]),
            (section("s1", Place::Compartment(0), 0, 6.0), vec![row(required * total, 5.0, rho[0], 700.0)]),
            (section("s2", Place::Compartment(1), 1, 6.0), vec![row((1.0 - required) * total, 5.0, rho[1], 700.0)]),
            (section("bottom", Place::Below, 2, 3.0), vec![row(20.0, 10.0, 3.0, 700.0)]),
        ],
        Diameter::Given(Length::from_si(3.0)),
        Position::Given(vec![Length::from_si(0.15)]),
        0.010,
    )
}

/// The root in (0, 1) of a x^2 + b x + c = 0.
fn quadratic(a: f64, b: f64, c: f64) -> f64 {
    let root = (b * b - 4.0 * a * c).sqrt();
    let q = -0.5 * (b + b.signum() * root);
    [q / a, c / q].into_iter().find(|x| (0.0..1.0).contains(x)).unwrap()
}

const G: f64 = 9.80665;

#[test]
fn share_of_equal_densities_is_the_ratio_of_area_over_root_resistance() {
    // Solved by hand: k1 (x/A1)^2 = k2 ((1 - x)/A2)^2.
    let answer = work(&two_sides([3.0, 3.0], [80.0, 60.0], 0.5), &Catalogue::default()).unwrap();
    let area: Vec<f64> = answer.compartments.iter().map(|c| c.area.si()).collect();
    let (w1, w2) = (area[0] / 80.0_f64.sqrt(), area[1] / 60.0_f64.sqrt());
    assert_relative_eq!(answer.compartments[0].vapour_share.unwrap(), w1 / (w1 + w2), epsilon = 1e-9);
    assert_eq!(answer.balance.solutions.len(), 1);
    assert!(answer.balance.solutions[0].stable);
}

#[test]
fn share_of_unequal_densities_is_the_root_of_a_quadratic_with_static_head() {
    let (rho, k, h, m) = ([3.0, 3.6], [80.0, 60.0], 6.0, 20.0_f64);
    let answer = work(&two_sides(rho, k, 0.5), &Catalogue::default()).unwrap();
    let area: Vec<f64> = answer.compartments.iter().map(|c| c.area.si()).collect();
    // Solved by hand: h k_i m_i^2/(rho_i A_i^2) + rho_i g h on both sides, m_1 = x m.
    let c1 = h * k[0] * m * m / (rho[0] * area[0] * area[0]);
    let c2 = h * k[1] * m * m / (rho[1] * area[1] * area[1]);
    let x = quadratic(c1 - c2, 2.0 * c2, (rho[0] - rho[1]) * G * h - c2);
    assert_relative_eq!(answer.compartments[0].vapour_share.unwrap(), x, epsilon = 1e-9);
    let drop = c1 * x * x + rho[0] * G * h;
    assert_relative_eq!(answer.balance.pressure_drop.unwrap().si(), drop, max_relative = 1e-9);
    // The wall moved by its own slope moves the share by as much.
    let slope = answer.walls[0].share_per_m.unwrap();
    let moved = |dx: f64| {
        let mut case = two_sides(rho, k, 0.5);
        case.wall.bands[0].position = Position::Given(vec![Length::from_si(0.15 + dx)]);
        work(&case, &Catalogue::default()).unwrap().compartments[0].vapour_share.unwrap()
    };
    assert_relative_eq!(slope, (moved(1e-4) - moved(-1e-4)) / 2e-4, max_relative = 1e-6);
}

#[test]
fn feed_vapour_stays_its_own_while_the_share_moves() {
    let (rho_low, rho_up, m, k, h) = (3.2, 2.9, 20.0_f64, [70.0, 60.0], [4.0, 5.0, 9.0]);
    let (v_low, v_up) = (9.0, 13.0);
    let case = case(
        vec![
            declared("one", 0.2, Some((k[0], 2.0))),
            declared("two", 0.2, Some((k[1], 2.0))),
            declared("ends", 0.3, Some((50.0, 2.0))),
        ],
        &["one", "two"],
        vec![
            (section("top", Place::Above, 2, 3.0), vec![row(24.0, 10.0, 3.0, 700.0)]),
            (section("above feed", Place::Compartment(0), 0, h[0]), vec![row(v_up, 5.0, rho_up, 700.0)]),
            (section("below feed", Place::Compartment(0), 0, h[1]), vec![row(v_low, 5.0, rho_low, 700.0)]),
            (section("s2", Place::Compartment(1), 1, h[2]), vec![row(m - v_low, 5.0, 3.1, 700.0)]),
            (section("bottom", Place::Below, 2, 3.0), vec![row(m, 10.0, 3.0, 700.0)]),
        ],
        Diameter::Given(Length::from_si(3.0)),
        Position::Given(vec![Length::from_si(0.0)]),
        0.0,
    );
    let answer = work(&case, &Catalogue::default()).unwrap();
    let a = answer.compartments[0].area.si();
    // Solved by hand. Below the feed the volume flow is x m/rho_low; above it, that of the loads plus the same change of volume:
    // Q_up = (x m - v_low)/rho_low + v_up/rho_up = x m/rho_low + q.
    let q = v_up / rho_up - v_low / rho_low;
    let r = m / rho_low;
    let up = h[0] * k[0] * rho_up / (a * a);
    let low = h[1] * k[0] * rho_low / (a * a);
    let two = h[2] * k[1] * m * m / (3.1 * a * a);
    let static_gap = G * (rho_up * h[0] + rho_low * h[1] - 3.1 * h[2]);
    let x = quadratic((up + low) * r * r - two, 2.0 * up * r * q + 2.0 * two, up * q * q - two + static_gap);
    assert_relative_eq!(answer.compartments[0].vapour_share.unwrap(), x, epsilon = 1e-9);
}

#[test]
fn three_compartments_share_by_area_over_root_resistance_times_height() {
    let k = [80.0, 60.0, 110.0];
    let internals = vec![
        declared("one", 0.2, Some((k[0], 2.0))),
        declared("two", 0.2, Some((k[1], 2.0))),
        declared("three", 0.2, Some((k[2], 2.0))),
        declared("ends", 0.3, Some((50.0, 2.0))),
    ];
    let side =
        |name: &str, i: usize| (section(name, Place::Compartment(i), i, 6.0), vec![row(20.0 / 3.0, 5.0, 3.0, 700.0)]);
    let case = case(
        internals,
        &["one", "two", "three"],
        vec![
            (section("top", Place::Above, 3, 3.0), vec![row(20.0, 10.0, 3.0, 700.0)]),
            side("s1", 0),
            side("s2", 1),
            side("s3", 2),
            (section("bottom", Place::Below, 3, 3.0), vec![row(20.0, 10.0, 3.0, 700.0)]),
        ],
        Diameter::Given(Length::from_si(3.4)),
        Position::Given(vec![Length::from_si(-0.45), Length::from_si(0.52)]),
        0.012,
    );
    let answer = work(&case, &Catalogue::default()).unwrap();
    // Solved by hand: equal densities, so k_i h (s_i/A_i)^2 is the same for all.
    let weight: Vec<f64> = answer.compartments.iter().zip(k).map(|(c, k)| c.area.si() / (k * 6.0_f64).sqrt()).collect();
    let sum: f64 = weight.iter().sum();
    for (compartment, weight) in answer.compartments.iter().zip(&weight) {
        assert_relative_eq!(compartment.vapour_share.unwrap(), weight / sum, epsilon = 1e-9);
    }
    assert_eq!(answer.balance.solutions.len(), 1);
    assert!(answer.balance.solutions[0].stable);
    // At the equal-pressure-drop positions the actual shares are the required ones.
    let mut moved = case.clone();
    moved.wall.bands[0].position = Position::EqualPressureDrop;
    let moved = work(&moved, &Catalogue::default()).unwrap();
    for compartment in &moved.compartments {
        assert_relative_eq!(compartment.vapour_share.unwrap(), compartment.vapour_share_required, epsilon = 1e-8);
    }
}

#[test]
fn equal_pressure_drop_position_gives_the_required_share() {
    let mut case = two_sides([3.0, 3.6], [80.0, 60.0], 0.55);
    case.wall.bands[0].position = Position::EqualPressureDrop;
    let answer = work(&case, &Catalogue::default()).unwrap();
    assert_relative_eq!(answer.compartments[0].vapour_share.unwrap(), 0.55, epsilon = 1e-9);
    assert_relative_eq!(answer.balance.imbalance_at_required.unwrap().si(), 0.0, epsilon = 1e-6);
}

#[test]
fn each_remedy_brings_the_design_share_back() {
    let answer = work(&two_sides([3.0, 3.6], [80.0, 60.0], 0.6), &Catalogue::default()).unwrap();
    assert_eq!(answer.remedies.len(), 3, "{:#?}", answer.remedies);
    for remedy in &answer.remedies {
        let shares = remedy.points[0].shares.clone().unwrap();
        assert_relative_eq!(shares[0], 0.6, epsilon = 1e-8);
    }
}

#[test]
fn response_exponent_of_quadratic_friction_is_two_and_less_with_static_head() {
    let answer = work(&two_sides([3.0, 3.6], [80.0, 60.0], 0.5), &Catalogue::default()).unwrap();
    for c in &answer.compartments {
        assert_relative_eq!(c.response_exponent_friction.unwrap(), 2.0, epsilon = 1e-7);
        let friction = c.friction_at_required.unwrap().si();
        let total = c.pressure_drop_at_required.unwrap().si();
        assert_relative_eq!(c.response_exponent.unwrap(), 2.0 * friction / total, epsilon = 1e-7);
        assert_relative_eq!(total, friction + c.static_head.si(), max_relative = 1e-12);
    }
}
