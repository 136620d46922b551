//! Acyl and sulfonyl donors: acid halides, anhydrides, esters, amides and their kin.

mod donor;

use std::ops::RangeInclusive;

use super::{AcylDonor, ElectrophileKind, ElectrophilicGroup, carbonyl};
use crate::Molecule;
use crate::groups::CARBON;

/// One acyl group with what it is bound to.
#[derive(Clone, Copy)]
struct Candidate {
    atom: usize,
    leaving: usize,
    donor: AcylDonor,
    alpha_hydrogens: u8,
    branches: u8,
    is_formyl: bool,
}

impl Candidate {
    /// Sorts the group that reacts first to the front.
    fn precedence(&self) -> (u8, u8, bool) {
        (rank(self.donor), self.branches, !self.is_formyl)
    }
}

/// Ranks of the donors that react before alkyl halides, aldehydes and Michael acceptors.
pub(super) const FAST: RangeInclusive<u8> = 0..=3;
/// Ranks of the donors that react before ketones.
pub(super) const ACTIVE: RangeInclusive<u8> = 4..=4;
/// Ranks of the others.
pub(super) const SLOW: RangeInclusive<u8> = 5..=8;

/// The acyl or sulfonyl donor of these ranks that reacts first.
///
/// # Errors
/// Two different donors of the same rank.
pub(super) fn find(
    molecule: &Molecule,
    ranks: RangeInclusive<u8>,
) -> Result<Option<ElectrophilicGroup>, String> {
    let mut candidates: Vec<Candidate> = (0..molecule.atoms().len())
        .filter_map(|atom| candidate(molecule, atom))
        .filter(|candidate| ranks.contains(&rank(candidate.donor)))
        .collect();
    candidates.sort_by_key(|c| (c.precedence(), c.atom));
    let Some(best) = candidates.first() else {
        return Ok(None);
    };
    let classes = molecule.symmetry_classes();
    let rivals = candidates
        .iter()
        .filter(|c| c.precedence() == best.precedence());
    if rivals
        .clone()
        .any(|c| classes[c.atom] != classes[best.atom] && !is_like(c, best))
    {
        return Err(
            "it has two different acyl groups of similar reactivity: which of them is handed over \
             is not covered"
                .to_owned(),
        );
    }
    let further = match best.donor {
        // What leaves takes the other acyl group along, or what is left has lost its activation.
        AcylDonor::Anhydride
        | AcylDonor::Dicarbonate
        | AcylDonor::Oxalate
        | AcylDonor::Carbonate => 0,
        AcylDonor::Sulfonyl if !molecule.is_halogen(best.leaving) => 0,
        _ => rivals.count() - 1,
    };
    Ok(Some(ElectrophilicGroup {
        kind: ElectrophileKind::Acyl {
            donor: best.donor,
            alpha_hydrogens: best.alpha_hydrogens,
            branches: best.branches,
        },
        atom: best.atom,
        leaving_atom: Some(best.leaving),
        further_positions: u8::try_from(further).unwrap_or(u8::MAX),
    }))
}

/// Whether a donor reacts after an aryl halide that one ring nitrogen activates.
pub(super) fn is_late(group: &ElectrophilicGroup) -> bool {
    matches!(group.kind, ElectrophileKind::Acyl { donor, .. } if rank(donor) >= 7)
}

/// Order of reactivity towards carbanions (common practice).
fn rank(donor: AcylDonor) -> u8 {
    match donor {
        AcylDonor::Halide => 0,
        AcylDonor::Sulfonyl => 1,
        AcylDonor::Anhydride | AcylDonor::Cyanide | AcylDonor::Chloroformate => 2,
        AcylDonor::Azole | AcylDonor::Dicarbonate | AcylDonor::CarbamoylChloride => 3,
        AcylDonor::ActiveEster | AcylDonor::Oxalate => 4,
        AcylDonor::Formate | AcylDonor::Thioester => 5,
        AcylDonor::Ester => 6,
        AcylDonor::TertAlkylEster | AcylDonor::Carbonate | AcylDonor::ChelatingAmide => 7,
        AcylDonor::Amide => 8,
    }
}

fn is_like(one: &Candidate, other: &Candidate) -> bool {
    one.donor == other.donor && one.alpha_hydrogens == other.alpha_hydrogens
}

fn candidate(molecule: &Molecule, atom: usize) -> Option<Candidate> {
    let (leaving, donor) = if molecule.is_sulfonyl_sulfur(atom) {
        (donor::sulfonyl(molecule, atom)?, AcylDonor::Sulfonyl)
    } else {
        molecule
            .neighbours(atom)
            .iter()
            .filter_map(|(leaving, _)| Some((*leaving, donor::acyl(molecule, atom, *leaving)?)))
            .min_by_key(|(leaving, donor)| (rank(*donor), *leaving))?
    };
    Some(Candidate {
        atom,
        leaving,
        donor,
        alpha_hydrogens: carbonyl::alpha_hydrogens(molecule, atom),
        branches: branches(molecule, atom, leaving),
        is_formyl: molecule.atoms()[atom].hydrogens > 0,
    })
}

/// Heavy neighbours of the saturated α carbon beyond one; fluorine takes no more room than hydrogen.
fn branches(molecule: &Molecule, atom: usize, leaving: usize) -> u8 {
    molecule
        .neighbours(atom)
        .iter()
        .map(|(other, _)| *other)
        .filter(|other| {
            *other != leaving
                && molecule.element(*other) == CARBON
                && molecule.is_saturated_carbon(*other)
        })
        .map(|alpha| {
            let around = molecule.neighbours(alpha).iter();
            let large = around
                .filter(|(other, _)| !matches!(molecule.element(*other), 1 | 9))
                .count();
            large.saturating_sub(2) as u8
        })
        .sum()
}
