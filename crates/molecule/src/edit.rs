//! Edits of a Kekulé graph that keep the stereo they do not touch.

use chematic::core::{self as graph, AtomIdx, BondOrder, Chirality, ez_markers};
use chematic::smiles;

use crate::{Molecule, StructureError};

/// A graph under edit. Atoms keep their indices until [`Draft::finish`].
///
/// Double-bond geometry is read once and written back at the end, because a `/`
/// mark on a single bond would otherwise speak for any double bond that an edit
/// puts beside it.
pub(crate) struct Draft {
    graph: graph::Molecule,
    hydrogens: Vec<u8>,
    geometry: Vec<ez_markers::EzFact>,
    removed: Vec<bool>,
    cut: Vec<graph::BondIdx>,
}

fn index(atom: usize) -> AtomIdx {
    AtomIdx(atom as u32)
}

impl Draft {
    /// A draft of one molecule.
    pub(crate) fn of(molecule: &Molecule) -> Draft {
        let mut graph = molecule.kekule.clone();
        let geometry = ez_markers::read_ez_facts(&graph).map_or_else(Vec::new, |(facts, _)| facts);
        clear_marks(&mut graph);
        Draft {
            removed: vec![false; graph.atom_count()],
            cut: Vec::new(),
            hydrogens: molecule.atoms().iter().map(|a| a.hydrogens).collect(),
            graph,
            geometry,
        }
    }

    /// Adds a second molecule; returns what must be added to its atom indices.
    pub(crate) fn append(&mut self, molecule: &Molecule) -> usize {
        let offset = self.graph.atom_count();
        let other = Draft::of(molecule);
        let bond_offset = self.graph.bond_count() as u32;
        for (_, atom) in other.graph.atoms() {
            self.graph.add_atom(atom.clone());
        }
        for (_, bond) in other.graph.bonds() {
            self.bind(
                bond.atom1.0 as usize + offset,
                bond.atom2.0 as usize + offset,
                bond.order,
            );
        }
        for atom in 0..other.graph.atom_count() {
            if let Some(order) = other.graph.stereo_neighbor_order(index(atom)) {
                let moved = order.iter().map(|n| shifted(*n, offset)).collect();
                self.graph
                    .set_stereo_neighbor_order(index(atom + offset), moved);
            }
        }
        self.geometry
            .extend(other.geometry.into_iter().map(|mut fact| {
                fact.double.0 += bond_offset;
                for end in &mut fact.ends {
                    end.atom.0 += offset as u32;
                    end.reference.0 += bond_offset;
                }
                fact
            }));
        self.hydrogens.extend(other.hydrogens);
        self.removed.extend(other.removed);
        offset
    }

    /// A new bond; atoms that are bound already keep the bond they have.
    pub(crate) fn bind(&mut self, a: usize, b: usize, order: BondOrder) {
        let _already_bound = self.graph.add_bond(index(a), index(b), order);
    }

    /// Changes the order of a bond.
    pub(crate) fn reorder(&mut self, a: usize, b: usize, order: BondOrder) {
        if let Some(bond) = self.bond(a, b) {
            self.graph.set_bond_order(bond, order);
        }
    }

    fn bond(&self, a: usize, b: usize) -> Option<graph::BondIdx> {
        self.graph
            .neighbors(index(a))
            .find(|(other, _)| *other == index(b))
            .map(|(_, bond)| bond)
    }

    /// Takes a bond away and keeps both its ends.
    pub(crate) fn cut(&mut self, a: usize, b: usize) {
        // Bonds keep their indices until the end, since the geometry names bonds.
        self.cut.extend(self.bond(a, b));
    }

    /// Changes the formal charge of an atom.
    pub(crate) fn set_charge(&mut self, atom: usize, charge: i8) {
        self.graph.set_charge(index(atom), charge);
        self.set_hydrogens(atom, self.hydrogens[atom]);
    }

    /// Atomic number of an atom.
    pub(crate) fn element(&self, atom: usize) -> u8 {
        self.graph.atom(index(atom)).element.atomic_number()
    }

    /// Hydrogens on an atom.
    pub(crate) fn hydrogens(&self, atom: usize) -> u8 {
        self.hydrogens[atom]
    }

    /// Removes all atoms from `first` on but one.
    pub(crate) fn keep_only(&mut self, kept: usize, first: usize) {
        for atom in first..self.removed.len() {
            self.removed[atom] = atom != kept;
        }
    }

    /// Gives an atom one hydrogen more.
    pub(crate) fn add_hydrogen(&mut self, atom: usize) {
        self.set_hydrogens(atom, self.hydrogens[atom] + 1);
    }

    /// Takes a hydrogen from an atom.
    ///
    /// # Errors
    /// The atom has none.
    pub(crate) fn take_hydrogen(&mut self, atom: usize) -> Result<(), StructureError> {
        let fewer = self.hydrogens[atom].checked_sub(1).ok_or_else(|| {
            StructureError::new(
                format!("atom {atom} has no hydrogen to replace"),
                "name an atom that carries a hydrogen",
            )
        })?;
        self.set_hydrogens(atom, fewer);
        Ok(())
    }

