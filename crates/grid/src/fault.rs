//! Faults of the input: what, where, why and what to do.

use std::collections::HashSet;
use std::fmt;

use crate::Place;
use crate::stock::STOCK;

/// Most faults that are listed of one input; the others are counted in a last one, [`FaultCode::MoreFaults`].
pub const MAX_FAULTS: usize = 200;

/// Faults that are kept until they can be put in order. Beyond them an input is not looked at any
/// further where that takes time: who has a thousand faults has a file of the wrong kind.
const MOST_KEPT: usize = 1_000;

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
    /// A file that is not what its ending says, or is beyond the limits of size.
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
    /// A table of the laboratory's own library that cannot be laid over ours.
    LibraryInvalid,
    /// Faults that are not listed; the value is their number.
    MoreFaults,
}

impl FaultCode {
    /// All codes.
    pub const ALL: [FaultCode; 17] = [
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
        FaultCode::LibraryInvalid,
        FaultCode::MoreFaults,
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
            FaultCode::LibraryInvalid => "LIBRARY_INVALID",
            FaultCode::MoreFaults => "MORE_FAULTS",
        }
    }
}

/// Faults found so far.
#[derive(Debug, Default)]
pub(crate) struct Faults {
    kept: Vec<InputError>,
    further: usize,
}

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
        // the words of a hostile file may stand in any of these
        self.push(InputError {
            place: Place {
                field: shown(&place.field, LONGEST_VALUE),
                ..place
            },
            value: shown(value, LONGEST_VALUE),
            code: code.name(),
            reason: shown(&reason.into(), LONGEST_SENTENCE),
            remedy: shown(&remedy.into(), LONGEST_SENTENCE),
        });
    }

    fn push(&mut self, fault: InputError) {
        if fault.code == FaultCode::MoreFaults.name() {
            self.further += fault.value.parse().unwrap_or(1);
        } else if self.is_full() {
            self.further += 1;
        } else {
            self.kept.push(fault);
        }
    }

    /// Whether there is a fault.
    pub(crate) fn any(&self) -> bool {
        self.count() > 0
    }

    /// Whether there are so many that nobody will read on.
    pub(crate) fn is_full(&self) -> bool {
        self.kept.len() >= MOST_KEPT
    }

    /// Number of faults.
    pub(crate) fn count(&self) -> usize {
        self.kept.len() + self.further
    }

    /// Takes over the faults of another list.
    pub(crate) fn append(&mut self, other: Faults) {
        other.kept.into_iter().for_each(|fault| self.push(fault));
        self.further += other.further;
    }

    /// Takes over the faults of lines that have none yet: those of one line often follow from
    /// each other.
    pub(crate) fn append_of_other_lines(&mut self, mut other: Faults) {
        let place = |fault: &InputError| (fault.place.file.clone(), fault.place.line);
        let known: HashSet<(String, u32)> = self.kept.iter().map(place).collect();
        other.kept.retain(|fault| !known.contains(&place(fault)));
        self.append(other);
    }

    /// The faults by file and line, those of one line in the order in which they were found: at
    /// most [`MAX_FAULTS`], then one that counts the others.
    pub(crate) fn in_order(mut self, first_file: &str) -> Vec<InputError> {
        self.kept.sort_by_cached_key(|fault| {
            let Place { file, line, .. } = &fault.place;
            (file != first_file, file.clone(), *line)
        });
        let further = self.further + self.kept.len().saturating_sub(MAX_FAULTS);
        self.kept.truncate(MAX_FAULTS);
        if further > 0 {
            self.kept.push(InputError {
                place: Place::default(),
                value: further.to_string(),
                code: FaultCode::MoreFaults.name(),
                reason: match further {
                    1 => "1 more fault is not listed".to_owned(),
                    further => format!("{further} more faults are not listed"),
                },
                remedy: "mend those that are listed and ask again".to_owned(),
            });
        }
        self.kept
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

impl FromIterator<InputError> for Faults {
    fn from_iter<I: IntoIterator<Item = InputError>>(list: I) -> Faults {
        let mut faults = Faults::default();
        list.into_iter().for_each(|fault| faults.push(fault));
        faults
    }
}

/// Faults by file and line, those without a file first: at most [`MAX_FAULTS`], then one that counts the others.
pub fn in_order(faults: impl IntoIterator<Item = InputError>) -> Vec<InputError> {
    faults.into_iter().collect::<Faults>().in_order("")
}

/// Characters of a value and of a sentence that are shown.
const LONGEST_VALUE: usize = 80;
const LONGEST_SENTENCE: usize = 500;

/// A text as it is shown: control characters escaped, cut where it is long.
fn shown(value: &str, longest: usize) -> String {
    let mut shown: String = value
        .chars()
        .take(longest)
        .flat_map(|c| {
            if c.is_control() {
                c.escape_default().collect::<Vec<_>>()
            } else {
                vec![c]
            }
        })
        .collect();
    if value.chars().nth(longest).is_some() {
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
    fn more_faults_than_anyone_reads_are_counted() {
        let mut faults = Faults::default();
        for line in (1..=1_500).rev() {
            let place = Place {
                file: "f.csv".into(),
                line,
                field: "smiles".into(),
            };
            faults.note(FaultCode::ValueMissing, place, "", "none", "give one");
        }
        let listed = faults.in_order("");
        assert_eq!(listed.len(), MAX_FAULTS + 1);
        assert!(
            listed
                .windows(2)
                .take(MAX_FAULTS - 1)
                .all(|two| two[0].place.line < two[1].place.line)
        );
        let last = listed.last().expect("a last one");
        assert_eq!((last.code, last.value.as_str()), ("MORE_FAULTS", "1300"));
        assert_eq!(
            last.to_string(),
            "1300 more faults are not listed; mend those that are listed and ask again"
        );
        let again = in_order(listed.clone().into_iter().chain(listed[..1].to_vec()));
        assert_eq!(again.last().map(|last| last.value.as_str()), Some("1301"));
    }

    #[test]
    fn long_and_hostile_values_are_shown_short_and_escaped() {
        assert_eq!(shown("a\u{1b}[2Jb\n", 80), "a\\u{1b}[2Jb\\n");
        assert_eq!(shown(&"x".repeat(500), 80).chars().count(), 81);
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
