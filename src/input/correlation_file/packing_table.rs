//! A file of packings to entries of the packing table.

use super::CorrelationFileError;
use super::reader::{Keys, Problems, nearest, numbers, table, text};
use super::record::{standing, unit_of};
use crate::engine::correlation::catalogue::{PackingConstant, PackingEntry};
use crate::engine::correlation::packing::{BilletSchultesConstants, Material, Packing, PackingKind};
use crate::engine::correlation::record::{Dimension, Standing};
use crate::engine::units::{Length, PerLength, Si};

/// Constants of an entry: key, dimension, number of values. Keys are those of a case's internals.
const CONSTANTS: &[(&str, Dimension, usize)] = &[
    ("specific_area", Dimension::PerLength, 1),
    ("void_fraction", Dimension::Dimensionless, 1),
    ("packing_factor", Dimension::PerLength, 1),
    ("packing_factor_older", Dimension::PerLength, 1),
    ("packing_factor_dry", Dimension::PerLength, 1),
    ("corrugation_side", Dimension::Length, 1),
    ("corrugation_angle", Dimension::Angle, 1),
    ("nominal_size", Dimension::Length, 1),
    ("stichlmair", Dimension::Dimensionless, 3),
    ("C_S", Dimension::Dimensionless, 1),
    ("C_Fl", Dimension::Dimensionless, 1),
    ("C_h", Dimension::Dimensionless, 1),
    ("C_p0", Dimension::Dimensionless, 1),
];

/// A table's text in pieces, so that one entry can be read without the others.
#[derive(Clone, Debug)]
pub(crate) struct TableText<'t> {
    /// What stands before the first entry.
    pub header: &'t str,
    /// Name, first line in the file and text of each entry.
    pub entries: Vec<(&'t str, usize, &'t str)>,
}

/// Cuts a table at its `[[packing]]` lines. An entry whose name cannot be seen on a line of its own gets an empty name.
pub(crate) fn split_table(text: &str) -> TableText<'_> {
    let mut starts: Vec<(usize, usize)> = Vec::new();
    for (at, _) in text.match_indices("\n[[packing]]") {
        let (counted_to, lines) = starts.last().map_or((0, 1), |(at, line)| (*at, *line));
        let between = text.get(counted_to..=at).unwrap_or("").matches('\n').count();
        starts.push((at + 1, lines + between));
    }
    let header = text.get(..starts.first().map_or(text.len(), |(at, _)| *at)).unwrap_or(text);
    let ends = starts.iter().skip(1).map(|(at, _)| *at).chain([text.len()]);
    let entries = starts
        .iter()
        .zip(ends)
        .map(|((at, line), end)| {
            let entry = text.get(*at..end).unwrap_or("");
            let name = entry.lines().find_map(|line| line.strip_prefix("name = \"")?.strip_suffix('"'));
            (name.unwrap_or(""), *line, entry)
        })
        .collect();
    TableText { header, entries }
}

/// Reads all entries.
pub(super) fn read(file: &str, stem: &str, text: &str) -> Result<Vec<PackingEntry>, CorrelationFileError> {
    let pieces = split_table(text);
    let mut problems = Problems::new(file, pieces.header, 1);
    let sources = header(stem, pieces.header, &mut problems);
    let mut found: Vec<PackingEntry> = Vec::new();
    for (_, line, entry) in &pieces.entries {
        let mut own = Problems::new(file, entry, *line);
        found.extend(entry_of(entry, &sources, &mut own));
        problems.append(own);
    }
    problems.finish(Some(found))
}

impl TableText<'_> {
    /// Reads the entry of this name alone; `None` if the table has none.
    ///
    /// # Errors
    /// [`CorrelationFileError`] with what is wrong in the header or that entry.
    pub fn read_entry(&self, file: &str, stem: &str, name: &str) -> Option<Result<PackingEntry, CorrelationFileError>> {
        let (_, line, entry) = self.entries.iter().find(|(known, ..)| *known == name)?;
        let mut problems = Problems::new(file, self.header, 1);
        let sources = header(stem, self.header, &mut problems);
        let mut own = Problems::new(file, entry, *line);
        let found = entry_of(entry, &sources, &mut own);
        problems.append(own);
        Some(problems.finish(found))
    }
}

/// Reads the header: short names of sources and what they stand for.
fn header(stem: &str, text_: &str, problems: &mut Problems<'_>) -> Vec<(String, String)> {
    let Some(parsed) = problems.parse() else { return Vec::new() };
    let mut keys = Keys::new(parsed, 0..text_.find('\n').unwrap_or(text_.len()), "the file");
    if let Some(value) = keys.need("id", problems)
        && let Some(id) = text(&value, problems)
        && id != stem
    {
        problems.add(&value.span(), "the id is not the file's name", format!("name it \"{stem}\", or rename the file"));
    }
    keys.text("title", problems);
    keys.text_or_empty("notes", problems);
    let mut found = Vec::new();
    if let Some(value) = keys.need("sources", problems)
        && let Some(table) = table(value, "sources", problems)
    {
        for (key, value) in table.rest() {
            found.extend(text(&value, problems).map(|words| (key.into_inner(), words)));
        }
    }
    keys.close(problems);
    found
}

