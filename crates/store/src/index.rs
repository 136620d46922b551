//! What is kept in memory of a job's blocks, derived from the blocks themselves.

use std::collections::BTreeMap;

use enolattice_grid::BlockId;

use crate::block::StoredBlock;
use crate::{Order, Progress};

/// A row of a ranking: sort key and cell. Smaller comes first.
pub(crate) type Row = (u16, u64);

/// What a ranking must know of a block to pass it over.
#[derive(Clone, Debug)]
pub(crate) struct Summary {
    /// Block.
    pub(crate) block: BlockId,
    /// Commit number in the job.
    pub(crate) commit: u64,
    /// Number of its first cell.
    pub(crate) first_cell: u64,
    /// Cells.
    pub(crate) cells: u32,
    /// Best key in each order.
    best: [u16; 4],
    /// Which of 64 buckets of keys have cells, in each order.
    occupied: [u64; 4],
}

impl Summary {
    /// The summary of a block.
    pub(crate) fn of(block: BlockId, stored: &StoredBlock) -> Summary {
        let columns = &stored.columns;
        let mut summary = Summary {
            block,
            commit: stored.commit,
            first_cell: stored.first_cell,
            cells: columns.len() as u32,
            best: [u16::MAX; 4],
            occupied: [0; 4],
        };
        for order in Order::ALL {
            let (mut best, mut occupied) = (u16::MAX, 0u64);
            for key in (0..columns.len()).map(|i| order.key(columns, i)) {
                best = best.min(key);
                occupied |= 1 << (key >> order.bucket_bits());
            }
            summary.best[order.number()] = best;
            summary.occupied[order.number()] = occupied;
        }
        summary
    }

    /// A row that no row of this block after `floor` comes before; `None` where the block has none after it.
    pub(crate) fn first_possible(&self, order: Order, floor: Option<Row>) -> Option<Row> {
        let best = (self.best[order.number()], self.first_cell);
        let Some(floor) = floor.filter(|floor| *floor >= best) else {
            return Some(best);
        };
        let from = floor.0 >> order.bucket_bits();
        let later = u64::MAX.checked_shl(u32::from(from))? & self.occupied[order.number()];
        if later == 0 {
            return None;
        }
        let bucket_start = (later.trailing_zeros() as u16) << order.bucket_bits();
        Some((bucket_start.max(floor.0), self.first_cell))
    }
}

/// A job's blocks in memory.
#[derive(Debug, Default)]
pub(crate) struct JobIndex {
    /// Summaries in the order of blocks.
    pub(crate) blocks: BTreeMap<BlockId, Summary>,
    /// Last commit number given.
    pub(crate) last_commit: u64,
    /// Last commit number that survives a power cut.
    pub(crate) acknowledged: u64,
    cells: u64,
    cells_acknowledged: u64,
    best_yield: Option<f64>,
}

impl JobIndex {
    /// Adds a committed block.
    pub(crate) fn add(&mut self, block: BlockId, stored: &StoredBlock) {
        let summary = Summary::of(block, stored);
        self.cells += u64::from(summary.cells);
        self.last_commit = self.last_commit.max(summary.commit);
        self.blocks.insert(block, summary);
        let best = (0..stored.columns.len())
            .max_by_key(|i| std::cmp::Reverse(Order::ExpectedYield.key(&stored.columns, *i)));
        let best = best.and_then(|i| stored.columns.score(i).expected_yield);
        self.best_yield = self.best_yield.into_iter().chain(best).reduce(f64::max);
    }

    /// How many commits and cells there are, to be acknowledged once they are synced.
    pub(crate) fn mark(&self) -> (u64, u64) {
        (self.last_commit, self.cells)
    }

    /// Notes that everything up to `mark` is synced.
    pub(crate) fn acknowledge(&mut self, (commit, cells): (u64, u64)) {
        if commit > self.acknowledged {
            (self.acknowledged, self.cells_acknowledged) = (commit, cells);
        }
    }

    /// Blocks that survive a power cut.
    pub(crate) fn blocks_acknowledged(&self) -> u64 {
        let safe = |summary: &&Summary| summary.commit <= self.acknowledged;
        self.blocks.values().filter(safe).count() as u64
    }

    /// The index after all blocks were removed; commit numbers go on, so that none is given twice.
    pub(crate) fn emptied(&self) -> JobIndex {
        let (last_commit, acknowledged) = (self.last_commit, self.last_commit);
        JobIndex {
            last_commit,
            acknowledged,
            ..JobIndex::default()
        }
    }

    /// How far the job is.
    pub(crate) fn progress(&self) -> Progress {
        Progress {
            blocks: self.blocks.len() as u64,
            cells: self.cells,
            cells_acknowledged: self.cells_acknowledged,
            best_yield: self.best_yield,
        }
    }

    /// Summaries of the blocks that a ranking with this snapshot sees, by first cell.
    pub(crate) fn seen_by(&self, snapshot: u64) -> Vec<Summary> {
        let seen = self
            .blocks
            .values()
            .filter(|summary| summary.commit <= snapshot);
        let mut seen: Vec<Summary> = seen.cloned().collect();
        seen.sort_by_key(|summary| summary.first_cell);
        seen
    }

    /// The block that holds a cell.
    pub(crate) fn block_of(&self, cell: u64) -> Option<&Summary> {
        let holds = |summary: &&Summary| {
            (summary.first_cell..summary.first_cell + u64::from(summary.cells)).contains(&cell)
        };
        self.blocks.values().find(holds)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_grid::Columns;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn no_row_comes_before_the_first_possible(
            yields in prop::collection::vec(any::<u16>(), 1..50),
            selectivities in prop::collection::vec(any::<u8>(), 50),
            floor in prop::option::of((any::<u16>(), 90..160u64)),
        ) {
            let n = yields.len();
            let columns = Columns {
                p_hit: yields.iter().rev().copied().collect(),
                expected_yield: yields,
                selectivity: selectivities[..n].to_vec(),
                feasibility: selectivities[50 - n..].to_vec(),
                largest_loss: vec![0; n],
                cautions: vec![0; n],
            };
            let stored = StoredBlock { commit: 1, first_cell: 100, columns };
            let summary = Summary::of(BlockId { segment: 0, index: 0 }, &stored);
            for order in Order::ALL {
                let rows = (0..n).map(|i| (order.key(&stored.columns, i), 100 + i as u64));
                let first = rows.filter(|row| floor.is_none_or(|floor| *row > floor)).min();
                let possible = summary.first_possible(order, floor);
                prop_assert!(first.is_none() || possible.is_some_and(|row| row <= first.unwrap()));
            }
        }
    }
}
