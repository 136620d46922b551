//! Reads the tables of measured acidities and electrophilicities.

use std::collections::HashMap;

use enolattice_molecule::Molecule;

use crate::row::Row;
use crate::table::{Lined, Table, TableText};
use crate::{Acidity, Electrophilicity, LibraryError, Value};

const ACIDITY_COLUMNS: [&str; 9] = [
    "id",
    "smiles",
    "atom",
    "element",
    "pka_dmso",
    "sigma",
    "extrapolated",
    "scaffold",
    "source",
];

const ELECTROPHILICITY_COLUMNS: [&str; 5] = ["name", "smiles", "e", "sigma", "source"];

/// Atomic numbers of the atoms that carry an acidic hydrogen.
const ELEMENTS: [(&str, u8); 5] = [("C", 6), ("N", 7), ("O", 8), ("S", 16), ("Se", 34)];

/// A measured row with the structure that it belongs to.
#[derive(Clone, Debug)]
pub(crate) struct Measured<T> {
    pub(crate) molecule: Molecule,
    pub(crate) record: T,
}

/// All acidities of one table, or all its faults.
pub(crate) fn acidities(
    text: TableText<'_>,
) -> Result<Vec<Lined<Measured<Acidity>>>, Vec<LibraryError>> {
    Table::cut(text, &ACIDITY_COLUMNS)
        .map_err(|fault| vec![fault])?
        .read(acidity)
}

/// All electrophilicities of one table, or all its faults.
pub(crate) fn electrophilicities(
    text: TableText<'_>,
) -> Result<Vec<Lined<Measured<Electrophilicity>>>, Vec<LibraryError>> {
    let table = Table::cut(text, &ELECTROPHILICITY_COLUMNS).map_err(|fault| vec![fault])?;
    table.read(electrophilicity)
}

fn acidity(row: Row<'_>) -> Option<Measured<Acidity>> {
    let element = row.choice("element", &ELEMENTS);
    let molecule = row.molecule("smiles")?;
    let record = Acidity {
        canonical: molecule.canonical().to_owned(),
        smiles: molecule.smiles().to_owned(),
        atom: acidic_atom(row, &molecule, element),
        element,
        pka_dmso: Value {
            value: row.number("pka_dmso", -10.0, 70.0),
            sigma: row.number("sigma", 0.01, 5.0),
            source: row.source("source"),
        },
        extrapolated: row.flag("extrapolated"),
        scaffold: row.text("scaffold"),
    };
    Some(Measured { molecule, record })
}

/// The acidic atom, checked to be of the element and to carry hydrogen.
fn acidic_atom(row: Row<'_>, molecule: &Molecule, element: u8) -> Option<usize> {
    let Ok(index) = row.optional("atom")?.parse::<usize>() else {
        row.fault("atom", "not an index");
        return None;
    };
    let fits = |a: &enolattice_molecule::Atom| a.element == element && a.hydrogens > 0;
    if !molecule.atoms().get(index).is_some_and(fits) {
        row.fault(
            "atom",
            format!("atom {index} is not the element with a hydrogen"),
        );
    }
    Some(index)
}

/// Refuses a laboratory's rows that give one site two values.
pub(crate) fn check_sites(
    table: &str,
    rows: &[Lined<Measured<Acidity>>],
) -> Result<(), Vec<LibraryError>> {
    let mut earlier: HashMap<(&str, u8), Vec<&Lined<Measured<Acidity>>>> = HashMap::new();
    let mut faults = Vec::new();
    for row in rows {
        let own = &row.record.record;
        let known = earlier
            .entry((own.canonical.as_str(), own.element))
            .or_default();
        if let Some(other) = known
            .iter()
            .find(|other| may_be_one_site(&other.record, &row.record))
        {
            faults.push(LibraryError {
                table: table.to_owned(),
                row: row.line,
                column: "smiles".to_owned(),
                value: own.smiles.clone(),
                reason: format!(
                    "the row of line {} has a value for this site: give one, or name another `atom` \
                     in the same SMILES",
                    other.line
                ),
            });
        }
        known.push(row);
    }
    if faults.is_empty() {
        Ok(())
    } else {
        Err(faults)
    }
}

/// Whether two rows of one structure and element speak of one site, as far as they say.
fn may_be_one_site(one: &Measured<Acidity>, other: &Measured<Acidity>) -> bool {
    let (Some(a), Some(b)) = (one.record.atom, other.record.atom) else {
        return true;
    };
    let classes = one.molecule.symmetry_classes();
    one.record.smiles != other.record.smiles || classes.get(a) == classes.get(b)
}

fn electrophilicity(row: Row<'_>) -> Option<Measured<Electrophilicity>> {
    let molecule = row.molecule("smiles")?;
    let record = Electrophilicity {
        canonical: molecule.canonical().to_owned(),
        e: Value {
            value: row.number("e", -40.0, 10.0),
            sigma: row.number("sigma", 0.01, 5.0),
            source: row.source("source"),
        },
    };
    Some(Measured { molecule, record })
}
