//! One section, whatever stands in it: flooding area, friction, ranges. The only place that tells kinds of internals apart.

use super::declared::{BeyondPoints, DeclaredInternals};
use super::load::StageLoad;
use super::packing::PackedBed;
use super::tray::{SieveTray, TrayFigures};
use super::tray_methods::TrayMethods;
use crate::engine::case::{Case, Deck, Extent, InternalsKind, Section};
use crate::engine::correlation::catalogue::Catalogue;
use crate::engine::correlation::range::Outside;
use crate::engine::error::{EngineError, EngineResult};
use crate::engine::geometry::{Strip, TrayLayout};
use crate::engine::units::Si;

/// Hydraulics of the internals of one section.
#[derive(Clone, Debug)]
pub(crate) enum Hydraulics {
    /// Sieve trays; the second carries the other liquid-head model, for the response exponent.
    Tray(Box<SieveTray>),
    /// Random or structured packing.
    Packing(Box<PackedBed>),
    /// Declared figures.
    Declared(DeclaredInternals),
}

/// One section, compiled.
#[derive(Clone, Debug)]
pub(crate) struct SectionModel {
    pub hydraulics: Hydraulics,
    /// Height of the section, m.
    pub height_m: f64,
    /// Trays of the section; 0 for beds.
    pub trays: f64,
}

/// Area and, for trays, layout of a section in a given shell with a given wall.
#[derive(Clone, Debug)]
pub(crate) struct SectionGeometry {
    pub area_m2: f64,
    pub layout: Option<TrayLayout>,
}

/// The correlation has no answer at this row: beyond flood.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct BeyondFlood {
    pub row: usize,
}

impl SectionModel {
    /// Compiles one section of a checked case.
    pub fn new(case: &Case, section: &Section, catalogue: &Catalogue) -> EngineResult<Self> {
        let internals = case.internals.get(section.internals).ok_or_else(|| EngineError::Search {
            what: format!("internals of section \"{}\"", section.name),
            why: "the case refers to internals that it does not hold".to_owned(),
        })?;
        let no_method = |method: &str, why: &str| EngineError::NoMethod {
            section: section.name.clone(),
            internals: internals.name.clone(),
            method: method.to_owned(),
            why: why.to_owned(),
        };
        let hydraulics = match &internals.kind {
            InternalsKind::Tray(tray) => {
                if !matches!(tray.deck, Deck::Sieve) {
                    return Err(no_method(
                        "any correlation built in",
                        "valve trays have no pressure-drop correlation here yet; rate them as \"declared\" internals with figures \
                         from their supplier",
                    ));
                }
                let methods = TrayMethods::new(catalogue, &case.methods)?;
                Hydraulics::Tray(Box::new(SieveTray::new(tray, section.system_factor, methods)))
            }
            InternalsKind::Packing(packing) => {
                let bed = PackedBed::new(packing, section.system_factor, catalogue, &case.methods)
                    .map_err(|missing| no_method(&missing.method, &missing.why))?;
                Hydraulics::Packing(Box::new(bed))
            }
            InternalsKind::Declared(declared) => {
                Hydraulics::Declared(DeclaredInternals::new(declared, section.system_factor))
            }
        };
        let (height_m, trays) = match (section.extent, &hydraulics) {
            (Extent::Height(height), _) => (height.si(), 0.0),
            (Extent::Trays(trays), Hydraulics::Tray(tray)) => (trays * tray.spacing_m, trays),
            (Extent::Trays(_), _) => {
                return Err(no_method(
                    "a number of trays",
                    "only trays are counted; give packed and declared sections a height",
                ));
            }
        };
        Ok(Self { hydraulics, height_m, trays })
    }

    /// Geometry of the section in a region of the shell.
    pub fn geometry(&self, tray: Option<&crate::engine::case::Tray>, strip: &Strip) -> EngineResult<SectionGeometry> {
        let layout = match (&self.hydraulics, tray) {
            (Hydraulics::Tray(_), Some(tray)) => Some(TrayLayout::new(strip, tray)?),
            _ => None,
        };
        Ok(SectionGeometry { area_m2: strip.area().si(), layout })
    }

    /// Area of the place at which the row stands at flood, m2, at its own L/V.
    pub fn flooding_area_m2(&self, load: &StageLoad) -> f64 {
        match &self.hydraulics {
            Hydraulics::Tray(tray) => tray.flooding_area_m2(load),
            Hydraulics::Packing(bed) => bed.flooding_area_m2(load),
            Hydraulics::Declared(declared) => declared.flooding_area_m2(load),
        }
    }

    /// True if the friction is known to rise with the vapour at any load: packings and declared figures. The aerated liquid
    /// on a tray falls as the vapour rises, so trays promise nothing.
    pub fn friction_rises(&self) -> bool {
        !matches!(self.hydraulics, Hydraulics::Tray(_))
    }

