//! Which wells of a plate are used.

use std::collections::BTreeSet;

use super::arrangement::Arrangement;
use super::{EdgeWells, LayoutError, LayoutItem, LayoutOptions};
use crate::Well;
use crate::random::Random;

/// The wells left when fixed items have theirs.
pub(super) struct FreeWells {
    /// Wells that every item may use, column by column.
    pub(super) common: Vec<Well>,
    /// Wells at the edge for controls alone, once around the plate.
    pub(super) controls: Vec<Well>,
}

/// Items without a fixed well in a random order over the wells that are used.
pub(super) fn random_start(
    plate: u32,
    items: &[&LayoutItem],
    options: &LayoutOptions,
    random: &mut Random,
) -> Result<Arrangement, LayoutError> {
    let free = free_wells(plate, items, options)?;
    let (controls, others) = by_freedom(items, options.edges);
    let mut wells: Vec<Well> = items
        .iter()
        .map(|item| item.fixed.unwrap_or(Well::new(0, 0)))
        .collect();
    let (mut for_controls, inner) = wells_for_controls(&free, controls.len());
    let mut for_others: Vec<Well> = free.common[..others.len() + inner].to_vec();
    random.shuffle(&mut for_others);
    for_controls.extend(for_others.drain(others.len()..));
    random.shuffle(&mut for_controls);
    let places = for_controls.into_iter().chain(for_others);
    for (item, well) in controls.into_iter().chain(others).zip(places) {
        wells[item] = well;
    }
    Ok(Arrangement::new(
        options.format,
        options.edges,
        items,
        wells,
    ))
}

/// Checks fixed wells and counts, and gives the wells that are free.
pub(super) fn free_wells(
    plate: u32,
    items: &[&LayoutItem],
    options: &LayoutOptions,
) -> Result<FreeWells, LayoutError> {
    let LayoutOptions { format, edges, .. } = *options;
    let taken = taken_wells(plate, items, options)?;
    let is_free = |well: &Well| !taken.contains(well);
    let at_edge = |well: &Well| format.is_edge(*well);
    let common: Vec<Well> = format
        .by_columns()
        .filter(is_free)
        .filter(|well| edges == EdgeWells::Use || !at_edge(well))
        .collect();
    let controls: Vec<Well> = match edges {
        EdgeWells::ControlsOnly => around_the_edge(format).filter(is_free).collect(),
        EdgeWells::Use | EdgeWells::Empty => Vec::new(),
    };
    let (free_controls, others) = by_freedom(items, edges);
    if others.len() > common.len() && edges == EdgeWells::ControlsOnly {
        return Err(LayoutError::TooManyInnerItems {
            plate,
            items: others.len(),
            wells: common.len(),
            format,
        });
    }
    if free_controls.len() + others.len() > common.len() + controls.len() {
        return Err(LayoutError::TooManyItems {
            plate,
            items: items.len(),
            wells: common.len() + controls.len() + taken.len(),
            format,
        });
    }
    Ok(FreeWells { common, controls })
}

fn taken_wells(
    plate: u32,
    items: &[&LayoutItem],
    options: &LayoutOptions,
) -> Result<BTreeSet<Well>, LayoutError> {
    let LayoutOptions { format, edges, .. } = *options;
    let mut taken = BTreeSet::new();
    for item in items {
        let Some(well) = item.fixed else { continue };
        if !format.has(well) {
            return Err(LayoutError::NoSuchWell {
                plate,
                well,
                format,
            });
        }
        let edge_allowed = match edges {
            EdgeWells::Use => true,
            EdgeWells::Empty => false,
            EdgeWells::ControlsOnly => item.control.is_some(),
        };
        if format.is_edge(well) && !edge_allowed {
            return Err(LayoutError::EdgeNotAllowed { plate, well });
        }
        if !taken.insert(well) {
            return Err(LayoutError::WellTaken { plate, well });
        }
    }
    Ok(taken)
}

/// Items without a fixed well: controls that have wells of their own, and all others.
pub(super) fn by_freedom(items: &[&LayoutItem], edges: EdgeWells) -> (Vec<usize>, Vec<usize>) {
    let free = (0..items.len()).filter(|index| items[*index].fixed.is_none());
    free.partition(|index| edges == EdgeWells::ControlsOnly && items[*index].control.is_some())
}

/// Wells for so many controls, evenly around the edge, and how many inner wells they need besides.
pub(super) fn wells_for_controls(free: &FreeWells, controls: usize) -> (Vec<Well>, usize) {
    let at_edge = controls.min(free.controls.len());
    let wells = (0..at_edge).map(|n| free.controls[n * free.controls.len() / at_edge]);
    (wells.collect(), controls - at_edge)
}

/// Once around the plate from A1, along row A first.
fn around_the_edge(format: crate::PlateFormat) -> impl Iterator<Item = Well> {
    let (rows, columns) = (format.rows(), format.columns());
    let top = (0..columns).map(|column| Well::new(0, column));
    let right = (1..rows).map(move |row| Well::new(row, columns - 1));
    let bottom = (0..columns - 1).rev();
    let bottom = bottom.map(move |column| Well::new(rows - 1, column));
    let left = (1..rows - 1).rev().map(|row| Well::new(row, 0));
    top.chain(right).chain(bottom).chain(left)
}
