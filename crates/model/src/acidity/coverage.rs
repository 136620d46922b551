//! What the fit has seen.

use super::contribution::{Contribution, Form, Role, Uptake};

/// The surroundings of the sites of a fit, with a measure of likeness.
///
/// Two sites differ by `Σ w·|Δx|`: for a correction w is its size; an increment in place of
/// another of the same kind (ester for ketone) counts little, one too many or too few counts
/// [`Coverage::KIND`]. Sites of different classes (phenol, alcohol) have nothing in common.
#[derive(Clone, Debug)]
pub struct Coverage {
    sites: Vec<Contribution>,
    parts: Vec<Part>,
}

/// How a difference in a coefficient's descriptor counts.
#[derive(Clone, Copy, Debug)]
enum Part {
    Anchor,
    Group(Uptake),
    /// Size of the correction, pK units.
    Term(f64),
}

impl Coverage {
    /// Distance to the nearest site of the fit beyond which an estimate is outside.
    const EDGE: f64 = 6.0;
    /// An increment too many or too few.
    const KIND: f64 = 8.0;
    /// Half of what an increment in place of another of its kind counts.
    const SWAP: f64 = 1.5;
    /// Most and least that a unit of a correction counts, pK units.
    const TERM: (f64, f64) = (0.5, 8.0);

    /// Takes the sites of a fit.
    pub fn new(sites: Vec<Contribution>, form: &Form, coefficients: &[f64]) -> Coverage {
        let parts = form
            .roles()
            .iter()
            .zip(coefficients)
            .map(|(role, value)| match role {
                Role::Anchor => Part::Anchor,
                Role::Group(uptake) => Part::Group(*uptake),
                _ => Part::Term(value.abs().clamp(Self::TERM.0, Self::TERM.1)),
            })
            .collect();
        Coverage { sites, parts }
    }

    /// Whether the fit has seen a site like this one.
    pub fn covers(&self, site: &Contribution) -> bool {
        site.unknown() == 0
            && self
                .sites
                .iter()
                .any(|seen| self.distance(site, seen) <= Self::EDGE)
    }

    /// The same, where the nearest site of the fit is known to be at this distance.
    pub(super) fn covers_at(&self, site: &Contribution, nearest: Option<f64>) -> bool {
        site.unknown() == 0 && nearest.is_some_and(|distance| distance <= Self::EDGE)
    }

    /// The `count` sites of the fit nearest to this one, by their number in the fit, with their
    /// distances, nearest first. Sites of another class of acid are none.
    pub fn nearest(&self, site: &Contribution, count: usize) -> Vec<(usize, f64)> {
        let mut distances: Vec<(usize, f64)> = self
            .sites
            .iter()
            .enumerate()
            .map(|(i, seen)| (i, self.distance(site, seen)))
            .filter(|(_, distance)| distance.is_finite())
            .collect();
        let order = |a: &(usize, f64), b: &(usize, f64)| a.1.total_cmp(&b.1).then(a.0.cmp(&b.0));
        if distances.len() > count {
            distances.select_nth_unstable_by(count, order);
            distances.truncate(count);
        }
        distances.sort_unstable_by(order);
        distances
    }

    fn distance(&self, first: &Contribution, second: &Contribution) -> f64 {
        let mut kinds = [0.0; Uptake::COUNT];
        let mut distance = 0.0;
        for (index, difference) in differences(first.linear(), second.linear()) {
            match self.parts[index] {
                Part::Anchor if difference != 0.0 => return f64::INFINITY,
                Part::Anchor => {}
                Part::Group(uptake) => {
                    kinds[uptake as usize] += difference;
                    distance += Self::SWAP * difference.abs();
                }
                Part::Term(weight) => distance += weight * difference.abs(),
            }
        }
        distance + Self::KIND * kinds.iter().map(|kind| kind.abs()).sum::<f64>()
    }
}

/// Differences of two sparse vectors sorted by index.
fn differences<'a>(
    first: &'a [(usize, f64)],
    second: &'a [(usize, f64)],
) -> impl Iterator<Item = (usize, f64)> + 'a {
    let (mut i, mut j) = (0, 0);
    std::iter::from_fn(move || {
        let left = first.get(i).map_or(usize::MAX, |(index, _)| *index);
        let right = second.get(j).map_or(usize::MAX, |(index, _)| *index);
        let index = left.min(right);
        if index == usize::MAX {
            return None;
        }
        let mut difference = 0.0;
        if left == index {
            difference += first[i].1;
            i += 1;
        }
        if right == index {
            difference -= second[j].1;
            j += 1;
        }
        Some((index, difference))
    })
}
