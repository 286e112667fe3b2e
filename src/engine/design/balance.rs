//! The shares at which all compartments have the same pressure drop: every one of them, each stable or not.
//!
//! Two compartments are one equation in one share: bracketed at once where every characteristic is known to rise, scanned first
//! where one may fall (trays). More are solved over the common pressure drop,
//! on the rising and falling pieces of each compartment's own characteristic (`balance_many`).

use super::balance_many;
use super::zone::Zone;
use crate::engine::solve::root::{Evaluation, Tolerance, bracketed_with_signs};

/// Intervals of the scan over the share. A characteristic that turns twice within one interval would need rows of more than
/// one kind of falling branch; the local search between grid points below finds a pair of balances that lie closer.
const SCAN_INTERVALS: usize = 24;
/// An imbalance below this part of the pressure drop counts as balanced.
pub(crate) const BALANCED: f64 = 1e-9;
/// Tolerance of a share.
const SHARE_TOLERANCE: Tolerance = Tolerance { x_abs: 1e-14, x_rel: 1e-14, max_evaluations: 200 };
/// Rounds of the search for a turning point between grid points.
const TURNING_ROUNDS: usize = 30;

/// One balance.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Balance {
    pub shares: Vec<f64>,
    pub pressure_pa: f64,
    pub stable: bool,
}

/// All balances of one zone at one point.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct Balances {
    pub all: Vec<Balance>,
    /// Least imbalance met on the way, Pa.
    pub least_imbalance_pa: Option<f64>,
    /// Times that both sides' drops were worked out (two compartments).
    pub evaluations: usize,
}

impl Balances {
    /// The stable balance nearest the required shares.
    pub fn actual(&self, required: &[f64]) -> Option<&Balance> {
        let distance = |balance: &Balance| -> f64 {
            balance.shares.iter().zip(required).map(|(a, b)| (a - b).powi(2)).sum::<f64>()
        };
        self.all.iter().filter(|b| b.stable).min_by(|a, b| distance(a).total_cmp(&distance(b)))
    }

    /// How many stable ones.
    pub fn stable_count(&self) -> usize {
        self.all.iter().filter(|b| b.stable).count()
    }
}

/// Every balance of the zone.
pub(crate) fn all_balances(zone: &Zone<'_>) -> Balances {
    match zone.required {
        [_, _] => two(zone),
        _ => balance_many::all_balances(zone),
    }
}

/// First drop less second drop at a share of the first; a flooded side counts as endlessly high.
fn imbalance(zone: &Zone<'_>, share: f64) -> Option<Evaluation> {
    match (zone.drop_pa(0, share), zone.drop_pa(1, 1.0 - share)) {
        (Some(first), Some(second)) => Some(Evaluation::Value(first - second)),
        (None, Some(_)) => Some(Evaluation::Above),
        (Some(_), None) => Some(Evaluation::Below),
        (None, None) => None,
    }
}

fn sign(evaluation: Evaluation) -> f64 {
    match evaluation {
        Evaluation::Value(value) => value,
        Evaluation::Above => f64::INFINITY,
        Evaluation::Below => f64::NEG_INFINITY,
    }
}

fn two(zone: &Zone<'_>) -> Balances {
    if zone.rises() { rising(zone) } else { scanned(zone) }
}

/// Both drops rise with their vapour, so their difference rises with the share and crosses zero once at most.
fn rising(zone: &Zone<'_>) -> Balances {
    let mut found = Balances::default();
    let (low, high) = (zone.least_share(0), 1.0 - zone.least_share(1));
    let mut at_root: Option<(f64, f64)> = None;
    let mut evaluations = 0;
    let outcome = bracketed_with_signs(low, high, SHARE_TOLERANCE, |share| {
        evaluations += 1;
        match (zone.drop_pa(0, share), zone.drop_pa(1, 1.0 - share)) {
            (Some(first), Some(second)) => {
                if at_root.is_none_or(|(_, best)| (first - second).abs() < best) {
                    at_root = Some((first, (first - second).abs()));
                }
                Evaluation::Value(first - second)
            }
            (Some(_), None) => Evaluation::Below,
            // Both flooded at once: the greater share of the first side says on which side of the balance this is.
            (None, _) => Evaluation::Above,
        }
    });
    found.evaluations = evaluations;
    found.least_imbalance_pa = at_root.map(|(_, gap)| gap);
    if let (Ok(outcome), Some((pressure_pa, gap))) = (outcome, at_root)
        && gap <= BALANCED * pressure_pa
    {
        let shares = vec![outcome.root, 1.0 - outcome.root];
        found.all.push(Balance { shares, pressure_pa, stable: true });
    }
    found
}

