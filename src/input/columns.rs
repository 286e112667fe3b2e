//! Columns of the loads, shared by the CSV table and the rows in the case file, and a row made of them.

use super::quantity::{self as kind, Kind};
use super::reader::{Sink, Span};
use super::unit_table::Dimension;
use crate::engine::case::Row;
use crate::engine::units::Si;

/// A column with a unit.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Column {
    /// Name in the header, and key in the case file.
    pub(crate) name: &'static str,
    /// Dimension of its unit.
    pub(crate) dimension: Dimension,
    /// What messages call it.
    pub(crate) noun: &'static str,
    /// A sensible header.
    pub(crate) example: &'static str,
    /// True if a table must have it.
    pub(crate) required: bool,
    /// True if zero is allowed.
    pub(crate) zero: bool,
}

const fn column<K: Kind>(name: &'static str, example: &'static str, required: bool) -> Column {
    Column { name, dimension: K::DIMENSION, noun: K::NOUN, example, required, zero: false }
}

/// How many columns have a unit.
pub(crate) const COUNT: usize = 9;

/// The columns, in the order of [`Cells`].
pub(crate) const COLUMNS: [Column; COUNT] = [
    column::<kind::MassRate>("vapour_flow", "vapour_flow [t/h]", true),
    Column { zero: true, ..column::<kind::MassRate>("liquid_flow", "liquid_flow [t/h]", true) },
    column::<kind::MassDensity>("vapour_density", "vapour_density [kg/m3]", true),
    column::<kind::MassDensity>("liquid_density", "liquid_density [kg/m3]", true),
    column::<kind::Viscosity>("vapour_viscosity", "vapour_viscosity [mPa.s]", true),
    column::<kind::Viscosity>("liquid_viscosity", "liquid_viscosity [mPa.s]", true),
    column::<kind::SurfaceTension>("surface_tension", "surface_tension [mN/m]", true),
    column::<kind::Temperature>("temperature", "temperature [degC]", false),
    column::<kind::Pressure>("pressure", "pressure [bar]", false),
];

/// One cell: its SI value and where it was typed.
pub(crate) type Cell = Option<(f64, Span)>;
/// One row, in the order of [`COLUMNS`].
pub(crate) type Cells = [Cell; COUNT];

/// A row of the loads that belongs to a section and a point.
#[derive(Clone, Debug)]
pub(crate) struct LoadRow {
    /// Index of the section.
    pub(crate) section: usize,
    /// Name of the point.
    pub(crate) point: String,
    /// Where the row stands.
    pub(crate) span: Span,
    /// The row; None if something in it is wrong.
    pub(crate) row: Option<Row>,
}

/// Makes a row of cells, checking what only shows in several of them.
pub(crate) fn row(stage: String, cells: Cells, sink: &mut Sink) -> Option<Row> {
    let [
        vapour_flow,
        liquid_flow,
        vapour_density,
        liquid_density,
        vapour_viscosity,
        liquid_viscosity,
        tension,
        temperature,
        pressure,
    ] = cells;
    if let (Some((vapour, span)), Some((liquid, _))) = (&vapour_density, &liquid_density)
        && vapour >= liquid
    {
        let shown = |density: &f64| (density * 1e6).round() / 1e6;
        let message =
            format!("the vapour ({} kg/m3) is not lighter than its liquid ({} kg/m3)", shown(vapour), shown(liquid));
        let help = "check the two density columns and their units; were they exchanged?";
        sink.help(span.clone(), message, "not lighter than the liquid", help);
        return None;
    }
    let si = |cell: &Cell| cell.as_ref().map(|(si, _)| *si);
    Some(Row {
        stage,
        vapour_flow: Si::from_si(si(&vapour_flow)?),
        liquid_flow: Si::from_si(si(&liquid_flow)?),
        vapour_density: Si::from_si(si(&vapour_density)?),
        liquid_density: Si::from_si(si(&liquid_density)?),
        vapour_viscosity: Si::from_si(si(&vapour_viscosity)?),
        liquid_viscosity: Si::from_si(si(&liquid_viscosity)?),
        surface_tension: Si::from_si(si(&tension)?),
        temperature: si(&temperature).map(Si::from_si),
        pressure: si(&pressure).map(Si::from_si),
    })
}
