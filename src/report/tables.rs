//! The head sentence, the remarks and the tables of a report.

use super::findings;
use super::model::Table;
use super::number::{Display, percent, significant};
use super::text::inert;
use crate::engine::case::Case;
use crate::engine::result::{Answer, SectionResult};
use crate::engine::units::{Length, Si};

fn table(title: &str, heads: &[&str], rows: Vec<Vec<String>>, words: usize) -> Table {
    Table { title: title.to_owned(), heads: heads.iter().map(|h| (*h).to_owned()).collect(), rows, words }
}

fn or_dash(text: Option<String>) -> String {
    text.unwrap_or_else(|| "-".to_owned())
}

/// The sentence that answers: verdict, diameter and what governs it, wall position, share required and actual.
pub fn head(case: &Case, answer: &Answer, display: Display) -> String {
    let shell = &answer.shell;
    let governed = &shell.governed_by;
    let diameter = if shell.above == shell.wall_zone && shell.below == shell.wall_zone {
        display.length(shell.wall_zone)
    } else {
        format!(
            "{} above, {} beside, {} below the wall",
            display.length(shell.above),
            display.length(shell.wall_zone),
            display.length(shell.below)
        )
    };
    let stands = if shell.sized.contains(&true) { "shell" } else { "given shell" };
    let verdict = answer.verdict.name();
    let walls: Vec<String> = answer.walls.iter().map(|w| display.small_length(w.position, true)).collect();
    let mut head = format!(
        "{}, {verdict}: {stands} {diameter} by {} of \"{}\", wall at {}",
        inert(&case.tag),
        governed.criterion,
        inert(&governed.section),
        walls.join(" and ")
    );
    if let Some(first) = answer.compartments.first() {
        head += &format!(", vapour share \"{}\" {:.3} required", inert(&first.name), first.vapour_share_required);
        head += &match (first.vapour_share, &answer.balance.absent_because) {
            (Some(actual), _) => format!(", {actual:.3} actual"),
            (None, Some(_)) => ", none by balance".to_owned(),
            (None, None) => ", no stable balance".to_owned(),
        };
    }
    head
}

/// What the tables cannot say.
pub fn remarks(answer: &Answer, display: Display) -> Vec<String> {
    let governed = &answer.shell.governed_by;
    let mut out = vec![format!(
        "Shell: {} of \"{}\" at \"{}\" needs {}; slack {}.{}",
        governed.criterion,
        inert(&governed.section),
        inert(&governed.point),
        display.length(governed.diameter),
        display.small_length(governed.slack, false),
        governed.runner_up_diameter.map_or_else(String::new, |d| format!(
            " Next: {}, about {}.",
            inert(&governed.runner_up),
            display.length(d)
        ))
    )];
    let balance = &answer.balance;
    out.push(match (&balance.absent_because, balance.pressure_drop) {
        (Some(because), _) => format!("No balance: {}.", inert(because)),
        (None, Some(drop)) => format!(
            "Balance: both edges of the wall agree at {}; at the required shares the sides differ by {}.{}",
            display.pressure(drop),
            or_dash(balance.imbalance_at_required.map(|p| display.pressure(p))),
            answer.column_pressure_drop.map_or_else(String::new, |p| format!(" Column: {}.", display.pressure(p)))
        ),
        (None, None) => format!(
            "No stable balance: the pressure drops of the sides do not come together in a state that lasts{}.",
            balance.least_imbalance.map_or_else(String::new, |p| format!("; least imbalance {}", display.pressure(p)))
        ),
    });
    out
}

