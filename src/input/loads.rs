//! The loads table: CSV with units in its header.

use super::columns::{COLUMNS, COUNT, Cells, LoadRow, row};
use super::open::MAX_FILE_BYTES;
use super::quantity::{Sign, check_number, leading_number};
use super::reader::{Sink, Span, nearest, nearest_help};
use super::unit_expr::{Unit, parse_unit};
use super::unit_table::name as dimension_name;

/// More rows than this are refused.
pub(crate) const MAX_ROWS: usize = 20_000;
/// A stage's label is no longer than this.
const MAX_LABEL: usize = 60;
/// The columns without a unit.
const PLAIN: [&str; 3] = ["section", "point", "stage"];

/// What a column of the table is.
#[derive(Clone, Copy, Debug, PartialEq)]
enum Meaning {
    Section,
    Point,
    Stage,
    /// Index into [`COLUMNS`], with its unit (none if the unit was wrong and has been reported).
    Figure(usize, Option<Unit>),
    /// Not known; reported.
    Unknown,
}

/// What has been said once and is not said again for every row.
#[derive(Default)]
struct Told {
    sections: Vec<String>,
    decimal_comma: bool,
}

/// Reads the table. Sections are those of the case, in its order.
pub(crate) fn read_table(text: &str, sections: &[&str], sink: &mut Sink) -> Vec<LoadRow> {
    if text.len() > MAX_FILE_BYTES {
        let message = format!("the table has {} bytes; at most {MAX_FILE_BYTES} are read", text.len());
        sink.add(0..0, message, "too large");
        return Vec::new();
    }
    let first = text.lines().find(|line| !line.trim().is_empty()).unwrap_or_default();
    let delimiter = if first.contains(';') { b';' } else { b',' };
    let mut reader =
        csv::ReaderBuilder::new().delimiter(delimiter).has_headers(false).flexible(true).from_reader(text.as_bytes());
    let mut record = csv::StringRecord::new();
    let mut header: Option<Vec<Meaning>> = None;
    let mut rows = Vec::new();
    let mut told = Told::default();
    loop {
        match reader.read_record(&mut record) {
            Ok(true) => {}
            Ok(false) => break,
            Err(error) => {
                let at = error.position().map_or(0, |position| usize::try_from(position.byte()).unwrap_or(0));
                sink.add(at..at, format!("the table cannot be read here: {error}"), "not CSV");
                break;
            }
        }
        let from = record.position().map_or(0, |position| usize::try_from(position.byte()).unwrap_or(0));
        let spans = field_spans(text, from, delimiter);
        if record.iter().all(|field| field.trim().is_empty()) {
            continue;
        }
        match &header {
            None => {
                let Some(columns) = read_header(&record, &spans, sink) else {
                    return Vec::new();
                };
                header = Some(columns);
            }
            Some(columns) if rows.len() < MAX_ROWS => {
                rows.extend(read_row(&record, &spans, columns, sections, &mut told, sink));
            }
            Some(_) => {
                sink.add(whole(&spans), format!("the table has more than {MAX_ROWS} rows"), "one row too many");
                return rows;
            }
        }
    }
    if header.is_none() {
        let help = format!("the first row names the columns: section, point, stage, {}", examples());
        sink.help(0..0, "the table is empty", "no header", help);
    } else if rows.is_empty() && sink.items.is_empty() {
        let end = text.len();
        sink.help(
            end..end,
            "the table has a header but no rows",
            "end of the table",
            "each row is one stage of a section",
        );
    }
    rows
}

fn examples() -> String {
    COLUMNS.iter().filter(|column| column.required).map(|column| column.example).collect::<Vec<_>>().join(", ")
}

/// Bytes of each field of the record that begins at or after `from`, quotes included.
fn field_spans(text: &str, from: usize, delimiter: u8) -> Vec<Span> {
    let rest = text.get(from..).unwrap_or_default();
    let blank = rest.len() - rest.trim_start_matches(['\r', '\n']).len();
    let mut spans = Vec::new();
    let mut start = from + blank;
    // As in CSV, a quote means something only in a field that begins with one.
    let mut field_has_quotes = false;
    let mut quoted = false;
    for (offset, byte) in text.bytes().enumerate().skip(start) {
        match byte {
            b'"' if offset == start => (field_has_quotes, quoted) = (true, true),
            b'"' if field_has_quotes => quoted = !quoted,
            b'\n' | b'\r' if !quoted => {
                spans.push(trimmed(text, start..offset));
                return spans;
            }
            _ if byte == delimiter && !quoted => {
                spans.push(trimmed(text, start..offset));
                start = offset + 1;
                field_has_quotes = false;
            }
            _ => {}
        }
    }
    spans.push(trimmed(text, start..text.len()));
    spans
}

