//! Quantities of the engine: the `uom` types it uses, the ones `uom` lacks, and the one door to bare SI numbers.
//!
//! Nothing else in the crate imports `uom` quantities. Bare `f64` in SI stay inside numeric kernels, whose names carry the
//! unit (`height_m`); dimensionless figures (shares, floods, flow parameters) are plain `f64` everywhere.

use std::marker::PhantomData;
use uom::si::{Dimension, ISQ, Quantity, SI};
use uom::typenum::{N1, N2, P1, P2, Z0};

pub use uom::si::f64::{
    Acceleration, Area, DynamicViscosity, Length, Mass, MassDensity, MassRate, Pressure, SurfaceTension,
    ThermodynamicTemperature, Time, Velocity, Volume, VolumeRate,
};

/// Pressure drop per height, Pa/m; `uom` has no name for it.
pub type PressureGradient = Quantity<ISQ<N2, P1, N2, Z0, Z0, Z0, Z0>, SI<f64>, f64>;
/// Surface per volume or reciprocal length, 1/m: specific area and packing factors.
pub type PerLength = Quantity<ISQ<N1, Z0, Z0, Z0, Z0, Z0, Z0>, SI<f64>, f64>;
/// Volume flow per length of weir, m3/(m s). (Dimension of a kinematic viscosity, but never one.)
pub type WeirLoad = Quantity<ISQ<P2, Z0, N1, Z0, Z0, Z0, Z0>, SI<f64>, f64>;

/// Gas load factor F = u sqrt(rhoV), in Pa^0.5: `uom` has no half powers.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct FFactor(f64);

impl FFactor {
    /// From a velocity and a vapour density; both must be non-negative.
    pub fn new(velocity: Velocity, density: MassDensity) -> Self {
        Self(velocity.si() * density.si().sqrt())
    }
    /// From a number in Pa^0.5.
    pub fn from_root_pascal(value: f64) -> Self {
        Self(value)
    }
    /// The number in Pa^0.5.
    pub fn root_pascal(self) -> f64 {
        self.0
    }
}

/// Standard acceleration of gravity, m/s2 (exact by definition, CGPM 1901).
pub const STANDARD_GRAVITY_M_S2: f64 = 9.80665;

/// The only door between quantities and bare SI numbers.
pub trait Si: Sized {
    /// The number in coherent SI units.
    fn si(self) -> f64;
    /// The quantity from a number in coherent SI units.
    fn from_si(si: f64) -> Self;
}

impl<D: Dimension + ?Sized> Si for Quantity<D, SI<f64>, f64> {
    #[expect(clippy::disallowed_fields, reason = "this is the door itself")]
    fn si(self) -> f64 {
        self.value
    }
    fn from_si(si: f64) -> Self {
        Quantity { dimension: PhantomData, units: PhantomData, value: si }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use uom::si::length::foot;
    use uom::si::mass_density::kilogram_per_cubic_meter;
    use uom::si::velocity::meter_per_second;

    #[test]
    fn door_reads_and_writes_base_units() {
        assert_eq!(Length::new::<foot>(1.0).si(), 0.3048);
        assert_eq!(Length::from_si(2.5).si(), 2.5);
    }

    #[test]
    fn f_factor_is_velocity_times_root_of_density() {
        let f = FFactor::new(Velocity::new::<meter_per_second>(2.0), MassDensity::new::<kilogram_per_cubic_meter>(4.0));
        assert_eq!(f.root_pascal(), 4.0);
    }
}
