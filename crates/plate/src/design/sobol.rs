//! Points of the Sobol sequence, mapped to levels.

use std::collections::BTreeSet;

use super::response::check_levels;
use super::{DesignError, Factor};

/// Axes that the sequence has here.
pub const MOST_SOBOL_AXES: usize = 21;

/// Primitive polynomials with their first direction numbers.
///
/// Joe & Kuo 2008, doi:10.1137/070709359 (new-joe-kuo-6), as distributed with SciPy: the polynomial
/// with all its coefficients as bits, then m₁, m₂ …
const DIRECTIONS: [(u32, &[u32]); MOST_SOBOL_AXES] = [
    (1, &[1]),
    (3, &[1]),
    (7, &[1, 3]),
    (11, &[1, 3, 1]),
    (13, &[1, 1, 1]),
    (19, &[1, 1, 3, 3]),
    (25, &[1, 3, 5, 13]),
    (37, &[1, 1, 5, 5, 17]),
    (41, &[1, 1, 5, 5, 5]),
    (47, &[1, 1, 7, 11, 19]),
    (55, &[1, 1, 5, 1, 1]),
    (59, &[1, 1, 1, 3, 11]),
    (61, &[1, 3, 5, 5, 31]),
    (67, &[1, 3, 3, 9, 7, 49]),
    (91, &[1, 1, 1, 15, 21, 21]),
    (97, &[1, 3, 1, 13, 27, 49]),
    (103, &[1, 1, 1, 15, 7, 5]),
    (109, &[1, 3, 1, 15, 13, 25]),
    (115, &[1, 1, 5, 5, 19, 61]),
    (131, &[1, 3, 7, 11, 23, 15, 103]),
    (137, &[1, 3, 7, 13, 13, 15, 69]),
];

const BITS: u32 = 32;

/// Point `index` of the unscrambled sequence in `axes` dimensions, each coordinate in [0, 1).
///
/// The order is that of the Gray code: (0, 0, 0), (½, ½, ½), (¾, ¼, ¼) …
///
/// # Errors
/// No axis or more than [`MOST_SOBOL_AXES`].
///
/// # Source
/// Sobol 1967, doi:10.1016/0041-5553(67)90144-9; Antonov & Saleev 1979, doi:10.1016/0041-5553(79)90085-5.
pub fn sobol_point(index: u32, axes: usize) -> Result<Vec<f64>, DesignError> {
    check_axes(axes)?;
    let gray = index ^ (index >> 1);
    let coordinate = |(polynomial, first): &(u32, &[u32])| {
        let numbers = directions(*polynomial, first);
        let bits = (0..BITS).filter(|bit| gray >> bit & 1 == 1);
        let sum = bits.fold(0, |sum, bit| sum ^ numbers[bit as usize]);
        f64::from(sum) / (1u64 << BITS) as f64
    };
    Ok(DIRECTIONS[..axes].iter().map(coordinate).collect())
}

fn check_axes(axes: usize) -> Result<(), DesignError> {
    match axes {
        0 => Err(DesignError::NoAxis),
        axes if axes > MOST_SOBOL_AXES => Err(DesignError::TooManyAxes {
            axes,
            most: MOST_SOBOL_AXES,
        }),
        _ => Ok(()),
    }
}

/// Direction numbers v₁ … v₃₂ as binary fractions.
fn directions(polynomial: u32, first: &[u32]) -> [u32; BITS as usize] {
    let degree = polynomial.ilog2() as usize;
    let mut numbers = [0; BITS as usize];
    for index in 0..BITS as usize {
        let shift = BITS - 1 - index as u32;
        numbers[index] = if degree == 0 {
            1 << shift
        } else if index < degree {
            first[index] << shift
        } else {
            let oldest = numbers[index - degree];
            let middle = (1..degree).filter(|k| polynomial >> (degree - k) & 1 == 1);
            middle.fold(oldest ^ (oldest >> degree), |sum, k| {
                sum ^ numbers[index - k]
            })
        };
    }
    numbers
}

/// So many cells of a grid of levels, evenly spread: points of the sequence with each coordinate
/// mapped to floor(u · levels); a cell that was met before is passed over.
///
/// Gives fewer than asked for when the grid is smaller, or when after 64 points a run no new cells
/// are met.
///
/// # Errors
/// No axis or too many; an axis without levels.
pub fn sobol_cells(levels: &[u16], runs: usize) -> Result<Vec<Vec<u16>>, DesignError> {
    check_axes(levels.len())?;
    if let Some(axis) = levels.iter().position(|levels| *levels == 0) {
        return Err(DesignError::OneLevel { axis });
    }
    let mut seen = BTreeSet::new();
    let mut cells = Vec::new();
    let points = u32::try_from(runs.saturating_mul(64)).unwrap_or(u32::MAX);
    for index in 0..points {
        if cells.len() == runs {
            break;
        }
        let point = sobol_point(index, levels.len())?;
        let cell: Vec<u16> = point
            .iter()
            .zip(levels)
            .map(|(coordinate, levels)| (coordinate * f64::from(*levels)) as u16)
            .collect();
        if seen.insert(cell.clone()) {
            cells.push(cell);
        }
    }
    Ok(cells)
}

