//! Products by graph edit.

mod attack;
mod carbonyl;
mod closure;
mod loss;
mod nucleophile;

pub use carbonyl::{alcohol_of_ester, carbonyl_product, disproportionated, glycol_esters};
pub use closure::ring_closed;
pub use loss::{alkenes, dehalogenated};
pub use nucleophile::substitution_product;

use chematic::core::BondOrder;

use crate::edit::Draft;
use crate::groups::{Acyl, CARBON, NITROGEN, OXYGEN, SULFUR};
use crate::{Bond, ElectrophileKind, ElectrophilicGroup, Molecule, StructureError};

/// A product and where the former site is in it.
#[derive(Clone, Debug)]
pub struct Product {
    /// The product, neutral.
    pub molecule: Molecule,
    /// Index of the substrate's reacting atom in the product.
    pub site: usize,
    /// For an aldol adduct: index of the new hydroxyl oxygen.
    pub hydroxyl: Option<usize>,
}

/// The product of one new bond between carbon `site` of the substrate and the electrophile.
///
/// What leaves goes with all behind it, or stays behind with a hydrogen where it was part of a
/// ring; an alkyl stereocentre is inverted. Michael acceptors take the carbon at β and the hydrogen
/// at α; quinones and quinone methides become aromatic; carbonyl groups give the β-hydroxy adduct;
/// nitrites give the oxime and diazonium ions the hydrazone where the site has a second hydrogen,
/// sulfonyl azides the diazo compound. The site and every new stereocentre carry no configuration;
/// other stereo is kept.
///
/// # Errors
/// `site` is no carbon with a hydrogen (with two for sulfonyl azides), the electrophile is inert,
/// or the product is beyond the caps of [`Molecule::parse`].
pub fn c_product(
    substrate: &Molecule,
    site: usize,
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Product, StructureError> {
    require_element(substrate, site, &[CARBON], "carbon")?;
    let mut draft = Draft::of(substrate);
    draft.take_hydrogen(site)?;
    draft.flatten(site);
    attack::by_electrophile(draft, site, electrophile, group)
}

/// The product of a second attack by the site of a product on another molecule of the same
/// electrophile; `None` where the site has no hydrogen left.
///
/// # Errors
/// As [`c_product`].
pub fn double_product(
    product: &Product,
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Option<Product>, StructureError> {
    let site = product.molecule.atoms()[product.site];
    if site.element != CARBON || site.hydrogens == 0 {
        return Ok(None);
    }
    c_product(&product.molecule, product.site, electrophile, group).map(Some)
}

/// The product of attack by the oxygen of the enolate formed at carbon `site`; `None` where the
/// anion has no such oxygen (nitriles, sulfones) or the electrophile adds reversibly.
///
/// Alkylating, acylating, sulfonylating and silylating agents give enol ethers, enol esters, enol
/// sulfonates and silyl enol ethers of ketones and β-dicarbonyls, ketene acetals of esters,
/// nitronates of nitro compounds. Among several carbonyl groups the most enolisable one is taken. The geometry of the
/// new double bond is left open.
///
/// # Errors
/// As [`c_product`].
pub fn o_product(
    substrate: &Molecule,
    site: usize,
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Option<Product>, StructureError> {
    require_element(substrate, site, &[CARBON], "carbon")?;
    let stays = matches!(
        group.kind,
        ElectrophileKind::Alkyl { .. }
            | ElectrophileKind::Acyl { .. }
            | ElectrophileKind::Silyl { .. }
    );
    let Some((centre, oxygen)) = enolate_oxygen(substrate, site).filter(|_| stays) else {
        return Ok(None);
    };
    let mut draft = Draft::of(substrate);
    draft.take_hydrogen(site)?;
    draft.flatten(site);
    draft.reorder(site, centre, BondOrder::Double);
    draft.reorder(centre, oxygen, BondOrder::Single);
    attack::by_electrophile(draft, oxygen, electrophile, group).map(Some)
}

/// The product of attack by a heteroatom (O–H, N–H or S–H atom `atom`) of the substrate.
///
/// # Errors
/// `atom` is no O, N or S with a hydrogen, the electrophile is inert, or the product is
/// beyond the caps of [`Molecule::parse`].
pub fn heteroatom_product(
    substrate: &Molecule,
    atom: usize,
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Product, StructureError> {
    require_element(
        substrate,
        atom,
        &[OXYGEN, NITROGEN, SULFUR],
        "oxygen, nitrogen or sulfur",
    )?;
    let mut draft = Draft::of(substrate);
    draft.take_hydrogen(atom)?;
    attack::by_electrophile(draft, atom, electrophile, group)
}

/// The α,β-unsaturated product of loss of water from an aldol adduct; `None` without an α hydrogen.
///
/// The geometry of the new double bond is left open.
///
/// # Errors
/// The product is beyond the caps of [`Molecule::parse`].
pub fn dehydrated(adduct: &Product) -> Result<Option<Molecule>, StructureError> {
    let molecule = &adduct.molecule;
    let carbinol = adduct.hydroxyl.and_then(|oxygen| {
        let carbon = molecule.bound_to(oxygen, CARBON, Bond::Single).next()?;
        let beside_site = molecule.bond(carbon, adduct.site) == Some(Bond::Single);
        beside_site.then_some((carbon, oxygen))
    });
    let Some((carbon, oxygen)) = carbinol else {
        return Ok(None);
    };
    if molecule.atoms()[adduct.site].hydrogens == 0 {
        return Ok(None);
    }
    let mut draft = Draft::of(molecule);
    draft.remove_branch(carbon, oxygen)?;
    draft.take_hydrogen(adduct.site)?;
    draft.reorder(carbon, adduct.site, BondOrder::Double);
    draft.flatten(carbon);
    draft.flatten(adduct.site);
    Ok(Some(draft.finish()?.0))
}

/// The product of a molecule with a second one of its kind: an aldol adduct where carbon
/// `acceptor` is an aldehyde or ketone, the Claisen product where it is an ester or amide (of a lactone:
/// the hydroxy compound).
///
/// # Errors
/// `site` is no carbon with a hydrogen, `acceptor` is none of these groups, or the product is
/// beyond the caps of [`Molecule::parse`].
pub fn self_condensation_product(
    substrate: &Molecule,
    site: usize,
    acceptor: usize,
) -> Result<Product, StructureError> {
    require_element(substrate, site, &[CARBON], "carbon")?;
    carbonyl_product(substrate, site, substrate, acceptor)
}

fn require_element(
    substrate: &Molecule,
    atom: usize,
    elements: &[u8],
    wanted: &str,
) -> Result<(), StructureError> {
    match substrate.atoms().get(atom) {
        Some(found) if elements.contains(&found.element) => Ok(()),
        _ => Err(StructureError::new(
            format!("atom {atom} of {} is no {wanted}", substrate.smiles()),
            "count atoms from 0 in the order of the SMILES",
        )),
    }
}

/// The atom next to the site that bears the enolate (or nitronate) oxygen, and that oxygen.
fn enolate_oxygen(substrate: &Molecule, site: usize) -> Option<(usize, usize)> {
    let around = substrate.neighbours(site).iter();
    around
        .filter(|(_, bond)| *bond == Bond::Single)
        .filter_map(|(centre, _)| {
            let rank = if substrate.is_nitro_nitrogen(*centre) {
                1
            } else {
                match substrate.acyl(*centre)? {
                    Acyl::Aldehyde | Acyl::Ketone => 0,
                    Acyl::Ester => 2,
                    Acyl::Amide => 3,
                    Acyl::Acid | Acyl::Other => 4,
                }
            };
            let oxygen = substrate.bound_to(*centre, OXYGEN, Bond::Double).next()?;
            Some((rank, *centre, oxygen))
        })
        .min()
        .map(|(_, centre, oxygen)| (centre, oxygen))
}
