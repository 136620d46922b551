//! Finds the rows of a page in the blocks of a job.
//!
//! Blocks are read in parallel, a few at a time, those that can hold the best
//! rows first; what is kept in between is bounded by the page, not by the job.

use std::collections::HashMap;

use enolattice_grid::Columns;
use enolattice_model::Score;
use rayon::prelude::*;
use sled::IVec;

use crate::block;
use crate::database::Database;
use crate::index::{Row, Summary};
use crate::{BestPer, Filter, JobId, Order, StoreError};

/// Blocks read between two looks at what was found.
const BLOCKS_AT_ONCE: usize = 64;
/// Rows of a page whose scores one thread looks up.
const ROWS_AT_ONCE: usize = 32;
/// Rows skipped by finding and dropping them; more are first counted by key.
const SKIP_BY_DROPPING: u64 = 16_384;
/// Number of keys.
const KEYS: usize = 1 << 16;

/// Reads the blocks of one job for one ranking.
pub(crate) struct Scan<'a> {
    pub(crate) database: &'a Database,
    pub(crate) job: JobId,
    /// Summaries of the blocks, by first cell.
    pub(crate) blocks: &'a [Summary],
    pub(crate) order: Order,
    pub(crate) filter: Option<Filter<'a>>,
}

/// Rows of a page.
#[derive(Debug, Default)]
pub(crate) struct Found {
    /// Rows, best first.
    pub(crate) rows: Vec<Row>,
    /// Rows of the whole ranking.
    pub(crate) total: u64,
}

