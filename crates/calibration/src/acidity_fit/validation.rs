//! Cross-validation: what the fit says of compounds it has not seen.

use super::{Fit, FitError, Observation, Term};

/// A prediction of a compound that was held out.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Held {
    /// Row.
    pub(crate) row: usize,
    /// Candidate predicted to be the most acidic.
    pub(crate) predicted_at: usize,
    /// Predicted minus measured, group contributions alone.
    pub(crate) bare: f64,
    /// Predicted minus measured, with the correction by analogues.
    pub(crate) corrected: f64,
}

/// Errors of held-out compounds under two ways of holding out.
pub(crate) struct Validation {
    pub(crate) five_fold: Vec<Held>,
    pub(crate) leave_group_out: Vec<Held>,
}

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
        Ok(Validation {
            five_fold: hold_out(terms, rows, &folds)?,
            leave_group_out: hold_out(terms, rows, &groups)?,
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
fn hold_out(
    terms: &[Term],
    rows: &[Observation],
    groups: &[usize],
) -> Result<Vec<Held>, FitError> {
    let mut distinct: Vec<usize> = groups.to_vec();
    distinct.sort_unstable();
    distinct.dedup();
    let mut held = Vec::new();
    for group in distinct {
        let out = |i: usize| rows[i].measured && groups[i] == group;
        if !(0..rows.len()).any(out) {
            continue;
        }
        let kept: Vec<Observation> =
            (0..rows.len()).filter(|i| !out(*i)).map(|i| rows[i].clone()).collect();
        let fit = Fit::new(terms, &kept)?;
        let analogues = fit.analogues(&kept);
        for row in (0..rows.len()).filter(|i| out(*i)) {
            let bare = |at: usize| rows[row].candidates[at].contribution.value(&fit.values);
            let corrected = |at: usize| {
                bare(at) + analogues.correction(&rows[row].candidates[at].contribution)
            };
            let bare_at = (0..rows[row].candidates.len()).min_by(|a, b| bare(*a).total_cmp(&bare(*b)));
            let at = (0..rows[row].candidates.len())
                .min_by(|a, b| corrected(*a).total_cmp(&corrected(*b)))
                .unwrap_or(0);
            held.push(Held {
                row,
                predicted_at: at,
                bare: bare(bare_at.unwrap_or(0)) - rows[row].value,
                corrected: corrected(at) - rows[row].value,
            });
        }
    }
    Ok(held)
}
