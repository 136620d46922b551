//! A perceived, capped molecule.

use std::fmt;
use std::sync::OnceLock;

use chematic::core as graph;

use crate::environment::{Bicycle, bicycles};
use crate::{Salt, reading, salt};

/// Why a SMILES was refused.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[error("{reason}; {remedy}")]
pub struct StructureError {
    /// What is wrong.
    pub reason: String,
    /// What to do about it.
    pub remedy: String,
}

impl StructureError {
    pub(crate) fn new(reason: impl Into<String>, remedy: impl Into<String>) -> StructureError {
        StructureError {
            reason: reason.into(),
            remedy: remedy.into(),
        }
    }
}

/// Order of a bond after perception.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Bond {
    /// Single bond.
    Single,
    /// Double bond.
    Double,
    /// Triple bond.
    Triple,
    /// Aromatic bond.
    Aromatic,
}

/// One heavy atom (or isotopically explicit hydrogen) after perception.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Atom {
    /// Atomic number.
    pub element: u8,
    /// Formal charge.
    pub charge: i8,
    /// Total hydrogens, implicit and explicit.
    pub hydrogens: u8,
    /// Whether the atom is aromatic.
    pub aromatic: bool,
}

/// A molecule in the atom order of its SMILES.
///
/// Indices count the atoms of the SMILES from 0 in the order in which they are
/// written. Hydrogens written as atoms (`[H]`) are folded into the atom that
/// carries them and do not count; labelled ones (`[2H]`) are atoms of their own.
/// Atom-map numbers are ignored.
#[derive(Clone)]
pub struct Molecule {
    pub(crate) smiles: String,
    /// Kekulé form with stereo as written: what products are edited from.
    pub(crate) kekule: graph::Molecule,
    /// Made when first asked for: ranking the atoms takes longer than all the rest.
    pub(crate) canonical: OnceLock<String>,
    pub(crate) formula: String,
    pub(crate) exact_mass: f64,
    pub(crate) molar_mass: f64,
    pub(crate) atoms: Vec<Atom>,
    pub(crate) neighbours: Vec<Vec<(usize, Bond)>>,
    pub(crate) rings: Vec<Vec<usize>>,
    /// Made when first asked for, once for all sites.
    pub(crate) bicycles: OnceLock<Vec<Bicycle>>,
    pub(crate) symmetry_classes: Vec<u32>,
}

impl fmt::Debug for Molecule {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "Molecule({})", self.smiles)
    }
}

impl Molecule {
    /// Longest SMILES read, bytes.
    pub const MAX_BYTES: usize = 2_000;
    /// Most atoms read.
    pub const MAX_ATOMS: usize = 300;
    /// Most bonds read.
    pub const MAX_BONDS: usize = 600;

    /// Parses a SMILES; the caps are checked before the parser sees the text.
    ///
    /// # Errors
    /// Text beyond the caps, text that is no SMILES, more than one fragment, an
    /// element outside H, B, C, N, O, F, Si, P, S, Cl, As, Se, Br, I, an impossible
    /// valence or an unpaired electron, wildcards. The error says what to change.
    pub fn parse(smiles: &str) -> Result<Molecule, StructureError> {
        reading::read(smiles)
    }

    /// Parses a SMILES that may be a salt or solvate: one molecule with counter-ions, acids or
    /// solvent of crystallisation. A SMILES without a dot is read as by [`Molecule::parse`].
    ///
    /// ```
    /// use enolattice_molecule::Molecule;
    ///
    /// let salt = Molecule::parse_salt("[Cl-].CCOC(=O)C[NH3+]")?;
    /// assert_eq!(salt.molecule.canonical(), "CCOC(=O)CN");
    /// assert_eq!(salt.acid_equivalents, 1.0);
    /// # Ok::<(), enolattice_molecule::StructureError>(())
    /// ```
    ///
    /// # Errors
    /// As [`Molecule::parse`] for each fragment; more than twelve fragments, charges that do not
    /// balance, no organic molecule, or more than one molecule that is no counter-ion.
    pub fn parse_salt(smiles: &str) -> Result<Salt, StructureError> {
        salt::read(smiles)
    }