fn entry_of(entry: &str, sources: &[(String, String)], problems: &mut Problems<'_>) -> Option<PackingEntry> {
    let mut file = Keys::new(problems.parse()?, 0.."[[packing]]".len(), "the file");
    let mut tables = file.tables("packing", "a packing", problems);
    file.close(problems);
    let mut keys = tables.pop()?;
    let _ = entry;
    let name = keys.text("name", problems);
    let kind = choice(
        &mut keys,
        "kind",
        &[("random", PackingKind::Random), ("structured", PackingKind::Structured)],
        problems,
    );
    let materials = [("metal", Material::Metal), ("plastic", Material::Plastic), ("ceramic", Material::Ceramic)];
    let material = choice(&mut keys, "material", &materials, problems);
    let note = keys.text_or_empty("note", problems);
    let mut constants = Vec::new();
    let mut si = Vec::new();
    for (key, dimension, count) in CONSTANTS {
        let Some(mut constant) = keys.table_if_any(key, "a constant", problems) else { continue };
        let span = constant.span.clone();
        let values = constant.need("value", problems).map(|value| numbers(value, problems)).unwrap_or_default();
        let unit_value = constant.need("unit", problems);
        let unit = unit_value.and_then(|value| unit_of(&value, Some(*dimension), problems));
        let standing = constant.need("standing", problems).and_then(|value| standing(&value, problems));
        let source = constant.text("source", problems);
        constant.close(problems);
        let Some((_, words)) = sources.iter().find(|(known, _)| *known == source) else {
            let known: Vec<&str> = sources.iter().map(|(known, _)| known.as_str()).collect();
            problems.add(&span, format!("its source \"{source}\" is not in [sources]"), nearest(&source, &known));
            continue;
        };
        if values.len() != *count || values.iter().any(|value| *value <= 0.0) {
            problems.add(&span, "its value will not do", format!("{count} positive number(s)"));
            continue;
        }
        let (Some(unit), Some(standing)) = (unit, standing) else { continue };
        si.push((*key, values.iter().map(|value| value * unit.si).collect::<Vec<f64>>()));
        let source = words.clone();
        constants.push(PackingConstant { key: (*key).to_owned(), values, unit: unit.symbol, standing, source });
    }
    keys.close(problems);
    let one = |key: &str| si.iter().find(|(known, _)| *known == key).and_then(|(_, values)| values.first().copied());
    let void_fraction = one("void_fraction");
    if let Some(value) = void_fraction
        && value >= 1.0
    {
        problems.add(&(0..0), format!("the void fraction is {value}"), "it lies between 0 and 1");
    }
    let stichlmair =
        si.iter().find(|(key, _)| *key == "stichlmair").and_then(|(_, v)| <[f64; 3]>::try_from(v.as_slice()).ok());
    let doubtful = |constant: &&PackingConstant| matches!(constant.standing, Standing::FromMemory | Standing::Doubtful);
    let packing = Packing {
        entry: Some(name.clone()),
        kind: kind?,
        material: material?,
        specific_area: one("specific_area").map(PerLength::from_si),
        void_fraction,
        factor_later: one("packing_factor").map(PerLength::from_si),
        factor_older: one("packing_factor_older").map(PerLength::from_si),
        factor_dry: one("packing_factor_dry").map(PerLength::from_si),
        corrugation_side: one("corrugation_side").map(Length::from_si),
        corrugation_angle_rad: one("corrugation_angle"),
        nominal_size: one("nominal_size").map(Length::from_si),
        stichlmair,
        billet_schultes: BilletSchultesConstants {
            c_s: one("C_S"),
            c_fl: one("C_Fl"),
            c_h: one("C_h"),
            c_p0: one("C_p0"),
        },
        from_memory: constants.iter().filter(doubtful).map(|constant| constant.key.clone()).collect(),
        stated_in_case: Vec::new(),
    };
    Some(PackingEntry { name, packing, constants, note })
}

fn choice<T: Copy>(
    keys: &mut Keys<'_>,
    key: &'static str,
    known: &[(&'static str, T)],
    problems: &mut Problems<'_>,
) -> Option<T> {
    let value = keys.need(key, problems)?;
    let name = text(&value, problems)?;
    let found = known.iter().find(|(word, _)| *word == name).map(|(_, chosen)| *chosen);
    if found.is_none() {
        let words: Vec<&str> = known.iter().map(|(word, _)| *word).collect();
        problems.add(&value.span(), format!("\"{name}\" will not do"), nearest(&name, &words));
    }
    found
}
