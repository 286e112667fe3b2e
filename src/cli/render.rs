//! What stops a run, in text. The only file that knows miette.

use super::exit::Stop;
use crate::input::Diagnostics;
use crate::report::text::{COLUMNS, inert, paragraph};
use miette::{GraphicalReportHandler, GraphicalTheme, LabeledSpan, MietteDiagnostic, NamedSource, Report};

/// A stop as text for standard error.
pub fn stop(stop: &Stop, colour: bool) -> String {
    match stop {
        Stop::OutputClosed => String::new(),
        Stop::Input(diagnostics) if colour => graphical(diagnostics),
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
            // Bytes keep their places: only characters of one byte that steer a terminal are replaced.
            Some(source) => {
                let text: String = source
                    .text
                    .chars()
                    .map(|c| if c.is_ascii_control() && c != '\n' && c != '\r' && c != '\t' { '?' } else { c })
                    .collect();
                Report::new(shown).with_source_code(NamedSource::new(inert(&source.name), text))
            }
            None => Report::new(shown),
        };
        if handler.render_report(&mut out, report.as_ref()).is_err() {
            out.push_str(&item.message);
        }
        out.push('\n');
    }
    let count = diagnostics.items.len();
    out + &format!("{count} {}; nothing was written.\n", if count == 1 { "error" } else { "errors" })
}
