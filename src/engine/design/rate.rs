//! Rating of one section at one point and one factor on its vapour: every row, every criterion, the worst row of each.

use super::figures::shortest_path_m;
use super::limits::{Limit, SectionLimits};
use super::model::CompiledSection;
use crate::engine::findings::Criterion;
use crate::engine::hydraulics::load::StageLoad;
use crate::engine::hydraulics::section::{BeyondFlood, SectionGeometry};
use crate::engine::hydraulics::tray::SieveTray;

/// A figure this far over its limit (relatively) still counts as at the limit: a shell sized to the limit meets it.
pub(crate) const AT_LIMIT: f64 = 1e-9;

/// One criterion of one section, at its worst row.
#[derive(Clone, Debug)]
pub(crate) struct Judged<'l> {
    pub criterion: Criterion,
    pub si: f64,
    pub limit: &'l Limit,
    /// Row of the worst figure; none where the figure belongs to the section as a whole.
    pub row: Option<usize>,
    /// Figure over limit, or limit over figure where the limit is a least one: above 1 is a miss.
    pub severity: f64,
}

/// Which end of the scale the limit is.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Sense {
    AtMost,
    AtLeast,
}

/// Keeps the worst row of one criterion.
struct Worst<'l> {
    judged: Judged<'l>,
    sense: Sense,
}

impl<'l> Worst<'l> {
    fn new(criterion: Criterion, limit: &'l Limit, sense: Sense) -> Self {
        let judged = Judged { criterion, si: f64::NAN, limit, row: None, severity: f64::NEG_INFINITY };
        Self { judged, sense }
    }

    fn take(&mut self, row: Option<usize>, si: f64) {
        let severity = match self.sense {
            Sense::AtMost => si / self.judged.limit.si,
            Sense::AtLeast => self.judged.limit.si / si,
        };
        if severity > self.judged.severity {
            self.judged = Judged { si, row, severity, ..self.judged.clone() };
        }
    }
}

/// A section at one point and one factor.
#[derive(Clone, Debug)]
pub(crate) struct SectionRating<'l> {
    /// Friction, Pa; none if the internals have none.
    pub friction_pa: Option<f64>,
    /// Every criterion that concerns the section.
    pub judged: Vec<Judged<'l>>,
}

impl SectionRating<'_> {
    /// The flood of the worst row.
    pub fn flood(&self) -> Option<&Judged<'_>> {
        self.judged.iter().find(|j| j.criterion == Criterion::ApproachToFlood)
    }
}

/// Rates one section.
///
/// # Errors
/// A row beyond flood, where the friction has no answer.
pub(crate) fn rate<'l>(
    section: &'l CompiledSection<'_>,
    geometry: &SectionGeometry,
    point: usize,
    factor: f64,
) -> Result<SectionRating<'l>, BeyondFlood> {
    let model = &section.model;
    let loads = section.loads_at(point);
    let Some(limits) = section.limits.get(point) else {
        return Ok(SectionRating { friction_pa: None, judged: Vec::new() });
    };
    if let Some(tray) = model.tray() {
        let (drop_pa, judged) = judge_trays(tray, section, geometry, limits, loads, factor);
        return Ok(SectionRating { friction_pa: Some(drop_pa * model.trays / loads.len().max(1) as f64), judged });
    }
    let mut friction = None;
    let mut gradients_pa_m = Vec::new();
    if model.has_friction() {
        for (row, load) in loads.iter().enumerate() {
            let near = gradients_pa_m.last().copied();
            let gradient = model.row_friction(geometry, &load.with_vapour(factor), near);
            gradients_pa_m.push(gradient.ok_or(BeyondFlood { row })?);
        }
        friction = Some(gradients_pa_m.iter().sum::<f64>() * model.parts() / loads.len().max(1) as f64);
    }
    let judged = judge_beds(section, geometry, limits, loads, factor, &gradients_pa_m);
    Ok(SectionRating { friction_pa: friction, judged })
}

