//! Full factorials and regular two-level fractions.

use serde::{Deserialize, Serialize};

use super::DesignError;

/// All combinations of levels, the first axis slowest.
///
/// # Errors
/// More than `most` runs; no axis; an axis without levels.
pub fn full_factorial(levels: &[u16], most: usize) -> Result<Vec<Vec<u16>>, DesignError> {
    if levels.is_empty() {
        return Err(DesignError::NoAxis);
    }
    if let Some(axis) = levels.iter().position(|levels| *levels == 0) {
        return Err(DesignError::OneLevel { axis });
    }
    let product = levels.iter().try_fold(1u128, |product, levels| {
        product.checked_mul((*levels).into())
    });
    let runs = product.unwrap_or(u128::MAX);
    if runs > most as u128 {
        return Err(DesignError::TooManyRuns { runs, most });
    }
    let mut run = vec![0; levels.len()];
    let mut all = Vec::with_capacity(runs as usize);
    for _ in 0..runs {
        all.push(run.clone());
        for (level, levels) in run.iter_mut().zip(levels).rev() {
            *level += 1;
            if *level < *levels {
                break;
            }
            *level = 0;
        }
    }
    Ok(all)
}

/// A regular two-level fraction, 2^(k−p).
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Fraction {
    /// Levels 0 and 1 of every run, in standard order of the base factors.
    pub runs: Vec<Vec<u16>>,
    /// For each added factor the base factors whose product it is.
    pub generators: Vec<Vec<usize>>,
    /// Letters of the shortest defining word: with III main effects are mixed up with interactions of
    /// two factors, with IV only with those of three, with V interactions of two are apart as well.
    /// None for a full factorial.
    pub resolution: Option<u32>,
}

/// The most base factors of a fraction.
const MOST_BASE: u32 = 7;

/// The fraction with the highest resolution for so many factors in so many runs.
///
/// # Errors
/// Runs that are no power of two from 4 to 128, or too few or too many for the factors.
///
/// # Source
/// Box, Hunter & Hunter 1978, Statistics for Experimenters, table 12.15 (from memory) has the same resolutions.
pub fn two_level_fraction(factors: usize, runs: usize) -> Result<Fraction, DesignError> {
    let base = runs.checked_ilog2().unwrap_or(0);
    let possible = runs.is_power_of_two() && (2..=MOST_BASE).contains(&base);
    if !possible || factors >= runs || factors < base as usize {
        return Err(DesignError::NoFraction { factors, runs });
    }
    let added = factors - base as usize;
    // the longest generator has all base factors
    let longest = (5..=base + 1).rev();
    let columns = longest
        .filter(|resolution| *resolution == 5 || added < 8)
        .find_map(|resolution| columns_of_resolution(base, added, resolution))
        .unwrap_or_else(|| columns_of_low_resolution(base, added));
    let generators: Vec<Vec<usize>> = columns.into_iter().map(letters).collect();
    two_level_fraction_by(base as usize, &generators)
}

/// Columns whose words all have as many letters as the resolution, at least five; by trying all.
fn columns_of_resolution(base: u32, added: usize, resolution: u32) -> Option<Vec<u32>> {
    let factors = base as usize + added;
    // main effects and interactions of two must all be apart, in as many runs as there are
    let effects = 1 + factors + factors * (factors - 1) / 2;
    if effects > 1 << base {
        return None;
    }
    let long_enough = |column: &u32| column.count_ones() + 1 >= resolution;
    let columns: Vec<u32> = (1..1 << base).filter(long_enough).collect();
    let mut chosen = Vec::new();
    extend(&columns, base, added, resolution, &[0], &mut chosen).then_some(chosen)
}

