//! A tray laid out in its place: where its downcomers and weirs lie and what they leave.
//!
//! x runs across the wall, y along it. A downcomer's top and bottom (the inlet panel of the tray below) are exact cuts of
//! the place by straight lines.

use super::inverse::{band_half_width_m, corner_line_m, width_from_left_m};
use super::kernel::{DiscStrip, geometry_error};
use super::strip::Strip;
use crate::engine::case::{LiquidFlow, Tray};
use crate::engine::error::EngineResult;
use crate::engine::units::{Area, Length, Si};

/// What a layout needs to know of a tray.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LayoutFigures {
    /// Direction of the liquid.
    pub flow: LiquidFlow,
    /// Liquid passes: 1 or 2.
    pub passes: u8,
    /// Tops of all downcomers of one tray over the area of the place; above 0.
    pub downcomer_area: f64,
    /// Bottoms likewise; above 0, together with the tops below 1.
    pub downcomer_bottom_area: f64,
    /// Holes over active area; in (0, 1).
    pub hole_area: f64,
    /// Width of the unperforated strip along shell and walls; not negative.
    pub edge_strip: Length,
}

impl From<&Tray> for LayoutFigures {
    fn from(tray: &Tray) -> Self {
        Self {
            flow: tray.flow,
            passes: tray.passes,
            downcomer_area: tray.downcomer_area,
            downcomer_bottom_area: tray.downcomer_bottom_area,
            hole_area: tray.hole_area,
            edge_strip: tray.edge_strip,
        }
    }
}

/// The one deck, or the two that alternate, of a tray stack in one place.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TrayLayout {
    decks: [Deck; 2],
    alternate: bool,
}

/// One deck.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Deck {
    /// Area of the place less the tops of this deck's downcomers.
    pub net_area: Area,
    /// Perforated area: net area less inlet panels and edge strips.
    pub active_area: Area,
    /// Area of the holes.
    pub hole_area: Area,
    /// Tops of this deck's downcomers.
    pub downcomer_area: Area,
    passes: [Pass; 2],
    two_passes: bool,
}

/// One path of liquid over a deck, with its part of the downcomer at its end.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Pass {
    /// Part of the liquid that takes this path.
    pub liquid_fraction: f64,
    /// Outlet weir.
    pub weir: Weir,
    /// Signed distance from the axis of the line where the liquid enters the deck, as [`Weir::position`].
    pub inlet_position: Length,
    /// Perforated area of this path, edge strips off.
    pub active_area: Area,
    /// Top of the downcomer, this path's part of it.
    pub downcomer_top_area: Area,
    /// Bottom of the downcomer, this path's part of it.
    pub downcomer_bottom_area: Area,
    /// Length of the downcomer's lower edge, under which this path's liquid leaves.
    pub apron_length: Length,
    /// Distance from the line where the liquid enters the deck to the weir.
    pub flow_path: Length,
}

/// An outlet weir: a straight line across the whole place, with the direction in which the liquid crosses it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Weir {
    strip: DiscStrip,
    axis: LiquidFlow,
    position_m: f64,
    /// +1 or -1.
    towards: f64,
    length_m: f64,
}

impl Weir {
    /// Signed distance of the weir from the axis: y for liquid along the wall, x for liquid across it.
    pub fn position(&self) -> Length {
        Length::from_si(self.position_m)
    }

    /// Length.
    pub fn length(&self) -> Length {
        Length::from_si(self.length_m)
    }

    /// Length of the line moved by `distance` in the direction of the liquid, within the place, never more than
    /// [`Weir::length`]; zero if the moved line leaves the place.
    ///
    /// With the crest's height as distance this is the constriction of the crest by the curved shell. For a chord of a
    /// full circle it is the relation for segmental weirs of Treybal (Mass-Transfer Operations, Eq. 6.34, read
    /// second-hand); at a straight wall nothing closes in, so that a weir between shell and wall loses at one end only.
    pub fn length_moved(&self, distance: Length) -> Length {
        let at_m = self.position_m + self.towards * distance.si();
        Length::from_si(line_length_m(&self.strip, self.axis, at_m).min(self.length_m))
    }
}

