//! What a structure tells of the steps that follow or catalyse: groups that leave, rings that close, alcohols that are exchanged,
//! enamines.

use enolattice_molecule::{
    AlkylGroup, Bond, ElectrophileKind, ElectrophilicGroup, LeavingGroup, Molecule, Product,
    alcohol_of_ester, alkenes, recognise, ring_closed,
};
use enolattice_reagents::Library;

use crate::carbonyl::{Carbonyl, acceptor_atom};
use crate::electrophilicity::electrophilicity;
use crate::parameters::P;

const CHLORINE: u8 = 17;
const BROMINE: u8 = 35;
const IODINE: u8 = 53;

/// Canonical SMILES of the alcohol of the molecule's ester group; none for a lactone and where there are several groups
/// that are not equivalent.
pub(crate) fn alcohol_of(molecule: &Molecule, ester: Carbonyl) -> Option<String> {
    let carbonyl = acceptor_atom(molecule, ester)?;
    let alcohol = alcohol_of_ester(molecule, carbonyl).ok()??;
    Some(alcohol.canonical().to_owned())
}

/// Canonical SMILES of an alcohol whose alkoxide exchanges ester groups; none for a tertiary one, which hardly does
/// (common practice), and for what is no simple alcohol.
pub(crate) fn exchanging_alcohol(smiles: &str) -> Option<String> {
    let molecule = Molecule::parse(smiles).ok()?;
    let atoms = molecule.atoms();
    let is_hydroxyl = |atom: &usize| atoms[*atom].element == 8 && atoms[*atom].hydrogens == 1;
    let oxygen = (0..atoms.len()).find(is_hydroxyl)?;
    let &(carbon, _) = molecule.neighbours(oxygen).first()?;
    let is_open = atoms[carbon].element == 6 && atoms[carbon].hydrogens > 0;
    is_open.then(|| molecule.canonical().to_owned())
}

/// The rate at which a carbanion at `site` loses the best leaving group in β; none without one.
pub(crate) fn leaves_in_beta(molecule: &Molecule, site: usize) -> Option<P> {
    groups_in_beta(molecule, site)
        .map(|(p, ..)| p)
        .min_by_key(|p| *p as usize)
}

/// The alkene that the carbanion at `site` becomes; none where several groups in β can leave or none.
pub(crate) fn split_in_beta(molecule: &Molecule, site: usize) -> Option<Molecule> {
    let mut groups = groups_in_beta(molecule, site);
    let (Some((_, atom, leaving_atom)), None) = (groups.next(), groups.next()) else {
        return None;
    };
    // what a β-halo carbonyl compound is as an alkylating agent
    let group = ElectrophilicGroup {
        kind: ElectrophileKind::Alkyl {
            group: AlkylGroup::Ethyl,
            leaving: LeavingGroup::Bromide,
            beta_hydrogens: 1,
            activated_beta_hydrogen: true,
        },
        atom,
        leaving_atom: Some(leaving_atom),
        further_positions: 0,
    };
    let [alkene] = alkenes(molecule, &group).ok()?.try_into().ok()?;
    Some(alkene)
}

/// The groups that a carbanion at `site` can lose: the rate, the carbon in β and the atom that leaves it.
fn groups_in_beta(
    molecule: &Molecule,
    site: usize,
) -> impl Iterator<Item = (P, usize, usize)> + '_ {
    let betas = molecule.neighbours(site).iter();
    let betas = betas.filter(|&&(beta, bond)| bond == Bond::Single && is_saturated(molecule, beta));
    betas.flat_map(move |&(beta, _)| {
        let around = molecule.neighbours(beta).iter();
        around.filter_map(move |&(atom, _)| {
            let p = group_in_beta(molecule, beta, atom).filter(|_| atom != site)?;
            Some((p, beta, atom))
        })
    })
}

fn is_saturated(molecule: &Molecule, atom: usize) -> bool {
    const CARBON: u8 = 6;
    let found = molecule.atoms()[atom];
    let mut bonds = molecule.neighbours(atom).iter();
    found.element == CARBON && !found.aromatic && bonds.all(|&(_, bond)| bond == Bond::Single)
}

