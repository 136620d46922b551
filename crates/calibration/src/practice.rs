//! Common reactions and what a practising chemist expects of them.

use std::io::Write;

use enolattice_model::{Cell, Conditions, Model};
use serde::Deserialize;

use crate::selectivity::cell;

const PRACTICE: &str = include_str!("../data/practice.tsv");

#[derive(Deserialize)]
struct Row {
    substrate: String,
    base: String,
    electrophile: String,
    solvent: String,
    temperature_c: f64,
    formation_temperature_c: f64,
    base_equiv: f64,
    electrophile_equiv: f64,
    concentration_m: f64,
    time_h: f64,
    expected: String,
}

impl Row {
    fn cell(&self, model: &Model) -> Result<Cell, String> {
        let names = [
            &self.substrate,
            &self.base,
            &self.electrophile,
            &self.solvent,
        ]
        .map(String::as_str);
        let conditions = Conditions {
            temperature_c: self.temperature_c,
            formation_temperature_c: self.formation_temperature_c,
            base_equiv: self.base_equiv,
            electrophile_equiv: self.electrophile_equiv,
            additive_equiv: 0.0,
            concentration_m: self.concentration_m,
            time_h: self.time_h,
            dosing_min: 10.0,
            addition: None,
        };
        cell(model, names, conditions)
    }

    fn is_met(&self, expected_yield: f64) -> Result<bool, String> {
        let bound = |text: &str| {
            text.parse::<f64>()
                .map_err(|error| format!("{text}: {error}"))
        };
        if let Some(least) = self.expected.strip_prefix("at least ") {
            Ok(expected_yield >= bound(least)?)
        } else if let Some(most) = self.expected.strip_prefix("at most ") {
            Ok(expected_yield <= bound(most)?)
        } else {
            Err(format!("{}: neither at least nor at most", self.expected))
        }
    }
}

/// Prints the reactions that the model sees otherwise, and how many it sees as a chemist does.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn print(model: &Model, out: &mut impl Write) -> Result<(), String> {
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(b'\t')
        .comment(Some(b'#'))
        .from_reader(PRACTICE.as_bytes());
    let (mut met, mut all) = (0, 0);
    for row in reader.deserialize() {
        let row: Row = row.map_err(|error| error.to_string())?;
        let explanation = model
            .explain(&row.cell(model)?, 0.5)
            .map_err(|error| error.to_string())?;
        let is_met = match explanation.expected_yield {
            Some(expected) => row.is_met(expected)?,
            None => false,
        };
        all += 1;
        met += usize::from(is_met);
        if !is_met {
            let losses = explanation.losses.iter().take(3);
            let losses: Vec<_> = losses
                .map(|(channel, share)| format!("{} {share:.2}", channel.name()))
                .collect();
            let reached = explanation
                .expected_yield
                .map_or("unknown".to_owned(), |y| format!("{y:.2}"));
            writeln!(
                out,
                "{} + {} / {} / {}, {} °C: {}, {reached}; {}{} -> {}",
                row.substrate,
                row.electrophile,
                row.base,
                row.solvent,
                row.temperature_c,
                row.expected,
                losses.join(", "),
                if explanation.expected_yield.is_none() {
                    explanation.limits.join("; ")
                } else {
                    String::new()
                },
                explanation.product_smiles.as_deref().unwrap_or("none")
            )
            .map_err(|error| error.to_string())?;
        }
    }
    writeln!(out, "{met} of {all} as expected").map_err(|error| error.to_string())
}
