//! What nucleophiles make of the carbonyl group of a molecule.

use chematic::core::BondOrder;

use super::{Product, attack, nucleophile};
use crate::edit::Draft;
use crate::groups::{Acyl, CARBON, NITROGEN, OXYGEN};
use crate::{Bond, Molecule, StructureError};

/// The product of one new bond between atom `atom` of a nucleophile and the carbonyl carbon `carbonyl`
/// of an aldehyde, a ketone (the adduct), an ester or an amide (the alkoxy or amino group leaves, as it does in the
/// end; a lactone or lactam opens).
///
/// The nucleophile is an anion with its charge on `atom`, or a neutral molecule that loses a hydrogen
/// there: `[CH2-]CCC` of butyllithium, water for a saponification. The carbonyl carbon carries no
/// configuration afterwards.
///
/// # Errors
/// `atom` has neither charge nor hydrogen, `carbonyl` belongs to none of these groups, or the product is
/// beyond the caps of [`Molecule::parse`].
pub fn carbonyl_product(
    nucleophile: &Molecule,
    atom: usize,
    partner: &Molecule,
    carbonyl: usize,
) -> Result<Product, StructureError> {
    let leaving = match partner.acyl_at(carbonyl) {
        Some(Acyl::Aldehyde | Acyl::Ketone) => None,
        Some(Acyl::Ester) => partner.bound_to(carbonyl, OXYGEN, Bond::Single).next(),
        Some(Acyl::Amide) => partner.bound_to(carbonyl, NITROGEN, Bond::Single).next(),
        _ => {
            let wanted = "an aldehyde, ketone, ester or amide";
            return Err(no_carbonyl(carbonyl, wanted));
        }
    };
    let draft = nucleophile::draft(nucleophile, atom)?;
    attack::at_carbonyl(draft, atom, partner, carbonyl, leaving)
}

/// The alcohol that an ester loses when its carbonyl carbon `carbonyl` is attacked; `None` for a lactone,
/// which keeps it.
///
/// # Errors
/// `carbonyl` is no ester's, or the alcohol is beyond the caps of [`Molecule::parse`].
pub fn alcohol_of_ester(
    ester: &Molecule,
    carbonyl: usize,
) -> Result<Option<Molecule>, StructureError> {
    let alkoxy = match ester.acyl_at(carbonyl) {
        Some(Acyl::Ester) => ester.bound_to(carbonyl, OXYGEN, Bond::Single).next(),
        _ => None,
    };
    let oxygen = alkoxy.ok_or_else(|| no_carbonyl(carbonyl, "an ester"))?;
    if ester.bond_in_ring(carbonyl, oxygen) {
        return Ok(None);
    }
    let mut draft = Draft::of(ester);
    draft.remove_branch(oxygen, carbonyl)?;
    draft.add_hydrogen(oxygen);
    Ok(Some(draft.finish()?.0))
}

/// The acid and the alcohol that two molecules of an aldehyde become by disproportionation (Cannizzaro).
///
/// # Errors
/// `carbonyl` is no aldehyde's, or a product is beyond the caps of [`Molecule::parse`].
pub fn disproportionated(
    aldehyde: &Molecule,
    carbonyl: usize,
) -> Result<(Molecule, Molecule), StructureError> {
    let oxygen = match aldehyde.acyl_at(carbonyl) {
        Some(Acyl::Aldehyde) => aldehyde.carbonyl_oxygen(carbonyl),
        _ => None,
    };
    let oxygen = oxygen.ok_or_else(|| no_carbonyl(carbonyl, "an aldehyde"))?;
    let mut acid = Draft::of(&Molecule::parse("O")?);
    let offset = acid.append(aldehyde);
    acid.take_hydrogen(0)?;
    acid.take_hydrogen(offset + carbonyl)?;
    acid.bind(0, offset + carbonyl, BondOrder::Single);
    let mut alcohol = Draft::of(aldehyde);
    alcohol.reorder(carbonyl, oxygen, BondOrder::Single);
    alcohol.add_hydrogen(carbonyl);
    alcohol.add_hydrogen(oxygen);
    Ok((acid.finish()?.0, alcohol.finish()?.0))
}

/// The two esters of a glycol that three molecules of an aldehyde become by aldol addition and hydride transfer
/// (Tishchenko), which exchange their acyl group: that of the primary alcohol and that of the other. None where
/// `aldol`, the adduct of two of them, has lost its aldehyde group.
///
/// # Errors
/// `carbonyl` is no aldehyde's, or a product is beyond the caps of [`Molecule::parse`].
pub fn glycol_esters(
    aldehyde: &Molecule,
    carbonyl: usize,
    aldol: &Product,
) -> Result<Option<[Molecule; 2]>, StructureError> {
    if !matches!(aldehyde.acyl_at(carbonyl), Some(Acyl::Aldehyde)) {
        return Err(no_carbonyl(carbonyl, "an aldehyde"));
    }
    let molecule = &aldol.molecule;
    let mut around = molecule.neighbours(aldol.site).iter();
    let kept = around.find(|(atom, _)| matches!(molecule.acyl_at(*atom), Some(Acyl::Aldehyde)));
    let oxo = kept.and_then(|(carbon, _)| Some((*carbon, molecule.carbonyl_oxygen(*carbon)?)));
    let (Some((carbon, primary)), Some(secondary)) = (oxo, aldol.hydroxyl) else {
        return Ok(None);
    };
    let ester_of = |oxygen: usize| {
        let mut draft = Draft::of(molecule);
        let offset = draft.append(aldehyde);
        draft.reorder(carbon, primary, BondOrder::Single);
        draft.add_hydrogen(carbon);
        draft.add_hydrogen(primary);
        draft.take_hydrogen(oxygen)?;
        draft.take_hydrogen(offset + carbonyl)?;
        draft.bind(oxygen, offset + carbonyl, BondOrder::Single);
        Ok::<_, StructureError>(draft.finish()?.0)
    };
    Ok(Some([ester_of(primary)?, ester_of(secondary)?]))
}

fn no_carbonyl(atom: usize, wanted: &str) -> StructureError {
    StructureError::new(
        format!("atom {atom} is no carbonyl carbon of {wanted}"),
        "name the carbonyl carbon that is attacked",
    )
}

impl Molecule {
    /// The class of the carbonyl carbon with this index; `None` where there is none.
    fn acyl_at(&self, carbon: usize) -> Option<Acyl> {
        let atom = self.atoms().get(carbon)?;
        (atom.element == CARBON).then(|| self.acyl(carbon))?
    }
}
