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
    GridTooLarge,
    /// A value that has its place but is not allowed yet.
    NotYetAllowed,
}

impl FaultCode {
    /// All codes.
    pub const ALL: [FaultCode; 14] = [
        FaultCode::CampaignSyntax,
        FaultCode::KeyUnknown,
        FaultCode::ValueType,
        FaultCode::ValueOutOfRange,
        FaultCode::ValueUnknown,
        FaultCode::FileMissing,
        FaultCode::FileSyntax,
        FaultCode::ColumnMissing,
        FaultCode::ColumnUnknown,
        FaultCode::StructureInvalid,
        FaultCode::ReagentUnknown,
        FaultCode::AxisEmpty,
        FaultCode::GridTooLarge,
        FaultCode::NotYetAllowed,
    ];

    /// The stable name, as in [`InputError::code`] and over gRPC.
    pub fn name(self) -> &'static str {
        match self {
            FaultCode::CampaignSyntax => "CAMPAIGN_SYNTAX",
            FaultCode::KeyUnknown => "KEY_UNKNOWN",
            FaultCode::ValueType => "VALUE_TYPE",
            FaultCode::ValueOutOfRange => "VALUE_OUT_OF_RANGE",
            FaultCode::ValueUnknown => "VALUE_UNKNOWN",
            FaultCode::FileMissing => "FILE_MISSING",
            FaultCode::FileSyntax => "FILE_SYNTAX",
            FaultCode::ColumnMissing => "COLUMN_MISSING",
            FaultCode::ColumnUnknown => "COLUMN_UNKNOWN",
            FaultCode::StructureInvalid => "STRUCTURE_INVALID",
            FaultCode::ReagentUnknown => "REAGENT_UNKNOWN",
            FaultCode::AxisEmpty => "AXIS_EMPTY",
            FaultCode::GridTooLarge => "GRID_TOO_LARGE",
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

    /// Takes over the faults of another list.
    pub(crate) fn append(&mut self, other: Faults) {
        self.0.extend(other.0);
    }

    /// The faults by file and line, those of one line in the order in which they were found.
    ///
    /// Files stand in the order in which they were first named.
    pub(crate) fn in_order(mut self, first_file: &str) -> Vec<InputError> {
        self.0.sort_by(|a, b| {
            let key = |fault: &InputError| (fault.place.file != first_file, fault.place.file.clone(), fault.place.line);
            key(a).cmp(&key(b))
        });
        self.0
    }

    /// The value, if there is no fault.
    pub(crate) fn unless_any<T>(self, value: T, first_file: &str) -> Result<T, Vec<InputError>> {
        if self.any() { Err(self.in_order(first_file)) } else { Ok(value) }
    }
}

/// A value as it is shown: control characters escaped, cut after 80 characters.
fn shown(value: &str) -> String {
    const LONGEST: usize = 80;
    let mut shown: String = value
        .chars()
        .take(LONGEST)
        .flat_map(|c| if c.is_control() { c.escape_default().collect::<Vec<_>>() } else { vec![c] })
        .collect();
    if value.chars().nth(LONGEST).is_some() {
        shown.push('…');
    }
    shown
}

/// Adds what a value of a row or table is to the place of the row or table.
///
/// A place that already names the value keeps its field: `electrophiles.smiles[2]` is not made
/// longer by `smiles`.
pub(crate) fn within(place: &Place, value: &str) -> Place {
    let last = place.field.rsplit('.').next().unwrap_or_default();
    let last = last.split('[').next().unwrap_or_default();
    let field = match place.field.as_str() {
        "" => value.to_owned(),
        field if last == value => field.to_owned(),
        field => format!("{field}.{value}"),
    };
    Place { field, ..place.clone() }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_fault_prints_where_what_why_and_the_way_out() {
        let fault = InputError {
            place: Place { file: "substrates.csv".into(), line: 3, field: "smiles".into() },
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
        let place = |field: &str| Place { field: field.into(), ..Place::default() };
        assert_eq!(within(&place(""), "smiles").field, "smiles");
        assert_eq!(within(&place("substrates[3]"), "smiles").field, "substrates[3].smiles");
        assert_eq!(within(&place("electrophiles.smiles[2]"), "smiles").field, "electrophiles.smiles[2]");
    }
}
