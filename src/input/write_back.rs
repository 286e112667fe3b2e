//! Writes a case again with the found numbers in place: comments, order and everything else kept.

use crate::engine::units::{Length, Si};
use toml_edit::{Array, DocumentMut, Item, TableLike, Value};

/// What was found.
#[derive(Clone, Debug, PartialEq)]
pub struct Found {
    /// Diameter above the wall.
    pub above: Length,
    /// Diameter beside the wall.
    pub wall_zone: Length,
    /// Diameter below the wall.
    pub below: Length,
    /// Positions of the walls (inner, rising) of each band (outer, top to bottom; one for a straight wall).
    pub positions: Vec<Vec<Length>>,
}

/// Why a case cannot be written again.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum WriteBackError {
    /// The text is not TOML.
    #[error("the case cannot be read as TOML: {0}")]
    Toml(String),
    /// The text has no such table.
    #[error("the case has no {0}, so there is nowhere to write what was found")]
    Missing(&'static str),
    /// There are not as many positions as bands.
    #[error("the case has {bands} band(s) of the wall, but positions were found for {found}")]
    Bands {
        /// In the case.
        bands: usize,
        /// Found.
        found: usize,
    },
    /// A found number is not finite.
    #[error("{0} came out as no finite number, so the case is not written")]
    NotFinite(&'static str),
}

/// Digits behind the point of a length in m: a tenth of a micrometre, far below any workshop's tolerance.
const DECIMALS: usize = 7;

/// The case's text with `diameter = "size"` and wall positions given by a rule replaced by lengths. Lengths that the
/// case states already stay as they are, and so does everything else.
///
/// # Errors
/// [`WriteBackError`] if the text is no TOML, has no `[shell]` or `[wall]`, or does not fit what was found.
pub fn write_back(case_text: &str, found: &Found) -> Result<String, WriteBackError> {
    let mut document: DocumentMut =
        case_text.parse().map_err(|error: toml_edit::TomlError| WriteBackError::Toml(error.message().to_owned()))?;
    write_shell(&mut document, found)?;
    write_wall(&mut document, found)?;
    Ok(document.to_string())
}

fn write_shell(document: &mut DocumentMut, found: &Found) -> Result<(), WriteBackError> {
    let shell = table(document, "shell").ok_or(WriteBackError::Missing("[shell]"))?;
    let diameter = shell.get_mut("diameter").ok_or(WriteBackError::Missing("diameter in [shell]"))?;
    if let Some(parts) = diameter.as_table_like_mut() {
        for (key, length) in [("above", found.above), ("wall_zone", found.wall_zone), ("below", found.below)] {
            if let Some(part) = parts.get_mut(key).filter(|part| part.as_str() == Some("size")) {
                replace(part, text_value(length, "a diameter")?);
            }
        }
    } else if diameter.as_str() == Some("size") {
        replace(diameter, text_value(found.wall_zone, "the diameter")?);
    }
    Ok(())
}

fn write_wall(document: &mut DocumentMut, found: &Found) -> Result<(), WriteBackError> {
    let wall = table(document, "wall").ok_or(WriteBackError::Missing("[wall]"))?;
    let mut holders: Vec<&mut dyn TableLike> = Vec::new();
    if wall.contains_key("band") {
        match wall.get_mut("band") {
            Some(Item::ArrayOfTables(bands)) => {
                holders.extend(bands.iter_mut().map(|band| band as &mut dyn TableLike));
            }
            Some(Item::Value(Value::Array(bands))) => {
                let inline = bands.iter_mut().filter_map(Value::as_inline_table_mut);
                holders.extend(inline.map(|band| band as &mut dyn TableLike));
            }
            _ => return Err(WriteBackError::Missing("[[wall.band]]")),
        }
    } else {
        holders.push(wall);
    }
    if holders.len() != found.positions.len() {
        return Err(WriteBackError::Bands { bands: holders.len(), found: found.positions.len() });
    }
    for (holder, positions) in holders.into_iter().zip(&found.positions) {
        let position = holder.get_mut("position").ok_or(WriteBackError::Missing("position of the wall"))?;
        if position.as_str().is_some_and(is_rule) {
            replace(position, positions_value(positions)?);
        }
    }
    Ok(())
}

/// The words of `position` that are rules and not lengths.
pub(crate) const POSITION_RULES: [&str; 3] = ["equal flood", "equal pressure drop", "vapour load"];

fn is_rule(text: &str) -> bool {
    POSITION_RULES.contains(&text)
}

fn table<'a>(document: &'a mut DocumentMut, key: &str) -> Option<&'a mut dyn TableLike> {
    document.get_mut(key)?.as_table_like_mut()
}

/// Replaces a value but keeps the space and comment around it.
fn replace(item: &mut Item, mut value: Value) {
    if let Some(old) = item.as_value() {
        *value.decor_mut() = old.decor().clone();
    }
    *item = Item::Value(value);
}

fn positions_value(positions: &[Length]) -> Result<Value, WriteBackError> {
    if let [only] = positions {
        return text_value(*only, "the wall's position");
    }
    let mut array = Array::new();
    for position in positions {
        array.push(text_value(*position, "a wall's position")?);
    }
    Ok(Value::Array(array))
}

fn text_value(length: Length, what: &'static str) -> Result<Value, WriteBackError> {
    let metres = length.si();
    if !metres.is_finite() {
        return Err(WriteBackError::NotFinite(what));
    }
    Ok(Value::from(length_text(metres)))
}

/// A length in m with at least two decimals and no more than are needed.
fn length_text(length_m: f64) -> String {
    let long = format!("{length_m:.DECIMALS$}");
    let short = long.trim_end_matches('0');
    let decimals = short.len() - short.find('.').map_or(short.len(), |point| point + 1);
    let kept = format!("{length_m:.*}", decimals.max(2));
    let zero = kept.trim_start_matches('-').chars().all(|c| c == '0' || c == '.');
    format!("{} m", if zero { kept.trim_start_matches('-') } else { &kept })
}
