//! How many cells may and must carry a value of an axis.

use crate::Candidate;

/// Least and most cells, over all plates of a plan, that carry a value of an axis.
#[derive(Clone, Debug, PartialEq)]
pub struct Quota {
    /// Index of the axis in the order of [`enolattice_grid::AXES`].
    pub axis: usize,
    /// Index of the value on it.
    pub value: u32,
    /// At least so many.
    pub least: usize,
    /// At most so many.
    pub most: usize,
    /// The axis and value in words, for messages.
    pub name: String,
    /// Why: what was asked, or what is on the shelf.
    pub reason: String,
}

/// Quotas with what is taken of them.
#[derive(Clone, Debug)]
pub(crate) struct Quotas<'a> {
    quotas: &'a [Quota],
    candidates: &'a [Candidate],
    taken: Vec<usize>,
}

impl<'a> Quotas<'a> {
    pub(crate) fn new(quotas: &'a [Quota], candidates: &'a [Candidate]) -> Quotas<'a> {
        Quotas {
            quotas,
            candidates,
            taken: vec![0; quotas.len()],
        }
    }

    fn touches(&self, quota: &Quota, candidate: usize) -> bool {
        self.candidates[candidate].digits.to_array()[quota.axis] == quota.value
    }

    fn touched(&self, candidate: usize) -> impl Iterator<Item = usize> + '_ {
        (0..self.quotas.len()).filter(move |&i| self.touches(&self.quotas[i], candidate))
    }

    pub(crate) fn allows(&self, candidate: usize) -> bool {
        self.touched(candidate)
            .all(|i| self.taken[i] < self.quotas[i].most)
    }

    /// Number of lower limits that a candidate would help to meet.
    pub(crate) fn helps(&self, candidate: usize) -> usize {
        self.touched(candidate)
            .filter(|&i| self.taken[i] < self.quotas[i].least)
            .count()
    }

    pub(crate) fn take(&mut self, candidate: usize) {
        let touched: Vec<usize> = self.touched(candidate).collect();
        touched.into_iter().for_each(|i| self.taken[i] += 1);
    }

    pub(crate) fn give_back(&mut self, candidate: usize) {
        let touched: Vec<usize> = self.touched(candidate).collect();
        touched.into_iter().for_each(|i| self.taken[i] -= 1);
    }

    /// Cells that are still missing for the lower limits.
    pub(crate) fn lack(&self) -> usize {
        self.unmet().map(|(_, missing)| missing).sum()
    }

    /// Lower limits that are not met, and by how many cells.
    pub(crate) fn unmet(&self) -> impl Iterator<Item = (&'a Quota, usize)> + '_ {
        self.quotas
            .iter()
            .zip(&self.taken)
            .filter(|(quota, taken)| **taken < quota.least)
            .map(|(quota, taken)| (quota, quota.least - taken))
    }

    /// Lower limits of the leaving cell (given back already) that the coming one would leave unmet.
    pub(crate) fn would_lack(&self, leaving: usize, coming: usize) -> usize {
        self.touched(leaving)
            .filter(|&i| {
                self.taken[i] < self.quotas[i].least && !self.touches(&self.quotas[i], coming)
            })
            .count()
    }
}
