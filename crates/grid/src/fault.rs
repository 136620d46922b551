//! Faults of the input: what, where, why and what to do.

use std::fmt;

use crate::Place;

/// A fault of the input: what, where, why and what to do.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[error("{}: `{value}`: {reason}; {remedy}", Located(.place))]
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

/// The closed list of reasons why an input is refused; programs branch on it.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum FaultCode {
    /// The campaign is no TOML.
    CampaignSyntax,
    /// A key that does not exist.
    KeyUnknown,
    /// A value of another kind than the key takes.
    ValueType,
    /// A value that must be there is not.
    ValueMissing,
    /// A value outside its range.
    ValueOutOfRange,
    /// A word outside the list of words allowed.
    ValueUnknown,
    /// A file that the campaign names was not given.
    FileMissing,
    /// A file that is no CSV in UTF-8.
    FileSyntax,
    /// A column that must be there is not.
    ColumnMissing,
    /// A column that does not exist.
    ColumnUnknown,
    /// A SMILES that is no molecule the model can read.
    StructureInvalid,
    /// A name that the library does not have.
    ReagentUnknown,
    /// An axis without values.
    AxisEmpty,
    /// More cells than a campaign can have.
    CampaignTooLarge,
    /// A value that has its place but is not allowed yet.
    NotYetAllowed,
}

impl FaultCode {
    /// All codes.
    pub const ALL: [FaultCode; 15] = [
        FaultCode::CampaignSyntax,
        FaultCode::KeyUnknown,
        FaultCode::ValueType,
        FaultCode::ValueMissing,
        FaultCode::ValueOutOfRange,
        FaultCode::ValueUnknown,
        FaultCode::FileMissing,
        FaultCode::FileSyntax,
        FaultCode::ColumnMissing,
        FaultCode::ColumnUnknown,
        FaultCode::StructureInvalid,
        FaultCode::ReagentUnknown,
        FaultCode::AxisEmpty,
        FaultCode::CampaignTooLarge,
        FaultCode::NotYetAllowed,
    ];

    /// The code with this name.
    pub fn from_name(name: &str) -> Option<FaultCode> {
        FaultCode::ALL.into_iter().find(|code| code.name() == name)
    }

    /// The stable name, as in [`InputError::code`] and over gRPC.
    pub fn name(self) -> &'static str {
        match self {
            FaultCode::CampaignSyntax => "CAMPAIGN_SYNTAX",
            FaultCode::KeyUnknown => "KEY_UNKNOWN",
            FaultCode::ValueType => "VALUE_TYPE",
            FaultCode::ValueMissing => "VALUE_MISSING",
            FaultCode::ValueOutOfRange => "VALUE_OUT_OF_RANGE",
            FaultCode::ValueUnknown => "VALUE_UNKNOWN",
            FaultCode::FileMissing => "FILE_MISSING",
            FaultCode::FileSyntax => "FILE_SYNTAX",
            FaultCode::ColumnMissing => "COLUMN_MISSING",
            FaultCode::ColumnUnknown => "COLUMN_UNKNOWN",
            FaultCode::StructureInvalid => "STRUCTURE_INVALID",
            FaultCode::ReagentUnknown => "REAGENT_UNKNOWN",
            FaultCode::AxisEmpty => "AXIS_EMPTY",
            FaultCode::CampaignTooLarge => "CAMPAIGN_TOO_LARGE",
            FaultCode::NotYetAllowed => "NOT_YET_ALLOWED",
        }
    }
}

/// Faults found so far.
#[derive(Debug, Default)]
pub(crate) struct Faults(Vec<InputError>);

impl Faults {
    /// Notes a fault.
    pub(crate) fn note(
        &mut self,
        code: FaultCode,
        place: Place,
        value: &str,
        reason: impl Into<String>,
        remedy: impl Into<String>,
    ) {
        self.0.push(InputError {
            place,
            value: shown(value),
            code: code.name(),
            reason: reason.into(),
            remedy: remedy.into(),
        });
    }

    /// Whether there is a fault.
    pub(crate) fn any(&self) -> bool {
        !self.0.is_empty()
    }

    /// Number of faults.
    pub(crate) fn count(&self) -> usize {
        self.0.len()
    }

    /// Takes over the faults of another list.
    pub(crate) fn append(&mut self, other: Faults) {
        self.0.extend(other.0);
    }

    /// Takes over the faults of lines that have none yet: those of one line often follow from
    /// each other.
    pub(crate) fn append_of_other_lines(&mut self, other: Faults) {
        let has_line = |fault: &InputError| {
            let place = |fault: &InputError| (fault.place.file.clone(), fault.place.line);
            self.0.iter().any(|known| place(known) == place(fault))
        };
        let others: Vec<InputError> = other
            .0
            .into_iter()
            .filter(|fault| !has_line(fault))
            .collect();
        self.0.extend(others);
    }

    /// The faults by file and line, those of one line in the order in which they were found.
    pub(crate) fn in_order(mut self, first_file: &str) -> Vec<InputError> {
        self.0.sort_by_cached_key(|fault| {
            let Place { file, line, .. } = &fault.place;
            (file != first_file, file.clone(), *line)
        });
        self.0
    }

    /// The value, if there is no fault.
    pub(crate) fn unless_any<T>(self, value: T, first_file: &str) -> Result<T, Vec<InputError>> {
        if self.any() {
            Err(self.in_order(first_file))
        } else {
            Ok(value)
        }
    }
}

/// A value as it is shown: control characters escaped, cut after 80 characters.
fn shown(value: &str) -> String {
    const LONGEST: usize = 80;
    let mut shown: String = value
        .chars()
        .take(LONGEST)
        .flat_map(|c| {
            if c.is_control() {
                c.escape_default().collect::<Vec<_>>()
            } else {
                vec![c]
            }
        })
        .collect();
    if value.chars().nth(LONGEST).is_some() {
        shown.push('…');
    }
    shown
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
    const VALUES: [&str; 4] = ["name", "smiles", "pka_dmso", "pka_sigma"];
    let (head, last) = match row.field.rsplit_once('.') {
        Some((head, last)) => (head, last),
        None => ("", row.field.as_str()),
    };
    let field = if last.is_empty() || head.is_empty() && VALUES.contains(&last) {
        value.to_owned()
    } else if VALUES.contains(&last) {
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
    fn long_and_hostile_values_are_shown_short_and_escaped() {
        assert_eq!(shown("a\u{1b}[2Jb\n"), "a\\u{1b}[2Jb\\n");
        assert_eq!(shown(&"x".repeat(500)).chars().count(), 81);
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
