//! A correlation file to a record.

use super::CorrelationFileError;
use super::published_unit::{symbols, unit};
use super::reader::{Keys, Problems, Value, items, nearest, number, numbers, table, text};
use crate::engine::correlation::form::{Form, Shape};
use crate::engine::correlation::record::{
    Check, Coefficient, Dimension, Input, Origin, Output, Record, Serves, Source, Standing, Task, Unit,
};
use toml::de::DeValue;

/// Reads a record, with its check points or without.
pub(super) fn read(file: &str, stem: &str, text: &str, with_checks: bool) -> Result<Record, CorrelationFileError> {
    let (head, checks) = split_checks(text);
    let mut problems = Problems::new(file, head, 1);
    let mut record = problems.parse().and_then(|parsed| {
        let span = 0..head.find('\n').unwrap_or(head.len());
        head_of(Keys::new(parsed, span, "the file"), stem, &mut problems)
    });
    if with_checks {
        let mut later = Problems::new(file, checks, 1 + head.matches('\n').count());
        if let Some(parsed) = later.parse() {
            let mut keys = Keys::new(parsed, 0..checks.find('\n').unwrap_or(checks.len()), "the end of the file");
            let tables = keys.tables("check", "a check", &mut later);
            keys.close(&mut later);
            if let Some(record) = &mut record {
                record.checks = tables.into_iter().filter_map(|t| check(t, record, &mut later)).collect();
            }
        }
        problems.append(later);
    }
    problems.finish(record)
}

/// The part before the first `[[check]]`, and the rest.
fn split_checks(text: &str) -> (&str, &str) {
    text.find("\n[[check]]").and_then(|at| text.split_at_checked(at + 1)).unwrap_or((text, ""))
}

fn head_of(mut keys: Keys<'_>, stem: &str, problems: &mut Problems<'_>) -> Option<Record> {
    if let Some(value) = keys.need("id", problems)
        && let Some(id) = text(&value, problems)
        && id != stem
    {
        problems.add(&value.span(), "the id is not the file's name", format!("name it \"{stem}\", or rename the file"));
    }
    let title = keys.text("title", problems);
    let form = keys.need("form", problems).and_then(|value| {
        let name = text(&value, problems)?;
        let form = Form::by_name(&name);
        if form.is_none() {
            let known: Vec<&str> = Form::ALL.iter().map(|form| form.shape().name).collect();
            problems.add(&value.span(), format!("there is no form \"{name}\""), nearest(&name, &known));
        }
        form
    });
    let serves = keys.take("serves").map(|value| serves(value, problems)).unwrap_or_default();
    let source = match keys.need("source", problems).and_then(|value| table(value, "the source", problems)) {
        Some(keys) => source(keys, problems),
        None => None,
    };
    let shape = form.map(Form::shape);
    let inputs = inputs(keys.tables("input", "an input", problems), shape, &keys.span, problems);
    let outputs = outputs(keys.tables("output", "an output", problems), shape, &keys.span, problems);
    let from_memory = keys.take("from_memory").map(|value| items(value, problems)).unwrap_or_default();
    let span = keys.span.clone();
    let coefficients = match keys.need("coefficients", problems).and_then(|v| table(v, "coefficients", problems)) {
        Some(table) => coefficients(table, from_memory, shape, &span, problems),
        None => Vec::new(),
    };
    let equation = keys.text("equation", problems);
    let notes = keys.text_or_empty("notes", problems);
    keys.close(problems);
    let (form, source) = (form?, source?);
    let id = stem.to_owned();
    Some(Record { id, title, form, serves, source, inputs, outputs, coefficients, equation, notes, checks: Vec::new() })
}

fn serves(value: Value<'_>, problems: &mut Problems<'_>) -> Vec<Serves> {
    let mut found = Vec::new();
    for item in items(value, problems) {
        let Some(mut keys) = table(item, "an entry of serves", problems) else { continue };
        let task = keys.need("task", problems).and_then(|value| {
            let name = text(&value, problems)?;
            let task = Task::ALL.into_iter().find(|task| task.name() == name);
            if task.is_none() {
                let known = Task::ALL.map(Task::name);
                problems.add(&value.span(), format!("there is no task \"{name}\""), nearest(&name, &known));
            }
            task
        });
        let method = keys.text("method", problems);
        keys.close(problems);
        found.extend(task.map(|task| Serves { task, method }));
    }
    found
}

fn source(mut keys: Keys<'_>, problems: &mut Problems<'_>) -> Option<Source> {
    let key = keys.text("key", problems);
    let read_in = keys.text("read_in", problems);
    let location = keys.text("location", problems);
    let standing = keys.need("standing", problems).and_then(|value| standing(&value, problems));
    keys.close(problems);
    standing.map(|standing| Source { key, read_in, location, standing })
}

