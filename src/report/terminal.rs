//! A report for a terminal. The only file that knows prettytable.

use super::model::{Report, Table};
use super::text::{COLUMNS, indented, paragraph};
use crate::engine::findings::Status;
use prettytable::format::{Alignment, FormatBuilder, LinePosition, LineSeparator};
use prettytable::{Cell, Row};

/// Widest column of words, so that a table of long names still fits the report.
const WORDS: usize = 22;
/// Widest text in a table of limits or findings.
const LONG_WORDS: usize = 34;

/// The report as text; `colour` paints the verdict and each finding's status, never a table.
pub fn render(report: &Report, colour: bool) -> String {
    let mut out = String::new();
    // The verdict closes the first sentence; painted only where a terminal shows it.
    let head = paragraph(&format!("{}: {}", report.head, report.verdict.name()), "  ");
    out += &match head.rfind(report.verdict.name()) {
        Some(at) if colour => format!("{}{}", &head[..at], paint(report.verdict)),
        _ => head,
    };
    out.push('\n');
    if !report.about.is_empty() {
        out += &format!("{}\n", paragraph(&report.about, "  "));
    }
    for remark in &report.remarks {
        out += &format!("{}\n", paragraph(remark, "  "));
    }
    for table in &report.tables {
        if !table.rows.is_empty() {
            out += &format!("\n{}\n{}", table.title, grid(table));
        }
    }
    if !report.findings.is_empty() {
        out += "\nFindings\n";
        for finding in &report.findings {
            let line = paragraph(&format!("{}: {}", finding.status.name(), finding.headline), "    ");
            let rest = &line[finding.status.name().len()..];
            let status = if colour { paint(finding.status) } else { finding.status.name().to_owned() };
            out += &format!("{status}{rest}\n{}\n", indented(&finding.because, "    "));
        }
    }
    for (title, list) in [("Ways to bring the split back", &report.remedies), ("Notes", &report.notes)] {
        if !list.is_empty() {
            out += &format!("\n{title}\n");
            for item in list {
                out += &format!("{}\n", paragraph(&format!("- {item}"), "  "));
            }
        }
    }
    if !report.correlations.is_empty() {
        let text = format!("Correlations (chordwall methods NAME shows source and range): {}", report.correlations);
        out += &format!("\n{}\n", paragraph(&text, "  "));
    }
    for caution in &report.cautions {
        out += &format!("{}\n", paragraph(caution, "  "));
    }
    out += &format!("{}\n", paragraph(&report.origin, "  "));
    out
}

fn paint(status: Status) -> String {
    use anstyle::{AnsiColor, Style};
    let style = match status {
        Status::Met => Style::new().fg_color(Some(AnsiColor::Green.into())),
        Status::Attention => Style::new().fg_color(Some(AnsiColor::Yellow.into())),
        Status::NotMet => Style::new().fg_color(Some(AnsiColor::Red.into())).bold(),
    };
    format!("{style}{}{style:#}", status.name())
}

/// A table between two rules, words left and figures right.
pub fn grid(table: &Table) -> String {
    let mut grid = prettytable::Table::new();
    grid.set_format(
        FormatBuilder::new()
            .column_separator(' ')
            .separator(LinePosition::Title, LineSeparator::new('-', '-', '-', '-'))
            .padding(0, 1)
            .build(),
    );
    let wide = if table.words > 2 { LONG_WORDS } else { WORDS };
    let cell = |(column, text): (usize, &String)| {
        let align = if column < table.words { Alignment::LEFT } else { Alignment::RIGHT };
        let text = if column < table.words { textwrap::fill(text, wide) } else { text.clone() };
        Cell::new_align(&text, align)
    };
    let row = |cells: &[String]| Row::new(cells.iter().enumerate().map(cell).collect());
    grid.set_titles(row(&table.heads));
    for cells in &table.rows {
        grid.add_row(row(cells));
    }
    // prettytable pads every line to the table's width; trailing blanks only hinder comparing and copying.
    let text: String = grid.to_string().lines().map(|line| format!("{}\n", line.trim_end())).collect();
    debug_assert!(text.lines().count() > 0 && COLUMNS > 0);
    text
}
