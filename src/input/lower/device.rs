//! Devices and streams: what refers to a section's end.

use super::context::{Allowed, Context, FRACTION};
use super::section::{Sketch, place, place_words};
use crate::engine::case::{Device, DeviceKind, DeviceLoss, End, Place};
use crate::engine::units::{Length, Si};
use crate::input::quantity::Sign::{NotNegative, Positive};
use crate::input::raw::{RawDevice, RawStream};
use crate::input::reader::{At, FromTable, Span};

const HEADS: Allowed = Allowed { test: |x| (0.0..=1e4).contains(&x), words: "0 or above (and at most 10 000)" };

/// Devices; None for one that could not be read.
pub(super) fn devices(
    context: &mut Context<'_>,
    raw: &[RawDevice],
    sections: &[Sketch],
    compartments: &[String],
) -> Vec<Option<Device>> {
    let mut names: Vec<(String, Span)> = Vec::new();
    let mut devices = Vec::new();
    for device in raw {
        let typed = context.need(device, &device.name, "name", "e.g. name = \"collector 1\"");
        let name = typed.and_then(|typed| context.name(typed, "the name of a device").map(str::to_owned));
        if let (Some(typed), Some(name)) = (typed, &name) {
            names.push((name.clone(), typed.span.clone()));
        }
        devices.push(one_device(context, device, name, sections, compartments));
    }
    context.unique(&names, "devices");
    devices
}

fn one_device(
    context: &mut Context<'_>,
    raw: &RawDevice,
    name: Option<String>,
    sections: &[Sketch],
    compartments: &[String],
) -> Option<Device> {
    let kinds = [
        ("support", DeviceKind::Support),
        ("collector", DeviceKind::Collector),
        ("distributor", DeviceKind::Distributor),
        ("feed inlet", DeviceKind::FeedInlet),
        ("restriction", DeviceKind::Restriction),
    ];
    let typed =
        context.need(raw, &raw.kind, "kind", "kind = \"collector\" (or support, distributor, feed inlet, restriction)");
    let kind = typed.and_then(|typed| context.choice(typed, "kind of device", &kinds));
    let end = match (&raw.below, &raw.above) {
        (Some(below), None) => reference(context, below, sections).map(|section| (section, End::Below)),
        (None, Some(above)) => reference(context, above, sections).map(|section| (section, End::Above)),
        (Some(_), Some(above)) => {
            let message = "a device stands below one section or above one, not both";
            let help = "below = \"...\" takes that section's last row, above = \"...\" its first row; keep one";
            context.sink.help(above.key.clone(), message, "stated twice", help);
            None
        }
        (None, None) => {
            if !raw.typed().iter().any(|(key, _)| key == "below" || key == "above") {
                let message = "this device does not say which section it belongs to";
                let help = "add below = \"...\" (what rises into that section passes it) or above = \"...\"";
                let span = super::context::header(context.text, raw.span.clone());
                context.sink.help(span, message, "section missing", help);
            }
            None
        }
    };
    let of_section = end.and_then(|(index, _)| sections.get(index)).and_then(|section| section.place);
    let stated = raw.place.as_ref().map(|typed| (typed, place(context, typed, compartments)));
    same_place(context, stated.as_ref(), of_section, compartments);
    let loss = loss(context, raw);
    let height = match &raw.height {
        Some(typed) => context.quantity(Some(typed), NotNegative),
        None => Some(Length::from_si(0.0)),
    };
    let (section, end) = end?;
    Some(Device { name: name?, place: of_section?, kind: kind?, section, end, loss: loss?, height: height? })
}

fn same_place(
    context: &mut Context<'_>,
    stated: Option<&(&At<String>, Option<Place>)>,
    of_section: Option<Place>,
    compartments: &[String],
) {
    if let (Some((typed, Some(stated))), Some(of_section)) = (stated, of_section)
        && *stated != of_section
    {
        let words = place_words(of_section, compartments);
        let message = format!("place says \"{}\", but its section stands in \"{words}\"", typed.value);
        context.sink.help(typed.span.clone(), message, "another place", format!("write place = \"{words}\""));
    }
}

fn reference(context: &mut Context<'_>, typed: &At<String>, sections: &[Sketch]) -> Option<usize> {
    let found = sections.iter().position(|section| section.name == typed.value);
    if found.is_none() {
        let known: Vec<&str> =
            sections.iter().map(|section| section.name.as_str()).filter(|name| !name.is_empty()).collect();
        context.unknown_name(typed, &format!("there is no section \"{}\"", typed.value), &known, "sections");
    }
    found
}

