//! Which cells go on the plates, chosen as a set.
//!
//! Cells of one substrate succeed and fail together, so the best single cells are a poor set. A set's worth is the
//! expected number of substrates with a hit, what the plate would teach, and its spread over the axes; cells are added
//! greedily and then exchanged.

mod by_design;
mod greedy;
mod objective;
mod quota;

use std::collections::BTreeSet;

use serde::{Deserialize, Serialize};

use crate::random::Random;
use crate::{Candidate, Setting};
pub use by_design::DesignKind;
use by_design::by_design;
use greedy::{exchange, fill};
use objective::{Chosen, Objective};
pub use quota::Quota;
use quota::Quotas;

/// What hits are counted of.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum HitsOf {
    /// Substrates with at least one hit.
    #[default]
    Substrates,
    /// Products, that is pairs of substrate and electrophile, with at least one hit.
    Products,
}

/// How much each term of a set's worth counts; only their ratios matter.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Weights {
    /// Expected hits.
    pub hits: f64,
    /// What the results would teach.
    pub information: f64,
    /// Even spread over the axes.
    pub spread: f64,
}

impl Weights {
    /// To learn most.
    pub const EXPLORE: Weights = Weights {
        hits: 0.3,
        information: 0.5,
        spread: 0.2,
    };
    /// Some of each.
    pub const BALANCED: Weights = Weights {
        hits: 0.6,
        information: 0.25,
        spread: 0.15,
    };
    /// To get products.
    pub const EXPLOIT: Weights = Weights {
        hits: 0.9,
        information: 0.0,
        spread: 0.1,
    };
}

/// What is to be chosen.
#[derive(Clone, Debug)]
pub struct Task<'a> {
    /// Cells with their yields in the same draws.
    pub candidates: &'a [Candidate],
    /// Yield that makes a hit, 0–1.
    pub target: f64,
    /// What hits are counted of.
    pub hits_of: HitsOf,
    /// Weights of the terms.
    pub weights: Weights,
    /// A classical design in the place of a choice by worth; it knows neither pins nor limits.
    pub design: Option<DesignKind>,
    /// Plates.
    pub plates: usize,
    /// Different cells on each plate.
    pub places: usize,
    /// Candidates that must be chosen, by index.
    pub pinned: &'a [usize],
    /// Lower and upper limits.
    pub quotas: &'a [Quota],
    /// The best of the ranking, by index: what a plain list would have taken.
    pub top_list: &'a [usize],
    /// Random cells of the job, by index.
    pub random: &'a [usize],
    /// Seed of the random sets.
    pub seed: u64,
}

/// Cells of one plate.
#[derive(Clone, Debug, PartialEq)]
pub struct ChosenPlate {
    /// What the plate's wells share.
    pub setting: Setting,
    /// Candidates, by index, pinned ones first.
    pub members: Vec<usize>,
}

/// What a set is worth, in words a user can check.
#[derive(Clone, Copy, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct Worth {
    /// Expected number of substrates (or products) with at least one hit.
    pub units_with_hit: f64,
    /// Expected number of cells that hit.
    pub cells_that_hit: f64,
    /// Mean expected yield, 0–1.
    pub mean_yield: f64,
    /// What the results would tell of everything uncertain, nats.
    pub information_nats: f64,
    /// Evenness over the axes, 0–1.
    pub spread: f64,
}

/// A choice and what it is worth beside others.
#[derive(Clone, Debug, PartialEq)]
pub struct Choice {
    /// Plates, in the order in which they were filled.
    pub plates: Vec<ChosenPlate>,
    /// What the choice is worth.
    pub chosen: Worth,
    /// What a choice of as many cells without limits, pins and whole-plate conditions would be worth.
    pub unlimited: Worth,
    /// The same for the best of the ranking, and the mean of random sets.
    pub top_list: Worth,
    /// Mean of random sets.
    pub random: Worth,
    /// Weighted worth of each of the four, relative to the choice's.
    pub relative: [f64; 4],
    /// The choice's weighted worth over an upper bound of what any set of as many eligible candidates could have, 0–1.
    pub at_least_of_best: f64,
    /// Cells that exchange has put in the place of greedily chosen ones.
    pub exchanged: usize,
}

