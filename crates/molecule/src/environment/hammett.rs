//! Substituent constants: Hammett σ through an aromatic ring, Charton σI through single bonds.

use super::group::{Group, beyond, double_bonded, group};
use crate::{Bond, Molecule};

/// How the reaction centre is joined to the ring, hence which para constants apply.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Conjugation {
    /// The charge reaches the ring: σ⁻ for acceptors.
    Direct,
    /// A carbonyl stands between, or is the reaction centre itself: σp.
    Insulated,
}

/// (σm, σp, σ⁻).
///
/// Hansch, Leo, Taft, Chem. Rev. 1991, 91, 165 (from memory, rounded).
fn constants(of: Group) -> (f64, f64, f64) {
    use Group::*;
    match of {
        Nitro => (0.71, 0.78, 1.27),
        Nitrile | Isocyano => (0.56, 0.66, 1.00),
        Triflone => (0.79, 0.93, 1.50),
        SulfonylHalide => (0.80, 0.91, 1.40),
        Sulfone | SulfonicEster | Thiosulfonate => (0.62, 0.70, 1.10),
        Sulfonamide => (0.53, 0.60, 0.94),
        Sulfoxide | Sulfoximine | Sulfilimine => (0.51, 0.47, 0.70),
        Perfluoroalkyl => (0.43, 0.54, 0.65),
        Aldehyde => (0.35, 0.42, 1.03),
        AlkylKetone | ArylKetone | Thioester | AcylHalide | Thiocarbonyl => (0.36, 0.47, 0.83),
        Ester | CarboxylicAcid | Imide => (0.36, 0.45, 0.70),
        Amide | Thioamide | Imidoyl => (0.30, 0.36, 0.55),
        Phosphonyl => (0.42, 0.53, 0.84),
        Ammonium | Pyridinium | Phosphonium | Sulfonium | Sulfoxonium => (0.88, 0.82, 0.77),
        Fluoro => (0.34, 0.06, -0.03),
        Chloro => (0.37, 0.23, 0.19),
        Bromo => (0.39, 0.23, 0.25),
        Iodo => (0.35, 0.18, 0.27),
        Alkoxy => (0.12, -0.27, -0.26),
        Amino => (-0.16, -0.83, -0.40),
        Sulfanyl => (0.15, 0.00, 0.06),
        Aryl => (0.06, -0.01, 0.02),
        Vinyl => (0.06, -0.04, 0.10),
        Alkynyl => (0.21, 0.23, 0.50),
        Alkyl => (-0.07, -0.15, -0.17),
        Silyl => (-0.04, -0.07, 0.00),
        Carboxylate => (-0.10, 0.00, 0.30),
        Imino | Phosphanyl | Other => (0.0, 0.0, 0.0),
    }
}

/// The constants of OCOR and NHCOR (same source).
const ACYLOXY: (f64, f64, f64) = (0.39, 0.31, 0.20);
const ACYLAMINO: (f64, f64, f64) = (0.21, 0.00, 0.00);
/// The constants of SC6H5 (same source), whose sulfur has less to give than that of SCH3.
const ARYLTHIO: (f64, f64, f64) = (0.23, 0.07, 0.18);

/// σ of a ring nitrogen in place of CH: (ortho, meta, para), neutral.
///
/// Tomasik, Johnson, Adv. Heterocycl. Chem. 1976, 20, 1 (from memory, rounded).
const AZA: (f64, f64, f64) = (0.71, 0.62, 0.95);
/// The same for an N-oxide (from memory).
const AZA_OXIDE: (f64, f64, f64) = (1.0, 0.9, 1.1);
/// The same for an N-alkylpyridinium or N-protonated ring, of pyridinium N–H acids (from memory).
const AZA_CATION: (f64, f64, f64) = (3.0, 2.1, 2.9);

/// Share of the stronger of σm and σ⁻ that an ortho substituent exerts, steric effects aside.
/// Read off the ortho-substituted phenols and anilines of the DMSO tables (0.8–1).
const ORTHO_SHARE: f64 = 0.9;

/// Largest σ of one position where the ring alone takes a carbanion's charge: an N-methylpicolinium ion, whose
/// anion is a neutral anhydrobase, has a pKa of about 20, not 10 (from memory).
const LARGEST_ALONE: f64 = 2.1;

/// Share of σ that a further acceptor exerts where the ring alone takes a carbanion's charge: what
/// the strongest has taken is not there for it. The ρ of such rings is about 13 pK, so that two whole
/// nitro groups would make toluene an acid of pKa 10 (dinitrotoluenes are near 15 to 17; from memory).
const SHARE_OF_FURTHER: f64 = 0.5;

/// Sum of σ over the six-membered aromatic ring at `ipso`; 0 for other rings.
pub(crate) fn ring_sigma(molecule: &Molecule, ipso: usize, conjugation: Conjugation) -> f64 {
    position_sigmas(molecule, ipso, conjugation).iter().sum()
}

