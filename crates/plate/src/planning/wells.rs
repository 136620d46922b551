//! What each well of a plan says.

use std::collections::BTreeMap;

use enolattice_model::{Cell, Contents, Draw, Fate, Model, cautions};
use rayon::prelude::*;

use crate::checks::water_umol;
use crate::planning::Ground;
use crate::planning::controls::Placed;
use crate::stocks::Supply;
use crate::{
    PlannedWell, Reagent, Recipe, Role, USUAL_TOLERANCE_PPM, WellCaution, WellMasses, WellSpecies,
    well_masses,
};

/// Products of which less than this share of the substrate is expected are not looked for.
const LOOKED_FOR: f64 = 0.005;
/// Solvents that make up less than this of a well do not count.
const COUNTS: f64 = 0.01;
/// Draws in which a well is scored again in the medium as it is dosed.
const DRAWS_AGAIN: usize = 32;

/// Where the material of each candidate goes that is run; those that the reference gives up on are not among them.
pub(super) type Fates = BTreeMap<usize, Fate>;

/// Solves each candidate that is run once, however many wells it has.
pub(super) fn fates(ground: &Ground<'_>, placed: &[Placed]) -> Fates {
    let model = ground.grid.model();
    let runs: BTreeMap<usize, &Cell> = placed
        .iter()
        .filter(|placed| placed.content.runs())
        .map(|placed| (placed.candidate, &placed.cell))
        .collect();
    runs.into_par_iter()
        .filter_map(|(candidate, cell)| Some((candidate, model.fate(cell).ok().flatten()?)))
        .collect()
}

/// All wells, in the order of the recipes.
pub(super) fn planned(
    ground: &Ground<'_>,
    placed: &[Placed],
    recipes: &[Recipe],
    supply: &Supply,
    fates: &Fates,
) -> Vec<PlannedWell> {
    let at: Vec<usize> = (0..recipes.len()).collect();
    at.into_par_iter()
        .map(|at| one(ground, &placed[at], &recipes[at], supply, at, fates))
        .collect()
}

fn one(
    ground: &Ground<'_>,
    placed: &Placed,
    recipe: &Recipe,
    supply: &Supply,
    at: usize,
    fates: &Fates,
) -> PlannedWell {
    let model = ground.grid.model();
    let candidate = &ground.candidates[placed.candidate];
    let cell = &recipe.cell;
    let medium = supply.medium(at, model.library());
    let runs = recipe.content.runs();
    let fate = fates.get(&placed.candidate).filter(|_| runs);
    let base_umol = recipe.amount_umol(Role::Base, supply.volume_ul);
    let note = ground
        .request
        .choice
        .pin
        .iter()
        .find(|pin| pin.cell == candidate.cell);
    PlannedWell {
        well: recipe.well,
        content: recipe.content,
        cell: candidate.cell,
        replicate: placed.replicate,
        substrate: reagent(recipe, Role::Substrate, supply.volume_ul),
        base: reagent(recipe, Role::Base, supply.volume_ul),
        electrophile: reagent(recipe, Role::Electrophile, supply.volume_ul),
        additive: reagent(recipe, Role::Additive, supply.volume_ul),
        solvent: cell.solvent.record.name.clone(),
        addition: recipe.addition().name().to_owned(),
        doses: supply.doses[at].clone(),
        expected_yield: runs.then(|| candidate.mean_yield()),
        p_hit: runs.then(|| candidate.p_hit(ground.grid.campaign().yield_at_least)),
        yield_as_dosed: runs
            .then(|| as_dosed(model, cell, &medium, ground.draws))
            .flatten(),
        reference_yield: fate.map(|fate| fate.product),
        water_per_base: (base_umol > 0.0).then(|| water_umol(recipe, supply, at) / base_umol),
        medium,
        cautions: cautions(&Contents::from(cell))
            .into_iter()
            .map(|caution| WellCaution {
                severity: caution.severity.name().to_owned(),
                category: caution.category.name().to_owned(),
                text: caution.text,
                source: caution.source,
            })
            .collect(),
        masses: masses(recipe, fate),
        note: note.map_or(String::new(), |pin| pin.note.clone()),
    }
}

fn reagent(recipe: &Recipe, role: Role, volume_ul: f64) -> Option<Reagent> {
    let name = recipe.reagent(role)?;
    let cell = &recipe.cell;
    let smiles = match role {
        Role::Substrate => cell.substrate.molecule.smiles(),
        Role::Base => &cell.base.record.smiles,
        Role::Electrophile => cell.electrophile.molecule.smiles(),
        _ => cell
            .additive
            .as_ref()
            .map_or("", |additive| &additive.record.smiles),
    };
    let amount_umol = recipe.amount_umol(role, volume_ul);
    Some(Reagent {
        name: name.to_owned(),
        smiles: smiles.to_owned(),
        amount_umol,
        equiv: amount_umol / (cell.conditions.concentration_m * volume_ul),
    })
}

/// Mean yield in the solvents as they are dosed; none where they are the cell's own.
fn as_dosed(model: &Model, cell: &Cell, medium: &[(String, f64)], draws: &[Draw]) -> Option<f64> {
    let mut own: Vec<&str> = cell
        .solvent
        .record
        .components()
        .map(|part| part.name)
        .collect();
    let mut parts: Vec<(&str, f64)> = medium
        .iter()
        .filter(|(_, share)| *share >= COUNTS)
        .map(|(name, share)| (name.as_str(), *share))
        .collect();
    // a mixture has three parts at most
    parts.truncate(3);
    let mut names: Vec<&str> = parts.iter().map(|(name, _)| *name).collect();
    own.sort_unstable();
    names.sort_unstable();
    if own == names {
        return None;
    }
    let library = model.library();
    let solvent = match parts[..] {
        [(only, _)] => library.solvent(only)?.clone(),
        _ => library.mixture(&parts).ok()?,
    };
    let dosed = Cell {
        solvent: std::sync::Arc::new(model.solvent(&solvent)),
        ..cell.clone()
    };
    let yields = model.yields(&dosed, &draws[..draws.len().min(DRAWS_AGAIN)])?;
    Some(yields.iter().sum::<f64>() / yields.len() as f64)
}

fn masses(recipe: &Recipe, fate: Option<&Fate>) -> WellMasses {
    let cell = &recipe.cell;
    let mut species: Vec<WellSpecies> = Vec::new();
    if recipe.content.holds(Role::Substrate) {
        let left = fate.map_or(0.0, |fate| fate.left);
        let molecule = cell.substrate.molecule.clone();
        species.extend(WellSpecies::new("substrate", molecule, left));
    }
    if recipe.content.holds(Role::Electrophile) {
        let molecule = cell.electrophile.molecule.clone();
        species.extend(WellSpecies::new("electrophile", molecule, 0.0));
    }
    let products = fate.map_or(&[][..], |fate| &fate.products);
    for product in products {
        let share = product.fraction;
        if share.is_none_or(|share| share >= LOOKED_FOR) || product.channel.is_none() {
            let share = share.unwrap_or(0.0).clamp(0.0, 1.0);
            species.extend(WellSpecies::parse(
                product.channel_name(),
                &product.smiles,
                share,
            ));
        }
    }
    well_masses(&species, USUAL_TOLERANCE_PPM).expect("5 ppm is a tolerance")
}
