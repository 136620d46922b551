//! Reads the table of bases.

use enolattice_molecule::AnionClass;

use crate::solvents::CLASSES as SOLVENT_CLASSES;
use crate::table::{Row, Table, TableText};
use crate::{Base, BaseKind, Cation, LibraryError, SolventClass};

const COLUMNS: [&str; 25] = [
    "name",
    "synonyms",
    "cas",
    "smiles",
    "conjugate_acid",
    "kind",
    "cation",
    "class",
    "pka_dmso",
    "pka_dmso_sigma",
    "pka_dmso_source",
    "bulk",
    "bulk_sigma",
    "bulk_source",
    "nucleophilicity",
    "nucleophilicity_sigma",
    "nucleophilicity_source",
    "log_solubility",
    "log_solubility_in",
    "dissolution_per_s",
    "supplied",
    "h_codes",
    "h_source",
    "h_date",
    "source",
];

const KINDS: [(&str, BaseKind); 7] = [
    ("amide", BaseKind::Amide),
    ("alkoxide", BaseKind::Alkoxide),
    ("hydroxide", BaseKind::Hydroxide),
    ("hydride", BaseKind::Hydride),
    ("carbonate", BaseKind::Carbonate),
    ("amine", BaseKind::Amine),
    ("organolithium", BaseKind::Organolithium),
];

const CATIONS: [(&str, Cation); 5] = [
    ("Li", Cation::Lithium),
    ("Na", Cation::Sodium),
    ("K", Cation::Potassium),
    ("Cs", Cation::Caesium),
    ("none", Cation::None),
];

const CLASSES: [(&str, AnionClass); 8] = [
    ("alkyl nitrogen", AnionClass::AlkylNitrogen),
    ("silyl nitrogen", AnionClass::SilylNitrogen),
    ("alkoxide", AnionClass::Alkoxide),
    ("hydroxide", AnionClass::Hydroxide),
    ("hydride", AnionClass::Hydride),
    ("carbonate", AnionClass::Carbonate),
    ("carbanion", AnionClass::Carbanion),
    ("neutral", AnionClass::Neutral),
];

/// All bases of the table.
pub(crate) fn read(text: TableText) -> Result<Vec<Base>, LibraryError> {
    Table::read(text, &COLUMNS)?.rows().map(base).collect()
}

fn base(row: Row<'_>) -> Result<Base, LibraryError> {
    let log_solubility = solubilities_by_class(row)?;
    let dissolution = row.optional_number("dissolution_per_s", 1e-6, 1e3)?;
    if dissolution.is_some() == log_solubility.is_empty() {
        return Err(row.fault(
            "dissolution_per_s",
            "goes with `log_solubility`, and only with it",
        ));
    }
    Ok(Base {
        name: row.text("name")?.to_owned(),
        synonyms: row.list("synonyms"),
        cas: row.cas("cas")?,
        smiles: row.text("smiles")?.to_owned(),
        conjugate_acid: row.text("conjugate_acid")?.to_owned(),
        kind: row.choice("kind", &KINDS)?,
        cation: row.choice("cation", &CATIONS)?,
        class: row.choice("class", &CLASSES)?,
        pka_dmso: row.value("pka_dmso", -5.0, 60.0)?,
        bulk: row.value("bulk", 0.0, 2.0)?,
        nucleophilicity: row.value("nucleophilicity", -15.0, 10.0)?,
        log_solubility,
        log_solubility_in: solubilities_by_solvent(row)?,
        dissolution_per_s: dissolution.unwrap_or(0.0),
        supplied: row.text("supplied")?.to_owned(),
        hazards: row.hazards()?,
        source: row.source("source")?,
    })
}

/// Cells of the form `ether -4.2; alcohol -2`.
fn solubilities_by_class(row: Row<'_>) -> Result<Vec<(SolventClass, f64)>, LibraryError> {
    let column = "log_solubility";
    let pairs = named_numbers(row, column)?.into_iter();
    pairs
        .map(|(name, log)| Ok((row.chosen(column, &name, &SOLVENT_CLASSES)?, log)))
        .collect()
}

/// Cells of the form `acetone -3; MeCN -3`.
fn solubilities_by_solvent(row: Row<'_>) -> Result<Vec<(String, f64)>, LibraryError> {
    named_numbers(row, "log_solubility_in")
}

fn named_numbers(row: Row<'_>, column: &str) -> Result<Vec<(String, f64)>, LibraryError> {
    let entry = |part: String| {
        let (name, number) = part
            .rsplit_once(' ')
            .ok_or_else(|| row.fault(column, format!("`{part}` is not a name and a number")))?;
        Ok((
            name.trim().to_owned(),
            row.bounded(column, number, -12.0, 2.0)?,
        ))
    };
    row.list(column).into_iter().map(entry).collect()
}
