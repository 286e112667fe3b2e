//! The correlations and packings that are compiled in, and the user's own beside them.

use super::correlation_file::{self, Content, CorrelationFileError, is_packing_table, split_table};
use super::open::Needs;
use crate::engine::correlation::catalogue::{Catalogue, PackingEntry};
use crate::engine::correlation::form::Form;
use crate::engine::correlation::record::Record;
use crate::engine::error::EngineError;
use std::fmt;
use std::path::Path;

/// Identifier and text of every file of `correlations/`, by identifier.
pub const FILES: &[(&str, &str)] = &[
    ("bennett-1983-aerated-liquid", include_str!("../../correlations/bennett-1983-aerated-liquid.toml")),
    ("blackwell-1984-older-chart", include_str!("../../correlations/blackwell-1984-older-chart.toml")),
    ("downcomer-apron-loss", include_str!("../../correlations/downcomer-apron-loss.toml")),
    ("downcomer-practice", include_str!("../../correlations/downcomer-practice.toml")),
    ("eduljee-1959-weep", include_str!("../../correlations/eduljee-1959-weep.toml")),
    ("fair-1961-capacity", include_str!("../../correlations/fair-1961-capacity.toml")),
    ("fair-1961-capacity-cubic", include_str!("../../correlations/fair-1961-capacity-cubic.toml")),
    ("fair-1961-entrainment", include_str!("../../correlations/fair-1961-entrainment.toml")),
    ("fair-1961-hole-area", include_str!("../../correlations/fair-1961-hole-area.toml")),
    ("fair-1961-surface-tension", include_str!("../../correlations/fair-1961-surface-tension.toml")),
    ("fair-1963-aeration", include_str!("../../correlations/fair-1963-aeration.toml")),
    ("fair-1963-dry-head", include_str!("../../correlations/fair-1963-dry-head.toml")),
    ("francis-weir-crest", include_str!("../../correlations/francis-weir-crest.toml")),
    ("kister-2007-later-chart-random", include_str!("../../correlations/kister-2007-later-chart-random.toml")),
    ("kister-2007-later-chart-structured", include_str!("../../correlations/kister-2007-later-chart-structured.toml")),
    (
        "kister-gill-1991-flood-pressure-drop",
        include_str!("../../correlations/kister-gill-1991-flood-pressure-drop.toml"),
    ),
    ("leibson-1957-orifice-coefficient", include_str!("../../correlations/leibson-1957-orifice-coefficient.toml")),
    ("lockett-banik-1986-weep", include_str!("../../correlations/lockett-banik-1986-weep.toml")),
    ("packings-random", include_str!("../../correlations/packings-random.toml")),
    ("packings-structured", include_str!("../../correlations/packings-structured.toml")),
    ("stichlmair-1989-pressure-drop", include_str!("../../correlations/stichlmair-1989-pressure-drop.toml")),
    ("stupin-kister-2003-system-limit", include_str!("../../correlations/stupin-kister-2003-system-limit.toml")),
    ("treybal-1980-surface-tension-head", include_str!("../../correlations/treybal-1980-surface-tension-head.toml")),
    ("wetting-minimum", include_str!("../../correlations/wetting-minimum.toml")),
];

/// Why a catalogue could not be put together.
#[derive(Clone, Debug, PartialEq)]
pub enum CatalogueError {
    /// Files that cannot be read; at least one.
    Files(Vec<CorrelationFileError>),
    /// Two of one name, or a record that its form cannot work with.
    Engine(EngineError),
    /// No built-in file of this identifier.
    NoRecord(String),
    /// No built-in packing of this name.
    NoPacking(String),
}

impl fmt::Display for CatalogueError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Files(errors) => {
                for (place, error) in errors.iter().enumerate() {
                    if place > 0 {
                        writeln!(f)?;
                    }
                    write!(f, "{error}")?;
                }
                Ok(())
            }
            Self::Engine(error) => write!(f, "{error}"),
            Self::NoRecord(id) => write!(f, "there is no built-in correlation \"{id}\""),
            Self::NoPacking(name) => write!(f, "there is no built-in packing \"{name}\""),
        }
    }
}

impl std::error::Error for CatalogueError {}

impl From<EngineError> for CatalogueError {
    fn from(error: EngineError) -> Self {
        Self::Engine(error)
    }
}

/// What has been read so far.
#[derive(Default)]
struct Gathered {
    records: Vec<Record>,
    packings: Vec<PackingEntry>,
    errors: Vec<CorrelationFileError>,
}

