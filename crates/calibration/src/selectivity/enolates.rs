//! The more substituted enolate of ketones, under kinetic control and at equilibrium.

use enolattice_model::{Addition, Cell, Draw, Model};
use serde::Deserialize;

use super::{Compared, compare, conditions, log_ratio};
use crate::cell::cell;
use crate::refit::Fitted;
use crate::table::rows;

const REGIOCHEMISTRY: &str = include_str!("../../data/enolate_regiochemistry.tsv");

/// What the rows under kinetic control settle; priors by the order of magnitude that the trade knows (from memory).
const KINETIC: [Fitted; 3] = [
    Fitted::new("KINETIC_BRONSTED", 0.4, 0.2),
    Fitted::new("KINETIC_SECONDARY", 0.5, 0.5),
    Fitted::new("KINETIC_TERTIARY", 1.5, 1.0),
];

#[derive(Deserialize)]
struct Ketone {
    ketone: String,
    smiles: String,
    base: String,
    solvent: String,
    temperature_c: f64,
    control: String,
    more_substituted_percent: f64,
}

impl Ketone {
    fn is_kinetic(&self) -> bool {
        self.control == "kinetic"
    }

    fn name(&self) -> String {
        let temperature = self.temperature_c.to_string().replace('-', "−");
        format!(
            "{}, {} in {}, {temperature} °C",
            self.ketone, self.base, self.solvent
        )
    }

    /// The enolates before the electrophile, whichever that is: under kinetic control the ketone went into a little more
    /// base, at equilibrium a little too little base went into the ketone.
    fn cell(&self, model: &Model) -> Result<Cell, String> {
        let (base_equiv, addition) = if self.is_kinetic() {
            (1.1, Addition::SubstrateIntoBase)
        } else {
            (0.9, Addition::BaseIntoSubstrate)
        };
        let at = conditions(self.temperature_c, base_equiv, Some(addition));
        cell(model, [&self.smiles, &self.base, "CI", &self.solvent], at)
    }
}

/// Share of the more substituted enolate under kinetic control.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn kinetic_enolates(model: &Model) -> Result<Compared, String> {
    enolates(model, true, &KINETIC, |draw, cell| {
        model.enolates(cell, draw)
    })
}

/// Share of the more substituted enolate at equilibrium.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn equilibrated_enolates(model: &Model) -> Result<Compared, String> {
    enolates(model, false, &[], |draw, cell| {
        model.equilibrated_enolates(cell, draw)
    })
}

fn enolates(
    model: &Model,
    kinetic: bool,
    fitted: &[Fitted],
    shares: impl Fn(&Draw, &Cell) -> Vec<(usize, f64)>,
) -> Result<Compared, String> {
    let mut ketones: Vec<Ketone> = rows(REGIOCHEMISTRY)?;
    ketones.retain(|ketone| ketone.is_kinetic() == kinetic);
    let cells = ketones.iter().map(|ketone| ketone.cell(model));
    let cells: Vec<Cell> = cells.collect::<Result<_, _>>()?;
    let published = ketones
        .iter()
        .map(|ketone| (ketone.name(), ketone.more_substituted_percent));
    Ok(compare(model, published.collect(), fitted, |draw, row| {
        log_ratio(more_substituted(&cells[row], &shares(draw, &cells[row])))
    }))
}

/// Share of the enolate with more neighbours at its carbon, of the two kinds, per cent.
fn more_substituted(cell: &Cell, shares: &[(usize, f64)]) -> f64 {
    let molecule = &cell.substrate.molecule;
    let neighbours = |atom: usize| molecule.neighbours(atom).len();
    let most = shares.iter().map(|(atom, _)| neighbours(*atom)).max();
    let of_most = shares
        .iter()
        .filter(|(atom, _)| Some(neighbours(*atom)) == most);
    100.0 * of_most.map(|(_, share)| share).sum::<f64>()
}
