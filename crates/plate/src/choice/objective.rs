//! What a set of cells is worth.

use std::collections::HashMap;

use enolattice_units::math;

use crate::Candidate;
use crate::candidate::is_hit;
use crate::choice::{HitsOf, Weights, Worth};

/// Error of a yield as it is measured on a plate, fraction of the substrate (common practice: peak areas without a
/// calibration of their own are good for about a tenth).
const ASSAY_SIGMA: f64 = 0.1;

/// How much of the worth of a yield is in reaching the target; the rest goes with the yield itself, so that of two
/// sure hits the better one is chosen.
const SHARE_OF_HIT: f64 = 0.75;

/// Axes over which a plate is spread: substrate, electrophile, base, solvent, additive.
const SPREAD_AXES: usize = 5;

/// What a set of cells is worth: three terms, each monotone and submodular in the set, so their weighted sum is too.
///
/// * hits: `Σ_u mean_d max_{c ∈ S of u} w(y_cd)`, u the substrates (or products), d the draws, w a yield's worth;
/// * information: `½ ln det(1 + Vᵀ V)`, V the yields' deviations from their means over the draws in units of the error
///   of measurement: what measuring the set tells of everything that is uncertain (in nats, for a Gaussian model);
/// * spread: mean over the axes of `Σ_v √n_v / √(places · values)`, n_v the cells with value v.
#[derive(Debug)]
pub(crate) struct Objective<'a> {
    pub(crate) candidates: &'a [Candidate],
    draws: usize,
    target: f64,
    /// Unit of each candidate in which hits are counted.
    unit: Vec<u32>,
    units: usize,
    /// Dense number of each candidate's value on each axis of the spread, and values on each.
    spread: Vec<[u32; SPREAD_AXES]>,
    values: [usize; SPREAD_AXES],
    /// Cells that will be chosen.
    places: usize,
    /// Factor of each term: its weight over what it could reach by itself.
    factors: [f64; 3],
}

/// The cells chosen so far.
#[derive(Clone, Debug)]
pub(crate) struct Chosen {
    pub(crate) members: Vec<usize>,
    /// Best worth of each unit in each draw.
    best: Vec<f32>,
    /// Inverse of `1 + Vᵀ V`, row by row, and the logarithm of its determinant, negated.
    inverse: Vec<f64>,
    log_det: f64,
    counts: [Vec<u32>; SPREAD_AXES],
}

