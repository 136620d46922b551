//! Imines and iminium ions.

use super::{ElectrophileKind, ElectrophilicGroup, ImineNitrogen};
use crate::groups::{CARBON, NITROGEN, OXYGEN, SULFUR};
use crate::{Bond, Molecule};

/// One C=N.
struct Found {
    carbon: usize,
    nitrogen: ImineNitrogen,
    is_ketimine: bool,
}

/// Which imines are looked for.
#[derive(Clone, Copy, PartialEq, Eq)]
pub(super) enum Reactivity {
    /// Iminium ions and imines with a group on nitrogen that takes up the charge.
    Activated,
    /// Imines of aldehydes with alkyl or aryl on nitrogen.
    PlainAldimine,
    /// The same of ketones.
    PlainKetimine,
}

/// The first imine of the reactivity; the others count as further positions.
pub(super) fn find(molecule: &Molecule, wanted: Reactivity) -> Option<ElectrophilicGroup> {
    let mut found = (0..molecule.atoms().len())
        .filter_map(|carbon| imine(molecule, carbon))
        .filter(|imine| reactivity(imine) == wanted);
    let first = found.next()?;
    let aromatic = molecule
        .neighbours(first.carbon)
        .iter()
        .any(|(other, _)| molecule.atoms()[*other].aromatic);
    Some(ElectrophilicGroup {
        kind: ElectrophileKind::Imine {
            nitrogen: first.nitrogen,
            aromatic,
            is_ketimine: first.is_ketimine,
        },
        atom: first.carbon,
        leaving_atom: None,
        further_positions: u8::try_from(found.count()).unwrap_or(u8::MAX),
    })
}

fn reactivity(imine: &Found) -> Reactivity {
    match imine.nitrogen {
        ImineNitrogen::Plain if imine.is_ketimine => Reactivity::PlainKetimine,
        ImineNitrogen::Plain => Reactivity::PlainAldimine,
        _ => Reactivity::Activated,
    }
}

/// Amidines, imidates, oximes, hydrazones and nitrones are no imines.
fn imine(molecule: &Molecule, carbon: usize) -> Option<Found> {
    if molecule.element(carbon) != CARBON || molecule.atoms()[carbon].aromatic {
        return None;
    }
    let nitrogen = molecule.bound_to(carbon, NITROGEN, Bond::Double).next()?;
    let others = || {
        molecule
            .neighbours(carbon)
            .iter()
            .filter(move |(other, _)| *other != nitrogen)
    };
    if others().any(|(other, bond)| {
        *bond != Bond::Single || !matches!(molecule.element(*other), CARBON | 1)
    }) {
        return None;
    }
    Some(Found {
        carbon,
        nitrogen: on_nitrogen(molecule, carbon, nitrogen)?,
        is_ketimine: others()
            .filter(|(other, _)| molecule.element(*other) == CARBON)
            .count()
            > 1,
    })
}

fn on_nitrogen(molecule: &Molecule, carbon: usize, nitrogen: usize) -> Option<ImineNitrogen> {
    let around: Vec<usize> = molecule
        .neighbours(nitrogen)
        .iter()
        .map(|(other, _)| *other)
        .filter(|other| *other != carbon)
        .collect();
    if around
        .iter()
        .any(|other| matches!(molecule.element(*other), NITROGEN | OXYGEN))
    {
        return None;
    }
    if molecule.atoms()[nitrogen].charge == 1 {
        return Some(ImineNitrogen::Iminium);
    }
    let Some(other) = around.first().copied() else {
        return Some(ImineNitrogen::Plain);
    };
    Some(match molecule.element(other) {
        SULFUR if molecule.is_sulfonyl_sulfur(other) => ImineNitrogen::Sulfonyl,
        SULFUR | 15 if molecule.bound_to(other, OXYGEN, Bond::Double).count() == 1 => {
            ImineNitrogen::Phosphinoyl
        }
        SULFUR | 15 => return None,
        _ if molecule.carbonyl_oxygen(other).is_some() => ImineNitrogen::Acyl,
        _ => ImineNitrogen::Plain,
    })
}
