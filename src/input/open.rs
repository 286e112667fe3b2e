//! The two steps from texts to a checked case: open the case, then check it together with its table.

use super::diagnostic::{Diagnostic, Diagnostics, Source, floor_boundary};
use super::lower::{Texts, lower};
use super::raw::RawFile;
use super::reader::{FromTable, Sink};
use crate::engine::case::Case;
use crate::engine::correlation::catalogue::Catalogue;

/// Files larger than this are refused.
pub const MAX_FILE_BYTES: usize = 4 * 1024 * 1024;
/// So many things wrong with one run are listed; the rest are counted.
const MAX_ITEMS: usize = 100;

/// A case file that could be read as TOML, not yet checked.
#[derive(Debug)]
pub struct Opened {
    source: Source,
    raw: RawFile,
    found: Vec<Diagnostic>,
    table: Option<String>,
}

/// The text of a file's bytes: UTF-8, a byte order mark dropped.
///
/// # Errors
/// One diagnostic if the file is too large or not UTF-8.
pub fn decode(name: &str, bytes: &[u8]) -> Result<String, Diagnostics> {
    let refuse = |text: &str, at: usize, message: String, label: &str, help: &str| {
        let text = text.to_owned();
        let items =
            vec![Diagnostic { source: 0, span: at..at, message, label: label.to_owned(), help: Some(help.to_owned()) }];
        Diagnostics { sources: vec![Source { name: name.to_owned(), text }], items }
    };
    if bytes.len() > MAX_FILE_BYTES {
        let message = format!("the file has {} bytes; at most {MAX_FILE_BYTES} are read", bytes.len());
        return Err(refuse("", 0, message, "too large", "leave out what is no part of the case"));
    }
    if bytes.starts_with(&[0xFF, 0xFE]) || bytes.starts_with(&[0xFE, 0xFF]) {
        let message = "the file is encoded as UTF-16, not as UTF-8".to_owned();
        return Err(refuse("", 0, message, "UTF-16", "save it again as UTF-8 (in a spreadsheet: \"CSV UTF-8\")"));
    }
    match std::str::from_utf8(bytes) {
        Ok(text) => Ok(text.strip_prefix('\u{FEFF}').unwrap_or(text).to_owned()),
        Err(error) => {
            let good = bytes.get(..error.valid_up_to()).unwrap_or_default();
            let text = String::from_utf8_lossy(good).into_owned();
            let at = text.len();
            let message = "the file is not encoded as UTF-8: the byte here belongs to no character".to_owned();
            Err(refuse(&text, at, message, "not UTF-8", "save it again as UTF-8 (in a spreadsheet: \"CSV UTF-8\")"))
        }
    }
}

/// Reads the text of a case file. `name` is what messages call it.
///
/// # Errors
/// Every syntax error, if the text cannot be read as TOML at all.
pub fn open(name: &str, text: &str) -> Result<Opened, Diagnostics> {
    let text = text.strip_prefix('\u{FEFF}').unwrap_or(text);
    let source = Source { name: name.to_owned(), text: text.to_owned() };
    if text.len() > MAX_FILE_BYTES {
        let items = vec![Diagnostic {
            source: 0,
            span: 0..0,
            message: format!("the case has {} bytes; at most {MAX_FILE_BYTES} are read", text.len()),
            label: "too large".to_owned(),
            help: None,
        }];
        return Err(Diagnostics { sources: vec![source], items });
    }
    let (table, errors) = toml::de::DeTable::parse_recoverable(text);
    if !errors.is_empty() {
        let items = errors
            .iter()
            .map(|error| Diagnostic {
                source: 0,
                span: error.span().unwrap_or(0..0),
                message: format!("this is not TOML: {}", error.message().replace('\n', "; ")),
                label: "cannot be read".to_owned(),
                help: syntax_help(error.message()),
            })
            .collect();
        return Err(finish(vec![source], items));
    }
    let mut sink = Sink::new(0);
    let raw = RawFile::from_table(table.get_ref(), 0..0, &mut sink);
    let table = table_name(&raw, &mut sink);
    Ok(Opened { source, raw, found: sink.items, table })
}

fn syntax_help(message: &str) -> Option<String> {
    let help = if message.contains("duplicate key") {
        "each key stands once in a table; a table that stands several times has double brackets, [[section]]"
    } else if message.contains("string") || message.contains("expected") || message.contains("unquoted") {
        "a line is key = value; texts and figures with a unit stand in quotes, e.g. height = \"4.2 m\""
    } else {
        return None;
    };
    Some(help.to_owned())
}

