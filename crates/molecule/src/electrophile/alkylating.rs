//! Alkyl, allyl, propargyl, benzyl and α-carbonyl halides and sulfonates, oxonium ions.

use super::{AlkylGroup, ElectrophileKind, ElectrophilicGroup, LeavingGroup, skeleton};
use crate::groups::{Acyl, CARBON, OXYGEN};
use crate::{Bond, Molecule};

/// One carbon with a leaving group.
struct Candidate {
    carbon: usize,
    leaving_atom: usize,
    group: AlkylGroup,
    leaving: LeavingGroup,
}

const VINYL: &str =
    "a vinyl halide does not undergo SN2: sp2 carbon cannot be attacked from behind";
const ARYL: &str =
    "an aryl halide does not undergo SN2: aromatic carbon cannot be attacked from behind";
const BRIDGEHEAD: &str =
    "a halide at a bridgehead does not undergo SN2: the cage shields the back of the carbon";

/// The most reactive alkylating position; fluorides are left to [`fluoride`].
///
/// # Errors
/// A leaving group in a place that is not covered, or two positions of different
/// kind and similar reactivity.
pub(super) fn find(molecule: &Molecule) -> Result<Option<ElectrophilicGroup>, String> {
    let mut candidates = Vec::new();
    for leaving_atom in 0..molecule.atoms().len() {
        candidates.extend(candidate(molecule, leaving_atom)?);
    }
    candidates.sort_by(|a, b| log_reactivity(b).total_cmp(&log_reactivity(a)));
    let Some(best) = candidates.first() else {
        return Ok(None);
    };
    let same = |c: &Candidate| c.group == best.group && c.leaving == best.leaving;
    let close = |c: &Candidate| log_reactivity(best) - log_reactivity(c) < 1.0;
    if candidates.iter().any(|c| close(c) && !same(c)) {
        return Err(
            "it has two different alkylating positions of similar reactivity: which of them \
             reacts is not covered"
                .to_owned(),
        );
    }
    // The second alkyl group of a sulfate stays behind in the monoalkyl sulfate, and so do those of
    // an oxonium ion in the ether.
    let further = match best.leaving {
        LeavingGroup::Sulfate | LeavingGroup::Ether => 0,
        _ => {
            let mut carbons: Vec<usize> = candidates
                .iter()
                .filter(|c| same(c))
                .map(|c| c.carbon)
                .collect();
            carbons.dedup();
            carbons.len() - 1
        }
    };
    Ok(Some(described(molecule, best, further)))
}

/// A lone alkyl fluoride.
pub(super) fn fluoride(molecule: &Molecule) -> Option<ElectrophilicGroup> {
    (0..molecule.atoms().len())
        .filter(|atom| molecule.element(*atom) == 9)
        .find_map(|leaving_atom| {
            let carbon = saturated_neighbour(molecule, leaving_atom)?;
            if halogens_on(molecule, carbon) > 1 || skeleton::is_bridgehead(molecule, carbon) {
                return None;
            }
            let group = skeleton::classify(molecule, carbon, leaving_atom).ok()?;
            let candidate = Candidate {
                carbon,
                leaving_atom,
                group,
                leaving: LeavingGroup::Fluoride,
            };
            Some(described(molecule, &candidate, 0))
        })
}

/// A trialkyl phosphate alone: a slow alkylating agent.
pub(super) fn phosphate(molecule: &Molecule) -> Option<ElectrophilicGroup> {
    let is_phosphate = |phosphorus: usize| {
        molecule.element(phosphorus) == 15
            && molecule.bound_to(phosphorus, OXYGEN, Bond::Double).count() == 1
            && molecule.bound_to(phosphorus, OXYGEN, Bond::Single).count() == 3
    };
    (0..molecule.atoms().len())
        .filter(|phosphorus| is_phosphate(*phosphorus))
        .flat_map(|phosphorus| molecule.bound_to(phosphorus, OXYGEN, Bond::Single))
        .find_map(|leaving_atom| {
            let carbon = saturated_neighbour(molecule, leaving_atom)?;
            let candidate = Candidate {
                carbon,
                leaving_atom,
                group: skeleton::classify(molecule, carbon, leaving_atom).ok()?,
                leaving: LeavingGroup::Phosphate,
            };
            Some(described(molecule, &candidate, 0))
        })
}

/// A vinyl, aryl or bridgehead halide: known not to react.
pub(super) fn inert(molecule: &Molecule) -> Option<ElectrophilicGroup> {
    let halides = (0..molecule.atoms().len()).filter(|atom| molecule.is_halogen(*atom));
    halides
        .filter_map(|halogen| {
            let carbon = molecule.bound_to(halogen, CARBON, Bond::Single).next()?;
            let reason = if molecule.atoms()[carbon].aromatic {
                ARYL
            } else if molecule.is_vinyl_carbon(carbon) {
                VINYL
            } else if molecule.is_saturated_carbon(carbon)
                && skeleton::is_bridgehead(molecule, carbon)
            {
                BRIDGEHEAD
            } else {
                return None;
            };
            Some(ElectrophilicGroup {
                kind: ElectrophileKind::Inert { reason },
                atom: carbon,
                leaving_atom: Some(halogen),
                further_positions: 0,
            })
        })
        .next()
}

fn described(molecule: &Molecule, c: &Candidate, further: usize) -> ElectrophilicGroup {
    let (beta_hydrogens, activated_beta_hydrogen) = skeleton::beta_hydrogens(molecule, c.carbon);
    ElectrophilicGroup {
        kind: ElectrophileKind::Alkyl {
            group: c.group,
            leaving: c.leaving,
            beta_hydrogens,
            activated_beta_hydrogen,
        },
        atom: c.carbon,
        leaving_atom: Some(c.leaving_atom),
        further_positions: u8::try_from(further).unwrap_or(u8::MAX),
    }
}

