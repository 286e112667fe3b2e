//! Operating points: rows of the table that name them, or factors on the design loads.

use super::context::{Allowed, Context};
use super::criteria::criteria;
use super::device::VapourStream;
use super::section::Sketch;
use super::shift::{Layout, shift};
use crate::engine::case::{Compartment, Point, Row};
use crate::engine::units::Si;
use crate::input::columns::{COLUMNS, Cells, LoadRow, row};
use crate::input::loads::read_table;
use crate::input::quantity::Sign::{NotNegative, Positive};
use crate::input::raw::{RawFile, RawLoad, RawPoint};
use crate::input::reader::{FromTable, Sink, Span};

/// Name of the point that always exists.
pub(super) const DESIGN: &str = "design";
/// More operating points than this are a column mistaken for another.
const MAX_POINTS: usize = 100;
const FACTOR: Allowed = Allowed { test: |x| x > 0.0 && x <= 100.0, words: "above 0 and at most 100" };

/// What a row of the loads is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum RowsAre {
    BelowStage,
    LeavingStage,
}

/// Everything that the points are made of.
pub(super) struct Ingredients<'a> {
    pub(super) raw: &'a RawFile,
    pub(super) table: Option<&'a str>,
    /// True if the case names a table, readable or not.
    pub(super) table_named: bool,
    pub(super) sections: &'a [Sketch],
    pub(super) compartments: &'a [Option<Compartment>],
    pub(super) streams: &'a [VapourStream],
    pub(super) reach: crate::engine::case::Reach,
}

/// The points, the design first; None if something in them is wrong.
pub(super) fn points(context: &mut Context<'_>, from: &Ingredients<'_>) -> Option<Vec<Point>> {
    let loads = context.need(
        from.raw,
        &from.raw.loads,
        "[loads]",
        "a table [loads] with rows = \"below stage\" or \"leaving stage\"",
    );
    let rows_are = loads.and_then(|loads| {
        let example = "rows = \"below stage\" (or \"leaving stage\", as simulators print them)";
        let typed = context.need(loads, &loads.rows, "rows", example)?;
        let words = [("below stage", RowsAre::BelowStage), ("leaving stage", RowsAre::LeavingStage)];
        context.choice(typed, "meaning of rows", &words)
    });
    let rows = gather(context, from)?;
    let from_table = from.table.is_some();
    let tabled = group(context, rows, from, from_table);
    let raw_points = from.raw.point.as_ref().map(|points| points.items.as_slice()).unwrap_or_default();
    let described = describe(context, raw_points, &tabled);
    let mut tabled = tabled?;
    if rows_are? == RowsAre::LeavingStage {
        let layout = Layout::new(from.sections, from.compartments, from.streams, from.reach)?;
        let others: Vec<String> = tabled.iter().map(|(name, _)| name.clone()).collect();
        for (name, rows) in &mut tabled {
            let marked = from.raw.loads.as_ref().and_then(|loads| loads.rows.as_ref());
            let span = marked.map(|rows| rows.span.clone()).unwrap_or_default();
            *rows = shift(context, &layout, name, std::mem::take(rows), &span)?;
        }
        layout.note(context, &others);
    }
    assemble(described?, tabled)
}

/// All rows, from the table or from the sections.
fn gather(context: &mut Context<'_>, from: &Ingredients<'_>) -> Option<Vec<LoadRow>> {
    let raw_sections = from.raw.section.as_ref().map(|sections| sections.items.as_slice()).unwrap_or_default();
    let inline = raw_sections.iter().find_map(|section| section.typed().iter().find(|(key, _)| key == "load"));
    if let Some(text) = from.table {
        if let Some((_, span)) = inline {
            let message = "the loads are stated twice: in the table of [loads] and in [[section.load]] rows";
            context.sink.help(span.clone(), message, "stated twice", "keep the table or the rows");
            return None;
        }
        let names: Vec<&str> = from.sections.iter().map(|section| section.name.as_str()).collect();
        return Some(read_table(text, &names, &mut context.table_sink));
    }
    if from.table_named {
        return None;
    }
    if inline.is_none() {
        // A missing [loads] has been reported already.
        let span = from.raw.loads.as_ref().map(|loads| loads.span.clone())?;
        let message = "the case has no loads";
        let help = "add table = \"loads.csv\" (a file beside the case), or [[section.load]] rows in each section";
        context.sink.help(super::context::header(context.text, span), message, "no loads", help);
        return None;
    }
    let mut rows = Vec::new();
    for (index, section) in raw_sections.iter().enumerate() {
        let typed = section.load.as_ref().map(|load| load.items.as_slice()).unwrap_or_default();
        for (place, load) in typed.iter().enumerate() {
            rows.push(inline_row(context, index, place, load));
        }
    }
    Some(rows)
}

