//! From the parsed TOML to raw structs: every leaf keeps its place, and nothing stops at the first error.
//!
//! `serde` is not asked to do this: a derived deserialiser ends at the first wrong type or unknown key, and loses the
//! places inside flattened, untagged or internally tagged types. The structs are declared once, by [`raw_table!`], which
//! gives the reader, the list of known keys and the JSON Schema from the same lines.

use super::diagnostic::Diagnostic;
use std::marker::PhantomData;
use std::ops::Range;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// Bytes of the source.
pub(crate) type Span = Range<usize>;

/// Collects what is wrong with one source.
#[derive(Debug)]
pub(crate) struct Sink {
    /// Index of the source.
    pub(crate) source: usize,
    /// What was found so far.
    pub(crate) items: Vec<Diagnostic>,
}

impl Sink {
    /// For this source.
    pub(crate) fn new(source: usize) -> Self {
        Self { source, items: Vec::new() }
    }

    /// Adds one.
    pub(crate) fn add(&mut self, span: Span, message: impl Into<String>, label: impl Into<String>) {
        self.push(span, message.into(), label.into(), None);
    }

    /// Adds one with what would be right.
    pub(crate) fn help(
        &mut self,
        span: Span,
        message: impl Into<String>,
        label: impl Into<String>,
        help: impl Into<String>,
    ) {
        self.push(span, message.into(), label.into(), Some(help.into()));
    }

    fn push(&mut self, span: Span, mut message: String, label: String, help: Option<String>) {
        if message.chars().count() > LONGEST_MESSAGE {
            message = message.chars().take(LONGEST_MESSAGE).chain("...".chars()).collect();
        }
        self.items.push(Diagnostic { source: self.source, span, message, label, help });
    }
}

/// A leaf and where it was typed.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct At<T> {
    /// The value.
    pub(crate) value: T,
    /// Of the value.
    pub(crate) span: Span,
    /// Of the key; of the value itself inside an array.
    pub(crate) key: Span,
}

/// A text that must be a quantity of kind `K`; not yet read as one.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Quantity<K> {
    /// As typed, without quotes.
    pub(crate) text: String,
    /// Of the value with its quotes.
    pub(crate) span: Span,
    /// Of the key; of the value itself inside an array.
    pub(crate) key: Span,
    pub(crate) kind: PhantomData<K>,
}

/// Any value at all: tables kept for later issues.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Anything;

/// Tables by name, in the order of the file.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct Named<T>(pub(crate) Vec<(At<String>, T)>);

/// A list and where it was typed.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct List<T> {
    /// The elements that could be read.
    pub(crate) items: Vec<T>,
    /// How many elements were typed.
    pub(crate) typed: usize,
    /// Of the list.
    pub(crate) span: Span,
    /// Of the key.
    pub(crate) key: Span,
}

/// One value on its way in.
#[derive(Clone, Debug)]
pub(crate) struct Item<'a, 'i> {
    /// The value.
    pub(crate) value: &'a Spanned<DeValue<'i>>,
    /// Of the key; of the value itself inside an array.
    pub(crate) key: Span,
    /// What it is called in messages: the key, or "each entry of ...".
    pub(crate) name: String,
}

impl Item<'_, '_> {
    /// Where the value stands.
    pub(crate) fn span(&self) -> Span {
        self.value.span()
    }

    /// Says that something else was expected.
    pub(crate) fn expected(&self, what: &str, example: &str, sink: &mut Sink) {
        let message = format!("{} should be {what}, but this is {}", self.name, found(self.value.get_ref()));
        sink.help(self.span(), message, format!("not {what}"), format!("expected {what}, e.g. {example}"));
    }
}

