//! Plackett–Burman designs: main effects of many two-level factors in few runs.

use super::DesignError;

/// First rows of the cyclic designs with 8 to 36 runs; `+` is level 1.
///
/// Plackett & Burman 1946, doi:10.1093/biomet/33.4.305.
const GENERATORS: [&str; 6] = [
    "+++-+--",
    "++-+++---+-",
    "++++-+-++--+---",
    "++--++++-+-+----++-",
    "+++++-+-++--++--+-+----",
    "-+-+++---+++++-+++--+----+-+-++--+-",
];

/// The smallest of the designs with 4, 8, 12, 16, 20, 24 and 36 runs that has so many factors.
///
/// Each run is the one before it moved on by one place; the last run has every factor at level 0.
/// Main effects are orthogonal to one another: with levels −1 and 1 and a column of ones, XᵀX = n · I.
/// Interactions of two factors are spread over the main effects of the others.
///
/// # Errors
/// No factor or more than 35.
pub fn plackett_burman(factors: usize) -> Result<Vec<Vec<u16>>, DesignError> {
    let refused = DesignError::NoPlackettBurman { factors };
    if factors == 0 {
        return Err(refused);
    }
    let generators = std::iter::once("++-").chain(GENERATORS);
    let Some(row) = generators.into_iter().find(|row| row.len() >= factors) else {
        return Err(refused);
    };
    let levels: Vec<u16> = row.bytes().map(|sign| u16::from(sign == b'+')).collect();
    let columns = levels.len();
    let moved = |by: usize| {
        let places = (0..factors).map(move |place| (place + columns - by) % columns);
        places.map(|place| levels[place]).collect::<Vec<u16>>()
    };
    let mut runs: Vec<Vec<u16>> = (0..columns).map(moved).collect();
    runs.push(vec![0; factors]);
    Ok(runs)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn columns_are_orthogonal() {
        for (factors, expected) in [
            (3, 4),
            (7, 8),
            (11, 12),
            (15, 16),
            (19, 20),
            (23, 24),
            (35, 36),
        ] {
            let runs = plackett_burman(factors).unwrap();
            assert_eq!(runs.len(), expected);
            let rows: Vec<Vec<i32>> = runs
                .iter()
                .map(|run| {
                    let signs = run.iter().map(|level| 2 * i32::from(*level) - 1);
                    std::iter::once(1).chain(signs).collect()
                })
                .collect();
            for one in 0..=factors {
                for other in 0..=factors {
                    let product: i32 = rows.iter().map(|row| row[one] * row[other]).sum();
                    let wanted = if one == other { expected as i32 } else { 0 };
                    assert_eq!(product, wanted, "{factors} factors: {one} {other}");
                }
            }
        }
    }

    #[test]
    fn the_smallest_that_holds_the_factors_is_taken() {
        for (factors, runs) in [(1, 4), (4, 8), (8, 12), (12, 16), (24, 36)] {
            let design = plackett_burman(factors).unwrap();
            assert_eq!((design.len(), design[0].len()), (runs, factors));
        }
        for factors in [0, 36] {
            assert!(
                plackett_burman(factors)
                    .unwrap_err()
                    .to_string()
                    .contains("1 to 35")
            );
        }
    }
}