    fn set_hydrogens(&mut self, atom: usize, count: u8) {
        self.hydrogens[atom] = count;
        // Neutral atoms are left to the valence rules, so that they are written without brackets.
        let explicit = self.graph.atom(index(atom)).charge != 0;
        self.graph
            .set_hydrogen_count(index(atom), explicit.then_some(count));
    }

    /// Forgets the configuration of an atom.
    pub(crate) fn flatten(&mut self, atom: usize) {
        self.graph.set_chirality(index(atom), Chirality::None);
        self.graph.clear_stereo_neighbor_order(index(atom));
        self.set_hydrogens(atom, self.hydrogens[atom]);
    }

    /// Puts `new` in the place of `old` around a stereocentre, from the back (inversion).
    pub(crate) fn invert(&mut self, centre: usize, old: usize, new: usize) {
        let inverted = match self.graph.atom(index(centre)).chirality {
            Chirality::Clockwise => Chirality::CounterClockwise,
            Chirality::CounterClockwise => Chirality::Clockwise,
            _ => return self.flatten(centre),
        };
        let Some(order) = self.graph.stereo_neighbor_order(index(centre)) else {
            return self.flatten(centre);
        };
        let replaced = order
            .iter()
            .map(|n| if *n == old as u32 { new as u32 } else { *n })
            .collect();
        self.graph
            .set_stereo_neighbor_order(index(centre), replaced);
        self.graph.set_chirality(index(centre), inverted);
    }

    /// Removes `first` and all that hangs behind it, seen from `from`.
    ///
    /// # Errors
    /// A ring leads from there back to `from`.
    pub(crate) fn remove_branch(
        &mut self,
        from: usize,
        first: usize,
    ) -> Result<(), StructureError> {
        let mut open = vec![first];
        self.removed[first] = true;
        while let Some(atom) = open.pop() {
            let around: Vec<usize> = self
                .graph
                .neighbors(index(atom))
                .map(|(other, _)| other.0 as usize)
                .collect();
            for other in around {
                if other == from && atom != first {
                    return Err(StructureError::new(
                        format!("the leaving group at atom {from} is part of a ring"),
                        "ring-opening reactions are not covered",
                    ));
                }
                if other != from && !self.removed[other] {
                    self.removed[other] = true;
                    open.push(other);
                }
            }
        }
        Ok(())
    }

    /// The edited molecule, and the new index of each atom of the draft (`None`: removed).
    pub(crate) fn finish(mut self) -> Result<(Molecule, Vec<Option<usize>>), StructureError> {
        self.write_geometry();
        self.cut
            .sort_unstable_by_key(|bond| std::cmp::Reverse(bond.0));
        for bond in &self.cut {
            self.graph.remove_bond(*bond);
        }
        let mut kept: Vec<usize> = (0..self.removed.len()).collect();
        for atom in (0..self.removed.len()).rev() {
            if self.removed[atom] {
                self.graph.remove_atom(index(atom));
                kept.remove(atom);
            }
        }
        let (text, order) = smiles::write_with_atom_order(&self.graph);
        let molecule = Molecule::parse(&text)?;
        let mut places = vec![None; self.removed.len()];
        for (place, atom) in order.iter().enumerate() {
            places[kept[atom.0 as usize]] = Some(place);
        }
        Ok((molecule, places))
    }

    /// Marks the double bonds that are still there and still have both their references.
    fn write_geometry(&mut self) {
        let there = |bond: graph::BondIdx| {
            let is_cut = self.cut.contains(&bond);
            let bond = self.graph.bond(bond);
            !is_cut && !self.removed[bond.atom1.0 as usize] && !self.removed[bond.atom2.0 as usize]
        };
        let facts: Vec<ez_markers::EzFact> = self
            .geometry
            .iter()
            .filter(|fact| {
                there(fact.double)
                    && self.graph.bond(fact.double).order == BondOrder::Double
                    && fact.ends.iter().all(|end| there(end.reference))
            })
            .copied()
            .collect();
        ez_markers::write_ez_facts(&mut self.graph, &facts);
    }
}

fn shifted(neighbour: u32, offset: usize) -> u32 {
    match neighbour {
        graph::STEREO_H_SENTINEL | graph::STEREO_VACANT_SENTINEL => neighbour,
        atom => atom + offset as u32,
    }
}

fn clear_marks(graph: &mut graph::Molecule) {
    for bond in 0..graph.bond_count() {
        let bond = graph::BondIdx(bond as u32);
        graph.clear_bond_direction(bond);
        if matches!(graph.bond(bond).order, BondOrder::Up | BondOrder::Down) {
            graph.set_bond_order(bond, BondOrder::Single);
        }
    }
}
