//! What is wrong with a SMILES, in words of chemistry.

use chematic::core as graph;
use chematic::smiles::{self, SmilesError};

use super::quoted;
use crate::StructureError;

const SMALLER: &str = "give a smaller molecule or a model compound with the same reacting group";
const DRAWING: &str = "check the SMILES against a drawing";

/// Text that is no SMILES; positions count in `read`, which is `given` without atom maps.
pub(super) fn unreadable(given: &str, read: &str, error: SmilesError) -> StructureError {
    let (what, remedy) = fault(read, error);
    StructureError::new(format!("{} cannot be read: {what}", quoted(given)), remedy)
}

fn fault(read: &str, error: SmilesError) -> (String, &'static str) {
    use SmilesError as E;
    match error {
        E::ResourceLimit {
            resource,
            actual,
            limit,
        } => (
            format!("it has {actual} {resource}, more than the {limit} that are read"),
            SMALLER,
        ),
        E::EmptyInput => ("it is empty".to_owned(), DRAWING),
        E::UnexpectedEnd { .. } => (
            "it ends where an atom must follow".to_owned(),
            "write the atom at the end of the last bond, or leave the bond out",
        ),
        E::UnknownElement { symbol, pos } => (
            format!("`{symbol}` in the brackets at position {pos} is no element"),
            "write the symbol of the element, capital letter first",
        ),
        E::UnmatchedRingClosure { ring_num, .. } => open_ring(ring_num.into()),
        E::UnmatchedExtendedRingClosure { ring_num, .. } => open_ring(ring_num),
        E::ConflictingRingBond { ring_num, .. } => two_ring_bonds(ring_num.into()),
        E::ConflictingExtendedRingBond { ring_num, .. } => two_ring_bonds(ring_num),
        E::MismatchedParentheses { pos } if pos >= read.len() => (
            "a branch is opened and never closed".to_owned(),
            "write ) after the branch",
        ),
        E::MismatchedParentheses { pos } => (
            format!("the parenthesis at position {pos} is out of place"),
            "close each branch once, after it is opened",
        ),
        E::InvalidBracketAtom { pos, .. } => bracket(read, pos),
        E::NestingTooDeep { .. } => (
            "its branches are nested too deeply".to_owned(),
            "start the SMILES at an end of the longest chain",
        ),
        E::UnexpectedCharacter { pos } => match read.get(pos..).and_then(|t| t.chars().next()) {
            Some(odd) => (
                format!("`{odd}` at position {pos} is out of place"),
                DRAWING,
            ),
            None => (
                "it ends where an atom or bond must follow".to_owned(),
                DRAWING,
            ),
        },
        E::UnsupportedChiralityClass { class, pos } => (
            format!("`@{class}` at position {pos} is no configuration of a centre"),
            "write @ or @@, or leave the configuration out",
        ),
        E::InvalidValence {
            element,
            atom,
            valence,
            max,
        } => (
            format!("atom {atom} ({element}) has {valence} bonds, without a charge at most {max}"),
            "check its bonds and give it its charge",
        ),
    }
}

fn open_ring(label: u32) -> (String, &'static str) {
    (
        format!("ring label {label} is opened and never closed"),
        "write each ring label twice",
    )
}

fn two_ring_bonds(label: u32) -> (String, &'static str) {
    (
        format!("ring label {label} has one bond where it opens and another where it closes"),
        "write the bond at one end of the ring label only",
    )
}

/// What is wrong at an atom in brackets, or at a bond that leads to an atom once more.
fn bracket(read: &str, pos: usize) -> (String, &'static str) {
    let before = read.get(..pos).unwrap_or(read);
    let Some(open) = before
        .rfind('[')
        .filter(|open| !before[*open..].contains(']'))
    else {
        return (
            format!("the bond before position {pos} joins two atoms that are joined already"),
            "write each bond once",
        );
    };
    if !read[open..].contains(']') {
        return (
            format!("the bracket at position {open} is opened and never closed"),
            "write ] after the atom",
        );
    }
    (
        format!("the atom in the brackets at position {open} cannot be read"),
        "write isotope, element, hydrogens and charge in this order, as in [13CH3] or [NH3+]",
    )
}