fn found(value: &DeValue<'_>) -> &'static str {
    match value {
        DeValue::String(_) => "a text",
        DeValue::Integer(_) | DeValue::Float(_) => "a bare number",
        DeValue::Boolean(_) => "true or false",
        DeValue::Datetime(_) => "a date or time",
        DeValue::Array(_) => "a list",
        DeValue::Table(_) => "a table",
    }
}

/// Something that can be read from a TOML value.
pub(crate) trait Read: Sized {
    /// Reads it, or says why not.
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self>;
}

impl Read for At<String> {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        let Some(text) = item.value.get_ref().as_str() else {
            item.expected("a text in quotes", "\"C-340\"", sink);
            return None;
        };
        Some(Self { value: text.to_owned(), span: item.span(), key: item.key.clone() })
    }
}

impl Read for At<f64> {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        let value = match item.value.get_ref() {
            DeValue::Float(float) => float.as_str().replace('_', "").parse::<f64>().ok(),
            DeValue::Integer(_) => whole(item.value.get_ref()).map(|number| number as f64),
            DeValue::String(_) => {
                let message = format!(
                    "{} is a plain number without a unit, written without quotes, but this is a text",
                    item.name
                );
                sink.help(item.span(), message, "not a bare number", "write the number alone, e.g. 0.80");
                return None;
            }
            _ => {
                item.expected("a bare number", "0.80", sink);
                return None;
            }
        };
        match value.filter(|value| value.is_finite()) {
            Some(value) => Some(Self { value, span: item.span(), key: item.key.clone() }),
            None => {
                let message = format!("{} is not a finite number", item.name);
                sink.help(item.span(), message, "not finite", "expected a number that can be worked with, e.g. 0.80");
                None
            }
        }
    }
}

impl Read for At<i64> {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        match whole(item.value.get_ref()) {
            Some(value) => Some(Self { value, span: item.span(), key: item.key.clone() }),
            None => {
                item.expected("a whole number", "24", sink);
                None
            }
        }
    }
}

fn whole(value: &DeValue<'_>) -> Option<i64> {
    match value {
        DeValue::Integer(integer) => i64::from_str_radix(&integer.as_str().replace('_', ""), integer.radix()).ok(),
        _ => None,
    }
}

impl<K: super::quantity::Kind> Read for Quantity<K> {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        let Some(text) = item.value.get_ref().as_str() else {
            let example = format!("\"{}\"", K::EXAMPLE);
            if matches!(item.value.get_ref(), DeValue::Integer(_) | DeValue::Float(_)) {
                let message = format!("{} needs a unit: a bare number is dimensionless", item.name);
                let help = format!("expected {} in quotes, e.g. {example}", K::NOUN);
                sink.help(item.span(), message, "unit missing", help);
            } else {
                item.expected(&format!("{} in quotes", K::NOUN), &example, sink);
            }
            return None;
        };
        Some(Self { text: text.to_owned(), span: item.span(), key: item.key.clone(), kind: PhantomData })
    }
}

impl Read for Anything {
    fn read(_: &Item<'_, '_>, _: &mut Sink) -> Option<Self> {
        Some(Self)
    }
}

impl<T: Read> Read for List<T> {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        let Some(array) = item.value.get_ref().as_array() else {
            item.expected("a list", "[0.60, 0.65]", sink);
            return None;
        };
        let items = array
            .iter()
            .filter_map(|value| {
                let name = format!("each entry of {}", item.name);
                T::read(&Item { value, key: value.span(), name }, sink)
            })
            .collect();
        Some(Self { items, typed: array.iter().count(), span: item.span(), key: item.key.clone() })
    }
}

/// A struct that is read from a table.
pub(crate) trait FromTable: Sized {
    /// What messages call the table.
    const TITLE: &'static str;
    /// Its keys.
    const KEYS: &'static [&'static str];
    /// Reads it; wrong and unknown keys are said and left out.
    fn from_table(table: &DeTable<'_>, span: Span, sink: &mut Sink) -> Self;
    /// Where the table stands.
    fn table_span(&self) -> Span;
    /// The known keys that were typed, read or not, and where.
    fn typed(&self) -> &[(String, Span)];
}

