//! The balance of three compartments and more.
//!
//! Each compartment's pressure drop over its own share is cut into pieces on which it only rises or only falls. On every
//! combination of pieces the shares are functions of one common pressure drop, and the balance is one equation: the shares add
//! up to one.

use super::balance::{Balance, Balances};
use super::zone::Zone;
use crate::engine::solve::root::{Tolerance, bracketed};

/// Grid points of a characteristic.
const GRID: usize = 60;
/// Intervals of the scan over the pressure drop.
const PRESSURE_INTERVALS: usize = 40;
/// Combinations of pieces beyond which the search stops (real internals have one or two pieces each).
const COMBINATIONS: usize = 512;
const TOLERANCE: Tolerance = Tolerance { x_abs: 1e-15, x_rel: 1e-14, max_evaluations: 200 };
/// Rounds of the search for a turning point and for the brink of flood.
const ROUNDS: usize = 60;

/// A piece of a characteristic on which the drop only rises or only falls.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Piece {
    from: f64,
    to: f64,
    low_pa: f64,
    high_pa: f64,
}

/// Every balance of the zone.
pub(crate) fn all_balances(zone: &Zone<'_>) -> Balances {
    let pieces: Vec<Vec<Piece>> = (0..zone.sides.len()).map(|side| pieces_of(zone, side)).collect();
    let combinations = pieces.iter().map(Vec::len).product::<usize>().min(COMBINATIONS);
    let mut found = Balances::default();
    for number in 0..combinations {
        let mut rest = number;
        let mut chosen = Vec::with_capacity(pieces.len());
        for list in &pieces {
            chosen.extend(list.get(rest % list.len()));
            rest /= list.len();
        }
        search(zone, &chosen, &mut found);
    }
    found.all.sort_by(|a, b| a.shares.partial_cmp(&b.shares).unwrap_or(std::cmp::Ordering::Equal));
    found
}

fn pieces_of(zone: &Zone<'_>, side: usize) -> Vec<Piece> {
    let mut points: Vec<(f64, f64)> = Vec::with_capacity(GRID + 1);
    let low = zone.least_share(side);
    for i in 0..=GRID {
        let share = low + (1.0 - low) * i as f64 / GRID as f64;
        match zone.drop_pa(side, share) {
            Some(drop) => points.push((share, drop)),
            None => {
                points.extend(points.last().copied().map(|(good, _)| brink(zone, side, good, share)));
                break;
            }
        }
    }
    let mut pieces = Vec::new();
    let mut start = points.first().copied();
    let mut previous: Option<((f64, f64), (f64, f64))> = None;
    for pair in points.windows(2) {
        if let [a, b] = pair {
            if let Some((p, q)) = previous
                && (q.1 - p.1) * (b.1 - a.1) < 0.0
            {
                let turn = turning_point(zone, side, p.0, b.0, q.1 > p.1);
                pieces.extend(start.map(|s| piece(s, turn)));
                start = Some(turn);
            }
            previous = Some((*a, *b));
        }
    }
    if let (Some(start), Some(end)) = (start, points.last()) {
        pieces.push(piece(start, *end));
    }
    pieces
}

fn piece(a: (f64, f64), b: (f64, f64)) -> Piece {
    Piece { from: a.0, to: b.0, low_pa: a.1.min(b.1), high_pa: a.1.max(b.1) }
}

/// The greatest share that still has a drop, between a good and a flooded one.
fn brink(zone: &Zone<'_>, side: usize, mut good: f64, mut flooded: f64) -> (f64, f64) {
    for _ in 0..ROUNDS {
        let middle = 0.5 * (good + flooded);
        if zone.drop_pa(side, middle).is_some() { good = middle } else { flooded = middle }
    }
    (good, zone.drop_pa(side, good).unwrap_or(f64::NAN))
}

fn turning_point(zone: &Zone<'_>, side: usize, mut low: f64, mut high: f64, is_maximum: bool) -> (f64, f64) {
    let value = |share: f64| zone.drop_pa(side, share).map_or(f64::NEG_INFINITY, |d| if is_maximum { d } else { -d });
    for _ in 0..ROUNDS {
        let third = (high - low) / 3.0;
        if value(low + third) > value(high - third) { high -= third } else { low += third }
    }
    let share = 0.5 * (low + high);
    (share, zone.drop_pa(side, share).unwrap_or(f64::NAN))
}