fn inline_row(context: &mut Context<'_>, section: usize, place: usize, raw: &RawLoad) -> LoadRow {
    macro_rules! cell {
        ($field:ident, $sign:expr) => {{
            let example = concat!("the column ", stringify!($field), " as a key with a unit");
            let typed = context.need(raw, &raw.$field, stringify!($field), example);
            context.si(typed, $sign).zip(typed.map(|typed| typed.span.clone()))
        }};
        (optional $field:ident) => {
            context.si(raw.$field.as_ref(), Positive).zip(raw.$field.as_ref().map(|typed| typed.span.clone()))
        };
    }
    let cells: Cells = [
        cell!(vapour_flow, Positive),
        cell!(liquid_flow, NotNegative),
        cell!(vapour_density, Positive),
        cell!(liquid_density, Positive),
        cell!(vapour_viscosity, Positive),
        cell!(liquid_viscosity, Positive),
        cell!(surface_tension, Positive),
        cell!(optional temperature),
        cell!(optional pressure),
    ];
    let stage = match &raw.stage {
        Some(typed) => context.name(&typed.0, "a stage").map(str::to_owned),
        None => Some((place + 1).to_string()),
    };
    let point = match &raw.point {
        Some(typed) => context.name(typed, "a point").unwrap_or(DESIGN).to_owned(),
        None => DESIGN.to_owned(),
    };
    let typed = |name: &str| raw.typed().iter().any(|(key, _)| key == name);
    let usable =
        COLUMNS.iter().zip(&cells).all(|(column, cell)| cell.is_some() || !(column.required || typed(column.name)));
    let row = if usable { stage.and_then(|stage| row(stage, cells, &mut context.sink)) } else { None };
    LoadRow { section, point, span: super::context::header(context.text, raw.span.clone()), row }
}

/// Rows of each section of one point.
type Tabled = Vec<(String, Vec<Vec<Row>>)>;

/// Sorts the rows by point and section; each group must stand together and none be empty.
fn group(context: &mut Context<'_>, rows: Vec<LoadRow>, from: &Ingredients<'_>, table: bool) -> Option<Tabled> {
    let mut sound = true;
    let mut seen: Vec<(String, usize)> = Vec::new();
    let mut points: Vec<(String, Vec<Vec<Row>>, Span)> = Vec::new();
    let mut last: Option<(String, usize)> = None;
    for load in rows {
        let here = (load.point.clone(), load.section);
        // Rows in the case stand in their sections already; their points may take turns.
        if last.as_ref() != Some(&here) {
            if seen.contains(&here) && table {
                let name = from.sections.get(here.1).map(|section| section.name.as_str()).unwrap_or_default();
                let message = format!(
                    "rows of section \"{name}\" at point \"{}\" stand further up already; rows of one section and point stand together, top to bottom",
                    here.0
                );
                let help = "move this row to the others of its section";
                context.table_sink.help(load.span.clone(), message, "apart from the others", help);
                sound = false;
            }
            if !seen.contains(&here) {
                seen.push(here.clone());
            }
            last = Some(here);
        }
        if !points.iter().any(|(name, ..)| *name == load.point) {
            if points.len() >= MAX_POINTS {
                let sink = if table { &mut context.table_sink } else { &mut context.sink };
                let message = format!("the loads name more than {MAX_POINTS} operating points");
                sink.help(load.span.clone(), message, "one point too many", "is this the column of the point?");
                return None;
            }
            points.push((load.point.clone(), vec![Vec::new(); from.sections.len()], load.span.clone()));
        }
        let slot = points.iter_mut().find(|(name, ..)| *name == load.point);
        match (slot.and_then(|(_, sections, _)| sections.get_mut(load.section)), load.row) {
            (Some(slot), Some(row)) => slot.push(row),
            _ => sound = false,
        }
    }
    let sink: &mut Sink = if table { &mut context.table_sink } else { &mut context.sink };
    let clean = if table { sink.items.is_empty() } else { sound };
    let design = points.iter().any(|(name, ..)| name == DESIGN);
    if !design && clean && !points.is_empty() {
        let message = "the loads have no rows for the point \"design\"";
        let span = points.first().map(|(.., span)| span.clone()).unwrap_or_default();
        sink.help(span, message, "first row", "name the design rows \"design\", or leave the column \"point\" out");
    }
    // A section whose rows are wrong, or stand under a misspelt name, is not called empty on top of that.
    if sound && (sink.items.is_empty() || !table) {
        for (point, sections, span) in &points {
            for (section, rows) in from.sections.iter().zip(sections) {
                if rows.is_empty() && !section.name.is_empty() {
                    let message = format!("section \"{}\" has no rows at point \"{point}\"", section.name);
                    let help = "every section needs at least one row at every point that the loads name";
                    sink.help(span.clone(), message, "first row of this point", help);
                    sound = false;
                }
            }
        }
    }
    let complete = points.iter().all(|(_, sections, _)| sections.iter().all(|rows| !rows.is_empty()));
    (sound && design && complete).then(|| points.into_iter().map(|(name, sections, _)| (name, sections)).collect())
}

