//! Stichlmair, Bravo and Fair: dry and irrigated pressure drop of a packed bed.

use super::super::range::Outside;
use super::super::record::{Dimension as D, Record};
use super::{Arguments, Evaluator, Shape};
use crate::engine::error::EngineResult;
use crate::engine::units::STANDARD_GRAVITY_M_S2;

/// Coefficients common to all packings.
///
/// dp = 6 (1 - eps)/a, Re = u rhoV dp/muV, f0 = C1/Re + C2/Re^0.5 + C3,
/// dry = k f0 (1 - eps)/eps^m rhoV u^2/dp, c = -(C1/Re + C2/(2 Re^0.5))/f0,
/// h0 = b (uL^2 a/(g eps^m))^n, h = h0 (1 + j z^2), z = wet/(rhoL g),
/// wet = dry ((1 - eps + h)/(1 - eps))^((2 + c)/3) (eps/(eps - h))^m, smallest root.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Stichlmair {
    drag_factor: f64,
    void_exponent: f64,
    hold_up_factor: f64,
    hold_up_exponent: f64,
    loading_factor: f64,
}

impl Stichlmair {
    /// The evaluator of one packing; void fraction in (0, 1), specific area positive.
    pub fn bed(&self, specific_area_per_m: f64, void_fraction: f64, constants: [f64; 3]) -> StichlmairBed {
        let solid = 1.0 - void_fraction;
        let particle_m = 6.0 * solid / specific_area_per_m;
        let void_power = void_fraction.powf(self.void_exponent);
        let froude = specific_area_per_m / (STANDARD_GRAVITY_M_S2 * void_power);
        StichlmairBed {
            void_fraction,
            solid,
            particle_m,
            constants,
            dry_factor_per_m: self.drag_factor * solid / void_power / particle_m,
            hold_up_factor: self.hold_up_factor * froude.powf(self.hold_up_exponent),
            hold_up_exponent: 2.0 * self.hold_up_exponent,
            loading_factor: self.loading_factor,
            void_exponent: self.void_exponent,
        }
    }
}

/// Dry pressure drop and the local exponent of its friction factor.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct DryGradient {
    /// Pressure drop per height without liquid, Pa/m.
    pub gradient_pa_m: f64,
    /// d ln f0/d ln Re, in (-1, 0].
    pub exponent: f64,
}

/// Stichlmair's method for one packing. Copies freely; no allocation.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct StichlmairBed {
    void_fraction: f64,
    solid: f64,
    particle_m: f64,
    constants: [f64; 3],
    dry_factor_per_m: f64,
    hold_up_factor: f64,
    hold_up_exponent: f64,
    loading_factor: f64,
    void_exponent: f64,
}

impl StichlmairBed {
    /// Relative tolerance of the irrigated pressure drop.
    const TOLERANCE: f64 = 1e-13;
    /// A step this small is the last one where the slope is at least [`Self::FIRM`]: what it leaves is below the tolerance.
    const NEARLY: f64 = 1e-8;
    const FIRM: f64 = 0.2;
    /// Steps after which the search gives up as if flooded; near the loss of the root Newton halves the distance.
    const CAP: usize = 120;

    /// Dry pressure drop at a superficial vapour velocity (positive).
    #[inline]
    pub fn dry(&self, velocity_m_s: f64, rho_v_kg_m3: f64, mu_v_pa_s: f64) -> DryGradient {
        let [c1, c2, c3] = self.constants;
        let reynolds = velocity_m_s * rho_v_kg_m3 * self.particle_m / mu_v_pa_s;
        let (laminar, middle) = (c1 / reynolds, c2 / reynolds.sqrt());
        let f0 = laminar + middle + c3;
        DryGradient {
            gradient_pa_m: self.dry_factor_per_m * f0 * rho_v_kg_m3 * velocity_m_s * velocity_m_s,
            exponent: -(laminar + 0.5 * middle) / f0,
        }
    }

    /// Hold-up below loading, volume of liquid over volume of bed.
    pub fn hold_up(&self, liquid_velocity_m_s: f64) -> f64 {
        self.hold_up_factor * liquid_velocity_m_s.powf(self.hold_up_exponent)
    }

