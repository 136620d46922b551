//! Oxygen against carbon in the alkylation of ambident anions.

use enolattice_model::{Cell, Model};
use serde::Deserialize;

use super::{BOUND, Compared, compare, conditions};
use crate::cell::cell;
use crate::refit::Fitted;
use crate::table::rows;

const AMBIDENT: &str = include_str!("../../data/oxygen_against_carbon.tsv");

/// What the table settles. Priors: hard leaving groups and bare anions favour oxygen, hydrogen bonds cover it, nitronates take
/// benzyl halides at oxygen (from memory).
const FITTED: [Fitted; 8] = [
    Fitted::new("O_BETA_DICARBONYL", 0.5, 1.0),
    Fitted::new("O_NITRONATE", 4.2, 0.8),
    Fitted::new("O_IODIDE", -1.5, 0.5),
    Fitted::new("O_BROMIDE", -1.0, 0.5),
    Fitted::new("O_CHLORIDE", -0.5, 0.5),
    Fitted::new("O_BARE", -0.3, 0.5),
    Fitted::new("O_PROTIC", -2.0, 0.7),
    Fitted::new("O_DIPOLAR", -0.5, 0.5),
];

#[derive(Deserialize)]
struct Ambident {
    acid: String,
    smiles: String,
    base: String,
    electrophile: String,
    solvent: String,
    temperature_c: f64,
    carbon_percent: f64,
    oxygen_percent: f64,
}

impl Ambident {
    fn name(&self) -> String {
        format!(
            "{}, {} with {} in {}",
            self.acid, self.base, self.electrophile, self.solvent
        )
    }

    /// Share of oxygen among C- and O-alkylation, per cent.
    fn oxygen(&self) -> f64 {
        100.0 * self.oxygen_percent / (self.oxygen_percent + self.carbon_percent)
    }

    fn cell(&self, model: &Model) -> Result<Cell, String> {
        let names = [&self.smiles, &self.base, &self.electrophile, &self.solvent];
        let at = conditions(self.temperature_c, 1.1, None);
        cell(model, names.map(String::as_str), at)
    }
}

/// Share of oxygen among C- and O-alkylation.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn oxygen_against_carbon(model: &Model) -> Result<Compared, String> {
    let table: Vec<Ambident> = rows(AMBIDENT)?;
    let cells = table.iter().map(|row| row.cell(model));
    let cells: Vec<Cell> = cells.collect::<Result<_, _>>()?;
    let published = table.iter().map(|row| (row.name(), row.oxygen()));
    Ok(compare(model, published.collect(), &FITTED, |draw, row| {
        // no attack by oxygen at all: as little as can be told
        let ratio = model.oxygen_over_carbon(&cells[row], draw);
        ratio.unwrap_or(-BOUND)
    }))
}