impl Gathered {
    fn add(&mut self, file: &str, stem: &str, text: &str) {
        match correlation_file::read(file, stem, text) {
            Ok(Content::Record(record)) => self.records.push(*record),
            Ok(Content::Packings(packings)) => self.packings.extend(packings),
            Err(error) => self.errors.push(error),
        }
    }

    fn finish(self) -> Result<Catalogue, CatalogueError> {
        if self.errors.is_empty() {
            Ok(Catalogue::new(self.records, self.packings)?)
        } else {
            Err(CatalogueError::Files(self.errors))
        }
    }
}

/// Everything built in, with check points.
///
/// # Errors
/// [`CatalogueError`] if a built-in file is unusable, which a test rules out.
pub fn catalogue() -> Result<Catalogue, CatalogueError> {
    catalogue_with(&[])
}

/// Everything built in and the user's files (name and text), with check points. An identifier or packing name that is
/// built in already is an error: published figures are not replaced in silence.
///
/// # Errors
/// [`CatalogueError`] with everything that is wrong in the user's files, or the first name that occurs twice.
pub fn catalogue_with(user_files: &[(String, String)]) -> Result<Catalogue, CatalogueError> {
    let mut gathered = Gathered::default();
    for (id, text) in FILES {
        gathered.add(&format!("{id}.toml"), id, text);
    }
    for (file, text) in user_files {
        let stem = Path::new(file).file_stem().map(|stem| stem.to_string_lossy().into_owned()).unwrap_or_default();
        gathered.add(file, &stem, text);
    }
    gathered.finish()
}

/// What one case needs: the correlations of the kinds of internals it has, without their check points, and these packings.
///
/// # Errors
/// As [`catalogue_of`].
pub fn catalogue_for_case(needs: Needs, packings: &[&str]) -> Result<Catalogue, CatalogueError> {
    let wanted = |id: &str, text: &str| {
        let form =
            text.lines().take(FORM_WITHIN_LINES).find_map(|line| line.strip_prefix("form = \"")?.strip_suffix('"'));
        match form.and_then(Form::by_name) {
            // The later chart has one set of constants for each kind of packing; its id says which.
            Some(Form::GpdLater) => {
                (needs.random && id.contains("random")) || (needs.structured && id.contains("structured"))
            }
            Some(Form::GpdOlder) => needs.random,
            Some(Form::FloodPressureDrop | Form::Stichlmair | Form::WettingMinimum) => needs.random || needs.structured,
            _ => needs.trays,
        }
    };
    let ids: Vec<&str> =
        FILES.iter().filter(|(id, text)| !is_packing_table(text) && wanted(id, text)).map(|(id, _)| *id).collect();
    catalogue_of(&ids, packings)
}

/// A file states its form within its first lines.
const FORM_WITHIN_LINES: usize = 8;

/// The built-in correlations of these identifiers without their check points, and the packings of these names.
///
/// # Errors
/// [`CatalogueError::NoRecord`] and [`CatalogueError::NoPacking`] for unknown names; else as [`catalogue`].
pub fn catalogue_of(ids: &[&str], packings: &[&str]) -> Result<Catalogue, CatalogueError> {
    let mut gathered = Gathered::default();
    for wanted in ids {
        let found = FILES.iter().find(|(id, text)| id == wanted && !is_packing_table(text));
        let (id, text) = found.ok_or_else(|| CatalogueError::NoRecord((*wanted).to_owned()))?;
        match correlation_file::read_head(&format!("{id}.toml"), id, text) {
            Ok(record) => gathered.records.push(record),
            Err(error) => gathered.errors.push(error),
        }
    }
    for wanted in packings {
        let found = tables().find_map(|(id, text)| split_table(text).read_entry(&format!("{id}.toml"), id, wanted));
        match found.ok_or_else(|| CatalogueError::NoPacking((*wanted).to_owned()))? {
            Ok(entry) => gathered.packings.push(entry),
            Err(error) => gathered.errors.push(error),
        }
    }
    gathered.finish()
}

/// Names of the built-in packings, in the order of the tables.
pub fn packing_names() -> Vec<&'static str> {
    tables().flat_map(|(_, text)| split_table(text).entries).map(|(name, ..)| name).collect()
}

