//! SN2 by relative rates, and E2 beside it: published series against the model.

use std::fmt::Write;

use enolattice_model::{Conditions, Model};
use serde::Deserialize;

use crate::cell::{cell, molecule};
use crate::table::rows;

const RELATIVE_RATES: &str = include_str!("../data/sn2_relative_rates.tsv");
const ELIMINATION: &str = include_str!("../data/elimination_shares.tsv");

#[derive(Deserialize)]
struct RelativeRow {
    series: String,
    smiles: String,
    reference: String,
    least: Option<f64>,
    most: Option<f64>,
}

#[derive(Deserialize)]
struct EliminationRow {
    bromide: String,
    smiles: String,
    least: f64,
    most: f64,
}

/// A published value, which may be a range or a bound, and the model's.
#[derive(Clone, Debug)]
pub struct Comparison {
    /// Series or conditions.
    pub series: String,
    /// Name or SMILES.
    pub name: String,
    /// Least of the published values; none where an upper bound alone is known.
    pub least: Option<f64>,
    /// Greatest of the published values; none where a lower bound alone is known.
    pub most: Option<f64>,
    /// The model's value; none where the model does not take it for an alkylating agent.
    pub model: Option<f64>,
}

impl Comparison {
    /// How far the model's value lies outside the published range, above zero if too large.
    pub fn error(&self) -> Option<f64> {
        let model = self.model?;
        let above = (model - self.most.unwrap_or(f64::INFINITY)).max(0.0);
        let below = (self.least.unwrap_or(f64::NEG_INFINITY) - model).max(0.0);
        Some(above - below)
    }

    fn published(&self) -> String {
        match (self.least, self.most) {
            (Some(least), Some(most)) if least == most => format!("{least:.1}"),
            (Some(least), Some(most)) => format!("{least:.1} to {most:.1}"),
            (Some(least), None) => format!("above {least:.1}"),
            (None, Some(most)) => format!("below {most:.1}"),
            (None, None) => String::new(),
        }
    }
}

/// log10 of published relative rates.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn relative_rates(model: &Model) -> Result<Vec<Comparison>, String> {
    let to_ethyl_bromide = |smiles: &str| -> Result<Option<f64>, String> {
        let electrophile = model.electrophile(smiles, molecule(smiles)?);
        Ok(model.relative_substitution(&electrophile))
    };
    let compared = |row: RelativeRow| {
        let reference = to_ethyl_bromide(&row.reference)?
            .ok_or_else(|| format!("{}: no alkylating agent", row.reference))?;
        Ok(Comparison {
            least: row.least.map(f64::log10),
            most: row.most.map(f64::log10),
            model: to_ethyl_bromide(&row.smiles)?.map(|log10_k| log10_k - reference),
            series: row.series,
            name: row.smiles,
        })
    };
    rows(RELATIVE_RATES)?.into_iter().map(compared).collect()
}

/// Shares of elimination by sodium ethoxide in ethanol at 55 °C, per cent.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn elimination_shares(model: &Model) -> Result<Vec<Comparison>, String> {
    let conditions = Conditions {
        temperature_c: 55.0,
        formation_temperature_c: 55.0,
        base_equiv: 1.0,
        electrophile_equiv: 1.0,
        additive_equiv: 0.0,
        concentration_m: 0.1,
        time_h: 16.0,
        dosing_min: 10.0,
        addition: None,
    };
    // any substrate: only base and bromide count
    const SUBSTRATE: &str = "CCOC(=O)CC(=O)OCC";
    let compared = |row: EliminationRow| {
        let names = [SUBSTRATE, "NaOEt", &row.smiles, "EtOH"];
        let rates = model.substitution_and_elimination(&cell(model, names, conditions)?);
        let share = |(substitution, elimination): (f64, f64)| {
            100.0 / (1.0 + 10_f64.powf(substitution - elimination))
        };
        Ok(Comparison {
            series: "NaOEt in EtOH, 55 °C".to_owned(),
            name: row.bromide,
            least: Some(row.least),
            most: Some(row.most),
            model: rates.map(share),
        })
    };
    rows(ELIMINATION)?.into_iter().map(compared).collect()
}

/// Both comparisons as a section of a page.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn section(model: &Model) -> Result<String, String> {
    let mut text = String::from(
        "\n## Relative rates of SN2\n\n\
         log10 k against one member of each series (`crates/calibration/data/sn2_relative_rates.tsv`). The average series and part of\n\
         the others are where the model's numbers come from; the table shows how well one set serves all series. Iodide in acetone\n\
         discriminates more than the average does; α-halo ketones share one number with other α-halo carbonyl compounds.\n\n",
    );
    let rates = relative_rates(model)?;
    table(&mut text, "series", &rates);
    let errors: Vec<f64> = rates.iter().filter_map(Comparison::error).collect();
    let within = |units: f64| errors.iter().filter(|e| e.abs() <= units + 1e-9).count();
    let _ = writeln!(
        text,
        "\nMean absolute error {:.2} log10 units; within 0.5 of the published range {} of {}, within 1.0 {}.",
        mean_absolute(&errors),
        within(0.5),
        rates.len(),
        within(1.0)
    );
    let shares = elimination_shares(model)?;
    text.push_str(
        "\n## Share of elimination\n\n\
         E2 among E2 and SN2 by the base, per cent (`crates/calibration/data/elimination_shares.tsv`).\n\n",
    );
    table(&mut text, "conditions", &shares);
    let errors: Vec<f64> = shares.iter().filter_map(Comparison::error).collect();
    let _ = writeln!(
        text,
        "\nMean absolute error {:.0} points, worst {:.0}.",
        mean_absolute(&errors),
        errors.iter().fold(0.0_f64, |worst, e| worst.max(e.abs()))
    );
    Ok(text)
}

fn mean_absolute(errors: &[f64]) -> f64 {
    errors.iter().map(|e| e.abs()).sum::<f64>() / errors.len().max(1) as f64
}

fn table(text: &mut String, series: &str, rows: &[Comparison]) {
    let _ = writeln!(
        text,
        "| {series} | alkylating agent | published | model | error |\n| --- | --- | --- | --- | --- |"
    );
    for one in rows {
        let number = |value: Option<f64>| value.map(|v| format!("{v:.1}"));
        let error = match one.error() {
            Some(error) if error.abs() < 0.05 => "within".to_owned(),
            Some(error) => format!("{error:+.1}"),
            None => String::new(),
        };
        let _ = writeln!(
            text,
            "| {} | {} | {} | {} | {error} |",
            one.series,
            one.name,
            one.published(),
            number(one.model).unwrap_or_else(|| "not covered".to_owned()),
        );
    }
}
