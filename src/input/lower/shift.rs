//! `rows = "leaving stage"`: the vapour moved down by one stage, so that rows read as "below stage".
//!
//! A simulator's row gives both streams as they leave the stage. What arrives at stage j from below is what leaves stage
//! j + 1. The joints are where that needs more: between two sections a feed's vapour joins, at the wall's lower edge the
//! vapour divides, at its upper edge the compartments' vapours unite, and below the last stage the mass balance closes.

use super::context::Context;
use super::device::VapourStream;
use super::point::DESIGN;
use super::section::Sketch;
use crate::engine::case::{Compartment, Place, Reach, Row};
use crate::engine::units::{DynamicViscosity, MassDensity, Si};
use crate::input::reader::Span;

/// Sections by place, each from top to bottom, and what joins them.
pub(super) struct Layout<'a> {
    above: Vec<usize>,
    compartments: Vec<Vec<usize>>,
    below: Vec<usize>,
    shares: Vec<Option<f64>>,
    names: Vec<&'a str>,
    streams: &'a [VapourStream],
    reach: Reach,
}

/// A vapour on its way up.
#[derive(Clone, Copy, Debug)]
struct Vapour {
    flow_kg_s: f64,
    density: MassDensity,
    viscosity: DynamicViscosity,
}

impl Vapour {
    fn leaving(row: &Row) -> Self {
        Self { flow_kg_s: row.vapour_flow.si(), density: row.vapour_density, viscosity: row.vapour_viscosity }
    }
}

impl<'a> Layout<'a> {
    /// From the sections; None if one of them has no known place.
    pub(super) fn new(
        sections: &'a [Sketch],
        compartments: &[Option<Compartment>],
        streams: &'a [VapourStream],
        reach: Reach,
    ) -> Option<Self> {
        let in_place = |place: Place| -> Vec<usize> {
            let here = sections.iter().enumerate().filter(|(_, section)| section.place == Some(place));
            here.map(|(index, _)| index).collect()
        };
        if sections.iter().any(|section| section.place.is_none()) {
            return None;
        }
        let stated: Vec<Option<f64>> =
            compartments.iter().map(|compartment| compartment.as_ref().and_then(|c| c.vapour_share)).collect();
        Some(Self {
            above: in_place(Place::Above),
            compartments: (0..compartments.len()).map(|index| in_place(Place::Compartment(index))).collect(),
            below: in_place(Place::Below),
            shares: completed(&stated),
            names: sections.iter().map(|section| section.name.as_str()).collect(),
            streams,
            reach,
        })
    }

    /// Says what was done.
    pub(super) fn note(&self, context: &mut Context<'_>, points: &[String]) {
        let mut note = "The loads were given as leaving each stage; the vapour was moved down by one stage, so that each row shows what arrives at its stage from below.".to_owned();
        if self.reach != Reach::Bottom {
            let shares: Vec<String> = self.shares.iter().flatten().map(|share| format!("{share:.4}")).collect();
            note.push_str(&format!(
                " At the wall's lower edge the vapour of the first row below the wall was divided by vapour_share ({}).",
                shares.join(" : ")
            ));
        }
        if self.reach != Reach::Top {
            note.push_str(" Above the wall's upper edge the compartments' vapours were added.");
        }
        note.push_str(" Below the last stage the vapour is that of the stage's mass balance, with the density and viscosity of the vapour leaving it.");
        context.notes.push(note);
        for stream in self.streams {
            let (verb, what) = if stream.vapour_kg_s > 0.0 { ("added", "into") } else { ("taken off", "out of") };
            context.notes.push(format!(
                "The vapour of stream \"{}\" ({:.4} kg/s at design) was {verb} below section \"{}\", {what} what rises there.",
                stream.name,
                stream.vapour_kg_s.abs(),
                self.names.get(stream.section).copied().unwrap_or_default()
            ));
        }
        if points.len() > 1 && !self.streams.is_empty() {
            context.notes.push(
                "At other points with rows of their own, the vapour of streams is that of the mass balance of the stage above."
                    .to_owned(),
            );
        }
    }
}

/// Shares with one missing entry filled up to 1.
fn completed(stated: &[Option<f64>]) -> Vec<Option<f64>> {
    let missing = stated.iter().filter(|share| share.is_none()).count();
    let rest = 1.0 - stated.iter().flatten().sum::<f64>();
    stated.iter().map(|share| share.or((missing == 1 && rest > 0.0).then_some(rest))).collect()
}

