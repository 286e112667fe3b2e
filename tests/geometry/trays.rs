//! Trays laid out in their places: every part against the cut that makes it, half-moon figures, the crest's constriction.

use super::{disc, m, strip};
use chordwall::engine::case::{Deck as DeckKind, LiquidFlow, Tray};
use chordwall::engine::geometry::{Deck, LayoutFigures, Pass, Strip, TrayLayout};
use chordwall::engine::units::{Length, Si};
use proptest::prelude::*;

fn figures(flow: LiquidFlow, passes: u8, tops: f64, bottoms: f64) -> LayoutFigures {
    LayoutFigures {
        flow,
        passes,
        downcomer_area: tops,
        downcomer_bottom_area: bottoms,
        hole_area: 0.08,
        edge_strip: m(0.0),
    }
}

fn layout(place: &Strip, figures: LayoutFigures) -> TrayLayout {
    TrayLayout::from_figures(place, &figures).unwrap()
}

fn only(deck: &Deck) -> Pass {
    let [pass] = deck.passes() else { panic!("one pass expected") };
    *pass
}

fn both(deck: &Deck) -> [Pass; 2] {
    let [first, second] = deck.passes() else { panic!("two passes expected") };
    [*first, *second]
}

/// Area of the place between two lines square to the liquid's way.
fn between(place: &Strip, flow: LiquidFlow, one: Length, other: Length) -> f64 {
    let (lower, upper) = (one.min(other), one.max(other));
    match flow {
        LiquidFlow::AlongWall => (place.corner(lower).area() - place.corner(upper).area()).si(),
        LiquidFlow::AcrossWall => place.part(lower, upper).unwrap().area().si(),
    }
}

/// Ends of the place in the direction of the liquid.
fn ends(place: &Strip, flow: LiquidFlow) -> (Length, Length) {
    match flow {
        LiquidFlow::AlongWall => (-place.radius(), place.radius()),
        LiquidFlow::AcrossWall => (place.left(), place.right()),
    }
}

fn near(value: f64, expected: f64, what: &str) {
    assert!((value - expected).abs() < 1e-12 * expected.abs().max(1.0), "{what}: {value} against {expected}");
}

/// The corner of the half-moon check values (method notes: R 1.5 m, wall face at 0.2 m, line at 0.9 m).
#[test]
fn half_moon_tray_along_the_wall_has_the_noted_corner() {
    let place = strip(1.5, 0.2, 1.5);
    let fraction = place.corner(m(0.9)).area().si() / place.area().si();
    let layout = layout(&place, figures(LiquidFlow::AlongWall, 1, fraction, fraction));
    let [deck] = layout.decks() else { panic!("mirror images are one deck") };
    let pass = only(deck);
    assert!((deck.downcomer_area.si() - 0.38410).abs() < 5e-6);
    assert!((deck.active_area.si() - 2.16788).abs() < 5e-6);
    near(deck.net_area.si(), place.area().si() - deck.downcomer_area.si(), "net");
    near(deck.hole_area.si(), 0.08 * deck.active_area.si(), "holes");
    near(pass.weir.length().si(), 1.0, "weir");
    near(pass.apron_length.si(), 1.0, "apron");
    near(pass.weir.position().si(), 0.9, "weir line");
    near(pass.flow_path.si(), 1.8, "path");
    assert_eq!(pass.liquid_fraction, 1.0);
}

/// Wall strip to 0.35 m and arc segment beyond 1.25 m of the same notes, as downcomers of the two decks across the wall.
#[test]
fn half_moon_tray_across_the_wall_has_the_noted_strips() {
    let place = strip(1.5, 0.2, 1.5);
    let at_wall = strip(1.5, 0.2, 0.35).area().si() / place.area().si();
    let at_shell = strip(1.5, 1.25, 1.5).area().si() / place.area().si();
    let [deck, _] = *layout(&place, figures(LiquidFlow::AcrossWall, 1, at_wall, at_shell)).decks() else { panic!() };
    let pass = only(&deck);
    assert!((pass.downcomer_top_area.si() - 0.44218).abs() < 5e-6);
    assert!((pass.downcomer_bottom_area.si() - 0.28135).abs() < 5e-6);
    assert!((pass.weir.length().si() - 2.91719).abs() < 5e-6);
    near(pass.flow_path.si(), 0.9, "path from the shell's inlet panel to the weir at the wall");
    let [_, deck] = *layout(&place, figures(LiquidFlow::AcrossWall, 1, at_shell, at_wall)).decks() else { panic!() };
    let pass = only(&deck);
    assert!((pass.weir.length().si() - 1.65831).abs() < 5e-6);
    near(pass.weir.position().si(), 1.25, "weir at the shell");
    near(pass.inlet_position.si(), 0.35, "inlet at the wall");
    near(pass.flow_path.si(), 0.9, "path");
}

