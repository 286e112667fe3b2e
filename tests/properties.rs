//! Laws that hold for every case: mirror, scale, equal sides, sums.
#![allow(missing_docs)]

mod common;

use approx::{assert_relative_eq, relative_eq};
use chordwall::engine::case::*;
use chordwall::engine::correlation::catalogue::Catalogue;
use chordwall::engine::design::work;
use chordwall::engine::result::Answer;
use chordwall::engine::units::*;
use common::*;
use proptest::prelude::*;
use std::sync::OnceLock;

fn catalogue() -> &'static Catalogue {
    static CATALOGUE: OnceLock<Catalogue> = OnceLock::new();
    CATALOGUE.get_or_init(|| chordwall::input::builtin::catalogue().unwrap())
}

/// What the properties vary.
#[derive(Clone, Debug)]
struct Draw {
    feed: [f64; 2],
    draw: [f64; 2],
    liquid: [f64; 2],
    rho: [f64; 2],
    height: [f64; 2],
    packed: bool,
    thickness: f64,
    position: f64,
}

fn draws() -> impl Strategy<Value = Draw> {
    (
        [4.0..8.0_f64, 4.0..8.0],
        [3.0..6.0_f64, 3.0..6.0],
        [3.0..9.0_f64, 3.0..9.0],
        [2.4..3.4_f64, 2.4..3.4],
        [3.0..7.0_f64, 3.0..7.0],
        any::<bool>(),
        0.0..0.02_f64,
        -0.3..0.3_f64,
    )
        .prop_map(|(feed, draw, liquid, rho, height, packed, thickness, position)| Draw {
            feed,
            draw,
            liquid,
            rho,
            height,
            packed,
            thickness,
            position,
        })
}

/// One draw for the laws that need no variety.
fn fixed(packed: bool) -> Draw {
    Draw {
        feed: [5.0, 6.0],
        draw: [4.0, 4.5],
        liquid: [5.0, 6.0],
        rho: [2.8, 2.9],
        height: [4.0, 5.0],
        packed,
        thickness: 0.01,
        position: 0.1,
    }
}

fn internals(packed: bool) -> Vec<Internals> {
    if packed {
        let packing = catalogue().packing("sheet 250/45").unwrap().clone();
        let sheet = |name: &str| Internals { name: name.into(), kind: InternalsKind::Packing(packing.clone()) };
        vec![sheet("a"), sheet("b"), sheet("c")]
    } else {
        vec![
            declared("a", 0.10, Some((70.0, 1.9))),
            declared("b", 0.09, Some((90.0, 1.8))),
            declared("c", 0.10, Some((60.0, 2.0))),
        ]
    }
}

/// Two sections a side, a shell of 3 m, loads far below flood; `k` scales flows by k and lengths across by sqrt(k).
fn build(d: &Draw, position: Position, k: f64, mirrored: bool) -> Case {
    let (one, two) = if mirrored { (1, 0) } else { (0, 1) };
    let r = |v: f64, l: f64, rho: f64| row(k * v, k * l, rho, 720.0);
    let sides = vec![
        (
            section("f1", Place::Compartment(one), 0, d.height[0]),
            vec![r(d.feed[0], d.liquid[0], d.rho[0]), r(d.feed[0] * 1.05, d.liquid[0], d.rho[0])],
        ),
        (section("f2", Place::Compartment(one), 0, d.height[1]), vec![r(d.feed[1], d.liquid[1], d.rho[0] * 1.02)]),
        (section("d1", Place::Compartment(two), 1, d.height[0]), vec![r(d.draw[0], d.liquid[1], d.rho[1])]),
        (section("d2", Place::Compartment(two), 1, d.height[1]), vec![r(d.draw[1], d.liquid[0], d.rho[1] * 1.01)]),
    ];
    let mut sections = vec![(section("top", Place::Above, 2, 4.0), vec![r(9.0, 6.0, 2.6)])];
    sections.extend(sides);
    sections.push((section("bottom", Place::Below, 2, 4.0), vec![r(10.0, 14.0, 3.0)]));
    let names: &[&str] = if mirrored { &["draw", "feed"] } else { &["feed", "draw"] };
    let scale = k.sqrt();
    case(
        internals(d.packed),
        names,
        sections,
        Diameter::Given(Length::from_si(3.0 * scale)),
        position,
        d.thickness * scale,
    )
}

fn given(x: f64) -> Position {
    Position::Given(vec![Length::from_si(x)])
}

