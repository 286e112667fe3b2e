//! A report for a terminal. The only file that knows prettytable.

use super::model::{Report, Table};
use super::text::{COLUMNS, fill, indented, paragraph};
use crate::engine::findings::Status;
use prettytable::format::{Alignment, FormatBuilder, LinePosition, LineSeparator};
use prettytable::{Cell, Row};

/// Least width of a column of words; narrower ones break words.
const LEAST_WORDS: usize = 10;

/// The report as text; `colour` paints the verdict and each finding's status, never a table.
pub fn render(report: &Report, colour: bool) -> String {
    let mut out = String::new();
    let head = paragraph(&report.head, "  ");
    let verdict = format!(", {}:", report.verdict.name());
    out += &match head.split_once(&verdict) {
        Some((tag, rest)) if colour => format!("{tag}, {}:{rest}", paint(report.verdict)),
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
            out += &format!("\n{}\n{}", paragraph(&table.title, "  "), grid(table));
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
    let widths = word_widths(table);
    let cell = |(column, text): (usize, &String)| {
        let align = if column < table.words { Alignment::LEFT } else { Alignment::RIGHT };
        let text = widths.get(column).map_or_else(|| text.clone(), |width| fill(text, *width));
        Cell::new_align(&text, align)
    };
    let row = |cells: &[String]| Row::new(cells.iter().enumerate().map(cell).collect());
    grid.set_titles(row(&table.heads));
    for cells in &table.rows {
        grid.add_row(row(cells));
    }
    // prettytable pads every line to the table's width; trailing blanks only hinder comparing and copying.
    grid.to_string().lines().map(|line| format!("{}\n", line.trim_end())).collect()
}

/// Widths of the columns of words: what the figures leave of the report's width. Each takes its longest word if there is room
/// for all of these, so that a name stays whole; the rest is shared so that short columns give to long ones.
fn word_widths(table: &Table) -> Vec<usize> {
    // Columns of the screen, not characters: some take two. A cell may hold lines of its own.
    let widest = |column: usize, parts: fn(&str) -> Vec<&str>| {
        let cells = table.rows.iter().filter_map(|row| row.get(column)).chain(table.heads.get(column));
        cells.flat_map(|cell| parts(cell)).map(textwrap::core::display_width).max().unwrap_or(0)
    };
    let line = |column| widest(column, |cell| cell.lines().collect());
    let word = |column| widest(column, |cell| cell.split_whitespace().collect());
    let columns = table.heads.len();
    // Each column carries a blank of padding and one of separation.
    let figures: usize = (table.words..columns).map(line).sum();
    let mut left = COLUMNS.saturating_sub(figures + 2 * columns);
    let room = (0..table.words).map(word).sum::<usize>() <= left;
    let least = |column| if room { word(column) } else { LEAST_WORDS };
    let mut widths = vec![0; table.words];
    let mut order: Vec<usize> = (0..table.words).collect();
    order.sort_by_key(|column| line(*column));
    for (done, column) in order.iter().enumerate() {
        // Columns still to come keep their longest words.
        let kept: usize = if room { order.iter().skip(done + 1).map(|later| word(*later)).sum() } else { 0 };
        let fair = (left / (table.words - done)).min(left.saturating_sub(kept)).max(least(*column));
        let width = line(*column).min(fair);
        if let Some(place) = widths.get_mut(*column) {
            *place = width;
        }
        left = left.saturating_sub(width);
    }
    widths
}
