//! One packed bed: flood by pressure-drop charts, friction by Stichlmair or by the later chart.
//!
//! Velocities are superficial, on the area of the place. A packing factor belongs to one chart and is never carried into another.

use super::load::StageLoad;
use crate::engine::case::Methods;
use crate::engine::correlation::catalogue::Catalogue;
use crate::engine::correlation::form::older_chart::GpdOlder;
use crate::engine::correlation::form::packing_chart::{FloodPressureDrop, GpdLater};
use crate::engine::correlation::form::stichlmair::{Stichlmair, StichlmairBed};
use crate::engine::correlation::form::{Evaluator, Form};
use crate::engine::correlation::packing::{Packing, PackingKind};
use crate::engine::correlation::range::Outside;
use crate::engine::correlation::record::{Record, Task};
use crate::engine::error::{EngineError, EngineResult};
use crate::engine::units::Si;

/// What a packing lacks for the method that was asked for.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Missing {
    pub method: String,
    pub why: String,
}

/// A packed bed with its correlations.
#[derive(Clone, Debug)]
pub(crate) struct PackedBed {
    later: Option<LaterFlood>,
    older: Option<OlderFlood>,
    flood_name: String,
    drop: BedDrop,
    drop_name: String,
    system_factor: f64,
    /// Ids of the records at work.
    pub records: Vec<String>,
    /// Constants of the packing at work, by key.
    pub constants: Vec<&'static str>,
}

#[derive(Clone, Debug)]
struct LaterFlood {
    chart: GpdLater,
    flood_drop: FloodPressureDrop,
    factor_per_m: f64,
    flood_pa_m: f64,
}

#[derive(Clone, Debug)]
struct OlderFlood {
    chart: GpdOlder,
    flood_drop: FloodPressureDrop,
    factor_per_m: f64,
    flood_pa_m: f64,
}

#[derive(Clone, Debug)]
enum BedDrop {
    Stichlmair(StichlmairBed),
    Later { chart: GpdLater, factor_per_m: f64 },
    Older { chart: Box<GpdOlder>, factor_per_m: f64 },
}

impl PackedBed {
    /// Resolves the methods of a packing.
    ///
    /// # Errors
    /// [`Missing`] if no chart has a factor for the packing, or the pressure-drop method lacks constants.
    pub fn new(
        packing: &Packing,
        system_factor: f64,
        catalogue: &Catalogue,
        methods: &Methods,
    ) -> Result<Self, Missing> {
        let mut bed = Flood::default();
        let name = &methods.packing_flood;
        for record in catalogue.records_of(Task::PackingFlood, name) {
            bed.take(record, packing, catalogue).map_err(|error| unusable(name, &error))?;
        }
        if bed.later.is_none() && bed.older.is_none() {
            return Err(Missing {
                method: name.clone(),
                why: format!(
                    "it has no packing factor for a chart of its kind ({}); give packing_factor (later chart){} in the case",
                    kind_name(packing.kind),
                    if packing.kind == PackingKind::Random { " or packing_factor_older" } else { "" }
                ),
            });
        }
        let mut records = bed.records;
        let mut constants = bed.constants;
        let asked = methods.packing_pressure_drop.as_deref();
        let chosen =
            asked.unwrap_or(if packing.stichlmair.is_some() { "stichlmair" } else { "generalized pressure drop" });
        let drop = drop_of(packing, catalogue, chosen, &mut records, &mut constants)?;
        records.sort();
        records.dedup();
        constants.sort_unstable();
        constants.dedup();
        Ok(Self {
            later: bed.later,
            older: bed.older,
            flood_name: name.clone(),
            drop,
            drop_name: chosen.to_owned(),
            system_factor,
            records,
            constants,
        })
    }

