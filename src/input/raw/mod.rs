//! The case file as it is typed. The structs mirror it key by key; what they mean is `lower`'s business.

mod bid;
mod case;
mod choice;
mod criteria;
mod internals;
mod vessel;

pub(crate) use bid::RawBid;
pub(crate) use case::{RawDevice, RawFile, RawLoad, RawMethods, RawPoint, RawSection, RawSeparation, RawStream};
pub(crate) use choice::{CapacityText, DiameterText, PositionText, ResistanceText, StageText};
pub(crate) use criteria::{RawCriteria, RawCriteriaTable};
pub(crate) use internals::{RawBilletSchultes, RawInternals};
pub(crate) use vessel::{RawBand, RawCompartment, RawDiameters, RawShell, RawWall};
