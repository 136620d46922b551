//! Reads the tables of measured acidities and electrophilicities.

use enolattice_molecule::Molecule;

use crate::table::{Row, Table, TableText};
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
pub(crate) struct Measured<T> {
    pub(crate) molecule: Molecule,
    pub(crate) record: T,
}

/// All acidities of one table.
pub(crate) fn acidities(text: TableText) -> Result<Vec<Measured<Acidity>>, LibraryError> {
    Table::read(text, &ACIDITY_COLUMNS)?
        .rows()
        .map(acidity)
        .collect()
}

/// All electrophilicities of one table.
pub(crate) fn electrophilicities(
    text: TableText,
) -> Result<Vec<Measured<Electrophilicity>>, LibraryError> {
    Table::read(text, &ELECTROPHILICITY_COLUMNS)?
        .rows()
        .map(electrophilicity)
        .collect()
}

fn acidity(row: Row<'_>) -> Result<Measured<Acidity>, LibraryError> {
    let smiles = row.text("smiles")?;
    let molecule = Molecule::parse(smiles).map_err(|e| row.fault("smiles", e.to_string()))?;
    let element = row.choice("element", &ELEMENTS)?;
    let record = Acidity {
        canonical: molecule.canonical().to_owned(),
        smiles: smiles.to_owned(),
        atom: acidic_atom(row, &molecule, element)?,
        element,
        pka_dmso: Value {
            value: row.number("pka_dmso", -10.0, 70.0)?,
            sigma: row.number("sigma", 0.01, 5.0)?,
            source: row.source("source")?,
        },
        extrapolated: row.flag("extrapolated")?,
        scaffold: row.text("scaffold")?.to_owned(),
    };
    Ok(Measured { molecule, record })
}

/// The acidic atom, checked to be of the element and to carry hydrogen.
fn acidic_atom(
    row: Row<'_>,
    molecule: &Molecule,
    element: u8,
) -> Result<Option<usize>, LibraryError> {
    let Some(cell) = row.optional("atom") else {
        return Ok(None);
    };
    let index: usize = cell
        .parse()
        .map_err(|_| row.fault("atom", format!("`{cell}` is not an index")))?;
    let fits = |a: &enolattice_molecule::Atom| a.element == element && a.hydrogens > 0;
    if !molecule.atoms().get(index).is_some_and(fits) {
        return Err(row.fault(
            "atom",
            format!("atom {index} is not the element with a hydrogen"),
        ));
    }
    Ok(Some(index))
}

fn electrophilicity(row: Row<'_>) -> Result<Measured<Electrophilicity>, LibraryError> {
    let molecule =
        Molecule::parse(row.text("smiles")?).map_err(|e| row.fault("smiles", e.to_string()))?;
    let record = Electrophilicity {
        canonical: molecule.canonical().to_owned(),
        e: Value {
            value: row.number("e", -40.0, 10.0)?,
            sigma: row.number("sigma", 0.01, 5.0)?,
            source: row.source("source")?,
        },
    };
    Ok(Measured { molecule, record })
}