/// A graph that no molecule can have: which atoms, and why.
pub(super) fn impossible(given: &str, molecule: &graph::Molecule) -> StructureError {
    let problems = smiles::rdkit_detect_chemistry_problems(molecule).unwrap_or_default();
    let first = problems
        .first()
        .map(|problem| (problem.kind.as_str(), &problem.atoms[..]));
    let symbol = |atom: usize| {
        let atoms = &mut molecule.atoms();
        atoms
            .nth(atom)
            .map_or("", |(_, atom)| atom.element.symbol())
    };
    let (what, remedy) = match first {
        Some(("AtomValenceException", [atom, ..])) => (
            format!(
                "atom {atom} ({}) has more bonds than it can have",
                symbol(*atom)
            ),
            "check its bonds, hydrogens and charge against a drawing",
        ),
        Some(("AtomKekulizeException", [atom, ..])) => (
            format!(
                "atom {atom} ({}) is written as aromatic outside an aromatic ring",
                symbol(*atom)
            ),
            "write aromatic atoms in rings only, all others with a capital letter",
        ),
        Some(("KekulizeException", atoms)) => (
            format!(
                "the aromatic ring with atom {} cannot have alternating double bonds",
                listed(atoms)
            ),
            "write N\u{2013}H of a ring as [nH], and check ring size and charges against a drawing",
        ),
        _ => (
            "its bonds and charges fit no structure".to_owned(),
            "check valences, charges and aromatic rings against a drawing",
        ),
    };
    StructureError::new(
        format!("{} is no possible molecule: {what}", quoted(given)),
        remedy,
    )
}

/// The first few atoms of a list, in words.
fn listed(atoms: &[usize]) -> String {
    const SHOWN: usize = 6;
    let shown: Vec<String> = atoms.iter().take(SHOWN).map(usize::to_string).collect();
    let more = if atoms.len() > SHOWN { " …" } else { "" };
    format!("{}{more}", shown.join(", "))
}

#[cfg(test)]
mod tests {
    use crate::Molecule;

    /// Each way to be wrong with what is said of it: where, what, what to do.
    #[test]
    fn each_fault_is_said_in_words_of_chemistry_with_its_place() {
        for (smiles, said) in [
            (
                "CC(=O)[CH2",
                "`CC(=O)[CH2` cannot be read: the bracket at position 6 is opened and never closed; write ] after the atom",
            ),
            (
                "C[2]C",
                "the atom in the brackets at position 1 cannot be read; write isotope, element",
            ),
            (
                "C[CH3x]C",
                "the atom in the brackets at position 1 cannot be read; write isotope, element",
            ),
            (
                "C[Xx]C",
                "the atom in the brackets at position 1 cannot be read; write isotope, element",
            ),
            (
                "CC(=O",
                "a branch is opened and never closed; write ) after the branch",
            ),
            (
                "CC)C",
                "`)` at position 2 is out of place; check the SMILES",
            ),
            (
                "CC(C)=",
                "it ends where an atom must follow; write the atom at the end",
            ),
            (
                "C1CC",
                "ring label 1 is opened and never closed; write each ring label twice",
            ),
            (
                "C=1CCC#1",
                "ring label 1 has one bond where it opens and another where it closes; write the bond at one end",
            ),
            (
                "C12CCC12",
                "the bond before position 8 joins two atoms that are joined already; write each bond once",
            ),
            (
                "CCe",
                "`e` at position 2 is out of place; check the SMILES against a drawing",
            ),
            (
                "CC(C)(C)(C)C=O",
                "is no possible molecule: atom 1 (C) has more bonds than it can have; check its bonds",
            ),
            (
                "CCcC",
                "is no possible molecule: atom 2 (C) is written as aromatic outside an aromatic ring; write aromatic atoms",
            ),
            (
                "c1cccn1",
                "is no possible molecule: the aromatic ring with atom 0, 1, 2, 3, 4 cannot have alternating double bonds; write N–H",
            ),
        ] {
            let error = Molecule::parse(smiles).unwrap_err().to_string();
            assert!(error.contains(said), "{smiles}: {error}");
        }
    }
}
