//! A reagent of the library.

use enolattice_engine::ReagentRow;
use serde::Serialize;

/// An element of the list of `reagents --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct ReagentRecord {
    kind: String,
    name: String,
    synonyms: Vec<String>,
    cas: Option<String>,
    smiles: String,
    facts: String,
    /// Null where the library knows no hazard statements, which never means that there are none.
    h_codes: Option<Vec<String>>,
}

impl From<ReagentRow> for ReagentRecord {
    fn from(row: ReagentRow) -> ReagentRecord {
        ReagentRecord {
            kind: row.kind,
            name: row.name,
            synonyms: row.synonyms,
            cas: Some(row.cas).filter(|cas| !cas.is_empty()),
            smiles: row.smiles,
            facts: row.facts,
            h_codes: Some(row.h_codes).filter(|codes| !codes.is_empty()),
        }
    }
}
