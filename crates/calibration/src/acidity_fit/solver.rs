//! Penalised least squares: Gauss–Newton with damping, Huber weights, normal equations by Cholesky.

use enolattice_model::Role;

use super::observations::{Observed, fault, rows};
use super::{FitError, Observation};

const TERMS: &str = include_str!("../../data/acidity_terms.tsv");

/// Error of the form itself, pK units: what a group contribution cannot know.
const FORM_SIGMA: f64 = 0.8;
/// Residuals beyond this many σ pull linearly only (Huber, Ann. Math. Stat. 1964, 35, 73:
/// 1.345 for 95 % efficiency).
const HUBER: f64 = 1.345;
/// Rounds of assigning measured values to sites, and steps within each.
const ROUNDS: usize = 6;
const STEPS: usize = 40;

/// A coefficient before the fit: where it starts and how far from there it may be.
#[derive(Clone, Debug)]
pub(crate) struct Term {
    pub(crate) name: &'static str,
    pub(crate) role: Role,
    pub(crate) role_text: &'static str,
    pub(crate) start: f64,
    pub(crate) spread: f64,
    pub(crate) unit: &'static str,
    pub(crate) source: &'static str,
}

/// The terms of the estimate, in the order of the coefficients.
pub(crate) fn terms() -> Result<Vec<Term>, FitError> {
    rows(TERMS)
        .map(|(line, row)| term(&row).ok_or(fault("acidity_terms.tsv", line)))
        .collect()
}

