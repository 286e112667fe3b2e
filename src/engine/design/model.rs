//! The compiled case: loads as flat arrays in SI, grouped by place, with everything that does not depend on the shell.

use super::limits::{ColumnLimits, SectionLimits};
use super::place_wall::BandWeights;
use crate::engine::case::{Case, Device, DeviceLoss, End, InternalsKind, Place, Reach, Section, Tray};
use crate::engine::correlation::catalogue::Catalogue;
use crate::engine::error::{EngineError, EngineResult, finite};
use crate::engine::hydraulics::load::StageLoad;
use crate::engine::hydraulics::section::SectionModel;
use crate::engine::units::{STANDARD_GRAVITY_M_S2, Si};

/// A compiled case. Built once; every search and rating reads it.
pub(crate) struct Model<'a> {
    pub case: &'a Case,
    pub catalogue: &'a Catalogue,
    pub above: Stack<'a>,
    /// One for each compartment.
    pub sides: Vec<Stack<'a>>,
    pub below: Stack<'a>,
    /// By point.
    pub points: Vec<PointModel<'a>>,
    /// By point.
    pub column_limits: Vec<ColumnLimits>,
    /// By band: what the areas of the compartments go in proportion to.
    pub weights: Vec<BandWeights>,
}

/// The sections and devices of one place, sections from top to bottom.
pub(crate) struct Stack<'a> {
    pub place: Place,
    pub sections: Vec<CompiledSection<'a>>,
    pub devices: Vec<CompiledDevice<'a>>,
    /// Sections and devices, m.
    pub height_m: f64,
    /// Empty height added at the bottom row's density so that all compartments are as high as the highest, m.
    pub filled_m: f64,
}

/// One section with its loads at every point.
pub(crate) struct CompiledSection<'a> {
    /// Index in the case.
    pub index: usize,
    pub section: &'a Section,
    pub model: SectionModel,
    pub tray: Option<&'a Tray>,
    /// By point, rows from top to bottom.
    loads: Vec<Vec<StageLoad>>,
    /// By point: the section's factor less one, over the factor less one at the compartment's lower edge.
    travel: Vec<f64>,
    /// By point.
    pub limits: Vec<SectionLimits>,
    /// Area of the place at which the worst row of all points stands at its flood limit, m2.
    pub required_area_m2: f64,
}

/// One device with the load that passes it.
pub(crate) struct CompiledDevice<'a> {
    pub device: &'a Device,
    /// By point.
    loads: Vec<StageLoad>,
    /// By point, as of its section.
    travel: Vec<f64>,
}

/// What belongs to a point as a whole.
pub(crate) struct PointModel<'a> {
    pub name: &'a str,
    /// Required vapour shares.
    pub required: Vec<f64>,
    /// Liquid shares.
    pub liquid: Vec<f64>,
}

impl<'a> Model<'a> {
    /// Compiles a checked case.
    ///
    /// # Errors
    /// A method that cannot serve its internals, or a record that is missing.
    pub fn new(case: &'a Case, catalogue: &'a Catalogue) -> EngineResult<Self> {
        let above = Stack::new(case, catalogue, Place::Above)?;
        let below = Stack::new(case, catalogue, Place::Below)?;
        let mut sides = Vec::with_capacity(case.compartments.len());
        for index in 0..case.compartments.len() {
            sides.push(Stack::new(case, catalogue, Place::Compartment(index))?);
        }
        let highest_m = sides.iter().map(|side| side.height_m).fold(0.0, f64::max);
        for side in &mut sides {
            side.filled_m = highest_m - side.height_m;
        }
        let points = case
            .points
            .iter()
            .enumerate()
            .map(|(p, point)| {
                let required = shares(sides.iter().map(|side| side.bottom(p).map_or(0.0, |load| load.vapour_kg_s)));
                let mut liquid = shares(sides.iter().map(|side| side.top(p).map_or(0.0, |load| load.liquid_kg_s)));
                for (share, compartment) in liquid.iter_mut().zip(&case.compartments) {
                    *share = compartment.liquid_share.unwrap_or(*share);
                }
                for share in &required {
                    finite(*share, &format!("required vapour share at point \"{}\"", point.name))?;
                }
                Ok(PointModel { name: &point.name, required, liquid })
            })
            .collect::<EngineResult<Vec<_>>>()?;
        let column_limits = (0..case.points.len()).map(|p| ColumnLimits::new(case, p)).collect();
        let weights = (0..case.wall.bands.len()).map(|band| BandWeights::new(&sides, band)).collect();
        Ok(Self { case, catalogue, above, sides, below, points, column_limits, weights })
    }