/// Shell diameters.
pub fn shell(answer: &Answer, display: Display) -> Table {
    let shell = &answer.shell;
    let [above, zone, below] = shell.required;
    let [sized_above, sized_zone, sized_below] = shell.sized;
    let row = |part: &str, diameter: Length, required: Length, sized: bool| {
        let origin = if sized { "sized" } else { "given" };
        vec![part.to_owned(), origin.to_owned(), display.length(diameter), display.length(required)]
    };
    table(
        "Shell",
        &["part", "origin", "diameter", "least by flood"],
        vec![
            row("above the wall", shell.above, above, sized_above),
            row("beside the wall", shell.wall_zone, zone, sized_zone),
            row("below the wall", shell.below, below, sized_below),
        ],
        2,
    )
}

/// Walls with their three positions.
pub fn walls(answer: &Answer, display: Display) -> Table {
    let rows = answer
        .walls
        .iter()
        .enumerate()
        .map(|(i, wall)| {
            let name =
                if wall.band.is_empty() { format!("{}", i + 1) } else { format!("{} {}", i + 1, inert(&wall.band)) };
            let position = |length: Option<Length>| or_dash(length.map(|l| display.small_length(l, true)));
            vec![
                name,
                wall.placed_by.clone(),
                display.small_length(wall.position, true),
                position(wall.equal_flood),
                position(wall.equal_pressure_drop),
                position(wall.vapour_load),
                display.length(wall.chord),
                or_dash(wall.share_per_m.map(|s| format!("{:+.4}", s * display.share_step().0.si()))),
            ]
        })
        .collect();
    table(
        "Wall",
        &[
            "wall",
            "placed by",
            "stands at",
            "equal flood",
            "equal drop",
            "vapour load",
            "chord",
            display.share_step().1,
        ],
        rows,
        2,
    )
}

/// Compartments.
pub fn compartments(answer: &Answer, display: Display) -> Table {
    let rows = answer
        .compartments
        .iter()
        .map(|c| {
            vec![
                inert(&c.name),
                display.area(c.area),
                significant(c.area_share, 4),
                display.small_length(c.clear_depth, false),
                format!("{:.4}", c.vapour_share_required),
                or_dash(c.vapour_share.map(|s| format!("{s:.4}"))),
                or_dash(c.pressure_drop_at_required.map(|p| display.pressure(p))),
                display.pressure(c.static_head),
                or_dash(c.response_exponent.map(|e| format!("{e:.2}"))),
            ]
        })
        .collect();
    table(
        "Compartments (part of the free area, clear depth, exponent of the whole drop)",
        &["compartment", "area", "part", "depth", "share req.", "share act.", "drop at req.", "static", "exp."],
        rows,
        1,
    )
}

/// Sections.
pub fn sections(answer: &Answer, display: Display) -> Table {
    let rows = answer
        .sections
        .iter()
        .map(|s| {
            vec![
                inert(&s.name),
                inert(&s.internals),
                display.area(s.area),
                percent(s.flood),
                or_dash(s.flood_actual.map(percent)),
                inert(&s.governing_stage),
                display.f_factor(s.f_factor.root_pascal()),
                significant(s.flow_parameter, 3),
                or_dash(s.friction.map(|p| display.pressure(p))),
                if s.in_range { "yes".to_owned() } else { "NO".to_owned() },
            ]
        })
        .collect();
    table(
        &format!("Sections (F in {}, X the flow parameter)", display.f_factor_unit()),
        &["section", "internals", "area", "flood", "actual", "stage", "F", "X", "friction", "in range"],
        rows,
        2,
    )
}

/// Tray figures, if there are trays.
pub fn trays(answer: &Answer, display: Display) -> Option<Table> {
    let rows: Vec<Vec<String>> = answer
        .sections
        .iter()
        .filter_map(|s| s.tray.as_ref().map(|t| (s, t)))
        .map(|(s, t)| {
            vec![
                inert(&s.name),
                display.pressure(t.pressure_drop_per_tray),
                display.small_length(t.liquid_head, false),
                display.small_length(t.dry_head, false),
                significant(t.downcomer_froth, 3),
                significant(t.entrainment, 2),
                significant(t.weep, 2),
                display.weir_load(t.weir_load),
                display.length(t.weir_length),
            ]
        })
        .collect();
    (!rows.is_empty()).then(|| {
        table(
            "Trays (worst figures)",
            &["section", "drop/tray", "liquid", "dry", "froth", "entrained", "weep", "weir load", "weir"],
            rows,
            1,
        )
    })
}

