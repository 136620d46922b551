//! The bytes of a chunk.

use crate::index::Row;

/// Rows in order, as bytes.
pub(super) fn encode(rows: &[Row]) -> Vec<u8> {
    let mut bytes = Vec::with_capacity(3 * rows.len());
    for ties in rows.chunk_by(|one, next| one.0 == next.0) {
        bytes.extend(ties[0].0.to_le_bytes());
        varint(&mut bytes, ties.len() as u64);
        let mut last = 0;
        for (_, cell) in ties {
            varint(&mut bytes, cell - last);
            last = *cell;
        }
    }
    bytes
}

/// The rows of a chunk.
///
/// # Errors
/// A sentence that says what is wrong with the bytes.
pub(super) fn decode(mut bytes: &[u8]) -> Result<Vec<Row>, String> {
    let mut rows = Vec::with_capacity(super::ROWS as usize);
    while let Some((key, rest)) = bytes.split_first_chunk::<2>() {
        bytes = rest;
        let key = u16::from_le_bytes(*key);
        let ties = read_varint(&mut bytes)?;
        let mut cell = 0u64;
        for _ in 0..ties {
            let more = read_varint(&mut bytes)?;
            cell = cell.checked_add(more).ok_or("a cell is out of range")?;
            rows.push((key, cell));
        }
    }
    match bytes.is_empty() {
        true => Ok(rows),
        false => Err("a chunk ends in mid-row".to_owned()),
    }
}

/// Seven bits a byte, the lowest first; the eighth says that more follow.
fn varint(bytes: &mut Vec<u8>, mut number: u64) {
    while number >= 0x80 {
        bytes.push(number as u8 | 0x80);
        number >>= 7;
    }
    bytes.push(number as u8);
}

fn read_varint(bytes: &mut &[u8]) -> Result<u64, String> {
    let mut number = 0;
    for shift in (0..64).step_by(7) {
        let (byte, rest) = bytes.split_first().ok_or("a chunk ends in mid-number")?;
        *bytes = rest;
        number |= u64::from(byte & 0x7f) << shift;
        if byte & 0x80 == 0 {
            return Ok(number);
        }
    }
    Err("a number has too many bytes".to_owned())
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn two_rows_have_these_bytes() {
        // key 258, two cells: 5 and 5 + 300 = 305; 300 is 0b10_0101100
        let bytes = [2, 1, 2, 5, 0xac, 2];
        assert_eq!(decode(&bytes).unwrap(), [(258, 5), (258, 305)]);
        assert_eq!(encode(&[(258, 5), (258, 305)]), bytes);
    }

    proptest! {
        #[test]
        fn rows_come_back(rows in prop::collection::btree_set((0u16..9, any::<u64>()), 0..200)) {
            let rows: Vec<Row> = rows.into_iter().collect();
            let bytes = encode(&rows);
            prop_assert_eq!(decode(&bytes).unwrap(), rows);
        }

        #[test]
        fn any_bytes_are_read_or_refused(bytes in prop::collection::vec(any::<u8>(), 0..60)) {
            // a chunk that claims many rows has not the bytes for them
            let _ = decode(&bytes);
        }
    }
}
