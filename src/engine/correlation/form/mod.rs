//! Functional forms: one small evaluator for each, in SI, built from a record.

mod dispatch;
pub(crate) mod downcomer;
pub(crate) mod older_chart;
pub(crate) mod packing_chart;
pub(crate) mod stichlmair;
pub(crate) mod tray_flood;
pub(crate) mod tray_pressure;
pub(crate) mod weep;
pub(crate) mod wetting;

pub(crate) use dispatch::{Arguments, Evaluator, evaluate, try_form};
pub use dispatch::{Form, Shape};
