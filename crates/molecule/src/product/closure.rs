//! Rings that close by loss of a halide.

use chematic::core::BondOrder;

use crate::edit::Draft;
use crate::{Bond, Molecule, StructureError};

/// The three-membered ring that forms when atom `attacker`, two bonds from `site`, displaces the halogen at carbon
/// `site`: the epoxide of a halohydrin (Darzens), the cyclopropane of a γ-halo carbonyl compound. `None` where the site
/// has no halogen but fluorine, the attacker no hydrogen, or the two are not two bonds apart.
///
/// The configuration of the site is left open.
///
/// # Errors
/// The product is beyond the caps of [`Molecule::parse`].
pub fn ring_closed(
    molecule: &Molecule,
    site: usize,
    attacker: usize,
) -> Result<Option<Molecule>, StructureError> {
    const FLUORINE: u8 = 9;
    let in_range = site.max(attacker) < molecule.atoms().len();
    let halogen = |(atom, _): &&(usize, Bond)| {
        molecule.is_halogen(*atom) && molecule.element(*atom) != FLUORINE
    };
    let two_apart = || {
        let mut between = molecule.neighbours(site).iter();
        between.any(|(middle, bond)| {
            *bond == Bond::Single && molecule.bond(*middle, attacker) == Some(Bond::Single)
        })
    };
    if !in_range || molecule.atoms()[attacker].hydrogens == 0 || !two_apart() {
        return Ok(None);
    }
    let Some(&(leaving, _)) = molecule.neighbours(site).iter().find(halogen) else {
        return Ok(None);
    };
    let mut draft = Draft::of(molecule);
    draft.remove_branch(site, leaving)?;
    draft.take_hydrogen(attacker)?;
    draft.bind(attacker, site, BondOrder::Single);
    draft.flatten(site);
    draft.flatten(attacker);
    Ok(Some(draft.finish()?.0))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn halohydrins_close_to_epoxides_and_halides_in_gamma_to_cyclopropanes() {
        for (open, site, attacker, closed) in [
            (
                "CCOC(=O)C(Cl)C(O)c1ccccc1",
                5,
                8,
                Some("CCOC(=O)C1OC1c1ccccc1"),
            ),
            ("CCOC(=O)C(Br)CCC(=O)OC", 5, 8, Some("CCOC(=O)C1CC1C(=O)OC")),
            ("CCOC(=O)C(F)C(O)C", 5, 8, None),
            ("CCOC(=O)CC(O)C", 5, 7, None),
        ] {
            let open = Molecule::parse(open).unwrap();
            let found = ring_closed(&open, site, attacker).unwrap();
            let expected = closed.map(|smiles| Molecule::parse(smiles).unwrap());
            assert_eq!(
                found.as_ref().map(Molecule::canonical),
                expected.as_ref().map(Molecule::canonical),
                "{}",
                open.smiles()
            );
        }
    }
}
