//! What every part of the lowering needs: the text, the place for what is wrong, and the usual checks.

use crate::engine::correlation::catalogue::Catalogue;
use crate::input::quantity::{self, Kind, Sign};
use crate::input::reader::{At, FromTable, List, Quantity, Sink, Span, nearest_help};
use std::collections::BTreeSet;

/// The lowering of one case.
pub(crate) struct Context<'a> {
    /// Text of the case file.
    pub(crate) text: &'a str,
    /// What is wrong with the case file.
    pub(crate) sink: Sink,
    /// What is wrong with the loads table.
    pub(crate) table_sink: Sink,
    /// Correlations and packings to refer to.
    pub(crate) catalogue: &'a Catalogue,
    /// Sentences for the reader of a result.
    pub(crate) notes: Vec<String>,
}

/// Which plain numbers are allowed, in a test and in words.
#[derive(Clone, Copy)]
pub(crate) struct Allowed {
    /// The test.
    pub(crate) test: fn(f64) -> bool,
    /// The words that follow "must be".
    pub(crate) words: &'static str,
}

/// Above 0, below 1.
pub(crate) const INNER_FRACTION: Allowed =
    Allowed { test: |x| x > 0.0 && x < 1.0, words: "between 0 and 1, both excluded" };
/// Above 0, at most 1.
pub(crate) const FRACTION: Allowed = Allowed { test: |x| x > 0.0 && x <= 1.0, words: "above 0 and at most 1" };
/// From 0 to 1.
pub(crate) const SHARE: Allowed = Allowed { test: |x| (0.0..=1.0).contains(&x), words: "from 0 to 1" };
/// Above 0, below a limit that no dimensionless figure of a column passes.
pub(crate) const POSITIVE: Allowed = Allowed { test: |x| x > 0.0 && x <= 1e6, words: "above 0 (and at most 1e6)" };
/// 0 or above, likewise.
pub(crate) const NOT_NEGATIVE: Allowed =
    Allowed { test: |x| (0.0..=1e6).contains(&x), words: "0 or above (and at most 1e6)" };