/// Sum over rows of the drop of one tray, Pa, and every criterion of a tray section.
fn judge_trays<'l>(
    tray: &SieveTray,
    section: &'l CompiledSection<'_>,
    geometry: &SectionGeometry,
    limits: &'l SectionLimits,
    loads: &[StageLoad],
    factor: f64,
) -> (f64, Vec<Judged<'l>>) {
    use Criterion as C;
    use Sense::{AtLeast, AtMost};
    let mut drops_pa = 0.0;
    let mut flood = Worst::new(C::ApproachToFlood, &limits.flood, AtMost);
    let mut system = Worst::new(C::SystemLimit, &limits.flood, AtMost);
    let mut entrainment = Worst::new(C::Entrainment, &limits.entrainment, AtMost);
    let mut froth = Worst::new(C::DowncomerFroth, &limits.froth, AtMost);
    let mut velocity = Worst::new(C::DowncomerVelocity, &limits.downcomer_velocity, AtMost);
    let mut residence = Worst::new(C::DowncomerResidence, &limits.residence, AtLeast);
    let mut apron = Worst::new(C::ApronVelocity, &limits.apron_velocity, AtMost);
    let mut weir = Worst::new(C::WeirLoad, &limits.weir_load, AtMost);
    let mut weir_least = Worst::new(C::WeirLoadLeast, &limits.weir_load_least, AtLeast);
    let mut path = Worst::new(C::FlowPath, &limits.flow_path, AtLeast);
    let mut weep = Worst::new(C::Weep, &limits.weep, AtMost);
    for (row, load) in loads.iter().enumerate() {
        let load = load.with_vapour(factor);
        let here = Some(row);
        let fraction = tray.flooding_area_m2(&load) / geometry.area_m2;
        flood.take(here, fraction);
        system.take(here, tray.system_limit_area_m2(&load) / geometry.area_m2);
        entrainment.take(here, tray.entrainment(&load, fraction));
        if let Some(figures) = section.model.tray_figures(geometry, &load) {
            drops_pa += figures.drop_pa;
            froth.take(here, figures.froth);
            velocity.take(here, figures.downcomer_velocity_m_s);
            residence.take(here, figures.downcomer_residence_s);
            apron.take(here, figures.apron_velocity_m_s);
            weir.take(here, figures.weir_load_m2_s);
            weir_least.take(here, figures.weir_load_m2_s);
            weep.take(here, figures.weep);
        }
    }
    if let Some(layout) = &geometry.layout {
        path.take(None, shortest_path_m(layout));
    }
    let all = [flood, system, entrainment, froth, velocity, residence, apron, weir, weir_least, path, weep];
    (drops_pa, known(all))
}

/// Every criterion of a packed or declared section; `gradients_pa_m` are the rows' frictions, none without a resistance.
fn judge_beds<'l>(
    section: &'l CompiledSection<'_>,
    geometry: &SectionGeometry,
    limits: &'l SectionLimits,
    loads: &[StageLoad],
    factor: f64,
    gradients_pa_m: &[f64],
) -> Vec<Judged<'l>> {
    let mut flood = Worst::new(Criterion::ApproachToFlood, &limits.flood, Sense::AtMost);
    for (row, load) in loads.iter().enumerate() {
        flood.take(Some(row), section.model.flooding_area_m2(&load.with_vapour(factor)) / geometry.area_m2);
    }
    let wetting = limits.wetting.as_ref().map(|limit| {
        let mut wetting = Worst::new(Criterion::Wetting, limit, Sense::AtLeast);
        for (row, load) in loads.iter().enumerate() {
            wetting.take(Some(row), load.liquid_m3_s() / geometry.area_m2);
        }
        wetting
    });
    let gradient = limits.bed_pressure_drop.as_ref().map(|limit| {
        let mut gradient = Worst::new(Criterion::BedPressureDrop, limit, Sense::AtMost);
        for (row, pa_m) in gradients_pa_m.iter().enumerate() {
            gradient.take(Some(row), *pa_m);
        }
        gradient
    });
    known(std::iter::once(flood).chain(wetting).chain(gradient))
}

/// Those for which there was a figure at all.
fn known<'l>(all: impl IntoIterator<Item = Worst<'l>>) -> Vec<Judged<'l>> {
    all.into_iter().map(|worst| worst.judged).filter(|judged| !judged.si.is_nan()).collect()
}

/// True for the criteria that may enlarge a shell (definition 4).
pub(crate) fn sizes_the_shell(criterion: Criterion) -> bool {
    matches!(
        criterion,
        Criterion::ApproachToFlood
            | Criterion::SystemLimit
            | Criterion::Entrainment
            | Criterion::DowncomerVelocity
            | Criterion::DowncomerFroth
            | Criterion::BedPressureDrop
            | Criterion::PressureDrop
    )
}
