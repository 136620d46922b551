//! A start made more even by swaps.

use std::collections::BTreeMap;

use super::LayoutItem;
use super::arrangement::Arrangement;
use super::balance::Balances;
use super::closeness::Closeness;
use crate::random::Random;

/// Swaps tried for each item.
const SWAPS_PER_ITEM: usize = 400;
/// Swaps from which the first threshold is taken.
const TRIALS: usize = 128;
/// The first threshold in units of the mean change of a swap.
const FIRST_THRESHOLD: f64 = 0.5;
/// The share of swaps after which the threshold is 0.
const COOLED_AT: f64 = 0.7;

/// Which swaps are tried.
pub(super) enum Moves {
    /// Any two items.
    Any,
    /// Two items of one column, or of one value of the axis that columns are ordered by.
    KeepingColumns {
        /// For each item the items of its value.
        alike: Vec<Vec<usize>>,
        value_of: Vec<usize>,
    },
}

impl Moves {
    pub(super) fn keeping_columns(items: &[&LayoutItem], axis: usize) -> Moves {
        let mut by_value: BTreeMap<Option<u32>, Vec<usize>> = BTreeMap::new();
        for (index, item) in items.iter().enumerate() {
            by_value.entry(item.groups[axis]).or_default().push(index);
        }
        let mut value_of = vec![0; items.len()];
        for (value, members) in by_value.values().enumerate() {
            for member in members {
                value_of[*member] = value;
            }
        }
        Moves::KeepingColumns {
            alike: by_value.into_values().collect(),
            value_of,
        }
    }

    fn propose(&self, arrangement: &Arrangement, random: &mut Random) -> Option<(usize, usize)> {
        let one = random.below(arrangement.len());
        let other = match self {
            Moves::Any => random.below(arrangement.len()),
            Moves::KeepingColumns { alike, value_of } => {
                let alike = &alike[value_of[one]];
                if random.below(2) == 0 {
                    alike[random.below(alike.len())]
                } else {
                    neighbour_in_column(arrangement, one, random)
                }
            }
        };
        arrangement.may_swap(one, other).then_some((one, other))
    }
}

/// Another item of the same column: slots of one column are tried until one is met.
fn neighbour_in_column(arrangement: &Arrangement, item: usize, random: &mut Random) -> usize {
    let column = arrangement.well_of(item).column;
    let wells = arrangement.wells();
    let in_column = wells.iter().filter(|well| well.column == column).count();
    let chosen = random.below(in_column);
    let mut slots = (0..wells.len()).filter(|slot| wells[*slot].column == column);
    slots
        .nth(chosen)
        .map_or(item, |slot| arrangement.item_in(slot))
}

/// Threshold accepting (Dueck & Scheuer 1990, doi:10.1016/0021-9991(90)90201-B): swaps that make things
/// worse by less than a threshold are kept, and the threshold falls to 0. It needs no exponential, so
/// it goes the same way on every machine. The best arrangement met is returned, among those that are
/// at least as even as the start.
pub(super) fn improve(
    start: Arrangement,
    balances: &mut Balances,
    closeness: &Closeness,
    moves: &Moves,
    random: &mut Random,
) -> Arrangement {
    let mut search = Search {
        now: start,
        balances,
        closeness,
        per_term: 0.0,
    };
    search.per_term = match search.balances.terms() {
        0 => 0.0,
        terms => 1.0 / terms as f64,
    };
    let nothing_to_do = search.per_term == 0.0 && !closeness.matters();
    if search.now.len() < 2 || nothing_to_do {
        return search.now;
    }
    let steps = SWAPS_PER_ITEM * search.now.len();
    let first = FIRST_THRESHOLD * search.mean_change(moves, random);
    let (mut unevenness, mut cost) = (0.0, 0.0);
    let (mut best, mut best_cost) = (search.now.clone(), 0.0);
    for step in 0..steps {
        let cooled = step as f64 / (COOLED_AT * steps as f64);
        let threshold = first * (1.0 - cooled).max(0.0);
        let Some((one, other)) = moves.propose(&search.now, random) else {
            continue;
        };
        let change = search.swap(one, other);
        if change.total() > threshold {
            search.swap(one, other);
            continue;
        }
        unevenness += change.unevenness;
        cost += change.total();
        // rounding of many small steps must not count as an improvement
        if cost < best_cost - 1e-9 && unevenness <= 1e-9 {
            best.copy_places(&search.now);
            best_cost = cost;
        }
    }
    search.balances.recount(&best);
    best
}

struct Search<'a> {
    now: Arrangement,
    balances: &'a mut Balances,
    closeness: &'a Closeness,
    /// Weight of one term of the balance, so that the mean counts as much as the closeness.
    per_term: f64,
}

#[derive(Clone, Copy)]
struct Change {
    unevenness: f64,
    closeness: f64,
}

impl Change {
    fn total(self) -> f64 {
        self.unevenness + self.closeness
    }
}

impl Search<'_> {
    fn swap(&mut self, one: usize, other: usize) -> Change {
        let before = self.close(one, other);
        self.now.swap(one, other);
        let after = self.close(one, other);
        let unevenness = self.balances.swapped(&self.now, one, other) * self.per_term;
        Change {
            unevenness,
            closeness: after - before,
        }
    }

    /// A pair of the two is in both sums, before and after, and falls out of the difference.
    fn close(&self, one: usize, other: usize) -> f64 {
        self.closeness.of(one, &self.now) + self.closeness.of(other, &self.now)
    }

    /// Mean size of the change of a swap.
    fn mean_change(&mut self, moves: &Moves, random: &mut Random) -> f64 {
        let (mut sum, mut number) = (0.0, 0.0);
        for _ in 0..TRIALS {
            if let Some((one, other)) = moves.propose(&self.now, random) {
                sum += self.swap(one, other).total().abs();
                self.swap(one, other);
                number += 1.0;
            }
        }
        if number > 0.0 { sum / number } else { 0.0 }
    }
}