/// The rows of one point, shifted. `span` is that of `rows = "leaving stage"` in the case.
pub(super) fn shift(
    context: &mut Context<'_>,
    layout: &Layout<'_>,
    point: &str,
    rows: Vec<Vec<Row>>,
    span: &Span,
) -> Option<Vec<Vec<Row>>> {
    if layout.reach != Reach::Bottom && layout.shares.iter().any(Option::is_none) {
        let message =
            "with rows = \"leaving stage\" the loads do not say how the vapour divides at the wall's lower edge";
        let help = "add vapour_share = ... to every compartment (one may be left out: it takes the rest to 1)";
        context.sink.help(span.clone(), message, "vapour_share missing", help);
        return None;
    }
    let shifter = Shifter { layout, point, rows: &rows };
    let mut arriving: Vec<Vec<Vapour>> = Vec::new();
    for section in 0..rows.len() {
        match shifter.section(section) {
            Ok(vapours) => arriving.push(vapours),
            Err((message, marked, help)) => {
                context.sink.help(marked.unwrap_or_else(|| span.clone()), message, "cannot be worked out", help);
                return None;
            }
        }
    }
    let mut shifted = rows.clone();
    for (section, vapours) in shifted.iter_mut().zip(arriving) {
        for (row, vapour) in section.iter_mut().zip(vapours) {
            row.vapour_flow = Si::from_si(vapour.flow_kg_s);
            row.vapour_density = vapour.density;
            row.vapour_viscosity = vapour.viscosity;
        }
    }
    Some(shifted)
}

/// What is wrong, where if not at `rows`, and what would be right.
type Trouble = (String, Option<Span>, String);

struct Shifter<'a> {
    layout: &'a Layout<'a>,
    point: &'a str,
    rows: &'a [Vec<Row>],
}