fn group_in_beta(molecule: &Molecule, beta: usize, atom: usize) -> Option<P> {
    const OXYGEN: u8 = 8;
    let atoms = molecule.atoms();
    let is_acyl = |&(next, _): &(usize, Bond)| {
        let mut bonds = molecule.neighbours(next).iter();
        next != beta && bonds.any(|&(o, bond)| bond == Bond::Double && atoms[o].element == OXYGEN)
    };
    match atoms[atom].element {
        CHLORINE | BROMINE | IODINE => Some(P::BETA_HALIDE),
        OXYGEN if molecule.in_ring(atom) || atoms[atom].hydrogens > 0 => None,
        OXYGEN if molecule.neighbours(atom).iter().any(is_acyl) => Some(P::BETA_ACYLOXY),
        OXYGEN => Some(P::BETA_ALKOXY),
        _ => None,
    }
}

/// Mayr's E of the open acceptor CH2=C–Z that a group X–CH2–C–Z becomes by elimination; none for other electrophiles.
pub(crate) fn e_of_alkene(
    molecule: &Molecule,
    group: &ElectrophilicGroup,
    library: &Library,
) -> Option<f64> {
    let ElectrophileKind::Alkyl {
        group: AlkylGroup::Ethyl | AlkylGroup::Primary | AlkylGroup::Isobutyl,
        activated_beta_hydrogen: true,
        ..
    } = group.kind
    else {
        return None;
    };
    let [alkene] = alkenes(molecule, group).ok()?.try_into().ok()?;
    let acceptor = recognise(&alkene).ok()?;
    let ElectrophileKind::Michael {
        beta_alkyl: 0,
        beta_aryl: 0,
        ..
    } = acceptor.kind
    else {
        return None;
    };
    electrophilicity(&alkene, &acceptor, library).map(|(e, _, _)| e)
}

/// log10 reactivity of the enamines of a secondary amine against those of pyrrolidine; none for other amines.
///
/// # Source
/// N of enamines of cyclohexanone with pyrrolidine 14.9, piperidine 13.4 and morpholine 11.4 (Kempf, Hampel, Ofial and
/// Mayr, Chem. Eur. J. 2003, 9, 2209, from memory), sN about 0.83; open-chain amines from memory.
pub(crate) fn enamine_of(amine: &Molecule) -> Option<f64> {
    const NITROGEN: u8 = 7;
    const OXYGEN: u8 = 8;
    let atoms = amine.atoms();
    let is_secondary = |atom: &usize| {
        let bonds = amine.neighbours(*atom);
        let saturated = |&(other, bond): &(usize, Bond)| {
            let mut beyond = amine.neighbours(other).iter();
            bond == Bond::Single && beyond.all(|&(_, bond)| bond == Bond::Single)
        };
        let (hydrogens, charge) = (atoms[*atom].hydrogens, atoms[*atom].charge);
        atoms[*atom].element == NITROGEN
            && u32::from(hydrogens) == 1 + u32::from(charge == 1)
            && bonds.len() == 2
            && bonds.iter().all(saturated)
    };
    let nitrogen = (0..atoms.len()).find(is_secondary)?;
    let ring = amine.rings().iter().find(|ring| ring.contains(&nitrogen));
    Some(match ring {
        Some(ring) if ring.len() == 5 => 0.0,
        Some(ring) if ring.iter().any(|&atom| atoms[atom].element == OXYGEN) => -2.9,
        Some(_) => -1.3,
        None => -2.0,
    })
}

/// A three-membered ring that a product's anion closes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Closure {
    /// The epoxide of a halohydrin (Darzens).
    Epoxide,
    /// The cyclopropane of a Michael adduct.
    Cyclopropane,
}

/// The ring that the product of an α-halo carbonyl compound closes.
pub(crate) fn closure(
    substrate: &Molecule,
    product: &Product,
    group: &ElectrophilicGroup,
) -> Option<(Molecule, Closure)> {
    let (attacker, how) = match group.kind {
        // the electrophile's atoms follow those of the substrate, and a conjugate addition keeps all of them
        ElectrophileKind::Michael { alpha, .. } => {
            (substrate.atoms().len() + alpha, Closure::Cyclopropane)
        }
        _ => (product.hydroxyl?, Closure::Epoxide),
    };
    let ring = ring_closed(&product.molecule, product.site, attacker).ok()??;
    Some((ring, how))
}

/// The halide on a carbon atom that leaves best.
pub(crate) fn halide_on(molecule: &Molecule, carbon: usize) -> Option<LeavingGroup> {
    let atoms = molecule.atoms();
    let around = molecule.neighbours(carbon).iter();
    let halides = around.filter_map(|&(atom, _)| match atoms[atom].element {
        CHLORINE => Some(LeavingGroup::Chloride),
        BROMINE => Some(LeavingGroup::Bromide),
        IODINE => Some(LeavingGroup::Iodide),
        _ => None,
    });
    halides.max_by_key(|halide| *halide as u8)
}