/// Tables typed as `[[name]]`, or as a list of inline tables.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Many<T> {
    /// The tables.
    pub(crate) items: Vec<T>,
}

impl<T> Default for Many<T> {
    fn default() -> Self {
        Self { items: Vec::new() }
    }
}

impl<T: FromTable> Read for Many<T> {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        let mut items = Vec::new();
        match item.value.get_ref() {
            DeValue::Array(array) => {
                for value in array.iter() {
                    match value.get_ref().as_table() {
                        Some(table) => items.push(T::from_table(table, value.span(), sink)),
                        None => Item { value, key: value.span(), name: format!("each {}", T::TITLE) }.expected(
                            "a table",
                            "{ name = \"...\" }",
                            sink,
                        ),
                    }
                }
            }
            DeValue::Table(table) => {
                let message = format!("{} stands here as a single table, but there may be several", T::TITLE);
                let help = format!("write it with double brackets: {}", T::TITLE);
                sink.help(item.key.clone(), message, "single brackets", help);
                items.push(T::from_table(table, item.span(), sink));
            }
            _ => {
                item.expected(&format!("a list of tables, {}", T::TITLE), T::TITLE, sink);
                return None;
            }
        }
        Some(Self { items })
    }
}

impl<T: FromTable> Read for Named<T> {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        let Some(table) = item.value.get_ref().as_table() else {
            item.expected(&format!("tables by name, {}", T::TITLE), T::TITLE, sink);
            return None;
        };
        let mut named = Vec::new();
        for (key, value) in table.iter() {
            let name = At { value: key.get_ref().to_string(), span: key.span(), key: key.span() };
            match value.get_ref().as_table() {
                Some(inner) => named.push((name, T::from_table(inner, key.span(), sink))),
                None => {
                    let message = format!("\"{}\" stands directly in [{}]", name.value, item.name);
                    let help = format!("{} are tables by name: write {}", item.name, T::TITLE);
                    sink.help(key.span(), message, "not inside a named table", help);
                }
            }
        }
        Some(Self(named))
    }
}

/// Reads a table, for a key that holds one.
pub(crate) fn read_table<T: FromTable>(item: &Item<'_, '_>, sink: &mut Sink) -> Option<T> {
    match item.value.get_ref().as_table() {
        Some(table) => Some(T::from_table(table, item.span(), sink)),
        None => {
            item.expected(&format!("a table, {}", T::TITLE), T::TITLE, sink);
            None
        }
    }
}

/// Says which keys of a table are unknown, each with the nearest known one; gives back the known keys that were meant, so
/// that a slip of the pen is not also called a missing key.
pub(crate) fn report_unknown(table: &DeTable<'_>, title: &str, keys: &[&str], sink: &mut Sink) -> Vec<(String, Span)> {
    let mut meant = Vec::new();
    for (key, _) in table.iter() {
        let typed = key.get_ref().as_ref();
        if keys.contains(&typed) {
            continue;
        }
        let message = format!("unknown key \"{typed}\" in {title}");
        sink.help(key.span(), message, "unknown key", nearest_help(typed, keys, "keys here"));
        if let Some(near) = nearest(typed, keys).filter(|near| !table.iter().any(|(key, _)| key.get_ref() == near)) {
            meant.push((near.to_owned(), key.span()));
        }
    }
    meant
}

/// "did you mean ..." if something is near, and the list of what there is (of a long list, what is nearest).
pub(crate) fn nearest_help(typed: &str, known: &[&str], what: &str) -> String {
    let mut words: Vec<&str> = Vec::new();
    for word in known.iter().filter(|word| !word.is_empty()) {
        if !words.contains(word) {
            words.push(word);
        }
    }
    let all = words.len();
    if all > LONGEST_LIST {
        let start: String = typed.chars().take(LONGEST_WORD).collect();
        words.sort_by_cached_key(|word| strsim::damerau_levenshtein(&start, word));
        words.truncate(NEAREST_OF_MANY);
    }
    let rest = all - words.len();
    let list = if words.is_empty() { "none".to_owned() } else { words.join(", ") };
    let more = if rest > 0 { format!(" and {rest} more") } else { String::new() };
    match nearest(typed, &words) {
        Some(near) => format!("did you mean \"{near}\"? ({what}: {list}{more})"),
        None => format!("{what}: {list}{more}"),
    }
}