/// The same where the ring alone takes up the charge: the strongest acceptor counts whole, further
/// ones by a share.
pub(crate) fn ring_sigma_alone(molecule: &Molecule, ipso: usize) -> f64 {
    let sigmas =
        position_sigmas(molecule, ipso, Conjugation::Direct).map(|sigma| sigma.min(LARGEST_ALONE));
    let strongest = sigmas.iter().copied().fold(0.0, f64::max);
    let acceptors: f64 = sigmas.iter().filter(|sigma| **sigma > 0.0).sum();
    let donors: f64 = sigmas.iter().filter(|sigma| **sigma < 0.0).sum();
    strongest + SHARE_OF_FURTHER * (acceptors - strongest) + donors
}

/// σ of each of the five positions of the ring beyond `ipso`.
fn position_sigmas(molecule: &Molecule, ipso: usize, conjugation: Conjugation) -> [f64; 5] {
    let Some(ring) = six_ring(molecule, ipso) else {
        return [0.0; 5];
    };
    let start = ring.iter().position(|atom| *atom == ipso).unwrap_or(0);
    [1, 2, 3, 4, 5].map(|step: usize| {
        let atom = ring[(start + step) % 6];
        let distance = step.min(6 - step);
        ring_nitrogen(molecule, atom, distance)
            + ring_carbonyl(molecule, atom, distance, conjugation)
            + substituents(molecule, ring, atom, distance, conjugation)
    })
}

/// Whether a nitro or acyl group stands para to `ipso` and takes the charge through the ring as
/// the quinoid resonance form has it. Ortho groups are turned out of the plane.
pub(crate) fn has_quinoid_acceptor(molecule: &Molecule, ipso: usize) -> bool {
    let Some(ring) = six_ring(molecule, ipso) else {
        return false;
    };
    let start = ring.iter().position(|atom| *atom == ipso).unwrap_or(0);
    let para = ring[(start + 3) % 6];
    molecule.neighbours(para).iter().any(|(other, _)| {
        let kind = group(molecule, *other, para);
        !ring.contains(other) && (kind == Group::Nitro || kind.is_carbonyl())
    })
}

/// Whether a neutral ring nitrogen stands ortho or para to `ipso` in a six-membered ring.
pub(crate) fn takes_charge_by_nitrogen(molecule: &Molecule, ipso: usize) -> bool {
    let Some(ring) = six_ring(molecule, ipso) else {
        return false;
    };
    let start = ring.iter().position(|atom| *atom == ipso).unwrap_or(0);
    [1, 3, 5].iter().any(|step| {
        let atom = molecule.atoms()[ring[(start + step) % 6]];
        atom.element == 7 && atom.charge == 0
    })
}

/// The six-membered aromatic ring that holds `atom`.
pub(crate) fn six_ring(molecule: &Molecule, atom: usize) -> Option<&[usize]> {
    molecule
        .rings()
        .iter()
        .find(|ring| {
            ring.len() == 6
                && ring.contains(&atom)
                && ring.iter().all(|member| molecule.atoms()[*member].aromatic)
        })
        .map(Vec::as_slice)
}

/// Whether `ipso` is a carbon of a five-membered aromatic ring with a pyridine-like nitrogen beside it (2-thiazolyl,
/// 2-benzoxazolyl), which takes up a charge.
pub(crate) fn aza_beside(molecule: &Molecule, ipso: usize) -> bool {
    molecule.atoms()[ipso].aromatic
        && six_ring(molecule, ipso).is_none()
        && molecule.neighbours(ipso).iter().any(|(other, _)| {
            let atom = molecule.atoms()[*other];
            let bonds = molecule.neighbours(*other).len() + usize::from(atom.hydrogens);
            atom.element == 7 && atom.aromatic && bonds == 2
        })
}

/// σ of a ring carbonyl that the site reaches through the double bond between (chromones, coumarins, pyrones, pyridones):
/// 4-methylcoumarin loses its γ proton to metal amides, 4-hydroxycoumarin is a vinylogous acid (pKa 4.1 in water, from memory).
const RING_CARBONYL: f64 = 1.5;

fn ring_carbonyl(
    molecule: &Molecule,
    atom: usize,
    distance: usize,
    conjugation: Conjugation,
) -> f64 {
    let reached = conjugation == Conjugation::Direct && distance == 2;
    match reached && double_bonded(molecule, atom, 8).is_some() {
        true => RING_CARBONYL,
        false => 0.0,
    }
}

fn ring_nitrogen(molecule: &Molecule, atom: usize, distance: usize) -> f64 {
    let this = molecule.atoms()[atom];
    if this.element != 7 {
        return 0.0;
    }
    let oxide = molecule.neighbours(atom).iter().any(|(other, _)| {
        molecule.atoms()[*other].element == 8 && molecule.atoms()[*other].charge < 0
    });
    let (ortho, meta, para) = match (this.charge > 0, oxide) {
        (true, true) => AZA_OXIDE,
        (true, false) => AZA_CATION,
        _ => AZA,
    };
    [ortho, meta, para][distance - 1]
}