/// A standing by its words.
pub(super) fn standing(value: &Value<'_>, problems: &mut Problems<'_>) -> Option<Standing> {
    let all = [Standing::Read, Standing::ReadSecondHand, Standing::FromMemory, Standing::Doubtful];
    let name = text(value, problems)?;
    let found = all.into_iter().find(|standing| standing.name() == name);
    if found.is_none() {
        problems.add(
            &value.span(),
            format!("there is no standing \"{name}\""),
            nearest(&name, &all.map(Standing::name)),
        );
    }
    found
}

/// A unit of a dimension.
pub(super) fn unit_of(value: &Value<'_>, dimension: Option<Dimension>, problems: &mut Problems<'_>) -> Option<Unit> {
    let symbol = text(value, problems)?;
    let found = unit(&symbol).filter(|unit| dimension.is_none_or(|dimension| unit.dimension == dimension));
    if found.is_none() {
        let known = dimension.map(symbols).unwrap_or_default();
        problems.add(&value.span(), format!("\"{symbol}\" is no unit for this"), nearest(&symbol, &known));
    }
    found
}

type Names = &'static [(&'static str, Dimension)];

/// Name and unit of an input or output, checked against the form's.
fn named(keys: &mut Keys<'_>, names: Option<Names>, problems: &mut Problems<'_>) -> Option<(String, Unit)> {
    let value = keys.need("name", problems);
    let unit_value = keys.need("unit", problems);
    let (value, unit_value) = (value?, unit_value?);
    let name = text(&value, problems)?;
    let dimension = match names {
        None => None,
        Some(names) => match names.iter().find(|(known, _)| *known == name) {
            Some((_, dimension)) => Some(*dimension),
            None => {
                let known: Vec<&str> = names.iter().map(|(name, _)| *name).collect();
                problems.add(&value.span(), format!("the form has no \"{name}\" here"), nearest(&name, &known));
                return None;
            }
        },
    };
    unit_of(&unit_value, dimension, problems).map(|unit| (name, unit))
}

fn complete<'n>(
    names: Option<Names>,
    mut has: impl FnMut(&str) -> bool + 'n,
    what: &str,
    span: &std::ops::Range<usize>,
    problems: &mut Problems<'_>,
) {
    for (name, _) in names.unwrap_or_default() {
        if !has(name) {
            problems.add(
                span,
                format!("{what} \"{name}\" of the form is missing"),
                format!("add [[{what}]] name = \"{name}\""),
            );
        }
    }
}

fn inputs(
    tables: Vec<Keys<'_>>,
    shape: Option<Shape>,
    span: &std::ops::Range<usize>,
    problems: &mut Problems<'_>,
) -> Vec<Input> {
    let names = shape.map(|shape| shape.inputs);
    let mut found: Vec<Input> = Vec::new();
    for mut keys in tables {
        let named = named(&mut keys, names, problems);
        let min = keys.number_if_any("min", problems);
        let max = keys.number_if_any("max", problems);
        let range_note = keys.text_or_empty("range_note", problems);
        if let (Some(min), Some(max)) = (min, max)
            && min >= max
        {
            problems.add(&keys.span, format!("its range runs from {min} to {max}"), "min must be less than max");
        }
        if min.is_none() && max.is_none() && range_note.is_empty() {
            problems.add(&keys.span, "no range and no word on it", "add min, max, or range_note = \"none stated\"");
        }
        keys.close(problems);
        found.extend(named.map(|(name, unit)| Input { name, unit, min, max, range_note }));
    }
    complete(names, |name| found.iter().any(|input| input.name == name), "input", span, problems);
    found
}

fn outputs(
    tables: Vec<Keys<'_>>,
    shape: Option<Shape>,
    span: &std::ops::Range<usize>,
    problems: &mut Problems<'_>,
) -> Vec<Output> {
    let names = shape.map(|shape| shape.outputs);
    let mut found: Vec<Output> = Vec::new();
    for mut keys in tables {
        let named = named(&mut keys, names, problems);
        keys.close(problems);
        found.extend(named.map(|(name, unit)| Output { name, unit }));
    }
    complete(names, |name| found.iter().any(|output| output.name == name), "output", span, problems);
    found
}

fn coefficients(
    table: Keys<'_>,
    from_memory: Vec<Value<'_>>,
    shape: Option<Shape>,
    span: &std::ops::Range<usize>,
    problems: &mut Problems<'_>,
) -> Vec<Coefficient> {
    let expected: Vec<(&str, usize)> = shape.map(|shape| shape.coefficients.to_vec()).unwrap_or_default();
    let known: Vec<&str> = expected.iter().map(|(name, _)| *name).collect();
    let place = table.span.clone();
    let mut found: Vec<Coefficient> = Vec::new();
    for (key, value) in table.rest() {
        let value_span = value.span();
        let values = numbers(value, problems);
        match expected.iter().find(|(name, _)| name == key.get_ref()) {
            Some((_, count)) if values.len() != *count => {
                problems.add(&value_span, format!("{} values", values.len()), format!("this form takes {count}"));
            }
            None if shape.is_some() => {
                let why = format!("the form has no coefficient \"{}\"", key.get_ref());
                problems.add(&key.span(), why, nearest(key.get_ref(), &known));
            }
            _ => found.push(Coefficient { name: key.into_inner(), values, from_memory: false }),
        }
    }
    for (name, _) in &expected {
        if !found.iter().any(|coefficient| coefficient.name == *name) {
            problems.add(&place, format!("coefficient \"{name}\" is missing"), format!("add {name} = ..."));
        }
    }
    for value in from_memory {
        let Some(name) = text(&value, problems) else { continue };
        let mut any = false;
        for coefficient in &mut found {
            if name == "all" || coefficient.name == name {
                (coefficient.from_memory, any) = (true, true);
            }
        }
        if !any {
            problems.add(&value.span(), "it names no coefficient", nearest(&name, &known));
        }
    }
    let _ = span;
    found
}

