//! An answer as CSV, in SI, with a table's name in the first column. Columns are named as the keys of the JSON.

use super::caution;
use super::model::Meta;
use super::tables;
use super::text::inert;
use crate::engine::result::Answer;
use crate::engine::units::Si;
use serde_json::Value;

/// What went wrong while writing to memory.
#[derive(Debug, thiserror::Error)]
#[error("the CSV could not be written: {0}")]
pub struct CsvError(String);

/// Sections, findings and the caution; shell, walls, compartments, balance and, if it holds them, the stages as in the document
/// that [`super::json::document`] makes of the same answer.
///
/// # Errors
/// [`CsvError`] if the writer fails (it writes to memory).
pub fn render(answer: &Answer, document: &Value, meta: &Meta) -> Result<Vec<u8>, CsvError> {
    let mut writer = csv::WriterBuilder::new().flexible(true).from_writer(Vec::new());
    let mut line = |cells: Vec<String>| {
        writer.write_record(cells.iter().map(|c| inert_cell(c))).map_err(|e| CsvError(e.to_string()))
    };
    line(strings(&[
        "table",
        "section",
        "place",
        "internals",
        "area_m2",
        "required_area_m2",
        "flood",
        "flood_actual",
        "f_factor",
        "capacity_factor_m_s",
        "flow_parameter",
        "liquid_load_m_s",
        "friction_pa",
        "friction_actual_pa",
        "static_head_pa",
        "governing_stage",
        "in_range",
    ]))?;
    for s in &answer.sections {
        let optional = |value: Option<f64>| value.map_or_else(String::new, |v| v.to_string());
        line(vec![
            "section".to_owned(),
            s.name.clone(),
            s.place.clone(),
            s.internals.clone(),
            s.area.si().to_string(),
            s.required_area.si().to_string(),
            s.flood.to_string(),
            optional(s.flood_actual),
            s.f_factor.root_pascal().to_string(),
            s.capacity_factor.si().to_string(),
            s.flow_parameter.to_string(),
            s.liquid_load.si().to_string(),
            optional(s.friction.map(Si::si)),
            optional(s.friction_actual.map(Si::si)),
            s.static_head.si().to_string(),
            s.governing_stage.clone(),
            s.in_range.to_string(),
        ])?;
    }
    for (name, rows) in tables_of(document) {
        for (index, row) in rows.iter().enumerate() {
            if index == 0 {
                line(
                    std::iter::once("table")
                        .chain(row.iter().map(|(key, _)| key.as_str()))
                        .map(str::to_owned)
                        .collect(),
                )?;
            }
            line(std::iter::once(name.to_owned()).chain(row.iter().map(|(_, cell)| cell.clone())).collect())?;
        }
    }
    let findings = tables::findings_rows(answer);
    line(std::iter::once("table".to_owned()).chain(findings.heads).collect())?;
    for row in findings.rows {
        line(std::iter::once("finding".to_owned()).chain(row).collect())?;
    }
    line(vec!["verdict".to_owned(), answer.verdict.name().to_owned()])?;
    line(vec![
        "origin".to_owned(),
        format!("chordwall {}", meta.version),
        meta.file.clone(),
        meta.input_sha256.clone(),
    ])?;
    line(vec!["caution".to_owned(), caution::CAUTION.to_owned()])?;
    line(vec!["caution".to_owned(), caution::from_memory(&answer.from_memory)])?;
    writer.into_inner().map_err(|e| CsvError(e.to_string()))
}

/// A row: keys and cells.
type Row = Vec<(String, String)>;

/// The tables of a document that are not written from the answer itself.
fn tables_of(document: &Value) -> Vec<(&'static str, Vec<Row>)> {
    let list = |value: &Value| value.as_array().cloned().unwrap_or_default();
    let rows = |value: &Value| list(value).iter().map(|item| cells(item, "")).collect::<Vec<Row>>();
    let of_sections = |key: &str| {
        let mut out = Vec::new();
        for section in list(&document["sections"]) {
            let lead = ("section".to_owned(), section["name"].as_str().unwrap_or_default().to_owned());
            let items = if section[key].is_object() { vec![section[key].clone()] } else { list(&section[key]) };
            out.extend(items.iter().map(|item| std::iter::once(lead.clone()).chain(cells(item, "")).collect()));
        }
        out
    };
    vec![
        ("tray", of_sections("tray")),
        ("stage", of_sections("stages")),
        ("shell", vec![cells(&document["shell"], "")]),
        ("wall", rows(&document["walls"])),
        ("compartment", rows(&document["compartments"])),
        ("balance", vec![cells(&document["balance"], "")]),
        ("solution", rows(&document["balance"]["solutions"])),
        ("column", vec![cells(&document["column"], "")]),
    ]
}

/// The cells of an object: objects within it by keys with a dot, lists of figures by keys with a number; lists of objects are
/// tables of their own.
fn cells(value: &Value, lead: &str) -> Row {
    let mut out = Vec::new();
    for (key, value) in value.as_object().into_iter().flatten() {
        let key = format!("{lead}{key}");
        match value {
            Value::Object(_) => out.extend(cells(value, &format!("{key}."))),
            Value::Array(list) => out.extend(
                list.iter()
                    .enumerate()
                    .filter(|(_, v)| v.is_number())
                    .map(|(i, v)| (format!("{key}.{}", i + 1), v.to_string())),
            ),
            Value::String(text) => out.push((key, text.clone())),
            Value::Null => out.push((key, String::new())),
            figure => out.push((key, figure.to_string())),
        }
    }
    out
}

fn strings(cells: &[&str]) -> Vec<String> {
    cells.iter().map(|c| (*c).to_owned()).collect()
}

/// What begins a formula in one spreadsheet or another; the wide forms do where they are typed.
const FORMULA: [char; 8] = ['=', '+', '-', '@', '\u{ff1d}', '\u{ff0b}', '\u{ff0d}', '\u{ff20}'];

/// A cell that a spreadsheet would take for a formula gets a leading apostrophe; numbers stay numbers. Where the list separator is a
/// semicolon, a spreadsheet cuts the cell there, so what follows one is looked at as well.
fn inert_cell(text: &str) -> String {
    let text = inert(text);
    if text.parse::<f64>().is_ok() {
        return text;
    }
    let mut out = String::with_capacity(text.len() + 1);
    for (index, part) in text.split(';').enumerate() {
        if index > 0 {
            out.push(';');
        }
        let quotes: &[char] = &['"', ' '];
        if part.trim_start_matches(quotes).starts_with(FORMULA) && (index == 0 || !part.starts_with(' ')) {
            out.push('\'');
        }
        out.push_str(part);
    }
    out
}

#[cfg(test)]
mod tests {
    use super::inert_cell;

    #[test]
    fn cells_that_look_like_formulas_become_text() {
        for (cell, written) in
            [("=1+1", "'=1+1"), ("@x", "'@x"), ("-2.5", "-2.5"), ("+cmd", "'+cmd"), ("feed side", "feed side")]
                .into_iter()
                .chain([
                    ("  =1+1", "'  =1+1"),
                    ("x;=1+1", "x;'=1+1"),
                    ("share 0.7; -2.4 mbar", "share 0.7; -2.4 mbar"),
                    ("\u{ff1d}1+1", "'\u{ff1d}1+1"),
                ])
        {
            assert_eq!(inert_cell(cell), written);
        }
    }
}