impl Shifter<'_> {
    fn rows(&self, section: usize) -> &[Row] {
        self.rows.get(section).map(Vec::as_slice).unwrap_or_default()
    }

    /// Vapours arriving at each row of a section.
    fn section(&self, section: usize) -> Result<Vec<Vapour>, Trouble> {
        let rows = self.rows(section);
        let mut vapours: Vec<Vapour> = rows.iter().skip(1).map(Vapour::leaving).collect();
        let last = self.arriving_at_last(section)?;
        let positive = last.flow_kg_s > 0.0 && last.flow_kg_s.is_finite();
        let lighter = rows.last().is_some_and(|row| last.density < row.liquid_density);
        if !positive || !lighter {
            let name = self.layout.names.get(section).copied().unwrap_or_default();
            let message = if positive {
                format!(
                    "the vapour arriving at the last row of section \"{name}\" at point \"{}\" would not be lighter than its liquid",
                    self.point
                )
            } else {
                format!(
                    "the vapour arriving at the last row of section \"{name}\" at point \"{}\" would be {:.4} kg/s",
                    self.point, last.flow_kg_s
                )
            };
            let help = "check the loads and the streams, or give rows = \"below stage\"";
            return Err((message, None, help.to_owned()));
        }
        vapours.push(last);
        Ok(vapours)
    }

    fn arriving_at_last(&self, section: usize) -> Result<Vapour, Trouble> {
        let layout = self.layout;
        for (index, sections) in layout.compartments.iter().enumerate() {
            if let Some(next) = after(sections, section) {
                return match next {
                    Some(next) => self.joint(section, next),
                    None => self.wall_lower_edge(index, section),
                };
            }
        }
        if let Some(next) = after(&layout.above, section) {
            return match next {
                Some(next) => self.joint(section, next),
                None => self.wall_upper_edge(section),
            };
        }
        match after(&layout.below, section) {
            Some(Some(next)) => self.joint(section, next),
            _ => self.bottom(section, &layout.below),
        }
    }

    /// Between two sections of one place.
    fn joint(&self, section: usize, next: usize) -> Result<Vapour, Trouble> {
        let first = self.rows(next).first().ok_or_else(|| self.unknown(section))?;
        let rising = Vapour::leaving(first);
        Ok(Vapour { flow_kg_s: rising.flow_kg_s + self.streams_kg_s(section, rising)?, ..rising })
    }

    /// Net vapour of the streams below a section. Their flows are stated for the design point; at another point the mass
    /// balance of the stage above the joint says what joined.
    fn streams_kg_s(&self, section: usize, rising: Vapour) -> Result<f64, Trouble> {
        let here: Vec<&VapourStream> = self.layout.streams.iter().filter(|stream| stream.section == section).collect();
        if here.is_empty() || self.point == DESIGN {
            return Ok(here.iter().map(|stream| stream.vapour_kg_s).sum());
        }
        match self.rows(section) {
            [.., above, last] => {
                let arriving = last.vapour_flow.si() + last.liquid_flow.si() - above.liquid_flow.si();
                Ok(arriving - rising.flow_kg_s)
            }
            _ => Err(self.unknown(section)),
        }
    }

    fn wall_lower_edge(&self, compartment: usize, section: usize) -> Result<Vapour, Trouble> {
        self.no_stream(section)?;
        if self.layout.reach == Reach::Bottom {
            let own = self.layout.compartments.get(compartment).map(Vec::as_slice).unwrap_or_default();
            return self.bottom(section, own);
        }
        let first = self.layout.below.first().and_then(|below| self.rows(*below).first());
        let share = self.layout.shares.get(compartment).copied().flatten();
        let (Some(first), Some(share)) = (first, share) else {
            return Err(self.unknown(section));
        };
        let rising = Vapour::leaving(first);
        Ok(Vapour { flow_kg_s: rising.flow_kg_s * share, ..rising })
    }

    /// The compartments' vapours together: densities by total mass over total volume, viscosities by mass.
    fn wall_upper_edge(&self, section: usize) -> Result<Vapour, Trouble> {
        self.no_stream(section)?;
        let mut flow = 0.0;
        let mut volume = 0.0;
        let mut viscosity = 0.0;
        for sections in &self.layout.compartments {
            let row = sections.first().and_then(|first| self.rows(*first).first());
            let vapour = Vapour::leaving(row.ok_or_else(|| self.unknown(section))?);
            flow += vapour.flow_kg_s;
            volume += vapour.flow_kg_s / vapour.density.si();
            viscosity += vapour.flow_kg_s * vapour.viscosity.si();
        }
        Ok(Vapour { flow_kg_s: flow, density: Si::from_si(flow / volume), viscosity: Si::from_si(viscosity / flow) })
    }

    /// Below the last stage of all: vapour in = vapour out + liquid out - liquid from the stage above.
    fn bottom(&self, section: usize, place: &[usize]) -> Result<Vapour, Trouble> {
        self.no_stream(section)?;
        let rows = self.rows(section);
        let last = rows.last().ok_or_else(|| self.unknown(section))?;
        let from_above = match rows.iter().rev().nth(1) {
            Some(row) => row.liquid_flow.si(),
            None => self.liquid_from_above(section, place)?,
        };
        let leaving = Vapour::leaving(last);
        Ok(Vapour { flow_kg_s: leaving.flow_kg_s + last.liquid_flow.si() - from_above, ..leaving })
    }

    /// Liquid onto the only row of a section at the bottom.
    fn liquid_from_above(&self, section: usize, place: &[usize]) -> Result<f64, Trouble> {
        let before = place.iter().position(|index| *index == section).and_then(|at| at.checked_sub(1));
        let last_liquid = |section: usize| self.rows(section).last().map(|row| row.liquid_flow.si());
        if let Some(previous) = before.and_then(|at| place.get(at)) {
            return last_liquid(*previous).ok_or_else(|| self.unknown(section));
        }
        if self.layout.reach == Reach::Bottom {
            return Err(self.unknown(section));
        }
        let ends = self.layout.compartments.iter().map(|sections| sections.last().and_then(|last| last_liquid(*last)));
        ends.sum::<Option<f64>>().ok_or_else(|| self.unknown(section))
    }

    /// A stream's vapour at an end of a place is in no section's way from one row to the next.
    fn no_stream(&self, section: usize) -> Result<(), Trouble> {
        match self.layout.streams.iter().find(|stream| stream.section == section) {
            None => Ok(()),
            Some(stream) => Err((
                format!("the vapour of stream \"{}\" joins at the end of its place, not between two sections", stream.name),
                Some(stream.span.clone()),
                "with rows = \"leaving stage\" a stream's vapour stands between two sections of one place; otherwise give rows = \"below stage\"".to_owned(),
            )),
        }
    }

    fn unknown(&self, section: usize) -> Trouble {
        let name = self.layout.names.get(section).copied().unwrap_or_default();
        let message =
            format!("the vapour arriving at the last row of section \"{name}\" cannot be worked out from the loads");
        (message, None, "give rows = \"below stage\"".to_owned())
    }
}

/// What follows a section in a list: None if it is not in the list, Some(None) if nothing follows.
fn after(sections: &[usize], section: usize) -> Option<Option<usize>> {
    let at = sections.iter().position(|index| *index == section)?;
    Some(sections.get(at + 1).copied())
}