fn check(mut keys: Keys<'_>, record: &Record, problems: &mut Problems<'_>) -> Option<Check> {
    let main = record.outputs.first().map(|output| output.name.clone()).unwrap_or_default();
    let output_name = match keys.take("output") {
        Some(value) => text(&value, problems)?,
        None => main,
    };
    let output = record.outputs.iter().find(|output| output.name == output_name);
    if output.is_none() {
        problems.add(&keys.span, format!("it checks an unknown output \"{output_name}\""), "name one of the outputs");
    }
    let mut at = Vec::new();
    if let Some(table) = keys.table_if_any("at", "the arguments", problems) {
        for (key, value) in table.rest() {
            let Some(input) = record.inputs.iter().find(|input| input.name == *key.get_ref()) else {
                let known: Vec<&str> = record.inputs.iter().map(|input| input.name.as_str()).collect();
                problems.add(&key.span(), "it is no input", nearest(key.get_ref(), &known));
                continue;
            };
            if let Some(figure) = figure(&value, &input.unit, problems) {
                at.push((input.name.clone(), figure.value));
            }
        }
    }
    let expect_value = keys.need("expect", problems);
    let expect = match (&expect_value, output) {
        (Some(value), Some(output)) => figure(value, &output.unit, problems),
        _ => None,
    };
    let origin = keys.need("origin", problems).and_then(|value| origin(&value, problems));
    let digits = keys.number_if_any("digits", problems);
    let reading_error = keys.number_if_any("reading_error", problems);
    let source = keys.text("source", problems);
    let (expect, origin) = (expect?, origin?);
    let tolerance = match (origin, digits, reading_error) {
        (Origin::ReadFromFigure, None, Some(error)) if error > 0.0 => Some(error * expect.value.abs()),
        (Origin::ReadFromFigure, ..) => {
            let why = "a reading from a figure needs its reading error, and has no digits";
            problems.add(&keys.span, why, "add reading_error = 0.03 (relative)");
            None
        }
        (_, Some(digits), None) if (1.0..=17.0).contains(&digits) && digits.fract() == 0.0 => {
            let leading = if expect.printed == 0.0 { 0.0 } else { expect.printed.abs().log10().floor() };
            Some(0.5 * 10f64.powf(leading - digits + 1.0) * expect.unit_ratio)
        }
        _ => {
            problems.add(&keys.span, "no tolerance follows", "add digits = the number of significant digits printed");
            None
        }
    };
    keys.close(problems);
    Some(Check { output: output_name, at, expect: expect.value, tolerance: tolerance?, origin, source })
}

/// A figure in a check: in the declared unit, with what was printed.
struct Figure {
    value: f64,
    printed: f64,
    unit_ratio: f64,
}

/// A bare number is in the declared unit; a text carries its own: "18 in".
fn figure(value: &Value<'_>, declared: &Unit, problems: &mut Problems<'_>) -> Option<Figure> {
    let DeValue::String(_) = value.get_ref() else {
        let printed = number(value, problems)?;
        return Some(Figure { value: printed, printed, unit_ratio: 1.0 });
    };
    let text = text(value, problems)?;
    let (number, symbol) = text.split_once(' ').unwrap_or((&text, "1"));
    let unit = unit(symbol.trim()).filter(|unit| unit.dimension == declared.dimension);
    match (number.parse::<f64>().ok().filter(|n| n.is_finite()), unit) {
        (Some(printed), Some(unit)) => {
            let unit_ratio = unit.si / declared.si;
            Some(Figure { value: printed * unit_ratio, printed, unit_ratio })
        }
        _ => {
            let right = format!("a number, a space and one of: {}", symbols(declared.dimension).join(", "));
            problems.add(&value.span(), "no figure with a unit for this", right);
            None
        }
    }
}

fn origin(value: &Value<'_>, problems: &mut Problems<'_>) -> Option<Origin> {
    let all = [
        Origin::PublishedNumber,
        Origin::WorkedExample,
        Origin::ReadFromFigure,
        Origin::Recomputed,
        Origin::OtherImplementation,
    ];
    let name = text(value, problems)?;
    let found = all.into_iter().find(|origin| origin.name() == name);
    if found.is_none() {
        problems.add(&value.span(), format!("there is no origin \"{name}\""), nearest(&name, &all.map(Origin::name)));
    }
    found
}
