//! One published correlation as data: coefficients, units as published, ranges, source and check points.
//!
//! A record is the only place where a correlation's numbers live. It is pure data; [`super::form`] turns it into an
//! evaluator, and reading it from a file is the business of the input layer.

use super::form::{self, Form};
use super::range::Outside;
use crate::engine::error::{EngineError, EngineResult, finite};

/// What a case may choose a method for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Task {
    /// Jet flood of trays.
    TrayFlood,
    /// Flood of packings.
    PackingFlood,
    /// Pressure drop of packings.
    PackingPressureDrop,
    /// Aerated liquid on trays.
    AeratedLiquid,
}

impl Task {
    /// All tasks, in the order of the case file.
    pub const ALL: [Self; 4] = [Self::TrayFlood, Self::PackingFlood, Self::PackingPressureDrop, Self::AeratedLiquid];

    /// The key of `[methods]`.
    pub fn name(self) -> &'static str {
        match self {
            Self::TrayFlood => "tray_flood",
            Self::PackingFlood => "packing_flood",
            Self::PackingPressureDrop => "packing_pressure_drop",
            Self::AeratedLiquid => "aerated_liquid",
        }
    }
}

/// A task and the name under which a case selects the method that this record belongs to.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Serves {
    /// What for.
    pub task: Task,
    /// Name of the method; several records may make up one method.
    pub method: String,
}

/// How a number was come by.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Standing {
    /// Seen in the named publication.
    Read,
    /// Seen restated elsewhere.
    ReadSecondHand,
    /// Remembered, not confirmed.
    FromMemory,
    /// Sources disagree, or the figure rests on an inference.
    Doubtful,
}

impl Standing {
    /// The words used in the files and in text.
    pub fn name(self) -> &'static str {
        match self {
            Self::Read => "read",
            Self::ReadSecondHand => "read second-hand",
            Self::FromMemory => "from memory",
            Self::Doubtful => "doubtful",
        }
    }
}

/// Where the numbers come from and where they were seen.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Source {
    /// Key of the publication in `sources.bib`.
    pub key: String,
    /// Where it was read, in words or as a key.
    pub read_in: String,
    /// Equation, table or page.
    pub location: String,
    /// How far to trust the copy.
    pub standing: Standing,
}

/// Dimension of an input or output; units of another dimension are refused on reading.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Dimension {
    /// A ratio.
    Dimensionless,
    /// m.
    Length,
    /// m2.
    Area,
    /// m3/s.
    VolumeRate,
    /// m/s: velocities, capacity factors, liquid loads and weep rates per area.
    Velocity,
    /// kg/m3.
    Density,
    /// Pa s.
    Viscosity,
    /// m2/s.
    KinematicViscosity,
    /// N/m.
    SurfaceTension,
    /// Pa^0.5.
    FFactor,
    /// m3/(s m).
    WeirLoad,
    /// Pa/m.
    Gradient,
    /// 1/m.
    PerLength,
    /// s.
    Time,
    /// rad.
    Angle,
    /// (m/s) (1/m)^0.5, the capacity parameter of the later packing chart before its viscosity term.
    CapacityParameter,
}

/// A unit as the publication states it.
#[derive(Clone, Debug, PartialEq)]
pub struct Unit {
    /// Spelling in the file.
    pub symbol: String,
    /// One of it in coherent SI units.
    pub si: f64,
    /// Its dimension.
    pub dimension: Dimension,
}

/// An argument of a correlation.
#[derive(Clone, Debug, PartialEq)]
pub struct Input {
    /// Name.
    pub name: String,
    /// Unit as published; `min` and `max` are in it.
    pub unit: Unit,
    /// Lower end of the published range, if one is stated.
    pub min: Option<f64>,
    /// Upper end of the published range, if one is stated.
    pub max: Option<f64>,
    /// Standing of the range, what happens outside it, or that the source states none.
    pub range_note: String,
}

/// A result of a correlation.
#[derive(Clone, Debug, PartialEq)]
pub struct Output {
    /// Name.
    pub name: String,
    /// Unit as published.
    pub unit: Unit,
}

