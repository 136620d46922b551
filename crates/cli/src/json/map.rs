//! A field of a map.

use enolattice_engine::CellMap;
use serde::Serialize;

/// One line of `rank --map --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct MapLine {
    row: String,
    column: String,
    cells: u64,
    unknown: u64,
    best_expected_yield: Option<f64>,
    mean_expected_yield: Option<f64>,
    best_p_hit: Option<f64>,
    mean_p_hit: Option<f64>,
    best_cell: Option<u64>,
}

impl MapLine {
    /// The fields of a map, row by row.
    pub(crate) fn all(map: &CellMap) -> impl Iterator<Item = MapLine> + '_ {
        let columns = map.columns.values.len();
        map.fields
            .iter()
            .enumerate()
            .map(move |(i, field)| MapLine {
                row: map.rows.values[i / columns].clone(),
                column: map.columns.values[i % columns].clone(),
                cells: field.cells,
                unknown: field.unknown,
                best_expected_yield: field.best_expected_yield,
                mean_expected_yield: field.mean_expected_yield,
                best_p_hit: field.best_p_hit,
                mean_p_hit: field.mean_p_hit,
                best_cell: field.best_cell,
            })
    }
}