/// Effective weir of a full circle by Treybal's relation (Mass-Transfer Operations, Eq. 6.34, read second-hand):
/// (Weff/W)^2 = (D/W)^2 - (((D/W)^2 - 1)^0.5 + 2 (h/D)(D/W))^2.
fn treybal_m(diameter_m: f64, weir_m: f64, crest_m: f64) -> f64 {
    let ratio = diameter_m / weir_m;
    weir_m * (ratio * ratio - ((ratio * ratio - 1.0).sqrt() + 2.0 * crest_m / diameter_m * ratio).powi(2)).sqrt()
}

/// D 2.0 m, W/D 0.75: 24.06 mm of crest leave 1.4561 m, Fw 1.0200 (method notes, worked out there).
#[test]
fn weir_of_a_full_circle_is_constricted_as_noted() {
    let whole = disc(1.0).whole().unwrap();
    let line = (1.0_f64 - 0.75 * 0.75).sqrt();
    let fraction = whole.corner(m(line)).area().si() / whole.area().si();
    let weir = only(&layout(&whole, figures(LiquidFlow::AlongWall, 1, fraction, fraction)).decks()[0]).weir;
    near(weir.length().si(), 1.5, "weir");
    let moved = weir.length_moved(m(0.02406)).si();
    assert!((moved - 1.4561).abs() < 5e-5, "{moved}");
    assert!(((1.5 / moved).powf(2.0 / 3.0) - 1.0200).abs() < 5e-5);
    near(moved, treybal_m(2.0, 1.5, 0.02406), "Treybal");
}

#[test]
fn weir_between_wall_and_shell_is_constricted_at_the_shell_only() {
    let place = strip(1.5, 0.2, 1.5);
    let fraction = place.corner(m(0.9)).area().si() / place.area().si();
    let weir = only(&layout(&place, figures(LiquidFlow::AlongWall, 1, fraction, 0.1)).decks()[0]).weir;
    near(weir.length_moved(m(0.04)).si(), (1.5_f64 * 1.5 - 0.94 * 0.94).sqrt() - 0.2, "one end");
    assert_eq!(weir.length_moved(m(0.0)), weir.length());
    assert_eq!(weir.length_moved(m(0.7)).si(), 0.0, "above the highest point of the place");
}

#[test]
fn line_moved_towards_the_middle_is_no_longer_than_the_weir() {
    let place = strip(1.5, 0.2, 1.5);
    let [_, to_centre] = *layout(&place, figures(LiquidFlow::AlongWall, 2, 0.12, 0.12)).decks() else { panic!() };
    for pass in both(&to_centre) {
        assert_eq!(pass.weir.length_moved(m(0.03)), pass.weir.length());
    }
    // Across: the centre downcomer of the other deck lies right of the middle; its left pass runs into a shorter chord.
    let [_, to_centre] = *layout(&place, figures(LiquidFlow::AcrossWall, 2, 0.12, 0.12)).decks() else { panic!() };
    let [from_wall, from_shell] = both(&to_centre);
    assert!(from_wall.weir.length_moved(m(0.03)) < from_wall.weir.length());
    assert_eq!(from_shell.weir.length_moved(m(0.03)), from_shell.weir.length());
}