/// One coefficient: a number or a short list.
#[derive(Clone, Debug, PartialEq)]
pub struct Coefficient {
    /// Name.
    pub name: String,
    /// One value, or those of a list.
    pub values: Vec<f64>,
    /// True if it is remembered and not confirmed.
    pub from_memory: bool,
}

/// Where a check value comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Origin {
    /// Printed in a publication.
    PublishedNumber,
    /// Worked example of a publication.
    WorkedExample,
    /// Read off a published figure.
    ReadFromFigure,
    /// Worked out again from the formula, apart from this program; not published.
    Recomputed,
    /// Given by another implementation.
    OtherImplementation,
}

impl Origin {
    /// The words used in the files.
    pub fn name(self) -> &'static str {
        match self {
            Self::PublishedNumber => "published-number",
            Self::WorkedExample => "worked-example",
            Self::ReadFromFigure => "read-from-figure",
            Self::Recomputed => "recomputed",
            Self::OtherImplementation => "other-implementation",
        }
    }
}

/// One point at which the answer is known from elsewhere.
#[derive(Clone, Debug, PartialEq)]
pub struct Check {
    /// Name of the output it checks.
    pub output: String,
    /// Arguments in the record's published units.
    pub at: Vec<(String, f64)>,
    /// Expected value in the unit of the output.
    pub expect: f64,
    /// Greatest difference that is no miss, in the unit of the output: half a unit in the last printed place, or the
    /// stated reading error.
    pub tolerance: f64,
    /// Where the value comes from.
    pub origin: Origin,
    /// Which table, example or figure, in words.
    pub source: String,
}

/// How one check came out.
#[derive(Clone, Debug, PartialEq)]
pub struct CheckOutcome {
    /// The check.
    pub check: Check,
    /// What the evaluator gave, in the unit of the output.
    pub got: EngineResult<f64>,
    /// True if it agrees within the check's tolerance.
    pub passed: bool,
    /// Arguments outside the published range.
    pub outside: Vec<Outside>,
}

/// One published correlation.
#[derive(Clone, Debug, PartialEq)]
pub struct Record {
    /// Identifier; the file's stem.
    pub id: String,
    /// Title for a reader.
    pub title: String,
    /// Functional form.
    pub form: Form,
    /// Tasks and methods that a case may select it for; empty for a fixed part of the chain.
    pub serves: Vec<Serves>,
    /// Source.
    pub source: Source,
    /// Arguments.
    pub inputs: Vec<Input>,
    /// Results; at least one, the first is the main one.
    pub outputs: Vec<Output>,
    /// Coefficients.
    pub coefficients: Vec<Coefficient>,
    /// Equation in words or ASCII.
    pub equation: String,
    /// Notes: surprises, what is read and what is not.
    pub notes: String,
    /// Check points; empty where only the head of a file was read.
    pub checks: Vec<Check>,
}

impl Record {
    /// The main output at arguments in published units.
    ///
    /// # Errors
    /// [`EngineError::Record`] for a missing argument, an unusable record or a point without an answer;
    /// [`EngineError::NotFinite`] if the figure is not finite.
    pub fn evaluate(&self, inputs: &[(&str, f64)]) -> EngineResult<f64> {
        let main = self.outputs.first().map_or("", |output| output.name.as_str());
        self.evaluate_output(main, inputs).map(|(value, _)| value)
    }

