//! Writes the rows of a job in their order.
//!
//! The scores are read once to count the rows of each key, then once for each run of keys that holds a bounded number of
//! rows, which is sorted in memory. A key with more rows than that needs no sorting: its cells come in the order of the blocks.

use std::fs::{self, File};
use std::io::{self, BufWriter, Write};
use std::ops::RangeInclusive;
use std::path::Path;
use std::sync::atomic::{AtomicBool, Ordering};

use rayon::prelude::*;

use super::{END_BYTES, MARK, PLACE_BYTES, Place, ROWS, Stamp, chunk};
use crate::StoreError;
use crate::index::{Row, Summary};
use crate::journal::{UNFINISHED, sync_dir};
use crate::scan::Scan;

/// Rows that are sorted at a time, eight bytes each.
const MOST_AT_ONCE: u64 = 1 << 24;
/// Blocks that are read side by side.
const BLOCKS_AT_ONCE: usize = 64;
/// Bits of a cell's number; the key stands above them.
const CELL_BITS: u32 = 48;

/// Writes all rows of a scan; gives `false` where it was told to stop, and leaves nothing then.
///
/// # Errors
/// [`StoreError::Io`], [`StoreError::BlockDamaged`].
pub(crate) fn build(
    scan: &Scan<'_>,
    stamp: Stamp,
    path: &Path,
    stop: &AtomicBool,
) -> Result<bool, StoreError> {
    let unfinished = path.with_extension(UNFINISHED);
    let written = write(scan, stamp, &unfinished, stop);
    match written {
        Ok(true) => {
            fs::rename(&unfinished, path).map_err(StoreError::io(path))?;
            sync_dir(path.parent().unwrap_or(path))?;
            Ok(true)
        }
        unwritten => {
            // It is of no use half done; opening removes what stays.
            let _ = fs::remove_file(&unfinished);
            unwritten
        }
    }
}

fn write(
    scan: &Scan<'_>,
    stamp: Stamp,
    path: &Path,
    stop: &AtomicBool,
) -> Result<bool, StoreError> {
    let mut writer = Writer {
        file: BufWriter::new(File::create(path).map_err(StoreError::io(path))?),
        offset: 0,
        places: Vec::new(),
        rows: Vec::with_capacity(ROWS as usize),
    };
    let counts = scan.rows_by_key(|_| true)?;
    for keys in runs(&counts) {
        let (low, high) = (*keys.start(), *keys.end());
        let count: u64 = counts[usize::from(low)..=usize::from(high)].iter().sum();
        if count > MOST_AT_ONCE {
            for blocks in scan.blocks.chunks(BLOCKS_AT_ONCE) {
                if stop.load(Ordering::Relaxed) {
                    return Ok(false);
                }
                for rows in rows_of(scan, blocks, &keys)? {
                    writer.take_all(&rows).map_err(StoreError::io(path))?;
                }
            }
            continue;
        }
        let mut sorted = Vec::with_capacity(count as usize);
        for blocks in scan.blocks.chunks(BLOCKS_AT_ONCE) {
            if stop.load(Ordering::Relaxed) {
                return Ok(false);
            }
            sorted.extend(rows_of(scan, blocks, &keys)?.into_iter().flatten());
        }
        sorted.par_sort_unstable();
        writer.take_all(&sorted).map_err(StoreError::io(path))?;
    }
    writer.finish(stamp).map_err(StoreError::io(path))?;
    Ok(true)
}

/// Keys in runs of at most [`MOST_AT_ONCE`] rows, or of a single key.
fn runs(counts: &[u64]) -> Vec<RangeInclusive<u16>> {
    let mut runs: Vec<RangeInclusive<u16>> = Vec::new();
    let mut rows = 0;
    for (key, count) in counts.iter().enumerate().filter(|(_, count)| **count > 0) {
        let key = key as u16;
        rows += count;
        match runs.last_mut() {
            Some(run) if rows <= MOST_AT_ONCE => *run = *run.start()..=key,
            _ => {
                runs.push(key..=key);
                rows = *count;
            }
        }
    }
    runs
}

/// Rows with these keys of each of some blocks, packed so that they sort as numbers.
fn rows_of(
    scan: &Scan<'_>,
    blocks: &[Summary],
    keys: &RangeInclusive<u16>,
) -> Result<Vec<Vec<u64>>, StoreError> {
    let of_block = |block: &Summary| {
        let mut rows = Vec::new();
        scan.visit(block, |(key, cell)| {
            if keys.contains(&key) {
                rows.push(u64::from(key) << CELL_BITS | cell);
            }
        })?;
        Ok(rows)
    };
    blocks.par_iter().map(of_block).collect()
}

struct Writer {
    file: BufWriter<File>,
    offset: u64,
    places: Vec<Place>,
    rows: Vec<Row>,
}

impl Writer {
    fn take_all(&mut self, packed: &[u64]) -> io::Result<()> {
        for row in packed {
            let cell = row & ((1 << CELL_BITS) - 1);
            self.rows.push(((row >> CELL_BITS) as u16, cell));
            if self.rows.len() as u64 == ROWS {
                self.end_chunk()?;
            }
        }
        Ok(())
    }

    fn end_chunk(&mut self) -> io::Result<()> {
        let bytes = chunk::encode(&self.rows);
        self.rows.clear();
        self.file.write_all(&bytes)?;
        self.places.push(Place {
            offset: self.offset,
            bytes: bytes.len() as u32,
            crc32: crc32fast::hash(&bytes),
        });
        self.offset += bytes.len() as u64;
        Ok(())
    }

    fn finish(mut self, stamp: Stamp) -> io::Result<()> {
        if !self.rows.is_empty() {
            self.end_chunk()?;
        }
        let mut end = Vec::with_capacity(self.places.len() * PLACE_BYTES + END_BYTES);
        for place in &self.places {
            end.extend(place.offset.to_le_bytes());
            end.extend(place.bytes.to_le_bytes());
            end.extend(place.crc32.to_le_bytes());
        }
        end.extend(stamp.rows.to_le_bytes());
        end.extend(stamp.generation.to_le_bytes());
        end.extend(stamp.commit.to_le_bytes());
        end.extend((self.places.len() as u32).to_le_bytes());
        let crc32 = crc32fast::hash(&end);
        end.extend(crc32.to_le_bytes());
        end.extend([0; 4]);
        end.extend(MARK);
        self.file.write_all(&end)?;
        self.file.into_inner()?.sync_all()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn runs_hold_every_key_once_and_no_more_rows_than_fit() {
        let mut counts = vec![0; 1 << 16];
        for (key, rows) in [
            (0, 3),
            (7, MOST_AT_ONCE - 3),
            (8, 1),
            (65_535, 5 * MOST_AT_ONCE),
        ] {
            counts[key] = rows;
        }
        assert_eq!(runs(&counts), [0..=7, 8..=8, 65_535..=65_535]);
    }
}
