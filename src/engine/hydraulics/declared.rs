//! Internals whose hydraulics somebody measured or guarantees: a capacity factor, and friction against the F-factor.

use super::load::StageLoad;
use crate::engine::case::{Declared, Resistance};
use crate::engine::units::Si;

/// Declared internals in SI.
#[derive(Clone, Debug)]
pub(crate) struct DeclaredInternals {
    capacity: Vec<(f64, f64)>,
    resistance: Option<DeclaredResistance>,
    system_factor: f64,
}

#[derive(Clone, Debug)]
enum DeclaredResistance {
    Power {
        pa_m: f64,
        exponent: f64,
    },
    /// ln F, ln(Pa/m) and the slope d ln(Pa/m)/d ln F at each point.
    Points(Vec<[f64; 3]>),
}

/// A flow parameter or F-factor outside the points that were declared.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct BeyondPoints {
    pub what: &'static str,
    pub value: f64,
    pub min: f64,
    pub max: f64,
}

impl DeclaredInternals {
    /// Reads declared internals of a checked case.
    pub fn new(declared: &Declared, system_factor: f64) -> Self {
        let resistance = declared.resistance.as_ref().map(|resistance| match resistance {
            Resistance::Power { coefficient, exponent } => {
                DeclaredResistance::Power { pa_m: coefficient.si(), exponent: *exponent }
            }
            Resistance::Points(points) => {
                let logs: Vec<[f64; 2]> = points.iter().map(|(f, g)| [f.ln(), g.si().ln()]).collect();
                DeclaredResistance::Points(with_monotone_slopes(&logs))
            }
        });
        Self { capacity: declared.capacity.iter().map(|(x, c)| (*x, c.si())).collect(), resistance, system_factor }
    }

    /// True if friction is declared.
    pub fn has_resistance(&self) -> bool {
        self.resistance.is_some()
    }

    /// Area of the place at which the row floods, m2. Flow parameters outside the declared points take the nearest point.
    pub fn flooding_area_m2(&self, load: &StageLoad) -> f64 {
        let flow_parameter = load.flow_parameter();
        let mut previous: Option<(f64, f64)> = None;
        let mut capacity_m_s = self.capacity.last().map_or(f64::NAN, |(_, c)| *c);
        for &(x, c) in &self.capacity {
            if flow_parameter <= x {
                capacity_m_s = match previous {
                    Some((x0, c0)) => c0 + (c - c0) * (flow_parameter - x0) / (x - x0),
                    None => c,
                };
                break;
            }
            previous = Some((x, c));
        }
        load.vapour_load_m3_s() / (capacity_m_s * self.system_factor)
    }

    /// Friction per height, Pa/m; none without a declared resistance.
    pub fn friction_pa_m(&self, area_m2: f64, load: &StageLoad) -> Option<f64> {
        let f_factor = load.vapour_m3_s() / area_m2 * load.rho_v_kg_m3.sqrt();
        self.resistance.as_ref().map(|resistance| match resistance {
            DeclaredResistance::Power { pa_m, exponent } => pa_m * f_factor.powf(*exponent),
            DeclaredResistance::Points(points) => hermite(points, f_factor.ln()).exp(),
        })
    }

    /// What lies outside the declared points.
    pub fn outside(&self, area_m2: f64, load: &StageLoad, found: &mut Vec<BeyondPoints>) {
        let mut check = |what: &'static str, value: f64, range: Option<(f64, f64)>| {
            if let Some((min, max)) = range
                && !(min..=max).contains(&value)
            {
                found.push(BeyondPoints { what, value, min, max });
            }
        };
        if let [(first, _), .., (last, _)] = self.capacity.as_slice() {
            check("flow parameter", load.flow_parameter(), Some((*first, *last)));
        }
        if let Some(DeclaredResistance::Points(points)) = &self.resistance {
            let f_factor = load.vapour_m3_s() / area_m2 * load.rho_v_kg_m3.sqrt();
            let range = points.first().zip(points.last()).map(|([a, ..], [b, ..])| (a.exp(), b.exp()));
            check("F-factor", f_factor, range);
        }
    }
}

/// Slopes of a monotone piecewise cubic through the points (Fritsch and Butland's weighted harmonic mean).
fn with_monotone_slopes(points: &[[f64; 2]]) -> Vec<[f64; 3]> {
    let secants: Vec<(f64, f64)> = points
        .windows(2)
        .filter_map(|pair| match pair {
            [[x0, y0], [x1, y1]] => Some((x1 - x0, (y1 - y0) / (x1 - x0))),
            _ => None,
        })
        .collect();
    points
        .iter()
        .enumerate()
        .map(|(i, &[x, y])| {
            let left = i.checked_sub(1).and_then(|j| secants.get(j));
            let slope = match (left, secants.get(i)) {
                (Some(&(h0, d0)), Some(&(h1, d1))) if d0 * d1 > 0.0 => {
                    let (w0, w1) = (2.0 * h1 + h0, h1 + 2.0 * h0);
                    (w0 + w1) / (w0 / d0 + w1 / d1)
                }
                (Some(_), Some(_)) => 0.0,
                (Some(&(_, d)), None) | (None, Some(&(_, d))) => d,
                (None, None) => 0.0,
            };
            [x, y, slope]
        })
        .collect()
}

/// The cubic at x; straight on with the end slope outside the points.
fn hermite(points: &[[f64; 3]], x: f64) -> f64 {
    if let Some(&[x0, y0, m0]) = points.first()
        && x <= x0
    {
        return y0 + m0 * (x - x0);
    }
    for pair in points.windows(2) {
        if let [[x0, y0, m0], [x1, y1, m1]] = pair
            && x <= *x1
        {
            let h = x1 - x0;
            let t = (x - x0) / h;
            let s = 1.0 - t;
            return s * s * ((1.0 + 2.0 * t) * y0 + t * h * m0) + t * t * ((3.0 - 2.0 * t) * y1 - s * h * m1);
        }
    }
    points.last().map_or(f64::NAN, |&[x1, y1, m1]| y1 + m1 * (x - x1))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn cubic_through_points_of_a_power_law_is_the_power_law() {
        let logs: Vec<[f64; 2]> =
            [0.5_f64, 1.0, 2.0, 3.0].iter().map(|f| [f.ln(), (80.0 * f.powf(1.9)).ln()]).collect();
        let points = with_monotone_slopes(&logs);
        for f in [0.3_f64, 0.5, 0.8, 1.7, 3.0, 4.0] {
            approx::assert_relative_eq!(hermite(&points, f.ln()).exp(), 80.0 * f.powf(1.9), max_relative = 1e-12);
        }
    }

    #[test]
    fn cubic_is_monotone_between_points_that_rise() {
        let logs = [[0.0, 0.0], [1.0, 0.1], [2.0, 3.0], [3.0, 3.1]];
        let points = with_monotone_slopes(&logs);
        let values: Vec<f64> = (0..=300).map(|i| hermite(&points, f64::from(i) * 0.01)).collect();
        assert!(values.windows(2).all(|w| w[1] >= w[0]));
    }
}
