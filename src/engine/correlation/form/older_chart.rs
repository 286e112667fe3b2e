//! Older packing chart: six curves ln Y = polynomial in ln X, joined smoothly between them.

use super::super::range::{Domain, Outside};
use super::super::record::{Dimension as D, Record};
use super::{Arguments, Evaluator, Shape};
use crate::engine::error::EngineResult;
use crate::engine::units::STANDARD_GRAVITY_M_S2;

/// Number of curves.
const CURVES: usize = 6;

/// Y = G^2 Fp muL^0.1/(rhoG (rhoL - rhoG) g) against X at six gradients; monotone and smooth (C1) in
/// (ln gradient, ln Y) between the curves by Fritsch and Carlson's limited slopes, so that exponents have no jumps.
///
/// Below the lowest curve the end slope is carried on (reported by [`GpdOlder::outside`]); above the top curve there is no
/// pressure drop to be had: `None`. Below the record's least abscissa the chart is evaluated there, which is reported.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct GpdOlder {
    domain: Domain,
    gradient_unit_pa_m: f64,
    mu_unit_pa_s: f64,
    ln_gradients: [f64; CURVES],
    curves: [[f64; 5]; CURVES],
    viscosity_exponent: f64,
    abscissa_least: f64,
}

/// A monotone cubic through six points.
struct Joined {
    u: [f64; CURVES],
    v: [f64; CURVES],
    slope: [f64; CURVES],
}

impl Joined {
    /// Fritsch and Carlson 1980: start from mean secants, then shrink slopes that would overshoot.
    fn new(u: [f64; CURVES], v: [f64; CURVES]) -> Self {
        let mut secant = [0.0; CURVES - 1];
        let pairs = u.iter().zip(u.iter().skip(1)).zip(v.iter().zip(v.iter().skip(1)));
        for (s, ((ua, ub), (va, vb))) in secant.iter_mut().zip(pairs) {
            *s = (vb - va) / (ub - ua);
        }
        let [s0, s1, s2, s3, s4] = secant;
        let mean = |a: f64, b: f64| if a * b > 0.0 { 0.5 * (a + b) } else { 0.0 };
        let mut slope = [s0, mean(s0, s1), mean(s1, s2), mean(s2, s3), mean(s3, s4), s4];
        let mut left_scale = 1.0;
        let mut limited = slope;
        for (place, s) in secant.iter().enumerate() {
            let (Some(&a), Some(&b)) = (slope.get(place), slope.get(place + 1)) else { continue };
            let a = a * left_scale;
            let squared = if *s == 0.0 { 0.0 } else { (a / s).powi(2) + (b / s).powi(2) };
            let scale = if squared > 9.0 { 3.0 / squared.sqrt() } else { 1.0 };
            if let Some(l) = limited.get_mut(place) {
                *l = a * scale;
            }
            if let Some(l) = limited.get_mut(place + 1) {
                *l = b * scale;
            }
            left_scale = scale;
        }
        slope = limited;
        Self { u, v, slope }
    }

    /// The intervals: (u, v, slope) at both ends.
    fn intervals(&self) -> impl Iterator<Item = [(f64, f64, f64); 2]> + '_ {
        let nodes = || self.u.iter().zip(&self.v).zip(&self.slope).map(|((u, v), s)| (*u, *v, *s));
        nodes().zip(nodes().skip(1)).map(|(a, b)| [a, b])
    }

    fn first(&self) -> (f64, f64, f64) {
        let ([u, ..], [v, ..], [s, ..]) = (self.u, self.v, self.slope);
        (u, v, s)
    }

    fn last(&self) -> (f64, f64, f64) {
        let ([.., u], [.., v], [.., s]) = (self.u, self.v, self.slope);
        (u, v, s)
    }

    fn cubic([(ua, va, sa), (ub, vb, sb)]: [(f64, f64, f64); 2], u: f64) -> (f64, f64) {
        let width = ub - ua;
        let t = (u - ua) / width;
        let secant = (vb - va) / width;
        let c2 = 3.0 * secant - 2.0 * sa - sb;
        let c3 = sa + sb - 2.0 * secant;
        (va + width * t * (sa + t * (c2 + t * c3)), sa + t * (2.0 * c2 + t * 3.0 * c3))
    }

    /// v at u; straight on with the end slopes outside.
    fn at(&self, u: f64) -> f64 {
        let (first, last) = (self.first(), self.last());
        if u <= first.0 {
            return first.1 + first.2 * (u - first.0);
        }
        self.intervals()
            .find(|[_, b]| u <= b.0)
            .map_or(last.1 + last.2 * (u - last.0), |interval| Self::cubic(interval, u).0)
    }

    /// u at v; straight on with the end slope below, `None` above.
    fn inverse(&self, v: f64) -> Option<f64> {
        let (first, last) = (self.first(), self.last());
        if v <= first.1 {
            return Some(first.0 + (v - first.1) / first.2);
        }
        if v >= last.1 {
            return (v == last.1).then_some(last.0);
        }
        let interval = self.intervals().find(|[_, b]| v <= b.1)?;
        let [a, b] = interval;
        // Invariant: v(low) <= v <= v(high). Newton where it stays inside, else halving; the cubic is monotone.
        let (mut low, mut high) = (a.0, b.0);
        let mut u = a.0 + (v - a.1) / (b.1 - a.1) * (b.0 - a.0);
        for _ in 0..Self::CAP {
            let (value, slope) = Self::cubic(interval, u);
            if value < v {
                low = u
            } else {
                high = u
            }
            let newton = u - (value - v) / slope;
            let next = if newton > low && newton < high { newton } else { 0.5 * (low + high) };
            if (next - u).abs() <= Self::TOLERANCE {
                return Some(next);
            }
            u = next;
        }
        Some(u)
    }

    /// Absolute tolerance on ln(gradient): relative on the gradient.
    const TOLERANCE: f64 = 1e-13;
    /// Halving alone needs fewer from the widest interval.
    const CAP: usize = 80;
}

