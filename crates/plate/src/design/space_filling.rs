//! Candidates as far from one another as can be.

use serde::{Deserialize, Serialize};

use super::response::check_levels;
use super::{DesignError, Factor};
use crate::random::Random;

/// Candidates spread over the space of the axes.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SpaceFilling {
    /// Indices of the candidates in the order in which they were chosen.
    pub candidates: Vec<usize>,
    /// The least distance of two of them; none with fewer than two.
    pub least_distance: Option<f64>,
    /// For each axis how many of its levels are met.
    pub levels_met: Vec<usize>,
}

/// So many candidates, each as far as possible from those before it.
///
/// The distance of two cells is the mean over the axes of 1 where levels of a categorical axis differ
/// and of the difference as a share of the range on a numeric axis (Gower 1971, doi:10.2307/2528823).
/// Of equally far ones the candidate is taken whose levels were met least, then one by chance. The least
/// distance is at least half of the greatest possible (Gonzalez 1985, doi:10.1016/0304-3975(85)90224-5).
/// `already` holds cells that are run anyhow, from which the others keep away as well.
///
/// # Errors
/// Axes and levels that do not fit; fewer candidates than runs.
pub fn space_filling(
    candidates: &[Vec<u16>],
    factors: &[Factor],
    already: &[Vec<u16>],
    runs: usize,
    seed: u64,
) -> Result<SpaceFilling, DesignError> {
    check_levels(factors, candidates)?;
    check_levels(factors, already)?;
    if runs > candidates.len() {
        return Err(DesignError::TooFewCandidates {
            runs,
            candidates: candidates.len(),
        });
    }
    let mut search = Search::new(candidates, factors, seed);
    for cell in already {
        search.keep_away_from(cell);
    }
    for _ in 0..runs {
        search.choose();
    }
    Ok(search.finish())
}

struct Search<'a> {
    candidates: &'a [Vec<u16>],
    factors: &'a [Factor],
    /// Distance to the nearest that is chosen.
    nearest: Vec<f64>,
    /// How often each level of each axis was met.
    met: Vec<Vec<u32>>,
    /// Ranks by chance, for the last ties.
    ranks: Vec<usize>,
    is_chosen: Vec<bool>,
    chosen: Vec<usize>,
    least: Option<f64>,
}

impl<'a> Search<'a> {
    fn new(candidates: &'a [Vec<u16>], factors: &'a [Factor], seed: u64) -> Search<'a> {
        let mut ranks: Vec<usize> = (0..candidates.len()).collect();
        Random::new(seed).shuffle(&mut ranks);
        let levels = factors.iter().map(Factor::levels);
        Search {
            candidates,
            factors,
            nearest: vec![f64::INFINITY; candidates.len()],
            met: levels.map(|levels| vec![0; levels]).collect(),
            ranks,
            is_chosen: vec![false; candidates.len()],
            chosen: Vec::new(),
            least: None,
        }
    }

    fn keep_away_from(&mut self, cell: &[u16]) {
        for (nearest, other) in self.nearest.iter_mut().zip(self.candidates) {
            *nearest = nearest.min(distance(cell, other, self.factors));
        }
        for (met, level) in self.met.iter_mut().zip(cell) {
            met[usize::from(*level)] += 1;
        }
    }

    fn choose(&mut self) {
        let met = |candidate: usize| -> u32 {
            let levels = self.candidates[candidate].iter().zip(&self.met);
            levels.map(|(level, met)| met[usize::from(*level)]).sum()
        };
        let free = (0..self.candidates.len()).filter(|candidate| !self.is_chosen[*candidate]);
        let best = free.max_by(|one, other| {
            let farther = self.nearest[*one].total_cmp(&self.nearest[*other]);
            let rarer = || met(*other).cmp(&met(*one));
            let by_chance = || self.ranks[*one].cmp(&self.ranks[*other]);
            farther.then_with(rarer).then_with(by_chance)
        });
        let Some(candidate) = best else { return };
        if !self.chosen.is_empty() {
            let to_chosen = self.chosen.iter().map(|other| {
                distance(
                    &self.candidates[candidate],
                    &self.candidates[*other],
                    self.factors,
                )
            });
            let nearest = to_chosen.fold(f64::INFINITY, f64::min);
            self.least = Some(self.least.map_or(nearest, |least| least.min(nearest)));
        }
        self.is_chosen[candidate] = true;
        self.chosen.push(candidate);
        self.keep_away_from(&self.candidates[candidate]);
    }

    fn finish(self) -> SpaceFilling {
        let factors = 0..self.factors.len();
        let levels_met = factors.map(|axis| {
            let mut levels: Vec<u16> = self
                .chosen
                .iter()
                .map(|run| self.candidates[*run][axis])
                .collect();
            levels.sort_unstable();
            levels.dedup();
            levels.len()
        });
        SpaceFilling {
            levels_met: levels_met.collect(),
            candidates: self.chosen,
            least_distance: self.least,
        }
    }
}

