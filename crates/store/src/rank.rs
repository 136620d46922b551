//! Pages of a job's cells in an order.

use enolattice_model::Score;

use crate::Order;

/// Which cells a ranking keeps, by cell number and score.
pub type Filter<'a> = &'a (dyn Fn(u64, &Score) -> bool + Sync);

/// The group of a cell, of which a ranking keeps only the best.
pub type BestPer<'a> = &'a (dyn Fn(u64) -> u32 + Sync);

/// Where a page ended; with [`crate::PageToken`] it goes to the client and comes back.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Position {
    /// Sort key of the last row; 0 is the best possible.
    pub key: u16,
    /// Cell of the last row.
    pub cell: u64,
    /// Rows up to and including the last row.
    pub passed: u64,
    /// Commit number of the last block that the ranking sees.
    pub snapshot: u64,
    /// Rows of the whole ranking.
    pub total: u64,
    /// Generation of the job's blocks.
    pub generation: u32,
}

/// A question for a page of a ranking.
#[derive(Clone, Copy)]
pub struct RankRequest<'a> {
    /// Order.
    pub order: Order,
    /// End of the page before; `None`: the first page.
    pub after: Option<Position>,
    /// Rows to skip before the page.
    pub skip: u64,
    /// Rows wanted at most; 0 gives only the total.
    pub limit: usize,
    /// Which cells to keep; `None`: all.
    pub filter: Option<Filter<'a>>,
    /// Keep only the best cell of each group; `None`: all cells.
    pub best_per: Option<BestPer<'a>>,
}

/// A page of a ranking. It shows acknowledged blocks only, so that a page
/// token stays good when the machine loses power.
#[derive(Clone, Debug, PartialEq)]
pub struct Ranking {
    /// Cells with their scores, best first.
    pub rows: Vec<(u64, Score)>,
    /// Rank of the first row, from 1.
    pub first_rank: u64,
    /// Rows of the whole ranking in this snapshot.
    pub total: u64,
    /// Cells of the blocks in this snapshot.
    pub cells: u64,
    /// End of this page; `None` where no row follows.
    pub next: Option<Position>,
}
