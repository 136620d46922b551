//! The carbon skeleton at the carbon that bears a leaving group.

use super::AlkylGroup;
use crate::groups::CARBON;
use crate::{Bond, Molecule};

/// What a carbon next to the reacting carbon is.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Beside {
    Saturated,
    Aryl,
    Vinyl,
    Alkynyl,
    Acceptor,
    Unknown,
}

fn beside(molecule: &Molecule, atom: usize) -> Beside {
    if molecule.is_saturated_carbon(atom) {
        Beside::Saturated
    } else if molecule.atoms()[atom].aromatic {
        Beside::Aryl
    } else if molecule.carbonyl_oxygen(atom).is_some() || molecule.is_nitrile_carbon(atom) {
        Beside::Acceptor
    } else if molecule.is_vinyl_carbon(atom) {
        Beside::Vinyl
    } else if molecule.is_alkynyl_carbon(atom) {
        Beside::Alkynyl
    } else {
        Beside::Unknown
    }
}

/// The skeleton at a saturated carbon that loses `leaving`, or why it is not covered.
pub(super) fn classify(
    molecule: &Molecule,
    carbon: usize,
    leaving: usize,
) -> Result<AlkylGroup, &'static str> {
    let around: Vec<usize> = molecule
        .neighbours(carbon)
        .iter()
        .map(|(other, _)| *other)
        .filter(|other| *other != leaving && molecule.element(*other) != 1)
        .collect();
    if is_halomethyl(molecule, carbon) {
        return Ok(AlkylGroup::Halomethyl);
    }
    if is_alpha_hetero(molecule, carbon, &around) {
        return Ok(AlkylGroup::AlphaHetero);
    }
    refuse_heteroatoms(molecule, &around)?;
    let kinds: Vec<Beside> = around.iter().map(|a| beside(molecule, *a)).collect();
    if kinds.contains(&Beside::Unknown) {
        return Err("a halide next to C=N or a like group is not covered");
    }
    if kinds.iter().filter(|k| **k == Beside::Acceptor).count() > 1 {
        return Err(
            "a halide between two acceptors is attacked at the halogen, which is not covered",
        );
    }
    Ok(match kinds.as_slice() {
        [] => AlkylGroup::Methyl,
        [Beside::Aryl] => AlkylGroup::Benzyl,
        [Beside::Vinyl] => AlkylGroup::Allyl,
        [Beside::Alkynyl] => AlkylGroup::Propargyl,
        [Beside::Acceptor] => AlkylGroup::AlphaCarbonyl,
        [_] => primary(molecule, carbon, around[0]),
        [a, b] if *a == Beside::Saturated && *b == Beside::Saturated => {
            let six_ring = molecule
                .rings()
                .iter()
                .any(|ring| ring.len() == 6 && ring.contains(&carbon));
            if six_ring {
                AlkylGroup::Cyclohexyl
            } else {
                AlkylGroup::Secondary
            }
        }
        [_, _] => AlkylGroup::SecondaryActivated,
        _ => AlkylGroup::Tertiary,
    })
}

/// CH2 between two halogens.
pub(super) fn is_halomethyl(molecule: &Molecule, carbon: usize) -> bool {
    molecule.atoms()[carbon].hydrogens == 2
        && molecule
            .neighbours(carbon)
            .iter()
            .all(|(other, _)| molecule.is_halogen(*other))
}

/// CH2 whose other neighbour is an ether or ester oxygen, a thioether sulfur or a neutral nitrogen.
fn is_alpha_hetero(molecule: &Molecule, carbon: usize, around: &[usize]) -> bool {
    let [other] = around else { return false };
    let divalent = molecule.neighbours(*other).len() == 2;
    molecule.atoms()[carbon].hydrogens == 2
        && match molecule.element(*other) {
            8 | 16 => divalent && molecule.atoms()[*other].charge == 0,
            7 => molecule.atoms()[*other].charge == 0,
            _ => false,
        }
}

fn refuse_heteroatoms(molecule: &Molecule, around: &[usize]) -> Result<(), &'static str> {
    for &other in around {
        if molecule.is_sulfonyl_sulfur(other) || molecule.is_nitro_nitrogen(other) {
            return Err(
                "a halide next to a sulfone or nitro group resists SN2 and is attacked at the \
                 halogen, which is not covered",
            );
        }
        match molecule.element(other) {
            CARBON => {}
            7 | 8 | 16 => {
                return Err(
                    "a halide next to O, N or S reacts by way of a cation, which is not covered",
                );
            }
            _ => return Err("a halide next to silicon, boron or phosphorus is not covered"),
        }
    }
    Ok(())
}

/// Primary carbon with a saturated neighbour, by the branching of that neighbour.
fn primary(molecule: &Molecule, carbon: usize, beta: usize) -> AlkylGroup {
    let branches = molecule
        .neighbours(beta)
        .iter()
        .filter(|(other, _)| *other != carbon && molecule.element(*other) != 1)
        .count();
    match branches {
        0 => AlkylGroup::Ethyl,
        1 => AlkylGroup::Primary,
        2 => AlkylGroup::Isobutyl,
        _ => AlkylGroup::Neopentyl,
    }
}

/// Number of hydrogens on saturated carbons beside `carbon`, and whether one of them is
/// activated by aryl, vinyl or an acceptor on its carbon.
pub(super) fn beta_hydrogens(molecule: &Molecule, carbon: usize) -> (u8, bool) {
    let mut count = 0;
    let mut activated = false;
    for beta in molecule.bound_to(carbon, CARBON, Bond::Single) {
        if !molecule.is_saturated_carbon(beta) {
            continue;
        }
        let hydrogens = molecule.atoms()[beta].hydrogens;
        count += hydrogens;
        activated |= hydrogens > 0 && is_activated_beta_carbon(molecule, carbon, beta);
    }
    (count, activated)
}

/// Whether aryl, vinyl or an acceptor on `beta` activates its hydrogens for elimination from `carbon`.
pub(crate) fn is_activated_beta_carbon(molecule: &Molecule, carbon: usize, beta: usize) -> bool {
    molecule.neighbours(beta).iter().any(|(other, _)| {
        *other != carbon
            && (molecule.acceptor(*other).is_some()
                || matches!(beside(molecule, *other), Beside::Aryl | Beside::Vinyl))
    })
}

/// Whether the carbon is where two rings meet that share more than a bond.
pub(crate) fn is_bridgehead(molecule: &Molecule, carbon: usize) -> bool {
    let mine: Vec<&Vec<usize>> = molecule
        .rings()
        .iter()
        .filter(|ring| ring.contains(&carbon))
        .collect();
    mine.iter().enumerate().any(|(i, one)| {
        mine[i + 1..]
            .iter()
            .any(|other| one.iter().filter(|atom| other.contains(atom)).count() > 2)
    }) && ring_degree(molecule, carbon) > 2
}

fn ring_degree(molecule: &Molecule, carbon: usize) -> usize {
    molecule
        .neighbours(carbon)
        .iter()
        .filter(|(other, _)| molecule.bond_in_ring(carbon, *other))
        .count()
}