fn line_length_m(strip: &DiscStrip, axis: LiquidFlow, at_m: f64) -> f64 {
    match axis {
        LiquidFlow::AlongWall => strip.line_length_m(at_m),
        LiquidFlow::AcrossWall => strip.chord_at_m(at_m),
    }
}

impl Deck {
    /// The liquid's paths: one or two.
    pub fn passes(&self) -> &[Pass] {
        if self.two_passes { &self.passes } else { self.passes.get(..1).unwrap_or(&self.passes) }
    }
}

impl TrayLayout {
    /// Lays the tray out in the place.
    ///
    /// # Errors
    /// `EngineError::Geometry` if its pieces do not fit; says which.
    pub fn new(place: &Strip, tray: &Tray) -> EngineResult<Self> {
        Self::from_figures(place, &LayoutFigures::from(tray))
    }

    /// As [`TrayLayout::new`], from the figures alone.
    ///
    /// # Errors
    /// `EngineError::Geometry` if a figure is out of its range or the pieces do not fit; says which.
    pub fn from_figures(place: &Strip, figures: &LayoutFigures) -> EngineResult<Self> {
        check(place, figures)?;
        Layouter { strip: *place.kernel(), area_m2: place.kernel().area_m2(), figures: *figures }.lay_out()
    }

    /// The decks that differ: one if alternate trays are mirror images of each other, else two.
    pub fn decks(&self) -> &[Deck] {
        if self.alternate { &self.decks } else { self.decks.get(..1).unwrap_or(&self.decks) }
    }
}

fn check(place: &Strip, figures: &LayoutFigures) -> EngineResult<()> {
    let (tops, bottoms) = (figures.downcomer_area, figures.downcomer_bottom_area);
    let edge_m = figures.edge_strip.si();
    if !(tops > 0.0 && bottoms > 0.0 && tops + bottoms < 1.0) {
        return Err(geometry_error(format!(
            "downcomer tops over {tops} and bottoms over {bottoms} of the place leave no active area; each must be \
             positive and both together below 1"
        )));
    }
    if !(1..=2).contains(&figures.passes) {
        return Err(geometry_error(format!("{} liquid passes cannot be laid out; 1 or 2 can", figures.passes)));
    }
    if !(figures.hole_area > 0.0 && figures.hole_area < 1.0) {
        return Err(geometry_error(format!(
            "holes over {} of the active area cannot be; the fraction must be between 0 and 1",
            figures.hole_area
        )));
    }
    if !(edge_m >= 0.0 && edge_m < place.radius().si()) {
        return Err(geometry_error(format!(
            "an edge strip {edge_m} m wide does not fit; it must be at least 0 and below the radius, {} m",
            place.radius().si()
        )));
    }
    Ok(())
}

/// Lines of one pass before it becomes a [`Pass`]; positions along the liquid's axis.
struct Lines {
    weir_m: f64,
    inlet_m: f64,
    apron_m: f64,
}

struct Layouter {
    strip: DiscStrip,
    area_m2: f64,
    figures: LayoutFigures,
}

impl Layouter {
    fn lay_out(&self) -> EngineResult<TrayLayout> {
        match (self.figures.flow, self.figures.passes) {
            (LiquidFlow::AlongWall, 2) => self.along_two(),
            (LiquidFlow::AlongWall, _) => self.along_one(),
            (LiquidFlow::AcrossWall, 2) => self.across_two(),
            (LiquidFlow::AcrossWall, _) => self.across_one(),
        }
    }

    /// Area of all downcomer tops of one deck.
    fn tops_m2(&self) -> f64 {
        self.figures.downcomer_area * self.area_m2
    }

    /// Area of all downcomer bottoms of one deck.
    fn bottoms_m2(&self) -> f64 {
        self.figures.downcomer_bottom_area * self.area_m2
    }

