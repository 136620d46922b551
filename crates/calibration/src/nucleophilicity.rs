//! N of carbanions from their pKa, and rate constants from it: published values against the model.

use std::fmt::Write;

use enolattice_model::{Model, Origin, Substrate};
use enolattice_molecule::Molecule;
use serde::Deserialize;

use crate::refit::{Fitted, leave_one_out};

const PUBLISHED: &str = include_str!("../data/carbanion_nucleophilicities.tsv");

/// E of reference electrophiles with which carbanions are measured: quinone methides, Mayr and Patz 1994 and later
/// (from memory: −10.1 to −17.9).
const REFERENCE_E: [f64; 4] = [-10.0, -12.5, -15.0, -17.5];
/// Rate constants are measured between these, log10 L/(mol s).
const MEASURABLE: std::ops::RangeInclusive<f64> = -2.0..=7.0;
/// sN where none was published.
const USUAL_S_N: f64 = 0.62;
/// σ of a published N within the linear relation.
const OBSERVED_SIGMA: f64 = 1.5;
/// A factor of 30.
const FACTOR_LOG10: f64 = 1.48;

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
    /// Published N and sN.
    pub n: f64,
    /// Published sN, or the usual one.
    pub s_n: f64,
    /// N of the model, its line fitted to the others.
    pub left_out: f64,
    /// N of the model as it is.
    pub model: f64,
}

/// All carbanions in DMSO with measured N and measured pKa.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn carbanions(model: &Model) -> Result<Vec<Carbanion>, String> {
    let mut found = Vec::new();
    for row in csv::ReaderBuilder::new()
        .delimiter(b'\t')
        .comment(Some(b'#'))
        .from_reader(PUBLISHED.as_bytes())
        .deserialize()
    {
        let row: Row = row.map_err(|error| error.to_string())?;
        if row.solvent != "DMSO" {
            continue;
        }
        let substrate = substrate(model, &row.acid_smiles)?;
        if is_measured(&substrate) {
            found.push((row, substrate));
        }
    }
    let fitted = [
        ("MAYR_N_INTERCEPT", (9.0, 3.0)),
        ("MAYR_N_SLOPE", (0.78, 0.2)),
        ("MAYR_N_NITRILE", (0.0, 2.0)),
        ("MAYR_N_NITRONATE", (0.0, 2.0)),
        ("MAYR_N_SULFONE", (0.0, 2.0)),
        ("MAYR_N_DICARBONYL", (0.0, 2.0)),
        ("MAYR_N_IMINO", (0.0, 2.0)),
        ("MAYR_N_PHOSPHORYL", (-2.0, 2.0)),
    ]
    .map(|(name, prior)| Fitted { name, prior });
    let observed: Vec<f64> = found.iter().map(|(row, _)| row.n).collect();
    let predict = |row: usize, changes: &[(&str, f64)]| {
        let (_, substrate) = &found[row];
        model
            .nucleophilicity(substrate, &model.draw_with(changes))
            .unwrap_or(f64::NAN)
    };
    let left_out = leave_one_out(&fitted, &observed, OBSERVED_SIGMA, predict);
    Ok(found
        .iter()
        .enumerate()
        .map(|(i, (row, substrate))| Carbanion {
            acid: row.acid_smiles.clone(),
            pka_dmso: substrate.sites[0].pka_dmso,
            n: row.n,
            s_n: row.s_n.unwrap_or(USUAL_S_N),
            left_out: left_out[i],
            model: predict(i, &[]),
        })
        .collect())
}

fn substrate(model: &Model, smiles: &str) -> Result<Substrate, String> {
    let molecule = Molecule::parse(smiles).map_err(|error| format!("{smiles}: {error}"))?;
    Ok(model.substrate(smiles, molecule, None))
}

/// Whether the most acidic site is a C–H whose pKa was measured.
fn is_measured(substrate: &Substrate) -> bool {
    let first = substrate.sites.first();
    first.is_some_and(|site| site.element == 6 && site.origin == Origin::Measured)
}

/// Share of the rate constants with reference electrophiles that the left-out N meets within a factor of 30, and
/// their number.
pub fn within_factor_30(carbanions: &[Carbanion], s_n: f64) -> (f64, usize) {
    let (mut met, mut all) = (0, 0);
    for one in carbanions {
        for e in REFERENCE_E {
            let measured = one.s_n * (one.n + e);
            if MEASURABLE.contains(&measured) {
                all += 1;
                met += usize::from((s_n * (one.left_out + e) - measured).abs() <= FACTOR_LOG10);
            }
        }
    }
    (
        f64::from(u32::try_from(met).unwrap_or(u32::MAX))
            / f64::from(u32::try_from(all.max(1)).unwrap_or(u32::MAX)),
        all,
    )
}

/// The comparison as a page.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn page(model: &Model) -> Result<String, String> {
    let mut carbanions = carbanions(model)?;
    carbanions.sort_by(|a, b| a.pka_dmso.total_cmp(&b.pka_dmso));
    let count = carbanions.len().max(1) as f64;
    let mean = |of: fn(&Carbanion) -> f64| {
        carbanions.iter().map(|c| (of(c) - c.n).abs()).sum::<f64>() / count
    };
    let s_n = model
        .parameters()
        .iter()
        .find(|p| p.name == "MAYR_S_N")
        .map_or(USUAL_S_N, |p| p.mean);
    let (share, pairs) = within_factor_30(&carbanions, s_n);
    let mut page = String::from(
        "## N of carbanions in DMSO from pKa\n\n| acid | pKa (DMSO) | N | left out | model |\n| --- | --- | --- | --- | --- |\n",
    );
    for c in &carbanions {
        let _ = writeln!(
            page,
            "| {} | {:.1} | {:.1} | {:.1} | {:.1} |",
            c.acid, c.pka_dmso, c.n, c.left_out, c.model
        );
    }
    let _ = writeln!(
        page,
        "\nMean absolute error of N over {} carbanions: {:.2} left out, {:.2} as the model is. Rate constants with reference \
         electrophiles within a factor of 30: {:.0} % of {pairs}.",
        carbanions.len(),
        mean(|c| c.left_out),
        mean(|c| c.model),
        100.0 * share
    );
    Ok(page)
}
