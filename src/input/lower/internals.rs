//! `[internals.NAME]`: by kind, and which keys belong to which kind.

use super::context::Context;
use super::{declared, packing, tray};
use crate::engine::case::InternalsKind;
use crate::engine::correlation::packing::PackingKind;
use crate::input::raw::RawInternals;
use crate::input::reader::{At, FromTable, Named};

/// What `kind` says.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Kind {
    Sieve,
    Valve,
    Random,
    Structured,
    Declared,
}

impl Kind {
    /// The words of the file.
    pub(super) fn words(self) -> &'static str {
        KINDS.iter().find(|(_, kind)| *kind == self).map_or("", |(words, _)| words)
    }

    /// True for trays.
    pub(super) fn is_tray(self) -> bool {
        matches!(self, Self::Sieve | Self::Valve)
    }

    fn keys(self) -> Vec<&'static str> {
        let parts: &[&[&'static str]] = match self {
            Self::Sieve => &[&TRAY],
            Self::Valve => &[&TRAY, &VALVE],
            Self::Random => &[&PACKING, &["nominal_size"]],
            Self::Structured => &[&PACKING, &["corrugation_side", "corrugation_angle"]],
            Self::Declared => &[&["capacity", "resistance", "exponent"]],
        };
        parts.iter().flat_map(|part| part.iter().copied()).collect()
    }
}

const KINDS: [(&str, Kind); 5] = [
    ("sieve tray", Kind::Sieve),
    ("valve tray", Kind::Valve),
    ("random packing", Kind::Random),
    ("structured packing", Kind::Structured),
    ("declared", Kind::Declared),
];

const TRAY: [&str; 12] = [
    "tray_spacing",
    "weir_height",
    "hole_diameter",
    "hole_area",
    "deck_thickness",
    "downcomer_area",
    "downcomer_bottom_area",
    "downcomer_clearance",
    "passes",
    "flow",
    "edge_strip",
    "weir_open",
];
const VALVE: [&str; 5] = ["orifice", "valve", "valve_thickness", "valve_density", "valve_legs"];
const PACKING: [&str; 8] = [
    "packing",
    "specific_area",
    "void_fraction",
    "packing_factor",
    "packing_factor_older",
    "material",
    "stichlmair",
    "billet_schultes",
];

/// Internals that were named, whether they could be read or not.
pub(super) struct NamedInternals {
    pub(super) name: String,
    pub(super) kind: Option<Kind>,
    pub(super) lowered: Option<InternalsKind>,
}

/// All internals, in the order of the file.
pub(super) fn internals(context: &mut Context<'_>, raw: &Named<RawInternals>) -> Vec<NamedInternals> {
    raw.0
        .iter()
        .map(|(name, raw)| {
            let kind = one_kind(context, name, raw);
            let lowered = kind.and_then(|kind| {
                foreign_keys(context, name, raw, kind);
                lower_kind(context, name, raw, kind)
            });
            NamedInternals { name: name.value.clone(), kind, lowered }
        })
        .collect()
}

fn one_kind(context: &mut Context<'_>, name: &At<String>, raw: &RawInternals) -> Option<Kind> {
    context.name(name, "the name of internals")?;
    let words: Vec<&str> = KINDS.iter().map(|(words, _)| *words).collect();
    let example = format!("kind = \"...\", one of: {}", words.join(", "));
    let typed = context.need(raw, &raw.kind, "kind", &example)?;
    context.choice(typed, "kind of internals", &KINDS)
}

fn lower_kind(context: &mut Context<'_>, name: &At<String>, raw: &RawInternals, kind: Kind) -> Option<InternalsKind> {
    match kind {
        Kind::Sieve | Kind::Valve => tray::tray(context, raw, kind == Kind::Valve).map(InternalsKind::Tray),
        Kind::Random => packing::packing(context, name, raw, PackingKind::Random).map(InternalsKind::Packing),
        Kind::Structured => packing::packing(context, name, raw, PackingKind::Structured).map(InternalsKind::Packing),
        Kind::Declared => declared::declared(context, raw).map(InternalsKind::Declared),
    }
}

/// Says which typed keys do not belong to the kind.
fn foreign_keys(context: &mut Context<'_>, name: &At<String>, raw: &RawInternals, kind: Kind) {
    let own = kind.keys();
    for (key, span) in raw.typed() {
        let foaming = key == "foaming" && kind.is_tray();
        if key == "kind" || foaming || own.contains(&key.as_str()) {
            continue;
        }
        let owners: Vec<&str> = KINDS
            .iter()
            .filter(|(_, other)| other.keys().contains(&key.as_str()) || (key == "foaming" && other.is_tray()))
            .map(|(words, _)| *words)
            .collect();
        let message = format!("{key} does not belong to a {}", kind.words().replace("declared", "declared kind"));
        let help = format!(
            "{key} belongs to: {}; take it out of [internals.{}], or change its kind",
            owners.join(", "),
            name.value
        );
        context.sink.help(span.clone(), message, format!("not for \"{}\"", kind.words()), help);
    }
}
