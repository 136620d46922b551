//! A fault of the input: what, where, why and what to do.

use std::fmt;

use crate::stock::STOCK;
use crate::{FaultCode, Place};

/// A fault of the input: what, where, why and what to do.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub struct InputError {
    /// Where.
    pub place: Place,
    /// The value as written, cut where it is long.
    pub value: String,
    /// A stable reason, e.g. `REAGENT_UNKNOWN`: the [`FaultCode::name`] of one of [`FaultCode::ALL`].
    pub code: &'static str,
    /// Why it was refused.
    pub reason: String,
    /// What to do.
    pub remedy: String,
}

impl InputError {
    /// A fault of a field that stands in no file.
    pub fn of_field(
        code: &'static str,
        field: impl Into<String>,
        value: impl Into<String>,
        reason: impl Into<String>,
        remedy: impl Into<String>,
    ) -> InputError {
        InputError {
            place: Place::of_field(&field.into()),
            value: value.into(),
            code,
            reason: reason.into(),
            remedy: remedy.into(),
        }
    }
}

/// `file:line: field: value: reason; remedy`; a value that is empty is left out.
impl fmt::Display for InputError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.code != FaultCode::MoreFaults.name() {
            write!(f, "{}: ", Located(&self.place))?;
            if !self.value.is_empty() {
                write!(f, "`{}`: ", self.value)?;
            }
        }
        write!(f, "{}; {}", self.reason, self.remedy)
    }
}

/// Prints a place as `file:line: field`.
#[derive(Debug)]
pub struct Located<'a>(pub &'a Place);

impl fmt::Display for Located<'_> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let Place { file, line, field } = self.0;
        if !file.is_empty() {
            write!(f, "{file}:")?;
        }
        if *line > 0 {
            write!(f, "{line}:")?;
        }
        if !file.is_empty() || *line > 0 {
            write!(f, " ")?;
        }
        write!(f, "{field}")
    }
}

/// The place of one value of a row, whose own place names the row or another value of it.
///
/// | place | value | place of the value |
/// | --- | --- | --- |
/// | none | `smiles` | `smiles` |
/// | `substrates[3]` | `smiles` | `substrates[3].smiles` |
/// | `substrates[3].smiles` | `pka_dmso` | `substrates[3].pka_dmso` |
/// | `substrates.smiles[2]` | `smiles` | `substrates.smiles[2]` |
pub fn value_of_row(row: &Place, value: &str) -> Place {
    const ROW: [&str; 4] = ["name", "smiles", "pka_dmso", "pka_sigma"];
    let is_value = |word: &str| ROW.contains(&word) || STOCK.iter().any(|known| known.name == word);
    let (head, last) = match row.field.rsplit_once('.') {
        Some((head, last)) => (head, last),
        None => ("", row.field.as_str()),
    };
    let field = if last.is_empty() || head.is_empty() && is_value(last) {
        value.to_owned()
    } else if is_value(last) {
        format!("{head}.{value}")
    } else if last.split('[').next() == Some(value) {
        row.field.clone()
    } else {
        format!("{}.{value}", row.field)
    };
    Place {
        field,
        ..row.clone()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_fault_prints_where_what_why_and_the_way_out() {
        let fault = InputError {
            place: Place {
                file: "substrates.csv".into(),
                line: 3,
                field: "smiles".into(),
            },
            value: "C1CC".into(),
            code: FaultCode::StructureInvalid.name(),
            reason: "the ring is not closed".into(),
            remedy: "write the ring number twice".into(),
        };
        assert_eq!(
            fault.to_string(),
            "substrates.csv:3: smiles: `C1CC`: the ring is not closed; write the ring number twice"
        );
    }

    #[test]
    fn a_place_names_each_value_once() {
        let check = |row: &str, value: &str, expected: &str| {
            let row = Place {
                field: row.into(),
                ..Place::default()
            };
            assert_eq!(value_of_row(&row, value).field, expected);
        };
        check("", "smiles", "smiles");
        check("smiles", "pka_dmso", "pka_dmso");
        check("substrates[3]", "smiles", "substrates[3].smiles");
        check("substrates[3].smiles", "pka_dmso", "substrates[3].pka_dmso");
        check(
            "electrophiles.smiles[2]",
            "smiles",
            "electrophiles.smiles[2]",
        );
    }
}