fn solve(case: &Case) -> Answer {
    work(case, catalogue()).unwrap()
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 40, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn compartments_and_wall_make_up_the_disc(d in draws()) {
        let answer = solve(&build(&d, given(d.position), 1.0, false));
        let sum: f64 = answer.compartments.iter().map(|c| c.area.si()).sum();
        let disc = chordwall::engine::geometry::Disc::from_diameter(Length::from_si(3.0)).unwrap();
        let wall = chordwall::engine::geometry::wall_area(&disc, Length::from_si(d.position), Length::from_si(d.thickness)).unwrap();
        assert_relative_eq!(sum + wall.si(), disc.area().si(), max_relative = 1e-13);
    }

    #[test]
    fn shares_sum_to_one_and_drops_agree_there(d in draws()) {
        let answer = solve(&build(&d, given(d.position), 1.0, false));
        let shares: Vec<f64> = answer.compartments.iter().map(|c| c.vapour_share.unwrap()).collect();
        assert_relative_eq!(shares.iter().sum::<f64>(), 1.0, epsilon = 1e-14);
        let required: f64 = answer.compartments.iter().map(|c| c.vapour_share_required).sum();
        assert_relative_eq!(required, 1.0, epsilon = 1e-14);
        // Friction at the actual shares and static head, side by side.
        let drop = |names: [&str; 2], c: usize| -> f64 {
            answer.sections.iter().filter(|s| names.contains(&s.name.as_str())).map(|s| s.friction_actual.unwrap().si()).sum::<f64>()
                + answer.compartments[c].static_head.si()
        };
        assert_relative_eq!(drop(["f1", "f2"], 0), drop(["d1", "d2"], 1), max_relative = 1e-8);
    }

    #[test]
    fn listing_the_compartments_the_other_way_round_mirrors_everything(d in draws()) {
        for position in [given(d.position), Position::EqualFlood, Position::EqualPressureDrop, Position::VapourLoad] {
            let other = match &position {
                Position::Given(x) => Position::Given(x.iter().map(|x| Length::from_si(-x.si())).collect()),
                rule => rule.clone(),
            };
            let a = solve(&build(&d, position, 1.0, false));
            let b = solve(&build(&d, other, 1.0, true));
            assert_relative_eq!(a.walls[0].position.si(), -b.walls[0].position.si(), epsilon = 1e-10);
            for (x, y) in a.compartments.iter().zip(b.compartments.iter().rev()) {
                assert_eq!(x.name, y.name);
                assert_relative_eq!(x.area.si(), y.area.si(), max_relative = 1e-9);
                assert_relative_eq!(x.vapour_share.unwrap(), y.vapour_share.unwrap(), epsilon = 1e-9);
            }
            for (x, y) in a.sections.iter().zip(&b.sections) {
                assert_relative_eq!(x.flood, y.flood, max_relative = 1e-9);
            }
        }
    }

    #[test]
    fn scaling_flows_by_k_and_the_cross_section_by_root_k_keeps_floods_and_shares(d in draws(), k in 0.3..4.0_f64) {
        let a = solve(&build(&d, given(d.position), 1.0, false));
        let b = solve(&build(&d, given(d.position * k.sqrt()), k, false));
        for (x, y) in a.sections.iter().zip(&b.sections) {
            assert_relative_eq!(x.flood, y.flood, max_relative = 1e-10);
            assert_relative_eq!(x.flood_actual.unwrap(), y.flood_actual.unwrap(), max_relative = 1e-9);
        }
        for (x, y) in a.compartments.iter().zip(&b.compartments) {
            assert_relative_eq!(x.vapour_share.unwrap(), y.vapour_share.unwrap(), epsilon = 1e-10);
        }
    }

    #[test]
    fn equal_compartments_split_evenly(d in draws()) {
        let mut even = d.clone();
        even.draw = even.feed;
        even.liquid = [even.liquid[0]; 2];
        even.rho = [even.rho[0]; 2];
        let mut case = build(&even, given(0.0), 1.0, false);
        for section in &mut case.sections {
            if matches!(section.place, Place::Compartment(_)) {
                section.internals = 0;
            }
        }
        // The draw side as the feed side, row by row.
        let loads = &mut case.points[0].loads;
        loads[3] = loads[1].clone();
        loads[4] = loads[2].clone();
        let answer = solve(&case);
        assert_relative_eq!(answer.compartments[0].vapour_share.unwrap(), 0.5, epsilon = 1e-12);
    }

    #[test]
    fn equal_flood_gives_every_compartment_the_same_worst_flood(d in draws()) {
        let answer = solve(&build(&d, Position::EqualFlood, 1.0, false));
        let worst = |names: [&str; 2]| answer.sections.iter().filter(|s| names.contains(&s.name.as_str())).map(|s| s.flood).fold(0.0, f64::max);
        assert_relative_eq!(worst(["f1", "f2"]), worst(["d1", "d2"]), max_relative = 1e-9);
    }

    #[test]
    fn a_sized_shell_meets_its_criteria_and_a_slightly_smaller_one_does_not(d in draws()) {
        let mut case = build(&d, Position::EqualFlood, 1.0, false);
        case.shell.above = Diameter::Size;
        case.shell.wall_zone = Diameter::Size;
        case.shell.below = Diameter::Size;
        let answer = solve(&case);
        prop_assert!(answer.sections.iter().all(|s| s.flood <= 0.75 * (1.0 + 1e-9)));
        let least = answer.shell.governed_by.diameter;
        let smaller = Diameter::Given(Length::from_si(least.si() * 0.999));
        (case.shell.above, case.shell.wall_zone, case.shell.below) = (smaller, smaller, smaller);
        prop_assert!(solve(&case).sections.iter().any(|s| s.flood > 0.75));
    }

    #[test]
    fn more_vapour_costs_more_pressure_drop(d in draws(), more in 1.01..1.3_f64) {
        let drop = |factor: f64| {
            let mut case = build(&d, given(d.position), 1.0, false);
            for rows in &mut case.points[0].loads {
                for row in rows {
                    row.vapour_flow *= factor;
                }
            }
            solve(&case).compartments.iter().map(|c| c.friction_at_required.unwrap().si()).collect::<Vec<_>>()
        };
        let (low, high) = (drop(1.0), drop(more));
        prop_assert!(low.iter().zip(&high).all(|(l, h)| h > l));
    }

    #[test]
    fn a_point_with_the_design_loads_gives_the_design_figures(d in draws()) {
        let mut case = build(&d, given(d.position), 1.0, false);
        let mut twin = case.points[0].clone();
        twin.name = "twin".into();
        case.points.push(twin);
        let answer = solve(&case);
        for finding in answer.findings.iter().filter(|f| f.point == "twin") {
            let design = answer.findings.iter().find(|f| f.point == "design" && f.criterion == finding.criterion && f.subject == finding.subject);
            let same = design.is_some_and(|other| other.value == finding.value && other.status == finding.status);
            prop_assert!(same, "{finding:?}");
        }
    }
}

