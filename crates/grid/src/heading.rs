//! The line of column names of a file: which columns there may be, and where each stands.

use crate::faults::Faults;
use crate::keys::{nearest, quoted};
use crate::rows::as_written;
use crate::{FaultCode, Place};

/// Most columns of a file of which each is looked at.
const MOST_COLUMNS: usize = 100;

/// A column that a file may have.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Column {
    pub(crate) name: &'static str,
    pub(crate) required: bool,
}

impl Column {
    pub(crate) const fn optional(name: &'static str) -> Column {
        Column {
            name,
            required: false,
        }
    }

    pub(crate) const fn required(name: &'static str) -> Column {
        Column {
            name,
            required: true,
        }
    }
}

/// The columns that a file may have.
pub(crate) struct Heading {
    columns: Vec<Column>,
    /// Whether `name` or `smiles` must be there.
    either: bool,
}

impl Heading {
    pub(crate) fn new(columns: Vec<Column>) -> Heading {
        Heading {
            columns,
            either: false,
        }
    }

    /// Columns of which `name` or `smiles` must be there, or both.
    pub(crate) fn either(columns: Vec<Column>) -> Heading {
        Heading {
            columns,
            either: true,
        }
    }

    pub(crate) fn names(&self) -> impl Iterator<Item = &'static str> + '_ {
        self.columns.iter().map(|column| column.name)
    }

    /// A value for each column, in order.
    pub(crate) fn values(&self, value: impl Fn(&'static str) -> String) -> Vec<String> {
        self.names().map(value).collect()
    }
}

/// Where each column asked for stands; none if the heading is at fault.
pub(crate) fn positions(
    file: &str,
    line: u32,
    titles: &csv::ByteRecord,
    delimiter: u8,
    heading: &Heading,
    faults: &mut Faults,
) -> Option<Vec<Option<usize>>> {
    let columns = &heading.columns;
    let mut positions = vec![None; columns.len()];
    let mut sound = true;
    let names: Vec<&str> = heading.names().collect();
    let written: Vec<String> = titles
        .iter()
        .map(|name| String::from_utf8_lossy(name).trim().to_owned())
        .collect();
    let shown = as_written(titles, delimiter);
    let mut note = |code, value: &str, reason: String, remedy: String| {
        let place = Place {
            file: file.to_owned(),
            line,
            field: value.to_owned(),
        };
        faults.note(code, place, &shown, reason, remedy);
        sound = false;
    };
    if written.len() > MOST_COLUMNS {
        let reason = format!("the first line has {} columns", written.len());
        let remedy = format!("begin with a line of column names: {}", quoted(&names));
        note(FaultCode::FileSyntax, "heading", reason, remedy);
        return None;
    }
    if let Some((mark, kind)) = other_delimiter(&written, delimiter) {
        let reason = format!("the columns are separated by {mark}");
        let remedy = format!("separate them by commas, or save the file as {kind}");
        note(FaultCode::FileSyntax, "heading", reason, remedy);
        return None;
    }
    for (at, name) in written.iter().enumerate() {
        match names
            .iter()
            .position(|known| known.eq_ignore_ascii_case(name))
        {
            Some(column) if positions[column].is_none() => positions[column] = Some(at),
            Some(_) => {
                let reason = format!("the column `{name}` is there twice");
                note(
                    FaultCode::FileSyntax,
                    name,
                    reason,
                    "keep one of the two".to_owned(),
                );
            }
            None => {
                let remedy = match nearest(name, names.iter().copied()) {
                    Some(near) => format!("did you mean `{near}`?"),
                    None => format!("the columns are {}, separated by commas", quoted(&names)),
                };
                note(
                    FaultCode::ColumnUnknown,
                    name,
                    format!("there is no column `{name}`"),
                    remedy,
                );
            }
        }
    }
    for (column, position) in columns.iter().zip(&positions) {
        if column.required && position.is_none() {
            let reason = format!("the column `{}` is missing", column.name);
            let remedy = "name it in the first line of the file".to_owned();
            note(FaultCode::ColumnMissing, column.name, reason, remedy);
        }
    }
    let is_there = |name| {
        names
            .iter()
            .position(|known| *known == name)
            .is_some_and(|at| positions[at].is_some())
    };
    if heading.either && !is_there("name") && !is_there("smiles") {
        let reason = "there is neither a column `name` nor a column `smiles`".to_owned();
        let remedy = "name one of them in the first line of the file, or both".to_owned();
        note(FaultCode::ColumnMissing, "name", reason, remedy);
    }
    sound.then_some(positions)
}

/// What separates the columns of a heading that is one field to its reader.
fn other_delimiter(written: &[String], delimiter: u8) -> Option<(&'static str, &'static str)> {
    let [only] = written else { return None };
    if only.contains(';') {
        Some(("semicolons", "`.tsv` with tabs"))
    } else if only.contains('\t') && delimiter != b'\t' {
        Some(("tabs", "`.tsv`"))
    } else if only.contains(',') {
        Some(("commas", "`.csv`"))
    } else {
        None
    }
}
