//! Corrections for the shape of the carbanion: alkyl groups and rings at the site.

use super::carbon::Surroundings;
use super::descriptors::Descriptors;
use super::group::{Group, beyond, double_bonded, group, is_saturated_carbon, is_trigonal};
use super::hammett::inductive;
use super::skeleton::{Bridge, cyclopentadiene_ring, smallest_ring};

/// How much a triflyl asks for a planar carbanion, against nitro: its charge is half way out on
/// oxygen and CF3, that beside other sulfonyls stays at a pyramidal carbon (from memory).
const TRIFLYL_PLANARITY: f64 = 0.6;

impl Surroundings<'_> {
    /// Alkyl in place of H: what it costs depends on what carries the charge.
    pub(super) fn alkyl_terms(&self, descriptors: &mut Descriptors) {
        let alkyls = self.count(|kind| kind == Group::Alkyl);
        if alkyls == 0 {
            return;
        }
        for alkyl in self.with(|kind| kind == Group::Alkyl) {
            descriptors.add("σI of alkyl", inductive(self.molecule, alkyl, self.site));
        }
        if self.has(Group::Phosphonium) {
            descriptors.add("alkyl beside phosphonium", alkyls as f64);
            return;
        }
        if smallest_ring(self.molecule, &[self.site]) == Some(3) {
            // The ring's own term has its two alkyl groups in it.
            return;
        }
        if self.in_cyclopentadiene && self.acceptors() == 0 {
            self.alkyl_on_cyclopentadiene(descriptors, alkyls);
            return;
        }
        if self.acceptors() >= 2 && !self.has(Group::Nitro) {
            self.alkyl_between_acceptors(descriptors);
            return;
        }
        let (name, count) = self.alkyl_beside_one(alkyls);
        descriptors.add(name, count as f64);
        if name == "first alkyl beside carbonyl" && alkyls > 1 {
            descriptors.add("second alkyl beside carbonyl", 1.0);
        }
    }

    /// The correction for alkyl beside at most one acceptor, and how often it counts.
    fn alkyl_beside_one(&self, alkyls: usize) -> (&'static str, usize) {
        let one = self.acceptors() == 1;
        if self.has(Group::Nitro) {
            ("alkyl beside nitro", alkyls)
        } else if one && self.has(Group::Aldehyde) {
            ("alkyl beside aldehyde", alkyls)
        } else if one && self.has(Group::Aryl) {
            ("alkyl beside aryl and acceptor", alkyls)
        } else if one && self.carbonyl_in_ring_of_site() {
            ("alkyl branch in ring beside carbonyl", alkyls - 1)
        } else if one && self.count(Group::is_carbonyl) == 1 {
            ("first alkyl beside carbonyl", 1)
        } else if one && self.has(Group::Nitrile) {
            ("alkyl beside nitrile", alkyls)
        } else if one {
            ("alkyl beside sulfonyl or phosphonyl", alkyls)
        } else {
            ("alkyl on hydrocarbon acid", alkyls)
        }
    }

    /// 9-Alkylfluorenes: methyl acidifies a little, bulk turns that round.
    fn alkyl_on_cyclopentadiene(&self, descriptors: &mut Descriptors, alkyls: usize) {
        descriptors.add("alkyl at cyclopentadienide site", alkyls as f64);
        for alkyl in self.with(|kind| kind == Group::Alkyl) {
            let branches = beyond(self.molecule, alkyl, self.site)
                .filter(|(atom, _)| is_saturated_carbon(self.molecule, *atom))
                .count();
            descriptors.add("branch beyond cyclopentadienide site", branches as f64);
        }
    }

    fn alkyl_between_acceptors(&self, descriptors: &mut Descriptors) {
        if self.between_ring_carbonyls().is_some() {
            return;
        }
        if self.carbonyl_in_ring_of_site() {
            descriptors.add("ring alkyl between acceptors", 1.0);
            return;
        }
        descriptors.add("alkyl between acceptors", 1.0);
        for alkyl in self.with(|kind| kind == Group::Alkyl) {
            let branches = beyond(self.molecule, alkyl, self.site)
                .filter(|(atom, _)| is_saturated_carbon(self.molecule, *atom))
                .count();
            let in_ring = smallest_ring(self.molecule, &[self.site, alkyl]).is_some();
            if branches >= 2 && !in_ring && !self.lies_between_linear_groups() {
                descriptors.add("branched alkyl between acceptors", (branches - 1) as f64);
            }
        }
    }

    /// Nitriles leave room beside them.
    fn lies_between_linear_groups(&self) -> bool {
        self.count(|kind| matches!(kind, Group::Nitrile | Group::Isocyano)) >= 2
    }

    fn carbonyl_in_ring_of_site(&self) -> bool {
        self.with(Group::is_carbonyl)
            .any(|carbonyl| smallest_ring(self.molecule, &[self.site, carbonyl]).is_some())
    }

    pub(super) fn between_ring_carbonyls(&self) -> Option<bool> {
        let carbonyls: Vec<_> = self
            .groups
            .iter()
            .filter(|(_, kind)| kind.is_carbonyl())
            .collect();
        for (i, (first, first_kind)) in carbonyls.iter().enumerate() {
            for (second, second_kind) in &carbonyls[i + 1..] {
                if smallest_ring(self.molecule, &[*first, self.site, *second])
                    .is_some_and(|size| size < 9)
                {
                    let diester = [first_kind, second_kind]
                        .iter()
                        .all(|kind| matches!(kind, Group::Ester | Group::Imide));
                    return Some(diester);
                }
            }
        }
        None
    }

    pub(super) fn ring_terms(&self, descriptors: &mut Descriptors) {
        let molecule = self.molecule;
        if let Some(ring) = cyclopentadiene_ring(molecule, self.site) {
            descriptors.add("cyclopentadienide ring", 1.0);
            self.cyclopentadiene_substituents(descriptors, ring);
            return;
        }
        match self.between_ring_carbonyls() {
            _ if self.becomes_azole() => {
                descriptors.add("enolate becomes furan, pyrrole or azole", 1.0)
            }
            Some(true) => descriptors.add("between two esters of a ring", 1.0),
            Some(false) => descriptors.add("between two carbonyls of a ring", 1.0),
            None => self.one_carbonyl_in_ring(descriptors),
        }
        if self.lies_between_aryls_of_a_ring() {
            descriptors.add("two aryls held in one ring", 1.0);
        }
        if smallest_ring(molecule, &[self.site]) == Some(3) {
            let (name, count) = if self.has(Group::Nitro) {
                ("cyclopropane beside nitro or triflyl", 1.0)
            } else if self.has(Group::Triflone) {
                ("cyclopropane beside nitro or triflyl", TRIFLYL_PLANARITY)
            } else if self.count(Group::is_carbonyl) > 0 {
                ("cyclopropane beside carbonyl", 1.0)
            } else {
                ("cyclopropane beside other acceptor", 1.0)
            };
            descriptors.add(name, count);
        }
        match self.bridge {
            Bridge::Spanning => descriptors.add("in bridged bicycle", 1.0),
            Bridge::StrainedHead => descriptors.add("at bridgehead", 1.0),
            _ => {}
        }
    }

    /// Whether the enolate of a carbonyl group in a ring of five makes that ring aromatic: each further member is a
    /// heteroatom or trigonal, none has a second C=O (azlactones, butenolides, pyrazolones, isoxazolones).
    pub(super) fn becomes_azole(&self) -> bool {
        let atoms = self.molecule.atoms();
        let oxo = |atom: usize| {
            double_bonded(self.molecule, atom, 8)
                .or(double_bonded(self.molecule, atom, 16))
                .is_some()
        };
        self.with(Group::is_carbonyl)
            .filter(|carbonyl| oxo(*carbonyl))
            .any(|carbonyl| {
                self.molecule.rings().iter().any(|ring| {
                    let held =
                        ring.len() == 5 && ring.contains(&self.site) && ring.contains(&carbonyl);
                    let mut others = ring
                        .iter()
                        .filter(|atom| ![self.site, carbonyl].contains(atom));
                    let heteroatoms = ring
                        .iter()
                        .filter(|atom| atoms[**atom].element != 6)
                        .count();
                    held && heteroatoms > 0
                        && others.all(|atom| {
                            atoms[*atom].element != 6
                                || (is_trigonal(self.molecule, *atom)
                                    && !atoms[*atom].aromatic
                                    && !oxo(*atom))
                        })
                })
            })
    }

    /// The site of 9,10-dihydroanthracene or xanthene: its aryls cannot turn out of the plane.
    fn lies_between_aryls_of_a_ring(&self) -> bool {
        let aryls: Vec<usize> = self.with(|kind| kind == Group::Aryl).collect();
        aryls.iter().enumerate().any(|(i, first)| {
            aryls[i + 1..].iter().any(|second| {
                smallest_ring(self.molecule, &[*first, self.site, *second]) == Some(6)
            })
        })
    }

    fn one_carbonyl_in_ring(&self, descriptors: &mut Descriptors) {
        let molecule = self.molecule;
        for (carbonyl, kind) in self.groups.iter().filter(|(_, kind)| kind.is_carbonyl()) {
            let Some(size) = smallest_ring(molecule, &[self.site, *carbonyl]) else {
                continue;
            };
            let aryl_in_ring = self
                .with(|kind| kind == Group::Aryl)
                .find(|aryl| smallest_ring(molecule, &[*aryl, self.site, *carbonyl]) == Some(size));
            let fused = aryl_in_ring.and_then(|aryl| self.arene_fused(aryl, *carbonyl, size));
            let name = match (fused, kind) {
                (Some(name), _) => name,
                (None, Group::Ester) => "lactone",
                (None, Group::Imide) => "imide in ring",
                (None, Group::AlkylKetone | Group::ArylKetone) => match size {
                    5 if *kind == Group::ArylKetone => "aryl ketone in ring of five",
                    ..=5 => "ketone in ring of four or five",
                    6 => "ketone in ring of six",
                    7..=9 => "ketone in ring of seven to nine",
                    _ => "ketone in large ring",
                },
                _ => continue,
            };
            descriptors.add(name, 1.0);
        }
    }

    fn arene_fused(&self, aryl: usize, carbonyl: usize, size: usize) -> Option<&'static str> {
        let hetero = self.molecule.rings().iter().any(|ring| {
            ring.len() == size
                && [aryl, self.site, carbonyl]
                    .iter()
                    .all(|atom| ring.contains(atom))
                && ring
                    .iter()
                    .any(|atom| self.molecule.atoms()[*atom].element != 6)
        });
        match (size, hetero) {
            (..=4, _) => Some("antiaromatic enolate"),
            (5, true) => Some("enolate becomes indole or benzofuran"),
            (5, false) => Some("enolate becomes indene"),
            _ => None,
        }
    }

    fn cyclopentadiene_substituents(&self, descriptors: &mut Descriptors, ring: &[usize]) {
        let mut aryls = 0_usize;
        for member in ring.iter().filter(|member| **member != self.site) {
            if self.molecule.atoms()[*member].aromatic {
                continue;
            }
            for (other, _) in self.molecule.neighbours(*member) {
                if ring.contains(other) {
                    continue;
                }
                match group(self.molecule, *other, *member) {
                    Group::Alkyl => descriptors.add("alkyl on cyclopentadienide", 1.0),
                    Group::Aryl => aryls += 1,
                    _ => {}
                }
            }
        }
        // neighbouring aryls turn each other out of the plane: the first ones count
        descriptors.add("aryl on cyclopentadienide", aryls.min(2) as f64);
        descriptors.add(
            "further aryl on cyclopentadienide",
            aryls.saturating_sub(2) as f64,
        );
    }
}