/// The table's name if it is a plain file name; else says why not.
fn table_name(raw: &RawFile, sink: &mut Sink) -> Option<String> {
    let typed = raw.loads.as_ref()?.table.as_ref()?;
    let name = typed.value.as_str();
    let why = if name.trim().is_empty() {
        "the name of the table is empty"
    } else if name.chars().any(|c| matches!(c, '/' | '\\' | ':') || c.is_control()) {
        "the table must lie beside the case file, so its name has no folder, drive or address in it"
    } else if name == "." || name == ".." {
        "this names a folder, not a table"
    } else {
        return Some(name.to_owned());
    };
    sink.help(
        typed.span.clone(),
        why,
        "not a plain file name",
        "put the table beside the case and write its name, e.g. table = \"loads.csv\"",
    );
    None
}

/// Kinds of internals that call for correlations.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Needs {
    /// Sieve or valve trays.
    pub trays: bool,
    /// Random packing.
    pub random: bool,
    /// Structured packing.
    pub structured: bool,
}

impl Opened {
    /// Name of the loads table beside the case file, if the case names one in a form that may be opened: a plain file
    /// name. (A name with a path in it is reported by [`Opened::check`].)
    pub fn table(&self) -> Option<&str> {
        self.table.as_deref()
    }

    /// Names of the packings that the internals refer to, known or not, in the order of the file, each once: a catalogue
    /// with these is enough for [`Opened::check`] (one with more gives better help on a misspelt name).
    pub fn packings(&self) -> Vec<&str> {
        let mut names: Vec<&str> = Vec::new();
        let internals = self.raw.internals.as_ref().map(|named| named.0.as_slice()).unwrap_or_default();
        for name in internals.iter().filter_map(|(_, internals)| internals.packing.as_ref()) {
            if !names.contains(&name.value.as_str()) {
                names.push(&name.value);
            }
        }
        names
    }

    /// Which correlations the internals call for, by their kinds; a kind that is not known calls for none.
    pub fn needs(&self) -> Needs {
        let internals = self.raw.internals.as_ref().map(|named| named.0.as_slice()).unwrap_or_default();
        let has = |what: &dyn Fn(&str) -> bool| {
            internals.iter().filter_map(|(_, internals)| internals.kind.as_ref()).any(|kind| what(&kind.value))
        };
        Needs {
            trays: has(&|kind| kind.ends_with("tray")),
            random: has(&|kind| kind == "random packing"),
            structured: has(&|kind| kind == "structured packing"),
        }
    }

    /// Checks the whole case. `table` is the text of the file named by [`Opened::table`]; without one, a case that names
    /// a table is reported as lacking it.
    ///
    /// # Errors
    /// Everything that is wrong with the case and the table, sorted by file and place.
    pub fn check(self, table: Option<&str>, catalogue: &Catalogue) -> Result<Case, Diagnostics> {
        let table = table.map(|text| text.strip_prefix('\u{FEFF}').unwrap_or(text)).filter(|_| self.table.is_some());
        let mut found = self.found;
        if let (Some(name), None) = (&self.table, table) {
            let typed = self.raw.loads.as_ref().and_then(|loads| loads.table.as_ref());
            found.push(Diagnostic {
                source: 0,
                span: typed.map(|typed| typed.span.clone()).unwrap_or_default(),
                message: format!("the loads table \"{name}\" could not be read"),
                label: "no such table".to_owned(),
                help: Some("it must lie in the folder of the case file".to_owned()),
            });
        }
        let texts = Texts { case: &self.source.text, table };
        lower(&self.raw, &texts, catalogue, found).map_err(|items| {
            let mut sources = vec![self.source.clone()];
            if let (Some(name), Some(text)) = (&self.table, table) {
                sources.push(Source { name: name.clone(), text: text.to_owned() });
            }
            finish(sources, items)
        })
    }
}

/// Sorts, keeps spans within their sources, and limits the list.
fn finish(sources: Vec<Source>, items: Vec<Diagnostic>) -> Diagnostics {
    let mut all = Diagnostics { sources, items };
    for item in &mut all.items {
        if let Some(source) = all.sources.get(item.source) {
            let end = floor_boundary(&source.text, item.span.end);
            let start = floor_boundary(&source.text, item.span.start).min(end);
            item.span = start..end;
        }
    }
    all.sort();
    if all.items.len() > MAX_ITEMS {
        let more = all.items.len() - MAX_ITEMS;
        all.items.truncate(MAX_ITEMS);
        if let Some(last) = all.items.last_mut() {
            last.help = Some(format!("and {more} more; the first {MAX_ITEMS} are listed"));
        }
    }
    all
}
