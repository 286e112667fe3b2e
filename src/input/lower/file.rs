//! The whole case, part by part; each part goes as far as it can, so that one run says everything.

use super::context::{Context, header};
use super::device::{devices, streams};
use super::head::{head, kept_tables, methods};
use super::internals::internals;
use super::point::{Ingredients, points};
use super::section::{Sketch, Surroundings, sections};
use super::vessel::{band_names, compartments, shell, wall};
use super::{criteria, share};
use crate::engine::case::{Case, Internals, Place, Reach, Section};
use crate::engine::correlation::catalogue::Catalogue;
use crate::input::diagnostic::Diagnostic;
use crate::input::raw::RawFile;
use crate::input::reader::{Named, Sink};

/// What goes in.
pub(crate) struct Texts<'a> {
    /// Text of the case.
    pub(crate) case: &'a str,
    /// Text of the table, if there is one.
    pub(crate) table: Option<&'a str>,
}

/// Lowers a case; `found` is what reading it has found wrong already.
pub(crate) fn lower(
    raw: &RawFile,
    texts: &Texts<'_>,
    catalogue: &Catalogue,
    found: Vec<Diagnostic>,
) -> Result<Case, Vec<Diagnostic>> {
    let mut context = Context {
        text: texts.case,
        sink: Sink { source: 0, items: found },
        table_sink: Sink::new(1),
        catalogue,
        notes: Vec::new(),
    };
    let case = whole(&mut context, raw, texts);
    let mut items = context.sink.items;
    items.append(&mut context.table_sink.items);
    match case {
        Some(case) if items.is_empty() => Ok(case),
        _ => Err(items),
    }
}

fn whole(context: &mut Context<'_>, raw: &RawFile, texts: &Texts<'_>) -> Option<Case> {
    let head = head(context, raw);
    let criteria = criteria::criteria_table(context, raw.criteria.as_ref());
    let methods = methods(context, raw.methods.as_ref());
    kept_tables(context, raw);
    let raw_compartments = raw.compartment.as_ref().map(|many| many.items.as_slice()).unwrap_or_default();
    let listed = compartments(context, raw_compartments);
    let names: Vec<String> = listed.iter().map(|(name, _)| name.clone()).collect();
    let compartments: Vec<Option<_>> = listed.into_iter().map(|(_, compartment)| compartment).collect();
    let mut shares_sound = share::sums(context, raw_compartments);
    if raw_compartments.len() < 2 {
        let message =
            format!("a wall has at least two sides, but the case has {} [[compartment]]", raw_compartments.len());
        let at = raw_compartments.first().map(|one| header(context.text, one.span.clone()));
        let end = context.text.len();
        let help = "list them side by side, in order of position";
        context.sink.help(at.unwrap_or(end..end), message, "too few compartments", help);
    }
    let raw_shell = context.need(raw, &raw.shell, "[shell]", "a table [shell] with diameter = \"size\" or a length");
    let shell = raw_shell.and_then(|raw| shell(context, raw));
    let raw_wall = context.need(raw, &raw.wall, "[wall]", "a table [wall] with thickness and position");
    let wall = raw_wall.and_then(|raw| wall(context, raw, names.len().saturating_sub(1), shell.as_ref()));
    let reach = reach(raw);
    share::closed_top(context, raw_compartments, reach);
    let no_internals = Named(Vec::new());
    let raw_internals = context.need(
        raw,
        &raw.internals,
        "[internals.NAME]",
        "tables [internals.NAME], one for each kind of internals",
    );
    let internals = internals(context, raw_internals.unwrap_or(&no_internals));
    let bands = band_names(raw.wall.as_ref());
    let around = Surroundings { compartments: &names, bands: &bands, internals: &internals, reach };
    let raw_sections = context.need(raw, &raw.section, "[[section]]", "tables [[section]], at least one in each place");
    let raw_sections = raw_sections.map(|many| many.items.as_slice()).unwrap_or_default();
    let (sketches, places_sound) = sections(context, raw_sections, &around);
    shares_sound &= places_sound && names.len() >= 2;
    let raw_devices = raw.device.as_ref().map(|many| many.items.as_slice()).unwrap_or_default();
    let devices = devices(context, raw_devices, &sketches, &names);
    let raw_streams = raw.stream.as_ref().map(|many| many.items.as_slice()).unwrap_or_default();
    let streams = streams(context, raw_streams, &sketches, &names);
    let ingredients = Ingredients {
        raw,
        table: texts.table,
        table_named: raw.loads.as_ref().is_some_and(|loads| loads.table.is_some()),
        sections: &sketches,
        compartments: &compartments,
        streams: &streams,
        reach,
    };
    let points = points(context, &ingredients);
    let compartments: Option<Vec<_>> = compartments.into_iter().collect();
    let places: Option<Vec<Place>> = sketches.iter().map(|sketch| sketch.place).collect();
    if let (true, Some(compartments), Some(places), Some([design, ..])) =
        (shares_sound, &compartments, &places, points.as_deref())
    {
        share::agree_with_loads(context, raw_compartments, compartments, places, design);
    }
    let head = head?;
    Some(Case {
        tag: head.tag,
        title: head.title,
        revision: head.revision,
        basis: head.basis,
        criteria,
        shell: shell?,
        wall: wall?,
        compartments: compartments?,
        internals: internals
            .into_iter()
            .map(|internals| internals.lowered.map(|kind| Internals { name: internals.name, kind }))
            .collect::<Option<Vec<_>>>()?,
        sections: sketches.into_iter().map(section).collect::<Option<Vec<_>>>()?,
        devices: devices.into_iter().collect::<Option<Vec<_>>>()?,
        points: points?,
        methods,
        reading_notes: std::mem::take(&mut context.notes),
    })
}

/// Reach as typed, for the parts that need it before the wall is known to be right.
fn reach(raw: &RawFile) -> Reach {
    match raw.wall.as_ref().and_then(|wall| wall.reach.as_ref()).map(|reach| reach.value.as_str()) {
        Some("top") => Reach::Top,
        Some("bottom") => Reach::Bottom,
        _ => Reach::Middle,
    }
}

fn section(sketch: Sketch) -> Option<Section> {
    Some(Section {
        name: sketch.name,
        place: sketch.place?,
        internals: sketch.internals?,
        band: sketch.band?,
        extent: sketch.extent?,
        system_factor: sketch.system_factor?,
        criteria: sketch.criteria,
    })
}