fn extend(
    columns: &[u32],
    base: u32,
    added: usize,
    resolution: u32,
    words: &[u64],
    chosen: &mut Vec<u32>,
) -> bool {
    if chosen.len() == added {
        return true;
    }
    for (index, column) in columns.iter().enumerate() {
        let generator = u64::from(*column) | 1 << (base as usize + chosen.len());
        let new = words.iter().map(|word| word ^ generator);
        if new.clone().any(|word| word.count_ones() < resolution) {
            continue;
        }
        let words: Vec<u64> = words.iter().copied().chain(new).collect();
        chosen.push(*column);
        if extend(
            &columns[index + 1..],
            base,
            added,
            resolution,
            &words,
            chosen,
        ) {
            return true;
        }
        chosen.pop();
    }
    false
}

/// Generators with an odd number of letters make words with an even number, so none shorter than
/// four; there are half as many of them as runs. Beyond that some words have three.
fn columns_of_low_resolution(base: u32, added: usize) -> Vec<u32> {
    let (odd, even): (Vec<u32>, Vec<u32>) = (1..1u32 << base)
        .filter(|column| column.count_ones() >= 2)
        .partition(|column| column.count_ones() % 2 == 1);
    odd.into_iter().chain(even).take(added).collect()
}

/// The fraction that the given generators make: each names the base factors whose product is one more
/// factor, `[0, 1, 2]` for D = ABC.
///
/// # Errors
/// No base factor or more than seven; a generator with less than two, unknown or repeated factors, or
/// given twice.
pub fn two_level_fraction_by(
    base: usize,
    generators: &[Vec<usize>],
) -> Result<Fraction, DesignError> {
    if !(1..=MOST_BASE as usize).contains(&base) {
        return Err(DesignError::NoFraction {
            factors: base + generators.len(),
            runs: 1usize
                .checked_shl(u32::try_from(base).unwrap_or(u32::MAX))
                .unwrap_or(0),
        });
    }
    let mut columns: Vec<u32> = Vec::with_capacity(generators.len());
    for (generator, factors) in generators.iter().enumerate() {
        let known = factors.iter().all(|factor| *factor < base);
        let column = factors.iter().fold(0, |column, factor| {
            column | 1u32.checked_shl(*factor as u32).unwrap_or(0)
        });
        let distinct = column.count_ones() as usize == factors.len();
        if !known || !distinct || factors.len() < 2 || columns.contains(&column) {
            return Err(DesignError::Generator { generator, base });
        }
        columns.push(column);
    }
    let run = |number: u32| {
        let of_base = (0..base).map(move |factor| (number >> factor & 1) as u16);
        // with levels −1 and 1 a product is the parity of the factors at −1
        let of_added = columns.iter().map(move |column| {
            let at_low = (column & !number).count_ones();
            (1 - at_low % 2) as u16
        });
        of_base.chain(of_added).collect()
    };
    Ok(Fraction {
        runs: (0..1u32 << base).map(run).collect(),
        generators: generators.to_vec(),
        resolution: shortest_word(base as u32, &columns),
    })
}

/// Letters of the shortest defining word: the least number of factors whose product is constant.
fn shortest_word(base: u32, columns: &[u32]) -> Option<u32> {
    let factors: Vec<u32> = (0..base)
        .map(|factor| 1 << factor)
        .chain(columns.iter().copied())
        .collect();
    let mut pairs: Vec<u32> = Vec::new();
    for (index, one) in factors.iter().enumerate() {
        pairs.extend(factors[index + 1..].iter().map(|other| one ^ other));
    }
    if pairs.iter().any(|product| factors.contains(product)) {
        return Some(3);
    }
    pairs.sort_unstable();
    if pairs.windows(2).any(|two| two[0] == two[1]) {
        return Some(4);
    }
    // all products of two differ, so there are at most 15 factors and few words
    let mut words = vec![0u64];
    for (added, column) in columns.iter().enumerate() {
        let generator = u64::from(*column) | 1 << (base as usize + added);
        let products: Vec<u64> = words.iter().map(|word| word ^ generator).collect();
        words.extend(products);
    }
    words.iter().skip(1).map(|word| word.count_ones()).min()
}