#[test]
fn places_that_are_their_own_mirror_image_need_one_deck_across() {
    let whole = disc(1.0).whole().unwrap();
    assert_eq!(layout(&whole, figures(LiquidFlow::AcrossWall, 1, 0.1, 0.1)).decks().len(), 1);
    assert_eq!(layout(&strip(1.0, -0.3, 0.3), figures(LiquidFlow::AcrossWall, 1, 0.1, 0.1)).decks().len(), 1);
    assert_eq!(layout(&strip(1.0, -0.3, 0.4), figures(LiquidFlow::AcrossWall, 1, 0.1, 0.1)).decks().len(), 2);
    assert_eq!(layout(&whole, figures(LiquidFlow::AcrossWall, 2, 0.1, 0.1)).decks().len(), 2);
    assert_eq!(layout(&whole, figures(LiquidFlow::AlongWall, 1, 0.1, 0.1)).decks().len(), 1);
    // Along and across are the same in a whole disc, but for the name of the axis.
    let along = only(&layout(&whole, figures(LiquidFlow::AlongWall, 1, 0.13, 0.09)).decks()[0]);
    let across = only(&layout(&whole, figures(LiquidFlow::AcrossWall, 1, 0.13, 0.09)).decks()[0]);
    near(along.weir.length().si(), across.weir.length().si(), "weir");
    near(along.apron_length.si(), across.apron_length.si(), "apron");
    near(along.flow_path.si(), across.flow_path.si(), "path");
    near(along.weir.length_moved(m(0.03)).si(), across.weir.length_moved(m(0.03)).si(), "crest");
}

/// Ring sector along the shell and rectangles along the walls, from the angles of the lines.
#[test]
fn edge_strips_are_taken_off_along_shell_and_wall() {
    let (radius, edge) = (1.5, 0.05);
    let ring = |angle: f64| 0.5 * angle * (radius * radius - (radius - edge) * (radius - edge));
    let with_edge = |figures: LayoutFigures| LayoutFigures { edge_strip: m(edge), ..figures };

    let place = strip(radius, 0.2, radius);
    let along = figures(LiquidFlow::AlongWall, 1, 0.14, 0.10);
    let plain = only(&layout(&place, along).decks()[0]);
    let edged = only(&layout(&place, with_edge(along)).decks()[0]);
    let (weir, inlet) = (plain.weir.position().si(), plain.inlet_position.si());
    let expected = ring((weir / radius).asin() - (inlet / radius).asin()) + edge * (weir - inlet);
    near((plain.active_area - edged.active_area).si(), expected, "one wall, one arc");
    assert_eq!((edged.weir, edged.flow_path), (plain.weir, plain.flow_path));

    let place = strip(radius, -0.4, 0.7);
    let plain = only(&layout(&place, along).decks()[0]);
    let edged = only(&layout(&place, with_edge(along)).decks()[0]);
    let walls = plain.flow_path.si();
    near((plain.active_area - edged.active_area).si(), 2.0 * edge * walls, "two walls, lines below both corners");

    let across = figures(LiquidFlow::AcrossWall, 1, 0.14, 0.10);
    let plain = only(&layout(&place, across).decks()[0]);
    let edged = only(&layout(&place, with_edge(across)).decks()[0]);
    let (weir, inlet) = (plain.weir.position().si(), plain.inlet_position.si());
    let expected = 2.0 * ring((inlet / radius).asin() - (weir / radius).asin());
    near((plain.active_area - edged.active_area).si(), expected, "arcs at both ends, no wall");
}

#[test]
fn pieces_that_do_not_fit_are_refused_with_the_reason() {
    let place = strip(1.5, 0.2, 1.5);
    let good = figures(LiquidFlow::AlongWall, 1, 0.12, 0.12);
    let bad = [
        (LayoutFigures { downcomer_area: 0.6, downcomer_bottom_area: 0.4, ..good }, "both together below 1"),
        (LayoutFigures { downcomer_area: 0.0, ..good }, "each must be positive"),
        (LayoutFigures { downcomer_bottom_area: f64::NAN, ..good }, "each must be positive"),
        (LayoutFigures { passes: 3, ..good }, "1 or 2 can"),
        (LayoutFigures { passes: 0, ..good }, "1 or 2 can"),
        (LayoutFigures { hole_area: 1.0, ..good }, "between 0 and 1"),
        (LayoutFigures { edge_strip: m(-0.01), ..good }, "below the radius, 1.5 m"),
        (LayoutFigures { edge_strip: m(f64::NAN), ..good }, "below the radius, 1.5 m"),
        (LayoutFigures { edge_strip: m(1.2), ..good }, "narrower strips"),
    ];
    for (figures, expected) in bad {
        let error = TrayLayout::from_figures(&place, &figures).unwrap_err().to_string();
        assert!(error.contains(expected), "{error}");
    }
}

