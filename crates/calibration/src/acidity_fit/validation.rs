//! Cross-validation: what the fit says of compounds it has not seen.

use enolattice_model::{Contribution, Coverage, Form};

use super::observations::{Candidate, Observed};
use super::{Fit, FitError, Observation, Term};

/// A prediction of a compound that was held out.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Held {
    /// Row.
    pub(crate) row: usize,
    /// Candidate predicted to be the most acidic.
    pub(crate) at: usize,
    /// Predicted minus measured.
    pub(crate) error: f64,
    /// Whether the rows that were kept have nothing like it.
    pub(crate) outside: bool,
}

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
fn fold(row: usize) -> usize {
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
        let coverage = Coverage::new(seen(&kept, &fit), &form, &fit.values);
        for row in (0..rows.len()).filter(|i| out(*i)) {
            let value = |candidate: &Candidate| candidate.contribution.value(&fit.values);
            let at = rows[row].most_acidic(value);
            let error = value(&rows[row].candidates[at]) - rows[row].value;
            let outside = !coverage.covers(&rows[row].candidates[at].contribution);
            held.push(Held {
                row,
                at,
                error,
                outside,
            });
        }
    }
    Ok(held)
}

fn seen(rows: &[Observation], fit: &Fit) -> Vec<Contribution> {
    rows.iter()
        .zip(&fit.assigned)
        .filter(|(row, _)| matches!(row.observed, Observed::Acidity { .. }))
        .map(|(row, at)| row.candidates[*at].contribution.clone())
        .collect()
}