    /// All stacks: above the wall, the compartments, below the wall.
    pub fn stacks(&self) -> impl Iterator<Item = &Stack<'a>> {
        std::iter::once(&self.above).chain(&self.sides).chain(std::iter::once(&self.below))
    }

    /// True if every section of every compartment has a friction.
    pub fn has_friction(&self) -> bool {
        self.sides.iter().flat_map(|side| &side.sections).all(|section| section.model.has_friction())
    }

    /// Name of a place in the case's words.
    pub fn place_name(&self, place: Place) -> &str {
        match place {
            Place::Above => "above wall",
            Place::Below => "below wall",
            Place::Compartment(index) => self.case.compartments.get(index).map_or("", |c| c.name.as_str()),
        }
    }

    /// Required shares at a point.
    pub fn required(&self, point: usize) -> &[f64] {
        self.points.get(point).map_or(&[], |p| p.required.as_slice())
    }
}

/// Parts of a sum.
fn shares(parts: impl Iterator<Item = f64>) -> Vec<f64> {
    let mut parts: Vec<f64> = parts.collect();
    let sum: f64 = parts.iter().sum();
    for part in &mut parts {
        *part /= sum;
    }
    parts
}

impl<'a> Stack<'a> {
    fn new(case: &'a Case, catalogue: &'a Catalogue, place: Place) -> EngineResult<Self> {
        let mut sections = Vec::new();
        for (index, section) in case.sections.iter().enumerate().filter(|(_, s)| s.place == place) {
            sections.push(CompiledSection::new(case, catalogue, index, section)?);
        }
        let closed = matches!((place, case.wall.reach), (Place::Above, Reach::Top) | (Place::Below, Reach::Bottom));
        if sections.is_empty() && !closed {
            return Err(EngineError::Search {
                what: "sections of a place".to_owned(),
                why: "each place (above the wall, every compartment, below the wall) needs at least one, but for the end at which \
                      the wall is closed"
                    .to_owned(),
            });
        }
        set_travel(&mut sections, case.points.len(), matches!(place, Place::Compartment(_)));
        let mut devices = Vec::new();
        for device in case.devices.iter().filter(|d| d.place == place) {
            if let Some(section) = sections.iter().find(|s| s.index == device.section) {
                let loads = (0..case.points.len()).filter_map(|p| match device.end {
                    End::Above => section.loads_at(p).first().copied(),
                    End::Below => section.loads_at(p).last().copied(),
                });
                devices.push(CompiledDevice { device, loads: loads.collect(), travel: section.travel.clone() });
            }
        }
        let height_m = sections.iter().map(|s| s.model.height_m).sum::<f64>()
            + devices.iter().map(|d| d.device.height.si()).sum::<f64>();
        Ok(Self { place, sections, devices, height_m, filled_m: 0.0 })
    }

    /// The last row: the vapour that arrives at the lower edge.
    pub fn bottom(&self, point: usize) -> Option<&StageLoad> {
        self.sections.last().and_then(|s| s.loads_at(point).last())
    }

    /// The first row.
    pub fn top(&self, point: usize) -> Option<&StageLoad> {
        self.sections.first().and_then(|s| s.loads_at(point).first())
    }

    /// Static head of the vapour, Pa: sections, devices, filled height.
    pub fn static_pa(&self, point: usize) -> f64 {
        let sections: f64 = self.sections.iter().map(|s| s.static_pa(point)).sum();
        let devices: f64 = self
            .devices
            .iter()
            .map(|d| d.load(point).map_or(0.0, |load| load.rho_v_kg_m3) * d.device.height.si())
            .sum();
        let filled = self.filled_m * self.bottom(point).map_or(0.0, |load| load.rho_v_kg_m3);
        sections + (devices + filled) * STANDARD_GRAVITY_M_S2
    }
}

