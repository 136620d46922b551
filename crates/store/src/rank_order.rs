//! The rows of an ended job in their default order, in a file of their own: a page at any rank is one look at it.
//!
//! Derived from the blocks, whole or not there, and never needed: without it pages are found in the blocks. Version 1, numbers
//! little endian:
//!
//! | part | holds |
//! | --- | --- |
//! | chunks | 16,384 rows each, the last fewer: for each sort key `key: u16`, `rows: varint`, then its cells ascending, the first as a varint, each other as a varint of the difference |
//! | places | of each chunk: offset `u64`, bytes `u32`, CRC-32 `u32` |
//! | end, 40 bytes | `rows: u64`, `generation: u32`, `commit: u64` (last one seen), `chunks: u32`, CRC-32 of places and end so far `u32`, zero `u32`, `elrows01` |

mod build;
mod chunk;

use std::fs::File;
use std::io::{self, Read, Seek, SeekFrom};
use std::path::Path;
use std::sync::{Arc, Mutex};

pub(crate) use build::build;

use crate::index::{Row, Summary};
use crate::store::lock;

/// Rows of a chunk.
const ROWS: u64 = 16_384;
/// Bytes of a chunk's place.
const PLACE_BYTES: usize = 16;
/// Bytes of the end.
const END_BYTES: usize = 40;
/// What a file of this version ends with.
const MARK: &[u8; 8] = b"elrows01";

/// Where a chunk lies.
#[derive(Clone, Copy, Debug)]
struct Place {
    offset: u64,
    bytes: u32,
    crc32: u32,
}

/// What the rows belong to.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Stamp {
    /// All rows.
    pub(crate) rows: u64,
    /// Generation of the job's blocks.
    pub(crate) generation: u32,
    /// Commit number of the last block.
    pub(crate) commit: u64,
}

/// An open file of rows.
#[derive(Debug)]
pub(crate) struct RankOrder {
    file: Mutex<File>,
    places: Vec<Place>,
    pub(crate) stamp: Stamp,
    /// Summaries of the job's blocks, by first cell.
    pub(crate) blocks: Arc<Vec<Summary>>,
}

impl RankOrder {
    /// Opens the rows of these blocks.
    ///
    /// # Errors
    /// A sentence that says why the file is not theirs or cannot be read.
    pub(crate) fn open(
        path: &Path,
        stamp: Stamp,
        blocks: Arc<Vec<Summary>>,
    ) -> Result<RankOrder, String> {
        let mut file = File::open(path).map_err(|error| error.to_string())?;
        let (places, found) = contents(&mut file)?;
        if found != stamp {
            return Err("it is of other blocks".to_owned());
        }
        Ok(RankOrder {
            file: Mutex::new(file),
            places,
            stamp,
            blocks,
        })
    }

    /// Up to `limit` rows from a rank on, counted from 0.
    ///
    /// # Errors
    /// A sentence that says what is wrong with the file.
    pub(crate) fn rows(&self, first: u64, limit: usize) -> Result<Vec<Row>, String> {
        let mut rows = Vec::with_capacity(limit);
        let end = first.saturating_add(limit as u64).min(self.stamp.rows);
        let mut next = first;
        while next < end {
            let number = next / ROWS;
            let chunk = self.chunk(number as usize)?;
            let from = (next - number * ROWS) as usize;
            let to = chunk.len().min((end - number * ROWS) as usize);
            rows.extend(
                chunk
                    .get(from..to)
                    .ok_or("a chunk of it has too few rows")?,
            );
            next = (number + 1) * ROWS;
        }
        Ok(rows)
    }

    fn chunk(&self, number: usize) -> Result<Vec<Row>, String> {
        let place = self.places.get(number).ok_or("it has too few chunks")?;
        let mut bytes = vec![0; place.bytes as usize];
        {
            let mut file = lock(&self.file);
            file.seek(SeekFrom::Start(place.offset))
                .and_then(|_| file.read_exact(&mut bytes))
                .map_err(|error| error.to_string())?;
        }
        if crc32fast::hash(&bytes) != place.crc32 {
            return Err("the checksum of a chunk does not match".to_owned());
        }
        chunk::decode(&bytes)
    }
}

/// Places of the chunks, and what the rows belong to.
fn contents(file: &mut File) -> Result<(Vec<Place>, Stamp), String> {
    let told = |error: io::Error| error.to_string();
    let length = file.seek(SeekFrom::End(0)).map_err(told)?;
    let end_at = length
        .checked_sub(END_BYTES as u64)
        .ok_or("it is too short")?;
    let mut end = [0; END_BYTES];
    file.seek(SeekFrom::Start(end_at)).map_err(told)?;
    file.read_exact(&mut end).map_err(told)?;
    if end[END_BYTES - MARK.len()..] != MARK[..] {
        return Err("it has no end of this version".to_owned());
    }
    let u32_at = |at: usize| u32::from_le_bytes([end[at], end[at + 1], end[at + 2], end[at + 3]]);
    let u64_at = |at: usize| u64::from(u32_at(at)) | u64::from(u32_at(at + 4)) << 32;
    let chunks = u32_at(20) as usize;
    let places_at = end_at
        .checked_sub((chunks * PLACE_BYTES) as u64)
        .ok_or("it is too short for its chunks")?;
    let mut bytes = vec![0; chunks * PLACE_BYTES];
    file.seek(SeekFrom::Start(places_at)).map_err(told)?;
    file.read_exact(&mut bytes).map_err(told)?;
    let mut crc = crc32fast::Hasher::new();
    crc.update(&bytes);
    crc.update(&end[..24]);
    if crc.finalize() != u32_at(24) {
        return Err("its checksum does not match".to_owned());
    }
    let place = |bytes: &[u8; PLACE_BYTES]| {
        let [a, b, c, d, e, f, g, h, i, j, k, l, m, n, o, p] = *bytes;
        Place {
            offset: u64::from_le_bytes([a, b, c, d, e, f, g, h]),
            bytes: u32::from_le_bytes([i, j, k, l]),
            crc32: u32::from_le_bytes([m, n, o, p]),
        }
    };
    let places = bytes.as_chunks().0.iter().map(place).collect();
    let stamp = Stamp {
        rows: u64_at(0),
        generation: u32_at(8),
        commit: u64_at(12),
    };
    Ok((places, stamp))
}