impl GpdOlder {
    fn joined(&self, abscissa: f64) -> Joined {
        let x = abscissa.max(self.abscissa_least).ln();
        let v = self.curves.map(|curve| curve.iter().rev().fold(0.0, |sum, c| sum * x + c));
        Joined::new(self.ln_gradients, v)
    }

    /// Ordinate Y at a gradient and abscissa X.
    pub fn ordinate(&self, gradient_pa_m: f64, abscissa: f64) -> f64 {
        self.joined(abscissa).at((gradient_pa_m / self.gradient_unit_pa_m).ln()).exp()
    }

    /// Pressure drop per height, Pa/m; `None` above the top curve (beyond the chart).
    pub fn gradient_pa_m(&self, ordinate: f64, abscissa: f64) -> Option<f64> {
        Some(self.joined(abscissa).inverse(ordinate.ln())?.exp() * self.gradient_unit_pa_m)
    }

    /// Y of a capacity factor C = u (rhoG/(rhoL - rhoG))^0.5 with the older chart's packing factor.
    pub fn y_from_si(&self, c_m_s: f64, factor_per_m: f64, mu_l_pa_s: f64) -> f64 {
        c_m_s * c_m_s * factor_per_m * (mu_l_pa_s / self.mu_unit_pa_s).powf(self.viscosity_exponent)
            / STANDARD_GRAVITY_M_S2
    }

    /// The capacity factor of an ordinate, m/s: inverse of [`GpdOlder::y_from_si`].
    pub fn c_m_s(&self, ordinate: f64, factor_per_m: f64, mu_l_pa_s: f64) -> f64 {
        (ordinate / self.y_from_si(1.0, factor_per_m, mu_l_pa_s)).sqrt()
    }

    /// What lies outside the chart.
    pub fn outside(&self, gradient_pa_m: f64, abscissa: f64, found: &mut Vec<Outside>) {
        self.domain.outside(&[("gradient", gradient_pa_m), ("abscissa", abscissa)], found);
    }
}

impl Evaluator for GpdOlder {
    const SHAPE: Shape = Shape {
        name: "gpd_older",
        coefficients: &[
            ("gradients", CURVES),
            ("curve_1", 5),
            ("curve_2", 5),
            ("curve_3", 5),
            ("curve_4", 5),
            ("curve_5", 5),
            ("curve_6", 5),
            ("viscosity_exponent", 1),
            ("abscissa_least", 1),
        ],
        inputs: &[
            ("gradient", D::Gradient),
            ("abscissa", D::Dimensionless),
            ("ordinate", D::Dimensionless),
            ("capacity_factor", D::Velocity),
            ("packing_factor", D::PerLength),
            ("liquid_viscosity", D::Viscosity),
        ],
        outputs: &[
            ("ordinate", D::Dimensionless),
            ("gradient", D::Gradient),
            ("y", D::Dimensionless),
            ("capacity_factor", D::Velocity),
        ],
    };

    fn from_record(record: &Record) -> EngineResult<Self> {
        let gradients: [f64; CURVES] = record.numbers("gradients")?;
        if !gradients.iter().zip(gradients.iter().skip(1)).all(|(a, b)| 0.0 < *a && a < b) {
            return Err(record.unusable("gradients must be positive and rise"));
        }
        Ok(Self {
            domain: Domain::new(record),
            gradient_unit_pa_m: record.input_unit("gradient")?,
            mu_unit_pa_s: record.input_unit("liquid_viscosity")?,
            ln_gradients: gradients.map(f64::ln),
            curves: [
                record.numbers("curve_1")?,
                record.numbers("curve_2")?,
                record.numbers("curve_3")?,
                record.numbers("curve_4")?,
                record.numbers("curve_5")?,
                record.numbers("curve_6")?,
            ],
            viscosity_exponent: record.number("viscosity_exponent")?,
            abscissa_least: record.number("abscissa_least")?,
        })
    }

    fn evaluate(&self, output: &str, at: &Arguments<'_>, found: &mut Vec<Outside>) -> EngineResult<f64> {
        match output {
            "y" => {
                let (factor, mu) = (at.get("packing_factor")?, at.get("liquid_viscosity")?);
                Ok(self.y_from_si(at.get("capacity_factor")?, factor, mu))
            }
            "capacity_factor" => {
                let (factor, mu) = (at.get("packing_factor")?, at.get("liquid_viscosity")?);
                Ok(self.c_m_s(at.get("ordinate")?, factor, mu))
            }
            "gradient" => {
                let (ordinate, abscissa) = (at.get("ordinate")?, at.get("abscissa")?);
                let gradient_pa_m = self
                    .gradient_pa_m(ordinate, abscissa)
                    .ok_or_else(|| at.no_answer("above the top curve of the chart"))?;
                self.outside(gradient_pa_m, abscissa, found);
                Ok(gradient_pa_m)
            }
            _ => {
                let (gradient_pa_m, abscissa) = (at.get("gradient")?, at.get("abscissa")?);
                self.outside(gradient_pa_m, abscissa, found);
                Ok(self.ordinate(gradient_pa_m, abscissa))
            }
        }
    }
}
