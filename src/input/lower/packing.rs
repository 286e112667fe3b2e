//! Packings: an entry of the packing table, with what the case states in its place.

use super::context::{Allowed, Context, INNER_FRACTION, POSITIVE};
use crate::engine::correlation::packing::{BilletSchultesConstants, Material, Packing, PackingKind};
use crate::input::quantity::Sign::Positive;
use crate::input::raw::{RawBilletSchultes, RawInternals};
use crate::input::reader::{At, FromTable, List, nearest_help};

const CONSTANT: Allowed = Allowed { test: |x| x.abs() <= 1e6, words: "between -1e6 and 1e6" };
/// Keys that are constants of a packing.
const CONSTANTS: [&str; 9] = [
    "specific_area",
    "void_fraction",
    "packing_factor",
    "packing_factor_older",
    "corrugation_side",
    "corrugation_angle",
    "nominal_size",
    "stichlmair",
    "billet_schultes",
];

/// A random or structured packing.
pub(super) fn packing(
    context: &mut Context<'_>,
    name: &At<String>,
    raw: &RawInternals,
    kind: PackingKind,
) -> Option<Packing> {
    let constants_stated = raw.typed().iter().any(|(key, _)| CONSTANTS.contains(&key.as_str()));
    let start = match &raw.packing {
        Some(name) => entry(context, name, kind),
        None if constants_stated => Some(blank(kind)),
        None => {
            let help = format!(
                "add packing = \"...\" ({}) or constants such as packing_factor = \"66 1/m\"",
                nearest_help(&name.value, &context.catalogue.packing_names(), "packings")
            );
            let span = super::context::header(context.text, raw.span.clone());
            context.sink.help(
                span,
                "these internals name no packing and state no constants",
                "nothing known of it",
                help,
            );
            None
        }
    };
    let mut stated = Stated(Vec::new());
    let mut packing = start.clone().unwrap_or_else(|| blank(kind));
    let typed = context.quantity(raw.specific_area.as_ref(), Positive);
    stated.set("specific_area", typed, &mut packing.specific_area);
    let typed = context.number(raw.void_fraction.as_ref(), "void_fraction", INNER_FRACTION);
    stated.set("void_fraction", typed, &mut packing.void_fraction);
    let typed = context.quantity(raw.packing_factor.as_ref(), Positive);
    stated.set("packing_factor", typed, &mut packing.factor_later);
    let typed = context.quantity(raw.packing_factor_older.as_ref(), Positive);
    stated.set("packing_factor_older", typed, &mut packing.factor_older);
    let typed = context.quantity(raw.corrugation_side.as_ref(), Positive);
    stated.set("corrugation_side", typed, &mut packing.corrugation_side);
    let typed = angle(context, raw);
    stated.set("corrugation_angle", typed, &mut packing.corrugation_angle_rad);
    let typed = context.quantity(raw.nominal_size.as_ref(), Positive);
    stated.set("nominal_size", typed, &mut packing.nominal_size);
    let typed = stichlmair(context, raw.stichlmair.as_ref());
    stated.set("stichlmair", typed, &mut packing.stichlmair);
    if let Some(typed) = &raw.billet_schultes {
        billet_schultes(context, typed, &mut packing.billet_schultes, &mut stated);
    }
    if let Some(typed) = &raw.material {
        let words = [("metal", Material::Metal), ("plastic", Material::Plastic), ("ceramic", Material::Ceramic)];
        if let Some(material) = context.choice(typed, "material", &words) {
            packing.material = material;
            stated.0.push("material");
        }
    }
    packing.from_memory.retain(|key| !stated.0.contains(&key.as_str()));
    packing.stated_in_case = stated.0.iter().map(|key| (*key).to_owned()).collect();
    start.map(|_| packing)
}

