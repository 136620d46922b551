//! Refits a few parameters to a few observations, each left out in turn.

/// A parameter that a table settles.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Fitted {
    /// Name among the model's parameters.
    pub(crate) name: &'static str,
    /// Where the fit starts, and what pulls it there: the mean and σ it would have without the table.
    pub(crate) prior: (f64, f64),
}

/// Rounds of Gauss and Newton: the observations are almost linear in the parameters.
const ROUNDS: usize = 8;
/// Step of the numerical derivatives.
const STEP: f64 = 1e-3;

/// What the model says of each observation when its parameters are fitted to all the others.
///
/// Minimises `Σ (observed − predicted)²/σ² + Σ (value − prior)²/σ_prior²`; `predict` gives the prediction of one
/// observation for the parameters named.
pub(crate) fn leave_one_out(
    fitted: &[Fitted],
    observed: &[f64],
    sigma: f64,
    predict: impl Fn(usize, &[(&str, f64)]) -> f64,
) -> Vec<f64> {
    (0..observed.len())
        .map(|left_out| {
            let others: Vec<usize> = (0..observed.len()).filter(|i| *i != left_out).collect();
            let values = fit(fitted, &others, observed, sigma, &predict);
            predict(left_out, &named(fitted, &values))
        })
        .collect()
}

/// The parameters fitted to all observations.
pub(crate) fn fit_all(
    fitted: &[Fitted],
    observed: &[f64],
    sigma: f64,
    predict: impl Fn(usize, &[(&str, f64)]) -> f64,
) -> Vec<(&'static str, f64)> {
    let rows: Vec<usize> = (0..observed.len()).collect();
    let values = fit(fitted, &rows, observed, sigma, &predict);
    fitted.iter().map(|one| one.name).zip(values).collect()
}

fn named<'a>(fitted: &'a [Fitted], values: &[f64]) -> Vec<(&'a str, f64)> {
    let names = fitted.iter().map(|one| one.name);
    names.zip(values.iter().copied()).collect()
}

/// Parameters that fit the observations numbered.
fn fit(
    fitted: &[Fitted],
    rows: &[usize],
    observed: &[f64],
    sigma: f64,
    predict: &impl Fn(usize, &[(&str, f64)]) -> f64,
) -> Vec<f64> {
    let mut values: Vec<f64> = fitted.iter().map(|one| one.prior.0).collect();
    for _ in 0..ROUNDS {
        // one parameter after the other: exact for each, and the few of a table are hardly correlated
        for (i, one) in fitted.iter().enumerate() {
            let at = |shift: f64, row: usize, values: &[f64]| {
                let mut moved = values.to_vec();
                moved[i] += shift;
                predict(row, &named(fitted, &moved))
            };
            let (mean, prior_sigma) = one.prior;
            let mut curvature = prior_sigma.powi(-2);
            let mut gradient = (mean - values[i]) * prior_sigma.powi(-2);
            for &row in rows {
                let predicted = at(0.0, row, &values);
                let slope = (at(STEP, row, &values) - predicted) / STEP;
                curvature += slope * slope / (sigma * sigma);
                gradient += slope * (observed[row] - predicted) / (sigma * sigma);
            }
            values[i] += gradient / curvature;
        }
    }
    values
}