/// Gower's distance of two cells, 0 to 1.
fn distance(one: &[u16], other: &[u16], factors: &[Factor]) -> f64 {
    let axes = one.iter().zip(other).zip(factors);
    let sum: f64 = axes
        .map(
            |((one, other), factor)| match (factor.place(*one), factor.place(*other)) {
                (Some(one), Some(other)) => (one - other).abs(),
                _ => f64::from(u8::from(one != other)),
            },
        )
        .sum();
    sum / factors.len() as f64
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::design::full_factorial;

    /// A Latin square: of 4 × 4 × 4 cells sixteen can differ pairwise in two axes of three, and four in
    /// all three.
    #[test]
    fn few_cells_differ_in_every_axis() {
        let candidates = full_factorial(&[4, 4, 4], 64).unwrap();
        let factors = vec![Factor::Categorical { levels: 4 }; 3];
        for seed in 0..20 {
            let chosen = space_filling(&candidates, &factors, &[], 4, seed).unwrap();
            assert_eq!(chosen.least_distance, Some(1.0));
            assert_eq!(chosen.levels_met, [4, 4, 4]);
        }
    }

    /// The greedy choice is within a factor of two of the best (Gonzalez 1985); here the best is tried out.
    #[test]
    fn half_of_the_greatest_least_distance_at_least() {
        let candidates = full_factorial(&[3, 4], 12).unwrap();
        let factors = [
            Factor::Categorical { levels: 3 },
            Factor::Numeric {
                values: vec![-78.0, 0.0, 25.0, 60.0],
            },
        ];
        let apart = |chosen: &[usize]| {
            let mut least = f64::INFINITY;
            for (index, one) in chosen.iter().enumerate() {
                for other in &chosen[index + 1..] {
                    least = least.min(distance(&candidates[*one], &candidates[*other], &factors));
                }
            }
            least
        };
        let mut best = 0f64;
        for set in (0u32..1 << 12).filter(|set| set.count_ones() == 5) {
            let chosen: Vec<usize> = (0..12).filter(|i| set >> i & 1 == 1).collect();
            best = best.max(apart(&chosen));
        }
        for seed in 0..20 {
            let chosen = space_filling(&candidates, &factors, &[], 5, seed).unwrap();
            let least = chosen.least_distance.unwrap();
            assert!((least - apart(&chosen.candidates)).abs() < 1e-12);
            assert!(least >= 0.5 * best, "{least} of {best}");
        }
    }

    #[test]
    fn cells_that_are_run_anyhow_are_kept_away_from() {
        let candidates = full_factorial(&[2, 2], 4).unwrap();
        let factors = vec![Factor::Categorical { levels: 2 }; 2];
        let chosen = space_filling(&candidates, &factors, &[vec![0, 0]], 1, 9).unwrap();
        assert_eq!(candidates[chosen.candidates[0]], [1, 1]);
        assert_eq!(chosen.least_distance, None);
        let all = space_filling(&candidates, &factors, &[], 4, 9).unwrap();
        assert_eq!(all.candidates.len(), 4);
        assert!(space_filling(&candidates, &factors, &[], 5, 9).is_err());
        assert!(space_filling(&candidates, &factors, &[vec![2, 0]], 1, 9).is_err());
    }
}
