//! Cross-validation: what the fit says of compounds it has not seen.

use std::collections::HashMap;

use enolattice_model::{Contribution, Coverage, Form, local_sigma, similarity};
use enolattice_molecule::AnionClass;

use super::observations::{Candidate, Observed};
use super::{Fit, FitError, Observation, Term};

/// A prediction of a compound that was held out.
#[derive(Clone, Debug)]
pub(crate) struct Held {
    /// Row.
    pub(crate) row: usize,
    /// Candidate predicted to be the most acidic.
    pub(crate) at: usize,
    /// Predicted minus measured.
    pub(crate) error: f64,
    /// The same with the local correction by the nearest rows that were kept.
    pub(crate) corrected_error: f64,
    /// Whether the rows that were kept have nothing like it.
    pub(crate) outside: bool,
    /// σ that the model would give, from the errors of rows alike that were held out too.
    pub(crate) sigma: f64,
    /// The nearest measured rows that were kept, with their distances.
    nearest: Vec<(usize, f64)>,
    /// What thinly supported coefficients bring into σ.
    thin: f64,
}

/// Nearest rows that are asked for σ and for the local correction.
const NEAREST: usize = 25;
/// Weight of no correction at all against a neighbour at distance 0.
const NO_CORRECTION: f64 = 1.0;
/// A neighbour whose own σ is this counts half.
const HALF_WEIGHT_SIGMA: f64 = 0.5;
/// Sites that the mean error of all weighs when a class of anion has few.
pub(crate) const CLASS_PRIOR_SITES: f64 = 8.0;

/// Errors of held-out compounds under several ways of holding out.
pub(crate) struct Validation {
    pub(crate) five_fold: Vec<Held>,
    pub(crate) leave_group_out: Vec<Held>,
    /// Five-fold with starts that bind [`LOOSER`] times less.
    pub(crate) five_fold_loose: Vec<Held>,
}

/// Factor on the spreads of the starts, to see how much rests on them.
pub(crate) const LOOSER: f64 = 4.0;

impl Validation {
    pub(crate) fn run(terms: &[Term], rows: &[Observation]) -> Result<Validation, FitError> {
        let folds: Vec<usize> = (0..rows.len()).map(fold).collect();
        let mut scaffolds: Vec<&str> = rows.iter().map(|row| row.scaffold.as_str()).collect();
        scaffolds.sort_unstable();
        scaffolds.dedup();
        let groups: Vec<usize> = rows
            .iter()
            .map(|row| scaffolds.binary_search(&row.scaffold.as_str()).unwrap_or(0))
            .collect();
        let loose: Vec<Term> = terms
            .iter()
            .map(|term| Term {
                spread: LOOSER * term.spread,
                ..term.clone()
            })
            .collect();
        Ok(Validation {
            five_fold: hold_out(terms, rows, &folds)?,
            leave_group_out: hold_out(terms, rows, &groups)?,
            five_fold_loose: hold_out(&loose, rows, &folds)?,
        })
    }
}

/// Fold of a row: a fixed scramble of its number, so that homologues that stand together
/// in the tables are spread.
pub(super) fn fold(row: usize) -> usize {
    let scrambled = (row as u64 + 1).wrapping_mul(0x9E37_79B9_7F4A_7C15);
    ((scrambled >> 40) % 5) as usize
}

/// Holds out each group in turn. Anchors and equilibria stay in always.
fn hold_out(terms: &[Term], rows: &[Observation], groups: &[usize]) -> Result<Vec<Held>, FitError> {
    let mut distinct: Vec<usize> = groups.to_vec();
    distinct.sort_unstable();
    distinct.dedup();
    let form = Form::new(terms.iter().map(|term| (term.name, term.role)));
    let mut held = Vec::new();
    for group in distinct {
        let out = |i: usize| rows[i].measured && groups[i] == group;
        if !(0..rows.len()).any(out) {
            continue;
        }
        let kept: Vec<Observation> = (0..rows.len())
            .filter(|i| !out(*i))
            .map(|i| rows[i].clone())
            .collect();
        let fit = Fit::new(terms, &kept)?;
        let numbers: Vec<usize> = (0..rows.len()).filter(|i| !out(*i)).collect();
        let known = Known::new(&kept, &numbers, &fit, &form);
        held.extend(
            (0..rows.len())
                .filter(|i| out(*i))
                .map(|row| known.predict(row, &rows[row])),
        );
    }
    give_sigmas(rows, &mut held);
    Ok(held)
}