/// Why nothing could be chosen.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum ChoiceError {
    /// Nothing is left to choose from.
    #[error("no cell is left to choose from; {remedy}")]
    NothingLeft {
        /// What to do.
        remedy: String,
    },
    /// A lower limit cannot be met.
    #[error(
        "{name}: at least {least} cells are asked for, {missing} of them cannot be placed ({reason}); lower the limit, \
         widen what may be chosen, or ask for more plates"
    )]
    Limit {
        /// Axis and value.
        name: String,
        /// What was asked for.
        least: usize,
        /// Cells that are missing.
        missing: usize,
        /// Why the limit is there.
        reason: String,
    },
    /// The design cannot be had.
    #[error("the design cannot be had: {reason}")]
    Design {
        /// Why, and what to do.
        reason: String,
    },
    /// More cells are pinned than fit, or two of them cannot share a plate.
    #[error(
        "{pinned} pinned cells do not fit {plates} plates of {places} places, for {reason}; unpin some or ask for more plates"
    )]
    Pinned {
        /// Pinned cells.
        pinned: usize,
        /// Plates.
        plates: usize,
        /// Places of each.
        places: usize,
        /// Why.
        reason: String,
    },
}

/// Random sets that are averaged.
const RANDOM_SETS: usize = 24;
/// Their sequence of random numbers.
const STREAM_OF_SETS: u64 = 1;
/// Settings of which a plate is tried.
const MOST_SETTINGS: usize = 24;

/// Chooses the cells of all plates.
///
/// # Errors
/// [`ChoiceError`] where limits and pins cannot be met or nothing is left.
pub fn choose(task: &Task<'_>) -> Result<Choice, ChoiceError> {
    let wanted = task.plates * task.places;
    let eligible: Vec<usize> = (0..task.candidates.len())
        .filter(|&i| task.candidates[i].eligible || task.pinned.contains(&i))
        .collect();
    if eligible.is_empty() || wanted == 0 {
        return Err(ChoiceError::NothingLeft {
            remedy:
                "widen the filters, declare what else the deck can do, or free wells of controls"
                    .to_owned(),
        });
    }
    let objective = objective(task, &eligible, wanted);
    let free = unlimited(&objective, &eligible, wanted);
    let (plates, exchanged) = match task.design {
        None => fill_plates(task, &objective, &eligible)?,
        Some(kind) => (by_design(task, kind, &eligible)?, 0),
    };
    let members: Vec<usize> = plates
        .iter()
        .flat_map(|plate| plate.members.clone())
        .collect();
    let chosen = objective.of(&members);
    let value = objective.value(&chosen).max(f64::MIN_POSITIVE);
    let random = random_sets(task, members.len());
    let worths: Vec<Worth> = random.iter().map(|set| objective.worth(set)).collect();
    let relative = |set: &[usize]| objective.value(&objective.of(set)) / value;
    let top_list = &task.top_list[..task.top_list.len().min(members.len())];
    let mean_random = random.iter().map(|set| relative(set)).sum::<f64>() / RANDOM_SETS as f64;
    Ok(Choice {
        chosen: objective.worth(&members),
        unlimited: objective.worth(&free.members),
        top_list: objective.worth(top_list),
        random: mean(&worths),
        relative: [
            1.0,
            relative(&free.members),
            relative(top_list),
            mean_random,
        ],
        at_least_of_best: value / bound(&objective, &chosen, &eligible, members.len()),
        exchanged,
        plates,
    })
}

/// The weighted objective: each term in units of what a set chosen for it alone would reach.
fn objective<'a>(task: &Task<'a>, eligible: &[usize], wanted: usize) -> Objective<'a> {
    let mut objective = Objective::new(task.candidates, task.target, task.hits_of, wanted);
    let reached = std::array::from_fn(|term| {
        objective.only(term);
        let alone = unlimited(&objective, eligible, wanted);
        objective.terms(&alone)[term]
    });
    objective.weighed(task.weights, reached)
}

fn unlimited(objective: &Objective<'_>, eligible: &[usize], wanted: usize) -> Chosen {
    let mut chosen = objective.none();
    let mut quotas = Quotas::new(&[], objective.candidates);
    fill(objective, &mut chosen, &mut quotas, eligible, wanted);
    chosen
}

/// Worth of the set and of the greatest gains that as many further cells could bring: the best set has no more.
fn bound(objective: &Objective<'_>, chosen: &Chosen, eligible: &[usize], wanted: usize) -> f64 {
    let mut gains: Vec<f64> = eligible
        .iter()
        .filter(|candidate| !chosen.members.contains(candidate))
        .map(|&candidate| objective.gain(chosen, candidate))
        .collect();
    gains.sort_by(|a, b| b.total_cmp(a));
    objective.value(chosen) + gains.iter().take(wanted).sum::<f64>()
}

