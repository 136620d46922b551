//! Reads the table of electrophiles known by name.

use crate::table::{Row, Table, TableText};
use crate::{LibraryError, NamedElectrophile};

const COLUMNS: [&str; 9] = [
    "name",
    "synonyms",
    "cas",
    "smiles",
    "boiling_c",
    "h_codes",
    "h_source",
    "h_date",
    "source",
];

/// All electrophiles of the table.
pub(crate) fn read(text: TableText) -> Result<Vec<NamedElectrophile>, LibraryError> {
    Table::read(text, &COLUMNS)?
        .rows()
        .map(electrophile)
        .collect()
}

fn electrophile(row: Row<'_>) -> Result<NamedElectrophile, LibraryError> {
    Ok(NamedElectrophile {
        name: row.text("name")?.to_owned(),
        synonyms: row.list("synonyms"),
        cas: row.cas("cas")?,
        smiles: row.text("smiles")?.to_owned(),
        boiling_c: row.optional_number("boiling_c", -50.0, 400.0)?,
        hazards: row.hazards()?,
        source: row.source("source")?,
    })
}
