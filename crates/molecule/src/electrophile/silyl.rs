//! Silyl halides and silyl triflates.

use std::sync::LazyLock;

use super::matching::{Patterns, further};
use super::{ElectrophileKind, ElectrophilicGroup, LeavingGroup};
use crate::Molecule;
use crate::groups::CARBON;

/// Silicon is the first atom of each pattern, what leaves the second.
const ROWS: &[(&str, LeavingGroup)] = &[
    ("[Si]OS(=O)(=O)C(F)F", LeavingGroup::Triflate),
    ("[Si]OS(=O)(=O)[#6]", LeavingGroup::Mesylate),
    ("[Si]I", LeavingGroup::Iodide),
    ("[Si]Br", LeavingGroup::Bromide),
    ("[Si]Cl", LeavingGroup::Chloride),
];

static PATTERNS: LazyLock<Patterns<LeavingGroup>> = LazyLock::new(|| Patterns::compile(ROWS));

/// A silylating agent.
pub(super) fn find(molecule: &Molecule) -> Option<ElectrophilicGroup> {
    let (leaving, places) = PATTERNS.places(molecule)?;
    let place = places.first()?;
    Some(ElectrophilicGroup {
        kind: ElectrophileKind::Silyl {
            leaving,
            bulk: bulk(molecule, place[0]),
        },
        atom: place[0],
        leaving_atom: Some(place[1]),
        further_positions: further(&places, 1),
    })
}

/// 0 for trimethylsilyl, 1 for triethylsilyl, 2 for tert-butyldimethylsilyl, 3 for
/// triisopropylsilyl and beyond (common practice): primary alkyl and aryl count one, secondary
/// alkyl two, tertiary alkyl four.
fn bulk(molecule: &Molecule, silicon: usize) -> u8 {
    let carbons = molecule.neighbours(silicon).iter();
    let size: usize = carbons
        .map(|(carbon, _)| *carbon)
        .filter(|carbon| molecule.element(*carbon) == CARBON)
        .map(|carbon| {
            if molecule.atoms()[carbon].aromatic {
                return 1;
            }
            match molecule.neighbours(carbon).len() {
                0 | 1 => 0,
                2 => 1,
                3 => 2,
                _ => 4,
            }
        })
        .sum();
    match size {
        0 => 0,
        1..=3 => 1,
        4..=5 => 2,
        _ => 3,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_pattern_compiles() {
        assert_eq!(PATTERNS.len(), ROWS.len());
    }
}
