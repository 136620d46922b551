//! The conditions of published reactions against random ones: does the model rank them higher?

use std::collections::BTreeMap;
use std::fmt::Write;

use enolattice_model::{Cell, Model, Score};

use crate::random_cells::Sampler;
use crate::reactions::{HIT, cell, reported};

/// Random conditions of each reaction.
const RANDOM: usize = 30;
/// Seed of the sampler.
const SEED: u64 = 7;
/// Temperatures to pick from, °C.
const TEMPERATURES: [f64; 6] = [-78.0, -20.0, 0.0, 25.0, 60.0, 100.0];
/// A yield that counts as a working reaction.
const WORKING: f64 = 0.3;

/// Areas under the ROC curve, for one way to rank.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Areas {
    /// Reactions.
    pub reactions: usize,
    /// Mean over the reactions of the share of their own random conditions that rank below the reported ones, ties
    /// counting half.
    pub within: f64,
    /// Standard error of that mean.
    pub within_error: f64,
    /// Share of pairs of any reported and any random conditions in which the reported ones rank higher.
    pub pooled: f64,
}

/// What the model makes of one reaction's conditions and of random ones.
#[derive(Clone, Debug)]
pub struct Tried {
    /// Class of the reaction, as the source has it.
    pub class: String,
    /// Expected yield and p_hit as reported.
    pub reported: [f64; 2],
    /// The same of random conditions which the model covers.
    pub random: Vec<[f64; 2]>,
}

/// Scores the reactions that the model covers as they were reported and under random conditions: any base, any solvent of
/// the library, any of a few temperatures; amounts, order and time follow from the base as for the reported ones.
///
/// # Errors
/// A sentence that names a row which cannot be read.
pub fn tried(model: &Model) -> Result<Vec<Tried>, String> {
    let library = model.library();
    let bases: Vec<&str> = library.bases().iter().map(|b| b.name.as_str()).collect();
    let solvents: Vec<&str> = library.solvents().iter().map(|s| s.name.as_str()).collect();
    let mut sampler = Sampler::seeded(SEED);
    let mut all = Vec::new();
    for row in reported()? {
        let ranked = |cell: &Cell| numbers(&model.score(cell, HIT, 0));
        let Some(as_reported) = cell(model, &row).ok().and_then(|cell| ranked(&cell)) else {
            continue;
        };
        let mut random = Vec::with_capacity(RANDOM);
        for _ in 0..RANDOM {
            let other = row.under(
                bases[sampler.pick(bases.len())],
                solvents[sampler.pick(solvents.len())],
                TEMPERATURES[sampler.pick(TEMPERATURES.len())],
            );
            random.extend(ranked(&cell(model, &other)?));
        }
        all.push(Tried {
            class: row.class,
            reported: as_reported,
            random,
        });
    }
    Ok(all)
}

fn numbers(score: &Score) -> Option<[f64; 2]> {
    Some([score.expected_yield?, score.p_hit?])
}

/// The areas of some reactions by expected yield (0) or p_hit (1).
pub fn areas(tried: &[&Tried], by: usize) -> Areas {
    let below = |reported: f64, random: &mut dyn Iterator<Item = f64>| {
        let (mut sum, mut n) = (0.0, 0.0);
        for other in random {
            n += 1.0;
            sum += match reported.total_cmp(&other) {
                std::cmp::Ordering::Greater => 1.0,
                std::cmp::Ordering::Equal => 0.5,
                std::cmp::Ordering::Less => 0.0,
            };
        }
        (n > 0.0).then(|| sum / n)
    };
    let own = tried.iter().filter_map(|one| {
        let mut random = one.random.iter().map(|numbers| numbers[by]);
        below(one.reported[by], &mut random)
    });
    let own: Vec<f64> = own.collect();
    let everyone: Vec<f64> = tried
        .iter()
        .flat_map(|one| one.random.iter().map(|numbers| numbers[by]))
        .collect();
    let pooled = tried
        .iter()
        .filter_map(|one| below(one.reported[by], &mut everyone.iter().copied()));
    let pooled: Vec<f64> = pooled.collect();
    let mean = |of: &[f64]| of.iter().sum::<f64>() / of.len() as f64;
    let within = mean(&own);
    let variance = mean(&own.iter().map(|x| (x - within).powi(2)).collect::<Vec<_>>());
    Areas {
        reactions: own.len(),
        within,
        within_error: (variance / own.len() as f64).sqrt(),
        pooled: mean(&pooled),
    }
}

