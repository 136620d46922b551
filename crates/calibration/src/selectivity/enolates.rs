//! The more substituted enolate of ketones, under kinetic control and at equilibrium.

use enolattice_model::{Addition, Cell, Draw, Model};
use serde::Deserialize;

use super::{Compared, Comparison, OBSERVED_SIGMA, compare, conditions, log_ratio, percent};
use crate::cell::cell;
use crate::refit::{Changes, Fitted, Observations};
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

/// An effect of lithium on the equilibrium that the model does not have: one number added to log10 of the ratio in the rows
/// with lithium, pulled to none.
const LITHIUM: [Fitted; 1] = [Fitted::new("lithium", 0.0, 0.4)];

/// The attempt to add an effect of lithium to [`equilibrated_enolates`], of the rows with lithium: each share with the
/// number fitted to the others, and as the model is without it.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn lithium_at_equilibrium(model: &Model) -> Result<Compared, String> {
    let mut ketones: Vec<Ketone> = rows(REGIOCHEMISTRY)?;
    ketones.retain(|ketone| !ketone.is_kinetic());
    let all = equilibrated_enolates(model)?
        .shares
        .into_iter()
        .zip(ketones);
    let shares: Vec<Comparison> = all
        .filter(|(_, ketone)| ketone.base.starts_with("Li"))
        .map(|(share, _)| share)
        .collect();
    let ratio = |of: fn(&Comparison) -> f64| shares.iter().map(|s| log_ratio(of(s))).collect();
    let (observed, without): (Vec<f64>, Vec<f64>) = (ratio(|s| s.published), ratio(|s| s.model));
    let observations = Observations {
        observed: &observed,
        sigma: OBSERVED_SIGMA,
        predict: |row: usize, changes: &Changes| {
            without[row] + changes.iter().map(|(_, value)| value).sum::<f64>()
        },
    };
    let left_out = observations.left_out(&LITHIUM);
    let fitted = observations.fit_all(&LITHIUM);
    let shares = shares.into_iter().zip(left_out);
    Ok(Compared {
        shares: shares
            .map(|(share, left_out)| Comparison {
                left_out: percent(left_out),
                ..share
            })
            .collect(),
        fitted,
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
