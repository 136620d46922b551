//! What a request and the shelf ask of the choice.

use std::collections::{BTreeSet, HashMap};

use enolattice_grid::{CampaignSpec, CellId, FaultCode, Grid, InputError, Stock};
use enolattice_plate::{LimitAxis, PlanRequest, Quota};

use crate::EngineError;

/// Cells that must not be chosen.
pub(super) type Vetoed = BTreeSet<u64>;

pub(super) fn fault(field: String, value: &str, reason: String, remedy: &str) -> InputError {
    InputError::of_field(
        FaultCode::PlanImpossible.name(),
        field,
        value,
        reason,
        remedy,
    )
}

/// Cells that must be chosen.
pub(super) fn pinned(grid: &Grid, request: &PlanRequest) -> Result<Vec<u64>, EngineError> {
    named(
        grid,
        "choice.pin",
        request.choice.pin.iter().map(|pin| pin.cell),
    )
}

/// Cells that must not be chosen.
pub(super) fn vetoed(grid: &Grid, request: &PlanRequest) -> Result<Vetoed, EngineError> {
    let vetoed = named(
        grid,
        "choice.veto",
        request.choice.veto.iter().map(|veto| veto.cell),
    )?;
    let pinned: BTreeSet<u64> = request.choice.pin.iter().map(|pin| pin.cell).collect();
    let vetoed: Vetoed = vetoed.into_iter().collect();
    match vetoed.intersection(&pinned).next() {
        None => Ok(vetoed),
        Some(cell) => Err(EngineError::Input(vec![fault(
            "choice.veto".to_owned(),
            &cell.to_string(),
            "is pinned as well".to_owned(),
            "take it out of one of the lists",
        )])),
    }
}

fn named(
    grid: &Grid,
    field: &str,
    cells: impl Iterator<Item = u64>,
) -> Result<Vec<u64>, EngineError> {
    let mut faults = Vec::new();
    let mut known = Vec::new();
    for (i, cell) in cells.enumerate() {
        match grid.digits(CellId(cell)) {
            Some(_) => known.push(cell),
            None => faults.push(fault(
                format!("{field}[{i}].cell"),
                &cell.to_string(),
                format!("the job's cells are 0 to {}", grid.cells() - 1),
                "give the number of a cell as `rank` prints it",
            )),
        }
    }
    match faults.is_empty() {
        true => Ok(known),
        false => Err(EngineError::Input(faults)),
    }
}

/// Names of the values of an axis, as campaigns print them.
fn names(grid: &Grid, axis: LimitAxis) -> Vec<String> {
    let campaign = grid.campaign();
    match axis {
        LimitAxis::Substrate => campaign.substrates.iter().map(|s| s.name.clone()).collect(),
        LimitAxis::Electrophile => campaign
            .electrophiles
            .iter()
            .map(|e| e.name.clone())
            .collect(),
        LimitAxis::Base => campaign
            .bases
            .iter()
            .map(|b| b.record.name.clone())
            .collect(),
        LimitAxis::Solvent => campaign
            .solvents
            .iter()
            .map(|s| s.record.name.clone())
            .collect(),
        LimitAxis::Additive => campaign
            .additives
            .iter()
            .map(|dose| {
                dose.as_ref()
                    .map_or("none", |dose| &dose.additive.record.name)
                    .to_owned()
            })
            .collect(),
    }
}

