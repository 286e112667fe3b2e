//! What is wrong with an input file: plain data, with a plain text of it. Colours and frames are the command line's.

use std::fmt;
use std::ops::Range;

/// A text that diagnostics point into.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Source {
    /// Name of the file, as the user knows it.
    pub name: String,
    /// The whole text.
    pub text: String,
}

/// One thing that is wrong.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Diagnostic {
    /// Index into [`Diagnostics::sources`].
    pub source: usize,
    /// Bytes of that source that are meant; may be empty, never beyond the end, always on character boundaries.
    pub span: Range<usize>,
    /// What is wrong, and why.
    pub message: String,
    /// What the marked text is.
    pub label: String,
    /// What would be right.
    pub help: Option<String>,
}

/// Everything that is wrong with a case and its table. Empty `items` means nothing is.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Diagnostics {
    /// The case first, then the table if there is one.
    pub sources: Vec<Source>,
    /// Sorted by source and place.
    pub items: Vec<Diagnostic>,
}

/// Where a byte lies: line and column counted from 1 (columns in characters), and the text of its line.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Place<'a> {
    /// Line, from 1.
    pub line: usize,
    /// Column in characters, from 1.
    pub column: usize,
    /// The line without its end.
    pub text: &'a str,
    /// Byte at which the line begins.
    pub start: usize,
}

impl Source {
    /// Where a byte lies; beyond the end counts as the end.
    pub fn place(&self, byte: usize) -> Place<'_> {
        let byte = floor_boundary(&self.text, byte);
        let before = self.text.get(..byte).unwrap_or_default();
        let start = before.rfind('\n').map_or(0, |newline| newline + 1);
        let rest = self.text.get(start..).unwrap_or_default();
        let text = rest.split('\n').next().unwrap_or_default().trim_end_matches('\r');
        let column = self.text.get(start..byte).unwrap_or_default().chars().count() + 1;
        Place { line: before.matches('\n').count() + 1, column, text, start }
    }
}

/// The last character boundary at or before `byte`.
pub(crate) fn floor_boundary(text: &str, byte: usize) -> usize {
    let mut at = byte.min(text.len());
    while !text.is_char_boundary(at) {
        at = at.saturating_sub(1);
    }
    at
}

impl Diagnostics {
    /// Puts the items in the order of source and place, and drops exact repeats.
    pub(crate) fn sort(&mut self) {
        self.items.sort_by(|a, b| {
            (a.source, a.span.start, a.span.end, &a.message).cmp(&(b.source, b.span.start, b.span.end, &b.message))
        });
        self.items.dedup();
    }

    /// The plain text: for each item `file:line:column: message`, the line, `^^^ label`, `help: ...`.
    pub fn to_plain_text(&self) -> String {
        let mut text = String::new();
        for (index, item) in self.items.iter().enumerate() {
            if index > 0 {
                text.push('\n');
            }
            self.write_item(item, &mut text);
        }
        text
    }

    fn write_item(&self, item: &Diagnostic, text: &mut String) {
        let Some(source) = self.sources.get(item.source) else {
            text.push_str(&format!("{}\n", item.message));
            return;
        };
        let place = source.place(item.span.start);
        text.push_str(&format!("{}:{}:{}: {}\n", source.name, place.line, place.column, item.message));
        let (shown, lead) = excerpt(place.text, place.column.saturating_sub(1));
        let end = floor_boundary(&source.text, item.span.end);
        let marked = source.text.get(place.start..end).unwrap_or_default().chars().count();
        let on_line = marked.min(place.text.chars().count());
        let width = (on_line + 1).saturating_sub(place.column).clamp(1, shown.chars().count().max(lead + 1) - lead);
        text.push_str(&format!("  | {shown}\n  | {}{} {}\n", " ".repeat(lead), "^".repeat(width), item.label));
        if let Some(help) = &item.help {
            text.push_str(&format!("  help: {help}\n"));
        }
    }
}

impl fmt::Display for Diagnostics {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str(self.to_plain_text().trim_end())
    }
}

impl std::error::Error for Diagnostics {}

/// At most this many characters of a line are shown.
const EXCERPT: usize = 110;

/// The part of a line around column `at` (characters from 0), control characters blanked, and where `at` is in it.
fn excerpt(line: &str, at: usize) -> (String, usize) {
    let plain = |c: char| if c.is_control() { ' ' } else { c };
    let first = if line.chars().count() <= EXCERPT { 0 } else { at.saturating_sub(EXCERPT / 2) };
    let shown: String = line.chars().skip(first).take(EXCERPT).map(plain).collect();
    (shown, at - first)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn one(text: &str, span: Range<usize>) -> String {
        let item =
            Diagnostic { source: 0, span, message: "wrong".into(), label: "this".into(), help: Some("right".into()) };
        let sources = vec![Source { name: "a.toml".into(), text: text.into() }];
        Diagnostics { sources, items: vec![item] }.to_plain_text()
    }

    #[test]
    fn marks_the_span_under_its_line() {
        let text = one("a = 1\nbé = 25\n", 12..14);
        assert_eq!(text, "a.toml:2:6: wrong\n  | bé = 25\n  |      ^^ this\n  help: right\n");
    }

    #[test]
    fn a_span_over_several_lines_is_marked_to_the_end_of_the_first() {
        assert!(one("abc\ndef\n", 1..6).contains("\n  |  ^^ this"));
    }

    #[test]
    fn an_empty_span_at_the_end_is_one_mark() {
        assert!(one("", 0..0).contains("a.toml:1:1: wrong\n  | \n  | ^ this"));
        assert!(one("ab", 2..9).contains("a.toml:1:3: wrong\n  | ab\n  |   ^ this"));
    }

    #[test]
    fn a_long_line_is_cut_around_the_mark() {
        let line = format!("{}X{}", "a".repeat(300), "b".repeat(300));
        let text = one(&line, 300..301);
        assert!(text.lines().all(|line| line.chars().count() <= EXCERPT + 12), "{text}");
        let lines: Vec<&str> = text.lines().collect();
        assert_eq!(lines[1].find('X'), lines[2].find('^'));
    }
}
