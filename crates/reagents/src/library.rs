//! The library: all tables, indexed.

use std::collections::HashMap;

use enolattice_molecule::Molecule;
use sha2::{Digest, Sha256};

use crate::measured::Measured;
use crate::names::NameIndex;
use crate::structures::{StructureIndex, without_stereo};
use crate::table::TableText;
use crate::{Acidity, Base, Electrophilicity, NamedElectrophile, Reagent, ReagentKind, Solvent};
use crate::{bases, electrophiles, measured, solvents};

macro_rules! table {
    ($file:literal) => {
        TableText {
            file: $file,
            text: include_str!(concat!("../data/", $file)),
        }
    };
}

const BASES: TableText = table!("bases.tsv");
const SOLVENTS: TableText = table!("solvents.tsv");
const ELECTROPHILES: TableText = table!("electrophiles.tsv");
const ACIDITIES_CH: TableText = table!("acidities_ch.tsv");
const ACIDITIES_XH: TableText = table!("acidities_xh.tsv");
const ACIDITIES_REMEMBERED: TableText = table!("acidities_remembered.tsv");
const ELECTROPHILICITIES: TableText = table!("electrophilicities.tsv");

/// All tables, in the order in which the digest takes them.
const TABLES: [TableText; 7] = [
    BASES,
    SOLVENTS,
    ELECTROPHILES,
    ACIDITIES_CH,
    ACIDITIES_XH,
    ACIDITIES_REMEMBERED,
    ELECTROPHILICITIES,
];

/// A fault in a table.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[error("{table}, row {row}, column `{column}`: {reason}")]
pub struct LibraryError {
    /// File of the table.
    pub table: String,
    /// Line of the file, from 1, heading included; 0 where the fault is of the whole table.
    pub row: usize,
    /// Column; empty where the fault is of the whole row.
    pub column: String,
    /// What is wrong.
    pub reason: String,
}

/// All tables of reagents and measured values.
#[derive(Clone, Debug, Default)]
pub struct Library {
    bases: Vec<Base>,
    solvents: Vec<Solvent>,
    electrophiles: Vec<NamedElectrophile>,
    base_names: NameIndex,
    solvent_names: NameIndex,
    electrophile_names: NameIndex,
    electrophile_structures: HashMap<String, usize>,
    acidities: Vec<Acidity>,
    acidities_by_structure: HashMap<String, Vec<Acidity>>,
    electrophilicities: Vec<Electrophilicity>,
    electrophilicity_structures: HashMap<String, usize>,
}

