//! Substrates and reagents from the files that a campaign names.
//!
//! Only the form of a file is judged here. Names, structures and ranges are checked when the
//! campaign is: then all places where a value can come from are treated alike.

use crate::faults::Faults;
use crate::format::rows_of;
use crate::heading::{Column, Heading};
use crate::rows::Row;
use crate::stock::{NUMBERS, STOCK};
use crate::{Entry, FaultCode, Place, Stock, SubstrateEntry};

/// What is noted while files are read.
pub(crate) struct Notebook<'n> {
    pub(crate) faults: &'n mut Faults,
    pub(crate) notes: &'n mut Vec<String>,
}

/// Substrates of a file; rows that cannot be read are noted and left out.
pub(crate) fn substrates(file: &str, bytes: &[u8], notebook: Notebook<'_>) -> Vec<SubstrateEntry> {
    let mut columns = vec![
        Column::required("name"),
        Column::required("smiles"),
        Column::optional("pka_dmso"),
        Column::optional("pka_sigma"),
    ];
    columns.extend(STOCK);
    let Notebook { faults, notes } = notebook;
    rows_of(file, bytes, &Heading::new(columns), faults, notes)
        .into_iter()
        .map(|row| substrate(file, row, faults))
        .collect()
}

fn substrate(file: &str, row: Row, faults: &mut Faults) -> SubstrateEntry {
    let place = place_of(file, &row);
    let mut values = row.values.into_iter();
    let mut next = || values.next().unwrap_or_default();
    let (name, smiles) = (next(), next());
    let pka_dmso = number(&next(), &place, "pka_dmso", OR_EMPTY, faults);
    let pka_sigma = number(&next(), &place, "pka_sigma", OR_EMPTY, faults);
    let is_readable = pka_dmso.is_ok() && pka_sigma.is_ok();
    SubstrateEntry {
        name: if name.is_empty() {
            smiles.clone()
        } else {
            name
        },
        smiles,
        pka_dmso: pka_dmso.ok().flatten().filter(|_| is_readable),
        pka_sigma: pka_sigma.ok().flatten().filter(|_| is_readable),
        stock: stock(values, &place, faults),
        place,
    }
}

/// Reagents of a file, by name, by structure or by both; rows that cannot be read are noted and
/// left out.
pub(crate) fn reagents(file: &str, bytes: &[u8], notebook: Notebook<'_>) -> Vec<Entry> {
    let mut columns = vec![Column::optional("name"), Column::optional("smiles")];
    columns.extend(STOCK);
    let Notebook { faults, notes } = notebook;
    rows_of(file, bytes, &Heading::either(columns), faults, notes)
        .into_iter()
        .filter_map(|row| reagent(file, row, faults))
        .collect()
}

fn reagent(file: &str, row: Row, faults: &mut Faults) -> Option<Entry> {
    let place = place_of(file, &row);
    let mut values = row.values.into_iter();
    let (name, smiles) = (values.next()?, values.next()?);
    let stock = stock(values, &place, faults);
    if name.is_empty() && smiles.is_empty() {
        let place = Place {
            field: "name".to_owned(),
            ..place
        };
        let reason = "the row has neither a name nor a SMILES";
        let remedy = "give one of them or leave the whole row out";
        faults.note(FaultCode::ValueMissing, place, "", reason, remedy);
        return None;
    }
    Some(Entry {
        name,
        smiles,
        stock,
        place,
        equiv: None,
    })
}

fn place_of(file: &str, row: &Row) -> Place {
    Place {
        file: file.to_owned(),
        line: row.line,
        field: String::new(),
    }
}

/// The columns of the stock, which are the last of a row.
fn stock(mut values: impl Iterator<Item = String>, row: &Place, faults: &mut Faults) -> Stock {
    let numbers: [Option<f64>; NUMBERS] = std::array::from_fn(|at| {
        let text = values.next().unwrap_or_default();
        number(&text, row, STOCK[at].name, OR_EMPTY, faults)
            .ok()
            .flatten()
    });
    Stock::from_columns(
        numbers,
        std::array::from_fn(|_| values.next().unwrap_or_default()),
    )
}

/// What to do about a number that cannot be read and may be left out.
const OR_EMPTY: &str = "write it with a decimal point and without unit, or leave the field empty";

/// A number of a field, none where the field is empty.
pub(crate) fn number(
    text: &str,
    row: &Place,
    column: &'static str,
    remedy: &str,
    faults: &mut Faults,
) -> Result<Option<f64>, ()> {
    if text.is_empty() {
        return Ok(None);
    }
    text.parse().map(Some).map_err(|_| {
        let place = Place {
            field: column.to_owned(),
            ..row.clone()
        };
        faults.note(
            FaultCode::ValueType,
            place,
            text,
            "this is no number",
            remedy,
        );
    })
}
