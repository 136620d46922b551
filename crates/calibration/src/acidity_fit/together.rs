//! Whether errors of sites alike go together: of compounds held out at once, against the covariance of the fit.

use std::fmt::Write;

use enolattice_model::{Contribution, Coverage, Form};

use super::validation::{Held, fold};
use super::{Fit, FitError, Observation, Term, Validation, cholesky, solve};

/// Upper ends of the distances that are put together, pK units of [`Coverage`].
const DISTANCES: [(&str, f64); 5] = [
    ("same descriptors", 0.01),
    ("up to 1.2", 1.2),
    ("up to 4", 4.0),
    ("up to 12", 12.0),
    ("further, one kind of acid", 1e6),
];
/// Errors beyond this many σ count as so many, so that no single pair makes the mean.
const MOST: f64 = 3.0;

/// One compound that was held out.
struct Site {
    fold: usize,
    /// Error in σ.
    z: f64,
    sigma: f64,
    contribution: Contribution,
    /// Slopes by coefficient, and the covariance times them.
    slopes: Vec<(usize, f64)>,
    spread: Vec<f64>,
}

/// Adds the section to the page.
pub(super) fn section(
    text: &mut String,
    terms: &[Term],
    fit: &Fit,
    rows: &[Observation],
    validation: &Validation,
) -> Result<(), FitError> {
    let n = fit.values.len();
    let factor = cholesky(fit.curvature.clone(), n).ok_or(FitError::Singular)?;
    let site = |one: &Held| {
        let contribution = rows[one.row].candidates[one.at].contribution.clone();
        let slopes = contribution.slopes(&fit.values);
        let mut dense = vec![0.0; n];
        slopes.iter().for_each(|&(i, slope)| dense[i] += slope);
        Site {
            fold: fold(one.row),
            z: (one.error / one.sigma).clamp(-MOST, MOST),
            sigma: one.sigma,
            spread: solve(&factor, n, &dense),
            contribution,
            slopes,
        }
    };
    let sites: Vec<Site> = validation.five_fold.iter().map(site).collect();
    let form = Form::new(terms.iter().map(|term| (term.name, term.role)));
    let contributions = sites.iter().map(|site| site.contribution.clone());
    let coverage = Coverage::new(contributions.collect(), &form, &fit.values);
    let square = sites.iter().map(|site| site.z * site.z).sum::<f64>() / sites.len() as f64;
    // pairs, sum of the products of their errors, of the squares of these, of the correlations by the fit
    let mut bins = [(0_usize, 0.0, 0.0, 0.0); DISTANCES.len()];
    for (i, site) in sites.iter().enumerate() {
        for (j, distance) in coverage.nearest(&site.contribution, sites.len()) {
            let other = &sites[j];
            if j <= i || other.fold != site.fold {
                continue;
            }
            let Some(at) = DISTANCES.iter().position(|(_, most)| distance <= *most) else {
                continue;
            };
            let product = site.z * other.z / square;
            let covariance = site
                .slopes
                .iter()
                .map(|&(k, slope)| slope * other.spread[k]);
            let bin = &mut bins[at];
            bin.0 += 1;
            bin.1 += product;
            bin.2 += product * product;
            bin.3 += covariance.sum::<f64>() / (site.sigma * other.sigma);
        }
    }
    text.push_str(
        "\n## Errors that go together\n\n\
         In a joint draw the coefficients have one error each, with the covariance of the fit (`acidity_curvature.tsv`); what this\n\
         does not make of a site's σ is the molecule's own. Held against it: errors of pairs of compounds that were held out\n\
         at once (one in five), in σ, by their distance. The coefficients are known so well that errors of most pairs are\n\
         nearly apart, in the fit as in what was measured: what is wrong with a compound is mostly its own.\n\n\
         | distance | pairs | correlation, measured | its standard error | by the fit |\n| --- | --- | --- | --- | --- |\n",
    );
    for ((name, _), (pairs, sum, squares, by_fit)) in DISTANCES.into_iter().zip(bins) {
        let count = pairs.max(1) as f64;
        let (mean, by_fit) = (sum / count, by_fit / count);
        let error = ((squares / count - mean * mean).max(0.0) / count).sqrt();
        let _ = writeln!(
            text,
            "| {name} | {pairs} | {mean:.2} | {error:.2} | {by_fit:.2} |"
        );
    }
    Ok(())
}
