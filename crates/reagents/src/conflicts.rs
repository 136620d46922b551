//! Where a laboratory's own table and the library say different things.

use std::collections::HashMap;
use std::fmt;

use crate::ReagentKind;
use crate::library::columns_of;
use crate::names::folded;
use crate::table::{Table, TableText};

/// A column in which a row differs from the one that it replaces.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ReplacedValue {
    /// Column of the table.
    pub column: String,
    /// The cell that was there.
    pub library: String,
    /// The cell that stands there now.
    pub own: String,
}

/// Where an own table and the library say different things; the own table holds.
#[derive(Clone, Debug, PartialEq)]
pub enum Conflict {
    /// An own row stands in place of another.
    Replaced {
        /// Name of the own table.
        table: String,
        /// Line of the row.
        line: usize,
        /// What kind of reagent it is.
        kind: ReagentKind,
        /// Name in the library, which the row keeps.
        name: String,
        /// The values that differ; sources and dates apart.
        values: Vec<ReplacedValue>,
    },
    /// A synonym or CAS number of an own row meant another row so far.
    Renamed {
        /// Name of the own table.
        table: String,
        /// Line of the row.
        line: usize,
        /// What kind of reagent it is.
        kind: ReagentKind,
        /// Name of the own row.
        name: String,
        /// The synonym or CAS number.
        shared: String,
        /// Name of the row that it meant.
        other: String,
    },
    /// An own acidity stands in place of another one of the same structure and element.
    Measured {
        /// Name of the own table.
        table: String,
        /// Line of the row.
        line: usize,
        /// SMILES, as the own row has it.
        smiles: String,
        /// pKa in DMSO that was there.
        library: f64,
        /// pKa in DMSO that stands there now.
        own: f64,
    },
}

impl fmt::Display for Conflict {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Conflict::Replaced {
                table,
                line,
                kind,
                name,
                values,
            } => {
                write!(
                    f,
                    "{table}, line {line}: {} `{name}` replaces that of the library",
                    kind.name()
                )?;
                for (index, value) in values.iter().enumerate() {
                    let before = if index == 0 { ": " } else { ", " };
                    write!(
                        f,
                        "{before}{} `{}` for `{}`",
                        value.column, value.own, value.library
                    )?;
                }
                Ok(())
            }
            Conflict::Renamed {
                table,
                line,
                kind,
                name,
                shared,
                other,
            } => write!(
                f,
                "{table}, line {line}: `{shared}` now means the {} `{name}`, no longer `{other}`",
                kind.name()
            ),
            Conflict::Measured {
                table,
                line,
                smiles,
                library,
                own,
            } => write!(
                f,
                "{table}, line {line}: pKa of `{smiles}` is {own}, in place of {library} of the library"
            ),
        }
    }
}

/// The cells of a table as text, by line and by name or synonym.
pub(crate) struct Cells {
    rows: HashMap<usize, Vec<String>>,
    names: HashMap<String, usize>,
}

impl Cells {
    pub(crate) fn of(text: TableText<'_>, kind: ReagentKind) -> Cells {
        let columns = columns_of(kind);
        let mut cells = Cells {
            rows: HashMap::new(),
            names: HashMap::new(),
        };
        // What cannot be cut has been reported before.
        let Ok(table) = Table::cut(text, columns) else {
            return cells;
        };
        for row in table.rows() {
            for name in row
                .list("synonyms")
                .into_iter()
                .chain([row.text_or_empty("name")])
            {
                cells.names.insert(folded(&name), row.line());
            }
            let texts = columns.iter().map(|column| row.text_or_empty(column));
            cells.rows.insert(row.line(), texts.collect());
        }
        cells
    }

    fn named(&self, name: &str) -> Option<&Vec<String>> {
        self.rows.get(self.names.get(&folded(name))?)
    }
}

/// Where the row of an own table differs from that which had the name last; sources and dates apart.
pub(crate) fn replaced_values(
    kind: ReagentKind,
    old: &[Cells],
    new: &Cells,
    line: usize,
    name: &str,
) -> Vec<ReplacedValue> {
    let old = old.iter().find_map(|cells| cells.named(name));
    let (Some(old), Some(new)) = (old, new.rows.get(&line)) else {
        return Vec::new();
    };
    let is_value = |column: &str| {
        !matches!(column, "name" | "synonyms" | "date" | "h_date") && !column.ends_with("source")
    };
    let mut values = Vec::new();
    for (column, (library, own)) in columns_of(kind).iter().zip(old.iter().zip(new)) {
        // A CAS number that is not stated is kept.
        let is_kept = *column == "cas" && own.is_empty();
        if is_value(column) && library != own && !is_kept {
            values.push(ReplacedValue {
                column: (*column).to_owned(),
                library: library.clone(),
                own: own.clone(),
            });
        }
    }
    values
}
