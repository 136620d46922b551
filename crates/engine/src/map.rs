//! Maps: the cells of a job over two axes.

use enolattice_grid::Campaign;

use crate::engine::blocking;
use crate::screened::{Kept, STEPS};
use crate::{Axis, Engine, EngineError};

/// Most fields of a map.
const MOST_FIELDS: u64 = 50_000;

/// A question for a map.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct MapQuery {
    /// Job.
    pub job: String,
    /// Axis whose values are the rows.
    pub rows: Axis,
    /// Axis whose values are the columns.
    pub columns: Axis,
    /// Filter (AIP-160 subset); empty: all cells.
    pub filter: String,
}

/// The cells of a job over two axes: of each pair of values how many cells there are and how they score.
#[derive(Clone, Debug, PartialEq)]
pub struct CellMap {
    /// Rows.
    pub rows: MapAxis,
    /// Columns.
    pub columns: MapAxis,
    /// Fields, row by row.
    pub fields: Vec<MapField>,
    /// Cells that pass the filter in this snapshot.
    pub total: u64,
    /// Cells screened in this snapshot.
    pub cells_done: u64,
}

/// An axis of a map.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct MapAxis {
    /// Axis.
    pub axis: Axis,
    /// Its values in the campaign's order, as they are written: names, and numbers with their units.
    pub values: Vec<String>,
}

/// What the cells of one field come to. Means are over the cells whose number is known.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct MapField {
    /// Cells.
    pub cells: u64,
    /// Cells of unknown yield.
    pub unknown: u64,
    /// Greatest expected yield; none where none is known.
    pub best_expected_yield: Option<f64>,
    /// Mean expected yield; none where none is known.
    pub mean_expected_yield: Option<f64>,
    /// Greatest probability of a hit; none where none is known.
    pub best_p_hit: Option<f64>,
    /// Mean probability of a hit; none where none is known.
    pub mean_p_hit: Option<f64>,
    /// The cell of the greatest expected yield, of equals the first; none where none is known.
    pub best_cell: Option<u64>,
}

impl CellMap {
    /// The field of a row and a column, counted from 0.
    pub fn field(&self, row: usize, column: usize) -> Option<&MapField> {
        let columns = self.columns.values.len();
        let there = row < self.rows.values.len() && column < columns;
        there.then(|| self.fields.get(row * columns + column))?
    }
}

impl Engine {
    /// The cells of a job over two axes, also while it runs; at most 50,000 fields.
    ///
    /// Reads every stored score once. All sums are of whole numbers, so the answer does not depend on the number
    /// of threads.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::Input`] where the filter cannot be read, the axes are the same or
    /// the map is too large, [`EngineError::Store`].
    pub async fn map_cells(&self, query: MapQuery) -> Result<CellMap, EngineError> {
        let shelf = self.queue()?.shelf();
        blocking(move || {
            let screened = shelf.screened(&query.job, &query.filter)?;
            let sizes = screened.grid.lattice().sizes();
            let (rows, columns) = (query.rows.index(), query.columns.index());
            let shape = [sizes[rows], sizes[columns]];
            check(&query, shape)?;
            let take = |sums: &mut Vec<Sums>, kept: &Kept<'_>| {
                let field =
                    kept.digits[rows] as usize * shape[1] as usize + kept.digits[columns] as usize;
                sums[field].take(kept);
            };
            let fields = shape.map(|values| values as usize).iter().product();
            let (sums, cells_done) =
                screened.fold(|| vec![Sums::default(); fields], take, merged)?;
            Ok(CellMap {
                rows: MapAxis::of(query.rows, screened.grid.campaign()),
                columns: MapAxis::of(query.columns, screened.grid.campaign()),
                total: sums.iter().map(|sums| sums.cells).sum(),
                fields: sums.iter().map(MapField::from).collect(),
                cells_done,
            })
        })
        .await
    }
}

/// Refuses a map of one axis, and one that nobody could read.
fn check(query: &MapQuery, [rows, columns]: [u32; 2]) -> Result<(), EngineError> {
    let fields = u64::from(rows) * u64::from(columns);
    let (reason, remedy) = match () {
        () if query.rows == query.columns => (
            "it is the axis of the rows".to_owned(),
            "choose two different axes".to_owned(),
        ),
        () if fields > MOST_FIELDS => (
            format!(
                "a map of {rows} rows ({}) and {columns} columns ({}) has {fields} fields",
                query.rows.name(),
                query.columns.name()
            ),
            format!("choose shorter axes: a map has at most {MOST_FIELDS} fields"),
        ),
        () => return Ok(()),
    };
    Err(EngineError::field(
        "columns",
        query.columns.name(),
        "VALUE_OUT_OF_RANGE",
        &reason,
        &remedy,
    ))
}

impl MapAxis {
    fn of(axis: Axis, campaign: &Campaign) -> MapAxis {
        MapAxis {
            axis,
            values: axis.labels(campaign),
        }
    }
}

/// Sums of one field, of the codes as they are stored.
#[derive(Clone, Debug, Default)]
struct Sums {
    cells: u64,
    expected_yield: Sum,
    p_hit: Sum,
    /// Code and number of the best cell.
    best: Option<(u16, u64)>,
}

/// The sum of one column.
#[derive(Clone, Copy, Debug, Default)]
struct Sum {
    known: u64,
    sum: u64,
    greatest: u16,
}

impl Sums {
    fn take(&mut self, kept: &Kept<'_>) {
        self.cells += 1;
        self.expected_yield.take(kept.expected_yield);
        self.p_hit.take(kept.p_hit);
        if kept.expected_yield <= STEPS {
            self.take_best((kept.expected_yield, kept.cell));
        }
    }

    fn take_best(&mut self, (code, cell): (u16, u64)) {
        let is_better = |(best, first): (u16, u64)| code > best || code == best && cell < first;
        if self.best.is_none_or(is_better) {
            self.best = Some((code, cell));
        }
    }
}

impl Sum {
    fn take(&mut self, code: u16) {
        if code <= STEPS {
            self.known += 1;
            self.sum += u64::from(code);
            self.greatest = self.greatest.max(code);
        }
    }

    fn add(&mut self, other: Sum) {
        self.known += other.known;
        self.sum += other.sum;
        self.greatest = self.greatest.max(other.greatest);
    }

    fn best(self) -> Option<f64> {
        (self.known > 0).then(|| f64::from(self.greatest) / f64::from(STEPS))
    }

    fn mean(self) -> Option<f64> {
        (self.known > 0).then(|| self.sum as f64 / (f64::from(STEPS) * self.known as f64))
    }
}

fn merged(mut all: Vec<Sums>, more: Vec<Sums>) -> Vec<Sums> {
    for (sums, more) in all.iter_mut().zip(more) {
        sums.cells += more.cells;
        sums.expected_yield.add(more.expected_yield);
        sums.p_hit.add(more.p_hit);
        if let Some(best) = more.best {
            sums.take_best(best);
        }
    }
    all
}

impl From<&Sums> for MapField {
    fn from(sums: &Sums) -> MapField {
        MapField {
            cells: sums.cells,
            unknown: sums.cells - sums.expected_yield.known,
            best_expected_yield: sums.expected_yield.best(),
            mean_expected_yield: sums.expected_yield.mean(),
            best_p_hit: sums.p_hit.best(),
            mean_p_hit: sums.p_hit.mean(),
            best_cell: sums.best.map(|(_, cell)| cell),
        }
    }
}
