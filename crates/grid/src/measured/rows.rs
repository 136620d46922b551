//! Rows of a file of measured yields. Only their form is judged here.

use crate::conditions::CONDITIONS;
use crate::faults::Faults;
use crate::files::{Notebook, number};
use crate::format::rows_of;
use crate::heading::{Column, Heading};
use crate::rows::Row;
use crate::{MeasuredEntry, Place};

/// The columns of reagents, in the order of the fields of [`MeasuredEntry`].
const REAGENTS: [Column; 5] = [
    Column::required("substrate"),
    Column::required("base"),
    Column::required("electrophile"),
    Column::required("solvent"),
    Column::optional("additive"),
];
/// The columns after those of the numbers.
const OTHERS: [Column; 4] = [
    Column::optional("addition"),
    Column::required("yield_fraction"),
    Column::optional("sigma"),
    Column::optional("note"),
];

const AS_FRACTION: &str = "write it as a fraction: 0.85 for 85 %";
const AS_NUMBER: &str = "write it with a decimal point and without unit";

/// The measured yields of a file; numbers that cannot be read are noted and left out.
pub(crate) fn rows(file: &str, bytes: &[u8], notebook: Notebook<'_>) -> Vec<MeasuredEntry> {
    let Notebook { faults, notes } = notebook;
    let temperature = CONDITIONS[0].name();
    let conditions = CONDITIONS.map(|quantity| match quantity.name() {
        name if name == temperature => Column::required(name),
        name => Column::optional(name),
    });
    let columns = [&REAGENTS[..], &conditions, &OTHERS].concat();
    let heading = Heading::new(columns);
    let rows = rows_of(file, bytes, &heading, faults, notes).into_iter();
    rows.map(|row| entry(file, row, faults)).collect()
}

fn entry(file: &str, row: Row, faults: &mut Faults) -> MeasuredEntry {
    let place = Place {
        file: file.to_owned(),
        line: row.line,
        field: String::new(),
    };
    let mut values = row.values.into_iter();
    let mut next = || values.next().unwrap_or_default();
    let mut entry = MeasuredEntry {
        substrate: next(),
        base: next(),
        electrophile: next(),
        solvent: next(),
        additive: next(),
        ..MeasuredEntry::default()
    };
    let mut read = |text: String, column: &'static str, remedy: &str| {
        let number = number(&text, &place, column, remedy, faults);
        number.ok().flatten()
    };
    for (quantity, value) in CONDITIONS.iter().zip(entry.numbers_mut()) {
        *value = read(next(), quantity.name(), AS_NUMBER);
    }
    entry.addition = next();
    entry.yield_fraction = read(next(), "yield_fraction", AS_FRACTION);
    entry.sigma = read(next(), "sigma", AS_FRACTION);
    entry.note = next();
    MeasuredEntry { place, ..entry }
}
