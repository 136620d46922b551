//! Second pKa of substrates against what is published of them.

use enolattice_model::{Conditions, Model};
use serde::Deserialize;

use crate::cell::cell;

const TABLE: &str = include_str!("../data/dianions.tsv");

#[derive(Deserialize)]
struct Row {
    name: String,
    smiles: String,
    medium: String,
    published: Option<f64>,
    taken_by: Option<String>,
    left_by: Option<String>,
    site: Option<usize>,
    source: String,
}

/// A second pKa and what is published of it.
#[derive(Clone, Debug)]
pub struct SecondAcidity {
    /// The acid.
    pub name: String,
    /// Its SMILES.
    pub smiles: String,
    /// Medium of all numbers.
    pub medium: String,
    /// pKa of the first proton.
    pub first: f64,
    /// pKa of the second, by the model.
    pub second: f64,
    /// Measured second pKa.
    pub published: Option<f64>,
    /// A base that takes the second proton, with the pKa (DMSO) of its acid.
    pub taken_by: Option<(String, f64)>,
    /// A base that leaves it, likewise.
    pub left_by: Option<(String, f64)>,
    /// The atom that loses the second proton, by the model.
    pub site: usize,
    /// The atom that is known to lose it, or one equivalent to it by symmetry.
    pub known_site: Option<usize>,
    /// Who says so.
    pub source: String,
}

/// All rows of `data/dianions.tsv`.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn compare(model: &Model) -> Result<Vec<SecondAcidity>, String> {
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(b'\t')
        .comment(Some(b'#'))
        .from_reader(TABLE.as_bytes());
    reader
        .deserialize()
        .map(|row| compared(model, row.map_err(|error| error.to_string())?))
        .collect()
}

fn compared(model: &Model, row: Row) -> Result<SecondAcidity, String> {
    let library = model.library();
    let pka_of = |base: Option<String>| {
        base.map(|name| match library.base(&name) {
            Some(base) => Ok((name, base.pka_dmso.value)),
            None => Err(format!("{}: the library has no base {name}", row.name)),
        })
        .transpose()
    };
    let (pkas, site) = acidities(model, &row.smiles, &row.medium)?;
    let (&[first, second], Some(site)) = (pkas.as_slice(), site) else {
        return Err(format!("{}: no second proton that bases reach", row.name));
    };
    Ok(SecondAcidity {
        site,
        known_site: row.site,
        first,
        second,
        published: row.published,
        taken_by: pka_of(row.taken_by)?,
        left_by: pka_of(row.left_by)?,
        name: row.name,
        smiles: row.smiles,
        medium: row.medium,
        source: row.source,
    })
}

/// pKa of each proton of a substrate in a solvent at 25 °C, free ions: that of a pot without metal ions; and the atom
/// that loses the second.
fn acidities(
    model: &Model,
    smiles: &str,
    solvent: &str,
) -> Result<(Vec<f64>, Option<usize>), String> {
    let conditions = Conditions {
        temperature_c: 25.0,
        formation_temperature_c: 25.0,
        base_equiv: 1.0,
        electrophile_equiv: 1.0,
        additive_equiv: 0.0,
        concentration_m: 0.1,
        time_h: 1.0,
        dosing_min: 10.0,
        addition: None,
    };
    let cell = cell(model, [smiles, "Et3N", "CI", solvent], conditions)?;
    let substrate = model.pot(&cell, 0.0).into_iter().next();
    let pkas = substrate.map(|acid| acid.pkas).unwrap_or_default();
    Ok((pkas, model.second_site(&cell)))
}
