//! What a report says, built once from an answer and shared by every format.

use super::caution;
use super::findings::{self, FindingText};
use super::number::Display;
use super::tables;
use super::text::inert;
use crate::engine::case::Case;
use crate::engine::findings::Status;
use crate::engine::result::Answer;

/// Where an answer came from.
#[derive(Clone, Debug, PartialEq)]
pub struct Meta {
    /// Version of the program.
    pub version: String,
    /// SHA-256 of case and table, hexadecimal.
    pub input_sha256: String,
    /// Name of the case file.
    pub file: String,
}

/// How an answer is shown.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Show {
    /// Units for people.
    pub display: Display,
    /// True to add the rows of every section.
    pub stages: bool,
    /// True to list every limit with its origin.
    pub limits: bool,
}

/// A table of text.
#[derive(Clone, Debug, PartialEq)]
pub struct Table {
    /// Heading.
    pub title: String,
    /// Column heads.
    pub heads: Vec<String>,
    /// Cells.
    pub rows: Vec<Vec<String>>,
    /// First columns that hold words; the rest hold figures and align right.
    pub words: usize,
}

/// A whole report.
#[derive(Clone, Debug, PartialEq)]
pub struct Report {
    /// The sentence that answers.
    pub head: String,
    /// The verdict of the sentence.
    pub verdict: Status,
    /// Case, revision, basis.
    pub about: String,
    /// Tables in reading order.
    pub tables: Vec<Table>,
    /// Paragraphs on shell and balance, in reading order.
    pub remarks: Vec<String>,
    /// Findings that are not met, then those that ask for attention.
    pub findings: Vec<FindingText>,
    /// Ways to bring a missed split back.
    pub remedies: Vec<String>,
    /// Notes for the reader.
    pub notes: Vec<String>,
    /// Correlations used.
    pub correlations: String,
    /// Caution and constants from memory.
    pub cautions: Vec<String>,
    /// Program, version, input hash.
    pub origin: String,
}

impl Report {
    /// From an answer.
    pub fn new(case: &Case, answer: &Answer, meta: &Meta, show: Show) -> Self {
        let mut tables = vec![
            tables::shell(answer, show.display),
            tables::walls(answer, show.display),
            tables::compartments(answer, show.display),
            tables::sections(answer, show.display),
        ];
        tables.extend(tables::trays(answer, show.display));
        tables.extend(tables::solutions(answer, show.display));
        if show.stages {
            tables.extend(answer.sections.iter().map(|section| tables::stages(section, show.display)));
        }
        tables.push(findings::met(answer, show.display));
        if show.limits {
            tables.push(tables::limits(answer, show.display));
        }
        let about = [("", &case.title), ("revision ", &case.revision), ("basis: ", &case.basis)]
            .into_iter()
            .filter(|(_, text)| !text.is_empty())
            .map(|(lead, text)| format!("{lead}{}", inert(text)))
            .collect::<Vec<_>>()
            .join("; ");
        Self {
            head: tables::head(case, answer, show.display),
            verdict: answer.verdict,
            about,
            tables,
            remarks: tables::remarks(answer, show.display),
            findings: findings::not_met_or_attention(answer, show.display),
            remedies: tables::remedies(answer),
            notes: answer.notes.iter().map(|note| inert(note)).collect(),
            correlations: answer.correlations.join(", "),
            cautions: vec![caution::CAUTION.to_owned(), caution::from_memory(&answer.from_memory)],
            origin: format!("chordwall {}, {}, input sha256 {}", meta.version, inert(&meta.file), meta.input_sha256),
        }
    }
}
