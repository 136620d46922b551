//! Molfiles (V2000 and V3000) as SMILES: caps, reading, writing.

use chematic::core as graph;
use chematic::{mol, smiles};

use crate::{Molecule, StructureError};

impl Molecule {
    /// Longest molfile read, bytes: 300 atoms and 600 bonds of V3000 at their widest.
    pub const MAX_MOLFILE_BYTES: usize = 128 << 10;

    /// The structure of a molfile as SMILES, ions and solvate in fragments of their own.
    ///
    /// Whether it is a molecule that can be used is for [`Molecule::parse`] to say. The caps are
    /// checked before the parser sees the text.
    ///
    /// # Errors
    /// Text beyond the caps, text that is no molfile, radicals, a structure without atoms.
    pub fn smiles_of_molfile(block: &str) -> Result<String, StructureError> {
        if block.len() > Molecule::MAX_MOLFILE_BYTES {
            return Err(too_large(&format!(
                "more than {} bytes",
                Molecule::MAX_MOLFILE_BYTES
            )));
        }
        let is_v3000 = counts_line(block).contains("V3000");
        let (atoms, bonds) = counts(block, is_v3000)?;
        if atoms > Molecule::MAX_ATOMS || bonds > Molecule::MAX_BONDS {
            return Err(too_large(&format!("{atoms} atoms and {bonds} bonds")));
        }
        let lines = || block.lines().skip(4);
        if lines().any(|line| line.starts_with("M  RAD") || line.contains(" RAD=")) {
            return Err(StructureError::new(
                "the molfile has an unpaired electron",
                "give a molecule without radicals",
            ));
        }
        let read = if is_v3000 {
            mol::read_mol_v3000_with_diagnostics(block)
        } else {
            mol::read_mol_with_diagnostics(block)
        };
        let molecule = read.map_err(|error| unreadable(&fault(&error)))?.mol;
        written(&molecule)
    }
}

fn written(molecule: &graph::Molecule) -> Result<String, StructureError> {
    if molecule.atom_count() == 0 {
        return Err(StructureError::new(
            "the molfile has no atoms",
            "draw the structure, or leave the record out",
        ));
    }
    // a count line may promise less than the block holds
    if molecule.atom_count() > Molecule::MAX_ATOMS {
        return Err(too_large(&format!("{} atoms", molecule.atom_count())));
    }
    Ok(smiles::write(molecule))
}

fn counts_line(block: &str) -> &str {
    block.lines().nth(3).unwrap_or_default()
}

/// Atoms and bonds that the molfile says it has.
fn counts(block: &str, is_v3000: bool) -> Result<(usize, usize), StructureError> {
    let found = if is_v3000 {
        let counts = block
            .lines()
            .find_map(|line| line.trim().strip_prefix("M  V30 COUNTS"));
        counts.and_then(|rest| {
            let mut numbers = rest.split_whitespace().map(str::parse);
            Some((numbers.next()?.ok()?, numbers.next()?.ok()?))
        })
    } else {
        let line = counts_line(block);
        let number = |at: usize| line.get(at..at + 3)?.trim().parse().ok();
        number(0).zip(number(3))
    };
    found.ok_or_else(|| unreadable("line 4 does not count atoms and bonds"))
}

fn too_large(size: &str) -> StructureError {
    StructureError::new(
        format!(
            "the molfile has {size}; at most {} atoms and {} bonds are read",
            Molecule::MAX_ATOMS,
            Molecule::MAX_BONDS
        ),
        "give a smaller molecule or a model compound with the same reacting group",
    )
}

/// What is wrong, in our words.
fn fault(error: &mol::MolParseError) -> String {
    use mol::MolParseError as E;
    match error {
        E::ResourceLimit { .. } => "it is too large".to_owned(),
        E::InvalidHeader { line, .. } => format!("line {line} does not belong to the heading"),
        E::InvalidCountLine { line, .. } => format!("line {line} does not count atoms and bonds"),
        E::InvalidAtomLine { line, .. } => format!("line {line} is no line of an atom"),
        E::InvalidBondLine { line, .. } => format!("line {line} is no line of a bond"),
        E::InvalidPropertyLine { line, .. } => format!("line {line} is no line of a property"),
        E::UnknownElement { symbol, line } => {
            format!("`{}` in line {line} is no element", symbol.escape_debug())
        }
        E::UnexpectedEnd | E::Io(_) => "it ends before all atoms and bonds are there".to_owned(),
        E::V3000ParseError { line, .. } => format!("line {line} is not of the V3000 form"),
    }
}

fn unreadable(why: &str) -> StructureError {
    StructureError::new(
        format!("the molfile cannot be read: {why}"),
        "write it anew from a drawing, as V2000 or V3000",
    )
}