/// Lower and upper limits as asked for, and upper ones of what is on the shelf.
pub(super) fn quotas(
    grid: &Grid,
    spec: &CampaignSpec,
    request: &PlanRequest,
) -> Result<Vec<Quota>, EngineError> {
    let mut quotas = Vec::new();
    let mut faults = Vec::new();
    for (i, limit) in request.choice.limits.iter().enumerate() {
        let names = names(grid, limit.axis);
        let before = quotas.len();
        for (value, name) in names.iter().enumerate() {
            let is_meant = limit
                .value
                .as_ref()
                .is_none_or(|wanted| wanted.eq_ignore_ascii_case(name));
            if is_meant {
                quotas.push(Quota {
                    axis: limit.axis.index(),
                    value: value as u32,
                    least: limit.least as usize,
                    most: limit.most.map_or(usize::MAX, |most| most as usize),
                    name: format!("{} {name}", limit.axis.name()),
                    reason: format!("choice.limits[{i}]"),
                });
            }
        }
        if quotas.len() == before {
            let value = limit.value.as_deref().unwrap_or_default();
            faults.push(fault(
                format!("choice.limits[{i}].value"),
                value,
                format!("the campaign has no such {}", limit.axis.name()),
                "give a name as `rank` prints it",
            ));
        }
    }
    quotas.extend(of_shelf(grid, spec, request));
    match faults.is_empty() {
        true => Ok(quotas),
        false => Err(EngineError::Input(faults)),
    }
}

/// How many cells the substrates on the shelf are enough for.
fn of_shelf(grid: &Grid, spec: &CampaignSpec, request: &PlanRequest) -> Vec<Quota> {
    let campaign = grid.campaign();
    let volume = request.well.volume_ul;
    let volume_ul = volume.unwrap_or(request.plates.wells.default_volume_ul());
    let strongest_m = campaign.concentration_m.iter().copied().fold(0.0, f64::max);
    // excess, and replicates of each cell
    let surplus = 1.0 + request.deck.excess_percent / 100.0;
    let a_cell_umol = strongest_m * volume_ul * surplus * f64::from(request.choice.replicates);
    let stocks: HashMap<&str, &Stock> = spec
        .substrates
        .iter()
        .map(|entry| {
            let name = if entry.name.is_empty() {
                &entry.smiles
            } else {
                &entry.name
            };
            (name.as_str(), &entry.stock)
        })
        .collect();
    let quota = |(value, substrate): (usize, &std::sync::Arc<enolattice_model::Substrate>)| {
        let stock = stocks.get(substrate.name.as_str())?;
        let on_shelf_umol = match (
            stock.stock_mg,
            stock.stock_ml,
            stock.supplied_concentration_m,
        ) {
            (Some(mg), _, _) => mg / substrate.molecule.molar_mass() * 1000.0,
            (None, Some(ml), Some(molar)) => ml * molar * 1000.0,
            _ => return None,
        };
        Some(Quota {
            axis: LimitAxis::Substrate.index(),
            value: value as u32,
            least: 0,
            most: (on_shelf_umol / a_cell_umol) as usize,
            name: format!("substrate {}", substrate.name),
            reason: format!("{on_shelf_umol:.0} umol are on the shelf"),
        })
    };
    campaign
        .substrates
        .iter()
        .enumerate()
        .filter_map(quota)
        .collect()
}

/// Of each value of the first five axes, whether the campaign says that there is some of it; solvents and "no additive"
/// always are.
pub(super) fn on_the_shelf(grid: &Grid, spec: &CampaignSpec) -> Vec<Vec<bool>> {
    let has = |stock: &Stock| stock.stock_mg.is_some() || stock.stock_ml.is_some();
    let mut known: BTreeSet<String> = BTreeSet::new();
    for entry in spec.substrates.iter().filter(|entry| has(&entry.stock)) {
        known.extend([entry.name.to_lowercase(), entry.smiles.to_lowercase()]);
    }
    for axis in [&spec.bases, &spec.electrophiles, &spec.additives] {
        for entry in axis.entries.iter().filter(|entry| has(&entry.stock)) {
            known.extend([entry.name.to_lowercase(), entry.smiles.to_lowercase()]);
        }
    }
    let axes = [
        LimitAxis::Substrate,
        LimitAxis::Electrophile,
        LimitAxis::Base,
        LimitAxis::Solvent,
        LimitAxis::Additive,
    ];
    let there = |axis: LimitAxis| {
        let names = names(grid, axis).into_iter();
        let is_there = |name: String| {
            axis == LimitAxis::Solvent || name == "none" || known.contains(&name.to_lowercase())
        };
        names.map(is_there).collect()
    };
    axes.into_iter().map(there).collect()
}