/// The candidate whose leaving atom is `atom`, if that atom is one.
fn candidate(molecule: &Molecule, atom: usize) -> Result<Option<Candidate>, String> {
    let leaving = match molecule.element(atom) {
        17 => LeavingGroup::Chloride,
        35 => LeavingGroup::Bromide,
        53 => LeavingGroup::Iodide,
        OXYGEN if is_oxonium(molecule, atom) => LeavingGroup::Ether,
        OXYGEN => match sulfonate(molecule, atom)? {
            Some(leaving) => leaving,
            None => return Ok(None),
        },
        _ => return Ok(None),
    };
    let Some(carbon) = saturated_neighbour(molecule, atom) else {
        return Ok(None);
    };
    if halogens_on(molecule, carbon) == 3 && is_on_aldehyde(molecule, carbon) {
        return Ok(None);
    }
    if molecule.is_halogen(atom)
        && halogens_on(molecule, carbon) > 1
        && !skeleton::is_halomethyl(molecule, carbon)
    {
        return Err(
            "a carbon with several halogens reacts by halogen transfer or as a carbene source, \
             which is not covered"
                .to_owned(),
        );
    }
    if skeleton::is_bridgehead(molecule, carbon) {
        return Ok(None);
    }
    let group = skeleton::classify(molecule, carbon, atom)?;
    Ok(Some(Candidate {
        carbon,
        leaving_atom: atom,
        group,
        leaving,
    }))
}

fn saturated_neighbour(molecule: &Molecule, atom: usize) -> Option<usize> {
    molecule
        .bound_to(atom, CARBON, Bond::Single)
        .find(|carbon| molecule.is_saturated_carbon(*carbon))
}

/// Chloral is an aldehyde.
fn is_on_aldehyde(molecule: &Molecule, carbon: usize) -> bool {
    molecule
        .bound_to(carbon, CARBON, Bond::Single)
        .any(|other| molecule.acyl(other) == Some(Acyl::Aldehyde))
}

fn is_oxonium(molecule: &Molecule, oxygen: usize) -> bool {
    molecule.atoms()[oxygen].charge == 1
        && molecule.bound_to(oxygen, CARBON, Bond::Single).count() == 3
}

fn halogens_on(molecule: &Molecule, carbon: usize) -> usize {
    molecule
        .neighbours(carbon)
        .iter()
        .filter(|(other, _)| molecule.is_halogen(*other))
        .count()
}

/// The sulfonate or sulfate that an oxygen between carbon and sulfonyl belongs to.
fn sulfonate(molecule: &Molecule, oxygen: usize) -> Result<Option<LeavingGroup>, String> {
    let between =
        molecule.neighbours(oxygen).len() == 2 && saturated_neighbour(molecule, oxygen).is_some();
    let sulfur = molecule
        .neighbours(oxygen)
        .iter()
        .map(|(other, _)| *other)
        .find(|other| molecule.is_sulfonyl_sulfur(*other));
    let (true, Some(sulfur)) = (between, sulfur) else {
        return Ok(None);
    };
    let rest = molecule
        .neighbours(sulfur)
        .iter()
        .find(|(other, bond)| *other != oxygen && *bond == Bond::Single)
        .map(|(other, _)| *other);
    let leaving = rest.and_then(|rest| match molecule.element(rest) {
        CARBON if molecule.atoms()[rest].aromatic => Some(LeavingGroup::Tosylate),
        CARBON if molecule.is_saturated_carbon(rest) && halogens_on(molecule, rest) > 1 => {
            Some(LeavingGroup::Triflate)
        }
        CARBON if molecule.is_saturated_carbon(rest) => Some(LeavingGroup::Mesylate),
        OXYGEN if molecule.neighbours(rest).len() == 2 => Some(LeavingGroup::Sulfate),
        _ => None,
    });
    leaving
        .map(Some)
        .ok_or_else(|| "its sulfur leaving group is not covered".to_owned())
}

/// Decides which of several positions reacts first; relative log10 rates from memory.
fn log_reactivity(candidate: &Candidate) -> f64 {
    let group = match candidate.group {
        AlkylGroup::Methyl => 1.5,
        AlkylGroup::Ethyl => 0.0,
        AlkylGroup::Primary => -0.4,
        AlkylGroup::Isobutyl => -1.5,
        AlkylGroup::Neopentyl => -5.0,
        AlkylGroup::Secondary => -1.6,
        AlkylGroup::Cyclohexyl => -3.6,
        AlkylGroup::Tertiary => -6.0,
        AlkylGroup::Allyl => 1.6,
        AlkylGroup::Propargyl => 1.6,
        AlkylGroup::Benzyl => 2.1,
        AlkylGroup::SecondaryActivated => 0.5,
        AlkylGroup::AlphaCarbonyl => 3.0,
        AlkylGroup::AlphaHetero => 2.6,
        AlkylGroup::Halomethyl => 0.0,
    };
    let leaving = match candidate.leaving {
        LeavingGroup::Fluoride => -4.0,
        LeavingGroup::Chloride => -1.7,
        LeavingGroup::Bromide => 0.0,
        LeavingGroup::Iodide => 0.4,
        LeavingGroup::Tosylate | LeavingGroup::Mesylate => 0.1,
        LeavingGroup::Triflate => 3.3,
        LeavingGroup::Sulfate => 1.3,
        LeavingGroup::Phosphate => -2.5,
        LeavingGroup::Ether => 4.0,
    };
    group + leaving
}
