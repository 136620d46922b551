//! The solvent as a base: what its molecules make of a strong acid.

use enolattice_molecule::{Bond, Molecule};
use enolattice_reagents::Solvent;

/// A solvent's molecules as base.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Lyonium {
    /// pKa of its protonated molecule on the DMSO scale.
    pub(super) pka: f64,
    /// Its molecules, mol/L.
    pub(super) amount_m: f64,
}

/// Whether an atom of a molecule is a place of this kind that takes a proton.
type TakesProton = fn(&Molecule, usize) -> bool;

/// pKa of protonated molecules by what takes the proton, strongest first.
///
/// Pyridine 3.4 and ammonia 10.5 in DMSO (Bordwell 1988); the rest in water, taken over as they are: amides −0.5, phosphoramides −1,
/// sulfoxides −1.5, water −1.7, alcohols −2.2, ethers −2.5, esters and ketones −7, nitriles −10 (Arnett, Prog. Phys. Org.
/// Chem. 1963, 1, 223); all from memory. Of others none is known that takes a proton here.
const BASICITIES: [(TakesProton, f64); 9] = [
    (is_amine, 10.5),
    (is_azine, 3.4),
    (is_amide, -0.5),
    (is_phosphoramide, -1.0),
    (is_sulfoxide, -1.5),
    (is_hydroxyl, -2.2),
    (is_ether, -2.5),
    (is_carbonyl, -7.0),
    (is_nitrile, -10.0),
];
const PKA_WATER: f64 = -1.7;

/// The strongest base among a solvent's molecules; none where the solvent takes no proton that is known of.
pub(super) fn lyonium(solvent: &Solvent) -> Option<Lyonium> {
    let molecules = || solvent.smiles.split('.');
    let shares: Vec<f64> = match solvent.parts.is_empty() {
        true => vec![1.0; molecules().count()],
        false => solvent.parts.iter().map(|(_, share)| *share).collect(),
    };
    molecules()
        .zip(shares)
        .filter_map(|(smiles, share)| {
            Some(Lyonium {
                pka: basicity(&Molecule::parse(smiles).ok()?)?,
                amount_m: share * solvent.concentration_m(),
            })
        })
        .max_by(|a, b| a.pka.total_cmp(&b.pka))
}

fn basicity(molecule: &Molecule) -> Option<f64> {
    let atoms = molecule.atoms();
    if let [water] = atoms
        && water.element == 8
    {
        return Some(PKA_WATER);
    }
    BASICITIES
        .iter()
        .find(|(takes, _)| (0..atoms.len()).any(|atom| takes(molecule, atom)))
        .map(|(_, pka)| *pka)
}

fn doubly(molecule: &Molecule, atom: usize, element: u8) -> bool {
    let mut bonds = molecule.neighbours(atom).iter();
    bonds.any(|(other, bond)| *bond == Bond::Double && molecule.atoms()[*other].element == element)
}

fn is_amine(molecule: &Molecule, atom: usize) -> bool {
    let this = molecule.atoms()[atom];
    let plain = |other: usize| {
        let beside = molecule.atoms()[other];
        beside.element == 6 && !beside.aromatic && !doubly(molecule, other, 8)
    };
    let mut bonds = molecule.neighbours(atom).iter();
    this.element == 7
        && this.charge == 0
        && !this.aromatic
        && bonds.all(|(other, bond)| *bond == Bond::Single && plain(*other))
}

fn is_azine(molecule: &Molecule, atom: usize) -> bool {
    let this = molecule.atoms()[atom];
    let bonds = molecule.neighbours(atom).len() + usize::from(this.hydrogens);
    this.element == 7 && this.aromatic && this.charge == 0 && bonds == 2
}

fn is_amide(molecule: &Molecule, atom: usize) -> bool {
    let mut bonds = molecule.neighbours(atom).iter();
    molecule.atoms()[atom].element == 6
        && doubly(molecule, atom, 8)
        && bonds.any(|(other, _)| molecule.atoms()[*other].element == 7)
}

fn is_phosphoramide(molecule: &Molecule, atom: usize) -> bool {
    molecule.atoms()[atom].element == 15 && doubly(molecule, atom, 8)
}

fn is_sulfoxide(molecule: &Molecule, atom: usize) -> bool {
    molecule.atoms()[atom].element == 16
        && doubly(molecule, atom, 8)
        && molecule.neighbours(atom).len() == 3
}

/// An oxygen beside saturated carbon alone, whose neighbours draw nothing.
fn is_basic_oxygen(molecule: &Molecule, atom: usize) -> bool {
    let atoms = molecule.atoms();
    let draws = |carbon: usize| {
        let mut around = molecule.neighbours(carbon).iter();
        around.any(|(far, _)| {
            let mut beyond = molecule.neighbours(*far).iter();
            beyond.any(|(end, _)| atoms[*end].element == 9)
        })
    };
    let mut bonds = molecule.neighbours(atom).iter();
    atoms[atom].element == 8
        && bonds.all(|(other, bond)| {
            let beside = atoms[*other];
            *bond == Bond::Single
                && beside.element == 6
                && !beside.aromatic
                && !doubly(molecule, *other, 8)
                && !draws(*other)
        })
}

fn is_hydroxyl(molecule: &Molecule, atom: usize) -> bool {
    molecule.atoms()[atom].hydrogens == 1 && is_basic_oxygen(molecule, atom)
}

fn is_ether(molecule: &Molecule, atom: usize) -> bool {
    molecule.neighbours(atom).len() == 2 && is_basic_oxygen(molecule, atom)
}

fn is_carbonyl(molecule: &Molecule, atom: usize) -> bool {
    molecule.atoms()[atom].element == 6 && doubly(molecule, atom, 8)
}

fn is_nitrile(molecule: &Molecule, atom: usize) -> bool {
    let mut bonds = molecule.neighbours(atom).iter();
    molecule.atoms()[atom].element == 7 && bonds.any(|(_, bond)| *bond == Bond::Triple)
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_reagents::Library;

    /// Order of Arnett 1963 (from memory): pyridine, amides, sulfoxides, water, alcohols, ethers, ketones, nitriles;
    /// hydrocarbons, nitromethane and fluorinated alcohols take no proton of the trade's acids.
    #[test]
    fn solvents_level_acids_in_the_known_order() {
        let library = Library::builtin().unwrap();
        let of = |name: &str| lyonium(library.solvent(name).unwrap());
        let order = [
            "NH3", "pyridine", "DMF", "DMSO", "water", "MeOH", "THF", "acetone", "MeCN",
        ];
        let pkas: Vec<f64> = order.iter().map(|name| of(name).unwrap().pka).collect();
        assert!(pkas.is_sorted_by(|a, b| a > b), "{pkas:?}");
        for name in ["hexane", "toluene", "DCM", "MeNO2", "HFIP"] {
            assert_eq!(of(name), None, "{name}");
        }
        assert!((of("water").unwrap().amount_m - 55.3).abs() < 0.1);
    }
}
