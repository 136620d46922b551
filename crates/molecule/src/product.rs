//! Products by graph edit.

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
/// Alkylating agents lose their leaving group (an alkyl stereocentre is inverted),
/// Michael acceptors take the carbon at β and the hydrogen at α, aldehydes give the
/// β-hydroxy adduct. The site and every new stereocentre carry no configuration; other stereo
/// is kept.
///
/// # Errors
/// `site` is no carbon with a hydrogen, the electrophile is inert, or the product is
/// beyond the caps of [`Molecule::parse`].
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
    joined(draft, site, electrophile, group)
}

/// The product of attack by the oxygen of the enolate formed at carbon `site`; `None` where the
/// anion has no such oxygen (nitriles, sulfones) or the electrophile adds reversibly.
///
/// Ketones and β-dicarbonyls give the enol ether, esters the ketene acetal, nitro compounds the
/// nitronate. Among several carbonyl groups the most enolisable one is taken. The geometry of the
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
    let alkylates = matches!(group.kind, ElectrophileKind::Alkyl { .. });
    let Some((centre, oxygen)) = enolate_oxygen(substrate, site).filter(|_| alkylates) else {
        return Ok(None);
    };
    let mut draft = Draft::of(substrate);
    draft.take_hydrogen(site)?;
    draft.flatten(site);
    draft.reorder(site, centre, BondOrder::Double);
    draft.reorder(centre, oxygen, BondOrder::Single);
    joined(draft, oxygen, electrophile, group).map(Some)
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
    joined(draft, atom, electrophile, group)
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
/// `acceptor` is an aldehyde or ketone, the Claisen product where it is an ester.
///
/// # Errors
/// `site` is no carbon with a hydrogen, `acceptor` is none of these groups, a lactone would
/// have to open, or the product is beyond the caps of [`Molecule::parse`].
pub fn self_condensation_product(
    substrate: &Molecule,
    site: usize,
    acceptor: usize,
) -> Result<Product, StructureError> {
    require_element(substrate, site, &[CARBON], "carbon")?;
    let attack = match substrate.acyl(acceptor) {
        Some(Acyl::Aldehyde | Acyl::Ketone) => Attack::Carbonyl { carbon: acceptor },
        Some(Acyl::Ester) => {
            let alkoxy = substrate.bound_to(acceptor, OXYGEN, Bond::Single).next();
            Attack::Displace {
                carbon: acceptor,
                leaving: alkoxy.unwrap_or(acceptor),
            }
        }
        _ => {
            return Err(StructureError::new(
                format!("atom {acceptor} is no carbonyl carbon of an aldehyde, ketone or ester"),
                "name the carbonyl carbon that is attacked",
            ));
        }
    };
    let mut draft = Draft::of(substrate);
    draft.take_hydrogen(site)?;
    draft.flatten(site);
    attacked(draft, site, substrate, attack)
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

/// How the partner takes the new bond; indices in the partner.
enum Attack {
    Displace { carbon: usize, leaving: usize },
    Conjugate { alpha: usize, beta: usize },
    Carbonyl { carbon: usize },
}

fn joined(
    draft: Draft,
    atom: usize,
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Product, StructureError> {
    let carbon = group.carbon;
    let attack = match (group.kind, group.leaving_atom) {
        (ElectrophileKind::Alkyl { .. }, Some(leaving)) => Attack::Displace { carbon, leaving },
        (ElectrophileKind::Michael { alpha, .. }, _) => Attack::Conjugate {
            alpha,
            beta: carbon,
        },
        (ElectrophileKind::Aldehyde { .. }, _) => Attack::Carbonyl { carbon },
        _ => {
            return Err(StructureError::new(
                format!("{} gives no product", electrophile.smiles()),
                "choose an electrophile that reacts",
            ));
        }
    };
    attacked(draft, atom, electrophile, attack)
}

fn attacked(
    mut draft: Draft,
    atom: usize,
    partner: &Molecule,
    attack: Attack,
) -> Result<Product, StructureError> {
    let offset = draft.append(partner);
    let mut hydroxyl = None;
    let attacked_carbon = match attack {
        Attack::Displace { carbon, leaving } => {
            draft.remove_branch(carbon + offset, leaving + offset)?;
            draft.invert(carbon + offset, leaving + offset, atom);
            carbon
        }
        Attack::Conjugate { alpha, beta } => {
            draft.reorder(alpha + offset, beta + offset, BondOrder::Single);
            draft.add_hydrogen(alpha + offset);
            beta
        }
        Attack::Carbonyl { carbon } => {
            if let Some(oxygen) = partner.carbonyl_oxygen(carbon) {
                draft.reorder(carbon + offset, oxygen + offset, BondOrder::Single);
                draft.add_hydrogen(oxygen + offset);
                hydroxyl = Some(oxygen + offset);
            }
            carbon
        }
    };
    draft.bind(atom, attacked_carbon + offset, BondOrder::Single);
    let (molecule, places) = draft.finish()?;
    Ok(Product {
        molecule,
        site: places[atom].unwrap_or_default(),
        hydroxyl: hydroxyl.and_then(|oxygen| places[oxygen]),
    })
}