    /// True if the section has a friction.
    pub fn has_friction(&self) -> bool {
        match &self.hydraulics {
            Hydraulics::Declared(declared) => declared.has_resistance(),
            _ => true,
        }
    }

    /// Friction of the section, Pa, with every row's vapour multiplied by `factor`; each row stands for an equal part.
    pub fn friction_pa(
        &self,
        geometry: &SectionGeometry,
        loads: &[StageLoad],
        factor: f64,
    ) -> Result<f64, BeyondFlood> {
        let mut sum = 0.0;
        let mut near = None;
        for (row, load) in loads.iter().enumerate() {
            let friction = self.row_friction(geometry, &load.with_vapour(factor), near).ok_or(BeyondFlood { row })?;
            near = Some(friction);
            sum += friction;
        }
        Ok(sum * self.parts() / loads.len() as f64)
    }

    /// Friction of one row per metre of height, Pa/m.
    pub fn friction_gradient_pa_m(&self, geometry: &SectionGeometry, load: &StageLoad) -> Option<f64> {
        self.row_friction(geometry, load, None).map(|friction| friction * self.parts() / self.height_m)
    }

    /// What one unit of [`Self::row_friction`] is counted in: trays or metres.
    pub fn parts(&self) -> f64 {
        if self.trays > 0.0 { self.trays } else { self.height_m }
    }

    /// Friction of one row: Pa per tray, or Pa per metre of bed; none beyond flood. `near` may give that of a neighbouring row.
    pub fn row_friction(&self, geometry: &SectionGeometry, load: &StageLoad, near: Option<f64>) -> Option<f64> {
        match (&self.hydraulics, &geometry.layout) {
            (Hydraulics::Tray(tray), Some(layout)) => Some(tray.drop_pa(layout, load)),
            (Hydraulics::Packing(bed), _) => bed.friction_pa_m(geometry.area_m2, load, near),
            (Hydraulics::Declared(declared), _) => declared.friction_pa_m(geometry.area_m2, load),
            (Hydraulics::Tray(_), None) => None,
        }
    }

    /// Tray figures of one row.
    pub fn tray_figures(&self, geometry: &SectionGeometry, load: &StageLoad) -> Option<TrayFigures> {
        match (&self.hydraulics, &geometry.layout) {
            (Hydraulics::Tray(tray), Some(layout)) => Some(tray.figures(layout, load)),
            _ => None,
        }
    }

    /// The tray, if it is one.
    pub fn tray(&self) -> Option<&SieveTray> {
        match &self.hydraulics {
            Hydraulics::Tray(tray) => Some(tray),
            _ => None,
        }
    }

    /// The same section with the other liquid-head model, if it is one of trays.
    pub fn with_other_liquid_head(&self, catalogue: &Catalogue) -> EngineResult<Option<Self>> {
        match &self.hydraulics {
            Hydraulics::Tray(tray) => {
                let mut other = tray.clone();
                other.methods.take_other_liquid_head(catalogue)?;
                Ok(Some(Self { hydraulics: Hydraulics::Tray(other), ..*self }))
            }
            _ => Ok(None),
        }
    }

    /// Every published range that this load leaves.
    pub fn outside(
        &self,
        geometry: &SectionGeometry,
        load: &StageLoad,
        correlations: &mut Vec<Outside>,
        points: &mut Vec<BeyondPoints>,
    ) {
        match (&self.hydraulics, &geometry.layout) {
            (Hydraulics::Tray(tray), Some(layout)) => {
                let flood = tray.flooding_area_m2(load) / geometry.area_m2;
                tray.outside(layout, load, flood, correlations);
            }
            (Hydraulics::Packing(bed), _) => bed.outside(geometry.area_m2, load, correlations),
            (Hydraulics::Declared(declared), _) => declared.outside(geometry.area_m2, load, points),
            (Hydraulics::Tray(_), None) => {}
        }
    }

    /// Name of the correlation that gives the flood.
    pub fn flood_method(&self) -> &str {
        match &self.hydraulics {
            Hydraulics::Tray(tray) => &tray.methods.flood_name,
            Hydraulics::Packing(bed) => bed.flood_method(),
            Hydraulics::Declared(_) => "declared",
        }
    }

    /// Name of the correlation that gives the friction.
    pub fn drop_method(&self) -> Option<&str> {
        match &self.hydraulics {
            Hydraulics::Tray(tray) => Some(&tray.methods.liquid_head_name),
            Hydraulics::Packing(bed) => Some(bed.drop_method()),
            Hydraulics::Declared(declared) => declared.has_resistance().then_some("declared"),
        }
    }
}
