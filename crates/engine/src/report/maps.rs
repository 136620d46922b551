//! The maps of a job's report.

use enolattice_grid::Grid;
use enolattice_report::HeatMap;

use crate::report::ReportQuery;
use crate::{Axis, CellMap, EngineError, MapField};

/// Most maps of a report.
const MOST_MAPS: usize = 8;
/// Maps where the query names none.
const USUAL_MAPS: usize = 2;
/// Rows and columns that a page has room for.
const ROOM: [usize; 2] = [60, 36];
/// Most fields of a map that nobody asked for.
const MOST_FIELDS: usize = 20_000;

/// Pairs of axes that say most, first the pair that says what can be made.
const PREFERRED: [[Axis; 2]; 8] = [
    [Axis::Substrate, Axis::Electrophile],
    [Axis::Base, Axis::Solvent],
    [Axis::Substrate, Axis::Base],
    [Axis::Electrophile, Axis::Base],
    [Axis::Base, Axis::Temperature],
    [Axis::Substrate, Axis::Solvent],
    [Axis::Solvent, Axis::Temperature],
    [Axis::Substrate, Axis::Temperature],
];

/// The axes of each map: those asked for, else two pairs that have something to show.
///
/// # Errors
/// More maps than a page has room for, and a map of one axis.
pub(super) fn axes_of(query: &ReportQuery, grid: &Grid) -> Result<Vec<[Axis; 2]>, EngineError> {
    let fault = |field: &str, value: &str, reason: &str, remedy: &str| {
        Err(EngineError::field(
            field,
            value,
            "VALUE_OUT_OF_RANGE",
            reason,
            remedy,
        ))
    };
    if query.maps.len() > MOST_MAPS {
        let asked = query.maps.len().to_string();
        return fault(
            "maps",
            &asked,
            "a report has at most 8 maps",
            "ask for fewer",
        );
    }
    if let Some(i) = query
        .maps
        .iter()
        .position(|[rows, columns]| rows == columns)
    {
        let (field, axis) = (format!("maps[{i}].columns"), query.maps[i][1].name());
        return fault(
            &field,
            axis,
            "it is the axis of the rows",
            "choose two different axes",
        );
    }
    if !query.maps.is_empty() {
        return Ok(query.maps.clone());
    }
    let size = |axis: Axis| axis.labels(grid.campaign()).len();
    let shows = |pair: &[Axis; 2], least: usize| {
        let [rows, columns] = pair.map(size);
        rows.min(columns) >= least && rows.max(columns) > 1 && rows * columns <= MOST_FIELDS
    };
    let both: Vec<[Axis; 2]> = PREFERRED
        .into_iter()
        .filter(|pair| shows(pair, 2))
        .take(USUAL_MAPS)
        .collect();
    match both.is_empty() {
        // one axis alone varies: a map of one line
        true => Ok(PREFERRED
            .into_iter()
            .filter(|pair| shows(pair, 1))
            .take(1)
            .collect()),
        false => Ok(both),
    }
}

/// A map as the page shows it. Where what is made differs from field to field its best cell stands for it; where
/// conditions do, the mean over what is made.
pub(super) fn heat_map(map: &CellMap) -> HeatMap {
    let made = [Axis::Substrate, Axis::Electrophile];
    let of_products = made.contains(&map.rows.axis) || made.contains(&map.columns.axis);
    let value: fn(&MapField) -> [Option<f64>; 2] = match of_products {
        true => |field| [field.best_expected_yield, field.best_p_hit],
        false => |field| [field.mean_expected_yield, field.mean_p_hit],
    };
    let sizes = [map.rows.values.len(), map.columns.values.len()];
    let score =
        |row: usize, column: usize| map.field(row, column).and_then(|field| value(field)[0]);
    let rows = best(sizes[0], ROOM[0], &|row| {
        (0..sizes[1])
            .filter_map(|column| score(row, column))
            .fold(-1.0, f64::max)
    });
    let columns = best(sizes[1], ROOM[1], &|column| {
        (0..sizes[0])
            .filter_map(|row| score(row, column))
            .fold(-1.0, f64::max)
    });
    let values: Vec<[Option<f64>; 2]> = rows
        .iter()
        .flat_map(|row| columns.iter().map(move |column| (*row, *column)))
        .map(|(row, column)| map.field(row, column).map_or([None; 2], value))
        .collect();
    let words = |axis: Axis| axis.name().replace('_', " ");
    HeatMap {
        row_axis: words(map.rows.axis),
        column_axis: words(map.columns.axis),
        left_out: [sizes[0] - rows.len(), sizes[1] - columns.len()].map(|n| n as u64),
        expected_yield: values
            .iter()
            .map(|[expected_yield, _]| *expected_yield)
            .collect(),
        p_hit: values.iter().map(|[_, p_hit]| *p_hit).collect(),
        rows: rows
            .into_iter()
            .map(|row| map.rows.values[row].clone())
            .collect(),
        columns: columns
            .into_iter()
            .map(|column| map.columns.values[column].clone())
            .collect(),
        stands_for: if of_products { "best" } else { "mean" }.to_owned(),
    }
}

/// The best values of an axis that there is room for, in the axis's own order.
fn best(values: usize, room: usize, score: &dyn Fn(usize) -> f64) -> Vec<usize> {
    let mut order: Vec<usize> = (0..values).collect();
    if values > room {
        order.sort_by(|a, b| score(*b).total_cmp(&score(*a)).then(a.cmp(b)));
        order.truncate(room);
        order.sort_unstable();
    }
    order
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_best_stay_in_their_order() {
        let scores = [0.1, 0.9, 0.5, 0.9];
        assert_eq!(best(4, 3, &|i| scores[i]), [1, 2, 3]);
        assert_eq!(best(4, 2, &|i| scores[i]), [1, 3]);
        assert_eq!(best(4, 9, &|i| scores[i]), [0, 1, 2, 3]);
    }
}