    /// Area of the place at which the row floods, m2, at its own L/V; the cautious of the charts that have a factor.
    pub fn flooding_area_m2(&self, load: &StageLoad) -> f64 {
        let load_m3_s = load.vapour_load_m3_s();
        let capacity_m_s = |c: Option<f64>| c.unwrap_or(f64::INFINITY);
        let later = self.later.as_ref().map(|later| {
            let cp = later.chart.capacity_parameter(later.flood_pa_m, load.flow_parameter());
            later.chart.c_m_s(cp, later.factor_per_m, load.nu_l_m2_s())
        });
        let older = self.older.as_ref().map(|older| {
            let ordinate = older.chart.ordinate(older.flood_pa_m, abscissa(load));
            older.chart.c_m_s(ordinate, older.factor_per_m, load.mu_l_pa_s)
        });
        load_m3_s / (capacity_m_s(later).min(capacity_m_s(older)) * self.system_factor)
    }

    /// Friction per height, Pa/m; none beyond flood. `near` is the answer of a neighbouring row, if known: it saves steps and
    /// changes nothing.
    pub fn friction_pa_m(&self, area_m2: f64, load: &StageLoad, near: Option<f64>) -> Option<f64> {
        let velocity_m_s = load.vapour_m3_s() / area_m2;
        match &self.drop {
            BedDrop::Stichlmair(bed) => {
                let dry = bed.dry(velocity_m_s, load.rho_v_kg_m3, load.mu_v_pa_s);
                let hold_up = bed.hold_up(load.liquid_m3_s() / area_m2);
                bed.wet_pa_m(dry, hold_up, load.rho_l_kg_m3, near)
            }
            BedDrop::Later { chart, factor_per_m } => {
                let cp = chart.cp_from_si(velocity_m_s * load.capacity_group(), *factor_per_m, load.nu_l_m2_s());
                chart.gradient_pa_m(cp, load.flow_parameter())
            }
            BedDrop::Older { chart, factor_per_m } => {
                let ordinate = chart.y_from_si(velocity_m_s * load.capacity_group(), *factor_per_m, load.mu_l_pa_s);
                chart.gradient_pa_m(ordinate, abscissa(load))
            }
        }
    }

    /// Every published range that this load leaves.
    pub fn outside(&self, area_m2: f64, load: &StageLoad, found: &mut Vec<Outside>) {
        if let Some(later) = &self.later {
            later.chart.outside(later.flood_pa_m, load.flow_parameter(), found);
            later.flood_drop.outside(later.factor_per_m, found);
        }
        if let Some(older) = &self.older {
            older.chart.outside(older.flood_pa_m, abscissa(load), found);
            older.flood_drop.outside(older.factor_per_m, found);
        }
        let gradient = || self.friction_pa_m(area_m2, load, None);
        match &self.drop {
            BedDrop::Stichlmair(_) => {}
            BedDrop::Later { chart, .. } => {
                gradient().into_iter().for_each(|pa_m| chart.outside(pa_m, load.flow_parameter(), found));
            }
            BedDrop::Older { chart, .. } => {
                gradient().into_iter().for_each(|pa_m| chart.outside(pa_m, abscissa(load), found));
            }
        }
    }

    /// Name of the flood method.
    pub fn flood_method(&self) -> &str {
        &self.flood_name
    }

    /// Name of the pressure-drop method.
    pub fn drop_method(&self) -> &str {
        &self.drop_name
    }
}

/// (L/G)(rhoG/(rhoL - rhoG))^0.5, the abscissa of the older chart.
fn abscissa(load: &StageLoad) -> f64 {
    load.liquid_kg_s / load.vapour_kg_s * load.capacity_group()
}

fn kind_name(kind: PackingKind) -> &'static str {
    match kind {
        PackingKind::Random => "random",
        PackingKind::Structured => "structured",
    }
}

fn unusable(method: &str, error: &EngineError) -> Missing {
    Missing { method: method.to_owned(), why: error.to_string() }
}

/// True if a record of the later chart is the set for this kind of packing: its id says which.
fn is_set_for(record: &Record, kind: PackingKind) -> bool {
    record.form == Form::GpdLater && record.id.contains(kind_name(kind))
}

fn flood_drop(catalogue: &Catalogue) -> EngineResult<FloodPressureDrop> {
    FloodPressureDrop::from_record(first_of(catalogue, Form::FloodPressureDrop)?)
}