/// Keys of the constants that the case states.
struct Stated(Vec<&'static str>);

impl Stated {
    fn set<T>(&mut self, key: &'static str, typed: Option<T>, target: &mut Option<T>) {
        if typed.is_some() {
            *target = typed;
            self.0.push(key);
        }
    }
}

fn entry(context: &mut Context<'_>, name: &At<String>, kind: PackingKind) -> Option<Packing> {
    let Some(packing) = context.catalogue.packing(&name.value).cloned() else {
        let known = context.catalogue.packing_names();
        let message = format!("there is no packing \"{}\" in the packing table", name.value);
        context.unknown_name(name, &message, &known, "packings");
        return None;
    };
    if packing.kind != kind {
        let (is, said) = match kind {
            PackingKind::Random => ("structured", "random"),
            PackingKind::Structured => ("random", "structured"),
        };
        let message = format!("\"{}\" is a {is} packing, but kind says {said} packing", name.value);
        context.sink.help(
            name.span.clone(),
            message,
            format!("{is} packing"),
            format!("write kind = \"{is} packing\""),
        );
        return None;
    }
    Some(packing)
}

/// A packing of which nothing is known yet.
fn blank(kind: PackingKind) -> Packing {
    Packing {
        entry: None,
        kind,
        material: Material::Metal,
        specific_area: None,
        void_fraction: None,
        factor_later: None,
        factor_older: None,
        factor_dry: None,
        corrugation_side: None,
        corrugation_angle_rad: None,
        nominal_size: None,
        stichlmair: None,
        billet_schultes: BilletSchultesConstants::default(),
        from_memory: Vec::new(),
        stated_in_case: Vec::new(),
    }
}

fn angle(context: &mut Context<'_>, raw: &RawInternals) -> Option<f64> {
    let typed = raw.corrugation_angle.as_ref();
    let angle_rad = context.quantity(typed, Positive)?;
    if angle_rad < std::f64::consts::FRAC_PI_2 {
        return Some(angle_rad);
    }
    let span = typed.map(|typed| typed.span.clone()).unwrap_or_default();
    let message = "corrugation_angle is measured from the horizontal and lies between 0 and 90 deg";
    context.sink.help(span, message, "not below 90 deg", "e.g. corrugation_angle = \"45 deg\"");
    None
}

fn stichlmair(context: &mut Context<'_>, typed: Option<&List<At<f64>>>) -> Option<[f64; 3]> {
    let typed = typed?;
    let values: Vec<f64> = typed
        .items
        .iter()
        .filter_map(|item| context.number(Some(item), "each entry of stichlmair", CONSTANT))
        .collect();
    if values.len() < typed.items.len() || typed.items.len() < typed.typed {
        return None;
    }
    match values.as_slice() {
        [c1, c2, c3] if *c3 > 0.0 => Some([*c1, *c2, *c3]),
        [_, _, _] => {
            let message =
                "the third constant of stichlmair must be above 0: it is the friction factor at high Reynolds numbers";
            context.sink.help(typed.span.clone(), message, "not above 0", "e.g. stichlmair = [5.0, 3.0, 0.45]");
            None
        }
        _ => {
            let message = format!("stichlmair has three constants C1, C2, C3, but {} are given", typed.typed);
            context.sink.help(typed.span.clone(), message, "not three", "e.g. stichlmair = [5.0, 3.0, 0.45]");
            None
        }
    }
}

fn billet_schultes(
    context: &mut Context<'_>,
    typed: &RawBilletSchultes,
    constants: &mut BilletSchultesConstants,
    stated: &mut Stated,
) {
    let value = context.number(typed.c_s.as_ref(), "C_S", POSITIVE);
    stated.set("C_S", value, &mut constants.c_s);
    let value = context.number(typed.c_fl.as_ref(), "C_Fl", POSITIVE);
    stated.set("C_Fl", value, &mut constants.c_fl);
    let value = context.number(typed.c_h.as_ref(), "C_h", POSITIVE);
    stated.set("C_h", value, &mut constants.c_h);
    let value = context.number(typed.c_p0.as_ref(), "C_p0", POSITIVE);
    stated.set("C_p0", value, &mut constants.c_p0);
}