#[test]
fn tray_of_a_case_is_laid_out_by_its_own_figures() {
    let tray = Tray {
        deck: DeckKind::Sieve,
        spacing: m(0.61),
        weir_height: m(0.05),
        hole_diameter: m(0.006),
        hole_area: 0.07,
        deck_thickness: m(0.002),
        downcomer_area: 0.15,
        downcomer_bottom_area: 0.11,
        downcomer_clearance: m(0.04),
        passes: 2,
        flow: LiquidFlow::AcrossWall,
        edge_strip: m(0.03),
        weir_open: 1.0,
        foaming: None,
    };
    let place = strip(1.5, 0.2, 1.5);
    let expected = LayoutFigures {
        flow: LiquidFlow::AcrossWall,
        passes: 2,
        downcomer_area: 0.15,
        downcomer_bottom_area: 0.11,
        hole_area: 0.07,
        edge_strip: m(0.03),
    };
    assert_eq!(TrayLayout::new(&place, &tray).unwrap(), layout(&place, expected));
}

fn any_place() -> impl Strategy<Value = Strip> {
    (0.4..5.0_f64, -1.0..1.0_f64, -1.0..1.0_f64)
        .prop_filter("a place of some depth", |(_, a, b)| (a - b).abs() > 0.05)
        .prop_map(|(radius, a, b)| strip(radius, radius * a.min(b), radius * a.max(b)))
}

fn any_figures() -> impl Strategy<Value = LayoutFigures> {
    (prop_oneof![Just(LiquidFlow::AlongWall), Just(LiquidFlow::AcrossWall)], 1..=2_u8, 0.02..0.45_f64, 0.02..0.45_f64)
        .prop_map(|(flow, passes, tops, bottoms)| figures(flow, passes, tops, bottoms))
}