/// The first record of a form: built-in ones come before the user's.
pub(crate) fn first_of(catalogue: &Catalogue, form: Form) -> EngineResult<&Record> {
    catalogue.records().iter().find(|record| record.form == form).ok_or_else(|| EngineError::Record {
        id: form.shape().name.to_owned(),
        what: "no record of this form is in the catalogue of this run".to_owned(),
    })
}

#[derive(Default)]
struct Flood {
    later: Option<LaterFlood>,
    older: Option<OlderFlood>,
    records: Vec<String>,
    constants: Vec<&'static str>,
}

impl Flood {
    /// Takes a chart of the method if it serves this kind of packing and the packing has the factor that belongs to it.
    fn take(&mut self, record: &Record, packing: &Packing, catalogue: &Catalogue) -> EngineResult<()> {
        match record.form {
            Form::GpdLater if is_set_for(record, packing.kind) => {
                if let Some(factor) = packing.factor_later {
                    let flood_drop = flood_drop(catalogue)?;
                    let factor_per_m = factor.si();
                    let flood_pa_m = flood_drop.gradient_pa_m(factor_per_m);
                    let chart = GpdLater::from_record(record)?;
                    self.later = Some(LaterFlood { chart, flood_drop, factor_per_m, flood_pa_m });
                    self.note(record, catalogue, "packing_factor")?;
                }
            }
            Form::GpdOlder if packing.kind == PackingKind::Random => {
                if let Some(factor) = packing.factor_older {
                    let flood_drop = flood_drop(catalogue)?;
                    let factor_per_m = factor.si();
                    let flood_pa_m = flood_drop.older_gradient_pa_m(factor_per_m);
                    let chart = GpdOlder::from_record(record)?;
                    self.older = Some(OlderFlood { chart, flood_drop, factor_per_m, flood_pa_m });
                    self.note(record, catalogue, "packing_factor_older")?;
                }
            }
            _ => {}
        }
        Ok(())
    }

    fn note(&mut self, record: &Record, catalogue: &Catalogue, constant: &'static str) -> EngineResult<()> {
        self.records.push(record.id.clone());
        self.records.push(first_of(catalogue, Form::FloodPressureDrop)?.id.clone());
        self.constants.push(constant);
        Ok(())
    }
}

fn drop_of(
    packing: &Packing,
    catalogue: &Catalogue,
    method: &str,
    records: &mut Vec<String>,
    constants: &mut Vec<&'static str>,
) -> Result<BedDrop, Missing> {
    let missing = |why: String| Missing { method: method.to_owned(), why };
    for record in catalogue.records_of(Task::PackingPressureDrop, method) {
        let failed = |error: EngineError| unusable(method, &error);
        let found = match record.form {
            Form::Stichlmair => match (packing.specific_area, packing.void_fraction, packing.stichlmair) {
                (Some(area), Some(void), Some(c)) => {
                    constants.extend(["specific_area", "void_fraction", "stichlmair"]);
                    let bed = Stichlmair::from_record(record).map_err(failed)?.bed(area.si(), void, c);
                    Some(BedDrop::Stichlmair(bed))
                }
                (_, _, None) => return Err(missing("it needs the three constants of \"stichlmair\"".to_owned())),
                _ => return Err(missing("it needs specific_area and void_fraction beside its constants".to_owned())),
            },
            Form::GpdLater if is_set_for(record, packing.kind) => packing
                .factor_later
                .map(|factor| {
                    constants.push("packing_factor");
                    let chart = GpdLater::from_record(record).map_err(failed)?;
                    Ok(BedDrop::Later { chart, factor_per_m: factor.si() })
                })
                .transpose()?,
            Form::GpdOlder if packing.kind == PackingKind::Random => packing
                .factor_older
                .map(|factor| {
                    constants.push("packing_factor_older");
                    let chart = Box::new(GpdOlder::from_record(record).map_err(failed)?);
                    Ok(BedDrop::Older { chart, factor_per_m: factor.si() })
                })
                .transpose()?,
            _ => None,
        };
        if let Some(found) = found {
            records.push(record.id.clone());
            return Ok(found);
        }
    }
    Err(missing(format!(
        "it has no packing factor for the chart of {} packings; give packing_factor (later chart) in the case",
        kind_name(packing.kind)
    )))
}