impl<'a> Objective<'a> {
    pub(crate) fn new(
        candidates: &'a [Candidate],
        target: f64,
        hits_of: HitsOf,
        places: usize,
    ) -> Objective<'a> {
        let mut units = Numbers::default();
        let unit = candidates
            .iter()
            .map(|candidate| match hits_of {
                HitsOf::Substrates => units.of((candidate.digits.substrate, 0)),
                HitsOf::Products => {
                    units.of((candidate.digits.substrate, candidate.digits.electrophile))
                }
            })
            .collect();
        let mut axes: [Numbers; SPREAD_AXES] = Default::default();
        let spread = candidates
            .iter()
            .map(|candidate| {
                let digits = candidate.digits.to_array();
                std::array::from_fn(|axis| axes[axis].of((digits[axis], 0)))
            })
            .collect();
        Objective {
            candidates,
            draws: candidates.first().map_or(0, |first| first.yields.len()),
            target,
            unit,
            units: units.known.len(),
            spread,
            values: axes.map(|axis| axis.known.len()),
            places,
            factors: [1.0, 0.0, 0.0],
        }
    }

    /// With each term in units of what it could reach by itself.
    pub(crate) fn weighed(self, weights: Weights, reached: [f64; 3]) -> Objective<'a> {
        let weights = [weights.hits, weights.information, weights.spread];
        let all: f64 = weights.iter().sum();
        let factors = std::array::from_fn(|term| match reached[term] > 0.0 {
            true => weights[term] / all / reached[term],
            false => 0.0,
        });
        Objective { factors, ..self }
    }

    /// One term alone.
    pub(crate) fn only(&mut self, term: usize) {
        self.factors = std::array::from_fn(|other| f64::from(other == term));
    }

    pub(crate) fn none(&self) -> Chosen {
        let mut inverse = vec![0.0; self.draws * self.draws];
        (0..self.draws).for_each(|d| inverse[d * self.draws + d] = 1.0);
        Chosen {
            members: Vec::new(),
            best: vec![0.0; self.units * self.draws],
            inverse,
            log_det: 0.0,
            counts: self.values.map(|values| vec![0; values]),
        }
    }

    pub(crate) fn of(&self, members: &[usize]) -> Chosen {
        let mut chosen = self.none();
        for &member in members {
            self.add(&mut chosen, member);
        }
        chosen
    }

    /// By how much a further cell raises the worth.
    pub(crate) fn gain(&self, chosen: &Chosen, candidate: usize) -> f64 {
        let [hits, information, spread] = self.factors;
        let mut gain = 0.0;
        if hits > 0.0 {
            gain += hits * self.gain_of_hits(chosen, candidate);
        }
        if information > 0.0 {
            gain += information * 0.5 * math::ln(1.0 + self.leverage(chosen, candidate).0);
        }
        if spread > 0.0 {
            gain += spread * self.gain_of_spread(chosen, candidate);
        }
        gain
    }

    pub(crate) fn add(&self, chosen: &mut Chosen, candidate: usize) {
        for (best, y) in self
            .row(&mut chosen.best, candidate)
            .iter_mut()
            .zip(&self.candidates[candidate].yields)
        {
            *best = best.max(self.worth_of(*y));
        }
        let (leverage, image) = self.leverage(chosen, candidate);
        let scale = 1.0 / (1.0 + leverage);
        // Sherman and Morrison, Ann. Math. Stat. 1950, 21, 124
        for (row, a) in image.iter().enumerate() {
            let line = &mut chosen.inverse[row * self.draws..(row + 1) * self.draws];
            for (entry, b) in line.iter_mut().zip(&image) {
                *entry -= a * b * scale;
            }
        }
        chosen.log_det += math::ln(1.0 + leverage);
        for (axis, value) in self.spread[candidate].iter().enumerate() {
            chosen.counts[axis][*value as usize] += 1;
        }
        chosen.members.push(candidate);
    }

    /// The weighted sum of the terms.
    pub(crate) fn value(&self, chosen: &Chosen) -> f64 {
        self.terms(chosen)
            .iter()
            .zip(self.factors)
            .map(|(term, factor)| term * factor)
            .sum()
    }

    /// The three terms by themselves.
    pub(crate) fn terms(&self, chosen: &Chosen) -> [f64; 3] {
        let hits = chosen.best.iter().map(|&w| f64::from(w)).sum::<f64>();
        let spread = chosen.counts.iter().enumerate().map(|(axis, counts)| {
            let roots: f64 = counts.iter().map(|&n| f64::from(n).sqrt()).sum();
            roots / self.most_spread(axis)
        });
        [
            hits / self.draws.max(1) as f64,
            0.5 * chosen.log_det,
            spread.sum::<f64>() / SPREAD_AXES as f64,
        ]
    }

    /// What a user is told of a set.
    pub(crate) fn worth(&self, members: &[usize]) -> Worth {
        let mut hit = vec![false; self.units * self.draws];
        for &member in members {
            for (hit, &y) in self
                .row(&mut hit, member)
                .iter_mut()
                .zip(&self.candidates[member].yields)
            {
                *hit |= is_hit(y, self.target);
            }
        }
        let [_, information, spread] = self.terms(&self.of(members));
        let draws = self.draws.max(1) as f64;
        let cells = members.iter().map(|&member| &self.candidates[member]);
        Worth {
            units_with_hit: hit.iter().filter(|&&hit| hit).count() as f64 / draws,
            cells_that_hit: cells.clone().map(|cell| cell.p_hit(self.target)).sum(),
            mean_yield: cells.map(Candidate::mean_yield).sum::<f64>() / members.len().max(1) as f64,
            information_nats: information,
            spread,
        }
    }

    fn gain_of_hits(&self, chosen: &Chosen, candidate: usize) -> f64 {
        let from = self.unit[candidate] as usize * self.draws;
        let best = &chosen.best[from..from + self.draws];
        let gains = best
            .iter()
            .zip(&self.candidates[candidate].yields)
            .map(|(&best, &y)| f64::from((self.worth_of(y) - best).max(0.0)));
        gains.sum::<f64>() / self.draws.max(1) as f64
    }

    /// `vᵀ M⁻¹ v` of a cell's deviations v, and `M⁻¹ v`.
    fn leverage(&self, chosen: &Chosen, candidate: usize) -> (f64, Vec<f64>) {
        let of = &self.candidates[candidate];
        let (mean, unit) = (
            of.mean_yield(),
            ASSAY_SIGMA * (self.draws.max(1) as f64).sqrt(),
        );
        let v: Vec<f64> = of
            .yields
            .iter()
            .map(|&y| (f64::from(y) - mean) / unit)
            .collect();
        let rows = chosen.inverse.chunks_exact(self.draws.max(1));
        let image: Vec<f64> = rows
            .map(|row| row.iter().zip(&v).map(|(a, b)| a * b).sum())
            .collect();
        (image.iter().zip(&v).map(|(a, b)| a * b).sum(), image)
    }

    fn gain_of_spread(&self, chosen: &Chosen, candidate: usize) -> f64 {
        let gains = self.spread[candidate]
            .iter()
            .enumerate()
            .map(|(axis, &value)| {
                let n = f64::from(chosen.counts[axis][value as usize]);
                ((n + 1.0).sqrt() - n.sqrt()) / self.most_spread(axis)
            });
        gains.sum::<f64>() / SPREAD_AXES as f64
    }

    fn most_spread(&self, axis: usize) -> f64 {
        (self.places.max(1) as f64 * self.values[axis].max(1) as f64).sqrt()
    }

    fn worth_of(&self, y: f32) -> f32 {
        let hit = f64::from(is_hit(y, self.target));
        (SHARE_OF_HIT * hit + (1.0 - SHARE_OF_HIT) * f64::from(y)) as f32
    }

    /// The entries of a candidate's unit, one for each draw.
    fn row<'t, T>(&self, table: &'t mut [T], candidate: usize) -> &'t mut [T] {
        let from = self.unit[candidate] as usize * self.draws;
        &mut table[from..from + self.draws]
    }
}

/// Numbers from 0 for whatever comes, in the order in which it comes.
#[derive(Default)]
struct Numbers {
    known: HashMap<(u32, u32), u32>,
}

impl Numbers {
    fn of(&mut self, key: (u32, u32)) -> u32 {
        let next = self.known.len() as u32;
        *self.known.entry(key).or_insert(next)
    }
}
