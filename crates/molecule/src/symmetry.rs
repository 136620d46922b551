//! Classes of atoms that the graph cannot tell apart.

use crate::{Atom, Bond};

/// Splits atoms by element, charge, hydrogens, aromaticity, isotope, then again and again by
/// the classes of their neighbours until nothing splits any more.
///
/// The partition that is left does not depend on the order of the splits, so that each is made by one
/// class, and a class that was split by need not be looked at again as a whole: all but one of its
/// parts say the same (Hopcroft 1971, "An n log n algorithm for minimizing states in a finite
/// automaton").
pub(crate) fn refine(
    atoms: &[Atom],
    isotopes: &[u16],
    neighbours: &[Vec<(usize, Bond)>],
) -> Vec<u32> {
    let invariants = atoms
        .iter()
        .zip(isotopes)
        .map(|(a, isotope)| (a.element, a.charge, a.hydrogens, a.aromatic, *isotope));
    let mut partition = Partition::by(numbered(invariants));
    let mut splitters: Vec<usize> = (0..partition.members.len()).collect();
    while let Some(splitter) = splitters.pop() {
        let before = partition.members.len();
        partition.split_by(splitter, neighbours);
        splitters.extend(before..partition.members.len());
    }
    numbered(partition.class_of.into_iter())
}

/// The number of each key, by first appearance.
fn numbered<K: PartialEq>(keys: impl Iterator<Item = K>) -> Vec<u32> {
    let mut seen: Vec<K> = Vec::new();
    keys.map(|key| {
        let known = seen.iter().position(|other| *other == key);
        known.unwrap_or_else(|| {
            seen.push(key);
            seen.len() - 1
        }) as u32
    })
    .collect()
}

/// Classes of atoms as far as they are split.
struct Partition {
    class_of: Vec<u32>,
    members: Vec<Vec<usize>>,
    /// Marks for [`Partition::unbound`], all of them false between its calls.
    is_bound: Vec<bool>,
}

/// An atom with its class and its bonds to the class that splits.
#[derive(PartialEq, Eq, PartialOrd, Ord)]
struct Bound {
    class: u32,
    bonds: u64,
    atom: usize,
}

impl Partition {
    fn by(class_of: Vec<u32>) -> Partition {
        let classes = class_of.iter().max().map_or(0, |last| *last as usize + 1);
        let mut members = vec![Vec::new(); classes];
        for (atom, class) in class_of.iter().enumerate() {
            members[*class as usize].push(atom);
        }
        Partition {
            is_bound: vec![false; class_of.len()],
            class_of,
            members,
        }
    }

    /// Splits every class by how its atoms are bound to those of one class. The largest part of each
    /// keeps its number.
    fn split_by(&mut self, splitter: usize, neighbours: &[Vec<(usize, Bond)>]) {
        let bound = self.bound_to(splitter, neighbours);
        for of_class in bound.chunk_by(|a, b| a.class == b.class) {
            let class = of_class[0].class as usize;
            let mut parts: Vec<Vec<usize>> = of_class
                .chunk_by(|a, b| a.bonds == b.bonds)
                .map(|part| part.iter().map(|bound| bound.atom).collect())
                .collect();
            if self.members[class].len() > of_class.len() {
                parts.push(self.unbound(class, of_class));
            }
            parts.sort_by_key(Vec::len);
            let Some(largest) = parts.pop().filter(|_| !parts.is_empty()) else {
                continue;
            };
            self.members[class] = largest;
            for part in parts {
                for atom in &part {
                    self.class_of[*atom] = self.members.len() as u32;
                }
                self.members.push(part);
            }
        }
    }

    /// The atoms of a class without those bound to the class that splits.
    fn unbound(&mut self, class: usize, bound: &[Bound]) -> Vec<usize> {
        bound
            .iter()
            .for_each(|bound| self.is_bound[bound.atom] = true);
        let mut members = std::mem::take(&mut self.members[class]);
        members.retain(|atom| !self.is_bound[*atom]);
        bound
            .iter()
            .for_each(|bound| self.is_bound[bound.atom] = false);
        members
    }

    /// Atoms bound to a class, by class and by their bonds to it.
    fn bound_to(&self, splitter: usize, neighbours: &[Vec<(usize, Bond)>]) -> Vec<Bound> {
        let mut bonds: Vec<(usize, Bond)> = self.members[splitter]
            .iter()
            .flat_map(|atom| &neighbours[*atom])
            .copied()
            .collect();
        bonds.sort_unstable();
        let mut bound: Vec<Bound> = bonds
            .chunk_by(|a, b| a.0 == b.0)
            .map(|bonds| Bound {
                class: self.class_of[bonds[0].0],
                bonds: counted(bonds),
                atom: bonds[0].0,
            })
            .collect();
        bound.sort_unstable();
        bound
    }
}

/// How many bonds of each order there are, sixteen bits each.
fn counted(bonds: &[(usize, Bond)]) -> u64 {
    bonds
        .iter()
        .map(|(_, bond)| 1u64 << (16 * *bond as u32))
        .sum()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::Molecule;

    /// The plain way: all atoms by class and surroundings, until nothing changes.
    fn round_by_round(neighbours: &[Vec<(usize, Bond)>], mut classes: Vec<u32>) -> Vec<u32> {
        loop {
            let surroundings = neighbours.iter().enumerate().map(|(atom, around)| {
                let mut around: Vec<(Bond, u32)> = around
                    .iter()
                    .map(|(other, bond)| (*bond, classes[*other]))
                    .collect();
                around.sort_unstable();
                (classes[atom], around)
            });
            let finer = numbered(surroundings);
            if finer == classes {
                return classes;
            }
            classes = finer;
        }
    }

    #[test]
    fn splits_end_where_passes_over_all_atoms_end() {
        let chain = "C".repeat(61);
        let dendrimer = "C(CC(CC)(CC)CC)(CC(CC)(CC)CC)CC(CC)(CC)CC";
        let prismane = "C12C3C4C1C5C2C3C45";
        for smiles in [
            &chain,
            dendrimer,
            prismane,
            "C1CC2CCC1CC2",
            "CC(C)=C=C(C)C",
            "OC(=O)c1ccc(cc1)-c1ccc(cc1)C(=O)[O-]",
            "FC(F)(F)S(=O)(=O)N=P(N)(N)N",
            "[13CH3]CC",
            "c1ccc2cc3ccccc3cc2c1",
        ] {
            let molecule = Molecule::parse(smiles).unwrap();
            let isotopes: Vec<u16> = molecule
                .kekule
                .atoms()
                .map(|(_, atom)| atom.isotope.unwrap_or(0))
                .collect();
            let atoms = molecule.atoms.iter().zip(&isotopes);
            let invariants =
                numbered(atoms.map(|(a, i)| (a.element, a.charge, a.hydrogens, a.aromatic, *i)));
            let expected = round_by_round(&molecule.neighbours, invariants);
            assert_eq!(molecule.symmetry_classes, expected, "{smiles}");
        }
    }
}