impl Context<'_> {
    /// The field, or an error that the key is missing. A key that was typed but could not be read is not called missing.
    pub(crate) fn need<'r, T, R: FromTable>(
        &mut self,
        table: &R,
        field: &'r Option<T>,
        key: &str,
        example: &str,
    ) -> Option<&'r T> {
        let bare = key.trim_matches(['[', ']']);
        if field.is_none() && !table.typed().iter().any(|(typed, _)| typed == bare) {
            let span = header(self.text, table.table_span());
            let title = R::TITLE.replace("NAME", self.text.get(span.clone()).unwrap_or_default());
            self.sink.help(span, format!("{title} has no {key}"), "missing here", format!("add {example}"));
        }
        field.as_ref()
    }

    /// Reads a quantity, or says what is wrong with it.
    pub(crate) fn quantity<K: Kind>(&mut self, typed: Option<&Quantity<K>>, sign: Sign) -> Option<K::Quantity> {
        self.si(typed, sign).map(K::quantity)
    }

    /// Reads a quantity as a number in SI.
    pub(crate) fn si<K: Kind>(&mut self, typed: Option<&Quantity<K>>, sign: Sign) -> Option<f64> {
        let typed = typed?;
        self.parse::<K>(&typed.text, &typed.span, sign)
    }

    /// Reads a quantity from a text with its place.
    pub(crate) fn parse<K: Kind>(&mut self, text: &str, span: &Span, sign: Sign) -> Option<f64> {
        match quantity::parse::<K>(text, sign) {
            Ok(si) => Some(si),
            Err(error) => {
                let marked = inside(self.text, span, text, &error.span);
                self.sink.help(marked, error.message, error.label, error.help);
                None
            }
        }
    }

    /// A plain number within what is allowed.
    pub(crate) fn number(&mut self, typed: Option<&At<f64>>, name: &str, allowed: Allowed) -> Option<f64> {
        let typed = typed?;
        if (allowed.test)(typed.value) {
            return Some(typed.value);
        }
        let message = format!("{name} must be {}, but this is {}", allowed.words, typed.value);
        let label = if typed.value < 0.0 { "negative" } else { "not allowed" };
        self.sink.add(typed.span.clone(), message, label);
        None
    }

    /// One of a few words.
    pub(crate) fn choice<T: Clone>(&mut self, typed: &At<String>, name: &str, words: &[(&str, T)]) -> Option<T> {
        if let Some((_, meant)) = words.iter().find(|(word, _)| *word == typed.value) {
            return Some(meant.clone());
        }
        let known: Vec<&str> = words.iter().map(|(word, _)| *word).collect();
        self.unknown_name(typed, &format!("\"{}\" is not a known {name}", typed.value), &known, "possible");
        None
    }

    /// Says that a name is not known, with the nearest that is.
    pub(crate) fn unknown_name(&mut self, typed: &At<String>, message: &str, known: &[&str], what: &str) {
        let quoted = nearest_help(&typed.value, known, what);
        self.sink.help(typed.span.clone(), message, "not known", quoted);
    }

    /// A name that is not empty and has no line break or other control character in it.
    pub(crate) fn name<'r>(&mut self, typed: &'r At<String>, what: &str) -> Option<&'r str> {
        let blank = typed.value.trim().is_empty();
        if blank || typed.value.chars().any(char::is_control) {
            let message = format!("{what} must be a name of at least one visible character, on one line");
            self.sink.add(typed.span.clone(), message, if blank { "empty" } else { "control character" });
            return None;
        }
        Some(&typed.value)
    }

    /// Says which names occur twice. `names` without those that could not be read.
    pub(crate) fn unique(&mut self, names: &[(String, Span)], what: &str) {
        let mut earlier: BTreeSet<&str> = BTreeSet::new();
        for (name, span) in names {
            if !earlier.insert(name) {
                let message = format!("there are two {what} named \"{name}\"");
                self.sink.help(span.clone(), message, "used before", "give each a name of its own");
            }
        }
    }

    /// A list of exactly two numbers, the first below the second.
    pub(crate) fn range(&mut self, typed: Option<&List<At<f64>>>, name: &str) -> Option<(f64, f64)> {
        let typed = typed?;
        let numbers: Vec<f64> = typed
            .items
            .iter()
            .filter_map(|item| self.number(Some(item), &format!("each entry of {name}"), SHARE))
            .collect();
        if numbers.len() < typed.items.len() || (typed.items.len() < typed.typed) {
            return None;
        }
        match numbers.as_slice() {
            [low, high] if low < high => Some((*low, *high)),
            [_, _] => {
                let message = format!("{name} must rise: the least first, then the greatest");
                self.sink.help(typed.span.clone(), message, "does not rise", "e.g. [0.60, 0.65]");
                None
            }
            _ => {
                let message = format!("{name} has {} entries, but needs two: the least and the greatest", typed.typed);
                self.sink.help(typed.span.clone(), message, "not two", "e.g. [0.60, 0.65]");
                None
            }
        }
    }
}

/// Of a table's span, the header line only.
pub(crate) fn header(text: &str, span: Span) -> Span {
    let slice = text.get(span.clone()).unwrap_or_default();
    let end = slice.find('\n').map_or(span.end, |newline| span.start + newline);
    span.start..end.max(span.start)
}

/// The place of a part of a text value, if the value stands in the source as it is (no escapes); else the whole value.
pub(crate) fn inside(source: &str, value: &Span, text: &str, part: &Span) -> Span {
    let typed = source.get(value.clone()).unwrap_or_default();
    let Some(start) = typed.find(text).filter(|_| !text.is_empty()) else {
        return value.clone();
    };
    let from = value.start + start + part.start.min(text.len());
    let to = value.start + start + part.end.min(text.len());
    if from < to { from..to } else { value.clone() }
}
