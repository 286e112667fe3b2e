//! Walls across the disc and what they leave: compartments.

use super::disc::Disc;
use super::kernel::geometry_error;
use super::strip::Strip;
use crate::engine::error::EngineResult;
use crate::engine::units::{Area, Length, Si};

/// Passes of the placing iteration: repeated substitution first, each pass gaining about the digits of thickness over radius,
/// then bisection, which needs about 55.
const SUBSTITUTIONS: usize = 20;
const MOST_PASSES: usize = 100;

/// The compartments that walls of one thickness leave, from the most negative positions on: one more than walls.
///
/// A wall occupies |x - position| < thickness/2. `positions` rise.
///
/// # Errors
/// `EngineError::Geometry` if the thickness is negative, a wall leaves the disc, or two walls leave nothing between them.
pub fn compartments(disc: &Disc, positions: &[Length], thickness: Length) -> EngineResult<Vec<Strip>> {
    let half = half_thickness(thickness)?;
    let mut strips = Vec::with_capacity(positions.len() + 1);
    let mut left = -disc.radius();
    for (wall, &position) in positions.iter().enumerate() {
        let right = position - half;
        // Written so that NaN is refused too.
        if !(right > left && position + half < disc.radius()) {
            return Err(geometry_error(format!(
                "wall {} at {} m, {} m thick, leaves no compartment on its left or reaches the shell; its faces must lie \
                 between {} m and {} m",
                wall + 1,
                position.si(),
                thickness.si(),
                left.si(),
                disc.radius().si()
            )));
        }
        strips.push(disc.strip(left, right)?);
        left = position + half;
    }
    strips.push(disc.strip(left, disc.radius())?);
    Ok(strips)
}

/// Area of the strip that a wall occupies; zero for a wall without thickness.
///
/// # Errors
/// `EngineError::Geometry` if the thickness is negative or the wall leaves the disc.
pub fn wall_area(disc: &Disc, position: Length, thickness: Length) -> EngineResult<Area> {
    let half = half_thickness(thickness)?;
    if half.si() == 0.0 && position.abs() <= disc.radius() {
        return Ok(Area::from_si(0.0));
    }
    Ok(disc.strip(position - half, position + half)?.area())
}

/// Position of the wall that gives the compartment beginning at x = `left` this area.
///
/// # Errors
/// `EngineError::Geometry` if the disc has less than this area to the right of `left`, or the thickness is negative.
pub fn position_for_area(disc: &Disc, left: Length, area: Area, thickness: Length) -> EngineResult<Length> {
    Ok(disc.right_face_for_area(left, area)? + half_thickness(thickness)?)
}

/// Positions of the walls that give the compartments these shares of the area that the walls leave.
///
/// `shares` in the order of the compartments, positive; only their proportions count. One wall fewer than shares.
///
/// # Errors
/// `EngineError::Geometry` if a share is not positive or the walls do not fit.
pub fn positions_for_shares(disc: &Disc, shares: &[f64], thickness: Length) -> EngineResult<Vec<Length>> {
    half_thickness(thickness)?;
    let sum: f64 = shares.iter().sum();
    if !(sum.is_finite() && shares.iter().all(|&share| share > 0.0)) {
        return Err(geometry_error(format!("shares {shares:?} cannot divide the disc; each must be positive")));
    }
    // The area that the walls leave depends on where they stand. More area moves every wall to the right and leaves less
    // for the last compartment, so there is one answer; walls that no longer fit mean that the area was taken too large.
    let rounding = 4.0 * f64::EPSILON * disc.area();
    let (mut low, mut high) = (Area::from_si(0.0), disc.area());
    let mut area = disc.area();
    for pass in 0..MOST_PASSES {
        let placed = place_walls(disc, shares, area / sum, thickness);
        let left_over = placed.as_ref().map_or(low, |(_, occupied)| disc.area() - *occupied);
        if let Ok((positions, _)) = placed
            && (left_over - area).abs() <= rounding
        {
            return Ok(positions);
        }
        if left_over > area {
            low = area;
        } else {
            high = area;
        }
        let substitute = pass < SUBSTITUTIONS && left_over > low && left_over < high;
        area = if substitute { left_over } else { 0.5 * (low + high) };
    }
    Err(geometry_error(format!(
        "no positions found that divide a disc of {} m in the shares {shares:?} with walls {} m thick; thinner walls would",
        disc.diameter().si(),
        thickness.si()
    )))
}

