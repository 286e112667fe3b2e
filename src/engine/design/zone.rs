//! Pressure drops of the compartments at one point, ready for the balance: borrowed loads and geometry, no allocation per
//! evaluation.

use super::arrangement::ZoneGeometry;
use super::model::Model;
use crate::engine::hydraulics::load::StageLoad;
use crate::engine::hydraulics::section::{BeyondFlood, SectionGeometry, SectionModel};

/// Relative step of the central differences that give exponents and slopes: truncation and rounding errors are then both
/// below 1e-8.
pub(crate) const DIFFERENCE_STEP: f64 = 1e-4;

/// Least factor on any row's vapour, and least share, that a balance looks at: next to no vapour is no operating state.
const LEAST_FACTOR: f64 = 1e-3;

/// Both sides (or more) of the wall at one point.
pub(crate) struct Zone<'m> {
    pub sides: Vec<SideDrop<'m>>,
    /// Required shares.
    pub required: &'m [f64],
}

/// One compartment's pressure drop as a function of the vapour at its lower edge.
pub(crate) struct SideDrop<'m> {
    sections: Vec<SectionDrop<'m>>,
    devices: Vec<DeviceDrop>,
    /// Static head, Pa.
    pub static_pa: f64,
    /// A remedy tried on this compartment: multiplies its friction.
    pub friction_scale: f64,
}

struct SectionDrop<'m> {
    /// Index in the case.
    index: usize,
    model: &'m SectionModel,
    geometry: &'m SectionGeometry,
    loads: &'m [StageLoad],
    travel: f64,
}

struct DeviceDrop {
    /// Loss at the required shares, Pa; goes with the square of the vapour.
    loss_pa: f64,
    travel: f64,
}

/// Where a compartment has no pressure drop because a row is beyond flood.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Beyond {
    /// Section index in the case.
    pub section: usize,
    /// Row in the section.
    pub row: usize,
}

impl<'m> Zone<'m> {
    /// Gathers what one point needs.
    pub fn new(model: &'m Model<'_>, zone: &'m ZoneGeometry, point: usize) -> Self {
        let sides = model
            .sides
            .iter()
            .zip(&zone.sides)
            .map(|(stack, geometry)| {
                let sections = stack
                    .sections
                    .iter()
                    .zip(&geometry.sections)
                    .map(|(section, geometry)| SectionDrop {
                        index: section.index,
                        model: &section.model,
                        geometry,
                        loads: section.loads_at(point),
                        travel: section.travel(point),
                    })
                    .collect();
                let area_of = |index: usize| {
                    let found = stack.sections.iter().zip(&geometry.sections).find(|(s, _)| s.index == index);
                    found.map_or(geometry.area_m2, |(_, g)| g.area_m2)
                };
                let devices = stack
                    .devices
                    .iter()
                    .map(|device| DeviceDrop {
                        loss_pa: device.loss_pa(point, area_of(device.device.section)),
                        travel: device.travel(point),
                    })
                    .collect();
                SideDrop { sections, devices, static_pa: stack.static_pa(point), friction_scale: 1.0 }
            })
            .collect();
        Self { sides, required: model.required(point) }
    }

    /// Pressure drop of one side at a share; none beyond flood.
    pub fn drop_pa(&self, side: usize, share: f64) -> Option<f64> {
        let required = self.required.get(side)?;
        self.sides.get(side)?.drop_pa(share / required).ok()
    }

    /// Least share of one side at which every row of it still has vapour. Where vapour is drawn off or condensed between two
    /// sections, the upper one runs dry before the lower edge does.
    pub fn least_share(&self, side: usize) -> f64 {
        let (Some(side), Some(required)) = (self.sides.get(side), self.required.get(side)) else { return LEAST_FACTOR };
        let travels = side.sections.iter().map(|s| s.travel).chain(side.devices.iter().map(|d| d.travel));
        let greatest = travels.fold(1.0, f64::max);
        (required * (1.0 - (1.0 - LEAST_FACTOR) / greatest)).max(LEAST_FACTOR)
    }

    /// True if every compartment's drop is known to rise with its vapour: then there is one balance at most, and it is stable.
    pub fn rises(&self) -> bool {
        let travels_up = |travel: f64| travel >= 0.0;
        self.sides.iter().all(|side| {
            side.sections.iter().all(|s| s.model.friction_rises() && travels_up(s.travel))
                && side.devices.iter().all(|d| travels_up(d.travel))
        })
    }

    /// Slope d(drop)/d(share) of one side, Pa.
    pub fn slope_pa(&self, side: usize, share: f64) -> Option<f64> {
        let step = DIFFERENCE_STEP * share;
        let up = self.drop_pa(side, share + step)?;
        let down = self.drop_pa(side, share - step)?;
        Some((up - down) / (2.0 * step))
    }
}

impl<'m> SideDrop<'m> {
    /// Puts a restriction at the lower edge: this loss at the required shares, going with the square of the vapour.
    pub fn add_restriction(&mut self, loss_pa: f64) {
        self.devices.push(DeviceDrop { loss_pa, travel: 1.0 });
    }

    /// Puts other hydraulics in one section.
    pub fn replace<'s>(&mut self, section: usize, model: &'s SectionModel)
    where
        's: 'm,
    {
        for drop in self.sections.iter_mut().filter(|s| s.index == section) {
            drop.model = model;
        }
    }

    /// Friction of sections and devices, Pa, with the vapour at the lower edge multiplied by `bottom`.
    pub fn friction_pa(&self, bottom: f64) -> Result<f64, Beyond> {
        let mut sum = 0.0;
        for section in &self.sections {
            let factor = 1.0 + section.travel * (bottom - 1.0);
            sum += section
                .model
                .friction_pa(section.geometry, section.loads, factor)
                .map_err(|BeyondFlood { row }| Beyond { section: section.index, row })?;
        }
        for device in &self.devices {
            let factor = 1.0 + device.travel * (bottom - 1.0);
            sum += device.loss_pa * factor * factor;
        }
        Ok(sum * self.friction_scale)
    }

    /// Friction and static head, Pa.
    pub fn drop_pa(&self, bottom: f64) -> Result<f64, Beyond> {
        self.friction_pa(bottom).map(|friction| friction + self.static_pa)
    }

    /// Response exponents at the vapour multiplied by `bottom`: of the whole drop and of the friction alone.
    pub fn exponents(&self, bottom: f64) -> Result<Exponents, Beyond> {
        self.friction_pa(bottom).and_then(|friction_pa| self.exponents_at(bottom, friction_pa))
    }

    /// The same where the friction there is known.
    pub fn exponents_at(&self, bottom: f64, friction: f64) -> Result<Exponents, Beyond> {
        let step = DIFFERENCE_STEP * bottom;
        let (up, down) = (self.friction_pa(bottom + step)?, self.friction_pa(bottom - step)?);
        let slope = (up - down) / (2.0 * step) * bottom;
        Ok(Exponents { total: slope / (friction + self.static_pa), friction: slope / friction })
    }
}

/// d ln(pressure drop)/d ln(vapour at the lower edge).
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Exponents {
    pub total: f64,
    pub friction: f64,
}
