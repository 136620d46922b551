//! Items that share a source in one column.

use std::collections::{BTreeMap, BTreeSet};

use super::arrangement::Arrangement;
use super::slots::{by_freedom, free_wells, wells_for_controls};
use super::{LayoutError, LayoutItem, LayoutOptions};
use crate::Well;
use crate::random::Random;

/// How often a head would have to move.
pub(super) struct Fills {
    /// Pairs of column and source.
    pub(super) fills: u32,
    /// Columns with more than one source.
    pub(super) mixed: u32,
}

/// Counts columns and sources; an item without a value needs no source.
pub(super) fn fills(items: &[&LayoutItem], arrangement: &Arrangement, axis: usize) -> Fills {
    let mut sources: BTreeMap<u8, BTreeSet<u32>> = BTreeMap::new();
    for (index, item) in items.iter().enumerate() {
        if let Some(value) = item.groups[axis] {
            let column = arrangement.well_of(index).column;
            sources.entry(column).or_default().insert(value);
        }
    }
    let mut fills = Fills { fills: 0, mixed: 0 };
    for values in sources.values() {
        fills.fills += u32::try_from(values.len()).unwrap_or(u32::MAX);
        fills.mixed += u32::from(values.len() > 1);
    }
    fills
}

/// Free wells of one column.
struct Column {
    wells: Vec<Well>,
    untouched: bool,
}

/// The items value by value in columns: whole columns first, what remains of a value where it fits best.
pub(super) fn packed(
    plate: u32,
    items: &[&LayoutItem],
    options: &LayoutOptions,
    axis: usize,
    random: &mut Random,
) -> Result<Arrangement, LayoutError> {
    let free = free_wells(plate, items, options)?;
    let (controls, others) = by_freedom(items, options.edges);
    let (mut at_edge, _) = wells_for_controls(&free, controls.len());
    random.shuffle(&mut at_edge);
    let mut wells: Vec<Well> = items
        .iter()
        .map(|item| item.fixed.unwrap_or(Well::new(0, 0)))
        .collect();
    for (item, well) in controls.iter().zip(&at_edge) {
        wells[*item] = *well;
    }
    let rest = others
        .into_iter()
        .chain(controls.into_iter().skip(at_edge.len()));
    let mut columns = columns_of(&free.common, rest.clone().count(), random);
    for (item, well) in placed(items, rest, axis, &mut columns) {
        wells[item] = well;
    }
    Ok(Arrangement::new(
        options.format,
        options.edges,
        items,
        wells,
    ))
}

/// As many columns from the left as the items need, in a random order.
fn columns_of(wells: &[Well], items: usize, random: &mut Random) -> Vec<Column> {
    let mut by_column: BTreeMap<u8, Vec<Well>> = BTreeMap::new();
    for well in wells {
        by_column.entry(well.column).or_default().push(*well);
    }
    let mut room = 0;
    let mut columns: Vec<Column> = by_column
        .into_values()
        .take_while(|wells| {
            let needed = room < items;
            room += wells.len();
            needed
        })
        .map(|wells| Column {
            wells,
            untouched: true,
        })
        .collect();
    random.shuffle(&mut columns);
    columns
}

fn placed(
    items: &[&LayoutItem],
    of: impl Iterator<Item = usize>,
    axis: usize,
    columns: &mut [Column],
) -> Vec<(usize, Well)> {
    let mut by_value: BTreeMap<Option<u32>, Vec<usize>> = BTreeMap::new();
    for item in of {
        by_value
            .entry(items[item].groups[axis])
            .or_default()
            .push(item);
    }
    let without = by_value.remove(&None).unwrap_or_default();
    let mut values: Vec<Vec<usize>> = by_value.into_values().collect();
    // large values first; the sort is stable, so equal ones stay in the order of their numbers
    values.sort_by_key(|members| std::cmp::Reverse(members.len()));
    let mut places = Vec::new();
    let mut remainders = Vec::new();
    for mut members in values {
        while let Some(column) = fillable(columns, members.len()) {
            let number = column.wells.len();
            column.untouched = false;
            let filled = members.split_off(members.len() - number);
            places.extend(filled.into_iter().zip(column.wells.drain(..)));
        }
        remainders.push(members);
    }
    remainders.sort_by_key(|members| std::cmp::Reverse(members.len()));
    for mut members in remainders {
        while !members.is_empty() {
            let Some(column) = best_fit(columns, members.len()) else {
                return places;
            };
            column.untouched = false;
            let number = members.len().min(column.wells.len());
            let filled = members.split_off(members.len() - number);
            places.extend(filled.into_iter().zip(column.wells.drain(..number)));
        }
    }
    // what needs no source goes where room is, one by one, and so over many columns
    for item in without {
        let roomiest = columns.iter_mut().max_by_key(|column| column.wells.len());
        if let Some(well) = roomiest.and_then(|column| column.wells.pop()) {
            places.push((item, well));
        }
    }
    places
}

/// The largest untouched column that so many items fill.
fn fillable(columns: &mut [Column], items: usize) -> Option<&mut Column> {
    let fits = |column: &&mut Column| column.untouched && (1..=items).contains(&column.wells.len());
    columns
        .iter_mut()
        .filter(fits)
        .max_by_key(|column| column.wells.len())
}

/// The fullest column with room for all items; else the one with the most room.
fn best_fit(columns: &mut [Column], items: usize) -> Option<&mut Column> {
    let room = |column: &Column| column.wells.len();
    let open = (0..columns.len()).filter(|i| room(&columns[*i]) > 0);
    let with_room = open.clone().filter(|i| room(&columns[*i]) >= items);
    let fitting = with_room.min_by_key(|i| room(&columns[*i]));
    let chosen = fitting.or_else(|| open.max_by_key(|i| room(&columns[*i])))?;
    columns.get_mut(chosen)
}
