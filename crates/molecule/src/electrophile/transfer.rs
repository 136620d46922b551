//! Reagents that hand over a halogen, sulfur, selenium, nitrogen or oxygen.

use std::sync::LazyLock;

use super::matching::{Patterns, further};
use super::{ChalcogenDonor, Donor, ElectrophileKind, ElectrophilicGroup, HalogenDonor};
use crate::Molecule;
use crate::groups::CARBON;

/// What is handed over; which atoms of the pattern are attacked and leave.
#[derive(Clone, Copy)]
struct Meaning {
    donor: Handed,
    attacked: usize,
    leaving: Option<usize>,
    /// Whether the other places of the pattern stay reactive.
    counts: bool,
}

/// A donor, or one whose element is that of the attacked atom.
#[derive(Clone, Copy)]
enum Handed {
    Halogen(HalogenDonor),
    Chalcogen(ChalcogenDonor),
    Other(Donor),
}

type Row = (&'static str, Meaning);

const fn row(pattern: &'static str, donor: Handed, attacked: usize, leaving: usize) -> Row {
    let meaning = Meaning {
        donor,
        attacked,
        leaving: Some(leaving),
        counts: true,
    };
    (pattern, meaning)
}

const fn single(pattern: &'static str, donor: Handed, attacked: usize, leaving: usize) -> Row {
    let (pattern, meaning) = row(pattern, donor, attacked, leaving);
    (
        pattern,
        Meaning {
            counts: false,
            ..meaning
        },
    )
}

const fn addition(pattern: &'static str, donor: Donor, attacked: usize) -> Row {
    let meaning = Meaning {
        donor: Handed::Other(donor),
        attacked,
        leaving: None,
        counts: true,
    };
    (pattern, meaning)
}

/// Reagents that react before anything else in their molecule (common practice).
const FAST: &[Row] = &[
    single(
        "[IX1][Cl,Br,I;X1]",
        Handed::Halogen(HalogenDonor::Element),
        0,
        1,
    ),
    single(
        "[BrX1][Cl,Br;X1]",
        Handed::Halogen(HalogenDonor::Element),
        0,
        1,
    ),
    single("[ClX1][ClX1]", Handed::Halogen(HalogenDonor::Element), 0, 1),
    row(
        "[F,Cl,Br,I][#7+]",
        Handed::Halogen(HalogenDonor::Ammonium),
        0,
        1,
    ),
    row(
        "[F,Cl,Br,I][#7]S(=O)=O",
        Handed::Halogen(HalogenDonor::Sulfonimide),
        0,
        1,
    ),
    row(
        "[F,Cl,Br,I][#7][#6]=O",
        Handed::Halogen(HalogenDonor::Imide),
        0,
        1,
    ),
    row(
        "[Cl,Br,I;X1][OX2,OX1-]",
        Handed::Halogen(HalogenDonor::Hypohalite),
        0,
        1,
    ),
    single(
        "ClS(=O)(=O)Cl",
        Handed::Halogen(HalogenDonor::SulfonylHalide),
        0,
        1,
    ),
    row(
        "ClS(=O)(=O)C(F)(F)[F,$(CF)]",
        Handed::Halogen(HalogenDonor::SulfonylHalide),
        0,
        1,
    ),
    row(
        "[SX2,SeX2;$(*[#6])][Cl,Br,I]",
        Handed::Chalcogen(ChalcogenDonor::Halide),
        0,
        1,
    ),
    row(
        "[SX2,SeX2;$(*[#6])]S(=O)=O",
        Handed::Chalcogen(ChalcogenDonor::Thiosulfonate),
        0,
        1,
    ),
    row(
        "[SX2,SeX2;$(*[#6])][#7;$(*[#6]=O),$(*S(=O)=O)]",
        Handed::Chalcogen(ChalcogenDonor::Imide),
        0,
        1,
    ),
    addition("[NX1]#[N+][#6]", Donor::Diazonium, 0),
    addition("[NX2](=[NX2][#6]=O)[#6]=O", Donor::Azo, 0),
    addition("[NX2](=O)c", Donor::Nitroso, 0),
    row("[NX2](=O)O[#6]", Handed::Other(Donor::Nitrite), 0, 2),
    single("[NX2](=O)Cl", Handed::Other(Donor::Nitrite), 0, 2),
    addition("[NX1-]=[N+]=NS(=O)=O", Donor::SulfonylAzide, 0),
    row("O1N[CX4]1", Handed::Other(Donor::Oxaziridine), 0, 1),
];

/// Reagents that wait until a faster group of their molecule has reacted.
const SLOW: &[Row] = &[single(
    "[SX2,SeX2;$(*[#6])][SX2,SeX2;$(*[#6])]",
    Handed::Chalcogen(ChalcogenDonor::Dichalcogenide),
    0,
    1,
)];

static FAST_PATTERNS: LazyLock<Patterns<Meaning>> = LazyLock::new(|| Patterns::compile(FAST));
static SLOW_PATTERNS: LazyLock<Patterns<Meaning>> = LazyLock::new(|| Patterns::compile(SLOW));

/// A reagent that hands over an atom or group at once.
pub(super) fn fast(molecule: &Molecule) -> Option<ElectrophilicGroup> {
    described(molecule, &FAST_PATTERNS).or_else(|| polyhaloalkane(molecule))
}

/// A disulfide or diselenide.
///
/// # Errors
/// Its two sides differ.
pub(super) fn slow(molecule: &Molecule) -> Result<Option<ElectrophilicGroup>, String> {
    let Some(group) = described(molecule, &SLOW_PATTERNS) else {
        return Ok(None);
    };
    let classes = molecule.symmetry_classes();
    match group.leaving_atom {
        Some(other) if classes[other] == classes[group.atom] => Ok(Some(group)),
        _ => Err(
            "it is a disulfide or diselenide with two different sides: which of them is attacked \
             is not covered"
                .to_owned(),
        ),
    }
}

fn described(molecule: &Molecule, patterns: &Patterns<Meaning>) -> Option<ElectrophilicGroup> {
    let (meaning, places) = patterns.places(molecule)?;
    let place = places.first()?;
    let atom = place[meaning.attacked];
    let element = molecule.element(atom);
    let donor = match meaning.donor {
        Handed::Halogen(donor) => Donor::Halogen(element, donor),
        Handed::Chalcogen(donor) => Donor::Chalcogen(element, donor),
        Handed::Other(donor) => donor,
    };
    Some(ElectrophilicGroup {
        kind: ElectrophileKind::Transfer { donor },
        atom,
        leaving_atom: meaning.leaving.map(|leaving| place[leaving]),
        further_positions: match donor {
            // The second nitrogen of an azo compound has been reduced with the first.
            Donor::Azo => 0,
            _ if meaning.counts => further(&places, meaning.attacked),
            _ => 0,
        },
    })
}

/// A perhaloalkane whose heaviest halogen is handed over: CBr4, CCl4, C2Cl6, (CBrCl2)2, CF3I.
fn polyhaloalkane(molecule: &Molecule) -> Option<ElectrophilicGroup> {
    let is_perhalogenated = |carbon: usize| {
        molecule.is_saturated_carbon(carbon)
            && molecule.atoms()[carbon].hydrogens == 0
            && molecule
                .neighbours(carbon)
                .iter()
                .all(|(other, _)| molecule.is_halogen(*other) || molecule.element(*other) == CARBON)
    };
    let carbons = (0..molecule.atoms().len()).filter(|atom| molecule.element(*atom) == CARBON);
    if !carbons.clone().all(is_perhalogenated) {
        return None;
    }
    let halogens = |carbon: usize, element: u8| {
        molecule
            .neighbours(carbon)
            .iter()
            .filter(|(other, _)| molecule.element(*other) == element)
            .map(|(other, _)| *other)
            .collect::<Vec<_>>()
    };
    // Chlorine leaves only a carbanion that other chlorines stabilise.
    [(53, 1), (35, 1), (17, 3)]
        .into_iter()
        .find_map(|(element, least)| {
            carbons.clone().find_map(|carbon| {
                let found = halogens(carbon, element);
                (found.len() >= least).then(|| ElectrophilicGroup {
                    kind: ElectrophileKind::Transfer {
                        donor: Donor::Halogen(element, HalogenDonor::Polyhaloalkane),
                    },
                    atom: found[0],
                    leaving_atom: Some(carbon),
                    further_positions: 0,
                })
            })
        })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_pattern_compiles() {
        assert_eq!(FAST_PATTERNS.len(), FAST.len());
        assert_eq!(SLOW_PATTERNS.len(), SLOW.len());
    }
}