impl Library {
    /// The library that is compiled into the program.
    ///
    /// # Errors
    /// A fault in a table, which the tests of this crate exclude.
    pub fn builtin() -> Result<Library, LibraryError> {
        let mut library = Library {
            bases: bases::read(BASES)?,
            solvents: solvents::read(SOLVENTS)?,
            electrophiles: electrophiles::read(ELECTROPHILES)?,
            ..Library::default()
        };
        library.index_names()?;
        library.index_electrophiles()?;
        library.take_acidities(measured::acidities(ACIDITIES_CH)?);
        library.take_acidities(measured::acidities(ACIDITIES_XH)?);
        library.take_acidities(measured::acidities(ACIDITIES_REMEMBERED)?);
        library.take_electrophilicities(measured::electrophilicities(ELECTROPHILICITIES)?);
        Ok(library)
    }
    /// All bases, in the order of the table.
    pub fn bases(&self) -> &[Base] {
        &self.bases
    }
    /// All solvents, in the order of the table.
    pub fn solvents(&self) -> &[Solvent] {
        &self.solvents
    }
    /// All electrophiles known by name.
    pub fn electrophiles(&self) -> &[NamedElectrophile] {
        &self.electrophiles
    }
    /// A base by name, synonym or CAS number, whatever the case.
    pub fn base(&self, name: &str) -> Option<&Base> {
        self.base_names.find(name).map(|row| &self.bases[row])
    }
    /// A solvent by name, synonym or CAS number, whatever the case.
    pub fn solvent(&self, name: &str) -> Option<&Solvent> {
        self.solvent_names.find(name).map(|row| &self.solvents[row])
    }
    /// An electrophile by name, synonym or CAS number, whatever the case.
    pub fn electrophile(&self, name: &str) -> Option<&NamedElectrophile> {
        self.electrophile_names
            .find(name)
            .map(|row| &self.electrophiles[row])
    }
    /// The known name nearest to a misspelt one, for error messages.
    pub fn suggest(&self, kind: ReagentKind, name: &str) -> Option<&str> {
        match kind {
            ReagentKind::Base => self.base_names.nearest(name),
            ReagentKind::Solvent => self.solvent_names.nearest(name),
            ReagentKind::Electrophile => self.electrophile_names.nearest(name),
        }
    }
    /// All reagents with `word` in a name, synonym or CAS number, whatever the case; all of
    /// them for an empty word. Bases first, then solvents, then electrophiles.
    pub fn search(&self, word: &str) -> Vec<Reagent<'_>> {
        let word = word.trim().to_lowercase();
        let names_it = |reagent: &Reagent<'_>| {
            reagent
                .names()
                .any(|name| name.to_lowercase().contains(&word))
        };
        self.reagents().filter(names_it).collect()
    }
    /// Named electrophile with this canonical SMILES; one without stereo finds the isomer
    /// that the table has.
    pub fn electrophile_by_structure(&self, canonical: &str) -> Option<&NamedElectrophile> {
        self.electrophile_structures
            .get(canonical)
            .map(|row| &self.electrophiles[*row])
    }
    /// Measured acidities of the compound with this canonical SMILES; one without stereo
    /// finds the isomer that was measured.
    pub fn acidities_of(&self, canonical: &str) -> &[Acidity] {
        self.acidities_by_structure
            .get(canonical)
            .map_or(&[], Vec::as_slice)
    }
    /// All measured acidities (C–H, N–H, O–H, S–H), in the order of the tables.
    pub fn acidities(&self) -> &[Acidity] {
        &self.acidities
    }
    /// Mayr electrophilicity of the compound with this canonical SMILES; one without stereo
    /// finds the isomer that was measured.
    pub fn electrophilicity(&self, canonical: &str) -> Option<&Electrophilicity> {
        let row = self.electrophilicity_structures.get(canonical)?;
        Some(&self.electrophilicities[*row])
    }
    /// All Mayr electrophilicities, in the order of the table.
    pub fn electrophilicities(&self) -> &[Electrophilicity] {
        &self.electrophilicities
    }
    /// SHA-256 over all tables, in a fixed order.
    pub fn digest(&self) -> [u8; 32] {
        let mut hash = Sha256::new();
        for table in TABLES {
            // Lengths keep the border between two tables from moving unseen.
            hash.update((table.text.len() as u64).to_le_bytes());
            hash.update(table.text.as_bytes());
        }
        hash.finalize().into()
    }

    fn reagents(&self) -> impl Iterator<Item = Reagent<'_>> {
        let bases = self.bases.iter().map(Reagent::Base);
        let solvents = self.solvents.iter().map(Reagent::Solvent);
        bases
            .chain(solvents)
            .chain(self.electrophiles.iter().map(Reagent::Electrophile))
    }

    fn index_names(&mut self) -> Result<(), LibraryError> {
        let bases = self.bases.iter().map(Reagent::Base);
        self.base_names = named(BASES, bases)?;
        let solvents = self.solvents.iter().map(Reagent::Solvent);
        self.solvent_names = named(SOLVENTS, solvents)?;
        let electrophiles = self.electrophiles.iter().map(Reagent::Electrophile);
        self.electrophile_names = named(ELECTROPHILES, electrophiles)?;
        Ok(())
    }

    fn index_electrophiles(&mut self) -> Result<(), LibraryError> {
        let mut structures = StructureIndex::default();
        for (row, electrophile) in self.electrophiles.iter().enumerate() {
            let molecule = Molecule::parse(&electrophile.smiles).map_err(|e| LibraryError {
                table: ELECTROPHILES.file.to_owned(),
                row: 0,
                column: "smiles".to_owned(),
                reason: format!("{}: {e}", electrophile.name),
            })?;
            structures.add(&molecule, row);
        }
        self.electrophile_structures = structures.finish();
        Ok(())
    }

    fn take_acidities(&mut self, rows: Vec<Measured<Acidity>>) {
        for Measured { molecule, record } in rows {
            self.acidities.push(record.clone());
            if let Some(flat) = without_stereo(&molecule) {
                let isomers = self.acidities_by_structure.entry(flat);
                isomers.or_default().push(record.clone());
            }
            let same = self.acidities_by_structure.entry(record.canonical.clone());
            same.or_default().push(record);
        }
    }

    fn take_electrophilicities(&mut self, rows: Vec<Measured<Electrophilicity>>) {
        let mut structures = StructureIndex::default();
        for Measured { molecule, record } in rows {
            structures.add(&molecule, self.electrophilicities.len());
            self.electrophilicities.push(record);
        }
        self.electrophilicity_structures = structures.finish();
    }
}

/// Indexes the names of one table and refuses a name that stands for two rows.
fn named<'a>(
    table: TableText,
    reagents: impl Iterator<Item = Reagent<'a>>,
) -> Result<NameIndex, LibraryError> {
    let mut index = NameIndex::default();
    for (row, reagent) in reagents.enumerate() {
        index
            .add(row, reagent.names())
            .map_err(|name| LibraryError {
                table: table.file.to_owned(),
                row: 0,
                column: "name".to_owned(),
                reason: format!("`{name}` stands for two rows"),
            })?;
    }
    Ok(index)
}