/// A message that repeats what was typed is cut at so many characters.
const LONGEST_MESSAGE: usize = 500;
/// Nothing is sought for words longer than this: the search takes their length times the known word's.
const LONGEST_WORD: usize = 80;
/// Longer lists are cut.
const LONGEST_LIST: usize = 20;
/// So many words are left of a long list.
const NEAREST_OF_MANY: usize = 8;

/// The nearest of the known words, if any is near enough to be meant.
pub(crate) fn nearest<'a>(typed: &str, known: &[&'a str]) -> Option<&'a str> {
    if typed.len() > LONGEST_WORD {
        return None;
    }
    let lower = typed.to_lowercase();
    let scored = known.iter().map(|word| {
        let distance = strsim::damerau_levenshtein(&lower, &word.to_lowercase());
        (distance, *word)
    });
    let far = (typed.chars().count() / 3).max(1);
    scored.filter(|(distance, _)| *distance <= far).min_by_key(|(distance, _)| *distance).map(|(_, word)| word)
}

/// Declares a table of the case file: the struct, its keys, its reader and its schema. Every field is optional here; what
/// is required is said by the lowering (and by `#[schemars(required)]` for the schema).
macro_rules! raw_table {
    ($(#[$meta:meta])* $name:ident, $title:literal; $($(#[$field_meta:meta])* $field:ident $key:literal: $type:ty),+ $(,)?) => {
        $(#[$meta])*
        #[derive(Clone, Debug, Default, schemars::JsonSchema)]
        #[schemars(deny_unknown_fields)]
        pub(crate) struct $name {
            /// Where the table stands.
            #[schemars(skip)]
            pub(crate) span: $crate::input::reader::Span,
            /// Where each key that was typed stands.
            #[schemars(skip)]
            pub(crate) typed: Vec<(String, $crate::input::reader::Span)>,
            $($(#[$field_meta])* #[schemars(rename = $key)] pub(crate) $field: Option<$type>,)+
        }

        impl $crate::input::reader::FromTable for $name {
            const TITLE: &'static str = $title;
            const KEYS: &'static [&'static str] = &[$($key),+];
            fn from_table(
                table: &toml::de::DeTable<'_>,
                span: $crate::input::reader::Span,
                sink: &mut $crate::input::reader::Sink,
            ) -> Self {
                let typed = $crate::input::reader::report_unknown(table, $title, Self::KEYS, sink);
                let mut read = Self { span, typed, ..Self::default() };
                for (key, value) in table.iter() {
                    let typed: &str = key.get_ref().as_ref();
                    if Self::KEYS.contains(&typed) {
                        read.typed.push((typed.to_owned(), key.span()));
                    }
                    let item = $crate::input::reader::Item { value, key: key.span(), name: typed.to_owned() };
                    match typed {
                        $($key => read.$field = <$type as $crate::input::reader::Read>::read(&item, sink),)+
                        _ => {}
                    }
                }
                read
            }
            fn table_span(&self) -> $crate::input::reader::Span {
                self.span.clone()
            }
            fn typed(&self) -> &[(String, $crate::input::reader::Span)] {
                &self.typed
            }
        }

        impl $crate::input::reader::Read for $name {
            fn read(
                item: &$crate::input::reader::Item<'_, '_>,
                sink: &mut $crate::input::reader::Sink,
            ) -> Option<Self> {
                $crate::input::reader::read_table(item, sink)
            }
        }
    };
}
pub(crate) use raw_table;