fn close(a: f64, b: f64, scale: f64, what: &str) -> Result<(), TestCaseError> {
    prop_assert!((a - b).abs() <= 1e-12 * scale, "{what}: {a} against {b}");
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig { failure_persistence: None, cases: 512, ..ProptestConfig::default() })]

    #[test]
    fn all_parts_of_a_tray_make_the_place(place in any_place(), figures in any_figures()) {
        let area = place.area().si();
        let (low_end, high_end) = ends(&place, figures.flow);
        for deck in layout(&place, figures).decks() {
            close(deck.net_area.si() + deck.downcomer_area.si(), area, area, "net and tops")?;
            close(deck.active_area.si(), area * (1.0 - figures.downcomer_area - figures.downcomer_bottom_area), area, "active")?;
            let share = 1.0 / deck.passes().len() as f64;
            let mut cuts = Vec::new();
            for pass in deck.passes() {
                close(pass.liquid_fraction, share, 1.0, "liquid")?;
                close(pass.downcomer_top_area.si(), share * deck.downcomer_area.si(), area, "tops")?;
                close(pass.downcomer_bottom_area.si(), share * figures.downcomer_bottom_area * area, area, "bottoms")?;
                let panel = between(&place, figures.flow, pass.inlet_position, pass.weir.position());
                close(panel, pass.active_area.si(), area, "panel between inlet and weir")?;
                close((pass.weir.position() - pass.inlet_position).abs().si(), pass.flow_path.si(), 1.0, "path")?;
                cuts.push((pass.weir.position(), true));
                cuts.push((pass.inlet_position, false));
            }
            // Between the panels and beyond them lie downcomer tops and inlet panels, each of its area.
            cuts.sort_by(|a, b| a.0.partial_cmp(&b.0).unwrap());
            let (mut tops, mut bottoms) = (0.0, 0.0);
            let mut add = |is_top: bool, part: f64| if is_top { tops += part } else { bottoms += part };
            let [first, .., last] = cuts.as_slice() else { panic!("at least two lines") };
            add(first.1, between(&place, figures.flow, low_end, first.0));
            add(last.1, between(&place, figures.flow, last.0, high_end));
            if let [_, one, other, _] = cuts.as_slice() {
                prop_assert_eq!(one.1, other.1);
                add(one.1, between(&place, figures.flow, one.0, other.0));
            }
            close(tops, figures.downcomer_area * area, area, "all tops")?;
            close(bottoms, figures.downcomer_bottom_area * area, area, "all bottoms")?;
        }
    }

    #[test]
    fn inlet_panels_lie_under_the_downcomers_of_the_deck_above(place in any_place(), figures in any_figures()) {
        // With bottoms as large as tops, one deck's inlet lines are the other deck's weirs, and its aprons are its weirs.
        let figures = LayoutFigures { downcomer_bottom_area: figures.downcomer_area, ..figures };
        let layout = layout(&place, figures);
        let mirror = |at: f64| if layout.decks().len() == 1 { -at } else { at };
        let (first, last) = (layout.decks().first().unwrap(), layout.decks().last().unwrap());
        for (pass, above) in first.passes().iter().zip(last.passes()) {
            close(pass.inlet_position.si(), mirror(above.weir.position().si()), place.radius().si(), "under the weir")?;
            close(pass.apron_length.si(), pass.weir.length().si(), place.radius().si(), "upright apron")?;
        }
    }

    #[test]
    fn mirrored_place_swaps_the_decks_across_and_keeps_them_along(place in any_place(), figures in any_figures()) {
        let mirrored = strip(place.radius().si(), -place.right().si(), -place.left().si());
        let (one, other) = (layout(&place, figures), layout(&mirrored, figures));
        prop_assert_eq!(one.decks().len(), other.decks().len());
        let swapped = figures.flow == LiquidFlow::AcrossWall && figures.passes == 1;
        let reversed = figures.flow == LiquidFlow::AcrossWall && figures.passes == 2;
        let radius = place.radius().si();
        for (index, deck) in one.decks().iter().enumerate() {
            let counterpart = other.decks()[if swapped { one.decks().len() - 1 - index } else { index }];
            for (index, pass) in deck.passes().iter().enumerate() {
                let last = deck.passes().len() - 1;
                let twin = counterpart.passes()[if reversed { last - index } else { index }];
                close(pass.weir.length().si(), twin.weir.length().si(), radius, "weir")?;
                close(pass.flow_path.si(), twin.flow_path.si(), radius, "path")?;
                close(pass.apron_length.si(), twin.apron_length.si(), radius, "apron")?;
                close(pass.weir.length_moved(m(0.02)).si(), twin.weir.length_moved(m(0.02)).si(), radius, "crest")?;
            }
        }
    }

    #[test]
    fn crest_of_a_full_circle_is_constricted_as_by_treybal(radius in 0.3..4.0_f64, tops in 0.03..0.3_f64, crest in 0.0..0.06_f64) {
        let whole = disc(radius).whole().unwrap();
        let weir = only(&layout(&whole, figures(LiquidFlow::AlongWall, 1, tops, tops)).decks()[0]).weir;
        prop_assume!(weir.position().si() + crest < 0.99 * radius);
        let expected = treybal_m(2.0 * radius, weir.length().si(), crest);
        close(weir.length_moved(m(crest)).si(), expected, radius, "effective weir")?;
    }

    #[test]
    fn edge_strips_never_add_area(place in any_place(), figures in any_figures(), edge in 0.0..0.1_f64) {
        let plain = layout(&place, figures);
        if let Ok(edged) = TrayLayout::from_figures(&place, &LayoutFigures { edge_strip: m(edge), ..figures }) {
            for (deck, without) in edged.decks().iter().zip(plain.decks()) {
                prop_assert!(deck.active_area <= without.active_area && deck.active_area.si() > 0.0);
                prop_assert_eq!(deck.net_area, without.net_area);
            }
        }
    }
}
