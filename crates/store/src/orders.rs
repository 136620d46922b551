//! Files of the rows of ended jobs in their default order: written once, opened with the store, never needed.

use std::fs;
use std::io;
use std::path::{Path, PathBuf};
use std::sync::Arc;
use std::sync::atomic::AtomicBool;

use crate::index::Summary;
use crate::rank_order::{self, RankOrder, Stamp};
use crate::scan::Scan;
use crate::store::{Entry, lock};
use crate::{JobId, Order, Store, StoreError};

/// Ending of a file of rows.
const ORDER_ENDING: &str = ".rows";
/// Blocks from which on a job's rows are written in order; fewer are searched in milliseconds.
const LEAST_BLOCKS: usize = 256;

impl Store {
    /// Writes the rows of an ended job in their default order, so that a page at any rank is found at once; gives whether they are
    /// there. Small jobs need none.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::BlockDamaged`], [`StoreError::Io`].
    pub fn write_order(&self, job: JobId, stop: &AtomicBool) -> Result<bool, StoreError> {
        let entry = self.entry(job)?;
        let Some((stamp, blocks)) = stamped(&entry) else {
            return Ok(false);
        };
        let is_known = |known: &Arc<RankOrder>| known.stamp == stamp;
        if lock(&entry.ordered).as_ref().is_some_and(is_known) {
            return Ok(true);
        }
        let scan = Scan {
            database: &self.database,
            job,
            blocks: &blocks,
            order: Order::default(),
            filter: None,
        };
        let path = self.order_path(job);
        if !rank_order::build(&scan, stamp, &path, stop)? {
            return Ok(false);
        }
        match RankOrder::open(&path, stamp, blocks.clone()) {
            Ok(order) => {
                *lock(&entry.ordered) = Some(Arc::new(order));
                Ok(true)
            }
            Err(reason) => Err(StoreError::Io {
                path,
                source: io::Error::other(reason),
            }),
        }
    }

    /// Opens the files of rows that there are; removes those that are of no job or of other blocks.
    pub(crate) fn open_orders(&self) -> Result<(), StoreError> {
        let dir = &self.orders;
        fs::create_dir_all(dir).map_err(StoreError::io(dir))?;
        for file in fs::read_dir(dir).map_err(StoreError::io(dir))? {
            let path = file.map_err(StoreError::io(dir))?.path();
            let opened = self.open_order(&path);
            if let Err(reason) = opened {
                tracing::debug!(path = %path.display(), reason, "a file of rows is not used");
                fs::remove_file(&path).map_err(StoreError::io(&path))?;
            }
        }
        Ok(())
    }

    fn open_order(&self, path: &Path) -> Result<(), String> {
        let name = path.file_name().and_then(|name| name.to_str());
        let job = name.and_then(|name| name.strip_suffix(ORDER_ENDING));
        let job: JobId = job
            .ok_or("it is unfinished")?
            .parse()
            .map_err(|_| "it is of no job")?;
        let entry = self.entry(job).map_err(|error| error.to_string())?;
        let (stamp, blocks) = stamped(&entry).ok_or("its job has not ended")?;
        *lock(&entry.ordered) = Some(Arc::new(RankOrder::open(path, stamp, blocks)?));
        Ok(())
    }

    pub(crate) fn order_path(&self, job: JobId) -> PathBuf {
        self.orders.join(format!("{job}{ORDER_ENDING}"))
    }
}

/// What the rows of an ended job belong to, and its blocks; none where it has not ended or is too small to need them.
fn stamped(entry: &Entry) -> Option<(Stamp, Arc<Vec<Summary>>)> {
    let record = lock(&entry.record);
    let index = lock(&entry.index);
    let (commit, rows) = index.mark();
    let is_large = index.blocks.len() >= LEAST_BLOCKS;
    if !record.state.is_ended() || !is_large || index.acknowledged != commit {
        return None;
    }
    let stamp = Stamp {
        rows,
        generation: record.generation,
        commit,
    };
    Some((stamp, Arc::new(index.seen_by(commit))))
}
