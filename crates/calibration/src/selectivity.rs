//! Which enolate, and which end of it: published distributions against the model, each left out in turn.

use std::fmt::Write;
use std::sync::Arc;

use enolattice_model::{Addition, Cell, Conditions, Draw, Model};
use enolattice_molecule::Molecule;
use serde::Deserialize;

use crate::refit::{Fitted, fit_all, leave_one_out};

const REGIOCHEMISTRY: &str = include_str!("../data/enolate_regiochemistry.tsv");
const AMBIDENT: &str = include_str!("../data/oxygen_against_carbon.tsv");

/// Shares are compared as logarithms of their ratio within these bounds, 0.5 and 99.5 per cent.
const BOUND: f64 = 2.3;
/// σ of an observed log10 ratio: a share of 80 per cent is known to about five points.
const OBSERVED_SIGMA: f64 = 0.15;

/// A table of shares and what it says of the parameters.
#[derive(Clone, Debug)]
pub struct Compared {
    /// Each share.
    pub shares: Vec<Comparison>,
    /// The parameters that fit all shares.
    pub fitted: Vec<(&'static str, f64)>,
}

/// A share as published and as the model has it when it has not seen it, per cent.
#[derive(Clone, Debug)]
pub struct Comparison {
    /// Substance and conditions.
    pub name: String,
    /// Published.
    pub published: f64,
    /// The model's, its parameters fitted to the others.
    pub left_out: f64,
    /// The model's, as it is.
    pub model: f64,
}

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

fn rows<T: for<'de> Deserialize<'de>>(text: &str) -> Result<Vec<T>, String> {
    csv::ReaderBuilder::new()
        .delimiter(b'\t')
        .comment(Some(b'#'))
        .from_reader(text.as_bytes())
        .deserialize()
        .map(|row| row.map_err(|error| error.to_string()))
        .collect()
}

/// Share of the more substituted enolate under kinetic control.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn kinetic_enolates(model: &Model) -> Result<Compared, String> {
    let fitted = [
        Fitted {
            name: "KINETIC_BRONSTED",
            prior: (0.4, 0.2),
        },
        Fitted {
            name: "KINETIC_SECONDARY",
            prior: (0.5, 0.5),
        },
        Fitted {
            name: "KINETIC_TERTIARY",
            prior: (1.5, 1.0),
        },
    ];
    enolates(model, "kinetic", &fitted, |draw, cell| {
        model.enolates(cell, draw)
    })
}

/// Share of the more substituted enolate at equilibrium.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn equilibrated_enolates(model: &Model) -> Result<Compared, String> {
    enolates(model, "thermodynamic", &[], |draw, cell| {
        model.equilibrated_enolates(cell, draw)
    })
}

fn enolates(
    model: &Model,
    control: &str,
    fitted: &[Fitted],
    shares: impl Fn(&Draw, &Cell) -> Vec<(usize, f64)>,
) -> Result<Compared, String> {
    let ketones: Vec<Ketone> = rows(REGIOCHEMISTRY)?;
    let ketones: Vec<Ketone> = ketones
        .into_iter()
        .filter(|k| k.control == control)
        .collect();
    let cells: Vec<Cell> = ketones
        .iter()
        .map(|k| cell_of_ketone(model, k))
        .collect::<Result<_, _>>()?;
    let names = ketones.iter().map(|k| {
        format!(
            "{}, {} in {}, {} °C",
            k.ketone, k.base, k.solvent, k.temperature_c
        )
    });
    let observed = ketones
        .iter()
        .map(|k| log_ratio(k.more_substituted_percent));
    let predict = |draw: &Draw, row: usize| {
        log_ratio(more_substituted(&cells[row], &shares(draw, &cells[row])))
    };
    Ok(compare(
        model,
        names.collect(),
        &observed.collect::<Vec<_>>(),
        fitted,
        predict,
    ))
}

/// Share of oxygen among C- and O-alkylation.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn oxygen_against_carbon(model: &Model) -> Result<Compared, String> {
    let fitted = [
        Fitted {
            name: "O_BETA_DICARBONYL",
            prior: (0.5, 1.0),
        },
        Fitted {
            name: "O_NITRONATE",
            prior: (4.2, 0.8),
        },
        Fitted {
            name: "O_IODIDE",
            prior: (-1.5, 0.5),
        },
        Fitted {
            name: "O_BROMIDE",
            prior: (-1.0, 0.5),
        },
        Fitted {
            name: "O_CHLORIDE",
            prior: (-0.5, 0.5),
        },
        Fitted {
            name: "O_BARE",
            prior: (-0.3, 0.5),
        },
        Fitted {
            name: "O_PROTIC",
            prior: (-2.0, 0.7),
        },
    ];
    let table: Vec<Ambident> = rows(AMBIDENT)?;
    let cells: Vec<Cell> = table
        .iter()
        .map(|row| cell_of_ambident(model, row))
        .collect::<Result<_, _>>()?;
    let names = table.iter().map(|row| {
        format!(
            "{}, {} with {} in {}",
            row.acid, row.base, row.electrophile, row.solvent
        )
    });
    let observed = table.iter().map(|row| {
        log_ratio(100.0 * row.oxygen_percent / (row.oxygen_percent + row.carbon_percent))
    });
    let predict = |draw: &Draw, row: usize| {
        let ratio = model.oxygen_over_carbon(&cells[row], draw);
        ratio.unwrap_or(-BOUND).clamp(-BOUND, BOUND)
    };
    Ok(compare(
        model,
        names.collect(),
        &observed.collect::<Vec<_>>(),
        &fitted,
        predict,
    ))
}

