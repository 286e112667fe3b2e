//! The correlations a sieve tray needs, resolved once from the catalogue.

use super::packing::first_of;
use crate::engine::case::Methods;
use crate::engine::correlation::catalogue::Catalogue;
use crate::engine::correlation::form::downcomer::{ApronLoss, DowncomerPractice};
use crate::engine::correlation::form::tray_flood::{
    CubicCapacity, FairCapacity, FairEntrainment, HoleAreaFactor, SurfaceTensionFactor, SystemLimit,
};
use crate::engine::correlation::form::tray_pressure::{
    BennettLiquid, DryHead, FairAeration, FrancisWeir, OrificeCoefficient, SurfaceTensionHead,
};
use crate::engine::correlation::form::weep::{EduljeeWeep, LockettBanikWeep};
use crate::engine::correlation::form::{Evaluator, Form};
use crate::engine::correlation::record::{Record, Task};
use crate::engine::error::{EngineError, EngineResult};

/// Which model gives the aerated liquid on the tray.
#[derive(Clone, Debug)]
pub(crate) enum LiquidHead {
    /// Bennett, Agrawal and Cook, as in [`TrayMethods::bennett`].
    Bennett,
    /// Fair's aeration factor.
    Aeration(FairAeration),
}

/// The correlations of a sieve tray.
#[derive(Clone, Debug)]
pub(crate) struct TrayMethods {
    pub capacity: FairCapacity,
    pub low_flow: CubicCapacity,
    pub surface_tension: SurfaceTensionFactor,
    pub hole_area: HoleAreaFactor,
    pub entrainment: FairEntrainment,
    pub orifice: OrificeCoefficient,
    pub dry: DryHead,
    pub liquid_head: LiquidHead,
    pub bennett: BennettLiquid,
    pub weir: FrancisWeir,
    pub residual: SurfaceTensionHead,
    pub onset: EduljeeWeep,
    pub weep: LockettBanikWeep,
    pub apron: ApronLoss,
    pub downcomer: DowncomerPractice,
    pub system_limit: SystemLimit,
    /// Name of the flood method.
    pub flood_name: String,
    /// Name of the liquid-head method.
    pub liquid_head_name: String,
    /// Ids of all records at work.
    pub records: Vec<String>,
}

impl TrayMethods {
    /// Looks every correlation up.
    ///
    /// # Errors
    /// A method that is not in the catalogue, or a record that cannot work.
    pub fn new(catalogue: &Catalogue, methods: &Methods) -> EngineResult<Self> {
        let mut records = Vec::new();
        let flood = of_method(catalogue, Task::TrayFlood, &methods.tray_flood, Form::FairCapacity)?;
        records.push(flood.id.clone());
        let liquid = catalogue.records_of(Task::AeratedLiquid, &methods.aerated_liquid);
        let liquid = liquid.first().copied().ok_or_else(|| no_such(Task::AeratedLiquid, &methods.aerated_liquid))?;
        records.push(liquid.id.clone());
        let liquid_head = LiquidHead::from_record(liquid)?;
        let mut companion = |form: Form| -> EngineResult<&Record> {
            let record = first_of(catalogue, form)?;
            records.push(record.id.clone());
            Ok(record)
        };
        Ok(Self {
            capacity: FairCapacity::from_record(flood)?,
            low_flow: CubicCapacity::from_record(companion(Form::CubicCapacity)?)?,
            surface_tension: SurfaceTensionFactor::from_record(companion(Form::SurfaceTensionFactor)?)?,
            hole_area: HoleAreaFactor::from_record(companion(Form::HoleAreaFactor)?)?,
            entrainment: FairEntrainment::from_record(companion(Form::FairEntrainment)?)?,
            orifice: OrificeCoefficient::from_record(companion(Form::OrificeCoefficient)?)?,
            dry: DryHead::from_record(companion(Form::DryHead)?)?,
            liquid_head,
            bennett: BennettLiquid::from_record(companion(Form::BennettLiquid)?)?,
            weir: FrancisWeir::from_record(companion(Form::FrancisWeir)?)?,
            residual: SurfaceTensionHead::from_record(companion(Form::SurfaceTensionHead)?)?,
            onset: EduljeeWeep::from_record(companion(Form::EduljeeWeep)?)?,
            weep: LockettBanikWeep::from_record(companion(Form::LockettBanikWeep)?)?,
            apron: ApronLoss::from_record(companion(Form::ApronLoss)?)?,
            downcomer: DowncomerPractice::from_record(companion(Form::DowncomerPractice)?)?,
            system_limit: SystemLimit::from_record(companion(Form::SystemLimit)?)?,
            flood_name: methods.tray_flood.clone(),
            liquid_head_name: methods.aerated_liquid.clone(),
            records,
        })
    }

    /// Swaps the liquid-head model for the other one, to see what hangs on it.
    pub fn take_other_liquid_head(&mut self, catalogue: &Catalogue) -> EngineResult<()> {
        let form = match self.liquid_head {
            LiquidHead::Bennett => Form::FairAeration,
            LiquidHead::Aeration(_) => Form::BennettLiquid,
        };
        let record = first_of(catalogue, form)?;
        self.liquid_head = LiquidHead::from_record(record)?;
        self.liquid_head_name.clone_from(&record.title);
        Ok(())
    }
}

impl LiquidHead {
    fn from_record(record: &Record) -> EngineResult<Self> {
        match record.form {
            Form::FairAeration => FairAeration::from_record(record).map(Self::Aeration),
            _ => Ok(Self::Bennett),
        }
    }
}

fn no_such(task: Task, method: &str) -> EngineError {
    EngineError::Record { id: method.to_owned(), what: format!("no record serves it as {}", task.name()) }
}

/// The record of a method that has the form this program can compose a flood from.
fn of_method<'a>(catalogue: &'a Catalogue, task: Task, method: &str, form: Form) -> EngineResult<&'a Record> {
    let records = catalogue.records_of(task, method);
    records.into_iter().find(|record| record.form == form).ok_or_else(|| no_such(task, method))
}
