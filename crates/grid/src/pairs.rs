//! What cells of one substrate share: its pairs with electrophiles and its deprotonated pots.

use std::collections::VecDeque;
use std::sync::{Arc, Mutex, OnceLock, PoisonError};

use enolattice_model::{FormationTable, Pair};

/// Most substrates whose pairs are kept. Blocks are worked on in order and the substrate is the
/// slowest digit, so a few more than there are threads are enough; fewer would cost time only.
const SUBSTRATES_KEPT: u64 = 32;
/// Fewest: threads that come to the end of one substrate and to the beginning of the next.
const FEWEST_KEPT: u64 = 2;
/// Bytes of all tables of deprotonated pots together. A substrate with many pots has many blocks as
/// well, so that fewer substrates are worked on at once.
const POTS_BYTES: u64 = 256 << 20;

/// How many substrates are kept at once, with how many deprotonated pots each.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Kept {
    pub(crate) substrates: u64,
    pub(crate) pots: u64,
}

impl Kept {
    /// What is kept of a campaign whose substrates have so many pots each.
    pub(crate) fn of(pots: u64) -> Kept {
        let most_pots = POTS_BYTES / FormationTable::POT_BYTES;
        let substrates = (most_pots / pots.max(1)).clamp(FEWEST_KEPT, SUBSTRATES_KEPT);
        Kept {
            substrates,
            pots: pots.min(most_pots / substrates),
        }
    }
}

/// The pairs of one substrate, each prepared when it is first asked for, and its deprotonations.
#[derive(Debug)]
pub(crate) struct PairsOfSubstrate {
    pairs: Vec<OnceLock<Arc<Pair>>>,
    /// Deprotonated pots by base, solvent and conditions.
    pub(crate) formations: FormationTable,
}

impl PairsOfSubstrate {
    /// The pair with one electrophile. `prepare` must not wait for another pair.
    pub(crate) fn with(&self, electrophile: u32, prepare: impl FnOnce() -> Pair) -> Arc<Pair> {
        self.pairs[electrophile as usize]
            .get_or_init(|| Arc::new(prepare()))
            .clone()
    }
}

/// The pairs of the substrates that were asked for last; memory does not grow with the campaign.
#[derive(Debug)]
pub(crate) struct RecentPairs {
    electrophiles: usize,
    kept: Kept,
    latest_first: Mutex<VecDeque<(u32, Arc<PairsOfSubstrate>)>>,
}

impl RecentPairs {
    pub(crate) fn new(electrophiles: usize, kept: Kept) -> RecentPairs {
        RecentPairs {
            electrophiles,
            kept,
            latest_first: Mutex::default(),
        }
    }

    /// The pairs of a substrate; they live on while someone holds them.
    pub(crate) fn of(&self, substrate: u32) -> Arc<PairsOfSubstrate> {
        // a thread that panicked cannot have left the queue half changed
        let mut queue = self
            .latest_first
            .lock()
            .unwrap_or_else(PoisonError::into_inner);
        let known = queue.iter().position(|(of, _)| *of == substrate);
        let entry = known.and_then(|at| queue.remove(at)).unwrap_or_else(|| {
            let pairs = (0..self.electrophiles).map(|_| OnceLock::new()).collect();
            let formations = FormationTable::of_at_most(self.kept.pots as usize);
            (substrate, Arc::new(PairsOfSubstrate { pairs, formations }))
        });
        let pairs = entry.1.clone();
        queue.push_front(entry);
        queue.truncate(self.kept.substrates as usize);
        pairs
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn tables_of_pots_stay_within_their_bytes() {
        for pots in [0, 1, 100, 10_000, 100_000, 10_000_000, u64::MAX] {
            let kept = Kept::of(pots);
            let bytes = kept.substrates * kept.pots * FormationTable::POT_BYTES;
            assert!(bytes <= POTS_BYTES, "{pots}: {bytes}");
            assert!((2..=32).contains(&kept.substrates));
        }
        let small = Kept::of(1_000);
        assert_eq!((small.substrates, small.pots), (32, 1_000));
        let large = Kept::of(u64::MAX);
        assert!(large.substrates == 2 && large.pots > 10_000);
    }
}
