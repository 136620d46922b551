//! The library.

use enolattice_engine::ReagentRow;

use super::table::{Side, table};

/// A table of reagents.
pub(crate) fn reagent_table(rows: &[ReagentRow]) -> String {
    use Side::Left;
    let columns = [
        ("kind", Left),
        ("name", Left),
        ("other names", Left),
        ("CAS", Left),
        ("facts", Left),
        ("GHS H-codes", Left),
    ];
    table(&columns, rows.iter().map(row))
}

fn row(reagent: &ReagentRow) -> Vec<String> {
    let codes = if reagent.h_codes.is_empty() {
        "unknown".to_owned()
    } else {
        reagent.h_codes.join(" ")
    };
    vec![
        reagent.kind.clone(),
        reagent.name.clone(),
        reagent.synonyms.join(", "),
        reagent.cas.clone(),
        reagent.facts.clone(),
        codes,
    ]
}