    /// Irrigated pressure drop, Pa/m; `None` beyond flood, never a number then. `start` is a guess that saves steps (the
    /// answer at a neighbouring load) and never changes the answer.
    ///
    /// With s = ln z, g(s) = s - s_dry - ((2+c)/3) ln(1 + h/(1-eps)) + m ln(1 - h/eps) is concave: from the left of
    /// the smallest root (g < 0, slope > 0) a tangent's root never passes it. So Newton's steps rise to the root, the step
    /// z -> z (1 + ds) staying below z exp(ds); and a slope <= 0, or h >= eps, met with g < 0, proves that there is no root.
    #[inline]
    pub fn wet_pa_m(&self, dry: DryGradient, hold_up: f64, rho_l_kg_m3: f64, start: Option<f64>) -> Option<f64> {
        let weight_pa_m = rho_l_kg_m3 * STANDARD_GRAVITY_M_S2;
        let power = (2.0 + dry.exponent) / 3.0;
        let z_dry = dry.gradient_pa_m / weight_pa_m;
        let full = self.void_fraction - hold_up;
        if !(full > 0.0 && z_dry > 0.0 && z_dry.is_finite()) {
            return None;
        }
        // Hold-up is at least h0, so the root is at least this.
        let least = z_dry
            * (power * (hold_up / self.solid).ln_1p() - self.void_exponent * (-hold_up / self.void_fraction).ln_1p())
                .exp();
        let ln_z_dry = z_dry.ln();
        let mut z = start.map_or(least, |gradient_pa_m| (gradient_pa_m / weight_pa_m).max(least));
        let mut from_left = z <= least;
        for _ in 0..Self::CAP {
            let rise = self.loading_factor * hold_up * z * z;
            let h = hold_up + rise;
            let room = self.void_fraction - h;
            let slope = 1.0 - 2.0 * rise * (power / (self.solid + h) + self.void_exponent / room);
            if !(room > 0.0 && slope > 0.0) {
                if from_left {
                    return None;
                }
                // The guess lay beyond the peak: it says nothing about the root on the left.
                (z, from_left) = (least, true);
                continue;
            }
            // Rounding of 1 + h/(1-eps) and 1 - h/eps adds a few parts in 1e16 to g, so plain logarithms will do.
            let g = z.ln() - ln_z_dry - power * (1.0 + h / self.solid).ln()
                + self.void_exponent * (1.0 - h / self.void_fraction).ln();
            let step = -g / slope;
            // What a Newton step leaves is of the order of its square; away from the loss of the root the factor is small.
            let last = step.abs() <= Self::TOLERANCE || (slope > Self::FIRM && step.abs() <= Self::NEARLY);
            // Coming from the left only rounding makes a step non-positive.
            if last || (from_left && step <= 0.0) {
                return Some(z * (1.0 + step) * weight_pa_m);
            }
            from_left = true;
            z = (z * (1.0 + step)).max(least);
        }
        None
    }
}

impl Evaluator for Stichlmair {
    const SHAPE: Shape = Shape {
        name: "stichlmair",
        coefficients: &[
            ("drag_factor", 1),
            ("void_exponent", 1),
            ("hold_up_factor", 1),
            ("hold_up_exponent", 1),
            ("loading_factor", 1),
        ],
        inputs: &[
            ("specific_area", D::PerLength),
            ("void_fraction", D::Dimensionless),
            ("c1", D::Dimensionless),
            ("c2", D::Dimensionless),
            ("c3", D::Dimensionless),
            ("vapour_velocity", D::Velocity),
            ("liquid_velocity", D::Velocity),
            ("vapour_density", D::Density),
            ("liquid_density", D::Density),
            ("vapour_viscosity", D::Viscosity),
        ],
        outputs: &[
            ("wet_gradient", D::Gradient),
            ("dry_gradient", D::Gradient),
            ("exponent", D::Dimensionless),
            ("hold_up", D::Dimensionless),
        ],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        Ok(Self {
            drag_factor: record.number("drag_factor")?,
            void_exponent: record.number("void_exponent")?,
            hold_up_factor: record.number("hold_up_factor")?,
            hold_up_exponent: record.number("hold_up_exponent")?,
            loading_factor: record.number("loading_factor")?,
        })
    }

