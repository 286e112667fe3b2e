//! The two steps from texts to a checked case: open the case, then check it together with its table.

use super::diagnostic::{Diagnostic, Diagnostics, Source};
use crate::engine::case::Case;
use crate::engine::correlation::catalogue::Catalogue;

/// Files larger than this are refused.
pub const MAX_FILE_BYTES: usize = 4 * 1024 * 1024;

/// A case file that could be read as TOML, not yet checked.
#[derive(Debug)]
pub struct Opened {
    found: Diagnostics,
}

/// The text of a file's bytes: UTF-8, a byte order mark dropped.
///
/// # Errors
/// One diagnostic if the file is too large or not UTF-8.
pub fn decode(name: &str, bytes: &[u8]) -> Result<String, Diagnostics> {
    let _ = bytes;
    Err(Diagnostics { sources: vec![Source { name: name.to_owned(), text: String::new() }], items: Vec::new() })
}

/// Reads the text of a case file. `name` is what messages call it.
///
/// # Errors
/// Every syntax error, if the text cannot be read as TOML at all.
pub fn open(name: &str, text: &str) -> Result<Opened, Diagnostics> {
    let sources = vec![Source { name: name.to_owned(), text: text.to_owned() }];
    let (_, errors) = toml::de::DeTable::parse_recoverable(text);
    let items: Vec<Diagnostic> = errors
        .iter()
        .map(|error| Diagnostic {
            source: 0,
            span: error.span().unwrap_or(0..0),
            message: error.message().to_owned(),
            label: "here".to_owned(),
            help: None,
        })
        .collect();
    if items.is_empty() {
        Ok(Opened { found: Diagnostics { sources, items } })
    } else {
        Err(Diagnostics { sources, items })
    }
}

impl Opened {
    /// Name of the loads table beside the case file, if the case names one in a form that may be opened: a plain file
    /// name. (A name with a path in it is reported by [`Opened::check`].)
    pub fn table(&self) -> Option<&str> {
        None
    }

    /// Checks the whole case. `table` is the text of the file named by [`Opened::table`].
    ///
    /// # Errors
    /// Everything that is wrong with the case and the table, sorted by file and place.
    pub fn check(self, table: Option<&str>, catalogue: &Catalogue) -> Result<Case, Diagnostics> {
        let _ = (table, catalogue);
        Err(self.found)
    }
}