fn trimmed(text: &str, span: Span) -> Span {
    let field = text.get(span.clone()).unwrap_or_default();
    let lead = field.len() - field.trim_start().len();
    let kept = field.trim().len();
    span.start + lead..span.start + lead + kept
}

fn whole(spans: &[Span]) -> Span {
    let start = spans.first().map_or(0, |span| span.start);
    start..spans.last().map_or(start, |span| span.end)
}

/// Meanings of the columns; None if rows cannot be read with them.
fn read_header(record: &csv::StringRecord, spans: &[Span], sink: &mut Sink) -> Option<Vec<Meaning>> {
    let mut columns: Vec<Meaning> = Vec::new();
    let mut names: Vec<String> = Vec::new();
    if record.len() == 1 {
        let help = "columns are separated by commas or semicolons";
        sink.help(whole(spans), "the first row of the table is a single column", "one column", help);
        return None;
    }
    for (place, field) in record.iter().enumerate() {
        let span = spans.get(place).cloned().unwrap_or_else(|| whole(spans));
        let (name, unit) = split_header(field);
        if !name.is_empty() && names.contains(&name) {
            sink.help(span, format!("there are two columns \"{name}\""), "second one", "keep one of them");
            columns.push(Meaning::Unknown);
            continue;
        }
        columns.push(meaning(&name, unit, field, span, sink));
        names.push(name);
    }
    let known: Vec<&str> = PLAIN.into_iter().chain(COLUMNS.iter().map(|column| column.name)).collect();
    // A misspelt column has been reported as unknown, and is not also called missing.
    let meant: Vec<&str> =
        names.iter().filter(|name| !known.contains(&name.as_str())).filter_map(|name| nearest(name, &known)).collect();
    let lacks = |name: &str| !names.iter().any(|typed| typed == name) && !meant.contains(&name);
    let missing: Vec<&str> = ["section", "stage"]
        .into_iter()
        .filter(|name| lacks(name))
        .chain(COLUMNS.iter().filter(|column| column.required && lacks(column.name)).map(|column| column.example))
        .collect();
    if missing.is_empty() {
        return Some(columns);
    }
    let message =
        format!("the table lacks the column{} {}", if missing.len() == 1 { "" } else { "s" }, missing.join(", "));
    sink.help(whole(spans), message, "header", "every name is written as here, with its unit in square brackets");
    None
}

/// Name and unit of a header cell such as `vapour_flow [t/h]`.
fn split_header(field: &str) -> (String, Option<&str>) {
    let field = field.trim();
    match field.split_once('[') {
        Some((name, rest)) => (name.trim().to_owned(), Some(rest.trim_end().strip_suffix(']').unwrap_or(rest).trim())),
        None => (field.to_owned(), None),
    }
}

fn meaning(name: &str, unit: Option<&str>, field: &str, span: Span, sink: &mut Sink) -> Meaning {
    let plain = match name {
        "section" => Some(Meaning::Section),
        "point" => Some(Meaning::Point),
        "stage" => Some(Meaning::Stage),
        _ => None,
    };
    if let Some(plain) = plain {
        if unit.is_some() {
            sink.help(
                span,
                format!("the column \"{name}\" has no unit"),
                "unit not wanted",
                format!("write \"{name}\""),
            );
        }
        return plain;
    }
    let Some((index, column)) = COLUMNS.iter().enumerate().find(|(_, column)| column.name == name) else {
        let known: Vec<&str> = PLAIN.into_iter().chain(COLUMNS.iter().map(|column| column.name)).collect();
        let message = format!("there is no column \"{name}\"");
        sink.help(span, message, "unknown column", nearest_help(name, &known, "columns"));
        return Meaning::Unknown;
    };
    let expected = || format!("expected the unit of {} in square brackets, e.g. \"{}\"", column.noun, column.example);
    let Some(unit) = unit.filter(|unit| !unit.is_empty()) else {
        sink.help(span, format!("the column \"{name}\" has no unit"), "unit missing", expected());
        return Meaning::Figure(index, None);
    };
    if !field.trim_end().ends_with(']') {
        sink.help(span, format!("the unit of \"{name}\" has no closing bracket"), "bracket open", expected());
        return Meaning::Figure(index, None);
    }
    match parse_unit(unit) {
        Err(error) => {
            let help = error.help.map_or_else(expected, |help| format!("{help} ({})", expected()));
            sink.help(span, format!("the unit of \"{name}\" cannot be read: {}", error.message), "in this unit", help);
            Meaning::Figure(index, None)
        }
        Ok(parsed) if parsed.dimension != column.dimension => {
            let message =
                format!("[{unit}] is the unit of {}, not of {}", dimension_name(parsed.dimension), column.noun);
            sink.help(span, message, "wrong unit", expected());
            Meaning::Figure(index, None)
        }
        Ok(parsed) => Meaning::Figure(index, Some(parsed)),
    }
}

