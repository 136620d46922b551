//! The state of the pot when the electrophile comes, tabled over the electrophiles of a campaign.

use std::collections::HashMap;
use std::sync::Mutex;

use crate::Cell;
use crate::kinetics::Nudge;
use crate::march::march;
use crate::network::Amounts;
use crate::parameters::Values;
use crate::program::Charge;
use crate::screen::Spread;

/// Deprotonated pots of one substrate.
///
/// What forms before the electrophile comes depends on substrate, base, solvent and conditions, not
/// on the electrophile: the table computes it once for all electrophiles. It holds a pure function's
/// values, so that a score is the same with a fresh table, a shared one, or none; a full one keeps
/// what it has.
#[derive(Debug)]
pub struct FormationTable {
    pots: Mutex<HashMap<u64, Pots>>,
    most: usize,
}

/// Pots at the mean and with the site's pKa lowered and raised by √3 σ.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Pots {
    pub(crate) mean: Amounts,
    pub(crate) lowered: Amounts,
    pub(crate) raised: Amounts,
}

impl Pots {
    /// Marches the deprotonation of a cell.
    pub(crate) fn form(cell: &Cell, values: &Values) -> Pots {
        let charge = Charge::of(cell);
        let start = charge.start();
        if !charge.forms_first() {
            return Pots {
                mean: start,
                lowered: start,
                raised: start,
            };
        }
        let acidity = Spread::of(cell).acidity_node();
        let nudges = [0.0, -acidity, acidity].map(|acidity| Nudge {
            acidity,
            attack: 0.0,
        });
        let networks = charge.forming(cell, values, nudges);
        let [mean, lowered, raised] = march(&networks, [start; 3]);
        Pots {
            mean,
            lowered,
            raised,
        }
    }
}

impl FormationTable {
    /// About how many bytes a pot takes: a hash table is between half and nearly full.
    pub const POT_BYTES: u64 = 2 * size_of::<(u64, Pots)>() as u64;

    /// An empty table that will keep so many pots at most.
    pub fn of_at_most(pots: usize) -> FormationTable {
        FormationTable {
            pots: Mutex::default(),
            most: pots,
        }
    }

    /// The pots under this key, formed now if they are not there.
    pub(crate) fn of(&self, key: u64, cell: &Cell, values: &Values) -> Pots {
        if let Some(pots) = self.lock().get(&key) {
            return *pots;
        }
        let pots = Pots::form(cell, values);
        let mut known = self.lock();
        if known.len() < self.most {
            known.insert(key, pots);
        }
        pots
    }

    fn lock(&self) -> std::sync::MutexGuard<'_, HashMap<u64, Pots>> {
        // a panic elsewhere cannot leave a half-written value: entries are inserted whole
        self.pots
            .lock()
            .unwrap_or_else(std::sync::PoisonError::into_inner)
    }
}