/// Fills plate after plate, each with the setting that brings most.
fn fill_plates(
    task: &Task<'_>,
    objective: &Objective<'_>,
    eligible: &[usize],
) -> Result<(Vec<ChosenPlate>, usize), ChoiceError> {
    let setting = |candidate: usize| task.candidates[candidate].setting();
    let mut pinned: Vec<usize> = task.pinned.to_vec();
    let mut chosen = objective.none();
    let mut quotas = Quotas::new(task.quotas, task.candidates);
    let mut plates: Vec<ChosenPlate> = Vec::new();
    let mut exchanged = 0;
    for _ in 0..task.plates {
        let settings = match pinned.first() {
            Some(&first) => vec![setting(first)],
            None => likely_settings(task, eligible),
        };
        let mut best: Option<(f64, Setting, Chosen, Quotas<'_>, usize)> = None;
        for at in settings {
            let (mut trial, mut taken) = (chosen.clone(), quotas.clone());
            let before = trial.members.len();
            let pins = pinned.iter().filter(|&&pin| setting(pin) == at);
            for &pin in pins.take(task.places) {
                taken.take(pin);
                objective.add(&mut trial, pin);
            }
            let among: Vec<usize> = eligible
                .iter()
                .copied()
                .filter(|&candidate| setting(candidate) == at && !pinned.contains(&candidate))
                .collect();
            let wanted = before + task.places;
            fill(objective, &mut trial, &mut taken, &among, wanted);
            // what was missing for lower limits first, then worth
            let value = objective.value(&trial) - taken.lack() as f64;
            if best.as_ref().is_none_or(|known| value > known.0) {
                best = Some((value, at, trial, taken, before));
            }
        }
        let Some((_, at, mut trial, mut taken, before)) = best else {
            break;
        };
        if trial.members.len() == before {
            break;
        }
        let pins = pinned
            .iter()
            .filter(|&&pin| setting(pin) == at)
            .count()
            .min(task.places);
        let among: Vec<usize> = eligible
            .iter()
            .copied()
            .filter(|&candidate| setting(candidate) == at && !pinned.contains(&candidate))
            .collect();
        exchanged += exchange(objective, &mut trial, &mut taken, &among, before + pins);
        plates.push(ChosenPlate {
            setting: at,
            members: trial.members[before..].to_vec(),
        });
        pinned.retain(|pin| !trial.members.contains(pin));
        (chosen, quotas) = (trial, taken);
    }
    if !pinned.is_empty() {
        return Err(ChoiceError::Pinned {
            pinned: task.pinned.len(),
            plates: task.plates,
            places: task.places,
            reason: "cells of different temperatures or times need plates of their own".to_owned(),
        });
    }
    if let Some((quota, missing)) = quotas.unmet().next() {
        return Err(ChoiceError::Limit {
            name: quota.name.clone(),
            least: quota.least,
            missing,
            reason: quota.reason.clone(),
        });
    }
    if plates.is_empty() {
        return Err(ChoiceError::NothingLeft {
            remedy: "raise the upper limits or what is on the shelf".to_owned(),
        });
    }
    Ok((plates, exchanged))
}

/// Settings among which a plate's is sought: those with the best candidates, so that many do not take long.
fn likely_settings(task: &Task<'_>, eligible: &[usize]) -> Vec<Setting> {
    let all: BTreeSet<Setting> = eligible
        .iter()
        .map(|&candidate| task.candidates[candidate].setting())
        .collect();
    let promise = |at: &Setting| {
        let mut hits: Vec<f64> = eligible
            .iter()
            .map(|&candidate| &task.candidates[candidate])
            .filter(|candidate| candidate.setting() == *at)
            .map(|candidate| candidate.p_hit(task.target))
            .collect();
        hits.sort_by(|a, b| b.total_cmp(a));
        hits.iter().take(task.places).sum::<f64>()
    };
    let mut settings: Vec<(f64, Setting)> = all.iter().map(|at| (promise(at), *at)).collect();
    settings.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
    settings.truncate(MOST_SETTINGS);
    settings.into_iter().map(|(_, at)| at).collect()
}

/// Sets of random cells, as many as were chosen.
fn random_sets(task: &Task<'_>, wanted: usize) -> Vec<Vec<usize>> {
    let mut random = Random::stream(task.seed, STREAM_OF_SETS);
    let set = |_| {
        let mut pool = task.random.to_vec();
        let take = wanted.min(pool.len());
        for i in 0..take {
            let j = i + random.below(pool.len() - i);
            pool.swap(i, j);
        }
        pool.truncate(take);
        pool
    };
    (0..RANDOM_SETS).map(set).collect()
}

fn mean(worths: &[Worth]) -> Worth {
    let of = |field: fn(&Worth) -> f64| {
        worths.iter().map(field).sum::<f64>() / worths.len().max(1) as f64
    };
    Worth {
        units_with_hit: of(|worth| worth.units_with_hit),
        cells_that_hit: of(|worth| worth.cells_that_hit),
        mean_yield: of(|worth| worth.mean_yield),
        information_nats: of(|worth| worth.information_nats),
        spread: of(|worth| worth.spread),
    }
}

#[cfg(test)]
mod tests;