    fn evaluate(&self, output: &str, at: &Arguments<'_>, _: &mut Vec<Outside>) -> EngineResult<f64> {
        let constants = [at.get("c1")?, at.get("c2")?, at.get("c3")?];
        let bed = self.bed(at.get("specific_area")?, at.get("void_fraction")?, constants);
        if output == "hold_up" {
            return Ok(bed.hold_up(at.get("liquid_velocity")?));
        }
        let dry = bed.dry(at.get("vapour_velocity")?, at.get("vapour_density")?, at.get("vapour_viscosity")?);
        match output {
            "dry_gradient" => Ok(dry.gradient_pa_m),
            "exponent" => Ok(dry.exponent),
            _ => {
                let hold_up = bed.hold_up(at.get("liquid_velocity")?);
                bed.wet_pa_m(dry, hold_up, at.get("liquid_density")?, None)
                    .ok_or_else(|| at.no_answer("beyond flood, no pressure drop holds the liquid"))
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn bed() -> StichlmairBed {
        // Coefficients of the method and of its authors' saddle.
        let method = Stichlmair {
            drag_factor: 0.75,
            void_exponent: 4.65,
            hold_up_factor: 0.555,
            hold_up_exponent: 1.0 / 3.0,
            loading_factor: 20.0,
        };
        method.bed(260.0, 0.68, [32.0, 7.0, 1.0])
    }

    const RHO_L: f64 = 1200.0;

    #[test]
    fn a_guess_never_changes_the_answer() {
        let (bed, hold_up) = (bed(), bed().hold_up(5e-3));
        for u in [0.01, 0.1, 0.3, 0.5, 0.6, 0.639, 0.6394] {
            let dry = bed.dry(u, 5.0, 5e-5);
            let cold = bed.wet_pa_m(dry, hold_up, RHO_L, None).unwrap();
            for guess in [1e-9, 0.5, 0.9, 0.999, 1.0, 1.001, 1.1, 2.0, 5.0, 1e6] {
                let warm = bed.wet_pa_m(dry, hold_up, RHO_L, Some(cold * guess)).unwrap();
                // Near flood the root is flat: rounding of 1e-16 in the equation is worth its root in the answer.
                let tolerance = if u > 0.63 { 1e-9 } else { 1e-12 };
                assert!((warm / cold - 1.0).abs() < tolerance, "{u} {guess}: {warm} {cold}");
            }
        }
    }

    #[test]
    fn beyond_flood_there_is_none_for_any_guess() {
        // The authors' example floods at 0.63943 m/s.
        let (bed, hold_up) = (bed(), bed().hold_up(5e-3));
        for u in [0.6395, 0.64, 0.7, 2.0, 1e3] {
            let dry = bed.dry(u, 5.0, 5e-5);
            for guess in [None, Some(100.0), Some(1991.0), Some(1e4)] {
                assert_eq!(bed.wet_pa_m(dry, hold_up, RHO_L, guess), None, "{u} {guess:?}");
            }
        }
        assert_eq!(bed.wet_pa_m(bed.dry(0.1, 5.0, 5e-5), 0.7, RHO_L, None), None, "liquid fills the bed");
    }

    #[test]
    fn no_liquid_leaves_the_dry_pressure_drop() {
        let bed = bed();
        let dry = bed.dry(0.4, 5.0, 5e-5);
        let wet = bed.wet_pa_m(dry, bed.hold_up(0.0), RHO_L, None).unwrap();
        assert!((wet / dry.gradient_pa_m - 1.0).abs() < 1e-14);
    }

    #[test]
    fn exponent_is_the_slope_of_the_friction_factor() {
        let bed = bed();
        let (u, d) = (0.4, 1e-5);
        let f = |u: f64| bed.dry(u, 5.0, 5e-5).gradient_pa_m / (u * u);
        let slope = (f(u * (1.0 + d)) / f(u * (1.0 - d))).ln() / ((1.0 + d) / (1.0 - d)).ln();
        assert!((slope - bed.dry(u, 5.0, 5e-5).exponent).abs() < 1e-8);
    }

    #[test]
    fn not_a_number_comes_out_as_none() {
        let bed = bed();
        for bad in [f64::NAN, f64::INFINITY] {
            let dry = DryGradient { gradient_pa_m: bad, exponent: -0.2 };
            assert_eq!(bed.wet_pa_m(dry, 0.05, RHO_L, None), None);
        }
        let dry = bed.dry(0.4, 5.0, 5e-5);
        assert_eq!(bed.wet_pa_m(dry, f64::NAN, RHO_L, None), None);
        assert!(bed.wet_pa_m(dry, 0.05, RHO_L, Some(f64::NAN)).is_some(), "a bad guess is only a bad guess");
    }
}
