//! Carbon dioxide and its kin: isocyanates, isothiocyanates, carbodiimides, ketenes.

use std::sync::LazyLock;

use super::matching::{Patterns, further};
use super::{Cumulene, ElectrophileKind, ElectrophilicGroup};
use crate::Molecule;

/// The attacked carbon is the second atom of each pattern.
const ROWS: &[(&str, Cumulene)] = &[
    ("[OX1]=C=[OX1]", Cumulene::CarbonDioxide),
    ("[SX1]=C=[SX1]", Cumulene::CarbonDisulfide),
    ("[OX1]=C=[SX1]", Cumulene::CarbonylSulfide),
    ("[OX1]=C=[NX2]", Cumulene::Isocyanate),
    ("[SX1]=C=[NX2]", Cumulene::Isothiocyanate),
    ("[NX2]=C=[NX2]", Cumulene::Carbodiimide),
    ("[OX1]=C=[CX3]", Cumulene::Ketene),
];

static PATTERNS: LazyLock<Patterns<Cumulene>> = LazyLock::new(|| Patterns::compile(ROWS));

/// A heterocumulene; it reacts before every other group that is not a transfer reagent.
pub(super) fn find(molecule: &Molecule) -> Option<ElectrophilicGroup> {
    let (cumulene, places) = PATTERNS.places(molecule)?;
    Some(ElectrophilicGroup {
        kind: ElectrophileKind::Cumulene { cumulene },
        atom: places.first()?[1],
        leaving_atom: None,
        further_positions: further(&places, 1),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_pattern_compiles() {
        assert_eq!(PATTERNS.len(), ROWS.len());
    }
}