/// A point and the factors on the design loads, if it has any.
struct Described {
    name: String,
    criteria: crate::engine::case::Criteria,
    factors: Option<(f64, f64)>,
}

/// `[[point]]` entries.
fn describe(context: &mut Context<'_>, raw: &[RawPoint], tabled: &Option<Tabled>) -> Option<Vec<Described>> {
    let mut names: Vec<(String, Span)> = Vec::new();
    let mut described = Vec::new();
    let mut sound = true;
    for point in raw {
        let typed = context.need(point, &point.name, "name", "e.g. name = \"turndown\"");
        let name = typed.and_then(|typed| context.name(typed, "the name of a point").map(str::to_owned));
        let criteria = criteria(context, point.criteria.as_ref());
        let vapour = context.number(point.vapour.as_ref(), "vapour", FACTOR);
        let liquid = context.number(point.liquid.as_ref(), "liquid", FACTOR);
        let (Some(name), Some(typed)) = (name, typed) else {
            sound = false;
            continue;
        };
        names.push((name.clone(), typed.span.clone()));
        let typed_factor = point.typed().iter().find(|(key, _)| key == "vapour" || key == "liquid");
        let has_rows = tabled.as_ref().map(|tabled| tabled.iter().any(|(tabled, _)| *tabled == name));
        let factors = match (typed_factor, has_rows) {
            (Some((_, span)), Some(true)) => {
                let (message, help) = if name == DESIGN {
                    ("factors cannot change the design point: they are factors on it", "give this point another name")
                } else {
                    (
                        "this point has factors here and rows of its own in the loads; only one of them can hold",
                        "take the factors out, or the rows",
                    )
                };
                let label = if name == DESIGN { "not for the design point" } else { "stated twice" };
                context.sink.help(span.clone(), message, label, help);
                sound = false;
                None
            }
            (Some((_, span)), _) => match (&point.vapour, &point.liquid) {
                (Some(_), Some(_)) => {
                    let both = vapour.zip(liquid);
                    sound &= both.is_some();
                    both
                }
                _ => {
                    for key in ["vapour", "liquid"] {
                        if !point.typed().iter().any(|(typed, _)| typed == key) {
                            let message = format!("this point has a factor, but none for the {key}");
                            context.sink.help(
                                span.clone(),
                                message,
                                "half a point",
                                format!("add {key} = ... (1.0 if it stays as it is)"),
                            );
                        }
                    }
                    sound = false;
                    None
                }
            },
            (None, Some(false)) if name != DESIGN => {
                let message = format!("the point \"{name}\" has neither factors nor rows in the loads");
                let help =
                    "add vapour = 0.55 and liquid = 0.55 (factors on the design loads), or rows that name the point";
                context.sink.help(typed.span.clone(), message, "no loads", help);
                sound = false;
                None
            }
            (None, _) => None,
        };
        described.push(Described { name, criteria, factors });
    }
    context.unique(&names, "points");
    sound.then_some(described)
}

/// The design point first, then those of the case, then those that only the loads name.
fn assemble(described: Vec<Described>, mut tabled: Tabled) -> Option<Vec<Point>> {
    let mut take = |name: &str| -> Option<Vec<Vec<Row>>> {
        let place = tabled.iter().position(|(tabled, _)| tabled == name)?;
        Some(tabled.remove(place).1)
    };
    let design = take(DESIGN)?;
    let criteria = described.iter().find(|point| point.name == DESIGN).map(|point| point.criteria.clone());
    let mut points =
        vec![Point { name: DESIGN.to_owned(), criteria: criteria.unwrap_or_default(), loads: design.clone() }];
    for point in described.into_iter().filter(|point| point.name != DESIGN) {
        let loads = match point.factors {
            Some((vapour, liquid)) => scaled(&design, vapour, liquid),
            None => take(&point.name)?,
        };
        points.push(Point { name: point.name, criteria: point.criteria, loads });
    }
    for (name, loads) in tabled {
        points.push(Point { name, criteria: Default::default(), loads });
    }
    Some(points)
}

fn scaled(design: &[Vec<Row>], vapour: f64, liquid: f64) -> Vec<Vec<Row>> {
    let row = |row: &Row| Row {
        vapour_flow: Si::from_si(row.vapour_flow.si() * vapour),
        liquid_flow: Si::from_si(row.liquid_flow.si() * liquid),
        ..row.clone()
    };
    design.iter().map(|rows| rows.iter().map(row).collect()).collect()
}
