//! Blocks of a job: committed once, acknowledged together, read back.

use std::collections::BTreeSet;
use std::sync::Arc;

use enolattice_grid::{BlockId, Columns};
use enolattice_model::{Fingerprint, Score};

use crate::block::{self, StoredBlock};
use crate::scan::read_block;
use crate::store::{Entry, lock};
use crate::{JobId, JobRecord, Store, StoreError};

/// What [`Store::commit_block`] did.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Commit {
    /// The block was stored now.
    Stored,
    /// The same block with the same scores was there.
    AlreadyThere,
}

/// How far a job is; counted from the blocks themselves.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Progress {
    /// Blocks committed.
    pub blocks: u64,
    /// Cells committed.
    pub cells: u64,
    /// Cells acknowledged: they survive a power cut, and rankings show them.
    pub cells_acknowledged: u64,
    /// Highest expected yield committed.
    pub best_yield: Option<f64>,
}

impl Store {
    /// Forgets the blocks of a job, to be scored anew by another model.
    ///
    /// The blocks go before the record changes, so that a crash between the two never leaves
    /// blocks of one model under the name of another.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::Stopped`], [`StoreError::Io`].
    pub fn restart(
        &self,
        job: JobId,
        model_fingerprint: Fingerprint,
    ) -> Result<JobRecord, StoreError> {
        let entry = self.entry(job)?;
        let mut record = lock(&entry.record);
        let mut index = lock(&entry.index);
        // Out of the index first: where the disk fails halfway, a job that ends then must not claim those that are gone.
        let emptied = index.emptied();
        let dropped = std::mem::replace(&mut *index, emptied);
        for block in dropped.blocks.keys() {
            self.database.remove(&block::key(job, *block))?;
        }
        self.database.sync()?;
        let generation = record.generation + 1;
        let changed = JobRecord {
            model_fingerprint,
            generation,
            ..record.clone()
        };
        self.journal.write(&changed)?;
        *record = changed.clone();
        Ok(changed)
    }

    /// Stores a block once. Not yet safe from a power cut: see [`Store::acknowledge`].
    ///
    /// # Errors
    /// [`StoreError::BlockDiffers`], [`StoreError::Stopped`], [`StoreError::JobUnknown`].
    pub fn commit_block(
        &self,
        job: JobId,
        block: BlockId,
        first_cell: u64,
        columns: &Columns,
    ) -> Result<Commit, StoreError> {
        let entry = self.entry(job)?;
        let key = block::key(job, block);
        let bytes = columns.to_bytes();
        let stored = |commit| StoredBlock {
            commit,
            first_cell,
            columns: columns.clone(),
        };
        // Commit numbers must appear in the index in their order, or a page could miss a block of its snapshot.
        let mut index = lock(&entry.index);
        let commit = index.last_commit + 1;
        let value = block::encode(&key, commit, first_cell, columns.len() as u32, &bytes);
        match self.database.put_once(&key, &value)? {
            Some(there) if index.blocks.contains_key(&block) => {
                return match block::columns_bytes(&there) == bytes {
                    true => Ok(Commit::AlreadyThere),
                    false => Err(StoreError::BlockDiffers { job, block }),
                };
            }
            // After damage, a get may find what the scan at opening did not.
            Some(_) => self.database.replace(&key, &value)?,
            None => {}
        }
        index.add(block, &stored(commit));
        Ok(Commit::Stored)
    }

    /// Flushes and syncs: every block committed before the call survives a power cut.
    ///
    /// # Errors
    /// [`StoreError::Stopped`] from the first failed write on.
    pub fn acknowledge(&self) -> Result<(), StoreError> {
        let mark = |(_, entry): (JobId, Arc<Entry>)| {
            let mark = lock(&entry.index).mark();
            (entry, mark)
        };
        let marks: Vec<_> = self.entries().into_iter().map(mark).collect();
        self.database.sync()?;
        marks
            .into_iter()
            .for_each(|(entry, mark)| lock(&entry.index).acknowledge(mark));
        Ok(())
    }

    /// How far a job is.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`].
    pub fn progress(&self, job: JobId) -> Result<Progress, StoreError> {
        Ok(lock(&self.entry(job)?.index).progress())
    }

    /// The blocks that are committed.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`].
    pub fn committed_blocks(&self, job: JobId) -> Result<BTreeSet<BlockId>, StoreError> {
        Ok(lock(&self.entry(job)?.index)
            .blocks
            .keys()
            .copied()
            .collect())
    }

    /// A committed block; `None` where it is not.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::BlockDamaged`].
    pub fn block(&self, job: JobId, block: BlockId) -> Result<Option<Columns>, StoreError> {
        let summary = lock(&self.entry(job)?.index).blocks.get(&block).cloned();
        summary
            .map(|summary| read_block(&self.database, job, &summary))
            .transpose()
    }

    /// The stored score of one cell; `None` where its block is not committed.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::BlockDamaged`].
    pub fn score(&self, job: JobId, cell: u64) -> Result<Option<Score>, StoreError> {
        let summary = lock(&self.entry(job)?.index).block_of(cell).cloned();
        let Some(summary) = summary else {
            return Ok(None);
        };
        let columns = read_block(&self.database, job, &summary)?;
        Ok(Some(columns.score((cell - summary.first_cell) as usize)))
    }
}
