//! Substrates and electrophiles from the files that a campaign names.

use crate::entries;
use crate::fault::Faults;
use crate::rows::{Column, Row, rows};
use crate::{Entry, FaultCode, Place, SubstrateEntry};

const NAME: Column = Column {
    name: "name",
    required: true,
};
const SMILES: Column = Column {
    name: "smiles",
    required: true,
};
const PKA_DMSO: Column = Column {
    name: "pka_dmso",
    required: false,
};
const PKA_SIGMA: Column = Column {
    name: "pka_sigma",
    required: false,
};

/// Substrates of a file; rows with a fault are noted and left out.
pub(crate) fn substrates(file: &str, bytes: &[u8], faults: &mut Faults) -> Vec<SubstrateEntry> {
    rows(file, bytes, &[NAME, SMILES, PKA_DMSO, PKA_SIGMA], faults)
        .into_iter()
        .filter_map(|row| substrate(file, row, faults))
        .collect()
}

fn substrate(file: &str, row: Row, faults: &mut Faults) -> Option<SubstrateEntry> {
    let place = Place {
        file: file.to_owned(),
        line: row.line,
        field: String::new(),
    };
    let [name, smiles, pka_dmso, pka_sigma] = row.values.try_into().ok()?;
    let pka_dmso = number(&pka_dmso, &place, PKA_DMSO.name, faults);
    let pka_sigma = number(&pka_sigma, &place, PKA_SIGMA.name, faults);
    let name = if name.is_empty() {
        smiles.clone()
    } else {
        name
    };
    let readable = pka_dmso.is_ok() && pka_sigma.is_ok();
    let entry = SubstrateEntry {
        name,
        smiles,
        pka_dmso: pka_dmso.ok().flatten(),
        pka_sigma: pka_sigma.ok().flatten().filter(|_| readable),
        place,
    };
    (entries::substrate(&entry, faults).is_some() && readable).then_some(entry)
}

/// Electrophiles of a file; rows with a fault are noted and left out.
pub(crate) fn electrophiles(file: &str, bytes: &[u8], faults: &mut Faults) -> Vec<Entry> {
    rows(file, bytes, &[NAME, SMILES], faults)
        .into_iter()
        .filter_map(|row| electrophile(file, row, faults))
        .collect()
}

fn electrophile(file: &str, row: Row, faults: &mut Faults) -> Option<Entry> {
    let place = |field: &str| Place {
        file: file.to_owned(),
        line: row.line,
        field: field.to_owned(),
    };
    let [name, smiles] = row.values.try_into().ok()?;
    let named = entries::check_name(&name, place(NAME.name), faults);
    let structure = entries::molecule(&smiles, place(SMILES.name), faults);
    (named && structure.is_some()).then(|| Entry {
        name,
        smiles,
        place: place(""),
    })
}

/// A number of a field, none where the field is empty.
fn number(
    text: &str,
    row: &Place,
    column: &'static str,
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
        let remedy = "write it with a decimal point and without unit, or leave the field empty";
        faults.note(
            FaultCode::ValueType,
            place,
            text,
            "this is no number",
            remedy,
        );
    })
}