/// So many candidates along the sequence: for each point the nearest candidate that is not chosen yet,
/// by the number of axes that differ plus, on numeric axes, the difference as a share of the range.
///
/// # Errors
/// Axes and levels that do not fit; fewer candidates than runs; too many axes.
pub fn sobol_candidates(
    candidates: &[Vec<u16>],
    factors: &[Factor],
    runs: usize,
) -> Result<Vec<usize>, DesignError> {
    check_levels(factors, candidates)?;
    check_axes(factors.len())?;
    if runs > candidates.len() {
        return Err(DesignError::TooFewCandidates {
            runs,
            candidates: candidates.len(),
        });
    }
    let mut free: Vec<usize> = (0..candidates.len()).collect();
    let mut chosen = Vec::with_capacity(runs);
    for index in 0..u32::try_from(runs).unwrap_or(u32::MAX) {
        let point = sobol_point(index, factors.len())?;
        let distance = |candidate: usize| from_point(&point, &candidates[candidate], factors);
        let nearest = (0..free.len())
            .min_by(|one, other| distance(free[*one]).total_cmp(&distance(free[*other])));
        if let Some(place) = nearest {
            // the order of the rest stays, so that ties go to the first candidate
            chosen.push(free.remove(place));
        }
    }
    Ok(chosen)
}

fn from_point(point: &[f64], candidate: &[u16], factors: &[Factor]) -> f64 {
    let axes = point.iter().zip(candidate).zip(factors);
    axes.map(|((coordinate, level), factor)| match factor.place(*level) {
        Some(place) => (place - coordinate).abs(),
        None => {
            let wanted = (coordinate * factor.levels() as f64) as usize;
            f64::from(u8::from(wanted != usize::from(*level)))
        }
    })
    .sum()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::design::full_factorial;

    /// `scipy.stats.qmc.Sobol(d=21, scramble=False).random(1024)` of SciPy 1.17.1.
    const SCIPY: &str = include_str!("../../testdata/scipy_sobol.csv");

    #[test]
    fn points_are_those_of_scipy() {
        let rows = SCIPY.lines().filter(|line| !line.starts_with('#'));
        let mut checked = 0;
        for row in rows {
            let mut fields = row.split(',');
            let index = fields.next().unwrap().parse().unwrap();
            let expected: Vec<f64> = fields.map(|field| field.parse().unwrap()).collect();
            assert_eq!(
                sobol_point(index, MOST_SOBOL_AXES).unwrap(),
                expected,
                "{index}"
            );
            checked += 1;
        }
        assert!(checked > 20);
        assert_eq!(sobol_point(2, 3).unwrap(), [0.75, 0.25, 0.25]);
    }

    /// The first 2^m points of each axis fall one into each of 2^m equal intervals.
    #[test]
    fn every_axis_is_evenly_covered() {
        let cells = sobol_cells(&[8, 4, 2, 8], 8).unwrap();
        for (axis, levels) in [(0, 8u16), (1, 4), (2, 2), (3, 8)] {
            for level in 0..levels {
                let runs = cells.iter().filter(|cell| cell[axis] == level).count();
                assert_eq!(runs, 8 / usize::from(levels), "axis {axis}");
            }
        }
        assert_eq!(sobol_cells(&[2, 2], 9).unwrap().len(), 4);
    }

    #[test]
    fn candidates_are_chosen_once_and_all_when_all_are_asked_for() {
        let candidates = full_factorial(&[3, 4], 12).unwrap();
        let factors = [
            Factor::Categorical { levels: 3 },
            Factor::Numeric {
                values: vec![-78.0, 0.0, 25.0, 60.0],
            },
        ];
        let mut chosen = sobol_candidates(&candidates, &factors, 12).unwrap();
        chosen.sort_unstable();
        assert_eq!(chosen, (0..12).collect::<Vec<_>>());
        let few = sobol_candidates(&candidates, &factors, 3).unwrap();
        let levels: BTreeSet<u16> = few.iter().map(|run| candidates[*run][0]).collect();
        assert_eq!(levels.len(), 3, "{few:?}");
        assert!(sobol_candidates(&candidates, &factors, 13).is_err());
        assert!(sobol_point(0, 22).is_err() && sobol_point(0, 0).is_err());
    }
}
