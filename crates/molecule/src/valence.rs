//! Which elements are read and which valences they may have.

use chematic::core::{self as graph, BondOrder};

use crate::{Atom, StructureError};

/// Valences of a neutral atom with all electrons paired (common practice).
fn neutral_valences(element: u8) -> &'static [i8] {
    match element {
        1 | 9 => &[1],
        5 => &[3],
        6 | 14 => &[4],
        7 => &[3],
        8 => &[2],
        15 | 33 => &[3, 5],
        16 | 34 => &[2, 4, 6],
        17 | 35 | 53 => &[1, 3, 5, 7],
        _ => &[],
    }
}

pub(crate) fn is_supported(element: u8) -> bool {
    !neutral_valences(element).is_empty()
}

/// Valence with a formal charge: boron and carbon lose one bond per positive charge (carbon per
/// charge of either sign, boron gains one per negative), the others gain one per positive charge
/// and lose one per negative.
fn charged_valence(element: u8, charge: i8, neutral: i8) -> i8 {
    match element {
        5 => neutral - charge,
        6 | 14 => neutral - charge.abs(),
        1 => neutral - charge.abs(),
        _ => neutral + charge,
    }
}

/// Refuses atoms whose bonds and hydrogens fit no closed shell.
pub(crate) fn check(kekule: &graph::Molecule, atoms: &[Atom]) -> Result<(), StructureError> {
    let mut valences: Vec<i8> = atoms.iter().map(|a| a.hydrogens as i8).collect();
    for (_, bond) in kekule.bonds() {
        let order = match bond.order {
            BondOrder::Double => 2,
            BondOrder::Triple => 3,
            _ => 1,
        };
        valences[bond.atom1.0 as usize] += order;
        valences[bond.atom2.0 as usize] += order;
    }
    for (index, (atom, valence)) in atoms.iter().zip(valences).enumerate() {
        let closed_shell = neutral_valences(atom.element)
            .iter()
            .any(|neutral| charged_valence(atom.element, atom.charge, *neutral) == valence);
        if !closed_shell {
            return Err(StructureError::new(
                format!(
                    "atom {index} has {valence} bonds and a charge of {}: an unpaired electron or an impossible valence",
                    atom.charge
                ),
                "give it all its hydrogens (C, not [C]) or its charge",
            ));
        }
    }
    Ok(())
}
