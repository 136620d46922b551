//! Reads the table of electrophiles known by name.

use enolattice_molecule::Molecule;

use crate::table::{Lined, Table, TableText};
use crate::{LibraryError, NamedElectrophile};

pub(crate) const COLUMNS: [&str; 11] = [
    "name",
    "synonyms",
    "cas",
    "smiles",
    "formula",
    "boiling_c",
    "h_codes",
    "h_source",
    "h_date",
    "date",
    "source",
];

/// An electrophile with its structure, by which it is found too.
pub(crate) type Drawn = (NamedElectrophile, Molecule);

/// All electrophiles of the table, or all its faults.
pub(crate) fn read(text: TableText<'_>) -> Result<Vec<Lined<Drawn>>, Vec<LibraryError>> {
    let table = Table::cut(text, &COLUMNS).map_err(|fault| vec![fault])?;
    table.read(|row| {
        let electrophile = NamedElectrophile {
            name: row.text("name"),
            synonyms: row.list("synonyms"),
            cas: row.cas("cas"),
            smiles: row.text_or_empty("smiles"),
            formula: row.formula(),
            boiling_c: row.optional_number("boiling_c", -100.0, 500.0),
            hazards: row.hazards(),
            date: row.month("date"),
            source: row.source("source"),
        };
        Some((electrophile, row.molecule("smiles")?))
    })
}
