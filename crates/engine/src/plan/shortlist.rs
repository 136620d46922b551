//! Cells of a job among which a plan chooses.
//!
//! One pass over the stored scores. Of each stratum (substrate, electrophile and the setting, which belongs to a whole plate)
//! the surest cells are kept, and those whose outcome is most in doubt, which teach most. Of cells that score alike a hash
//! decides, so that the shortlist is not the first solvents of an axis. Where there are many settings, those stay with
//! which most substrates and electrophiles have a sure cell: a plate has one setting, and a few cells of each would fill none.
//! A value that must come a number of times has the surest of its cells kept besides.

use std::cmp::Reverse;
use std::collections::{BTreeMap, BinaryHeap, HashMap};

use enolattice_grid::{BlockId, CampaignSpec, CellDigits, CellId, Columns, Grid};
use enolattice_model::{Category, Severity};
use enolattice_plate::{Deck, LeftOut, PlanRequest, PlateFormat, Quota, scattered};
use enolattice_store::{JobId, Store};
use rayon::prelude::*;

use crate::EngineError;
use crate::filter::{BoundFilter, Filter};
use crate::plan::limits::{Vetoed, fault, on_the_shelf};
use crate::screened::STEPS;

/// Blocks that are read side by side.
const BLOCKS_AT_ONCE: usize = 64;
/// Random cells that are scored for comparison.
const RANDOM: usize = 400;
/// Cells of the ranking that are scored for comparison at most.
const MOST_OF_TOP: usize = 1_536;
/// Cells with less expected yield than this are not looked at, in steps of the stored columns: 1 %.
const HOPELESS: u16 = 655;

/// What a plan chooses from.
#[derive(Debug, Default)]
pub(super) struct Shortlist {
    chosen: Vec<u64>,
    /// The best of the ranking, best first.
    pub(super) top: Vec<u64>,
    /// Random cells.
    pub(super) random: Vec<u64>,
    pub(super) left_out: Vec<LeftOut>,
}

impl Shortlist {
    pub(super) fn all(&self) -> impl Iterator<Item = u64> + '_ {
        let lists = [&self.chosen, &self.top, &self.random];
        lists.into_iter().flatten().copied()
    }

    pub(super) fn of(
        store: &Store,
        job: JobId,
        grid: &Grid,
        spec: &CampaignSpec,
        request: &PlanRequest,
        vetoed: &Vetoed,
        quotas: &[Quota],
    ) -> Result<Shortlist, EngineError> {
        let rules = Rules::of(grid, spec, request, vetoed)?;
        rules.check_pins(store, job, request)?;
        let mut kept = Kept::new(grid, request, quotas);
        let mut blocks = grid.blocks();
        loop {
            let some: Vec<BlockId> = blocks.by_ref().take(BLOCKS_AT_ONCE).collect();
            if some.is_empty() {
                return Ok(kept.into_shortlist(&rules));
            }
            let rows: Vec<(Vec<Row>, Vec<u64>)> = some
                .par_iter()
                .map(|block| match store.block(job, *block)? {
                    Some(columns) => Ok(rules.passing(*block, &columns)),
                    None => Ok((Vec::new(), Vec::new())),
                })
                .collect::<Result<_, EngineError>>()?;
            for (rows, left_out) in rows {
                rows.iter().for_each(|row| kept.take(row));
                kept.count(&left_out);
            }
        }
    }
}

/// A cell that may be chosen.
#[derive(Clone, Copy, Debug)]
struct Row {
    cell: u64,
    digits: CellDigits,
    expected_yield: u16,
    p_hit: u16,
}

/// Why cells are left out, in the order in which it is asked.
const FIXED_REASONS: [&str; 6] = [
    "not covered by the model",
    "a caution of severity stop",
    "vetoed",
    "does not pass the filter",
    "a reagent of which nothing is said to be on the shelf",
    "expected yield below 1 %",
];

const NOT_COVERED: usize = 0;
const STOPPED: usize = 1;
const VETOED: usize = 2;
const NOT_IN_FILTER: usize = 3;
const NOT_ON_SHELF: usize = 4;
const HOPELESS_CELL: usize = 5;

/// What keeps a cell off the plates.
struct Rules<'a> {
    grid: &'a Grid,
    filter: BoundFilter,
    vetoed: &'a Vetoed,
    allowed_stops: u32,
    /// Whether each value of the first five axes is on the shelf; empty where that does not count.
    shelf: Vec<Vec<bool>>,
    /// Number of the reason why the deck does not run a base in a solvent at two temperatures.
    deck: HashMap<[u32; 4], usize>,
    reasons: Vec<String>,
}