    /// A named output at arguments in published units, with what lies outside the published range. It goes through the
    /// same evaluators as everything else.
    ///
    /// # Errors
    /// As [`Record::evaluate`], and [`EngineError::Record`] for an unknown output.
    pub fn evaluate_output(&self, output: &str, inputs: &[(&str, f64)]) -> EngineResult<(f64, Vec<Outside>)> {
        let unit = self.output_unit(output)?;
        let mut at = Vec::with_capacity(inputs.len());
        for &(name, value) in inputs {
            let input = self.inputs.iter().find(|input| input.name == name).ok_or_else(|| {
                self.unusable(format!(
                    "it takes no argument \"{name}\"; it takes {}",
                    self.inputs.iter().map(|input| input.name.as_str()).collect::<Vec<_>>().join(", ")
                ))
            })?;
            at.push((name, finite(value, name)? * input.unit.si));
        }
        let arguments = form::Arguments::new(&self.id, &at);
        let mut outside = Vec::new();
        let si = form::evaluate(self, output, &arguments, &mut outside)?;
        let value = finite(si / unit, &format!("{output} of correlation \"{}\"", self.id))?;
        Ok((value, outside))
    }

    /// Runs the check points that the record carries.
    pub fn run_checks(&self) -> Vec<CheckOutcome> {
        self.checks
            .iter()
            .map(|check| {
                let at: Vec<(&str, f64)> = check.at.iter().map(|(name, value)| (name.as_str(), *value)).collect();
                let (got, outside) = match self.evaluate_output(&check.output, &at) {
                    Ok((value, outside)) => (Ok(value), outside),
                    Err(error) => (Err(error), Vec::new()),
                };
                // Half a unit in the last place is a closed interval; the factor only forgives binary rounding of it.
                let passed =
                    got.as_ref().is_ok_and(|value| (value - check.expect).abs() <= check.tolerance * (1.0 + 1e-9));
                CheckOutcome { check: check.clone(), got, passed, outside }
            })
            .collect()
    }

    /// True if this record is part of that method for that task.
    pub fn serves(&self, task: Task, method: &str) -> bool {
        self.serves.iter().any(|serves| serves.task == task && serves.method == method)
    }

    /// Names of the coefficients that are remembered and not confirmed.
    pub fn from_memory(&self) -> Vec<&str> {
        self.coefficients.iter().filter(|c| c.from_memory).map(|c| c.name.as_str()).collect()
    }

    /// A coefficient that is one number.
    ///
    /// # Errors
    /// [`EngineError::Record`] if it is missing, a list or not finite.
    pub fn number(&self, name: &str) -> EngineResult<f64> {
        let [value] = self.numbers::<1>(name)?;
        Ok(value)
    }

    /// A coefficient that is a list of `N` numbers.
    ///
    /// # Errors
    /// [`EngineError::Record`] if it is missing, of another length or not finite.
    pub fn numbers<const N: usize>(&self, name: &str) -> EngineResult<[f64; N]> {
        let coefficient = self
            .coefficients
            .iter()
            .find(|c| c.name == name)
            .ok_or_else(|| self.unusable(format!("coefficient \"{name}\" is missing")))?;
        let values: [f64; N] = coefficient.values.as_slice().try_into().map_err(|_| {
            self.unusable(format!("coefficient \"{name}\" has {} values; {N} are needed", coefficient.values.len()))
        })?;
        match values.iter().find(|v| !v.is_finite()) {
            Some(bad) => Err(self.unusable(format!("coefficient \"{name}\" is {bad}; it must be finite"))),
            None => Ok(values),
        }
    }

    /// SI value of one published unit of an input.
    ///
    /// # Errors
    /// [`EngineError::Record`] if there is no such input.
    pub fn input_unit(&self, name: &str) -> EngineResult<f64> {
        let input = self.inputs.iter().find(|input| input.name == name);
        input.map(|i| i.unit.si).ok_or_else(|| self.unusable(format!("input \"{name}\" is missing")))
    }

    /// SI value of one published unit of an output.
    ///
    /// # Errors
    /// [`EngineError::Record`] if there is no such output.
    pub fn output_unit(&self, name: &str) -> EngineResult<f64> {
        let output = self.outputs.iter().find(|output| output.name == name);
        output.map(|o| o.unit.si).ok_or_else(|| self.unusable(format!("output \"{name}\" is missing")))
    }

    /// An error about this record.
    pub(crate) fn unusable(&self, what: impl Into<String>) -> EngineError {
        EngineError::Record { id: self.id.clone(), what: what.into() }
    }
}
