//! Greedy choice, then exchange.

use std::collections::BinaryHeap;

use crate::choice::objective::{Chosen, Objective};
use crate::choice::quota::Quotas;

/// A candidate with what it could still add at most.
#[derive(Debug, PartialEq)]
struct Offer {
    gain: f64,
    candidate: usize,
    /// Number of cells chosen when the gain was worked out.
    at: usize,
}

impl Eq for Offer {}

impl Ord for Offer {
    /// Greatest gain first, ties by the candidate's number: the same choice on any machine.
    fn cmp(&self, other: &Offer) -> std::cmp::Ordering {
        self.gain
            .total_cmp(&other.gain)
            .then(other.candidate.cmp(&self.candidate))
    }
}

impl PartialOrd for Offer {
    fn partial_cmp(&self, other: &Offer) -> Option<std::cmp::Ordering> {
        Some(self.cmp(other))
    }
}

/// Adds cells until there are as many as wanted or none is left that may be added.
///
/// The worth is monotone and submodular, so of the best set of this size the greedy one has at least 1 − 1/e where
/// nothing but its size is limited (Nemhauser, Wolsey and Fisher, Math. Program. 1978, 14, 265). A gain never grows with
/// the set, so that one worked out earlier bounds it from above and most need not be worked out again (Minoux 1978).
pub(crate) fn fill(
    objective: &Objective<'_>,
    chosen: &mut Chosen,
    quotas: &mut Quotas<'_>,
    among: &[usize],
    wanted: usize,
) {
    required(objective, chosen, quotas, among, wanted);
    let gains = among.iter().map(|&candidate| Offer {
        gain: objective.gain(chosen, candidate),
        candidate,
        at: chosen.members.len(),
    });
    let mut heap: BinaryHeap<Offer> = gains.collect();
    while chosen.members.len() < wanted
        && let Some(offer) = heap.pop()
    {
        if !quotas.allows(offer.candidate) || chosen.members.contains(&offer.candidate) {
            continue;
        }
        if offer.at == chosen.members.len() {
            quotas.take(offer.candidate);
            objective.add(chosen, offer.candidate);
        } else {
            heap.push(Offer {
                gain: objective.gain(chosen, offer.candidate),
                at: chosen.members.len(),
                ..offer
            });
        }
    }
}

/// First what the lower limits ask for: of the cells that help to meet one, the best.
fn required(
    objective: &Objective<'_>,
    chosen: &mut Chosen,
    quotas: &mut Quotas<'_>,
    among: &[usize],
    wanted: usize,
) {
    while chosen.members.len() < wanted && quotas.lack() > 0 {
        let best = among
            .iter()
            .filter(|&&candidate| {
                quotas.helps(candidate) > 0
                    && quotas.allows(candidate)
                    && !chosen.members.contains(&candidate)
            })
            .map(|&candidate| {
                (
                    quotas.helps(candidate),
                    objective.gain(chosen, candidate),
                    candidate,
                )
            })
            .max_by(|a, b| a.0.cmp(&b.0).then(a.1.total_cmp(&b.1)).then(b.2.cmp(&a.2)));
        let Some((_, _, candidate)) = best else {
            return;
        };
        quotas.take(candidate);
        objective.add(chosen, candidate);
    }
}

/// Candidates that are tried in the place of a chosen one.
const TRIED: usize = 160;

/// Replaces single cells by others as long as that raises the worth, each cell looked at once.
///
/// A set that cannot be bettered so has at least half of the best one's worth under any limits that form a matroid
/// (Fisher, Nemhauser and Wolsey 1978); in practice it gains a little on the greedy one.
pub(crate) fn exchange(
    objective: &Objective<'_>,
    chosen: &mut Chosen,
    quotas: &mut Quotas<'_>,
    among: &[usize],
    fixed: usize,
) -> usize {
    let mut offers: Vec<(f64, usize)> = among
        .iter()
        .filter(|candidate| !chosen.members.contains(candidate))
        .map(|&candidate| (objective.gain(chosen, candidate), candidate))
        .collect();
    offers.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
    offers.truncate(TRIED);
    let mut replaced = 0;
    for position in (fixed..chosen.members.len()).rev() {
        let leaving = chosen.members[position];
        let mut rest = chosen.members.clone();
        rest.remove(position);
        let without = objective.of(&rest);
        quotas.give_back(leaving);
        let kept = objective.gain(&without, leaving);
        let best = offers
            .iter()
            .enumerate()
            .filter(|(_, (_, candidate))| {
                quotas.allows(*candidate) && quotas.would_lack(leaving, *candidate) == 0
            })
            .map(|(at, (_, candidate))| (objective.gain(&without, *candidate), at))
            .max_by(|a, b| a.0.total_cmp(&b.0).then(b.1.cmp(&a.1)));
        match best {
            Some((gain, at)) if gain > kept * (1.0 + 1e-9) + 1e-12 => {
                let coming = offers[at].1;
                offers[at].1 = leaving;
                quotas.take(coming);
                *chosen = without;
                objective.add(chosen, coming);
                // the new cell stands where the old one stood
                let last = chosen.members.pop().expect("just added");
                chosen.members.insert(position, last);
                replaced += 1;
            }
            _ => quotas.take(leaving),
        }
    }
    replaced
}
