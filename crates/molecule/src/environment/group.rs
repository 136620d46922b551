//! The substituent that an atom is, as seen from one of its neighbours.

use crate::{Bond, Molecule};

/// A substituent, by what it does to a charge next to it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Group {
    Aldehyde,
    AlkylKetone,
    ArylKetone,
    Ester,
    CarboxylicAcid,
    Carboxylate,
    Amide,
    /// Acyl on a nitrogen whose lone pair is tied up elsewhere: accepts like an ester.
    Imide,
    Thioester,
    AcylHalide,
    Thiocarbonyl,
    Thioamide,
    Imidoyl,
    Nitrile,
    Isocyano,
    Nitro,
    Sulfone,
    Triflone,
    SulfonicEster,
    Sulfonamide,
    SulfonylHalide,
    Thiosulfonate,
    Sulfoxide,
    /// S(=O)(=N).
    Sulfoximine,
    /// S(=N).
    Sulfilimine,
    Phosphonyl,
    Phosphonium,
    Sulfonium,
    /// R2S(=O)⁺.
    Sulfoxonium,
    Ammonium,
    Pyridinium,
    Aryl,
    Vinyl,
    Alkynyl,
    Perfluoroalkyl,
    Alkyl,
    Fluoro,
    Chloro,
    Bromo,
    Iodo,
    Alkoxy,
    Amino,
    Imino,
    Sulfanyl,
    Phosphanyl,
    Silyl,
    Other,
}

impl Group {
    /// Whether the group takes charge from a neighbouring carbon by resonance or as a strong dipole.
    pub(crate) fn is_acceptor(self) -> bool {
        use Group::*;
        self.is_carbonyl()
            || self.is_sulfonyl()
            || matches!(
                self,
                Nitrile
                    | Isocyano
                    | Nitro
                    | Sulfoxide
                    | Sulfoximine
                    | Sulfilimine
                    | Phosphonyl
                    | Phosphonium
                    | Sulfonium
                    | Sulfoxonium
                    | Pyridinium
                    | Ammonium
            )
    }

    /// C=O, C=S and C=N groups.
    pub(crate) fn is_carbonyl(self) -> bool {
        use Group::*;
        matches!(
            self,
            Aldehyde
                | AlkylKetone
                | ArylKetone
                | Ester
                | CarboxylicAcid
                | Amide
                | Imide
                | Thioester
                | AcylHalide
                | Thiocarbonyl
                | Thioamide
                | Imidoyl
        )
    }

    /// Groups bound through S(=O)2.
    pub(crate) fn is_sulfonyl(self) -> bool {
        use Group::*;
        matches!(
            self,
            Sulfone | Triflone | SulfonicEster | Sulfonamide | SulfonylHalide | Thiosulfonate
        )
    }
}

/// What `atom` is to its neighbour `from`.
pub(crate) fn group(molecule: &Molecule, atom: usize, from: usize) -> Group {
    match molecule.atoms()[atom].element {
        6 => carbon(molecule, atom, from),
        7 => nitrogen(molecule, atom, from),
        8 => Group::Alkoxy,
        9 => Group::Fluoro,
        14 => Group::Silyl,
        15 => phosphorus(molecule, atom),
        16 => sulfur(molecule, atom, from),
        17 => Group::Chloro,
        34 => selenium(molecule, atom),
        35 => Group::Bromo,
        53 => Group::Iodo,
        _ => Group::Other,
    }
}

/// Neighbours of `atom` other than `from`.
pub(crate) fn beyond(
    molecule: &Molecule,
    atom: usize,
    from: usize,
) -> impl Iterator<Item = (usize, Bond)> + '_ {
    molecule
        .neighbours(atom)
        .iter()
        .copied()
        .filter(move |(other, _)| *other != from)
}

/// The atom of this element that `atom` is doubly bound to.
pub(crate) fn double_bonded(molecule: &Molecule, atom: usize, element: u8) -> Option<usize> {
    molecule
        .neighbours(atom)
        .iter()
        .find(|(other, bond)| *bond == Bond::Double && molecule.atoms()[*other].element == element)
        .map(|(other, _)| *other)
}

/// Oxygens bound to nothing but `atom`, written as =O or –[O-].
pub(crate) fn oxo_count(molecule: &Molecule, atom: usize) -> usize {
    molecule
        .neighbours(atom)
        .iter()
        .filter(|(other, bond)| {
            let oxygen = molecule.atoms()[*other];
            oxygen.element == 8
                && molecule.neighbours(*other).len() == 1
                && (*bond == Bond::Double || oxygen.charge < 0)
        })
        .count()
}

/// Whether the atom is trigonal: aromatic or at a double bond.
pub(crate) fn is_trigonal(molecule: &Molecule, atom: usize) -> bool {
    molecule.atoms()[atom].aromatic
        || molecule
            .neighbours(atom)
            .iter()
            .any(|(_, bond)| *bond == Bond::Double)
}

/// Whether the atom is a saturated carbon.
pub(crate) fn is_saturated_carbon(molecule: &Molecule, atom: usize) -> bool {
    molecule.atoms()[atom].element == 6
        && !molecule.atoms()[atom].aromatic
        && molecule
            .neighbours(atom)
            .iter()
            .all(|(_, bond)| *bond == Bond::Single)
}

