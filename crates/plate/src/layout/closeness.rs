//! Replicates, and controls, that stand close to each other.

use std::collections::BTreeMap;

use super::LayoutItem;
use super::arrangement::Arrangement;

/// Larger families are spread by their counts in rows, columns and quadrants alone.
const LARGEST_FAMILY: usize = 64;

/// Families of items that should stand far apart: replicates of one cell, and all controls.
pub(super) struct Closeness {
    families: Vec<Vec<usize>>,
    /// The families of each item.
    of_item: Vec<Vec<usize>>,
    /// 1 / closeness that is expected at random.
    scale: f64,
}

impl Closeness {
    pub(super) fn new(items: &[&LayoutItem], arrangement: &Arrangement) -> Closeness {
        let mut sets: BTreeMap<(bool, u32), Vec<usize>> = BTreeMap::new();
        for (index, item) in items.iter().enumerate() {
            if let Some(set) = item.replicates {
                sets.entry((false, set)).or_default().push(index);
            }
            if item.control.is_some() {
                sets.entry((true, 0)).or_default().push(index);
            }
        }
        let families: Vec<Vec<usize>> = sets
            .into_values()
            .filter(|family| (2..=LARGEST_FAMILY).contains(&family.len()))
            .collect();
        let mut of_item = vec![Vec::new(); items.len()];
        for (family, members) in families.iter().enumerate() {
            for member in members {
                of_item[*member].push(family);
            }
        }
        let pairs: usize = families.iter().map(|f| f.len() * (f.len() - 1) / 2).sum();
        let expected = pairs as f64 * mean_closeness(arrangement);
        Closeness {
            families,
            of_item,
            scale: if expected > 0.0 { 1.0 / expected } else { 0.0 },
        }
    }

    /// Σ 1/d² over the pairs of one item with its families, d in pitches; in units of what all pairs
    /// together have at random.
    pub(super) fn of(&self, item: usize, arrangement: &Arrangement) -> f64 {
        let here = arrangement.well_of(item);
        let mut sum = 0.0;
        for family in &self.of_item[item] {
            for other in &self.families[*family] {
                if *other != item {
                    let squared = here.squared_distance(arrangement.well_of(*other));
                    sum += 1.0 / f64::from(squared);
                }
            }
        }
        sum * self.scale
    }

    /// Whether there is anything to keep apart.
    pub(super) fn matters(&self) -> bool {
        self.scale > 0.0
    }
}

/// Mean of 1/d² over all pairs of wells that are used.
fn mean_closeness(arrangement: &Arrangement) -> f64 {
    let wells = arrangement.wells();
    let (mut sum, mut pairs) = (0.0, 0.0);
    for (index, one) in wells.iter().enumerate() {
        for other in &wells[index + 1..] {
            sum += 1.0 / f64::from(one.squared_distance(*other));
            pairs += 1.0;
        }
    }
    if pairs > 0.0 { sum / pairs } else { 0.0 }
}
