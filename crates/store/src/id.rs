//! Ids of jobs and plans: short, unique, in the order in which they were made.

use std::fmt;
use std::str::FromStr;

use crate::StoreError;

/// Digits of an id: no i, l, o, u, so that it can be read aloud.
const DIGITS: &[u8; 32] = b"0123456789abcdefghjkmnpqrstvwxyz";
/// Length of an id as text: 13 × 5 bits hold 64.
const LENGTH: usize = 13;
/// Low bits that are random; the others are milliseconds since 1970 (until the year 2527).
const RANDOM_BITS: u32 = 20;

/// Steps beyond the last id where the clock is behind it: random, so that the id of something that was removed without a trace does not come again.
const BEHIND: u64 = 0xffff;

/// Id of a job: 13 letters and digits that sort by time of submission.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct JobId(u64);

/// Id of a plan: 13 letters and digits that sort by the time at which it was made.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct PlanId(u64);

impl JobId {
    /// An id after `last`, from the time and random bits.
    ///
    /// Where the clock went back or two jobs share a millisecond, the id
    /// still comes after `last`, so that ids always sort by submission.
    pub(crate) fn after(last: Option<JobId>, now_unix_ms: u64, random: u64) -> JobId {
        JobId(after(last.map(|JobId(last)| last), now_unix_ms, random))
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

impl PlanId {
    /// The id of the plan that a job makes: the job's own, so that the plan is made once.
    pub fn of_job(job: JobId) -> PlanId {
        PlanId(job.0)
    }

    /// An id after `last`, as [`JobId::after`].
    pub(crate) fn after(last: Option<PlanId>, now_unix_ms: u64, random: u64) -> PlanId {
        PlanId(after(last.map(|PlanId(last)| last), now_unix_ms, random))
    }
}

fn after(last: Option<u64>, now_unix_ms: u64, random: u64) -> u64 {
    let fresh = now_unix_ms << RANDOM_BITS | random & ((1 << RANDOM_BITS) - 1);
    match last {
        Some(last) if fresh <= last => last.saturating_add(1 + (random & BEHIND)),
        _ => fresh,
    }
}

impl fmt::Display for JobId {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.pad(&text(self.0))
    }
}

impl fmt::Display for PlanId {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.pad(&text(self.0))
    }
}

fn text(number: u64) -> String {
    let digit = |i: usize| char::from(DIGITS[(number >> (5 * (LENGTH - 1 - i)) & 31) as usize]);
    (0..LENGTH).map(digit).collect()
}

impl FromStr for JobId {
    type Err = StoreError;

    fn from_str(text: &str) -> Result<JobId, StoreError> {
        number(text)
            .map(JobId)
            .ok_or_else(|| StoreError::JobUnknown {
                job: shortened(text),
            })
    }
}

impl FromStr for PlanId {
    type Err = StoreError;

    fn from_str(text: &str) -> Result<PlanId, StoreError> {
        number(text)
            .map(PlanId)
            .ok_or_else(|| StoreError::PlanUnknown {
                plan: shortened(text),
            })
    }
}

fn number(text: &str) -> Option<u64> {
    if text.len() != LENGTH {
        return None;
    }
    text.bytes().try_fold(0u64, |number, byte| {
        let digit = DIGITS
            .iter()
            .position(|d| *d == byte.to_ascii_lowercase())?;
        number.checked_mul(32)?.checked_add(digit as u64)
    })
}

fn shortened(text: &str) -> String {
    text.chars().take(64).collect()
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