/// All balances, if there is not exactly one.
pub fn solutions(answer: &Answer, display: Display) -> Option<Table> {
    let solutions = &answer.balance.solutions;
    if solutions.len() < 2 {
        return None;
    }
    let rows = solutions
        .iter()
        .map(|s| {
            let shares: Vec<String> = s.shares.iter().map(|x| format!("{x:.4}")).collect();
            let stable = if s.stable { "stable" } else { "not stable" };
            vec![stable.to_owned(), shares.join(" / "), display.pressure(s.pressure_drop)]
        })
        .collect();
    Some(table("Every division that balances", &["state", "shares", "pressure drop"], rows, 1))
}

/// Rows of one section.
pub fn stages(section: &SectionResult, display: Display) -> Table {
    let rows = section
        .stages
        .iter()
        .map(|r| {
            vec![
                inert(&r.stage),
                display.mass_rate(r.vapour_flow),
                display.mass_rate(r.liquid_flow),
                percent(r.flood),
                display.f_factor(r.f_factor.root_pascal()),
                display.velocity(r.capacity_factor),
                significant(r.flow_parameter, 3),
                display.liquid_load(r.liquid_load),
                or_dash(r.friction_gradient.map(|g| display.gradient(g))),
            ]
        })
        .collect();
    table(
        &format!("Stages of \"{}\" (F in {}, X the flow parameter)", inert(&section.name), display.f_factor_unit()),
        &["stage", "vapour", "liquid", "flood", "F", "C", "X", "liquid load", "friction"],
        rows,
        1,
    )
}

/// Each limit used, and where it comes from.
pub fn limits(answer: &Answer, display: Display) -> Table {
    let rows = answer
        .limits
        .iter()
        .map(|l| {
            vec![l.criterion.name().to_owned(), inert(&l.origin), inert(&l.scope), display.amount(l.criterion, l.limit)]
        })
        .collect();
    table("Limits used, and where they come from", &["criterion", "origin", "for", "limit"], rows, 3)
}

/// Remedies with what they give at each point.
pub fn remedies(answer: &Answer) -> Vec<String> {
    answer
        .remedies
        .iter()
        .map(|remedy| {
            let points: Vec<String> = remedy
                .points
                .iter()
                .map(|p| match &p.shares {
                    Some(shares) => {
                        let shares: Vec<String> = shares.iter().map(|s| format!("{s:.4}")).collect();
                        let floods: Vec<String> = p.floods.iter().map(|f| percent(*f)).collect();
                        format!(
                            "at \"{}\" shares {}, floods {}",
                            inert(&p.point),
                            shares.join(" / "),
                            floods.join(" / ")
                        )
                    }
                    None => format!("at \"{}\" no balance", inert(&p.point)),
                })
                .collect();
            format!("{}: {}.", inert(&remedy.what), points.join("; "))
        })
        .collect()
}

/// Findings as rows for a spreadsheet: SI.
pub fn findings_rows(answer: &Answer) -> Table {
    let rows = answer
        .findings
        .iter()
        .map(|f| {
            vec![
                f.status.name().to_owned(),
                f.criterion.name().to_owned(),
                f.subject.clone(),
                f.point.clone(),
                f.shares.name().to_owned(),
                f.value.map_or_else(String::new, |v| findings::si(v).to_string()),
                f.limit.map_or_else(String::new, |v| findings::si(v).to_string()),
                f.limit.or(f.value).map_or("", findings::unit).to_owned(),
                f.because.clone(),
            ]
        })
        .collect();
    table(
        "findings",
        &["status", "criterion", "where", "point", "shares", "value", "limit", "unit", "because"],
        rows,
        5,
    )
}
