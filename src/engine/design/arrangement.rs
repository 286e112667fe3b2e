//! A shell with its walls: areas and tray layouts of every section.

use super::model::{CompiledSection, Model, Stack};
use crate::engine::error::{EngineError, EngineResult};
use crate::engine::geometry::{Disc, Strip, compartments};
use crate::engine::hydraulics::section::SectionGeometry;
use crate::engine::units::{Length, Si};

/// Geometry of the whole column.
pub(crate) struct Arrangement {
    pub above: EndGeometry,
    pub zone: ZoneGeometry,
    pub below: EndGeometry,
}

/// Geometry above or below the wall.
pub(crate) struct EndGeometry {
    /// As the sections of the stack.
    pub sections: Vec<SectionGeometry>,
    pub area_m2: f64,
}

/// Geometry beside the wall.
pub(crate) struct ZoneGeometry {
    pub diameter_m: f64,
    /// By band, then by wall, rising.
    pub positions_m: Vec<Vec<f64>>,
    /// By compartment.
    pub sides: Vec<SideGeometry>,
}

/// Geometry of one compartment.
pub(crate) struct SideGeometry {
    /// As the sections of the stack.
    pub sections: Vec<SectionGeometry>,
    /// Least area of all bands, m2, and the strip that has it.
    pub area_m2: f64,
    pub clear_depth_m: f64,
}

/// Geometry of every section of a stack; a section with the internals and the band of the one above it is laid out alike.
fn stack_geometry<'s>(
    stack: &Stack<'_>,
    strip_of: impl Fn(&CompiledSection<'_>) -> EngineResult<&'s Strip>,
) -> EngineResult<Vec<SectionGeometry>> {
    let mut out: Vec<SectionGeometry> = Vec::with_capacity(stack.sections.len());
    let mut above: Option<(usize, usize)> = None;
    for section in &stack.sections {
        let kind = (section.section.internals, section.section.band);
        let geometry = match (above == Some(kind), out.last()) {
            (true, Some(same)) => same.clone(),
            _ => section.model.geometry(section.tray, strip_of(section)?)?,
        };
        above = Some(kind);
        out.push(geometry);
    }
    Ok(out)
}

impl EndGeometry {
    /// The whole disc, above or below the wall.
    pub fn new(stack: &Stack<'_>, diameter_m: f64) -> EngineResult<Self> {
        let strip = Disc::from_diameter(Length::from_si(diameter_m))?.whole()?;
        let sections = stack_geometry(stack, |_| Ok(&strip))?;
        Ok(Self { sections, area_m2: strip.area().si() })
    }
}

impl ZoneGeometry {
    /// The compartments of a shell of this diameter with walls at these positions (by band, by wall).
    pub fn new(model: &Model<'_>, diameter_m: f64, positions_m: Vec<Vec<f64>>) -> EngineResult<Self> {
        let disc = Disc::from_diameter(Length::from_si(diameter_m))?;
        let thickness = model.case.wall.thickness;
        let bands = positions_m
            .iter()
            .map(|positions| {
                let positions: Vec<Length> = positions.iter().map(|x| Length::from_si(*x)).collect();
                compartments(&disc, &positions, thickness)
            })
            .collect::<EngineResult<Vec<Vec<Strip>>>>()?;
        let sides = model
            .sides
            .iter()
            .enumerate()
            .map(|(side, stack)| {
                let strip_of = |band: usize| {
                    bands.get(band).and_then(|strips| strips.get(side)).ok_or_else(|| EngineError::Geometry {
                        what: format!(
                            "band {band} has no compartment {side}; every band needs one position for each wall"
                        ),
                    })
                };
                let sections = stack_geometry(stack, |section| strip_of(section.section.band))?;
                let mut area_m2 = f64::INFINITY;
                let mut clear_depth_m = f64::INFINITY;
                for band in 0..bands.len() {
                    let strip = strip_of(band)?;
                    area_m2 = area_m2.min(strip.area().si());
                    clear_depth_m = clear_depth_m.min(strip.clear_depth().si());
                }
                Ok(SideGeometry { sections, area_m2, clear_depth_m })
            })
            .collect::<EngineResult<Vec<_>>>()?;
        Ok(Self { diameter_m, positions_m, sides })
    }

    /// The same zone with one wall of one band moved by a distance.
    pub fn moved(&self, model: &Model<'_>, band: usize, wall: usize, by_m: f64) -> EngineResult<Self> {
        let mut positions_m = self.positions_m.clone();
        if let Some(position) = positions_m.get_mut(band).and_then(|walls| walls.get_mut(wall)) {
            *position += by_m;
        }
        Self::new(model, self.diameter_m, positions_m)
    }
}

impl Arrangement {
    /// A whole column: diameters above, beside and below the wall, and the walls' positions by band.
    pub fn new(model: &Model<'_>, diameters_m: [f64; 3], positions_m: Vec<Vec<f64>>) -> EngineResult<Self> {
        let [above_m, zone_m, below_m] = diameters_m;
        Ok(Self {
            above: EndGeometry::new(&model.above, above_m)?,
            zone: ZoneGeometry::new(model, zone_m, positions_m)?,
            below: EndGeometry::new(&model.below, below_m)?,
        })
    }

    /// Geometry of the sections of all stacks, in the order of [`Model::stacks`].
    pub fn stacks(&self) -> impl Iterator<Item = (&[SectionGeometry], f64)> {
        std::iter::once((self.above.sections.as_slice(), self.above.area_m2))
            .chain(self.zone.sides.iter().map(|side| (side.sections.as_slice(), side.area_m2)))
            .chain(std::iter::once((self.below.sections.as_slice(), self.below.area_m2)))
    }
}
