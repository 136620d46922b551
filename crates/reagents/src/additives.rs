//! Reads the table of additives.

use crate::bases::CATIONS;
use crate::row::Row;
use crate::table::{Lined, Table, TableText};
use crate::{Additive, AdditiveKind, Cation, LibraryError};

pub(crate) const COLUMNS: [&str; 20] = [
    "name",
    "synonyms",
    "cas",
    "smiles",
    "formula",
    "kind",
    "frees",
    "frees_sigma",
    "frees_source",
    "breaks_aggregates",
    "breaks_aggregates_sigma",
    "breaks_aggregates_source",
    "dissolves",
    "dissolves_sigma",
    "dissolves_source",
    "h_codes",
    "h_source",
    "h_date",
    "date",
    "source",
];

const KINDS: [(&str, AdditiveKind); 4] = [
    ("crown", AdditiveKind::Crown),
    ("phase transfer", AdditiveKind::PhaseTransfer),
    ("donor", AdditiveKind::Donor),
    ("salt", AdditiveKind::Salt),
];

/// All additives of the table, or all its faults.
pub(crate) fn read(text: TableText<'_>) -> Result<Vec<Lined<Additive>>, Vec<LibraryError>> {
    let table = Table::cut(text, &COLUMNS).map_err(|fault| vec![fault])?;
    table.read(|row| Some(additive(row)))
}

fn additive(row: Row<'_>) -> Additive {
    let frees = frees(row);
    let (frees_sigma, frees_source) = if frees.is_empty() {
        (0.0, String::new())
    } else {
        (
            row.number("frees_sigma", 0.0, 1.0),
            row.source("frees_source"),
        )
    };
    Additive {
        name: row.text("name"),
        synonyms: row.list("synonyms"),
        cas: row.cas("cas"),
        smiles: row.salt("smiles"),
        formula: row.formula(),
        kind: row.choice("kind", &KINDS),
        frees,
        frees_sigma,
        frees_source,
        breaks_aggregates: row.value("breaks_aggregates", -3.0, 4.0),
        dissolves: row.value("dissolves", -3.0, 5.0),
        hazards: row.hazards(),
        date: row.month("date"),
        source: row.source("source"),
    }
}

/// Cells of the form `K 0.9; Na 0.6`.
fn frees(row: Row<'_>) -> Vec<(Cation, f64)> {
    let entry = |entry: String| {
        let Some((cation, share)) = entry.rsplit_once(' ') else {
            row.fault(
                "frees",
                format!("`{entry}` is not a counter-ion and a share"),
            );
            return None;
        };
        let cation = row.chosen("frees", cation.trim(), &CATIONS);
        Some((cation, row.bounded("frees", share, 0.0, 1.0)))
    };
    row.list("frees").into_iter().filter_map(entry).collect()
}
