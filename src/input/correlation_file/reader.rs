//! Walks a parsed TOML table, takes keys out of it and collects what is wrong, with lines.

use super::{CorrelationFileError, FileProblem};
use std::ops::Range;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// Collects the problems of one file.
pub(super) struct Problems<'t> {
    file: &'t str,
    text: &'t str,
    first_line: usize,
    found: Vec<FileProblem>,
}

impl<'t> Problems<'t> {
    /// For a text whose first line is line `first_line` of the file.
    pub fn new(file: &'t str, text: &'t str, first_line: usize) -> Self {
        Self { file, text, first_line, found: Vec::new() }
    }

    /// Notes a problem at a span of the text.
    pub fn add(&mut self, span: &Range<usize>, why: impl Into<String>, right: impl Into<String>) {
        let before = self.text.get(..span.start).unwrap_or(self.text);
        let offending = self.text.get(span.clone()).unwrap_or("").lines().next().unwrap_or("").trim();
        self.found.push(FileProblem {
            line: self.first_line + before.matches('\n').count(),
            offending: offending.to_owned(),
            why: why.into(),
            right: right.into(),
        });
    }

    /// Takes over the problems of a later part of the same file.
    pub fn append(&mut self, other: Problems<'_>) {
        self.found.extend(other.found);
    }

    /// `value` if nothing was wrong.
    pub fn finish<T>(self, value: Option<T>) -> Result<T, CorrelationFileError> {
        match value {
            Some(value) if self.found.is_empty() => Ok(value),
            _ => {
                let mut problems = self.found;
                problems.sort_by_key(|problem| problem.line);
                Err(CorrelationFileError { file: self.file.to_owned(), problems })
            }
        }
    }

    /// Parses the text; `None` if it is not TOML at all.
    pub fn parse(&mut self) -> Option<DeTable<'t>> {
        let (table, errors) = DeTable::parse_recoverable(self.text);
        let sound = errors.is_empty();
        for error in errors {
            let span = error.span().unwrap_or(0..0);
            self.add(&span, format!("not TOML: {}", error.message()), "see https://toml.io for the syntax");
        }
        sound.then(|| table.into_inner())
    }
}

/// One table, its known keys taken out one by one; what is left over at the end is unknown.
pub(super) struct Keys<'t> {
    table: DeTable<'t>,
    /// Where the table stands, for what is missing from it.
    pub span: Range<usize>,
    what: &'static str,
    known: Vec<&'static str>,
}

/// A value with its place.
pub(super) type Value<'t> = Spanned<DeValue<'t>>;

impl<'t> Keys<'t> {
    /// Of a table that a reader calls `what`.
    pub fn new(table: DeTable<'t>, span: Range<usize>, what: &'static str) -> Self {
        Self { table, span, what, known: Vec::new() }
    }

    /// Takes a key that may be absent.
    pub fn take(&mut self, key: &'static str) -> Option<Value<'t>> {
        self.known.push(key);
        self.table.remove(key)
    }

    /// Takes a key that must be there.
    pub fn need(&mut self, key: &'static str, problems: &mut Problems<'_>) -> Option<Value<'t>> {
        let value = self.take(key);
        if value.is_none() {
            problems.add(&self.span, format!("{} lacks \"{key}\"", self.what), format!("add {key} = ..."));
        }
        value
    }

    /// A string that must be there; empty after a problem.
    pub fn text(&mut self, key: &'static str, problems: &mut Problems<'_>) -> String {
        let Some(value) = self.need(key, problems) else { return String::new() };
        text(&value, problems).unwrap_or_default()
    }

    /// A string that may be absent: then empty.
    pub fn text_or_empty(&mut self, key: &'static str, problems: &mut Problems<'_>) -> String {
        self.take(key).and_then(|value| text(&value, problems)).unwrap_or_default()
    }

    /// A number that may be absent.
    pub fn number_if_any(&mut self, key: &'static str, problems: &mut Problems<'_>) -> Option<f64> {
        self.take(key).and_then(|value| number(&value, problems))
    }

