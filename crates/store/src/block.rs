//! Keys and values of blocks in the database.
//!
//! Key: job, segment, index, big endian, so that a job's blocks lie together in
//! the order of their cells. Value, version 1, numbers little endian:
//!
//! | bytes | what |
//! | --- | --- |
//! | 1 | version |
//! | 3 | zero |
//! | 4 | cells |
//! | 8 | commit number in the job, from 1 |
//! | 8 | number of the first cell |
//! | n | columns, as `enolattice-grid` writes them |
//! | 4 | CRC-32 over the key and all bytes before |

use enolattice_grid::{BlockId, Columns};

use crate::JobId;

/// Version of the value.
const VERSION: u8 = 1;
/// Bytes before the columns.
const HEAD_BYTES: usize = 24;
/// Bytes after the columns.
const CRC_BYTES: usize = 4;
/// Bytes of a key.
pub(crate) const KEY_BYTES: usize = 16;

/// Key of a block.
pub(crate) fn key(job: JobId, block: BlockId) -> [u8; KEY_BYTES] {
    let mut key = [0; KEY_BYTES];
    key[..8].copy_from_slice(&job.number().to_be_bytes());
    key[8..12].copy_from_slice(&block.segment.to_be_bytes());
    key[12..].copy_from_slice(&block.index.to_be_bytes());
    key
}

/// Job and block of a key; `None` for a key of another kind.
pub(crate) fn parse_key(key: &[u8]) -> Option<(JobId, BlockId)> {
    let key: &[u8; KEY_BYTES] = key.try_into().ok()?;
    let [a, b, c, d, e, f, g, h, s0, s1, s2, s3, i0, i1, i2, i3] = *key;
    let block = BlockId {
        segment: u32::from_be_bytes([s0, s1, s2, s3]),
        index: u32::from_be_bytes([i0, i1, i2, i3]),
    };
    Some((
        JobId::from_number(u64::from_be_bytes([a, b, c, d, e, f, g, h])),
        block,
    ))
}

/// A block as it is stored.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct StoredBlock {
    /// Commit number in the job, from 1.
    pub(crate) commit: u64,
    /// Number of its first cell.
    pub(crate) first_cell: u64,
    /// Scores.
    pub(crate) columns: Columns,
}

/// The value of a block; `columns` are the bytes of [`Columns::to_bytes`].
pub(crate) fn encode(
    key: &[u8; KEY_BYTES],
    commit: u64,
    first_cell: u64,
    cells: u32,
    columns: &[u8],
) -> Vec<u8> {
    let mut value = Vec::with_capacity(HEAD_BYTES + columns.len() + CRC_BYTES);
    value.extend([VERSION, 0, 0, 0]);
    value.extend(cells.to_le_bytes());
    value.extend(commit.to_le_bytes());
    value.extend(first_cell.to_le_bytes());
    value.extend(columns);
    value.extend(checksum(key, &value).to_le_bytes());
    value
}

/// Reads the value of a block.
///
/// # Errors
/// A sentence that says what is wrong with the bytes.
pub(crate) fn decode(key: &[u8], value: &[u8]) -> Result<StoredBlock, String> {
    let (body, crc) = value
        .split_last_chunk::<CRC_BYTES>()
        .ok_or("too short for a checksum")?;
    if checksum(key, body) != u32::from_le_bytes(*crc) {
        return Err("the checksum does not match".into());
    }
    let (head, columns) = body
        .split_first_chunk::<HEAD_BYTES>()
        .ok_or("too short for a head")?;
    if head[0] != VERSION {
        return Err(format!("version {} is not known", head[0]));
    }
    let number = |at: usize| {
        let mut bytes = [0; 8];
        bytes.copy_from_slice(&head[at..at + 8]);
        u64::from_le_bytes(bytes)
    };
    let cells = u32::from_le_bytes([head[4], head[5], head[6], head[7]]);
    let columns = Columns::from_bytes(columns)?;
    if columns.len() != cells as usize {
        return Err(format!("{} scores for {cells} cells", columns.len()));
    }
    Ok(StoredBlock {
        commit: number(8),
        first_cell: number(16),
        columns,
    })
}

/// The bytes of the columns within a value whose checksum holds.
///
/// # Errors
/// A sentence that says what is wrong with the bytes.
pub(crate) fn checked_columns<'v>(key: &[u8], value: &'v [u8]) -> Result<&'v [u8], String> {
    let (body, crc) = value
        .split_last_chunk::<CRC_BYTES>()
        .ok_or("too short for a checksum")?;
    match checksum(key, body) == u32::from_le_bytes(*crc) {
        true => Ok(columns_bytes(value)),
        false => Err("the checksum does not match".into()),
    }
}

/// The bytes of the columns within a value that [`decode`] accepts.
pub(crate) fn columns_bytes(value: &[u8]) -> &[u8] {
    let end = value.len().saturating_sub(CRC_BYTES);
    value.get(HEAD_BYTES..end).unwrap_or_default()
}

fn checksum(key: &[u8], body: &[u8]) -> u32 {
    let mut crc = crc32fast::Hasher::new();
    crc.update(key);
    crc.update(body);
    crc.finalize()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn sample() -> (JobId, BlockId, StoredBlock) {
        let columns = Columns {
            expected_yield: vec![65534, 0, 65535],
            p_hit: vec![1, 65535, 2],
            selectivity: vec![254, 255, 0],
            feasibility: vec![3, 4, 255],
            largest_loss: vec![0, 17, 1],
            cautions: vec![0, 0x8000_0001, 5],
        };
        let block = BlockId {
            segment: 1,
            index: 258,
        };
        (
            JobId::from_number(0x0102_0304_0506_0708),
            block,
            StoredBlock {
                commit: 7,
                first_cell: 1_056_768,
                columns,
            },
        )
    }

    /// `testdata/block_v1.bin` is key and value as version 1 wrote them; it is never made anew.
    #[test]
    fn bytes_of_version_1_are_read_for_ever() {
        let (job, block, stored) = sample();
        let golden = include_bytes!("../testdata/block_v1.bin");
        let (key_bytes, value) = golden.split_first_chunk::<KEY_BYTES>().unwrap();
        assert_eq!(parse_key(key_bytes), Some((job, block)));
        assert_eq!(key(job, block), *key_bytes);
        assert_eq!(decode(key_bytes, value).unwrap(), stored);
    }

    #[test]
    fn any_flipped_bit_is_noticed() {
        let (job, block, stored) = sample();
        let key = key(job, block);
        let columns = stored.columns.to_bytes();
        let value = encode(&key, stored.commit, stored.first_cell, 3, &columns);
        assert_eq!(columns_bytes(&value), columns);
        assert_eq!(decode(&key, &value).unwrap(), stored);
        for bit in 0..8 * value.len() {
            let mut flipped = value.clone();
            flipped[bit / 8] ^= 1 << (bit % 8);
            assert!(decode(&key, &flipped).is_err(), "bit {bit}");
        }
        for length in 0..value.len() {
            assert!(decode(&key, &value[..length]).is_err(), "{length} bytes");
        }
        let elsewhere = super::key(
            job,
            BlockId {
                index: 259,
                ..block
            },
        );
        assert!(decode(&elsewhere, &value).is_err());
    }

    #[test]
    fn keys_sort_like_cells() {
        let at = |job, segment, index| key(JobId::from_number(job), BlockId { segment, index });
        let keys = [at(1, 0, 255), at(1, 0, 256), at(1, 1, 0), at(256, 0, 0)];
        assert!(keys.is_sorted());
    }
}
