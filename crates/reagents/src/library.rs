//! The library: all tables, indexed.

use std::collections::{HashMap, HashSet};

use sha2::{Digest, Sha256};

use crate::electrophiles::Drawn;
use crate::measured::Measured;
use crate::shelf::{Laid, Shelf};
use crate::structures::{StructureIndex, without_stereo};
use crate::table::{Lined, TableText};
use crate::{
    Acidity, Additive, Base, Conflict, Electrophilicity, MixtureError, NamedElectrophile, OwnTable,
    Reagent, ReagentKind, Solvent,
};
use crate::{additives, bases, electrophiles, measured, mixture_text, mixtures, solvents};

macro_rules! table {
    ($file:literal) => {
        TableText::builtin($file, include_str!(concat!("../data/", $file)))
    };
}

const BASES: TableText<'_> = table!("bases.tsv");
const SOLVENTS: TableText<'_> = table!("solvents.tsv");
const ELECTROPHILES: TableText<'_> = table!("electrophiles.tsv");
const ADDITIVES: TableText<'_> = table!("additives.tsv");
const ACIDITIES_CH: TableText<'_> = table!("acidities_ch.tsv");
const ACIDITIES_XH: TableText<'_> = table!("acidities_xh.tsv");
const ACIDITIES_REMEMBERED: TableText<'_> = table!("acidities_remembered.tsv");
const ELECTROPHILICITIES: TableText<'_> = table!("electrophilicities.tsv");

/// All tables, in the order in which the digest takes them.
const TABLES: [TableText<'_>; 8] = [
    BASES,
    SOLVENTS,
    ELECTROPHILES,
    ADDITIVES,
    ACIDITIES_CH,
    ACIDITIES_XH,
    ACIDITIES_REMEMBERED,
    ELECTROPHILICITIES,
];

/// The library's own table of a kind of reagents.
pub(crate) fn builtin_table(kind: ReagentKind) -> TableText<'static> {
    match kind {
        ReagentKind::Base => BASES,
        ReagentKind::Solvent => SOLVENTS,
        ReagentKind::Electrophile => ELECTROPHILES,
        ReagentKind::Additive => ADDITIVES,
    }
}

/// The columns of such a table.
pub(crate) fn columns_of(kind: ReagentKind) -> &'static [&'static str] {
    match kind {
        ReagentKind::Base => &bases::COLUMNS,
        ReagentKind::Solvent => &solvents::COLUMNS,
        ReagentKind::Electrophile => &electrophiles::COLUMNS,
        ReagentKind::Additive => &additives::COLUMNS,
    }
}

/// A fault in a table.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[error("{table}{}: {reason}", place(*.row, .column, .value))]
pub struct LibraryError {
    /// File of the table.
    pub table: String,
    /// Line of the file, from 1, heading included; 0 where the fault is of the whole table.
    pub row: usize,
    /// Column; empty where the fault is of the whole row.
    pub column: String,
    /// The cell, or its beginning; empty where the cell is, or where no single cell is at fault.
    pub value: String,
    /// What is wrong, and what would be right.
    pub reason: String,
}

fn place(row: usize, column: &str, value: &str) -> String {
    let mut place = String::new();
    if row > 0 {
        place += &format!(", line {row}");
    }
    if !column.is_empty() {
        place += &format!(", column `{column}`");
    }
    if !value.is_empty() {
        place += &format!(", `{value}`");
    }
    place
}

/// All tables of reagents and measured values.
#[derive(Clone, Debug, Default)]
pub struct Library {
    pub(crate) bases: Shelf<Base>,
    pub(crate) solvents: Shelf<Solvent>,
    pub(crate) additives: Shelf<Additive>,
    electrophiles: Shelf<NamedElectrophile>,
    electrophile_structures: HashMap<String, usize>,
    acidities: Vec<Acidity>,
    acidities_by_structure: HashMap<String, Vec<Acidity>>,
    formulas_of_acids: HashSet<String>,
    electrophilicities: Vec<Electrophilicity>,
    electrophilicity_structures: HashMap<String, usize>,
    /// Tables that were laid over those of the program, in that order.
    pub(crate) own: Vec<OwnTable>,
}

impl Library {
    /// The library that is compiled into the program.
    ///
    /// # Errors
    /// The first fault in a table; the tests of this crate exclude any.
    pub fn builtin() -> Result<Library, LibraryError> {
        let mut library = Library::default();
        library.read_builtin().map_err(|faults| {
            faults
                .into_iter()
                .next()
                .unwrap_or_else(|| BASES.fault("unreadable"))
        })?;
        Ok(library)
    }

