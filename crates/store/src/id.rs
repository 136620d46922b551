//! Job ids: short, unique, in the order of submission.

use std::fmt;
use std::str::FromStr;

use crate::StoreError;

/// Digits of an id: no i, l, o, u, so that it can be read aloud.
const DIGITS: &[u8; 32] = b"0123456789abcdefghjkmnpqrstvwxyz";
/// Length of an id as text: 13 × 5 bits hold 64.
const LENGTH: usize = 13;
/// Low bits that are random; the others are milliseconds since 1970 (until the year 2527).
const RANDOM_BITS: u32 = 20;

/// Id of a job: 13 letters and digits that sort by time of submission.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct JobId(u64);

impl JobId {
    /// An id after `last`, from the time and random bits.
    ///
    /// Where the clock went back or two jobs share a millisecond, the id
    /// still comes after `last`, so that ids always sort by submission.
    pub(crate) fn after(last: Option<JobId>, now_unix_ms: u64, random: u64) -> JobId {
        let fresh = now_unix_ms << RANDOM_BITS | random & ((1 << RANDOM_BITS) - 1);
        JobId(match last {
            Some(JobId(last)) if fresh <= last => last + 1,
            _ => fresh,
        })
    }

    /// The id as a number, for keys.
    pub(crate) fn number(self) -> u64 {
        self.0
    }

    /// The id with this number.
    pub(crate) fn from_number(number: u64) -> JobId {
        JobId(number)
    }
}

impl fmt::Display for JobId {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let digit = |i: usize| char::from(DIGITS[(self.0 >> (5 * (LENGTH - 1 - i)) & 31) as usize]);
        let text: String = (0..LENGTH).map(digit).collect();
        f.pad(&text)
    }
}

impl FromStr for JobId {
    type Err = StoreError;

    fn from_str(text: &str) -> Result<JobId, StoreError> {
        let unknown = || StoreError::JobUnknown {
            job: text.chars().take(64).collect(),
        };
        if text.len() != LENGTH {
            return Err(unknown());
        }
        text.bytes()
            .try_fold(0u64, |number, byte| {
                let digit = DIGITS
                    .iter()
                    .position(|d| *d == byte.to_ascii_lowercase())?;
                number.checked_mul(32)?.checked_add(digit as u64)
            })
            .map(JobId)
            .ok_or_else(unknown)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ids_read_back_and_sort_as_text_like_numbers() {
        let mut last = None;
        let mut texts = Vec::new();
        for (now, random) in [
            (1_700_000_000_000, 7),
            (1_700_000_000_000, 3),
            (5, 0),
            (1_800_000_000_000, 1),
        ] {
            let id = JobId::after(last, now, random);
            assert_eq!(id.to_string().parse::<JobId>().unwrap(), id);
            assert_eq!(id.to_string().to_uppercase().parse::<JobId>().unwrap(), id);
            texts.push(id.to_string());
            last = Some(id);
        }
        assert!(texts.is_sorted_by(|a, b| a < b), "{texts:?}");
    }

    #[test]
    fn other_text_is_no_id() {
        for text in [
            "",
            "0",
            "zzzzzzzzzzzzz",
            "0123456789abi",
            "0123456789ab\u{e9}",
        ] {
            assert!(
                matches!(text.parse::<JobId>(), Err(StoreError::JobUnknown { .. })),
                "{text}"
            );
        }
    }
}