fn compare(
    model: &Model,
    names: Vec<String>,
    observed: &[f64],
    fitted: &[Fitted],
    predict: impl Fn(&Draw, usize) -> f64,
) -> Compared {
    let left_out = leave_one_out(fitted, observed, OBSERVED_SIGMA, |row, changes| {
        predict(&model.draw_with(changes), row)
    });
    let fitted = fit_all(fitted, observed, OBSERVED_SIGMA, |row, changes| {
        predict(&model.draw_with(changes), row)
    });
    let as_it_is = model.draw_with(&[]);
    let shares = names.into_iter().enumerate().map(|(row, name)| Comparison {
        name,
        published: percent(observed[row]),
        left_out: percent(left_out[row]),
        model: percent(predict(&as_it_is, row)),
    });
    Compared {
        shares: shares.collect(),
        fitted,
    }
}

fn log_ratio(percent: f64) -> f64 {
    let share = percent / 100.0;
    (share / (1.0 - share)).log10().clamp(-BOUND, BOUND)
}

fn percent(log10_ratio: f64) -> f64 {
    100.0 / (1.0 + 10_f64.powf(-log10_ratio))
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

fn conditions(temperature_c: f64, base_equiv: f64, addition: Option<Addition>) -> Conditions {
    Conditions {
        temperature_c,
        formation_temperature_c: temperature_c,
        base_equiv,
        electrophile_equiv: 1.0,
        additive_equiv: 0.0,
        concentration_m: 0.2,
        time_h: 16.0,
        dosing_min: 10.0,
        addition,
    }
}

/// A little too little base, added to the ketone, lets the enolates exchange; ketone into base does not.
fn cell_of_ketone(model: &Model, row: &Ketone) -> Result<Cell, String> {
    let at = if row.control == "kinetic" {
        conditions(row.temperature_c, 1.1, Some(Addition::SubstrateIntoBase))
    } else {
        conditions(row.temperature_c, 0.9, Some(Addition::BaseIntoSubstrate))
    };
    cell(model, [&row.smiles, &row.base, "CI", &row.solvent], at)
}

fn cell_of_ambident(model: &Model, row: &Ambident) -> Result<Cell, String> {
    let reagents = [&row.smiles, &row.base, &row.electrophile, &row.solvent].map(String::as_str);
    cell(model, reagents, conditions(row.temperature_c, 1.1, None))
}

/// A cell by the SMILES of substrate and electrophile and the names of base and solvent.
pub(crate) fn cell(
    model: &Model,
    names: [&str; 4],
    conditions: Conditions,
) -> Result<Cell, String> {
    let [substrate, base, electrophile, solvent] = names;
    let library = model.library();
    let parse =
        |smiles: &str| Molecule::parse(smiles).map_err(|error| format!("{smiles}: {error}"));
    let substrate = model.substrate(substrate, parse(substrate)?, None);
    let electrophile = model.electrophile(electrophile, parse(electrophile)?);
    let pair = model.pair(&substrate, &electrophile);
    let base = library
        .base(base)
        .ok_or(format!("the library has no base {base}"))?;
    let solvent = library
        .solvent(solvent)
        .ok_or(format!("the library has no solvent {solvent}"))?;
    Ok(Cell {
        pair: Arc::new(pair),
        substrate: Arc::new(substrate),
        base: Arc::new(model.base(base)),
        electrophile: Arc::new(electrophile),
        solvent: Arc::new(model.solvent(solvent)),
        additive: None,
        conditions,
    })
}

/// The comparisons as a page.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn page(model: &Model) -> Result<String, String> {
    let mut page = String::new();
    let parts = [
        (
            "More substituted enolate, kinetic control",
            kinetic_enolates(model)?,
        ),
        (
            "More substituted enolate, equilibrium",
            equilibrated_enolates(model)?,
        ),
        (
            "Oxygen among C- and O-alkylation",
            oxygen_against_carbon(model)?,
        ),
    ];
    for (title, Compared { shares, fitted }) in parts {
        let mean = |of: fn(&Comparison) -> f64| {
            shares
                .iter()
                .map(|one| (of(one) - one.published).abs())
                .sum::<f64>()
                / shares.len() as f64
        };
        let _ = writeln!(
            page,
            "## {title}\n\n| | published, % | left out, % | model, % |\n| --- | --- | --- | --- |"
        );
        for one in &shares {
            let _ = writeln!(
                page,
                "| {} | {:.0} | {:.0} | {:.0} |",
                one.name, one.published, one.left_out, one.model
            );
        }
        let _ = writeln!(
            page,
            "\nMean absolute error: {:.1} points left out, {:.1} points as the model is.\n",
            mean(|one| one.left_out),
            mean(|one| one.model)
        );
        if !fitted.is_empty() {
            let of = |(name, value): &(&str, f64)| format!("{name} {value:.2}");
            let fitted: Vec<_> = fitted.iter().map(of).collect();
            let _ = writeln!(page, "Fitted to all: {}.\n", fitted.join(", "));
        }
    }
    Ok(page)
}