    fn read_builtin(&mut self) -> Result<(), Vec<LibraryError>> {
        self.bases.lay_over(BASES.file, bases::read(BASES)?)?;
        self.solvents
            .lay_over(SOLVENTS.file, solvents::read(SOLVENTS)?)?;
        self.additives
            .lay_over(ADDITIVES.file, additives::read(ADDITIVES)?)?;
        self.lay_electrophiles(ELECTROPHILES.file, electrophiles::read(ELECTROPHILES)?)?;
        for table in [ACIDITIES_CH, ACIDITIES_XH, ACIDITIES_REMEMBERED] {
            self.take_acidities(measured::acidities(table)?);
        }
        self.take_electrophilicities(measured::electrophilicities(ELECTROPHILICITIES)?);
        Ok(())
    }
    /// All bases, in the order of the table.
    pub fn bases(&self) -> &[Base] {
        self.bases.rows()
    }
    /// All solvents, in the order of the table.
    pub fn solvents(&self) -> &[Solvent] {
        self.solvents.rows()
    }
    /// All additives, in the order of the table.
    pub fn additives(&self) -> &[Additive] {
        self.additives.rows()
    }
    /// All electrophiles known by name.
    pub fn electrophiles(&self) -> &[NamedElectrophile] {
        self.electrophiles.rows()
    }
    /// A base by name, synonym or CAS number, whatever the case.
    pub fn base(&self, name: &str) -> Option<&Base> {
        self.bases.find(name)
    }
    /// A solvent by name, synonym or CAS number, whatever the case.
    pub fn solvent(&self, name: &str) -> Option<&Solvent> {
        self.solvents.find(name)
    }
    /// An electrophile by name, synonym or CAS number, whatever the case.
    pub fn electrophile(&self, name: &str) -> Option<&NamedElectrophile> {
        self.electrophiles.find(name)
    }
    /// An additive by name, synonym or CAS number, whatever the case.
    pub fn additive(&self, name: &str) -> Option<&Additive> {
        self.additives.find(name)
    }
    /// Two or three solvents mixed by volume, in the order given.
    ///
    /// Volumes count to a thousandth and are written as the smallest whole numbers, so that
    /// `THF/DMF 8:2` is the mixture `THF/DMF 4:1`. Permittivity, α, β, donor number and density are
    /// means by volume; viscosity is ln η = Σ xᵢ ln ηᵢ by moles; boiling and flash point are the
    /// lowest of the parts, the melting point is the highest temperature at which ideal solubility
    /// lets a part crystallise. The page of the library says all rules with their sources.
    ///
    /// # Errors
    /// A name that is unknown or there twice, fewer than two or more than three parts, a volume
    /// outside 0.001 to 1000.
    pub fn mixture(&self, parts: &[(&str, f64)]) -> Result<Solvent, MixtureError> {
        let solvent = |(name, volume): &(&str, f64)| {
            let known = self.solvent(name).ok_or_else(|| MixtureError::Unknown {
                name: (*name).to_owned(),
                suggestion: self.suggest(ReagentKind::Solvent, name).map(str::to_owned),
            });
            Ok((known?, *volume))
        };
        mixtures::mixed(&parts.iter().map(solvent).collect::<Result<Vec<_>, _>>()?)
    }
    /// A solvent by name, or a mixture written `THF/DMF 4:1`: two or three names with `/` between
    /// them, then their volumes with `:` between them, or none for equal volumes.
    ///
    /// # Errors
    /// As [`Library::mixture`], and volumes that are not as many as the names.
    pub fn solvent_or_mixture(&self, text: &str) -> Result<Solvent, MixtureError> {
        if let Some(solvent) = self.solvent(text) {
            return Ok(solvent.clone());
        }
        match &mixture_text::parse(text)?[..] {
            [(name, _)] => Err(MixtureError::Unknown {
                name: (*name).to_owned(),
                suggestion: self.suggest(ReagentKind::Solvent, name).map(str::to_owned),
            }),
            parts => self.mixture(parts),
        }
    }
    /// The known name nearest to a misspelt one, for error messages.
    pub fn suggest(&self, kind: ReagentKind, name: &str) -> Option<&str> {
        match kind {
            ReagentKind::Base => self.bases.nearest(name),
            ReagentKind::Solvent => self.solvents.nearest(name),
            ReagentKind::Electrophile => self.electrophiles.nearest(name),
            ReagentKind::Additive => self.additives.nearest(name),
        }
    }
    /// All reagents with `word` in a name, synonym or CAS number, whatever the case; all of
    /// them for an empty word. Bases first, then solvents, electrophiles and additives.
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
            .map(|row| &self.electrophiles.rows()[*row])
    }
    /// Measured acidities of the compound with this canonical SMILES; one without stereo
    /// finds the isomer that was measured.
    pub fn acidities_of(&self, canonical: &str) -> &[Acidity] {
        self.acidities_by_structure
            .get(canonical)
            .map_or(&[], Vec::as_slice)
    }
    /// Whether a compound of this molecular formula was measured; only then is it worth the time to ask
    /// [`Library::acidities_of`] with a canonical SMILES.
    pub fn measures_formula(&self, formula: &str) -> bool {
        self.formulas_of_acids.contains(formula)
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
    /// SHA-256 over all tables, in a fixed order, then over those that were laid over them.
    pub fn digest(&self) -> [u8; 32] {
        let mut hash = Sha256::new();
        let own = self.own.iter().map(|table| table.text.as_str());
        for text in TABLES.iter().map(|table| table.text).chain(own) {
            // Lengths keep the border between two tables from moving unseen.
            hash.update((text.len() as u64).to_le_bytes());
            hash.update(text.as_bytes());
        }
        hash.finalize().into()
    }

    fn reagents(&self) -> impl Iterator<Item = Reagent<'_>> {
        let bases = self.bases().iter().map(Reagent::Base);
        let solvents = self.solvents().iter().map(Reagent::Solvent);
        let electrophiles = self.electrophiles().iter().map(Reagent::Electrophile);
        let additives = self.additives().iter().map(Reagent::Additive);
        bases.chain(solvents).chain(electrophiles).chain(additives)
    }

    /// Lays electrophiles over those that are there, by name and by structure.
    pub(crate) fn lay_electrophiles(
        &mut self,
        table: &str,
        rows: Vec<Lined<Drawn>>,
    ) -> Result<Vec<Laid>, Vec<LibraryError>> {
        let mut drawn = Vec::with_capacity(rows.len());
        let mut named = Vec::with_capacity(rows.len());
        for Lined {
            line,
            record: (record, molecule),
        } in rows
        {
            drawn.push((record.name.clone(), molecule));
            named.push(Lined { line, record });
        }
        let laid = self.electrophiles.lay_over(table, named)?;
        let mut structures = StructureIndex::default();
        for (name, molecule) in drawn {
            let Some(row) = self.electrophiles.position(&name) else {
                continue;
            };
            self.electrophile_structures
                .retain(|_, known| *known != row);
            structures.add(&molecule, row);
        }
        structures.lay_over(&mut self.electrophile_structures);
        Ok(laid)
    }

    fn take_acidities(&mut self, rows: Vec<Lined<Measured<Acidity>>>) {
        for Measured { molecule, record } in rows.into_iter().map(|row| row.record) {
            self.formulas_of_acids.insert(molecule.formula().to_owned());
            if let Some(flat) = without_stereo(&molecule) {
                let isomers = self.acidities_by_structure.entry(flat);
                isomers.or_default().push(record.clone());
            }
            let same = self.acidities_by_structure.entry(record.canonical.clone());
            same.or_default().push(record.clone());
            self.acidities.push(record);
        }
    }

    /// Lays measured acidities over those that are there: a row takes the place of all others of its
    /// structure and element; drawn without stereo, of all isomers.
    pub(crate) fn lay_acidities(
        &mut self,
        table: &str,
        rows: Vec<Lined<Measured<Acidity>>>,
    ) -> Result<Vec<Conflict>, Vec<LibraryError>> {
        measured::check_sites(table, &rows)?;
        let mut conflicts = Vec::new();
        let mut replaced = HashSet::new();
        for row in &rows {
            let own = &row.record.record;
            let known = self.acidities_of(&own.canonical).iter();
            for known in known.filter(|known| known.element == own.element) {
                conflicts.push(Conflict::Measured {
                    table: table.to_owned(),
                    line: row.line,
                    smiles: own.smiles.clone(),
                    library: known.pka_dmso.value,
                    own: own.pka_dmso.value,
                });
                replaced.insert((known.canonical.clone(), known.element));
            }
        }
        let stays = |known: &Acidity| !replaced.contains(&(known.canonical.clone(), known.element));
        self.acidities.retain(stays);
        for known in self.acidities_by_structure.values_mut() {
            known.retain(stays);
        }
        self.take_acidities(rows);
        Ok(conflicts)
    }

    fn take_electrophilicities(&mut self, rows: Vec<Lined<Measured<Electrophilicity>>>) {
        let mut structures = StructureIndex::default();
        for Measured { molecule, record } in rows.into_iter().map(|row| row.record) {
            structures.add(&molecule, self.electrophilicities.len());
            self.electrophilicities.push(record);
        }
        structures.lay_over(&mut self.electrophilicity_structures);
    }
}