fn letters(column: u32) -> Vec<usize> {
    (0..32).filter(|factor| column >> factor & 1 == 1).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_full_factorial_has_every_combination_once() {
        let runs = full_factorial(&[3, 1, 4], 12).unwrap();
        let distinct: std::collections::BTreeSet<_> = runs.iter().collect();
        assert_eq!((runs.len(), distinct.len()), (12, 12));
        assert_eq!(runs[1], [0, 0, 1]);
        let error = full_factorial(&[1_000; 20], 10_000).unwrap_err();
        assert!(
            error.to_string().contains("more than the 10000 allowed"),
            "{error}"
        );
        assert_eq!(full_factorial(&[], 1), Err(DesignError::NoAxis));
        assert_eq!(
            full_factorial(&[2, 0], 1),
            Err(DesignError::OneLevel { axis: 1 })
        );
    }

    /// Resolutions of Box, Hunter & Hunter 1978, table 12.15.
    #[test]
    fn resolutions_are_those_of_the_published_table() {
        for (factors, runs, resolution) in [
            (3, 4, 3),
            (4, 8, 4),
            (5, 8, 3),
            (6, 8, 3),
            (7, 8, 3),
            (5, 16, 5),
            (6, 16, 4),
            (7, 16, 4),
            (8, 16, 4),
            (9, 16, 3),
            (15, 16, 3),
            (6, 32, 6),
            (7, 32, 4),
            (8, 32, 4),
            (16, 32, 4),
            (7, 64, 7),
            (8, 64, 5),
            (9, 64, 4),
            (8, 128, 8),
            (9, 128, 6),
            (10, 128, 5),
            (11, 128, 5),
            (127, 128, 3),
        ] {
            let fraction = two_level_fraction(factors, runs).unwrap();
            assert_eq!(fraction.resolution, Some(resolution), "{factors} in {runs}");
            assert_eq!(fraction.runs.len(), runs);
            assert!(fraction.runs.iter().all(|run| run.len() == factors));
        }
        assert_eq!(two_level_fraction(3, 8).unwrap().resolution, None);
    }

    /// Any two columns of a regular fraction hold each pair of levels equally often.
    #[test]
    fn columns_are_orthogonal() {
        for (factors, runs) in [(7, 8), (6, 16), (31, 32), (8, 64)] {
            let fraction = two_level_fraction(factors, runs).unwrap();
            for one in 0..factors {
                for other in 0..one {
                    let both = fraction
                        .runs
                        .iter()
                        .filter(|run| run[one] == 1 && run[other] == 1);
                    assert_eq!(both.count(), runs / 4, "{factors} in {runs}: {one} {other}");
                }
            }
        }
    }

    #[test]
    fn the_half_fraction_of_four_factors_by_hand() {
        // D = ABC: the product of all four is 1 in every run
        let fraction = two_level_fraction_by(3, &[vec![0, 1, 2]]).unwrap();
        let even_lows = |run: &Vec<u16>| run.iter().filter(|level| **level == 0).count() % 2 == 0;
        assert!(fraction.runs.iter().all(even_lows), "{:?}", fraction.runs);
        assert_eq!(fraction.resolution, Some(4));
    }

    #[test]
    fn impossible_fractions_are_refused() {
        for (factors, runs) in [(8, 8), (3, 12), (3, 16), (2, 2), (200, 256), (0, 0)] {
            let error = two_level_fraction(factors, runs).unwrap_err();
            assert_eq!(error, DesignError::NoFraction { factors, runs });
        }
        for generators in [
            vec![vec![0]],
            vec![vec![0, 3]],
            vec![vec![1, 1]],
            vec![vec![0, 99]],
            vec![vec![0, 1], vec![1, 0]],
        ] {
            let error = two_level_fraction_by(3, &generators).unwrap_err();
            assert!(
                matches!(error, DesignError::Generator { base: 3, .. }),
                "{error}"
            );
        }
        assert!(two_level_fraction_by(99, &[]).is_err());
    }
}