impl<'a> Rules<'a> {
    fn of(
        grid: &'a Grid,
        spec: &CampaignSpec,
        request: &PlanRequest,
        vetoed: &'a Vetoed,
    ) -> Result<Rules<'a>, EngineError> {
        let faulty = |fault: Box<enolattice_grid::InputError>| EngineError::Input(vec![*fault]);
        let filter = Filter::read(&request.choice.only).map_err(faulty)?;
        let filter = filter.bind(grid.campaign()).map_err(faulty)?;
        let named = |category: &Category| {
            let mut words = request.choice.allow_stop.iter();
            words.any(|word| word == category.name())
        };
        let allowed = Category::ALL.into_iter().filter(named).map(Category::bit);
        let mut rules = Rules {
            grid,
            filter,
            vetoed,
            allowed_stops: allowed.fold(0, |bits, bit| bits | bit),
            shelf: match request.choice.only_in_stock {
                true => on_the_shelf(grid, spec),
                false => Vec::new(),
            },
            deck: HashMap::new(),
            reasons: FIXED_REASONS.map(str::to_owned).to_vec(),
        };
        rules.ask_the_deck(&request.deck, request.plates.wells);
        Ok(rules)
    }

    fn ask_the_deck(&mut self, deck: &Deck, plates: PlateFormat) {
        let campaign = self.grid.campaign();
        for (b, base) in campaign.bases.iter().enumerate() {
            for (s, solvent) in campaign.solvents.iter().enumerate() {
                for (t, &reaction_c) in campaign.temperature_c.iter().enumerate() {
                    for (f, formation) in campaign.formation_temperature_c.iter().enumerate() {
                        let temperatures = [formation.unwrap_or(reaction_c), reaction_c];
                        let (base, solvent) = (&base.record, &solvent.record);
                        let Some(reason) = deck.refusal(base, solvent, temperatures, plates) else {
                            continue;
                        };
                        let known = self.reasons.iter().position(|known| *known == reason);
                        let number = known.unwrap_or(self.reasons.len());
                        if known.is_none() {
                            self.reasons.push(reason);
                        }
                        let key = [b, s, t, f].map(|digit| digit as u32);
                        self.deck.insert(key, number);
                    }
                }
            }
        }
    }

    /// Pinned cells need not be promising or pass the filter; everything else keeps them off as it does others.
    fn check_pins(
        &self,
        store: &Store,
        job: JobId,
        request: &PlanRequest,
    ) -> Result<(), EngineError> {
        let mut faults = Vec::new();
        for (i, pin) in request.choice.pin.iter().enumerate() {
            let refusal = match self.grid.block_of(CellId(pin.cell)) {
                None => continue,
                Some(block) => match store.block(job, block)? {
                    None => Some("it is not screened yet".to_owned()),
                    Some(columns) => self.refusal_of_pin(pin.cell, block, &columns),
                },
            };
            if let Some(reason) = refusal {
                faults.push(fault(
                    format!("choice.pin[{i}].cell"),
                    &pin.cell.to_string(),
                    format!("cannot be on a plate: {reason}"),
                    "unpin it, or declare or name what keeps it off",
                ));
            }
        }
        match faults.is_empty() {
            true => Ok(()),
            false => Err(EngineError::Input(faults)),
        }
    }

    fn refusal_of_pin(&self, cell: u64, block: BlockId, columns: &Columns) -> Option<String> {
        let at = (cell - self.grid.block_cells(block).start) as usize;
        let digits = self.grid.digits(CellId(cell))?;
        let reason = self.refusal(cell, &digits, columns, at)?;
        let may_be_pinned = [NOT_IN_FILTER, HOPELESS_CELL].contains(&reason);
        (!may_be_pinned).then(|| self.reasons[reason].clone())
    }

    /// The cells of a block that may be chosen, and how many were left out for each reason.
    fn passing(&self, block: BlockId, columns: &Columns) -> (Vec<Row>, Vec<u64>) {
        let first = self.grid.block_cells(block).start;
        let mut rows = Vec::new();
        let mut left_out = vec![0; self.reasons.len()];
        for i in 0..columns.len() {
            let cell = first + i as u64;
            let Some(digits) = self.grid.digits(CellId(cell)) else {
                continue;
            };
            match self.refusal(cell, &digits, columns, i) {
                Some(reason) => left_out[reason] += 1,
                None => rows.push(Row {
                    cell,
                    digits,
                    expected_yield: columns.expected_yield[i],
                    p_hit: columns.p_hit[i].min(STEPS),
                }),
            }
        }
        (rows, left_out)
    }

    fn refusal(
        &self,
        cell: u64,
        digits: &CellDigits,
        columns: &Columns,
        i: usize,
    ) -> Option<usize> {
        if columns.expected_yield[i] > STEPS {
            return Some(NOT_COVERED);
        }
        let is_stop = Severity::from_bits(columns.cautions[i]) == Some(Severity::Stop);
        if is_stop {
            let [_, _, stops] = self.grid.caution_categories(CellId(cell));
            if stops & !self.allowed_stops != 0 {
                return Some(STOPPED);
            }
        }
        if self.vetoed.contains(&cell) {
            return Some(VETOED);
        }
        let values = digits.to_array();
        let mut shelf = self.shelf.iter().zip(values);
        if shelf.any(|(shelf, value)| !shelf[value as usize]) {
            return Some(NOT_ON_SHELF);
        }
        let key = [
            digits.base,
            digits.solvent,
            digits.temperature,
            digits.formation_temperature,
        ];
        if let Some(reason) = self.deck.get(&key) {
            return Some(*reason);
        }
        if !self.filter.passes_all() && !self.filter.passes(digits, &columns.score(i)) {
            return Some(NOT_IN_FILTER);
        }
        (columns.expected_yield[i] < HOPELESS).then_some(HOPELESS_CELL)
    }
}

