//! The list of forms, what each takes, and the one way from a record to a figure.

use super::super::range::Outside;
use super::super::record::{Dimension, Record};
use super::downcomer::{ApronLoss, DowncomerPractice};
use super::older_chart::GpdOlder;
use super::packing_chart::{FloodPressureDrop, GpdLater};
use super::stichlmair::Stichlmair;
use super::tray_flood::{
    CubicCapacity, FairCapacity, FairEntrainment, HoleAreaFactor, SurfaceTensionFactor, SystemLimit,
};
use super::tray_pressure::{BennettLiquid, DryHead, FairAeration, FrancisWeir, OrificeCoefficient, SurfaceTensionHead};
use super::weep::{EduljeeWeep, LockettBanikWeep};
use super::wetting::WettingMinimum;
use crate::engine::error::{EngineError, EngineResult};

/// Names that a form expects in its record.
#[derive(Clone, Copy, Debug)]
pub struct Shape {
    /// Name in the files.
    pub name: &'static str,
    /// Coefficients, with the number of values of each.
    pub coefficients: &'static [(&'static str, usize)],
    /// Inputs and their dimensions.
    pub inputs: &'static [(&'static str, Dimension)],
    /// Outputs and their dimensions; the first is the main one.
    pub outputs: &'static [(&'static str, Dimension)],
}

/// Arguments of one evaluation, in SI.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Arguments<'a> {
    id: &'a str,
    values: &'a [(&'a str, f64)],
}

impl<'a> Arguments<'a> {
    /// For the record of this id.
    pub fn new(id: &'a str, values: &'a [(&'a str, f64)]) -> Self {
        Self { id, values }
    }

    /// A named argument in SI.
    pub fn get(&self, name: &str) -> EngineResult<f64> {
        self.values.iter().find(|(given, _)| *given == name).map(|(_, value)| *value).ok_or_else(|| {
            EngineError::Record { id: self.id.to_owned(), what: format!("argument \"{name}\" was not given") }
        })
    }

    /// An error for a point at which the correlation has no answer.
    pub fn no_answer(&self, why: &str) -> EngineError {
        EngineError::Record { id: self.id.to_owned(), what: format!("it has no answer there: {why}") }
    }
}

/// What every evaluator offers besides its typed kernels.
pub(crate) trait Evaluator: Sized {
    /// Names in the record.
    const SHAPE: Shape;
    /// Reads the coefficients.
    fn from_record(record: &Record) -> EngineResult<Self>;
    /// A named output in SI; appends what is out of range. `output` is one of the shape's.
    fn evaluate(&self, output: &str, at: &Arguments<'_>, outside: &mut Vec<Outside>) -> EngineResult<f64>;
}

macro_rules! forms {
    ($($(#[$doc:meta])* $form:ident),+ $(,)?) => {
        /// Functional form of a correlation.
        #[derive(Clone, Copy, Debug, PartialEq, Eq)]
        pub enum Form {
            $($(#[$doc])* $form,)+
        }

        impl Form {
            /// All forms.
            pub const ALL: &'static [Self] = &[$(Self::$form,)+];

            /// Names that a record of this form must have.
            pub fn shape(self) -> Shape {
                match self { $(Self::$form => <$form as Evaluator>::SHAPE,)+ }
            }
        }

        /// Builds the evaluator of a record, to see whether it can be built.
        pub(crate) fn try_form(record: &Record) -> EngineResult<()> {
            match record.form { $(Form::$form => <$form as Evaluator>::from_record(record).map(|_| ()),)+ }
        }

        /// A named output of a record, in SI.
        pub(crate) fn evaluate(
            record: &Record,
            output: &str,
            at: &Arguments<'_>,
            outside: &mut Vec<Outside>,
        ) -> EngineResult<f64> {
            match record.form {
                $(Form::$form => <$form as Evaluator>::from_record(record)?.evaluate(output, at, outside),)+
            }
        }
    };
}

forms! {
    /// Flood capacity factor of trays against spacing and flow parameter, exponential.
    FairCapacity,
    /// The same chart as a cubic in the logarithm of the flow parameter.
    CubicCapacity,
    /// Power of the surface tension on the capacity factor.
    SurfaceTensionFactor,
    /// Linear penalty for a small hole area.
    HoleAreaFactor,
    /// Fractional entrainment.
    FairEntrainment,
    /// System limit of trays.
    SystemLimit,
    /// Discharge coefficient of a sieve.
    OrificeCoefficient,
    /// Dry head of a sieve.
    DryHead,
    /// Aerated liquid by froth density.
    BennettLiquid,
    /// Aerated liquid by an aeration factor.
    FairAeration,
    /// Crest over a weir.
    FrancisWeir,
    /// Head to form bubbles.
    SurfaceTensionHead,
    /// Least hole velocity against weeping.
    EduljeeWeep,
    /// Rate of weeping.
    LockettBanikWeep,
    /// Loss under a downcomer apron.
    ApronLoss,
    /// Practice figures of downcomers.
    DowncomerPractice,
    /// Later packing chart as one equation.
    GpdLater,
    /// Older packing chart as six curves.
    GpdOlder,
    /// Pressure drop of a packing at flood.
    FloodPressureDrop,
    /// Dry and irrigated pressure drop of a packing.
    Stichlmair,
    /// Least liquid load of packings.
    WettingMinimum,
}

impl Form {
    /// The form of this name in the files.
    pub fn by_name(name: &str) -> Option<Self> {
        Self::ALL.iter().copied().find(|form| form.shape().name == name)
    }
}