impl Scan<'_> {
    /// The `limit` rows that follow `floor` after `skip` others.
    pub(crate) fn first(
        &self,
        floor: Option<Row>,
        skip: u64,
        limit: usize,
        known_total: Option<u64>,
    ) -> Result<Found, StoreError> {
        let total = match (known_total, self.filter) {
            (Some(total), _) => Some(total),
            (None, None) => Some(self.blocks.iter().map(|block| u64::from(block.cells)).sum()),
            (None, Some(_)) => None,
        };
        if skip > SKIP_BY_DROPPING {
            let total = total.map_or_else(|| self.count(), Ok)?;
            let rows = match self.seek(floor, skip)? {
                Some(floor) => self.top(Some(floor), limit, false)?.rows,
                None => Vec::new(),
            };
            return Ok(Found { rows, total });
        }
        let mut found = self.top(
            floor,
            (skip as usize).saturating_add(limit),
            total.is_none(),
        )?;
        found.rows.drain(..found.rows.len().min(skip as usize));
        found.total = total.unwrap_or(found.total);
        Ok(found)
    }

    /// The first `wanted` rows after `floor`; if `count`, every block is read and rows are counted.
    fn top(&self, floor: Option<Row>, wanted: usize, count: bool) -> Result<Found, StoreError> {
        let possible = |block| Some((Summary::first_possible(block, self.order, floor)?, block));
        let mut candidates: Vec<(Row, &Summary)> =
            self.blocks.iter().filter_map(possible).collect();
        candidates.sort_by_key(|(row, _)| *row);
        let mut found = Found::default();
        let mut last_wanted = None;
        for some in candidates.chunks(BLOCKS_AT_ONCE) {
            let hopeless = last_wanted.is_some_and(|last| some[0].0 > last) || wanted == 0;
            if hopeless && !count {
                break;
            }
            let read = |(_, block): &(Row, &Summary)| self.rows_between(block, floor, last_wanted);
            let chunk: Vec<(u64, Vec<Row>)> =
                some.par_iter().map(read).collect::<Result<_, _>>()?;
            for (rows_seen, rows) in chunk {
                found.total += rows_seen;
                found.rows.extend(rows);
            }
            if found.rows.len() > wanted {
                if wanted > 0 {
                    found.rows.select_nth_unstable(wanted - 1);
                }
                found.rows.truncate(wanted);
            }
            if found.rows.len() == wanted {
                last_wanted = found.rows.iter().max().copied();
            }
        }
        found.rows.sort_unstable();
        Ok(found)
    }

    /// Rows of a block after `floor` and not after `last`, and how many rows it has in all.
    fn rows_between(
        &self,
        block: &Summary,
        floor: Option<Row>,
        last: Option<Row>,
    ) -> Result<(u64, Vec<Row>), StoreError> {
        let mut seen = 0;
        let mut rows = Vec::new();
        self.visit(block, |row| {
            seen += 1;
            if floor.is_none_or(|floor| row > floor) && last.is_none_or(|last| row <= last) {
                rows.push(row);
            }
        })?;
        Ok((seen, rows))
    }

    /// Rows of the whole ranking.
    fn count(&self) -> Result<u64, StoreError> {
        let rows = |block| {
            self.rows_between(block, None, Some((0, 0)))
                .map(|(seen, _)| seen)
        };
        self.blocks
            .par_iter()
            .map(rows)
            .try_reduce(|| 0, |a, b| Ok(a + b))
    }

    /// The row that `skip` > 0 rows after `floor` end with; `None` where there are fewer.
    fn seek(&self, floor: Option<Row>, skip: u64) -> Result<Option<Row>, StoreError> {
        let after = |row: Row| floor.is_none_or(|floor| row > floor);
        let mut left = skip;
        let Some(key) = self.rows_by_key(after)?.iter().position(|rows| {
            let ends_here = left <= *rows;
            left -= if ends_here { 0 } else { *rows };
            ends_here
        }) else {
            return Ok(None);
        };
        for some in self.blocks.chunks(BLOCKS_AT_ONCE) {
            let ties = |block: &Summary| {
                let mut cells = Vec::new();
                self.visit(block, |row| {
                    if usize::from(row.0) == key && after(row) {
                        cells.push(row.1);
                    }
                })?;
                Ok(cells)
            };
            let chunk: Vec<Vec<u64>> = some
                .par_iter()
                .map(ties)
                .collect::<Result<_, StoreError>>()?;
            for cells in chunk {
                match cells.get(left as usize - 1) {
                    Some(cell) => return Ok(Some((key as u16, *cell))),
                    None => left -= cells.len() as u64,
                }
            }
        }
        Ok(None)
    }

    /// How many rows have each key.
    pub(crate) fn rows_by_key(
        &self,
        keep: impl Fn(Row) -> bool + Sync,
    ) -> Result<Vec<u64>, StoreError> {
        let count = |blocks: &[Summary]| {
            let mut counts = vec![0u64; KEYS];
            for block in blocks {
                self.visit(block, |row| {
                    counts[usize::from(row.0)] += u64::from(keep(row))
                })?;
            }
            Ok(counts)
        };
        let add = |mut a: Vec<u64>, b: Vec<u64>| {
            a.iter_mut().zip(b).for_each(|(a, b)| *a += b);
            Ok(a)
        };
        self.blocks
            .par_chunks(BLOCKS_AT_ONCE)
            .map(count)
            .try_reduce(|| vec![0; KEYS], add)
    }

    /// Of the best rows of all groups, the `limit` that follow `floor` after `skip` others.
    pub(crate) fn best_of_groups(
        &self,
        group: BestPer<'_>,
        floor: Option<Row>,
        skip: u64,
        limit: usize,
    ) -> Result<Found, StoreError> {
        let best_in = |blocks: &[Summary]| {
            let mut best = HashMap::new();
            for block in blocks {
                self.visit(block, |row| keep_best(&mut best, group(row.1), row))?;
            }
            Ok(best)
        };
        let merge = |mut a: HashMap<u32, Row>, b: HashMap<u32, Row>| {
            b.into_iter()
                .for_each(|(group, row)| keep_best(&mut a, group, row));
            Ok(a)
        };
        let chunks = self.blocks.par_chunks(BLOCKS_AT_ONCE);
        let best = chunks.map(best_in).try_reduce(HashMap::new, merge)?;
        let mut rows: Vec<Row> = best.into_values().collect();
        rows.sort_unstable();
        let total = rows.len() as u64;
        let after = rows
            .into_iter()
            .filter(|row| floor.is_none_or(|floor| *row > floor));
        let skip = usize::try_from(skip).unwrap_or(usize::MAX);
        Ok(Found {
            rows: after.skip(skip).take(limit).collect(),
            total,
        })
    }

    /// Adds the scores of rows.
    pub(crate) fn with_scores(&self, rows: &[Row]) -> Result<Vec<(u64, Score)>, StoreError> {
        // in the order of the cells, so that each block is read once or little more
        let mut cells: Vec<(u64, usize)> = rows.iter().map(|row| row.1).zip(0..).collect();
        cells.sort_unstable();
        let scored = |cells: &[(u64, usize)]| {
            let mut last: Option<(usize, IVec)> = None;
            let mut scored = Vec::with_capacity(cells.len());
            for (cell, place) in cells {
                let at = self
                    .blocks
                    .partition_point(|block| block.first_cell <= *cell)
                    - 1;
                let block = &self.blocks[at];
                let value = match last.take() {
                    Some((known, value)) if known == at => value,
                    _ => checked_value(self.database, self.job, block)?,
                };
                let i = (*cell - block.first_cell) as usize;
                let score = Columns::score_in(block::columns_bytes(&value), i)
                    .map_err(damaged(self.job, block))?;
                scored.push((*place, *cell, score));
                last = Some((at, value));
            }
            Ok(scored)
        };
        let chunks: Vec<Vec<(usize, u64, Score)>> = cells
            .par_chunks(ROWS_AT_ONCE)
            .map(scored)
            .collect::<Result<_, StoreError>>()?;
        let mut scored: Vec<(usize, u64, Score)> = chunks.into_iter().flatten().collect();
        scored.sort_unstable_by_key(|(place, ..)| *place);
        let scored = scored.into_iter();
        Ok(scored.map(|(_, cell, score)| (cell, score)).collect())
    }

    /// Calls `take` with every row of a block that passes the filter.
    pub(crate) fn visit(
        &self,
        block: &Summary,
        mut take: impl FnMut(Row),
    ) -> Result<(), StoreError> {
        let columns = self.columns(block)?;
        for i in 0..columns.len() {
            let cell = block.first_cell + i as u64;
            if self
                .filter
                .is_none_or(|filter| filter(cell, &columns.score(i)))
            {
                take((self.order.key(&columns, i), cell));
            }
        }
        Ok(())
    }

    fn columns(&self, summary: &Summary) -> Result<Columns, StoreError> {
        read_block(self.database, self.job, summary)
    }
}

/// Reads and checks a block that the index knows.
pub(crate) fn read_block(
    database: &Database,
    job: JobId,
    summary: &Summary,
) -> Result<Columns, StoreError> {
    let key = block::key(job, summary.block);
    let stored = database.get(&key).and_then(|value| {
        let value = value.ok_or("it is gone")?;
        block::decode(&key, &value)
    });
    stored
        .map(|stored| stored.columns)
        .map_err(damaged(job, summary))
}

/// The value of a block that the index knows, its checksum checked.
fn checked_value(database: &Database, job: JobId, summary: &Summary) -> Result<IVec, StoreError> {
    let key = block::key(job, summary.block);
    let value = database.get(&key).and_then(|value| {
        let value = value.ok_or("it is gone")?;
        block::checked_columns(&key, &value)?;
        Ok(value)
    });
    value.map_err(damaged(job, summary))
}

fn damaged(job: JobId, summary: &Summary) -> impl Fn(String) -> StoreError {
    let block = summary.block;
    move |reason| StoreError::BlockDamaged { job, block, reason }
}

fn keep_best(best: &mut HashMap<u32, Row>, group: u32, row: Row) {
    best.entry(group)
        .and_modify(|kept| *kept = row.min(*kept))
        .or_insert(row);
}
