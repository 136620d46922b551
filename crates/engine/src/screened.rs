//! The screened cells of a job, with the filter of a question.

use std::sync::Arc;

use enolattice_grid::{CellDigits, CellId, Columns, Grid};
use enolattice_model::Score;
use enolattice_store::{JobId, Store};

use crate::EngineError;
use crate::engine::{Queue, job_id};
use crate::filter::{BoundFilter, Filter};
use crate::grids::Grids;

/// What is needed to look at the cells of jobs.
#[derive(Clone)]
pub(crate) struct Shelf {
    store: Arc<Store>,
    grids: Arc<Grids>,
}

/// The screened cells of a job, of which a filter keeps some.
pub(crate) struct Screened {
    pub(crate) store: Arc<Store>,
    pub(crate) job: JobId,
    pub(crate) grid: Arc<Grid>,
    pub(crate) filter: BoundFilter,
}

impl Queue {
    pub(crate) fn shelf(&self) -> Shelf {
        Shelf {
            store: self.store.clone(),
            grids: self.grids.clone(),
        }
    }
}

impl Shelf {
    /// The cells of a job that pass a filter. Takes time: the grid may have to be built.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::WrongState`], [`EngineError::Input`] where the filter cannot be read.
    pub(crate) fn screened(&self, job: &str, filter: &str) -> Result<Screened, EngineError> {
        let faulty = |fault: Box<enolattice_grid::InputError>| EngineError::Input(vec![*fault]);
        let job = job_id(job)?;
        let filter = Filter::read(filter).map_err(faulty)?;
        let grid = self.grids.of_record(&self.store.job(job)?)?;
        let filter = filter.bind(grid.campaign()).map_err(faulty)?;
        Ok(Screened {
            store: self.store.clone(),
            job,
            grid,
            filter,
        })
    }
}

impl Screened {
    /// Whether the filter keeps this cell.
    pub(crate) fn keeps(&self, cell: u64, score: &Score) -> bool {
        let digits = self.grid.digits(CellId(cell));
        digits.is_some_and(|digits| self.filter.passes(&digits, score))
    }

    /// One pass over all cells that the filter keeps, in one snapshot; the answer and the cells screened in it.
    ///
    /// Blocks are read in parallel, in any order: `take` and `merge` must not depend on it.
    ///
    /// # Errors
    /// [`EngineError::Store`].
    pub(crate) fn fold<T: Send>(
        &self,
        empty: impl Fn() -> T + Sync,
        take: impl Fn(&mut T, &Kept<'_>) + Sync,
        merge: impl Fn(T, T) -> T + Sync,
    ) -> Result<(T, u64), EngineError> {
        let of_block = |sum: &mut T, first_cell: u64, columns: &Columns| {
            let cells = first_cell..first_cell + columns.len() as u64;
            let walk = self.grid.lattice().walk(cells.clone());
            for (i, (cell, digits)) in cells.zip(walk).enumerate() {
                let keeps = self.filter.passes_all()
                    || self
                        .filter
                        .passes(&CellDigits::from_array(digits), &columns.score(i));
                if keeps {
                    let (expected_yield, p_hit) = (columns.expected_yield[i], columns.p_hit[i]);
                    take(
                        sum,
                        &Kept {
                            cell,
                            digits: &digits,
                            expected_yield,
                            p_hit,
                        },
                    );
                }
            }
        };
        Ok(self.store.fold(self.job, empty, of_block, merge)?)
    }
}

/// A cell that the filter keeps, with its scores as they are stored: in steps of 1/65534, 65535 for unknown.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Kept<'d> {
    pub(crate) cell: u64,
    pub(crate) digits: &'d [u32; 13],
    pub(crate) expected_yield: u16,
    pub(crate) p_hit: u16,
}

/// Yields and p_hit are stored in steps of 1/65534; 65535 stands for unknown.
pub(crate) const STEPS: u16 = 65_534;
