//! Classes of atoms that the graph cannot tell apart.

use std::collections::BTreeMap;

use crate::{Atom, Bond};

/// Splits atoms by element, charge, hydrogens, aromaticity, isotope, then again and again by
/// the classes of their neighbours until nothing splits any more.
pub(crate) fn refine(
    atoms: &[Atom],
    isotopes: &[u16],
    neighbours: &[Vec<(usize, Bond)>],
) -> Vec<u32> {
    let invariants = atoms
        .iter()
        .zip(isotopes)
        .map(|(a, isotope)| (a.element, a.charge, a.hydrogens, a.aromatic, *isotope));
    let mut classes = number_by_first_appearance(invariants);
    loop {
        let surroundings = neighbours.iter().enumerate().map(|(atom, around)| {
            let mut around: Vec<(Bond, u32)> = around
                .iter()
                .map(|(other, bond)| (*bond, classes[*other]))
                .collect();
            around.sort_unstable();
            (classes[atom], around)
        });
        let finer = number_by_first_appearance(surroundings);
        if finer == classes {
            return classes;
        }
        classes = finer;
    }
}

fn number_by_first_appearance<K: Ord>(keys: impl Iterator<Item = K>) -> Vec<u32> {
    let mut seen = BTreeMap::new();
    keys.map(|key| {
        let next = seen.len() as u32;
        *seen.entry(key).or_insert(next)
    })
    .collect()
}
