//! What stops a run, in text. The only file that knows miette.

use super::exit::Stop;
use crate::input::Diagnostics;
use crate::report::text::{COLUMNS, inert, paragraph, steers};
use miette::{GraphicalReportHandler, GraphicalTheme, LabeledSpan, MietteDiagnostic, NamedSource, Report};

/// Most bytes of a line that is drawn.
const LONGEST_DRAWN: usize = 400;

/// A stop as text for standard error.
pub fn stop(stop: &Stop, colour: bool) -> String {
    match stop {
        Stop::Input(diagnostics) if colour && drawable(diagnostics) => graphical(diagnostics),
        Stop::Input(diagnostics) => {
            let count = diagnostics.items.len();
            let errors = if count == 1 { "error" } else { "errors" };
            format!("{}\n{count} {errors}; nothing was written.\n", visible(diagnostics.to_plain_text().trim_end()))
        }
        other => {
            let text = format!("error: {other}");
            let lines: Vec<String> = text.lines().map(|line| paragraph(&inert(line), "  ")).collect();
            format!("{}\n", lines.join("\n"))
        }
    }
}

/// Line ends stay, everything else that could steer a terminal becomes visible.
fn visible(text: &str) -> String {
    text.lines().map(inert).collect::<Vec<_>>().join("\n")
}

/// True if no line is so long that a drawing of it would fill the screen; the plain text shows an excerpt.
fn drawable(diagnostics: &Diagnostics) -> bool {
    diagnostics.sources.iter().all(|source| source.text.lines().all(|line| line.len() <= LONGEST_DRAWN))
}

/// Text of which every byte keeps its place, so that spans still fit, and no character steers a terminal.
fn same_places(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '\n' | '\t' => out.push(c),
            '\r' => out.push(' '),
            c if steers(c) => out.extend(std::iter::repeat_n('?', c.len_utf8())),
            c => out.push(c),
        }
    }
    out
}

fn graphical(diagnostics: &Diagnostics) -> String {
    let handler =
        GraphicalReportHandler::new_themed(GraphicalTheme::unicode()).with_width(COLUMNS).with_context_lines(1);
    let mut out = String::new();
    for item in &diagnostics.items {
        let mut shown = MietteDiagnostic::new(inert(&item.message))
            .with_label(LabeledSpan::new_with_span(Some(inert(&item.label)), item.span.clone()));
        if let Some(help) = &item.help {
            shown = shown.with_help(inert(help));
        }
        let report = match diagnostics.sources.get(item.source) {
            Some(source) => {
                Report::new(shown).with_source_code(NamedSource::new(inert(&source.name), same_places(&source.text)))
            }
            None => Report::new(shown),
        };
        if handler.render_report(&mut out, report.as_ref()).is_err() {
            out.push_str(&inert(&item.message));
        }
        out.push('\n');
    }
    let count = diagnostics.items.len();
    out + &format!("{count} {}; nothing was written.\n", if count == 1 { "error" } else { "errors" })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::input::Source;

    #[test]
    fn a_drawn_source_keeps_its_bytes_in_place_and_steers_nothing() {
        let text = "tag = 1\r\n# \u{1b}[31m \u{9b}31m \u{202e}abc \u{e0041} \u{e4}\n";
        let drawn = same_places(text);
        assert_eq!(drawn.len(), text.len());
        assert_eq!(drawn, "tag = 1 \n# ?[31m ??31m ???abc ???? \u{e4}\n");
    }

    #[test]
    fn a_line_that_would_fill_the_screen_is_not_drawn() {
        let with =
            |text: String| Diagnostics { sources: vec![Source { name: "case.toml".to_owned(), text }], items: vec![] };
        assert!(drawable(&with("a\nb".to_owned())));
        assert!(!drawable(&with(format!("a\n{}", "b".repeat(LONGEST_DRAWN + 1)))));
    }
}
