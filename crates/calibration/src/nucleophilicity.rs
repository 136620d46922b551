//! N of carbanions from their pKa, and rate constants from it: published values against the model.

use std::fmt::Write;
use std::ops::RangeInclusive;

use enolattice_model::{Model, Origin, Substrate};
use serde::Deserialize;

use crate::cell::molecule;
use crate::refit::{Changes, Fitted, Observations};
use crate::table::rows;

const PUBLISHED: &str = include_str!("../data/carbanion_nucleophilicities.tsv");

/// E over the range of the reference electrophiles with which carbanions are measured: quinone methides −10.1 to −17.9
/// (Mayr and co-workers, from memory).
const REFERENCE_E: [f64; 4] = [-10.0, -12.5, -15.0, -17.5];
/// Rate constants are measured between these, log10 L/(mol s) (from memory).
const MEASURABLE: RangeInclusive<f64> = -2.0..=7.0;
/// sN where none was published: about the mean of the published ones.
const USUAL_S_N: f64 = 0.62;
/// σ of a published N about the linear relation.
const OBSERVED_SIGMA: f64 = 1.5;
/// log10 of a factor of 30.
const FACTOR_LOG10: f64 = 1.477;

/// What the table settles. Priors: about the line through all rows, 8.35 + 0.78·pKa, as wide as they are; no difference between classes,
/// but for phosphorylated carbanions (from memory).
const FITTED: [Fitted; 8] = [
    Fitted::new("MAYR_N_INTERCEPT", 9.0, 3.0),
    Fitted::new("MAYR_N_SLOPE", 0.78, 0.2),
    Fitted::new("MAYR_N_NITRILE", 0.0, 2.0),
    Fitted::new("MAYR_N_NITRONATE", 0.0, 2.0),
    Fitted::new("MAYR_N_SULFONE", 0.0, 2.0),
    Fitted::new("MAYR_N_DICARBONYL", 0.0, 2.0),
    Fitted::new("MAYR_N_IMINO", 0.0, 2.0),
    Fitted::new("MAYR_N_PHOSPHORYL", -2.0, 2.0),
];

#[derive(Deserialize)]
struct Row {
    acid_smiles: String,
    n: f64,
    s_n: Option<f64>,
    solvent: String,
}

/// A carbanion in DMSO whose acid has a measured pKa.
#[derive(Clone, Debug)]
pub struct Carbanion {
    /// SMILES of its acid.
    pub acid: String,
    /// Measured pKa in DMSO.
    pub pka_dmso: f64,
    /// Published N.
    pub n: f64,
    /// Published sN; the usual one where none was published.
    pub s_n: f64,
    /// N of the model, its line fitted to the others.
    pub left_out: f64,
    /// N of the model as it is.
    pub model: f64,
}

/// All carbanions in DMSO with published N and measured pKa, the most stable first.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn carbanions(model: &Model) -> Result<Vec<Carbanion>, String> {
    let mut found: Vec<(Row, Substrate)> = Vec::new();
    for row in rows::<Row>(PUBLISHED)? {
        let substrate = model.substrate(&row.acid_smiles, molecule(&row.acid_smiles)?, None);
        if row.solvent == "DMSO" && is_measured(&substrate) {
            found.push((row, substrate));
        }
    }
    let observed: Vec<f64> = found.iter().map(|(row, _)| row.n).collect();
    let observations = Observations {
        observed: &observed,
        sigma: OBSERVED_SIGMA,
        predict: |row: usize, changes: &Changes| {
            let n = model.nucleophilicity(&found[row].1, &model.draw_with(changes));
            n.expect("its acid has a C–H")
        },
    };
    let left_out = observations.left_out(&FITTED);
    let found = found.iter().enumerate();
    let mut carbanions: Vec<_> = found
        .map(|(i, (row, substrate))| Carbanion {
            acid: row.acid_smiles.clone(),
            pka_dmso: substrate.sites[0].pka_dmso,
            n: row.n,
            s_n: row.s_n.unwrap_or(USUAL_S_N),
            left_out: left_out[i],
            model: (observations.predict)(i, &[]),
        })
        .collect();
    carbanions.sort_by(|a, b| a.pka_dmso.total_cmp(&b.pka_dmso));
    Ok(carbanions)
}

/// Whether the most acidic site is a C–H whose pKa was measured.
fn is_measured(substrate: &Substrate) -> bool {
    let first = substrate.sites.first();
    first.is_some_and(|site| site.element == 6 && site.origin == Origin::Measured)
}

/// Of the rate constants that published N and sN give with reference electrophiles, `log k = sN (N + E)`: how many the
/// model's sN and the N left out meet within a factor of 30, and how many there are.
pub fn within_factor_30(carbanions: &[Carbanion], s_n: f64) -> (usize, usize) {
    let deviations: Vec<f64> = carbanions
        .iter()
        .flat_map(|one| REFERENCE_E.map(|e| (one.s_n * (one.n + e), s_n * (one.left_out + e))))
        .filter(|(published, _)| MEASURABLE.contains(published))
        .map(|(published, of_model)| (of_model - published).abs())
        .collect();
    let met = deviations.iter().filter(|d| **d <= FACTOR_LOG10).count();
    (met, deviations.len())
}

/// The comparison as a section of a page.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn section(model: &Model) -> Result<String, String> {
    let carbanions = carbanions(model)?;
    let mut text = String::from(
        "\n## N of carbanions in DMSO from pKa\n\n\
         Carbanions with a published N whose acid has a measured pKa.\n\n\
         | acid | pKa (DMSO) | N | left out | model |\n| --- | --- | --- | --- | --- |\n",
    );
    for c in &carbanions {
        let _ = writeln!(
            text,
            "| {} | {:.1} | {:.1} | {:.1} | {:.1} |",
            c.acid, c.pka_dmso, c.n, c.left_out, c.model
        );
    }
    let mean = |of: fn(&Carbanion) -> f64| {
        let errors = carbanions.iter().map(|c| (of(c) - c.n).abs());
        errors.sum::<f64>() / carbanions.len().max(1) as f64
    };
    let parameters = model.parameters().iter();
    let s_n = parameters
        .filter(|parameter| parameter.name == "MAYR_S_N")
        .map(|parameter| parameter.mean)
        .next()
        .unwrap_or(USUAL_S_N);
    let (met, pairs) = within_factor_30(&carbanions, s_n);
    let _ = writeln!(
        text,
        "\nMean absolute error of N over {} carbanions: {:.2} left out, {:.2} as the model is.\n\n\
         Rate constants that the published N and sN give with electrophiles of E −{:.1} to −{:.1}, where they can be measured\n\
         (log10 k {:.0} to {:.0}, L/(mol s)), against those of N left out and the model's one sN of {s_n:.2}: within a factor of 30 are {met} of\n\
         {pairs}, {:.1} %.",
        carbanions.len(),
        mean(|c| c.left_out),
        mean(|c| c.model),
        -REFERENCE_E[0],
        -REFERENCE_E[REFERENCE_E.len() - 1],
        MEASURABLE.start(),
        MEASURABLE.end(),
        100.0 * met as f64 / pairs.max(1) as f64
    );
    Ok(text)
}