    /// A table that may be absent.
    pub fn table_if_any(
        &mut self,
        key: &'static str,
        what: &'static str,
        problems: &mut Problems<'_>,
    ) -> Option<Keys<'t>> {
        self.take(key).and_then(|value| table(value, what, problems))
    }

    /// The tables of an array that may be absent.
    pub fn tables(&mut self, key: &'static str, what: &'static str, problems: &mut Problems<'_>) -> Vec<Keys<'t>> {
        let Some(value) = self.take(key) else { return Vec::new() };
        items(value, problems).into_iter().filter_map(|item| table(item, what, problems)).collect()
    }

    /// All that is left, with the places of the keys.
    pub fn rest(self) -> impl Iterator<Item = (Spanned<String>, Value<'t>)> {
        self.table.into_iter().map(|(key, value)| {
            let span = key.span();
            (Spanned::new(span, key.into_inner().into_owned()), value)
        })
    }

    /// Every key left over is unknown.
    pub fn close(self, problems: &mut Problems<'_>) {
        for key in self.table.keys() {
            let right = nearest(key.get_ref(), &self.known);
            problems.add(&key.span(), format!("{} has no key \"{}\"", self.what, key.get_ref()), right);
        }
    }
}

/// A string, not empty.
pub(super) fn text(value: &Value<'_>, problems: &mut Problems<'_>) -> Option<String> {
    match value.get_ref() {
        DeValue::String(text) if !text.trim().is_empty() => Some(text.trim().to_owned()),
        DeValue::String(_) => {
            problems.add(&value.span(), "it is empty", "write a text");
            None
        }
        other => {
            problems.add(&value.span(), format!("it is of type {}", other.type_str()), "write a text in quotes");
            None
        }
    }
}

/// A finite number.
pub(super) fn number(value: &Value<'_>, problems: &mut Problems<'_>) -> Option<f64> {
    let parsed = match value.get_ref() {
        DeValue::Float(float) => float.as_str().parse::<f64>().ok(),
        DeValue::Integer(integer) if integer.radix() == 10 => integer.as_str().parse::<f64>().ok(),
        _ => None,
    };
    let finite = parsed.filter(|number| number.is_finite());
    if finite.is_none() {
        problems.add(&value.span(), "it is not a finite number", "write a decimal number without quotes or unit");
    }
    finite
}

/// The items of an array.
pub(super) fn items<'t>(value: Value<'t>, problems: &mut Problems<'_>) -> Vec<Value<'t>> {
    let span = value.span();
    match value.into_inner() {
        DeValue::Array(array) => array.into_iter().collect(),
        other => {
            problems.add(&span, format!("it is of type {}", other.type_str()), "write an array");
            Vec::new()
        }
    }
}

/// A table.
pub(super) fn table<'t>(value: Value<'t>, what: &'static str, problems: &mut Problems<'_>) -> Option<Keys<'t>> {
    let span = value.span();
    match value.into_inner() {
        DeValue::Table(table) => Some(Keys::new(table, span, what)),
        other => {
            problems.add(&span, format!("it is of type {}", other.type_str()), "write a table");
            None
        }
    }
}

/// One number or an array of them.
pub(super) fn numbers(value: Value<'_>, problems: &mut Problems<'_>) -> Vec<f64> {
    if matches!(value.get_ref(), DeValue::Array(_)) {
        items(value, problems).iter().filter_map(|item| number(item, problems)).collect()
    } else {
        number(&value, problems).into_iter().collect()
    }
}

/// A hint at the nearest of the names, or all of them.
pub(super) fn nearest(given: &str, names: &[&str]) -> String {
    let close = names
        .iter()
        .map(|name| (strsim::damerau_levenshtein(given, name), name))
        .min()
        .filter(|(distance, name)| *distance <= 2.max(name.len() / 3));
    match close {
        Some((_, name)) => format!("did you mean \"{name}\"?"),
        None if names.is_empty() => "nothing stands here".to_owned(),
        None => format!("one of: {}", names.join(", ")),
    }
}