/// Constants of the substituent `atom` on the ring atom `from`.
fn on_ring(molecule: &Molecule, atom: usize, from: usize) -> (f64, f64, f64) {
    let kind = group(molecule, atom, from);
    let drawn_away =
        beyond(molecule, atom, from).any(|(far, _)| group(molecule, far, atom).is_acceptor());
    match kind {
        Group::Alkoxy if drawn_away => ACYLOXY,
        Group::Amino if drawn_away => ACYLAMINO,
        Group::Sulfanyl
            if beyond(molecule, atom, from).any(|(far, _)| molecule.atoms()[far].aromatic) =>
        {
            ARYLTHIO
        }
        _ => constants(kind),
    }
}

fn substituents(
    molecule: &Molecule,
    ring: &[usize],
    atom: usize,
    distance: usize,
    conjugation: Conjugation,
) -> f64 {
    molecule
        .neighbours(atom)
        .iter()
        .filter(|(other, bond)| *bond == Bond::Single && !ring.contains(other))
        .map(|(other, _)| {
            let (meta, para, para_minus) = on_ring(molecule, *other, atom);
            let conjugated = match conjugation {
                Conjugation::Direct => para_minus,
                Conjugation::Insulated => para,
            };
            match distance {
                1 => ORTHO_SHARE * meta.max(conjugated),
                2 => meta,
                _ => conjugated,
            }
        })
        .sum()
}

/// σI of a group.
///
/// Charton, Prog. Phys. Org. Chem. 1981, 13, 119 (from memory, rounded).
fn field(of: Group) -> f64 {
    use Group::*;
    match of {
        Fluoro => 0.52,
        Chloro => 0.47,
        Bromo => 0.45,
        Iodo => 0.39,
        Nitro => 0.65,
        Nitrile | Isocyano => 0.57,
        Triflone | SulfonylHalide => 0.70,
        Sulfone | SulfonicEster | Sulfonamide | Thiosulfonate => 0.59,
        Sulfoxide | Sulfoximine | Sulfilimine => 0.50,
        Phosphonyl => 0.32,
        Ammonium | Pyridinium | Phosphonium | Sulfonium | Sulfoxonium => 0.93,
        Aldehyde | AlkylKetone | ArylKetone | Ester | CarboxylicAcid | Imide | Thioester
        | AcylHalide | Thiocarbonyl => 0.29,
        Amide | Thioamide | Imidoyl => 0.27,
        Alkoxy => 0.28,
        Sulfanyl => 0.25,
        Amino => 0.10,
        Imino => 0.20,
        Aryl => 0.11,
        Vinyl => 0.09,
        Alkynyl => 0.25,
        Perfluoroalkyl => 0.42,
        Alkyl | Silyl | Phosphanyl | Carboxylate | Other => 0.0,
    }
}

/// Share of σI that passes a saturated carbon: σI(CH2X)/σI(X) = 0.36 (Charton, as above).
const THROUGH_CARBON: f64 = 0.36;

/// Share of its σI that a halogen exerts beside a stronger one on the same carbon: σ* of CH2F, CHF2 and CF3 1.10, 2.05 and
/// 2.6, pKa in water of acetic acid and its chloro derivatives 4.76, 2.86, 1.3, 0.65 (Taft; standard compilations; from memory).
const HALOGEN_BESIDE_HALOGEN: f64 = 0.5;

/// Field effect of what `carbon` carries beyond `from`: σI at the carbon itself, and what
/// passes one more saturated carbon.
pub(crate) fn inductive(molecule: &Molecule, carbon: usize, from: usize) -> f64 {
    let is_halogen = |atom: usize| matches!(molecule.atoms()[atom].element, 9 | 17 | 35 | 53);
    let halogens: Vec<f64> = beyond(molecule, carbon, from)
        .filter(|(other, _)| is_halogen(*other))
        .map(|(other, _)| field(group(molecule, other, carbon)))
        .collect();
    let strongest = halogens.iter().copied().fold(0.0, f64::max);
    let all: f64 = halogens.iter().sum();
    let of_halogens = strongest + HALOGEN_BESIDE_HALOGEN * (all - strongest);
    let others: f64 = beyond(molecule, carbon, from)
        .filter(|(other, _)| !is_halogen(*other))
        .map(|(other, _)| match group(molecule, other, carbon) {
            Group::Alkyl => {
                THROUGH_CARBON
                    * beyond(molecule, other, carbon)
                        .map(|(far, _)| field(group(molecule, far, other)))
                        .sum::<f64>()
            }
            near => field(near),
        })
        .sum();
    of_halogens + others
}
