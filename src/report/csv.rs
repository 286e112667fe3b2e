//! Sections and findings as CSV, in SI, with a table's name in the first column.

use super::caution;
use super::model::Meta;
use super::tables;
use super::text::inert;
use crate::engine::result::Answer;
use crate::engine::units::Si;

/// What went wrong while writing to memory.
#[derive(Debug, thiserror::Error)]
#[error("the CSV could not be written: {0}")]
pub struct CsvError(String);

/// Sections, findings and the caution.
///
/// # Errors
/// [`CsvError`] if the writer fails (it writes to memory).
pub fn render(answer: &Answer, meta: &Meta) -> Result<Vec<u8>, CsvError> {
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

fn strings(cells: &[&str]) -> Vec<String> {
    cells.iter().map(|c| (*c).to_owned()).collect()
}

/// A cell that a spreadsheet would take for a formula gets a leading apostrophe; numbers stay numbers.
fn inert_cell(text: &str) -> String {
    let text = inert(text);
    let formula = text.starts_with(['=', '+', '-', '@', '\t', '\r']) && text.parse::<f64>().is_err();
    if formula { format!("'{text}") } else { text }
}

#[cfg(test)]
mod tests {
    use super::inert_cell;

    #[test]
    fn cells_that_look_like_formulas_become_text() {
        for (cell, written) in
            [("=1+1", "'=1+1"), ("@x", "'@x"), ("-2.5", "-2.5"), ("+cmd", "'+cmd"), ("feed side", "feed side")]
        {
            assert_eq!(inert_cell(cell), written);
        }
    }
}