fn term(row: &[&'static str]) -> Option<Term> {
    let [name, role_text, start, spread, unit, source] = row else {
        return None;
    };
    Some(Term {
        name,
        role: Role::parse(role_text)?,
        role_text,
        start: start.parse().ok()?,
        spread: spread.parse().ok()?,
        unit,
        source,
    })
}

/// Fitted coefficients.
pub(crate) struct Fit {
    pub(crate) values: Vec<f64>,
    pub(crate) standard_errors: Vec<f64>,
    /// Measured sites on which each coefficient rests.
    pub(crate) training_sites: Vec<usize>,
    /// Candidate that each row was assigned to.
    pub(crate) assigned: Vec<usize>,
    /// Half the second derivative of the cost, whose inverse is the covariance of the coefficients: row by row, of which
    /// the lower triangle counts.
    pub(crate) curvature: Vec<f64>,
}

impl Fit {
    /// Fits the rows; a measured value without a named site goes to the site that the
    /// estimate calls most acidic, again and again until nothing changes.
    pub(crate) fn new(terms: &[Term], rows: &[Observation]) -> Result<Fit, FitError> {
        let mut values: Vec<f64> = terms.iter().map(|term| term.start).collect();
        let mut assigned = assignment(rows, &values);
        let mut curvature = Vec::new();
        for _ in 0..ROUNDS {
            curvature = minimise(terms, rows, &assigned, &mut values)?;
            let next = assignment(rows, &values);
            if next == assigned {
                break;
            }
            assigned = next;
        }
        let standard_errors = standard_errors(&curvature, terms.len())?;
        let training_sites = training_sites(terms.len(), rows, &assigned);
        Ok(Fit {
            values,
            standard_errors,
            training_sites,
            assigned,
            curvature,
        })
    }
}

fn assignment(rows: &[Observation], values: &[f64]) -> Vec<usize> {
    rows.iter().map(|row| row.assigned(values)).collect()
}

/// Estimated minus observed.
fn residual(row: &Observation, at: usize, values: &[f64]) -> f64 {
    let estimated = match row.observed {
        Observed::Acidity { .. } => row.candidates[at].contribution.value(values),
        Observed::Difference => {
            row.candidates[0].contribution.value(values)
                - row.candidates[1].contribution.value(values)
        }
    };
    estimated - row.value
}

fn slopes(row: &Observation, at: usize, values: &[f64]) -> Vec<(usize, f64)> {
    match row.observed {
        Observed::Acidity { .. } => row.candidates[at].contribution.slopes(values),
        Observed::Difference => {
            let mut slopes = row.candidates[0].contribution.slopes(values);
            let second = row.candidates[1].contribution.slopes(values);
            slopes.extend(second.into_iter().map(|(i, slope)| (i, -slope)));
            slopes
        }
    }
}

/// σ of a row: its own and that of the form. An equilibrium between sites of one molecule is
/// free of most of the latter.
fn sigma(row: &Observation) -> f64 {
    match row.observed {
        Observed::Acidity { .. } => row.sigma.hypot(FORM_SIGMA),
        Observed::Difference => row.sigma,
    }
}

fn cost(terms: &[Term], rows: &[Observation], assigned: &[usize], values: &[f64]) -> f64 {
    let misfit: f64 = rows
        .iter()
        .zip(assigned)
        .map(|(row, at)| {
            let z = (residual(row, *at, values) / sigma(row)).abs();
            if z <= HUBER {
                z * z
            } else {
                HUBER * (2.0 * z - HUBER)
            }
        })
        .sum();
    let penalty: f64 = terms
        .iter()
        .zip(values)
        .map(|(term, value)| ((value - term.start) / term.spread).powi(2))
        .sum();
    misfit + penalty
}

/// Minimises the cost from `values`; returns the curvature (lower triangle, row by row) there.
fn minimise(
    terms: &[Term],
    rows: &[Observation],
    assigned: &[usize],
    values: &mut Vec<f64>,
) -> Result<Vec<f64>, FitError> {
    let n = terms.len();
    let mut damping = 1e-3;
    let mut best = cost(terms, rows, assigned, values);
    for _ in 0..STEPS {
        let (curvature, gradient) = normal_equations(terms, rows, assigned, values);
        let mut damped = curvature;
        for i in 0..n {
            damped[i * n + i] *= 1.0 + damping;
        }
        let factor = cholesky(damped, n).ok_or(FitError::Singular)?;
        let step = solve(&factor, n, &gradient);
        let trial: Vec<f64> = values.iter().zip(&step).map(|(v, s)| v - s).collect();
        let reached = cost(terms, rows, assigned, &trial);
        if reached < best {
            let gain = best - reached;
            *values = trial;
            best = reached;
            damping = (damping * 0.2_f64).max(1e-12);
            if gain < 1e-12 * best {
                break;
            }
        } else if damping > 1e9 {
            break;
        } else {
            damping *= 8.0;
        }
    }
    Ok(normal_equations(terms, rows, assigned, values).0)
}

/// Half the Hessian (Gauss–Newton, Huber-weighted) and half the gradient of the cost.
fn normal_equations(
    terms: &[Term],
    rows: &[Observation],
    assigned: &[usize],
    values: &[f64],
) -> (Vec<f64>, Vec<f64>) {
    let n = terms.len();
    let mut curvature = vec![0.0; n * n];
    let mut gradient = vec![0.0; n];
    for (i, term) in terms.iter().enumerate() {
        let weight = term.spread.powi(-2);
        curvature[i * n + i] = weight;
        gradient[i] = weight * (values[i] - term.start);
    }
    for (row, at) in rows.iter().zip(assigned) {
        let error = residual(row, *at, values);
        let s = sigma(row);
        let huber = (HUBER / (error / s).abs()).min(1.0);
        let weight = huber / (s * s);
        let slopes = slopes(row, *at, values);
        for (i, slope) in &slopes {
            gradient[*i] += weight * slope * error;
            for (j, other) in &slopes {
                curvature[i * n + j] += weight * slope * other;
            }
        }
    }
    (curvature, gradient)
}

/// Lower factor L of a symmetric positive definite matrix, A = L·Lᵀ; `None` if it is not.
pub(crate) fn cholesky(mut a: Vec<f64>, n: usize) -> Option<Vec<f64>> {
    for j in 0..n {
        for i in j..n {
            let (head, tail) = (&a[j * n..j * n + j], &a[i * n..i * n + j]);
            let dot: f64 = head.iter().zip(tail).map(|(x, y)| x * y).sum();
            let rest = a[i * n + j] - dot;
            a[i * n + j] = if i == j {
                if rest <= 0.0 {
                    return None;
                }
                rest.sqrt()
            } else {
                rest / a[j * n + j]
            };
        }
    }
    Some(a)
}

/// Solves `L·Lᵀ·x = right`.
pub(crate) fn solve(factor: &[f64], n: usize, right: &[f64]) -> Vec<f64> {
    let mut x = right.to_vec();
    for i in 0..n {
        let dot: f64 = (0..i).map(|k| factor[i * n + k] * x[k]).sum();
        x[i] = (x[i] - dot) / factor[i * n + i];
    }
    for i in (0..n).rev() {
        let dot: f64 = (i + 1..n).map(|k| factor[k * n + i] * x[k]).sum();
        x[i] = (x[i] - dot) / factor[i * n + i];
    }
    x
}

/// Square roots of the diagonal of the inverse curvature: the posterior standard errors.
fn standard_errors(curvature: &[f64], n: usize) -> Result<Vec<f64>, FitError> {
    let factor = cholesky(curvature.to_vec(), n).ok_or(FitError::Singular)?;
    let mut unit = vec![0.0; n];
    Ok((0..n)
        .map(|i| {
            unit[i] = 1.0;
            let column = solve(&factor, n, &unit);
            unit[i] = 0.0;
            column[i].max(0.0).sqrt()
        })
        .collect())
}

fn training_sites(n: usize, rows: &[Observation], assigned: &[usize]) -> Vec<usize> {
    let mut counts = vec![0; n];
    for (row, at) in rows.iter().zip(assigned) {
        let used: Vec<usize> = match row.observed {
            Observed::Acidity { .. } => {
                let contribution = &row.candidates[*at].contribution;
                contribution
                    .used()
                    .chain(contribution.saturations())
                    .collect()
            }
            Observed::Difference => {
                let [first, second] =
                    [0, 1].map(|i| row.candidates[i].contribution.used().collect::<Vec<_>>());
                first
                    .iter()
                    .chain(&second)
                    .copied()
                    .filter(|i| first.contains(i) != second.contains(i))
                    .collect()
            }
        };
        let mut unique = used;
        unique.sort_unstable();
        unique.dedup();
        for i in unique {
            counts[i] += 1;
        }
    }
    counts
}