    /// A line for the tops and its twin for the bottoms, which mostly have one area and then one line.
    fn twins(&self, line_m: impl Fn(f64) -> EngineResult<f64>) -> EngineResult<(f64, f64)> {
        let (tops_m2, bottoms_m2) = (self.tops_m2(), self.bottoms_m2());
        let top_m = line_m(tops_m2)?;
        Ok((top_m, if bottoms_m2 == tops_m2 { top_m } else { line_m(bottoms_m2)? }))
    }

    fn along_one(&self) -> EngineResult<TrayLayout> {
        let (weir_m, bottom_m) = self.twins(|area_m2| corner_line_m(&self.strip, area_m2))?;
        let deck = self.deck_of_one(Lines { weir_m, inlet_m: -bottom_m, apron_m: bottom_m })?;
        Ok(TrayLayout { decks: [deck; 2], alternate: false })
    }

    fn along_two(&self) -> EngineResult<TrayLayout> {
        let (end_weir_m, end_bottom_m) = self.twins(|area_m2| corner_line_m(&self.strip, 0.5 * area_m2))?;
        let (centre_weir_m, centre_bottom_m) = self.twins(|area_m2| band_half_width_m(&self.strip, area_m2))?;
        let to_ends = [1.0, -1.0].map(|side| Lines {
            weir_m: side * end_weir_m,
            inlet_m: side * centre_bottom_m,
            apron_m: side * end_bottom_m,
        });
        let to_centre = [1.0, -1.0].map(|side| Lines {
            weir_m: side * centre_weir_m,
            inlet_m: side * end_bottom_m,
            apron_m: side * centre_bottom_m,
        });
        Ok(TrayLayout { decks: [self.deck_of_two(to_ends)?, self.deck_of_two(to_centre)?], alternate: true })
    }

    /// Line x = const with this area of the place on its left.
    fn line_beyond_left_m(&self, area_m2: f64) -> EngineResult<f64> {
        Ok(self.strip.left_m() + width_from_left_m(self.strip.radius_m(), self.strip.left_m(), area_m2)?)
    }

    /// Line x = const with this area of the place on its right.
    fn line_before_right_m(&self, area_m2: f64) -> EngineResult<f64> {
        Ok(self.strip.right_m() - width_from_left_m(self.strip.radius_m(), -self.strip.right_m(), area_m2)?)
    }

    fn across_one(&self) -> EngineResult<TrayLayout> {
        let (left_weir_m, left_bottom_m) = self.twins(|area_m2| self.line_beyond_left_m(area_m2))?;
        let (right_weir_m, right_bottom_m) = self.twins(|area_m2| self.line_before_right_m(area_m2))?;
        let to_left = Lines { weir_m: left_weir_m, inlet_m: right_bottom_m, apron_m: left_bottom_m };
        let to_right = Lines { weir_m: right_weir_m, inlet_m: left_bottom_m, apron_m: right_bottom_m };
        let decks = [self.deck_of_one(to_left)?, self.deck_of_one(to_right)?];
        // A place that is its own mirror image has one deck, seen from either side.
        let alternate = self.strip.left_m() != -self.strip.right_m();
        Ok(TrayLayout { decks, alternate })
    }

    fn across_two(&self) -> EngineResult<TrayLayout> {
        // Downcomers at the sides.
        let left = self.twins(|area_m2| self.line_beyond_left_m(0.5 * area_m2))?;
        let right = self.twins(|area_m2| self.line_before_right_m(0.5 * area_m2))?;
        let (side_weirs_m, side_bottoms_m) = ([left.0, right.0], [left.1, right.1]);
        // Strips between equal halves of what they leave: equal panels on the deck that has equal downcomers at its sides.
        let left = self.twins(|area_m2| self.line_beyond_left_m(0.5 * (self.area_m2 - area_m2)))?;
        let right = self.twins(|area_m2| self.line_before_right_m(0.5 * (self.area_m2 - area_m2)))?;
        let (centre_weirs_m, centre_bottoms_m) = ([left.0, right.0], [left.1, right.1]);
        let lines = |weirs_m: [f64; 2], inlets_m: [f64; 2], aprons_m: [f64; 2]| {
            let ([weir_1, weir_2], [inlet_1, inlet_2], [apron_1, apron_2]) = (weirs_m, inlets_m, aprons_m);
            [
                Lines { weir_m: weir_1, inlet_m: inlet_1, apron_m: apron_1 },
                Lines { weir_m: weir_2, inlet_m: inlet_2, apron_m: apron_2 },
            ]
        };
        Ok(TrayLayout {
            decks: [
                self.deck_of_two(lines(side_weirs_m, centre_bottoms_m, side_bottoms_m))?,
                self.deck_of_two(lines(centre_weirs_m, side_bottoms_m, centre_bottoms_m))?,
            ],
            alternate: true,
        })
    }

