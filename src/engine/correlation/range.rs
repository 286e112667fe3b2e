//! Published ranges, and what to say of an argument outside its own.

use super::record::Record;
use std::fmt;
use std::sync::Arc;

/// One argument outside its published range. Figures are in the published unit.
#[derive(Clone, Debug, PartialEq)]
pub struct Outside {
    /// Identifier of the correlation.
    pub correlation: String,
    /// Name of the argument.
    pub input: String,
    /// Its value.
    pub value: f64,
    /// Lower end of the range, if there is one.
    pub min: Option<f64>,
    /// Upper end of the range, if there is one.
    pub max: Option<f64>,
    /// Unit of the three.
    pub unit: String,
    /// What the method does out there, and the standing of the range.
    pub note: String,
}

impl fmt::Display for Outside {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let unit = if self.unit == "1" { String::new() } else { format!(" {}", self.unit) };
        write!(f, "{}: {} {}{unit} is outside ", self.correlation, self.input.replace('_', " "), short(self.value))?;
        match (self.min, self.max) {
            (Some(min), Some(max)) => write!(f, "{} to {}{unit}", short(min), short(max))?,
            (Some(min), None) => write!(f, "its range from {}{unit} up", short(min))?,
            (None, Some(max)) => write!(f, "its range up to {}{unit}", short(max))?,
            (None, None) => write!(f, "its range")?,
        }
        if self.note.is_empty() { Ok(()) } else { write!(f, " ({})", self.note) }
    }
}

/// Four significant digits, without trailing zeros.
fn short(value: f64) -> String {
    let magnitude = if value == 0.0 { 0.0 } else { value.abs().log10().floor() };
    let decimals = if magnitude >= 3.0 { 0 } else { (3.0 - magnitude).min(12.0) as usize };
    let text = format!("{value:.decimals$}");
    if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.').to_owned() } else { text }
}

#[derive(Clone, Debug, PartialEq)]
struct Limits {
    name: String,
    unit: String,
    unit_si: f64,
    min: Option<f64>,
    max: Option<f64>,
    note: String,
}

/// Published ranges of one record's arguments. Cheap to clone.
#[derive(Clone, Debug, PartialEq)]
pub struct Domain(Arc<(String, Vec<Limits>)>);

impl Domain {
    /// Of a record.
    pub fn new(record: &Record) -> Self {
        let limits = record
            .inputs
            .iter()
            .filter(|input| input.min.is_some() || input.max.is_some())
            .map(|input| Limits {
                name: input.name.clone(),
                unit: input.unit.symbol.clone(),
                unit_si: input.unit.si,
                min: input.min,
                max: input.max,
                note: input.range_note.clone(),
            })
            .collect();
        Self(Arc::new((record.id.clone(), limits)))
    }

    /// Identifier of the correlation.
    pub fn correlation(&self) -> &str {
        &self.0.0
    }

    /// Appends one entry per argument (name, value in SI) that lies outside its range. The ends belong to the range, with
    /// a part in 1e9 to spare for conversion of units.
    pub fn outside(&self, arguments: &[(&str, f64)], found: &mut Vec<Outside>) {
        for (name, value_si) in arguments {
            let Some(limits) = self.0.1.iter().find(|limits| limits.name == *name) else { continue };
            let value = value_si / limits.unit_si;
            let slack = 1e-9 * value.abs();
            if limits.min.is_some_and(|min| value < min - slack) || limits.max.is_some_and(|max| value > max + slack) {
                found.push(Outside {
                    correlation: self.0.0.clone(),
                    input: limits.name.clone(),
                    value,
                    min: limits.min,
                    max: limits.max,
                    unit: limits.unit.clone(),
                    note: limits.note.clone(),
                });
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn outside(value: f64, min: Option<f64>, max: Option<f64>, unit: &str) -> String {
        let note = "held there".to_owned();
        Outside { correlation: "c".into(), input: "tray_spacing".into(), value, min, max, unit: unit.into(), note }
            .to_string()
    }

    #[test]
    fn sentence_names_value_range_and_unit() {
        assert_eq!(
            outside(1000.0, Some(150.0), Some(900.0), "mm"),
            "c: tray spacing 1000 mm is outside 150 to 900 mm (held there)"
        );
        assert_eq!(
            outside(0.0041, Some(0.01), None, "1"),
            "c: tray spacing 0.0041 is outside its range from 0.01 up (held there)"
        );
        assert_eq!(
            outside(3.0, None, Some(2.0), "m"),
            "c: tray spacing 3 m is outside its range up to 2 m (held there)"
        );
    }
}