/// Walls from left to right, each compartment but the last of its share times `unit_area`; the area that they occupy.
fn place_walls(disc: &Disc, shares: &[f64], unit_area: Area, thickness: Length) -> EngineResult<(Vec<Length>, Area)> {
    let walls = shares.len().saturating_sub(1);
    let mut positions = Vec::with_capacity(walls);
    let mut occupied = Area::from_si(0.0);
    let mut left = -disc.radius();
    for &share in shares.iter().take(walls) {
        let position = position_for_area(disc, left, unit_area * share, thickness)?;
        occupied += wall_area(disc, position, thickness)?;
        positions.push(position);
        left = position + thickness / 2.0;
    }
    Ok((positions, occupied))
}

fn half_thickness(thickness: Length) -> EngineResult<Length> {
    if thickness.si() >= 0.0 && thickness.si().is_finite() {
        Ok(thickness / 2.0)
    } else {
        Err(geometry_error(format!("a wall {} m thick cannot be; it must not be negative", thickness.si())))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn disc() -> Disc {
        Disc::from_diameter(Length::from_si(3.0)).unwrap()
    }

    fn metres(positions: &[f64]) -> Vec<Length> {
        positions.iter().map(|&x| Length::from_si(x)).collect()
    }

    #[test]
    fn walls_that_do_not_fit_are_refused() {
        let thick = Length::from_si(0.02);
        for positions in [
            &[1.495][..],
            &[-1.495],
            &[0.2, 0.215],
            &[0.2, 0.1],
            &[2.0],
            &[f64::NAN],
            &[0.0, f64::NAN],
            &[f64::INFINITY],
        ] {
            let error = compartments(&disc(), &metres(positions), thick).unwrap_err().to_string();
            assert!(error.contains("faces must lie between"), "{error}");
        }
        assert!(compartments(&disc(), &metres(&[0.0]), Length::from_si(-0.01)).is_err());
        assert!(compartments(&disc(), &metres(&[0.0]), Length::from_si(f64::NAN)).is_err());
        assert!(wall_area(&disc(), Length::from_si(1.495), thick).is_err());
    }

    #[test]
    fn no_wall_leaves_the_disc() {
        let whole = compartments(&disc(), &[], Length::from_si(0.01)).unwrap();
        assert_eq!(whole, vec![disc().whole().unwrap()]);
    }

    #[test]
    fn shares_come_back_from_their_positions() {
        let (thick, shares) = (Length::from_si(0.05), [0.2, 0.5, 0.3]);
        let positions = positions_for_shares(&disc(), &shares, thick).unwrap();
        let strips = compartments(&disc(), &positions, thick).unwrap();
        let sum: f64 = strips.iter().map(|strip| strip.area().si()).sum();
        for (strip, share) in strips.iter().zip(shares) {
            assert!((strip.area().si() / sum - share).abs() < 1e-15);
        }
    }

    #[test]
    fn small_last_share_behind_thick_walls_is_found() {
        // Taking the whole disc to be shared out would push the last wall through the shell.
        let (disc, thick) = (Disc::from_diameter(Length::from_si(0.4)).unwrap(), Length::from_si(0.0079));
        let shares = [0.658, 0.436, 0.803, 0.1];
        let positions = positions_for_shares(&disc, &shares, thick).unwrap();
        let strips = compartments(&disc, &positions, thick).unwrap();
        let sum: f64 = strips.iter().map(|strip| strip.area().si()).sum();
        for (strip, share) in strips.iter().zip(shares) {
            assert!((strip.area().si() / sum - share / 1.997).abs() < 1e-14);
        }
    }

    #[test]
    fn shares_that_cannot_be_are_refused() {
        for shares in [&[0.5, 0.0][..], &[0.5, -0.1], &[0.5, f64::NAN], &[f64::INFINITY, 1.0]] {
            assert!(positions_for_shares(&disc(), shares, Length::from_si(0.01)).is_err());
        }
        assert!(positions_for_shares(&disc(), &[0.5, 0.5], Length::from_si(3.5)).is_err());
    }
}
