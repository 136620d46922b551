//! A cell given by names, checked as a campaign of one cell.

use enolattice_grid::{
    AxisSpec, Campaign, CampaignSpec, CellId, ConditionsSpec, Entry, Grid, InputError, Place,
    SubstrateEntry, TargetSpec,
};
use enolattice_model::{Cell, Model};
use enolattice_molecule::Molecule;
use enolattice_reagents::Library;
use std::sync::Arc;

use crate::{CellQuery, EngineError};

/// Checks and prepares a cell; says what was changed on the way in.
///
/// # Errors
/// [`EngineError::Input`] with every fault, named as the fields of [`CellQuery`].
pub(crate) fn cell(
    query: &CellQuery,
    model: &Arc<Model>,
) -> Result<(Cell, Vec<String>), EngineError> {
    let campaign = Campaign::new(&campaign_of_one(query, model.library()), model)
        .map_err(|faults| EngineError::Input(faults.into_iter().map(as_field).collect()))?;
    let warnings = campaign.warnings.clone();
    let grid = Grid::new(campaign, model.clone())?;
    let cell = grid.cell(CellId(0)).ok_or_else(|| {
        EngineError::field(
            "cell",
            "",
            "AXIS_EMPTY",
            "the cell has an empty axis",
            "name every reagent",
        )
    })?;
    Ok((cell, warnings))
}

fn campaign_of_one(query: &CellQuery, library: &Library) -> CampaignSpec {
    let place = |field: &str| Place {
        field: field.to_owned(),
        ..Place::default()
    };
    // What is no name of the library may be a structure: the campaign looks at both.
    let axis = |field: &str, word: &String, is_name: bool| AxisSpec {
        all: false,
        entries: vec![Entry {
            name: if is_name { word.clone() } else { String::new() },
            smiles: if is_name { String::new() } else { word.clone() },
            place: place(field),
            ..Entry::default()
        }],
    };
    let is_structure = |word: &str| Molecule::parse_salt(word).is_ok();
    let electrophile = &query.electrophile;
    let is_named = library.electrophile(electrophile).is_some() || !is_structure(electrophile);
    let by_either = |field: &str, word: &String| {
        let mut axis = axis(field, word, true);
        axis.entries[0].smiles = word.clone();
        axis
    };
    CampaignSpec {
        title: "one cell".to_owned(),
        substrates: vec![SubstrateEntry {
            name: query.substrate.clone(),
            smiles: query.substrate.clone(),
            place: place("substrate"),
            ..SubstrateEntry::default()
        }],
        bases: by_either("base", &query.base),
        electrophiles: axis("electrophile", electrophile, is_named),
        solvents: by_either("solvent", &query.solvent),
        additives: match &query.additive {
            Some(additive) => by_either("additive", additive),
            None => AxisSpec::default(),
        },
        conditions: ConditionsSpec {
            temperature_c: vec![query.temperature_c],
            formation_temperature_c: query.formation_temperature_c.into_iter().collect(),
            base_equiv: vec![query.base_equiv],
            electrophile_equiv: vec![query.electrophile_equiv],
            additive_equiv: query.additive_equiv.into_iter().collect(),
            concentration_m: vec![query.concentration_m],
            time_h: vec![query.time_h],
            dosing_min: vec![query.dosing_min],
            addition: query.addition.iter().cloned().collect(),
        },
        target: TargetSpec {
            yield_at_least: Some(query.yield_at_least),
        },
        ..CampaignSpec::default()
    }
}

/// A fault of the campaign of one cell as a fault of the cell: `conditions.time_h[0]` is `time_h`.
fn as_field(mut fault: InputError) -> InputError {
    let field = fault.place.field.as_str();
    let known = ["substrate", "base", "electrophile", "solvent", "additive"];
    let first = field.split(['.', '[']).next().unwrap_or_default();
    let name = if known.contains(&first) {
        first
    } else {
        field.rsplit('.').next().unwrap_or(field)
    };
    fault.place.field = name.split('[').next().unwrap_or(name).to_owned();
    fault
}