/// Whether the lone pair of a nitrogen next to `acyl` is tied up by a second acyl,
/// a sulfonyl or an aromatic ring.
fn lone_pair_is_tied_up(molecule: &Molecule, nitrogen: usize, acyl: usize) -> bool {
    molecule.atoms()[nitrogen].aromatic
        || beyond(molecule, nitrogen, acyl).any(|(other, _)| {
            match molecule.atoms()[other].element {
                6 => {
                    double_bonded(molecule, other, 8).is_some()
                        || double_bonded(molecule, other, 16).is_some()
                }
                16 => oxo_count(molecule, other) == 2,
                _ => false,
            }
        })
}

fn carbon(molecule: &Molecule, atom: usize, from: usize) -> Group {
    if molecule.atoms()[atom].aromatic {
        return Group::Aryl;
    }
    for (other, bond) in beyond(molecule, atom, from) {
        match (bond, molecule.atoms()[other].element) {
            (Bond::Triple, 7) => return Group::Nitrile,
            (Bond::Triple, _) => return Group::Alkynyl,
            (Bond::Double, 8) => return acyl(molecule, atom, from, other),
            (Bond::Double, 16) => return thioacyl(molecule, atom, from, other),
            (Bond::Double, 7) => return Group::Imidoyl,
            (Bond::Double, _) => return Group::Vinyl,
            _ => {}
        }
    }
    let fluorines = beyond(molecule, atom, from)
        .filter(|(other, _)| molecule.atoms()[*other].element == 9)
        .count();
    if fluorines >= 2 {
        Group::Perfluoroalkyl
    } else {
        Group::Alkyl
    }
}

fn acyl(molecule: &Molecule, atom: usize, from: usize, oxo: usize) -> Group {
    let Some((partner, _)) = beyond(molecule, atom, from).find(|(other, _)| *other != oxo) else {
        return Group::Aldehyde;
    };
    let other = molecule.atoms()[partner];
    match other.element {
        8 if other.charge < 0 => Group::Carboxylate,
        8 if other.hydrogens > 0 => Group::CarboxylicAcid,
        8 => Group::Ester,
        7 if lone_pair_is_tied_up(molecule, partner, atom) => Group::Imide,
        7 => Group::Amide,
        16 | 34 => Group::Thioester,
        9 | 17 | 35 | 53 => Group::AcylHalide,
        _ if other.aromatic => Group::ArylKetone,
        _ => Group::AlkylKetone,
    }
}

fn thioacyl(molecule: &Molecule, atom: usize, from: usize, thioxo: usize) -> Group {
    let amide = beyond(molecule, atom, from)
        .any(|(other, _)| other != thioxo && molecule.atoms()[other].element == 7);
    if amide {
        Group::Thioamide
    } else {
        Group::Thiocarbonyl
    }
}

fn nitrogen(molecule: &Molecule, atom: usize, from: usize) -> Group {
    let this = molecule.atoms()[atom];
    if oxo_count(molecule, atom) == 2 {
        return Group::Nitro;
    }
    if this.charge > 0 {
        let triple = beyond(molecule, atom, from).any(|(_, bond)| bond == Bond::Triple);
        return match (this.aromatic, triple) {
            (true, _) => Group::Pyridinium,
            (false, true) => Group::Isocyano,
            (false, false) => Group::Ammonium,
        };
    }
    let double = molecule
        .neighbours(atom)
        .iter()
        .any(|(_, bond)| *bond == Bond::Double);
    if double && !this.aromatic {
        Group::Imino
    } else {
        Group::Amino
    }
}

fn phosphorus(molecule: &Molecule, atom: usize) -> Group {
    let oxidised = oxo_count(molecule, atom) > 0 || double_bonded(molecule, atom, 16).is_some();
    match molecule.atoms()[atom].charge {
        _ if oxidised => Group::Phosphonyl,
        1.. => Group::Phosphonium,
        _ => Group::Phosphanyl,
    }
}

fn selenium(molecule: &Molecule, atom: usize) -> Group {
    let plain = molecule.atoms()[atom].charge == 0 && oxo_count(molecule, atom) == 0;
    if plain { Group::Sulfanyl } else { Group::Other }
}

fn sulfur(molecule: &Molecule, atom: usize, from: usize) -> Group {
    let this = molecule.atoms()[atom];
    if this.aromatic {
        return Group::Sulfanyl;
    }
    if double_bonded(molecule, atom, 7).is_some() {
        return match oxo_count(molecule, atom) {
            0 => Group::Sulfilimine,
            1 => Group::Sulfoximine,
            _ => Group::Other,
        };
    }
    match oxo_count(molecule, atom) {
        0 if this.charge > 0 => Group::Sulfonium,
        0 => Group::Sulfanyl,
        1 if molecule.neighbours(atom).len() == 4 => Group::Sulfoxonium,
        1 => Group::Sulfoxide,
        2 => sulfonyl(molecule, atom, from),
        _ => Group::Other,
    }
}

fn sulfonyl(molecule: &Molecule, atom: usize, from: usize) -> Group {
    let partner = beyond(molecule, atom, from)
        .map(|(other, _)| other)
        .find(|other| {
            molecule.neighbours(*other).len() > 1 || !matches!(molecule.atoms()[*other].element, 8)
        });
    let Some(partner) = partner else {
        return Group::SulfonicEster;
    };
    match molecule.atoms()[partner].element {
        7 => Group::Sulfonamide,
        8 => Group::SulfonicEster,
        9 | 17 | 35 => Group::SulfonylHalide,
        16 => Group::Thiosulfonate,
        6 if group(molecule, partner, atom) == Group::Perfluoroalkyl => Group::Triflone,
        _ => Group::Sulfone,
    }
}