    fn deck_of_one(&self, lines: Lines) -> EngineResult<Deck> {
        let pass = self.pass(&lines, 1.0)?;
        Ok(self.deck([pass; 2], false, pass.active_area))
    }

    fn deck_of_two(&self, lines: [Lines; 2]) -> EngineResult<Deck> {
        let [first, second] = &lines;
        let (first, second) = (self.pass(first, 0.5)?, self.pass(second, 0.5)?);
        Ok(self.deck([first, second], true, first.active_area + second.active_area))
    }

    fn deck(&self, passes: [Pass; 2], two_passes: bool, active_area: Area) -> Deck {
        Deck {
            net_area: Area::from_si(self.area_m2 - self.tops_m2()),
            active_area,
            hole_area: active_area * self.figures.hole_area,
            downcomer_area: Area::from_si(self.tops_m2()),
            passes,
            two_passes,
        }
    }

    fn pass(&self, lines: &Lines, fraction: f64) -> EngineResult<Pass> {
        let axis = self.figures.flow;
        let flow_path_m = (lines.weir_m - lines.inlet_m).abs();
        let panel_m2 = fraction * (self.area_m2 - self.tops_m2() - self.bottoms_m2());
        let active_m2 = panel_m2 - self.edges_m2(lines);
        if !(active_m2 > 0.0 && flow_path_m > 0.0) {
            return Err(geometry_error(format!(
                "edge strips {} m wide and inlet panels leave no active area of a panel of {panel_m2} m2 with a flow path \
                 of {flow_path_m} m; narrower strips, smaller downcomers or fewer passes would",
                self.figures.edge_strip.si()
            )));
        }
        let towards = if lines.weir_m > lines.inlet_m { 1.0 } else { -1.0 };
        let length_m = line_length_m(&self.strip, axis, lines.weir_m);
        Ok(Pass {
            liquid_fraction: fraction,
            weir: Weir { strip: self.strip, axis, position_m: lines.weir_m, towards, length_m },
            inlet_position: Length::from_si(lines.inlet_m),
            active_area: Area::from_si(active_m2),
            downcomer_top_area: Area::from_si(fraction * self.tops_m2()),
            downcomer_bottom_area: Area::from_si(fraction * self.bottoms_m2()),
            apron_length: Length::from_si(line_length_m(&self.strip, axis, lines.apron_m)),
            flow_path: Length::from_si(flow_path_m),
        })
    }

    /// Edge strips of the panel between inlet and weir: a sector of a ring along the shell and a rectangle along each wall
    /// (where the two meet in a corner both are taken off, to the safe side). A panel between two lines x = const has no
    /// wall of its own: downcomer and inlet panel lie between it and both sides.
    fn edges_m2(&self, lines: &Lines) -> f64 {
        let edge_m = self.figures.edge_strip.si();
        if edge_m == 0.0 {
            return 0.0;
        }
        let (lower_m, upper_m) = (lines.weir_m.min(lines.inlet_m), lines.weir_m.max(lines.inlet_m));
        let radius_m = self.strip.radius_m();
        let (arc_m, walls_m) = match self.figures.flow {
            LiquidFlow::AlongWall => {
                (self.strip.arc_between_m(lower_m, upper_m), self.strip.sides_between_m(lower_m, upper_m))
            }
            LiquidFlow::AcrossWall => (DiscStrip::from_left(radius_m, lower_m, upper_m - lower_m).arc_length_m(), 0.0),
        };
        edge_m * (arc_m * (1.0 - 0.5 * edge_m / radius_m) + walls_m)
    }
}
