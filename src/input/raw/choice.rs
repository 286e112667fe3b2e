//! Values that may be typed in more than one way.

use super::vessel::RawDiameters;
use crate::input::quantity as kind;
use crate::input::quantity::Kind;
use crate::input::reader::{At, FromTable, Item, List, Quantity, Read, Sink, Span};
use toml::de::DeValue;

/// `diameter`: a text, or a table of the three parts.
#[derive(Clone, Debug)]
pub(crate) enum DiameterText {
    /// "size" or a length.
    One(At<String>),
    /// A table.
    Parts(Box<RawDiameters>),
}

impl Read for DiameterText {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        match item.value.get_ref() {
            DeValue::Table(table) => Some(Self::Parts(Box::new(RawDiameters::from_table(table, item.span(), sink)))),
            DeValue::String(_) => At::<String>::read(item, sink).map(Self::One),
            _ => {
                item.expected("\"size\", a length, or a table of above, wall_zone and below", "\"3.10 m\"", sink);
                None
            }
        }
    }
}

/// `position`: a text, or a list of lengths.
#[derive(Clone, Debug)]
pub(crate) enum PositionText {
    /// A rule or a length.
    One(At<String>),
    /// Lengths.
    Many(List<Quantity<kind::Length>>),
}

impl PositionText {
    /// Where it was typed.
    pub(crate) fn span(&self) -> Span {
        match self {
            Self::One(text) => text.span.clone(),
            Self::Many(list) => list.span.clone(),
        }
    }
}

impl Read for PositionText {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        match item.value.get_ref() {
            DeValue::Array(_) => List::read(item, sink).map(Self::Many),
            DeValue::String(_) => At::<String>::read(item, sink).map(Self::One),
            _ => {
                item.expected("a rule, a length, or a list of lengths", "\"equal flood\" or \"0.210 m\"", sink);
                None
            }
        }
    }
}

/// `stage`: a text or a whole number.
#[derive(Clone, Debug)]
pub(crate) struct StageText(pub(crate) At<String>);

impl Read for StageText {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        match item.value.get_ref() {
            DeValue::Integer(integer) => {
                Some(Self(At { value: integer.as_str().to_owned(), span: item.span(), key: item.key.clone() }))
            }
            _ => At::<String>::read(item, sink).map(Self),
        }
    }
}

/// `capacity`: one velocity, or pairs of flow parameter and velocity.
#[derive(Clone, Debug)]
pub(crate) enum CapacityText {
    /// For every flow parameter.
    One(Quantity<kind::Velocity>),
    /// By flow parameter.
    Pairs(List<Pair<At<f64>, Quantity<kind::Velocity>>>),
}

impl Read for CapacityText {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        match item.value.get_ref() {
            DeValue::Array(_) => List::read(item, sink).map(Self::Pairs),
            _ => Quantity::read(item, sink).map(Self::One),
        }
    }
}

/// `resistance`: a number (or a gradient) for a power law, or pairs of F-factor and gradient.
#[derive(Clone, Debug)]
pub(crate) enum ResistanceText {
    /// Pa/m at F = 1 Pa^0.5.
    Number(At<f64>),
    /// The same with a unit.
    Gradient(Quantity<kind::Gradient>),
    /// Measured points.
    Pairs(List<Pair<Quantity<kind::FFactor>, Quantity<kind::Gradient>>>),
}

impl Read for ResistanceText {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        match item.value.get_ref() {
            DeValue::Array(_) => List::read(item, sink).map(Self::Pairs),
            DeValue::String(_) => Quantity::read(item, sink).map(Self::Gradient),
            DeValue::Integer(_) | DeValue::Float(_) => At::read(item, sink).map(Self::Number),
            _ => {
                let example = format!("80.0, or [[\"1.0 Pa^0.5\", \"0.9 {}\"], ...]", "mbar/m");
                item.expected("a number (Pa/m at F = 1 Pa^0.5) or a list of measured points", &example, sink);
                None
            }
        }
    }
}

/// Two values in a list of their own.
#[derive(Clone, Debug)]
pub(crate) struct Pair<A, B> {
    /// The first.
    pub(crate) first: A,
    /// The second.
    pub(crate) second: B,
    /// Of both.
    pub(crate) span: Span,
}

impl<A: Read, B: Read> Read for Pair<A, B> {
    fn read(item: &Item<'_, '_>, sink: &mut Sink) -> Option<Self> {
        let values: Vec<_> = item.value.get_ref().as_array().map(|array| array.iter().collect()).unwrap_or_default();
        let [first, second] = values.as_slice() else {
            let example = format!("[[0.05, \"{}\"], [0.20, \"0.075 m/s\"]]", kind::Velocity::EXAMPLE);
            item.expected("a pair in brackets", &example, sink);
            return None;
        };
        let part =
            |value, which: &str| Item { value, key: item.key.clone(), name: format!("the {which} of each pair") };
        let first = A::read(&part(first, "first"), sink);
        let second = B::read(&part(second, "second"), sink);
        Some(Self { first: first?, second: second?, span: item.span() })
    }
}