/// What a fit knows when compounds are held out of it.
struct Known<'a> {
    fit: &'a Fit,
    coverage: Coverage,
    /// Row and what the fit leaves unexplained there with its weight, in the order of `coverage`.
    seen: Vec<(usize, f64, f64)>,
}

impl<'a> Known<'a> {
    fn new(kept: &[Observation], numbers: &[usize], fit: &'a Fit, form: &Form) -> Known<'a> {
        let seen = kept
            .iter()
            .zip(numbers)
            .zip(&fit.assigned)
            .filter(|((row, _), _)| matches!(row.observed, Observed::Acidity { .. }))
            .map(|((row, number), at)| {
                let estimated = row.candidates[*at].contribution.value(&fit.values);
                let quality = 1.0 / (1.0 + (row.sigma / HALF_WEIGHT_SIGMA).powi(2));
                (*number, row.value - estimated, quality)
            });
        Known {
            fit,
            coverage: Coverage::new(contributions(kept, fit), form, &fit.values),
            seen: seen.collect(),
        }
    }

    fn predict(&self, row: usize, observation: &Observation) -> Held {
        let value = |candidate: &Candidate| candidate.contribution.value(&self.fit.values);
        let at = observation.most_acidic(value);
        let contribution = &observation.candidates[at].contribution;
        let corrected =
            |candidate: &Candidate| value(candidate) + self.correction(&candidate.contribution);
        let corrected_at = observation.most_acidic(corrected);
        Held {
            row,
            at,
            error: value(&observation.candidates[at]) - observation.value,
            corrected_error: corrected(&observation.candidates[corrected_at]) - observation.value,
            outside: !self.coverage.covers(contribution),
            sigma: 0.0,
            nearest: self
                .coverage
                .nearest(contribution, NEAREST)
                .into_iter()
                .map(|(i, distance)| (self.seen[i].0, distance))
                .collect(),
            thin: contribution.error_of_thin_terms(
                &self.fit.values,
                &self.fit.standard_errors,
                &self.fit.training_sites,
            ),
        }
    }

    /// Mean residual of the nearest rows, by likeness and quality, drawn to zero where few are near.
    fn correction(&self, site: &Contribution) -> f64 {
        let (mut sum, mut weights) = (0.0, NO_CORRECTION);
        for (i, distance) in self.coverage.nearest(site, NEAREST) {
            let (_, residual, quality) = self.seen[i];
            let weight = similarity(distance) * quality;
            sum += weight * residual;
            weights += weight;
        }
        sum / weights
    }
}

/// Class of the anion that a held-out row is about.
pub(crate) fn class_of(rows: &[Observation], held: &Held) -> AnionClass {
    let row = &rows[held.row];
    match row.observed {
        Observed::Acidity { at: Some(at) } => row.class(at),
        _ => row.class(held.at),
    }
}

/// Mean absolute error of a class of anion, drawn to that of all.
pub(crate) fn class_errors(rows: &[Observation], held: &[Held]) -> HashMap<AnionClass, f64> {
    let all = held.iter().map(|one| one.error.abs()).sum::<f64>() / held.len().max(1) as f64;
    let mut sums: HashMap<AnionClass, (f64, f64)> = HashMap::new();
    for one in held {
        let sum = sums
            .entry(class_of(rows, one))
            .or_insert((CLASS_PRIOR_SITES * all, CLASS_PRIOR_SITES));
        sum.0 += one.error.abs();
        sum.1 += 1.0;
    }
    sums.into_iter()
        .map(|(class, (sum, sites))| (class, sum / sites))
        .collect()
}

/// σ of each held-out row, as the model makes it: a row's neighbours are those of the fit that it was
/// held out of, their errors those they had when they were held out in their turn.
fn give_sigmas(rows: &[Observation], held: &mut [Held]) {
    let errors: HashMap<usize, f64> = held.iter().map(|one| (one.row, one.error)).collect();
    let classes = class_errors(rows, held);
    for one in held {
        let nearby: Vec<(f64, f64)> = one
            .nearest
            .iter()
            .filter_map(|(row, distance)| Some((*distance, *errors.get(row)?)))
            .collect();
        let typical = classes[&class_of(rows, one)];
        one.sigma = local_sigma(typical, &nearby).hypot(one.thin);
    }
}

fn contributions(rows: &[Observation], fit: &Fit) -> Vec<Contribution> {
    rows.iter()
        .zip(&fit.assigned)
        .filter(|(row, _)| matches!(row.observed, Observed::Acidity { .. }))
        .map(|(row, at)| row.candidates[*at].contribution.clone())
        .collect()
}