fn loss(context: &mut Context<'_>, raw: &RawDevice) -> Option<DeviceLoss> {
    let free_area = context.number(raw.free_area.as_ref(), "free_area", FRACTION);
    let heads = context.number(raw.loss.as_ref(), "loss", HEADS);
    let drop = context.quantity(raw.pressure_drop.as_ref(), NotNegative);
    let help = "either free_area with loss (velocity heads), or pressure_drop (at the design load)";
    match (&raw.free_area, &raw.loss, &raw.pressure_drop) {
        (None, None, None) => {
            let untouched =
                !raw.typed().iter().any(|(key, _)| ["free_area", "loss", "pressure_drop"].contains(&key.as_str()));
            untouched.then_some(DeviceLoss::None)
        }
        (Some(_), Some(_), None) => Some(DeviceLoss::VelocityHeads { free_area: free_area?, heads: heads? }),
        (None, None, Some(_)) => drop.map(DeviceLoss::AtDesign),
        (_, _, Some(typed)) => {
            let message = "the loss of this device is stated twice";
            context.sink.help(typed.key.clone(), message, "stated twice", format!("say {help}"));
            None
        }
        (Some(typed), None, None) => {
            if !raw.typed().iter().any(|(key, _)| key == "loss") {
                context.sink.help(
                    typed.key.clone(),
                    "free_area stands here without a loss",
                    "half a loss",
                    format!("say {help}"),
                );
            }
            None
        }
        (None, Some(typed), None) => {
            if !raw.typed().iter().any(|(key, _)| key == "free_area") {
                context.sink.help(
                    typed.key.clone(),
                    "loss stands here without a free_area",
                    "half a loss",
                    format!("say {help}"),
                );
            }
            None
        }
    }
}

/// A stream that carries vapour in (positive) or out (negative) below a section, kg/s.
pub(super) struct VapourStream {
    pub(super) section: usize,
    pub(super) vapour_kg_s: f64,
    pub(super) name: String,
    pub(super) span: Span,
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum StreamKind {
    Feed,
    LiquidDraw,
    VapourDraw,
    Return,
}

/// Streams with vapour in them; all are checked.
pub(super) fn streams(
    context: &mut Context<'_>,
    raw: &[RawStream],
    sections: &[Sketch],
    compartments: &[String],
) -> Vec<VapourStream> {
    let mut names: Vec<(String, Span)> = Vec::new();
    let mut streams = Vec::new();
    for stream in raw {
        let typed = context.need(stream, &stream.name, "name", "e.g. name = \"feed\"");
        if let Some(name) = typed.and_then(|typed| context.name(typed, "the name of a stream").map(str::to_owned)) {
            names.push((name, typed.map(|typed| typed.span.clone()).unwrap_or_default()));
        }
        streams.extend(one_stream(context, stream, sections, compartments));
    }
    context.unique(&names, "streams");
    streams
}

fn one_stream(
    context: &mut Context<'_>,
    raw: &RawStream,
    sections: &[Sketch],
    compartments: &[String],
) -> Option<VapourStream> {
    let kinds = [
        ("feed", StreamKind::Feed),
        ("liquid draw", StreamKind::LiquidDraw),
        ("vapour draw", StreamKind::VapourDraw),
        ("return", StreamKind::Return),
    ];
    let typed = context.need(raw, &raw.kind, "kind", "kind = \"feed\" (or liquid draw, vapour draw, return)");
    let kind = typed.and_then(|typed| context.choice(typed, "kind of stream", &kinds));
    let section = raw.below.as_ref().and_then(|typed| reference(context, typed, sections));
    let of_section = section.and_then(|index| sections.get(index)).and_then(|section| section.place);
    let stated = raw.place.as_ref().map(|typed| (typed, place(context, typed, compartments)));
    same_place(context, stated.as_ref(), of_section, compartments);
    let flow: Option<f64> = context.si(raw.flow.as_ref(), Positive);
    let vapour: Option<f64> = context.si(raw.vapour_flow.as_ref(), NotNegative);
    if let (Some(flow), Some(vapour), Some(typed)) = (flow, vapour, &raw.vapour_flow)
        && vapour > flow * (1.0 + 1e-9)
    {
        let message = "vapour_flow is more than the whole flow of the stream";
        context.sink.help(typed.span.clone(), message, "more than flow", "it is the vapour part of flow");
    }
    let vapour_kg_s = match kind? {
        StreamKind::Feed | StreamKind::Return => vapour?,
        StreamKind::VapourDraw => -vapour.or(flow)?,
        StreamKind::LiquidDraw => {
            if let (Some(typed), Some(_)) = (&raw.vapour_flow, vapour.filter(|vapour| *vapour > 0.0)) {
                let message = "a liquid draw carries no vapour";
                context.sink.help(
                    typed.span.clone(),
                    message,
                    "vapour in a liquid draw",
                    "take it out, or say kind = \"vapour draw\"",
                );
            }
            return None;
        }
    };
    let name = raw.name.as_ref().map(|name| name.value.clone()).unwrap_or_default();
    (vapour_kg_s != 0.0).then_some(VapourStream { section: section?, vapour_kg_s, name, span: raw.span.clone() })
}
