//! Correlations: what they are, where they come from, and whether their published check points still come out.

use super::answer::catalogue;
use crate::cli::exit::{Exit, Stop};
use crate::cli::output::print;
use crate::engine::correlation::record::{CheckOutcome, Record};
use crate::report::caution::CAUTION;
use crate::report::json;
use crate::report::model::Table;
use crate::report::number::significant;
use crate::report::terminal::grid;
use crate::report::text::{indented, inert, paragraph};
use serde_json::{Value, json};
use std::io::Write;
use std::path::Path;

/// Lists all correlations, or shows one; status 1 if a check point fails.
pub fn methods(name: Option<&str>, as_json: bool, dir: Option<&Path>, stdout: &mut dyn Write) -> Result<Exit, Stop> {
    let catalogue = catalogue(dir)?;
    let shown: Vec<(&Record, Vec<CheckOutcome>)> = catalogue
        .records()
        .iter()
        .filter(|record| name.is_none_or(|name| record.id == name || record.serves.iter().any(|s| s.method == name)))
        .map(|record| (record, record.run_checks()))
        .collect();
    if let (Some(name), true) = (name, shown.is_empty()) {
        let methods = catalogue.records().iter().flat_map(|r| r.serves.iter().map(|s| s.method.as_str()));
        let hint = nearest(name, catalogue.records().iter().map(|r| r.id.as_str()).chain(methods))
            .map_or_else(String::new, |known| format!("; the nearest is \"{known}\""));
        return Err(Stop::Usage(format!("there is no correlation \"{name}\"{hint}. \"chordwall methods\" lists all")));
    }
    let failed = shown.iter().flat_map(|(_, checks)| checks).filter(|check| !check.passed).count();
    let text = if as_json {
        let list: Vec<Value> = shown.iter().map(|(record, checks)| document(record, checks)).collect();
        let document = json!({ "methods": list, "check_points_failed": failed, "caution": CAUTION });
        json::bytes(&document).map_err(|e| Stop::Usage(e.to_string()))?
    } else if name.is_some() {
        shown.iter().map(|(record, checks)| one(record, checks)).collect::<Vec<_>>().join("\n").into_bytes()
    } else {
        list(&shown, failed).into_bytes()
    };
    print(stdout, &text)?;
    Ok(if failed == 0 { Exit::Met } else { Exit::NotMet })
}

/// Least likeness (Jaro-Winkler, 0 to 1) of a name that is worth suggesting; chosen, no source.
const LIKE: f64 = 0.6;

/// The known name that is most like what was typed, if one is like it at all.
fn nearest<'a>(typed: &str, known: impl Iterator<Item = &'a str>) -> Option<&'a str> {
    let typed = typed.to_lowercase();
    known
        .map(|name| (strsim::jaro_winkler(name, &typed), name))
        .filter(|(likeness, _)| *likeness >= LIKE)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, name)| name)
}

fn list(shown: &[(&Record, Vec<CheckOutcome>)], failed: usize) -> String {
    let total: usize = shown.iter().map(|(_, checks)| checks.len()).sum();
    let rows = shown
        .iter()
        .map(|(record, checks)| {
            let passed = checks.iter().filter(|c| c.passed).count();
            vec![
                // The id has its line to itself, so that it can be copied.
                format!("{}\n{}", inert(&record.id), inert(&record.title)),
                format!("{}\n{}", inert(&record.source.key), record.source.standing.name()),
                ranges(record),
                format!("{passed}/{}", checks.len()),
            ]
        })
        .collect();
    let heads = ["correlation and its task", "source", "range", "checks"].map(str::to_owned).to_vec();
    let table = Table { title: String::new(), heads, rows, words: 3 };
    format!(
        "{} correlations, {} of {total} check points hold\n{}\n{}\n{}\n",
        shown.len(),
        total - failed,
        grid(&table),
        paragraph(
            "chordwall methods NAME shows equation, coefficients, what happens outside a range, and every check point.",
            "  "
        ),
        paragraph(CAUTION, "  ")
    )
}

/// The ranges that a record states, one argument after the other.
fn ranges(record: &Record) -> String {
    let stated: Vec<String> = record
        .inputs
        .iter()
        .filter(|input| input.min.is_some() || input.max.is_some())
        .map(|input| {
            let unit = if input.unit.symbol == "1" { String::new() } else { format!(" {}", inert(&input.unit.symbol)) };
            format!("{} {}{unit}", inert(&input.name).replace('_', " "), range(input.min, input.max))
        })
        .collect();
    if stated.is_empty() { "none stated".to_owned() } else { stated.join("; ") }
}