fn read_row(
    record: &csv::StringRecord,
    spans: &[Span],
    columns: &[Meaning],
    sections: &[&str],
    told: &mut Told,
    sink: &mut Sink,
) -> Option<LoadRow> {
    if record.len() != columns.len() {
        let message = format!("this row has {} fields, but the header has {}", record.len(), columns.len());
        let help = "each row needs one field for each column; the decimal sign is a point";
        sink.help(whole(spans), message, "wrong number of fields", help);
        return None;
    }
    let mut section: Option<usize> = None;
    let mut point: Option<String> = Some("design".to_owned());
    let mut stage = String::new();
    let mut cells: Cells = [const { None }; COUNT];
    for ((field, meaning), span) in record.iter().zip(columns).zip(spans) {
        let field = field.trim();
        match meaning {
            Meaning::Section => section = find_section(field, span, sections, told, sink),
            Meaning::Point => point = label(field, span, "point", sink),
            Meaning::Stage => stage = label(field, span, "stage", sink).unwrap_or_default(),
            Meaning::Figure(index, Some(unit)) => {
                if let (Some(column), Some(cell)) = (COLUMNS.get(*index), cells.get_mut(*index)) {
                    let sign = if column.zero { Sign::NotNegative } else { Sign::Positive };
                    *cell = figure(field, span, column.name, *unit, sign, (told, sink));
                }
            }
            Meaning::Figure(_, None) | Meaning::Unknown => {}
        }
    }
    let complete = COLUMNS.iter().zip(&cells).enumerate().all(|(index, (column, cell))| {
        let present = columns.iter().any(|meaning| matches!(meaning, Meaning::Figure(at, _) if *at == index));
        cell.is_some() || !(column.required || present)
    });
    let row = if complete && !stage.is_empty() { row(stage, cells, sink) } else { None };
    Some(LoadRow { section: section?, point: point?, span: whole(spans), row })
}

fn find_section(field: &str, span: &Span, sections: &[&str], told: &mut Told, sink: &mut Sink) -> Option<usize> {
    let found = sections.iter().position(|name| *name == field && !field.is_empty());
    // A section of the case whose own name could not be read may be the one that is meant.
    let unreadable = sections.iter().any(|name| name.is_empty());
    if found.is_none() && !unreadable && !told.sections.iter().any(|name| name == field) {
        told.sections.push(field.to_owned());
        let message = format!("the case has no section \"{field}\"");
        sink.help(span.clone(), message, "unknown section", nearest_help(field, sections, "sections of the case"));
    }
    found
}

fn label(field: &str, span: &Span, what: &str, sink: &mut Sink) -> Option<String> {
    if field.is_empty() {
        sink.help(span.clone(), format!("the {what} of this row is empty"), "empty", format!("name the {what}"));
        return None;
    }
    if field.chars().any(char::is_control) || field.chars().count() > MAX_LABEL {
        let message = format!("a {what} is one line of at most {MAX_LABEL} characters");
        sink.add(span.clone(), message, "not a label");
        return None;
    }
    Some(field.to_owned())
}

/// A number of the table in SI.
fn figure(
    field: &str,
    span: &Span,
    name: &str,
    unit: Unit,
    sign: Sign,
    (told, sink): (&mut Told, &mut Sink),
) -> Option<(f64, Span)> {
    if field.is_empty() {
        sink.help(span.clone(), format!("{name} is empty in this row"), "empty", "every row needs a number here");
        return None;
    }
    let number = match leading_number(field) {
        Ok((number, end)) if end == field.len() => number,
        Ok(_) => {
            let message = format!("{name} should be a number, but this is \"{field}\"");
            sink.help(span.clone(), message, "not a number alone", "units stand in the header, not in the rows");
            return None;
        }
        Err((_, why)) if field.contains(',') => {
            if !told.decimal_comma {
                let help =
                    "save the table with a point as decimal sign; this is said once, other numbers may have commas too";
                sink.help(span.clone(), format!("{name}: {why}"), "decimal comma", help);
            }
            told.decimal_comma = true;
            return None;
        }
        Err((_, why)) => {
            let help = "every row needs a number here, with a point as decimal sign";
            sink.help(span.clone(), format!("{name}: {why}"), "not a number", help);
            return None;
        }
    };
    let si = (number + unit.offset) * unit.si;
    match check_number(field, number, si, sign, name) {
        Ok(()) => Some((si, span.clone())),
        Err((message, label)) => {
            sink.add(span.clone(), message, label);
            None
        }
    }
}
