//! The list of faults: kept while an input is looked at, then put in order.

use std::collections::HashSet;

use crate::{FaultCode, InputError, Place};

/// Most faults that are listed of one input; the others are counted in a last one, [`FaultCode::MoreFaults`].
pub const MAX_FAULTS: usize = 200;

/// Faults that are kept until they can be put in order. Beyond them an input is not looked at any
/// further where that takes time: who has a thousand faults has a file of the wrong kind.
const MOST_KEPT: usize = 1_000;

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
                    // from there on not everything was looked at
                    _ if further + MAX_FAULTS >= MOST_KEPT => {
                        format!("at least {further} more faults are not listed")
                    }
                    _ => format!("{further} more faults are not listed"),
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

#[cfg(test)]
mod tests {
    use super::*;

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
            "at least 1300 more faults are not listed; mend those that are listed and ask again"
        );
        let again = in_order(listed.clone().into_iter().chain(listed[..1].to_vec()));
        assert_eq!(again.last().map(|last| last.value.as_str()), Some("1301"));
    }

    #[test]
    fn long_and_hostile_values_are_shown_short_and_escaped() {
        assert_eq!(shown("a\u{1b}[2Jb\n", 80), "a\\u{1b}[2Jb\\n");
        assert_eq!(shown(&"x".repeat(500), 80).chars().count(), 81);
    }
}