fn scanned(zone: &Zone<'_>) -> Balances {
    let (low, high) = (zone.least_share(0), 1.0 - zone.least_share(1));
    let mut found = Balances::default();
    let mut before: Option<(f64, f64)> = None;
    let mut two_before: Option<(f64, f64)> = None;
    for i in 0..=SCAN_INTERVALS {
        let share = low + (high - low) * i as f64 / SCAN_INTERVALS as f64;
        let here = imbalance(zone, share).map(|evaluation| (share, sign(evaluation)));
        found.evaluations += 1;
        if let Some((_, value)) = here {
            note_least(&mut found, value);
        }
        if let (Some((x0, f0)), Some((x1, f1))) = (before, here) {
            if f0 == 0.0 {
                take_root(zone, x0, &mut found);
            } else if f0 * f1 < 0.0 {
                refine(zone, x0, x1, &mut found);
            }
        }
        if let (Some(a), Some(b), Some(c)) = (two_before, before, here) {
            look_between(zone, a, b, c, &mut found);
        }
        two_before = before;
        before = here;
    }
    if let Some((x, 0.0)) = before {
        take_root(zone, x, &mut found);
    }
    found.all.sort_by(|a, b| first(a).total_cmp(&first(b)));
    found
}

fn first(balance: &Balance) -> f64 {
    balance.shares.first().copied().unwrap_or(f64::NAN)
}

fn note_least(found: &mut Balances, imbalance_pa: f64) {
    if imbalance_pa.is_finite() {
        let least = found.least_imbalance_pa.map_or(f64::INFINITY, f64::abs);
        if imbalance_pa.abs() < least {
            found.least_imbalance_pa = Some(imbalance_pa);
        }
    }
}

fn refine(zone: &Zone<'_>, x0: f64, x1: f64, found: &mut Balances) {
    // Both sides flooded in between cannot happen: a side that floods at a share floods at every greater one of its own.
    let outcome = bracketed_with_signs(x0, x1, SHARE_TOLERANCE, |x| imbalance(zone, x).unwrap_or(Evaluation::Above));
    if let Ok(outcome) = outcome {
        found.evaluations += outcome.evaluations;
        take_root(zone, outcome.root, found);
    }
}

/// Keeps a share if the drops there really agree: a jump across zero is no balance.
fn take_root(zone: &Zone<'_>, share: f64, found: &mut Balances) {
    let (Some(first_pa), Some(second_pa)) = (zone.drop_pa(0, share), zone.drop_pa(1, 1.0 - share)) else { return };
    if (first_pa - second_pa).abs() > BALANCED * first_pa.abs().max(second_pa.abs()) {
        return;
    }
    // More vapour on the first side must raise its drop relative to the second's.
    let stable = match (zone.slope_pa(0, share), zone.slope_pa(1, 1.0 - share)) {
        (Some(a), Some(b)) => a + b > 0.0,
        // At the brink of flood the drop rises without end.
        _ => true,
    };
    let known = found.all.iter().any(|b| (first(b) - share).abs() < 1e-9);
    if !known {
        found.all.push(Balance { shares: vec![share, 1.0 - share], pressure_pa: first_pa, stable });
    }
}

/// Three grid points of one sign with the middle one nearest zero: a pair of balances may hide between them.
fn look_between(zone: &Zone<'_>, a: (f64, f64), b: (f64, f64), c: (f64, f64), found: &mut Balances) {
    let hides = a.1 * b.1 > 0.0 && b.1 * c.1 > 0.0 && b.1.abs() < a.1.abs() && b.1.abs() < c.1.abs();
    if !hides {
        return;
    }
    let (mut low, mut high) = (a.0, c.0);
    for _ in 0..TURNING_ROUNDS {
        let third = (high - low) / 3.0;
        let (x0, x1) = (low + third, high - third);
        let (Some(f0), Some(f1)) = (imbalance(zone, x0).map(sign), imbalance(zone, x1).map(sign)) else { return };
        for (x, f) in [(x0, f0), (x1, f1)] {
            note_least(found, f);
            if f * b.1 <= 0.0 {
                refine(zone, a.0, x, found);
                refine(zone, x, c.0, found);
                return;
            }
        }
        if f0.abs() < f1.abs() { high = x1 } else { low = x0 }
    }
}