/// The section of the page.
///
/// # Errors
/// As [`tried`].
pub fn section(model: &Model) -> Result<String, String> {
    let all = tried(model)?;
    let works = |yields: &mut dyn Iterator<Item = f64>| {
        let yields: Vec<f64> = yields.collect();
        let working = yields.iter().filter(|&&y| y >= WORKING).count();
        100.0 * working as f64 / yields.len() as f64
    };
    let mut page = format!(
        "\n## Reported conditions against random ones\n\n\
         Each covered reaction of this table as it was reported, and its substrate and electrophile under {RANDOM} random conditions: any base and \
         any solvent of the library and {} temperatures from {} to {} °C (seed {SEED}); amounts and order follow from the base as \
         for the reported ones. The area under the ROC curve is the share of pairs in which the reported conditions rank higher, ties \
         counting half: 0.5 is chance, 1 is perfect. *Own*: against the random conditions of the same reaction. *Pooled*: against \
         those of all.\n\n\
         What was not reported is not bad. Many a random choice works as well as what somebody wrote down, so that an area of 1 cannot \
         be reached and none is aimed at: the model expects {WORKING} and more of {:.0} % of the reported and of {:.0} % of the random conditions.\n\n\
         | class | n | own, by expected yield | own, by p_hit | pooled, by expected yield | pooled, by p_hit |\n\
         | --- | --- | --- | --- | --- | --- |\n",
        TEMPERATURES.len(),
        TEMPERATURES[0],
        TEMPERATURES[TEMPERATURES.len() - 1],
        works(&mut all.iter().map(|one| one.reported[0])),
        works(&mut all.iter().flat_map(|one| one.random.iter().map(|n| n[0]))),
    );
    let mut by_class: BTreeMap<&str, Vec<&Tried>> = BTreeMap::new();
    for one in &all {
        by_class.entry(&one.class).or_default().push(one);
    }
    by_class.insert("~", all.iter().collect());
    for (class, some) in by_class {
        let class = if class == "~" { "all" } else { class };
        let [by_yield, by_p_hit] = [0, 1].map(|by| areas(&some, by));
        let _ = writeln!(
            page,
            "| {class} | {} | {:.2} ± {:.2} | {:.2} ± {:.2} | {:.2} | {:.2} |",
            by_yield.reactions,
            by_yield.within,
            by_yield.within_error,
            by_p_hit.within,
            by_p_hit.within_error,
            by_yield.pooled,
            by_p_hit.pooled
        );
    }
    Ok(page)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn one(reported: f64, random: &[f64]) -> Tried {
        Tried {
            class: String::new(),
            reported: [reported; 2],
            random: random.iter().map(|&y| [y; 2]).collect(),
        }
    }

    /// By hand: 0.5 stands above 0.1, ties with 0.5, below 0.9; 1.0 stands above all.
    #[test]
    fn areas_are_shares_of_pairs() {
        let (first, second) = (one(0.5, &[0.1, 0.5, 0.9]), one(1.0, &[0.0]));
        let found = areas(&[&first, &second], 0);
        assert_eq!(found.within, (0.5 + 1.0) / 2.0);
        // against 0.1, 0.5, 0.9, 0.0: 1 + 0.5 + 0 + 1 of 4, and 4 of 4
        assert_eq!(found.pooled, (2.5 / 4.0 + 1.0) / 2.0);
    }
}