fn range(min: Option<f64>, max: Option<f64>) -> String {
    match (min, max) {
        // As the record states them: rounding or padding would say something else than the source.
        (Some(min), Some(max)) => format!("{min} to {max}"),
        (Some(min), None) => format!("from {min}"),
        (None, Some(max)) => format!("up to {max}"),
        (None, None) => "no range stated".to_owned(),
    }
}

fn one(record: &Record, checks: &[CheckOutcome]) -> String {
    let mut out = format!("{}\n", paragraph(&format!("{}: {}", inert(&record.id), inert(&record.title)), "  "));
    let mut part = |title: &str, text: &str| out += &format!("\n{title}\n{}\n", indented(&inert(text), "  "));
    part("Equation", &record.equation);
    if !record.notes.trim().is_empty() {
        part("Notes", record.notes.trim());
    }
    let source = &record.source;
    part(
        "Source",
        &format!("{}, {}; read in {}; {}", source.key, source.location, source.read_in, source.standing.name()),
    );
    for serves in &record.serves {
        part("Selected by", &format!("{} = \"{}\"", serves.task.name(), serves.method));
    }
    out += "\nArguments\n";
    for input in &record.inputs {
        let note = if input.range_note.is_empty() { String::new() } else { format!(" ({})", inert(&input.range_note)) };
        let text = format!("{} [{}]: {}{note}", input.name, input.unit.symbol, range(input.min, input.max));
        out += &format!("{}\n", indented(&text, "  "));
    }
    out += "\nResults\n";
    for output in &record.outputs {
        out += &format!("  {} [{}]\n", output.name, output.unit.symbol);
    }
    out += "\nCoefficients\n";
    for coefficient in &record.coefficients {
        let values: Vec<String> = coefficient.values.iter().map(f64::to_string).collect();
        let standing = if coefficient.from_memory { "  (from memory)" } else { "" };
        out += &format!("{}\n", indented(&format!("{} = {}{standing}", coefficient.name, values.join(", ")), "  "));
    }
    out += "\nCheck points\n";
    for check in checks {
        let at: Vec<String> = check.check.at.iter().map(|(name, value)| format!("{name} = {value}")).collect();
        let got = check.got.as_ref().map_or_else(|error| error.to_string(), |value| significant(*value, 6));
        let text = format!(
            "{}: {} at {}: {got}, expected {} within {}; {}: {}",
            if check.passed { "holds" } else { "FAILS" },
            check.check.output,
            at.join(", "),
            significant(check.check.expect, 6),
            significant(check.check.tolerance, 2),
            check.check.origin.name(),
            inert(&check.check.source)
        );
        out += &format!("{}\n", indented(&text, "  "));
    }
    out += &format!("\n{}\n", paragraph(CAUTION, "  "));
    out
}

fn document(record: &Record, checks: &[CheckOutcome]) -> Value {
    json!({
        "id": record.id,
        "title": record.title,
        "equation": record.equation,
        "notes": record.notes.trim(),
        "serves": record.serves.iter().map(|s| json!({ "task": s.task.name(), "method": s.method })).collect::<Vec<_>>(),
        "source": {
            "key": record.source.key,
            "read_in": record.source.read_in,
            "location": record.source.location,
            "standing": record.source.standing.name(),
        },
        "inputs": record.inputs.iter().map(|i| json!({
            "name": i.name, "unit": i.unit.symbol, "min": i.min, "max": i.max, "note": i.range_note,
        })).collect::<Vec<_>>(),
        "outputs": record.outputs.iter().map(|o| json!({ "name": o.name, "unit": o.unit.symbol })).collect::<Vec<_>>(),
        "coefficients": record.coefficients.iter().map(|c| json!({
            "name": c.name, "values": c.values, "from_memory": c.from_memory,
        })).collect::<Vec<_>>(),
        "checks": checks.iter().map(|c| json!({
            "output": c.check.output,
            "at": c.check.at.iter().map(|(name, value)| json!({ "name": name, "value": value })).collect::<Vec<_>>(),
            "expect": c.check.expect,
            "tolerance": c.check.tolerance,
            "got": c.got.as_ref().ok(),
            "passed": c.passed,
            "origin": c.check.origin.name(),
            "source": c.check.source,
        })).collect::<Vec<_>>(),
    })
}
