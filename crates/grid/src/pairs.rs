//! What cells of one substrate share: its pairs with electrophiles and its deprotonated pots.

use std::collections::VecDeque;
use std::sync::{Arc, Mutex, OnceLock, PoisonError};

use enolattice_model::{FormationTable, Pair};

/// Substrates whose pairs are kept. Blocks are worked on in order and the substrate is the
/// slowest digit, so a few more than there are threads are enough; fewer would cost time only.
const SUBSTRATES_KEPT: usize = 32;

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
    latest_first: Mutex<VecDeque<(u32, Arc<PairsOfSubstrate>)>>,
}

impl RecentPairs {
    pub(crate) fn new(electrophiles: usize) -> RecentPairs {
        RecentPairs {
            electrophiles,
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
            let formations = FormationTable::default();
            (substrate, Arc::new(PairsOfSubstrate { pairs, formations }))
        });
        let pairs = entry.1.clone();
        queue.push_front(entry);
        queue.truncate(SUBSTRATES_KEPT);
        pairs
    }
}