/// Greatest first in a list of a fixed length: the key, then the smaller hash, then the cell.
type Best = BinaryHeap<Reverse<(u32, Reverse<u64>, Reverse<u64>)>>;

fn keep(best: &mut Best, most: usize, key: u32, hash: u64, cell: u64) {
    let entry = Reverse((key, Reverse(hash), Reverse(cell)));
    if best.len() < most {
        best.push(entry);
    } else if best.peek().is_some_and(|least| entry < *least) {
        best.pop();
        best.push(entry);
    }
}

fn cells(best: Best) -> impl Iterator<Item = u64> {
    let sorted = best.into_sorted_vec().into_iter();
    sorted.map(|Reverse((_, _, Reverse(cell)))| cell)
}

/// What is kept while the scores are looked at.
struct Kept {
    seed: u64,
    /// Axes whose values make a stratum, beside the setting.
    strata_by: &'static [usize],
    /// Settings that are kept at most.
    most_settings: usize,
    /// Cells of each kind that a stratum keeps.
    per_stratum: usize,
    settings: BTreeMap<[u32; SETTING.len()], Strata>,
    /// Axis, value and number of cells of what must come.
    required: Vec<(usize, u32, usize)>,
    top: Best,
    most_top: usize,
    random: Best,
    most_random: usize,
    left_out: Vec<u64>,
}

/// The surest cells and the most doubtful of each stratum of a setting.
type Strata = BTreeMap<Vec<u32>, [Best; 2]>;

/// Temperature, temperature of the deprotonation, time and dosing time among the axes: what belongs to a whole plate.
const SETTING: [usize; 4] = [5, 6, 10, 11];
/// Cells of each kind that a stratum keeps at least before further settings are kept.
const PER_STRATUM: u64 = 2;

impl Kept {
    fn new(grid: &Grid, request: &PlanRequest, quotas: &[Quota]) -> Kept {
        let required = quotas.iter().filter(|quota| quota.least > 0);
        let sizes = grid.lattice().sizes();
        let strata = |axes: &[usize]| {
            let count = axes.iter().map(|&axis| u64::from(sizes[axis]));
            count.fold(1, u64::saturating_mul)
        };
        let shortlist = u64::from(request.choice.shortlist);
        let all_settings = strata(&SETTING);
        let plates = u64::from(request.plates.count).min(all_settings);
        let finer: [&[usize]; 3] = [&[0, 1], &[0], &[]];
        let fits = |axes: &&[usize]| 2 * plates * strata(axes) <= shortlist;
        let strata_by = finer.into_iter().find(fits).unwrap_or(&[]);
        // cells of both kinds, one of each stratum
        let one_of_each = 2 * strata(strata_by);
        let settings = (shortlist / (PER_STRATUM * one_of_each)).clamp(plates, all_settings);
        let wells = request.plates.wells.wells() * request.plates.count as usize;
        // a design asks for all allowed cells or an even sample of them, not for the best
        let (per_stratum, most_random) = match request.choice.design {
            None => (
                (shortlist / (one_of_each * settings)).max(1) as usize,
                RANDOM,
            ),
            Some(_) => (0, shortlist as usize),
        };
        Kept {
            seed: request.seed,
            per_stratum,
            most_random,
            strata_by,
            most_settings: settings as usize,
            settings: BTreeMap::new(),
            required: required
                .map(|quota| (quota.axis, quota.value, quota.least))
                .collect(),
            top: Best::new(),
            most_top: wells.min(MOST_OF_TOP),
            random: Best::new(),
            left_out: Vec::new(),
        }
    }

