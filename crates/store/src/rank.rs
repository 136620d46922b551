//! Pages of a job's cells in an order.

use std::sync::Arc;

use enolattice_model::Score;

use crate::index::Summary;
use crate::rank_order::RankOrder;
use crate::scan::{Found, Scan};
use crate::{Order, StoreError};

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

impl RankRequest<'_> {
    /// Whether the rows are all cells in their default order.
    pub(crate) fn is_plain(&self) -> bool {
        self.order == Order::default() && self.filter.is_none() && self.best_per.is_none()
    }
}

/// What a job has to be ranked: its blocks in the snapshot asked for.
pub(crate) struct View {
    /// Summaries of the blocks, by first cell.
    pub(crate) blocks: Arc<Vec<Summary>>,
    /// Commit number of the last block that may be seen.
    pub(crate) snapshot: u64,
    /// Generation of the job's blocks.
    pub(crate) generation: u32,
    /// All rows in their default order, where they were written.
    pub(crate) ordered: Option<Arc<RankOrder>>,
}

/// The rows of a page from the file of rows, where there is a sound one.
fn from_order(view: &View, request: &RankRequest<'_>, passed: u64) -> Option<Found> {
    let ordered = view.ordered.as_ref()?;
    let first = passed.saturating_add(request.skip);
    match ordered.rows(first, request.limit) {
        Ok(rows) => Some(Found {
            rows,
            total: ordered.stamp.rows,
        }),
        Err(reason) => {
            tracing::warn!(
                reason,
                "a file of rows cannot be read; its blocks are searched"
            );
            None
        }
    }
}

/// A page of a view's ranking.
pub(crate) fn page(
    scan: &Scan<'_>,
    view: &View,
    request: &RankRequest<'_>,
) -> Result<Ranking, StoreError> {
    let passed = request.after.map_or(0, |after| after.passed);
    let floor = request.after.map(|after| (after.key, after.cell));
    let known_total = request.after.map(|after| after.total);
    let found = match (from_order(view, request, passed), request.best_per) {
        (Some(found), _) => found,
        (None, Some(group)) => scan.best_of_groups(group, floor, request.skip, request.limit)?,
        (None, None) => scan.first(floor, request.skip, request.limit, known_total)?,
    };
    let first_rank = passed.saturating_add(request.skip).saturating_add(1);
    let last_rank = passed
        .saturating_add(request.skip)
        .saturating_add(found.rows.len() as u64);
    let next = found
        .rows
        .last()
        .filter(|_| last_rank < found.total)
        .map(|(key, cell)| Position {
            key: *key,
            cell: *cell,
            passed: last_rank,
            snapshot: view.snapshot,
            total: found.total,
            generation: view.generation,
        });
    Ok(Ranking {
        rows: scan.with_scores(&found.rows)?,
        first_rank,
        total: found.total,
        cells: view
            .blocks
            .iter()
            .map(|summary| u64::from(summary.cells))
            .sum(),
        next,
    })
}