#[test]
fn a_stepped_wall_with_equal_positions_equals_a_straight_one_to_the_last_digit() {
    let d = fixed(true);
    let straight = solve(&build(&d, given(0.1), 1.0, false));
    let mut case = build(&d, given(0.1), 1.0, false);
    case.wall.bands =
        vec![Band { name: "upper".into(), position: given(0.1) }, Band { name: "lower".into(), position: given(0.1) }];
    for section in &mut case.sections {
        section.band = usize::from(section.name.ends_with('2'));
    }
    let stepped = solve(&case);
    assert_eq!(straight.compartments, stepped.compartments);
    assert_eq!(straight.sections, stepped.sections);
    assert!(relative_eq!(straight.walls[0].position.si(), stepped.walls[1].position.si()));
}

#[test]
fn a_wall_closed_at_a_head_has_no_actual_share() {
    let d = fixed(false);
    for reach in [Reach::Top, Reach::Bottom] {
        let mut case = build(&d, given(0.1), 1.0, false);
        case.wall.reach = reach;
        // The closed end has no sections.
        let closed = if reach == Reach::Top { Place::Above } else { Place::Below };
        let keep: Vec<bool> = case.sections.iter().map(|s| s.place != closed).collect();
        let mut kept = keep.iter();
        case.sections.retain(|_| *kept.next().unwrap());
        let mut kept = keep.iter();
        case.points[0].loads.retain(|_| *kept.next().unwrap());
        let answer = solve(&case);
        assert!(answer.compartments.iter().all(|c| c.vapour_share.is_none()));
        assert!(answer.walls[0].equal_pressure_drop.is_none());
        assert!(answer.balance.absent_because.is_some());
        assert!(answer.findings.iter().all(|f| f.criterion.name() != "vapour_share_within"));
    }
}