/// Share of one side at a pressure drop, on one piece.
fn share_at(zone: &Zone<'_>, side: usize, piece: &Piece, pressure_pa: f64) -> Option<f64> {
    bracketed(piece.from, piece.to, TOLERANCE, |share| {
        zone.drop_pa(side, share).map_or(f64::NAN, |drop| drop - pressure_pa)
    })
    .ok()
    .map(|outcome| outcome.root)
}

fn search(zone: &Zone<'_>, chosen: &[Piece], found: &mut Balances) {
    let low_pa = chosen.iter().map(|p| p.low_pa).fold(f64::NEG_INFINITY, f64::max);
    let high_pa = chosen.iter().map(|p| p.high_pa).fold(f64::INFINITY, f64::min);
    if high_pa <= low_pa || !low_pa.is_finite() || !high_pa.is_finite() {
        return;
    }
    let excess = |pressure_pa: f64| -> f64 {
        let mut sum = -1.0;
        for (side, piece) in chosen.iter().enumerate() {
            // The ends of a piece are known to rounding only; a pressure at its very end is the end.
            let inside = pressure_pa.clamp(piece.low_pa, piece.high_pa);
            match share_at(zone, side, piece, inside) {
                Some(share) => sum += share,
                None => return f64::NAN,
            }
        }
        sum
    };
    // A hair inside the ends, so that every inner bracket holds.
    let hair = 1e-12 * (high_pa - low_pa);
    let at = |i: usize| (low_pa + hair) + (high_pa - low_pa - 2.0 * hair) * i as f64 / PRESSURE_INTERVALS as f64;
    let mut before: Option<(f64, f64)> = None;
    for i in 0..=PRESSURE_INTERVALS {
        let pressure_pa = at(i);
        let value = excess(pressure_pa);
        if let Some((p0, f0)) = before
            && f0 * value <= 0.0
            && let Ok(outcome) = bracketed(p0, pressure_pa, TOLERANCE, excess)
        {
            take(zone, chosen, outcome.root, found);
        }
        before = value.is_finite().then_some((pressure_pa, value));
    }
}

fn take(zone: &Zone<'_>, chosen: &[Piece], pressure_pa: f64, found: &mut Balances) {
    let shares: Option<Vec<f64>> =
        chosen.iter().enumerate().map(|(side, piece)| share_at(zone, side, piece, pressure_pa)).collect();
    let Some(shares) = shares else { return };
    let near = |a: &[f64]| a.iter().zip(&shares).all(|(a, b)| (a - b).abs() < 1e-8);
    if found.all.iter().any(|b| near(&b.shares)) {
        return;
    }
    let slopes: Option<Vec<f64>> = shares.iter().enumerate().map(|(side, share)| zone.slope_pa(side, *share)).collect();
    let stable = slopes.is_none_or(|slopes| is_stable(&slopes));
    found.all.push(Balance { shares, pressure_pa, stable });
}

/// A disturbance dies out if the sum of slope x change^2 is positive for every change of the shares that adds up to zero: all
/// slopes positive, or a single negative one that the others outweigh.
fn is_stable(slopes: &[f64]) -> bool {
    let negative = slopes.iter().filter(|s| **s <= 0.0).count();
    match negative {
        0 => true,
        1 => slopes.iter().map(|s| 1.0 / s).sum::<f64>() < 0.0,
        _ => false,
    }
}

#[cfg(test)]
mod tests {
    use super::is_stable;

    #[test]
    fn stability_of_two_sides_is_a_positive_sum_of_slopes() {
        for (a, b) in [(1.0, 2.0), (-1.0, 2.0), (-2.0, 1.0), (-1.0, -1.0), (3.0, -2.9)] {
            assert_eq!(is_stable(&[a, b]), a + b > 0.0, "{a} {b}");
        }
    }
}
