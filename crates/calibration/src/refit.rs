//! Refits a few parameters to a few observations, each left out in turn.

/// A parameter that a table settles.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Fitted {
    /// Name among the model's parameters.
    name: &'static str,
    /// Where the fit starts and what pulls it there: the mean that it would have without the table.
    prior: f64,
    /// Standard uncertainty of that mean.
    prior_sigma: f64,
}

impl Fitted {
    /// The parameter of this name, with mean and standard uncertainty as they would be without the table.
    pub(crate) const fn new(name: &'static str, prior: f64, prior_sigma: f64) -> Fitted {
        Fitted {
            name,
            prior,
            prior_sigma,
        }
    }
}

/// Rounds over all parameters: the observations are almost linear in them.
const ROUNDS: usize = 8;
/// Step of the numerical derivatives.
const STEP: f64 = 1e-3;

/// Parameters by name, and what they are to be.
pub(crate) type Changes<'a> = [(&'a str, f64)];

/// Observations of one kind and how the model predicts them.
pub(crate) struct Observations<'a, F> {
    /// What was observed.
    pub(crate) observed: &'a [f64],
    /// Standard uncertainty of each, that of the form of the model included.
    pub(crate) sigma: f64,
    /// The prediction of the observation of this number with parameters changed.
    pub(crate) predict: F,
}

impl<F: Fn(usize, &Changes) -> f64> Observations<'_, F> {
    /// What the model says of each observation when the parameters are fitted to all the others.
    pub(crate) fn left_out(&self, fitted: &[Fitted]) -> Vec<f64> {
        let all = 0..self.observed.len();
        all.clone()
            .map(|left_out| {
                let others: Vec<usize> = all.clone().filter(|row| *row != left_out).collect();
                (self.predict)(left_out, &self.fit(fitted, &others))
            })
            .collect()
    }

    /// The parameters fitted to all observations.
    pub(crate) fn fit_all(&self, fitted: &[Fitted]) -> Vec<(&'static str, f64)> {
        self.fit(fitted, &(0..self.observed.len()).collect::<Vec<_>>())
    }

    /// Parameters that fit the observations of these numbers: the minimum of
    /// `Σ (observed − predicted)²/σ² + Σ (value − prior)²/σ_prior²` by Gauss and Newton, one parameter after the other.
    fn fit(&self, fitted: &[Fitted], rows: &[usize]) -> Vec<(&'static str, f64)> {
        let mut values: Vec<_> = fitted.iter().map(|one| (one.name, one.prior)).collect();
        let weight = self.sigma.powi(-2);
        for _ in 0..ROUNDS {
            for (i, one) in fitted.iter().enumerate() {
                let prior_weight = one.prior_sigma.powi(-2);
                let mut curvature = prior_weight;
                let mut gradient = prior_weight * (one.prior - values[i].1);
                let mut moved = values.clone();
                moved[i].1 += STEP;
                for &row in rows {
                    let predicted = (self.predict)(row, &values);
                    let slope = ((self.predict)(row, &moved) - predicted) / STEP;
                    curvature += weight * slope * slope;
                    gradient += weight * slope * (self.observed[row] - predicted);
                }
                values[i].1 += gradient / curvature;
            }
        }
        values
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A straight line through three points without error, almost free priors: the point left out lies on it.
    #[test]
    fn a_point_left_out_of_a_line_is_found_on_it() {
        let fitted = [Fitted::new("a", 0.0, 1e3), Fitted::new("b", 0.0, 1e3)];
        let x = [-1.0, 0.0, 1.0];
        let observations = Observations {
            observed: &[1.0, 3.0, 5.0],
            sigma: 0.1,
            predict: |row: usize, values: &Changes| values[0].1 + values[1].1 * x[row],
        };
        let [(_, a), (_, b)] = observations.fit_all(&fitted)[..] else {
            panic!("two parameters");
        };
        assert!((a - 3.0).abs() < 1e-3 && (b - 2.0).abs() < 1e-3, "{a} {b}");
        assert!((observations.left_out(&fitted)[1] - 3.0).abs() < 1e-2);
    }

    /// One observation and a prior of the same weight meet half way.
    #[test]
    fn a_prior_pulls_with_its_weight() {
        let observations = Observations {
            observed: &[2.0],
            sigma: 1.0,
            predict: |_: usize, values: &Changes| values[0].1,
        };
        let (_, value) = observations.fit_all(&[Fitted::new("a", 0.0, 1.0)])[0];
        assert!((value - 1.0).abs() < 1e-6, "{value}");
    }
}