    fn take(&mut self, row: &Row) {
        let hash = scattered(self.seed, row.cell);
        let digits = row.digits.to_array();
        let stratum = self.strata_by.iter().map(|&axis| digits[axis]).collect();
        let setting = SETTING.map(|axis| digits[axis]);
        let strata = self.settings.entry(setting).or_default();
        let [sure, doubtful] = strata.entry(stratum).or_default();
        let sureness = u32::from(row.p_hit) + u32::from(row.expected_yield);
        keep(sure, self.per_stratum, sureness, hash, row.cell);
        // p (1 − p), at most a quarter of 65534²
        let doubt = u32::from(row.p_hit) * u32::from(STEPS - row.p_hit);
        keep(doubtful, self.per_stratum, doubt, hash, row.cell);
        for &(axis, value, least) in &self.required {
            if digits[axis] == value {
                // longer than the key of a stratum, so that it meets none
                let key = vec![u32::MAX, axis as u32, value];
                let [sure, _] = strata.entry(key).or_default();
                keep(sure, least, sureness, hash, row.cell);
            }
        }
        // the ranking's own order: ties by cell
        keep(
            &mut self.top,
            self.most_top,
            row.expected_yield.into(),
            row.cell,
            row.cell,
        );
        keep(&mut self.random, self.most_random, 0, hash, row.cell);
    }

    fn count(&mut self, left_out: &[u64]) {
        self.left_out
            .resize(left_out.len().max(self.left_out.len()), 0);
        let counts = self.left_out.iter_mut().zip(left_out);
        counts.for_each(|(sum, more)| *sum += more);
    }

    fn into_shortlist(self, rules: &Rules<'_>) -> Shortlist {
        let left_out = rules.reasons.iter().zip(self.left_out);
        let kept = most_covering(self.settings.into_values().collect(), self.most_settings);
        let strata = kept.into_iter().flat_map(Strata::into_values);
        Shortlist {
            chosen: strata.flatten().flat_map(cells).collect(),
            top: cells(self.top).collect(),
            random: cells(self.random).collect(),
            left_out: left_out
                .filter(|(_, cells)| *cells > 0)
                .map(|(reason, cells)| LeftOut {
                    reason: reason.clone(),
                    cells,
                })
                .collect(),
        }
    }
}

/// The settings with which most strata have a sure cell: each adds most to those before it, or where none adds anything
/// more, has most by itself.
fn most_covering(mut settings: Vec<Strata>, most: usize) -> Vec<Strata> {
    let surest = |[sure, _]: &[Best; 2]| {
        let keys = sure.iter().map(|Reverse((key, _, _))| u64::from(*key));
        keys.max().unwrap_or(0)
    };
    let mut covered: BTreeMap<Vec<u32>, u64> = BTreeMap::new();
    let mut kept = Vec::new();
    while kept.len() < most && !settings.is_empty() {
        let worth = |strata: &Strata| {
            let each = strata.iter().map(|(stratum, cells)| {
                let surest = surest(cells);
                let before = covered.get(stratum).copied().unwrap_or(0);
                (surest.saturating_sub(before), surest)
            });
            each.fold((0, 0), |(gain, all), (more, surest)| {
                (gain + more, all + surest)
            })
        };
        let worths: Vec<(u64, u64)> = settings.iter().map(worth).collect();
        // of settings alike the first
        let best = (0..settings.len()).rev().max_by_key(|&i| worths[i]);
        let strata = settings.remove(best.unwrap_or(0));
        for (stratum, cells) in &strata {
            let known = covered.entry(stratum.clone()).or_default();
            *known = surest(cells).max(*known);
        }
        kept.push(strata);
    }
    kept
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Sure cells by stratum and key.
    fn setting(sure: &[(u32, u32)]) -> Strata {
        let stratum = |&(stratum, key): &(u32, u32)| {
            let mut cells = [Best::new(), Best::new()];
            keep(&mut cells[0], 1, key, 0, u64::from(stratum));
            (vec![stratum], cells)
        };
        sure.iter().map(stratum).collect()
    }

    #[test]
    fn a_setting_stays_for_what_the_others_have_not() {
        // two good settings for the same strata, and a poorer one for another stratum
        let settings = vec![
            setting(&[(1, 80), (2, 80)]),
            setting(&[(1, 90), (2, 85)]),
            setting(&[(3, 40)]),
        ];
        let kept = most_covering(settings.clone(), 2);
        let strata: Vec<Vec<u32>> = kept.iter().flat_map(Strata::keys).cloned().collect();
        assert_eq!(strata, [[1], [2], [3]]);
        // with room for all, all stay
        assert_eq!(most_covering(settings, 9).len(), 3);
    }
}
