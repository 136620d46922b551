//! What is left when a molecule loses HX or a halogen.

use chematic::core::BondOrder;

use crate::edit::Draft;
use crate::electrophile::{is_activated_beta_carbon, is_bridgehead};
use crate::groups::CARBON;
use crate::{Bond, ElectrophileKind, ElectrophilicGroup, Molecule, StructureError};

/// The alkenes that an alkylating agent can become by elimination, each once; none for any other
/// electrophile.
///
/// Where a β hydrogen is activated by aryl, vinyl or an acceptor only such alkenes are given (common
/// practice); among others the base decides. Left out are double bonds in rings of three or four atoms and at
/// bridgeheads. The geometry of the new double bond is left open.
///
/// # Errors
/// An alkene is beyond the caps of [`Molecule::parse`].
pub fn alkenes(
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Vec<Molecule>, StructureError> {
    let (
        ElectrophileKind::Alkyl {
            activated_beta_hydrogen,
            ..
        },
        Some(leaving),
    ) = (group.kind, group.leaving_atom)
    else {
        return Ok(Vec::new());
    };
    let carbon = group.atom;
    if electrophile.bond_in_ring(carbon, leaving) {
        return Ok(Vec::new());
    }
    let mut alkenes: Vec<Molecule> = Vec::new();
    for beta in electrophile.bound_to(carbon, CARBON, Bond::Single) {
        let is_open = electrophile.is_saturated_carbon(beta)
            && electrophile.atoms()[beta].hydrogens > 0
            && !is_strained(electrophile, carbon, beta);
        let is_wanted =
            !activated_beta_hydrogen || is_activated_beta_carbon(electrophile, carbon, beta);
        if !is_open || !is_wanted {
            continue;
        }
        let mut draft = Draft::of(electrophile);
        draft.remove_branch(carbon, leaving)?;
        draft.take_hydrogen(beta)?;
        draft.reorder(carbon, beta, BondOrder::Double);
        draft.flatten(carbon);
        draft.flatten(beta);
        let (alkene, _) = draft.finish()?;
        if alkenes.iter().all(|a| a.canonical() != alkene.canonical()) {
            alkenes.push(alkene);
        }
    }
    Ok(alkenes)
}

/// Whether a double bond between two atoms would be in a small ring or at a bridgehead.
fn is_strained(molecule: &Molecule, carbon: usize, beta: usize) -> bool {
    let mut rings = molecule.rings().iter();
    let in_small_ring =
        rings.any(|ring| ring.len() < 5 && ring.contains(&carbon) && ring.contains(&beta));
    in_small_ring || [carbon, beta].iter().any(|a| is_bridgehead(molecule, *a))
}

/// The molecule with hydrogen in the place of the halogen `halogen`: what exchange with a metal and work-up
/// leave.
///
/// # Errors
/// `halogen` is no halogen on one other atom, or the product is beyond the caps of [`Molecule::parse`].
pub fn dehalogenated(molecule: &Molecule, halogen: usize) -> Result<Molecule, StructureError> {
    let is_halogen = molecule.atoms().get(halogen).is_some() && molecule.is_halogen(halogen);
    let [(carbon, _)] = (match is_halogen {
        true => molecule.neighbours(halogen),
        false => &[],
    }) else {
        return Err(StructureError::new(
            format!("atom {halogen} of {} is no halogen", molecule.smiles()),
            "count atoms from 0 in the order of the SMILES",
        ));
    };
    let mut draft = Draft::of(molecule);
    draft.remove_branch(*carbon, halogen)?;
    draft.add_hydrogen(*carbon);
    draft.flatten(*carbon);
    Ok(draft.finish()?.0)
}
