//! Text from a case is data: nothing in it may steer a terminal, a spreadsheet or a reader's eye.

/// Width of a report on a terminal, in columns.
pub const COLUMNS: usize = 100;

/// True for a character that acts instead of being seen: controls, line and paragraph separators, marks of reading direction,
/// characters without width, and tags.
pub fn steers(c: char) -> bool {
    c.is_control()
        || matches!(
            c,
            '\u{ad}'
                | '\u{61c}'
                | '\u{180e}'
                | '\u{200b}'..='\u{200f}'
                | '\u{2028}'..='\u{202e}'
                | '\u{2060}'..='\u{206f}'
                | '\u{feff}'
                | '\u{fff9}'..='\u{fffb}'
                | '\u{e0000}'..='\u{e007f}'
        )
}

/// Characters that steer become visible; the rest stays.
pub fn inert(text: &str) -> String {
    text.chars().map(|c| if steers(c) { '\u{fffd}' } else { c }).collect()
}

/// Breaks at blanks, line by line: reports are plain text, and the search for the prettiest breaks costs more than the figures.
fn options<'a>(width: usize) -> textwrap::Options<'a> {
    textwrap::Options::new(width)
        .word_separator(textwrap::WordSeparator::AsciiSpace)
        .wrap_algorithm(textwrap::WrapAlgorithm::FirstFit)
}

/// Text broken to a width.
pub fn fill(text: &str, width: usize) -> String {
    textwrap::fill(text, options(width))
}

/// Names with hyphens stay whole in running text, so that they can be copied and searched for.
fn whole_words<'a>() -> textwrap::Options<'a> {
    options(COLUMNS).word_splitter(textwrap::WordSplitter::NoHyphenation)
}

/// Paragraph wrapped to the report's width, with an indent for every line after the first.
pub fn paragraph(text: &str, indent: &str) -> String {
    textwrap::fill(text, whole_words().subsequent_indent(indent))
}

/// A paragraph of which every line is indented.
pub fn indented(text: &str, indent: &str) -> String {
    textwrap::fill(text, whole_words().initial_indent(indent).subsequent_indent(indent))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn escape_sequences_and_direction_marks_are_made_visible() {
        assert_eq!(inert("a\u{1b}[31mb\u{202e}c\nd"), "a\u{fffd}[31mb\u{fffd}c\u{fffd}d");
        for c in ['\u{61c}', '\u{2028}', '\u{2066}', '\u{9b}', '\u{e0041}', '\u{ad}', '\u{feff}'] {
            assert_eq!(inert(&format!("a{c}b")), "a\u{fffd}b");
        }
        assert_eq!(inert("Säule 3"), "Säule 3");
    }

    #[test]
    fn names_with_hyphens_are_not_broken_in_running_text() {
        let text = format!("{} fair-1961-capacity-cubic", "x".repeat(90));
        assert_eq!(paragraph(&text, "  ").lines().last(), Some("  fair-1961-capacity-cubic"));
        assert_eq!(indented(&text, "    ").lines().last(), Some("    fair-1961-capacity-cubic"));
        assert!(
            paragraph(&"x".repeat(250), "  ").lines().all(|line| line.len() <= COLUMNS),
            "nothing else helps there"
        );
    }
}
