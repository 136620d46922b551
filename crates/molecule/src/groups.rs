//! Functional groups at one atom of a perceived molecule.

use crate::{Acceptor, Bond, Molecule};

/// What a non-aromatic carbonyl carbon belongs to.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Acyl {
    Aldehyde,
    Ketone,
    Ester,
    Acid,
    Amide,
    Other,
}

pub(crate) const CARBON: u8 = 6;
pub(crate) const NITROGEN: u8 = 7;
pub(crate) const OXYGEN: u8 = 8;
pub(crate) const SULFUR: u8 = 16;

impl Molecule {
    pub(crate) fn element(&self, atom: usize) -> u8 {
        self.atoms[atom].element
    }

    /// Neighbours of the given element over the given bond.
    pub(crate) fn bound_to(
        &self,
        atom: usize,
        element: u8,
        bond: Bond,
    ) -> impl Iterator<Item = usize> + '_ {
        self.neighbours(atom)
            .iter()
            .filter(move |(other, order)| *order == bond && self.element(*other) == element)
            .map(|(other, _)| *other)
    }

    pub(crate) fn is_halogen(&self, atom: usize) -> bool {
        matches!(self.element(atom), 9 | 17 | 35 | 53)
    }

    /// Carbon with four single bonds.
    pub(crate) fn is_saturated_carbon(&self, atom: usize) -> bool {
        self.element(atom) == CARBON
            && self
                .neighbours(atom)
                .iter()
                .all(|(_, bond)| *bond == Bond::Single)
            && self.neighbours(atom).len() + usize::from(self.atoms[atom].hydrogens) == 4
    }

    /// The carbonyl oxygen of a non-aromatic carbon.
    pub(crate) fn carbonyl_oxygen(&self, carbon: usize) -> Option<usize> {
        let eligible = self.element(carbon) == CARBON && !self.atoms[carbon].aromatic;
        self.bound_to(carbon, OXYGEN, Bond::Double)
            .next()
            .filter(|_| eligible)
    }

    /// The class of a carbonyl carbon; `None` where the atom is none.
    pub(crate) fn acyl(&self, carbon: usize) -> Option<Acyl> {
        let oxygen = self.carbonyl_oxygen(carbon)?;
        let others: Vec<usize> = self
            .neighbours(carbon)
            .iter()
            .filter(|(other, _)| *other != oxygen)
            .map(|(other, _)| *other)
            .collect();
        let cumulated = self
            .neighbours(carbon)
            .iter()
            .any(|(other, bond)| *other != oxygen && *bond != Bond::Single);
        if cumulated {
            return Some(Acyl::Other);
        }
        let mut hetero = others
            .iter()
            .filter(|o| !matches!(self.element(**o), CARBON | 1));
        let carbons = others
            .iter()
            .filter(|o| self.element(**o) == CARBON)
            .count();
        let class = match (hetero.next(), hetero.next()) {
            (None, None) if carbons < 2 => Acyl::Aldehyde,
            (None, None) => Acyl::Ketone,
            (Some(one), None) => self.acyl_by_heteroatom(carbon, *one),
            _ => Acyl::Other,
        };
        Some(class)
    }

    fn acyl_by_heteroatom(&self, carbon: usize, hetero: usize) -> Acyl {
        match self.element(hetero) {
            NITROGEN => Acyl::Amide,
            OXYGEN if self.neighbours(hetero).len() == 1 => Acyl::Acid,
            OXYGEN => {
                let acylated = self
                    .neighbours(hetero)
                    .iter()
                    .any(|(other, _)| *other != carbon && self.carbonyl_oxygen(*other).is_some());
                if acylated { Acyl::Other } else { Acyl::Ester }
            }
            _ => Acyl::Other,
        }
    }

    pub(crate) fn is_nitrile_carbon(&self, atom: usize) -> bool {
        self.element(atom) == CARBON && self.bound_to(atom, NITROGEN, Bond::Triple).count() == 1
    }

    pub(crate) fn is_nitro_nitrogen(&self, atom: usize) -> bool {
        self.element(atom) == NITROGEN
            && self.bound_to(atom, OXYGEN, Bond::Double).count() == 1
            && self
                .bound_to(atom, OXYGEN, Bond::Single)
                .any(|o| self.atoms[o].charge == -1)
    }

    /// Sulfur with two double-bonded oxygens.
    pub(crate) fn is_sulfonyl_sulfur(&self, atom: usize) -> bool {
        self.element(atom) == SULFUR && self.bound_to(atom, OXYGEN, Bond::Double).count() == 2
    }

    /// Sulfone, sulfonic ester, sulfonamide, sulfonyl fluoride, sulfoxide.
    fn sulfur_acceptor(&self, sulfur: usize) -> Option<Acceptor> {
        if self.element(sulfur) != SULFUR {
            return None;
        }
        let carbons = self.bound_to(sulfur, CARBON, Bond::Single).count();
        match self.bound_to(sulfur, OXYGEN, Bond::Double).count() {
            2 if carbons == 2 => Some(Acceptor::Sulfone),
            2 if carbons == 1 => Some(Acceptor::Sulfonate),
            1 if carbons == 2 => Some(Acceptor::Sulfoxide),
            _ => None,
        }
    }

    /// What a carbonyl carbon bound to nitrogen is as an acceptor: the nitrogen of an imide gives
    /// little.
    fn amide_acceptor(&self, carbon: usize) -> Acceptor {
        let is_imide = self
            .bound_to(carbon, NITROGEN, Bond::Single)
            .flat_map(|nitrogen| self.neighbours(nitrogen))
            .any(|(other, _)| {
                *other != carbon
                    && (self.carbonyl_oxygen(*other).is_some() || self.is_sulfonyl_sulfur(*other))
            });
        if is_imide {
            Acceptor::Imide
        } else {
            Acceptor::Amide
        }
    }

    /// Aromatic carbon at the 2 or 4 position of a six-membered ring to its nitrogen.
    pub(crate) fn is_azine_position(&self, atom: usize) -> bool {
        self.rings().iter().any(|ring| {
            let place = ring.iter().position(|member| *member == atom);
            ring.len() == 6
                && self.atoms[atom].aromatic
                && self.element(atom) == CARBON
                && place.is_some_and(|at| {
                    [1, 3, 5].iter().any(|step| {
                        let member = ring[(at + step) % 6];
                        self.element(member) == NITROGEN && self.neighbours(member).len() == 2
                    })
                })
        })
    }

    /// The acceptor group that begins at an atom.
    pub(crate) fn acceptor(&self, atom: usize) -> Option<Acceptor> {
        if self.is_nitro_nitrogen(atom) {
            return Some(Acceptor::Nitro);
        }
        if let Some(acceptor) = self.sulfur_acceptor(atom) {
            return Some(acceptor);
        }
        if self.element(atom) == 15 && self.bound_to(atom, OXYGEN, Bond::Double).count() == 1 {
            return Some(Acceptor::Phosphonate);
        }
        if self.is_nitrile_carbon(atom) {
            return Some(Acceptor::Nitrile);
        }
        match self.acyl(atom)? {
            Acyl::Aldehyde => Some(Acceptor::Aldehyde),
            Acyl::Ketone => Some(Acceptor::Ketone),
            Acyl::Ester => Some(Acceptor::Ester),
            Acyl::Amide => Some(self.amide_acceptor(atom)),
            Acyl::Other if self.bound_to(atom, SULFUR, Bond::Single).count() == 1 => {
                Some(Acceptor::Thioester)
            }
            Acyl::Acid | Acyl::Other => None,
        }
    }

    /// The heteroatom of the three-membered ring around a carbon.
    pub(crate) fn strained_heteroatom(&self, carbon: usize) -> Option<usize> {
        self.rings()
            .iter()
            .filter(|ring| ring.len() == 3 && ring.contains(&carbon))
            .find_map(|ring| {
                ring.iter()
                    .copied()
                    .find(|atom| self.element(*atom) != CARBON)
            })
    }

    /// Whether the atom is carbon in a non-aromatic C=C.
    pub(crate) fn is_vinyl_carbon(&self, atom: usize) -> bool {
        self.element(atom) == CARBON && self.bound_to(atom, CARBON, Bond::Double).next().is_some()
    }

    /// Whether the atom is carbon in a C≡C.
    pub(crate) fn is_alkynyl_carbon(&self, atom: usize) -> bool {
        self.element(atom) == CARBON && self.bound_to(atom, CARBON, Bond::Triple).next().is_some()
    }
}