    /// Atoms that a SMILES writes, its counter-ions among them: a look at the text that takes no time,
    /// for those who must know how much they are about to read. Of any other text it means nothing.
    ///
    /// ```
    /// use enolattice_molecule::Molecule;
    ///
    /// assert_eq!(Molecule::atoms_written("[Cl-].C[NH2+]Cc1ccccc1Br"), 11);
    /// ```
    pub fn atoms_written(smiles: &str) -> usize {
        reading::atoms_written(smiles)
    }

    /// The SMILES as it was given.
    pub fn smiles(&self) -> &str {
        &self.smiles
    }

    /// Canonical SMILES with stereo, made at the first call.
    pub fn canonical(&self) -> &str {
        self.canonical.get_or_init(|| {
            // what the writer refuses was refused by the reader
            reading::canonical(&self.kekule).unwrap_or_else(|| self.smiles.clone())
        })
    }

    /// Canonical SMILES without stereo (and without isotope labels).
    pub fn canonical_flat(&self) -> String {
        reading::flat_smiles(&self.kekule).unwrap_or_else(|| self.canonical().to_owned())
    }

    /// Molecular formula, Hill order.
    pub fn formula(&self) -> &str {
        &self.formula
    }

    /// Monoisotopic mass, Da.
    pub fn exact_mass(&self) -> f64 {
        self.exact_mass
    }

    /// Average molar mass, g/mol.
    pub fn molar_mass(&self) -> f64 {
        self.molar_mass
    }

    /// The atoms, in the order of the SMILES.
    pub fn atoms(&self) -> &[Atom] {
        &self.atoms
    }

    /// Neighbours of an atom with their bonds, in the order of the SMILES.
    pub fn neighbours(&self, atom: usize) -> &[(usize, Bond)] {
        &self.neighbours[atom]
    }

    /// The bond between two atoms, if there is one.
    pub fn bond(&self, a: usize, b: usize) -> Option<Bond> {
        self.neighbours
            .get(a)?
            .iter()
            .find(|(other, _)| *other == b)
            .map(|(_, bond)| *bond)
    }

    /// Smallest rings (symmetrised), as lists of atoms in ring order.
    pub fn rings(&self) -> &[Vec<usize>] {
        &self.rings
    }

    /// The pairs of rings that share a bridge.
    pub(crate) fn bicycles(&self) -> &[Bicycle] {
        self.bicycles.get_or_init(|| bicycles(&self.rings))
    }

    /// Whether the atom is in a ring.
    pub fn in_ring(&self, atom: usize) -> bool {
        self.rings.iter().any(|ring| ring.contains(&atom))
    }

    /// Whether the bond between two atoms is in a ring.
    pub fn bond_in_ring(&self, a: usize, b: usize) -> bool {
        self.rings.iter().any(|ring| {
            let position = ring.iter().position(|atom| *atom == a);
            position.is_some_and(|i| {
                ring[(i + 1) % ring.len()] == b || ring[(i + ring.len() - 1) % ring.len()] == b
            })
        })
    }

    /// Whether the SMILES gives the atom a configuration.
    pub fn has_configuration(&self, atom: usize) -> bool {
        let found = u32::try_from(atom).ok().filter(|_| atom < self.atoms.len());
        found.is_some_and(|i| {
            self.kekule.atom(graph::AtomIdx(i)).chirality != graph::Chirality::None
        })
    }

    /// Atoms with the same number are equivalent by symmetry of the graph.
    ///
    /// Stereo is ignored. The classes come from iterative refinement of atom
    /// invariants; two inequivalent atoms share a class only in highly regular
    /// graphs that are rare in organic molecules. Numbers run from 0 in the
    /// order in which the classes first appear.
    pub fn symmetry_classes(&self) -> &[u32] {
        &self.symmetry_classes
    }
}
