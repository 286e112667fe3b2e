//! Rating of one section at one point and one factor on its vapour: every row, every criterion, the worst row of each.

use super::figures::shortest_path_m;
use super::limits::{Limit, SectionLimits};
use super::model::CompiledSection;
use crate::engine::findings::Criterion;
use crate::engine::hydraulics::load::StageLoad;
use crate::engine::hydraulics::section::{BeyondFlood, SectionGeometry};

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
    let friction_pa = if model.has_friction() { Some(model.friction_pa(geometry, loads, factor)?) } else { None };
    let judged =
        section.limits.get(point).map_or_else(Vec::new, |limits| judge_rows(section, geometry, limits, loads, factor));
    Ok(SectionRating { friction_pa, judged })
}

fn judge_rows<'l>(
    section: &'l CompiledSection<'_>,
    geometry: &SectionGeometry,
    limits: &'l SectionLimits,
    loads: &[StageLoad],
    factor: f64,
) -> Vec<Judged<'l>> {
    use Criterion as C;
    use Sense::{AtLeast, AtMost};
    let model = &section.model;
    let mut flood = Worst::new(C::ApproachToFlood, &limits.flood, AtMost);
    let mut out: Vec<Worst<'l>> = Vec::new();
    if let Some(tray) = model.tray() {
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
            if let Some(figures) = model.tray_figures(geometry, &load) {
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
        out.extend([flood, system, entrainment, froth, velocity, residence, apron, weir, weir_least, path, weep]);
    } else {
        for (row, load) in loads.iter().enumerate() {
            flood.take(Some(row), model.flooding_area_m2(&load.with_vapour(factor)) / geometry.area_m2);
        }
        out.push(flood);
        if let Some(limit) = &limits.wetting {
            let mut wetting = Worst::new(C::Wetting, limit, AtLeast);
            for (row, load) in loads.iter().enumerate() {
                wetting.take(Some(row), load.liquid_m3_s() / geometry.area_m2);
            }
            out.push(wetting);
        }
        if let Some(limit) = &limits.bed_pressure_drop {
            let mut gradient = Worst::new(C::BedPressureDrop, limit, AtMost);
            for (row, load) in loads.iter().enumerate() {
                if let Some(pa_m) = model.friction_gradient_pa_m(geometry, &load.with_vapour(factor)) {
                    gradient.take(Some(row), pa_m);
                }
            }
            out.push(gradient);
        }
    }
    out.into_iter().map(|worst| worst.judged).filter(|judged| !judged.si.is_nan()).collect()
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
