//! Shares: that they sum to one, and that the stated ones agree with the loads.

use super::context::{Context, header};
use crate::engine::case::{Compartment, Place, Point, Reach};
use crate::engine::units::Si;
use crate::input::raw::RawCompartment;
use crate::input::reader::At;

/// Stated shares and those of the loads agree within this.
pub(super) const AGREE_WITHIN: f64 = 0.002;

/// Sums of the stated shares; false if one of them cannot be.
pub(super) fn sums(context: &mut Context<'_>, raw: &[RawCompartment]) -> bool {
    if raw.len() < 2 {
        return false;
    }
    let vapour: Vec<Option<&At<f64>>> = raw.iter().map(|compartment| compartment.vapour_share.as_ref()).collect();
    let liquid: Vec<Option<&At<f64>>> = raw.iter().map(|compartment| compartment.liquid_share.as_ref()).collect();
    let vapour_sound = sum(context, "vapour_share", &vapour);
    let liquid_sound = sum(context, "liquid_share", &liquid);
    vapour_sound && liquid_sound
}

fn sum(context: &mut Context<'_>, name: &str, shares: &[Option<&At<f64>>]) -> bool {
    let stated: Vec<&At<f64>> = shares.iter().flatten().copied().collect();
    let Some(last) = stated.last() else {
        return true;
    };
    // A share out of its own range has been reported already.
    if stated.iter().any(|share| !(0.0..=1.0).contains(&share.value)) {
        return false;
    }
    let sum: f64 = stated.iter().map(|share| share.value).sum();
    let all = stated.len() == shares.len();
    if all && (sum - 1.0).abs() > AGREE_WITHIN {
        let message = format!("the {name}s of all compartments must sum to 1, but sum to {sum:.4}");
        let help = "correct them, or leave one out: it takes the rest";
        context.sink.help(last.span.clone(), message, "do not sum to 1", help);
        return false;
    }
    if !all && sum >= 1.0 {
        let message =
            format!("the {name}s that are stated sum to {sum:.4} already, which leaves nothing for the others");
        context.sink.help(last.span.clone(), message, "nothing left", "shares are fractions, e.g. 0.635");
        return false;
    }
    true
}

/// The stated vapour shares against the rows at the wall's lower edge, at the design point.
pub(super) fn agree_with_loads(
    context: &mut Context<'_>,
    raw: &[RawCompartment],
    compartments: &[Compartment],
    places: &[Place],
    design: &Point,
) {
    let at_edge: Vec<f64> = (0..compartments.len())
        .map(|index| {
            let last = places.iter().rposition(|place| *place == Place::Compartment(index));
            let row = last.and_then(|section| design.loads.get(section)).and_then(|rows| rows.last());
            row.map_or(0.0, |row| row.vapour_flow.si())
        })
        .collect();
    let total: f64 = at_edge.iter().sum();
    for ((raw, compartment), flow) in raw.iter().zip(compartments).zip(&at_edge) {
        let (Some(stated), Some(typed)) = (compartment.vapour_share, &raw.vapour_share) else {
            continue;
        };
        let share = flow / total;
        if (share - stated).abs() > AGREE_WITHIN {
            let message = format!(
                "vapour_share of \"{}\" is stated as {stated}, but the loads give {share:.4} (last rows of the compartments at the design point)",
                compartment.name
            );
            let help = format!("both must agree within {AGREE_WITHIN}: write {share:.4}, or correct the loads");
            context.sink.help(typed.span.clone(), message, "not the loads' share", help);
        }
    }
}

/// A wall that is closed at the top splits no liquid above it: liquid shares of a splitter have no place there.
pub(super) fn closed_top(context: &mut Context<'_>, raw: &[RawCompartment], reach: Reach) {
    if reach != Reach::Top {
        return;
    }
    for compartment in raw {
        if let Some(range) = &compartment.liquid_share_range {
            let message = "the wall reaches the top head, so no splitter divides liquid above it";
            context.sink.help(header(context.text, range.key.clone()), message, "no splitter", "take it out");
        }
    }
}