fn tables() -> impl Iterator<Item = &'static (&'static str, &'static str)> {
    FILES.iter().filter(|(_, text)| is_packing_table(text))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::engine::correlation::record::Task;

    const ALL: Needs = Needs { trays: true, random: true, structured: true };

    #[test]
    fn files_are_those_of_the_directory() {
        let mut stems: Vec<String> = std::fs::read_dir(concat!(env!("CARGO_MANIFEST_DIR"), "/correlations"))
            .unwrap()
            .map(|entry| entry.unwrap().path())
            .filter(|path| path.extension().is_some_and(|ending| ending == "toml"))
            .map(|path| path.file_stem().unwrap().to_str().unwrap().to_owned())
            .collect();
        stems.sort();
        let ids: Vec<&str> = FILES.iter().map(|(id, _)| *id).collect();
        assert!(!ids.is_empty());
        assert_eq!(stems, ids);
    }

    #[test]
    fn one_run_gets_the_same_records_as_the_whole_without_check_points() {
        let whole = catalogue().unwrap_or_else(|error| panic!("{error}"));
        let run = catalogue_for_case(ALL, &["sheet 250/45", "slotted metal ring 50"]).unwrap();
        assert_eq!(run.packing_names(), ["sheet 250/45", "slotted metal ring 50"]);
        assert_eq!(run.packing("sheet 250/45"), whole.packing("sheet 250/45"));
        assert_eq!(whole.packing_names(), packing_names());
        assert_eq!(run.records().len(), whole.records().len());
        for (bare, full) in run.records().iter().zip(whole.records()) {
            assert!(bare.checks.is_empty() && !full.checks.is_empty(), "{}", bare.id);
            let mut full = full.clone();
            full.checks.clear();
            assert_eq!(*bare, full);
        }
    }

    #[test]
    fn a_case_gets_only_the_kinds_of_records_it_needs() {
        let ids = |needs: Needs| -> Vec<String> {
            catalogue_for_case(needs, &[]).unwrap().records().iter().map(|r| r.id.clone()).collect()
        };
        let none = Needs::default();
        let trays = ids(Needs { trays: true, ..none });
        let (random, structured) = (ids(Needs { random: true, ..none }), ids(Needs { structured: true, ..none }));
        assert!(trays.contains(&"fair-1961-capacity".to_owned()));
        assert!(!trays.iter().any(|id| random.contains(id) || structured.contains(id)));
        assert!(random.contains(&"blackwell-1984-older-chart".to_owned()) && !structured.contains(&random[0]));
        assert!(random.contains(&"kister-2007-later-chart-random".to_owned()));
        assert!(structured.contains(&"kister-2007-later-chart-structured".to_owned()));
        assert_eq!(ids(ALL).len(), catalogue().unwrap().records().len());
        assert!(ids(none).is_empty());
    }

    #[test]
    fn every_default_method_of_a_case_is_served() {
        let whole = catalogue().unwrap();
        assert_eq!(whole.methods(Task::TrayFlood), ["fair"]);
        assert_eq!(whole.methods(Task::PackingFlood), ["generalized pressure drop"]);
        assert_eq!(whole.methods(Task::PackingPressureDrop), ["generalized pressure drop", "stichlmair"]);
        assert_eq!(whole.methods(Task::AeratedLiquid), ["bennett", "fair"]);
    }

    #[test]
    fn unknown_names_are_named() {
        assert_eq!(catalogue_of(&["nobody-1900"], &[]), Err(CatalogueError::NoRecord("nobody-1900".to_owned())));
        assert_eq!(
            catalogue_of(&["packings-random"], &[]),
            Err(CatalogueError::NoRecord("packings-random".to_owned()))
        );
        assert_eq!(
            catalogue_for_case(Needs::default(), &["sheet 999/45"]),
            Err(CatalogueError::NoPacking("sheet 999/45".to_owned()))
        );
    }

    #[test]
    fn a_user_file_with_a_built_in_id_is_refused() {
        let (id, text) = FILES[0];
        let error = catalogue_with(&[(format!("own/{id}.toml"), text.to_owned())]).unwrap_err();
        let expected = format!("correlation \"{id}\": there are two of this id; give the added one another id");
        assert_eq!(error.to_string(), expected);
    }

    #[test]
    fn a_user_file_of_another_id_stands_beside_the_built_in_ones() {
        let (id, text) = FILES[0];
        let text = text.replace(&format!("id = \"{id}\""), "id = \"own\"");
        let both = catalogue_with(&[("own/own.toml".to_owned(), text)]).unwrap();
        assert_eq!(both.records().len(), catalogue().unwrap().records().len() + 1);
        assert!(both.record("own").is_ok());
    }
}
