//! A cell given by names, checked as a campaign of one cell.

use enolattice_grid::{
    AxisSpec, Campaign, CampaignSpec, CellId, ConditionsSpec, Entry, Grid, InputError, Place,
    SubstrateEntry, TargetSpec,
};
use enolattice_model::{Cell, Model};
use enolattice_molecule::Molecule;
use std::sync::Arc;

use crate::{CellQuery, EngineError};

/// Checks and prepares a cell.
///
/// # Errors
/// [`EngineError::Input`] with every fault, named as the fields of [`CellQuery`].
pub(crate) fn cell(query: &CellQuery, model: &Arc<Model>) -> Result<Cell, EngineError> {
    let campaign = Campaign::new(&campaign_of_one(query, model), model)
        .map_err(|faults| EngineError::Input(faults.into_iter().map(as_field).collect()))?;
    let grid = Grid::new(campaign, model.clone())?;
    grid.cell(CellId(0)).ok_or_else(|| {
        EngineError::field(
            "cell",
            "",
            "AXIS_EMPTY",
            "the cell has an empty axis",
            "name every reagent",
        )
    })
}

fn campaign_of_one(query: &CellQuery, model: &Model) -> CampaignSpec {
    let library = model.library();
    let place = |field: &str| Place {
        field: field.to_owned(),
        ..Place::default()
    };
    let named = |field: &str, name: &str| AxisSpec {
        all: false,
        entries: vec![Entry {
            name: name.to_owned(),
            smiles: String::new(),
            place: place(field),
        }],
    };
    // Salts are no molecules, so a base given by SMILES is looked for as the table writes it.
    let base = library
        .bases()
        .iter()
        .find(|base| base.smiles == query.base);
    let solvent = library
        .solvents()
        .iter()
        .find(|solvent| is_same(&solvent.smiles, &query.solvent));
    let mut electrophiles = named("electrophile", &query.electrophile);
    if library.electrophile(&query.electrophile).is_none()
        && Molecule::parse(&query.electrophile).is_ok()
    {
        for entry in &mut electrophiles.entries {
            entry.smiles = std::mem::take(&mut entry.name);
        }
    }
    CampaignSpec {
        title: "one cell".to_owned(),
        substrates: vec![SubstrateEntry {
            name: query.substrate.clone(),
            smiles: query.substrate.clone(),
            place: place("substrate"),
            ..SubstrateEntry::default()
        }],
        bases: named("base", base.map_or(&query.base, |base| &base.name)),
        electrophiles,
        solvents: named(
            "solvent",
            solvent.map_or(&query.solvent, |solvent| &solvent.name),
        ),
        additives: AxisSpec::default(),
        conditions: ConditionsSpec {
            temperature_c: vec![query.temperature_c],
            formation_temperature_c: query.formation_temperature_c.into_iter().collect(),
            base_equiv: vec![query.base_equiv],
            electrophile_equiv: vec![query.electrophile_equiv],
            concentration_m: vec![query.concentration_m],
            time_h: vec![query.time_h],
            dosing_min: vec![query.dosing_min],
            addition: query.addition.iter().cloned().collect(),
        },
        target: TargetSpec {
            yield_at_least: Some(query.yield_at_least),
        },
    }
}

/// Whether two SMILES are the same molecule.
fn is_same(known: &str, given: &str) -> bool {
    match (Molecule::parse(known), Molecule::parse(given)) {
        (Ok(known), Ok(given)) => known.canonical() == given.canonical(),
        _ => false,
    }
}

/// A fault of the campaign of one cell as a fault of the cell: `conditions.time_h[0]` is `time_h`.
fn as_field(mut fault: InputError) -> InputError {
    let field = fault.place.field.as_str();
    let known = ["substrate", "base", "electrophile", "solvent"];
    let first = field.split(['.', '[']).next().unwrap_or_default();
    let name = if known.contains(&first) {
        first
    } else {
        field.rsplit('.').next().unwrap_or(field)
    };
    fault.place.field = name.split('[').next().unwrap_or(name).to_owned();
    fault
}
