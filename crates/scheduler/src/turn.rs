//! Whose turn it is: pure rules, no clock, no disk.
//!
//! Jobs of the highest priority come first. Among these the requester comes first who was served least, and of the
//! requester's jobs the one with the fewest cells left: a small job does not wait behind a large one, and nobody waits
//! behind another's many jobs.

use std::cmp::Reverse;
use std::collections::{BTreeMap, BTreeSet};
use std::time::Duration;

use enolattice_store::JobId;

/// A job that could be served now.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Candidate<'a> {
    /// Job.
    pub job: JobId,
    /// Whose it is.
    pub requester: &'a str,
    /// Its priority, higher first.
    pub priority: i32,
    /// Cells of it that nobody has taken up yet.
    pub cells_left: u64,
}

/// How long each requester was served.
///
/// Who comes anew begins where the least served of those present is: being away earns nothing, having been served long
/// ago costs nothing.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Served {
    present: BTreeMap<String, Duration>,
}

impl Served {
    /// The job whose turn it is; none where there is no candidate. `at_work` are the requesters of whom something is in hand.
    pub fn turn<'a>(
        &mut self,
        candidates: &[Candidate<'a>],
        at_work: impl Iterator<Item = &'a str>,
    ) -> Option<JobId> {
        self.meet(
            candidates
                .iter()
                .map(|candidate| candidate.requester)
                .chain(at_work),
        );
        let key = |candidate: &&Candidate<'_>| {
            (
                Reverse(candidate.priority),
                self.present[candidate.requester],
                candidate.cells_left,
                candidate.job,
            )
        };
        candidates
            .iter()
            .min_by_key(key)
            .map(|candidate| candidate.job)
    }

    /// Counts the time that a block of this requester took.
    pub fn count(&mut self, requester: &str, taken: Duration) {
        if let Some(served) = self.present.get_mut(requester) {
            *served += taken;
        }
    }

    fn meet<'a>(&mut self, requesters: impl Iterator<Item = &'a str>) {
        let here: BTreeSet<&str> = requesters.collect();
        if here.is_empty() {
            // nobody waits: what was served before is of no account
            return self.present.clear();
        }
        self.present
            .retain(|requester, _| here.contains(requester.as_str()));
        let least = self.present.values().min().copied().unwrap_or_default();
        for requester in here {
            if !self.present.contains_key(requester) {
                self.present.insert(requester.to_owned(), least);
            }
        }
    }
}
