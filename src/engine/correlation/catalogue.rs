//! Lookup of correlations and packings by name.

use super::form;
use super::packing::Packing;
use super::record::{Record, Standing, Task};
use crate::engine::error::{EngineError, EngineResult};

/// One constant of the packing table, with its standing.
#[derive(Clone, Debug, PartialEq)]
pub struct PackingConstant {
    /// Key.
    pub key: String,
    /// Value or values, in `unit`.
    pub values: Vec<f64>,
    /// Unit as published; "1" for none.
    pub unit: String,
    /// How far to trust it.
    pub standing: Standing,
    /// Where it was read.
    pub source: String,
}

/// One entry of the packing table.
#[derive(Clone, Debug, PartialEq)]
pub struct PackingEntry {
    /// Name.
    pub name: String,
    /// What the engine works with; its `entry` is `name`.
    pub packing: Packing,
    /// The constants with their sources.
    pub constants: Vec<PackingConstant>,
    /// What a reader should know.
    pub note: String,
}

/// All correlations and packings of one run.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Catalogue {
    records: Vec<Record>,
    packings: Vec<PackingEntry>,
}

impl Catalogue {
    /// From records and packings; each record's form is tried, so that a record that cannot work is refused here.
    ///
    /// # Errors
    /// [`EngineError::Record`] for two records of one id, two packings of one name, or a record without what its form
    /// needs.
    pub fn new(records: Vec<Record>, packings: Vec<PackingEntry>) -> EngineResult<Self> {
        for (place, record) in records.iter().enumerate() {
            if records.iter().take(place).any(|earlier| earlier.id == record.id) {
                return Err(record.unusable("there are two of this id; give the added one another id"));
            }
            form::try_form(record)?;
        }
        for (place, entry) in packings.iter().enumerate() {
            if packings.iter().take(place).any(|earlier| earlier.name == entry.name) {
                let what = "there are two packings of this name; give the added one another name".to_owned();
                return Err(EngineError::Record { id: entry.name.clone(), what });
            }
        }
        Ok(Self { records, packings })
    }

    /// The record of this id.
    ///
    /// # Errors
    /// [`EngineError::Record`] if there is none.
    pub fn record(&self, id: &str) -> EngineResult<&Record> {
        self.records.iter().find(|record| record.id == id).ok_or_else(|| EngineError::Record {
            id: id.to_owned(),
            what: "there is no correlation of this id in the catalogue of this run".to_owned(),
        })
    }

    /// All records, in order of loading.
    pub fn records(&self) -> &[Record] {
        &self.records
    }

    /// Names of the methods for a task, each once, in order of loading.
    pub fn methods(&self, task: Task) -> Vec<&str> {
        let mut names: Vec<&str> = Vec::new();
        for serves in self.records.iter().flat_map(|record| &record.serves) {
            if serves.task == task && !names.contains(&serves.method.as_str()) {
                names.push(&serves.method);
            }
        }
        names
    }

    /// The records that make up a method for a task, in order of loading.
    pub fn records_of(&self, task: Task, method: &str) -> Vec<&Record> {
        self.records.iter().filter(|record| record.serves(task, method)).collect()
    }

    /// A packing by its name.
    pub fn packing(&self, name: &str) -> Option<&Packing> {
        self.packing_entry(name).map(|entry| &entry.packing)
    }

    /// A packing with the sources of its constants.
    pub fn packing_entry(&self, name: &str) -> Option<&PackingEntry> {
        self.packings.iter().find(|entry| entry.name == name)
    }

    /// Names of the packings, in order of loading.
    pub fn packing_names(&self) -> Vec<&str> {
        self.packings.iter().map(|entry| entry.name.as_str()).collect()
    }

    /// All packings, in order of loading.
    pub fn packings(&self) -> &[PackingEntry] {
        &self.packings
    }
}