impl<'a> CompiledSection<'a> {
    fn new(case: &'a Case, catalogue: &'a Catalogue, index: usize, section: &'a Section) -> EngineResult<Self> {
        let model = SectionModel::new(case, section, catalogue)?;
        let tray = match case.internals.get(section.internals).map(|i| &i.kind) {
            Some(InternalsKind::Tray(tray)) => Some(tray),
            _ => None,
        };
        let loads = case
            .points
            .iter()
            .map(|point| point.loads.get(index).map_or_else(Vec::new, |rows| rows.iter().map(StageLoad::new).collect()))
            .collect();
        let limits = (0..case.points.len())
            .map(|p| SectionLimits::new(case, catalogue, section, &model, p))
            .collect::<EngineResult<_>>()?;
        let mut out = Self { index, section, model, tray, loads, travel: Vec::new(), limits, required_area_m2: 0.0 };
        for (loads, limits) in out.loads.iter().zip(&out.limits) {
            for load in loads {
                out.required_area_m2 = out.required_area_m2.max(out.model.flooding_area_m2(load) / limits.flood.si);
            }
        }
        Ok(out)
    }

    /// Rows at a point, from top to bottom.
    pub fn loads_at(&self, point: usize) -> &[StageLoad] {
        self.loads.get(point).map_or(&[], Vec::as_slice)
    }

    /// By how much the section's vapour is multiplied when that at the compartment's lower edge is multiplied by `bottom`.
    pub fn factor(&self, point: usize, bottom: f64) -> f64 {
        1.0 + self.travel.get(point).copied().unwrap_or(0.0) * (bottom - 1.0)
    }

    /// Its travel coefficient (definition 6).
    pub fn travel(&self, point: usize) -> f64 {
        self.travel.get(point).copied().unwrap_or(0.0)
    }

    /// Static head of the vapour in the section, Pa.
    pub fn static_pa(&self, point: usize) -> f64 {
        let loads = self.loads_at(point);
        let mean = loads.iter().map(|load| load.rho_v_kg_m3).sum::<f64>() / loads.len().max(1) as f64;
        mean * self.model.height_m * STANDARD_GRAVITY_M_S2
    }
}

impl CompiledDevice<'_> {
    /// The row that gives its vapour.
    pub fn load(&self, point: usize) -> Option<&StageLoad> {
        self.loads.get(point)
    }

    /// Its travel coefficient, as of its section.
    pub fn travel(&self, point: usize) -> f64 {
        self.travel.get(point).copied().unwrap_or(0.0)
    }

    /// Loss at the required shares, Pa, on a place of this area.
    pub fn loss_pa(&self, point: usize, area_m2: f64) -> f64 {
        let (Some(load), Some(design)) = (self.loads.get(point), self.loads.first()) else { return 0.0 };
        match self.device.loss {
            DeviceLoss::VelocityHeads { free_area, heads } => {
                let velocity_m_s = load.vapour_m3_s() / (free_area * area_m2);
                heads * 0.5 * load.rho_v_kg_m3 * velocity_m_s * velocity_m_s
            }
            DeviceLoss::AtDesign(drop) => drop.si() * (load.vapour_kg_s / design.vapour_kg_s).powi(2),
            DeviceLoss::None => 0.0,
        }
    }
}

/// Definition 6: from one section to the next above, the change in volume flow of the first row below the joint equals that of
/// the last row above it, so that feed and draw vapour stay their own.
fn set_travel(sections: &mut [CompiledSection<'_>], points: usize, beside_wall: bool) {
    for point in 0..points {
        let mut travel = if beside_wall { 1.0 } else { 0.0 };
        let mut below_m3_s: Option<f64> = None;
        for section in sections.iter_mut().rev() {
            if let (Some(below), Some(last)) = (below_m3_s, section.loads_at(point).last()) {
                travel *= below / last.vapour_m3_s();
            }
            section.travel.push(travel);
            below_m3_s = section.loads_at(point).first().map(|load| load.vapour_m3_s());
        }
    }
}
