//! One well by its row and column.

use std::fmt;
use std::str::FromStr;

use serde::{Deserialize, Serialize};

/// Rows of the largest plate, 1536 wells: A to AF.
pub(crate) const MOST_ROWS: u8 = 32;
/// Columns of the largest plate, 1536 wells.
pub(crate) const MOST_COLUMNS: u8 = 48;

/// A well of a plate, counted from 0; written "A1" to "AF48".
///
/// ```
/// use enolattice_plate::Well;
///
/// let well: Well = "B07".parse()?;
/// assert_eq!((well.row, well.column), (1, 6));
/// assert_eq!(well.to_string(), "B7");
/// # Ok::<(), enolattice_plate::WellError>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(try_from = "String", into = "String")]
pub struct Well {
    /// Row, 0 is A.
    pub row: u8,
    /// Column, 0 is 1.
    pub column: u8,
}

/// Why a text names no well.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum WellError {
    /// Not letters followed by a number.
    #[error(
        "`{text}` is no well; write the row as letters and the column as a number, `A1` or `A01`"
    )]
    Form {
        /// What was given.
        text: String,
    },
    /// Row beyond AF.
    #[error("row `{row}` of well `{text}` is on no plate; rows are A to AF")]
    Row {
        /// What was given.
        text: String,
        /// The row in it.
        row: String,
    },
    /// Column 0 or beyond 48.
    #[error("column `{column}` of well `{text}` is on no plate; columns are 1 to 48")]
    Column {
        /// What was given.
        text: String,
        /// The column in it.
        column: String,
    },
}

impl Well {
    /// The well in a row and a column, both counted from 0.
    pub const fn new(row: u8, column: u8) -> Well {
        Well { row, column }
    }

    /// Squared distance to another well in pitches of the plate.
    pub(crate) fn squared_distance(self, other: Well) -> u32 {
        let rows = u32::from(self.row.abs_diff(other.row));
        let columns = u32::from(self.column.abs_diff(other.column));
        rows * rows + columns * columns
    }
}

impl fmt::Display for Well {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let letter = |place: u8| char::from(b'A' + place);
        match self.row / 26 {
            0 => write!(f, "{}", letter(self.row))?,
            tens => write!(f, "{}{}", letter(tens - 1), letter(self.row % 26))?,
        }
        write!(f, "{}", u16::from(self.column) + 1)
    }
}

impl FromStr for Well {
    type Err = WellError;

    /// Reads "A1", "A01" and "a1".
    fn from_str(text: &str) -> Result<Well, WellError> {
        let trimmed = text.trim();
        let digits = trimmed
            .find(|c: char| !c.is_ascii_alphabetic())
            .unwrap_or(trimmed.len());
        let (row, column) = trimmed.split_at(digits);
        let is_number = !column.is_empty() && column.bytes().all(|c| c.is_ascii_digit());
        if row.is_empty() || !is_number {
            return Err(WellError::Form {
                text: shortened(text),
            });
        }
        let row = read_row(row).ok_or_else(|| WellError::Row {
            text: shortened(text),
            row: shortened(row),
        })?;
        let column = read_column(column).ok_or_else(|| WellError::Column {
            text: shortened(text),
            column: shortened(column),
        })?;
        Ok(Well { row, column })
    }
}

fn read_row(letters: &str) -> Option<u8> {
    let value = |letter: u8| letter.to_ascii_uppercase() - b'A';
    let row = match *letters.as_bytes() {
        [one] => value(one),
        [tens, one] => 26u8.checked_mul(value(tens) + 1)?.checked_add(value(one))?,
        _ => return None,
    };
    (row < MOST_ROWS).then_some(row)
}

fn read_column(digits: &str) -> Option<u8> {
    let number: u8 = digits.parse().ok()?;
    (1..=MOST_COLUMNS)
        .contains(&number)
        .then(|| number - 1)
        .filter(|_| digits.len() <= 2)
}

/// The beginning of a long text, for messages.
fn shortened(text: &str) -> String {
    text.chars().take(20).collect()
}

impl TryFrom<String> for Well {
    type Error = WellError;

    fn try_from(text: String) -> Result<Well, WellError> {
        text.parse()
    }
}

impl From<Well> for String {
    fn from(well: Well) -> String {
        well.to_string()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_of_the_corners() {
        for (name, row, column) in [
            ("A1", 0, 0),
            ("H12", 7, 11),
            ("P24", 15, 23),
            ("Z1", 25, 0),
            ("AA1", 26, 0),
            ("AF48", 31, 47),
        ] {
            assert_eq!(Well::new(row, column).to_string(), name);
            assert_eq!(name.parse(), Ok(Well::new(row, column)));
        }
        assert_eq!("A01".parse(), Ok(Well::new(0, 0)));
        assert_eq!("h07".parse(), Ok(Well::new(7, 6)));
    }

    #[test]
    fn every_well_is_read_back() {
        for row in 0..MOST_ROWS {
            for column in 0..MOST_COLUMNS {
                let well = Well::new(row, column);
                assert_eq!(well.to_string().parse(), Ok(well));
                assert_eq!(
                    format!(
                        "{}{:02}",
                        &well.to_string().trim_end_matches(char::is_numeric),
                        column + 1
                    )
                    .parse(),
                    Ok(well)
                );
            }
        }
    }

    #[test]
    fn what_is_no_well_is_refused_with_the_reason() {
        for (text, part) in [
            ("", "is no well"),
            ("A", "write the row as letters"),
            ("1A", "is no well"),
            ("A1x", "is no well"),
            ("Ä1", "is no well"),
            ("A-1", "is no well"),
            ("AG1", "row `AG`"),
            ("ZZ1", "row `ZZ`"),
            ("AAA1", "row `AAA`"),
            ("A0", "column `0`"),
            ("A49", "column `49`"),
            ("A001", "column `001`"),
            ("A99999999999999999999999", "columns are 1 to 48"),
        ] {
            let error = text.parse::<Well>().unwrap_err().to_string();
            assert!(error.contains(part), "{text}: {error}");
        }
    }
}
