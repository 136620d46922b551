//! The medium's parameters fitted to the pairs, and each pair foretold from the others.
//!
//! The form is all but linear in its parameters: Gauss and Newton's method finds the minimum of
//! `Σ (published − predicted)²/σ² + Σ (value − start)²/spread²` in a few rounds, and the error of a pair that is
//! left out is `e/(1 − h)` with its share h in its own prediction (Allen, Technometrics 1974, 16, 125), exact for a
//! linear form.

use enolattice_model::Model;
use serde::Deserialize;

use super::pairs::Pair;
use crate::acidity_fit::{cholesky, solve};

const TERMS: &str = include_str!("../../data/medium_terms.tsv");

/// What the form itself may be off by, pK units.
const FORM_SIGMA: f64 = 0.7;
/// A prediction that rests on its own pair by more than this share is no prediction.
const OWN_SHARE: f64 = 0.9;
const ROUNDS: usize = 6;
/// Step of the numerical derivatives.
const STEP: f64 = 1e-3;

/// A parameter that the pairs settle.
#[derive(Deserialize)]
pub(super) struct Term {
    pub(super) name: String,
    start: f64,
    spread: f64,
}

/// The fitted parameters.
pub(super) struct Fit {
    /// Each with its fitted value and standard error.
    pub(super) values: Vec<(String, f64, f64)>,
    /// Predicted less published for each pair, fitted to the others; `None` where these say next to nothing of it.
    pub(super) left_out: Vec<Option<f64>>,
}

/// The terms of `data/medium_terms.tsv`.
pub(super) fn terms() -> Result<Vec<Term>, String> {
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(b'\t')
        .comment(Some(b'#'))
        .from_reader(TERMS.as_bytes());
    let rows = reader.deserialize();
    rows.map(|row| row.map_err(|error| error.to_string()))
        .collect()
}

impl Fit {
    pub(super) fn new(model: &Model, pairs: &[Pair]) -> Result<Fit, String> {
        let terms = terms()?;
        let n = terms.len();
        let mut values: Vec<f64> = terms.iter().map(|term| term.start).collect();
        for _ in 0..ROUNDS {
            let (errors, slopes) = linearised(model, pairs, &terms, &values)?;
            let mut gradient: Vec<f64> = terms
                .iter()
                .zip(&values)
                .map(|(term, value)| (term.start - value) / term.spread.powi(2))
                .collect();
            for (error, slope) in settling(pairs, &errors, &slopes) {
                for (g, s) in gradient.iter_mut().zip(slope) {
                    *g -= s * error / FORM_SIGMA.powi(2);
                }
            }
            let step = solve(&factor(&terms, pairs, &slopes)?, n, &gradient);
            values.iter_mut().zip(step).for_each(|(v, s)| *v += s);
        }
        let (errors, slopes) = linearised(model, pairs, &terms, &values)?;
        let factor = factor(&terms, pairs, &slopes)?;
        let left_out = pairs
            .iter()
            .zip(errors.iter().zip(&slopes))
            .map(|(pair, (error, slope))| {
                if !pair.settles() {
                    return Some(*error);
                }
                let reach = solve(&factor, n, slope);
                let dot: f64 = slope.iter().zip(&reach).map(|(a, b)| a * b).sum();
                let share = dot / FORM_SIGMA.powi(2);
                (share <= OWN_SHARE).then(|| error / (1.0 - share))
            })
            .collect();
        let standard_error = |i: usize| {
            let mut unit = vec![0.0; n];
            unit[i] = 1.0;
            solve(&factor, n, &unit)[i].max(0.0).sqrt()
        };
        let values = terms.iter().zip(values).enumerate();
        Ok(Fit {
            values: values
                .map(|(i, (term, value))| (term.name.clone(), value, standard_error(i)))
                .collect(),
            left_out,
        })
    }
}

/// Predicted less published of each pair, and how it depends on each term.
fn linearised(
    model: &Model,
    pairs: &[Pair],
    terms: &[Term],
    values: &[f64],
) -> Result<(Vec<f64>, Vec<Vec<f64>>), String> {
    let named: Vec<(&str, f64)> = terms
        .iter()
        .map(|term| term.name.as_str())
        .zip(values.iter().copied())
        .collect();
    let all = |changes: &[(&str, f64)]| -> Result<Vec<f64>, String> {
        let predicted = pairs.iter().map(|pair| pair.predicted(model, changes));
        let mut errors: Vec<f64> = predicted
            .zip(pairs)
            .map(|(predicted, pair)| match predicted {
                Some(pka) => Ok(pka - pair.published),
                None => Err(format!("{}: {} has no scale", pair.name, pair.medium)),
            })
            .collect::<Result<_, _>>()?;
        super::centre(pairs, &mut errors);
        Ok(errors)
    };
    let errors = all(&named)?;
    let mut slopes = vec![vec![0.0; terms.len()]; pairs.len()];
    for i in 0..terms.len() {
        let mut moved = named.clone();
        moved[i].1 += STEP;
        for (slope, (after, before)) in slopes.iter_mut().zip(all(&moved)?.iter().zip(&errors)) {
            slope[i] = (after - before) / STEP;
        }
    }
    Ok((errors, slopes))
}

/// Errors and slopes of the pairs that the terms are fitted to.
fn settling<'a>(
    pairs: &'a [Pair],
    errors: &'a [f64],
    slopes: &'a [Vec<f64>],
) -> impl Iterator<Item = (&'a f64, &'a Vec<f64>)> {
    let all = pairs.iter().zip(errors.iter().zip(slopes));
    all.filter_map(|(pair, one)| pair.settles().then_some(one))
}

/// Cholesky's factor of the curvature of the sum of squares.
fn factor(terms: &[Term], pairs: &[Pair], slopes: &[Vec<f64>]) -> Result<Vec<f64>, String> {
    let n = terms.len();
    let mut curvature = vec![0.0; n * n];
    for (i, term) in terms.iter().enumerate() {
        curvature[i * n + i] = term.spread.powi(-2);
    }
    for (_, slope) in pairs.iter().zip(slopes).filter(|(pair, _)| pair.settles()) {
        for (i, a) in slope.iter().enumerate() {
            for (j, b) in slope.iter().enumerate() {
                curvature[i * n + j] += a * b / FORM_SIGMA.powi(2);
            }
        }
    }
    cholesky(curvature, n).ok_or_else(|| "the terms of the medium cannot be fitted".to_owned())
}
