//! What differs between a cell of one job and the same cell of another.

use enolattice_model::Explanation;

use crate::{CellDescription, Difference};

/// Constants that are told, those that differ most.
const CONSTANTS: usize = 6;
/// Logarithms that differ by less are the same to a chemist.
const LEAST: f64 = 0.05;

/// The makeup first, then the constants of both explanations, where there are two.
pub(crate) fn differences(
    before: &CellDescription,
    after: &CellDescription,
    told: Option<(&Explanation, &Explanation)>,
) -> Vec<Difference> {
    let mut differences = of_makeup(before, after);
    differences.extend(
        told.into_iter()
            .flat_map(|(before, after)| of_constants(before, after)),
    );
    differences
}

fn of_makeup(before: &CellDescription, after: &CellDescription) -> Vec<Difference> {
    let pairs = parts(before).into_iter().zip(parts(after));
    pairs
        .filter(|((_, before), (_, after))| before != after)
        .map(|((what, before), (_, after))| Difference {
            what: what.to_owned(),
            before,
            after,
        })
        .collect()
}

/// What may differ of a cell that two campaigns share, by the names of its axes.
fn parts(cell: &CellDescription) -> [(&'static str, String); 12] {
    let amount = cell.additive_equiv;
    [
        ("base", cell.base.clone()),
        ("solvent", cell.solvent.clone()),
        (
            "additive",
            cell.additive.clone().unwrap_or_else(|| "none".to_owned()),
        ),
        (
            "additive_equiv",
            amount.map_or_else(|| "none".to_owned(), |equiv| equiv.to_string()),
        ),
        ("temperature_c", cell.temperature_c.to_string()),
        (
            "formation_temperature_c",
            cell.formation_temperature_c.to_string(),
        ),
        ("base_equiv", cell.base_equiv.to_string()),
        ("electrophile_equiv", cell.electrophile_equiv.to_string()),
        ("concentration_m", cell.concentration_m.to_string()),
        ("time_h", cell.time_h.to_string()),
        ("dosing_min", cell.dosing_min.to_string()),
        ("addition", cell.addition.clone()),
    ]
}

fn of_constants(before: &Explanation, after: &Explanation) -> Vec<Difference> {
    let after = constants(after);
    let mut found: Vec<(f64, Difference)> = constants(before)
        .into_iter()
        .filter_map(|(what, before)| {
            let (_, after) = after.iter().find(|(known, _)| *known == what)?;
            let difference = Difference {
                what,
                before: format!("{before:.2}"),
                after: format!("{after:.2}"),
            };
            Some(((before - after).abs(), difference))
        })
        .filter(|(size, _)| *size >= LEAST)
        .collect();
    found.sort_by(|a, b| b.0.total_cmp(&a.0));
    found.truncate(CONSTANTS);
    found
        .into_iter()
        .map(|(_, difference)| difference)
        .collect()
}

/// The constants of a cell by what they are: all logarithms, so that their differences compare.
fn constants(told: &Explanation) -> Vec<(String, f64)> {
    let mut constants: Vec<(String, f64)> = Vec::new();
    for site in &told.sites {
        // the most acidic site of an element stands for the others: atoms have other numbers in another SMILES
        let values = [
            ("pKa in DMSO", site.pka_dmso),
            ("pKa here", site.pka_medium),
        ];
        for (name, value) in values {
            let what = format!("{name} of the {}–H of the {}", site.element, site.molecule);
            match constants.iter_mut().find(|(known, _)| *known == what) {
                Some((_, least)) => *least = least.min(value),
                None => constants.push((what, value)),
            }
        }
    }
    let log10_k = told
        .log10_k
        .map(|value| ("log10 K of the deprotonation".to_owned(), value));
    constants.extend(log10_k);
    let rates = told.rates.iter();
    constants.extend(rates.map(|rate| (format!("log10 k: {}", rate.step), rate.log10_k)));
    constants
}
