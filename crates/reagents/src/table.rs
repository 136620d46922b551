//! One tab-separated table: heading lines, a row of columns, rows.
//!
//! Heading lines begin with `#`. A line `# source KEY: TEXT` declares a source that
//! cells may name by its key, so that no value stands without one.

use std::collections::HashMap;

use crate::{Hazards, LibraryError, Value};

/// A table as text, with the name of its file.
#[derive(Clone, Copy, Debug)]
pub(crate) struct TableText {
    /// File name.
    pub(crate) file: &'static str,
    /// Contents of the file.
    pub(crate) text: &'static str,
}

/// A table cut into cells.
#[derive(Debug)]
pub(crate) struct Table {
    file: &'static str,
    columns: HashMap<String, usize>,
    sources: HashMap<String, String>,
    records: Vec<csv::StringRecord>,
}

impl Table {
    /// Cuts the text into cells; the columns must be `expected`, in that order.
    pub(crate) fn read(table: TableText, expected: &[&str]) -> Result<Table, LibraryError> {
        let fault = |row: u64, reason: String| LibraryError {
            table: table.file.to_owned(),
            row: row as usize,
            column: String::new(),
            reason,
        };
        let mut reader = csv::ReaderBuilder::new()
            .delimiter(b'\t')
            .comment(Some(b'#'))
            .quoting(false)
            .from_reader(table.text.as_bytes());
        let heading = reader.headers().map_err(|e| fault(0, e.to_string()))?;
        if heading.iter().ne(expected.iter().copied()) {
            let found = heading.iter().collect::<Vec<_>>().join(", ");
            return Err(fault(
                0,
                format!("columns are `{found}`, expected `{}`", expected.join(", ")),
            ));
        }
        let columns = (0..)
            .zip(heading.iter())
            .map(|(i, c)| (c.to_owned(), i))
            .collect();
        let mut records = Vec::new();
        for record in reader.records() {
            let record = record.map_err(|e| {
                let row = e.position().map_or(0, csv::Position::line);
                fault(row, e.to_string())
            })?;
            records.push(record);
        }
        Ok(Table {
            file: table.file,
            columns,
            sources: declared_sources(table.text),
            records,
        })
    }

    /// The rows, in the order of the file.
    pub(crate) fn rows(&self) -> impl Iterator<Item = Row<'_>> {
        self.records.iter().map(|record| Row {
            table: self,
            record,
        })
    }
}

/// The sources that the heading declares, by key.
fn declared_sources(text: &str) -> HashMap<String, String> {
    text.lines()
        .filter_map(|line| line.strip_prefix("# source "))
        .filter_map(|line| line.split_once(": "))
        .map(|(key, source)| (key.to_owned(), source.to_owned()))
        .collect()
}

/// One row of a table.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Row<'a> {
    table: &'a Table,
    record: &'a csv::StringRecord,
}

impl<'a> Row<'a> {
    /// A fault in one of this row's cells.
    pub(crate) fn fault(&self, column: &str, reason: impl Into<String>) -> LibraryError {
        LibraryError {
            table: self.table.file.to_owned(),
            row: self.record.position().map_or(0, csv::Position::line) as usize,
            column: column.to_owned(),
            reason: reason.into(),
        }
    }

    /// Text of a cell, or none where it is empty.
    pub(crate) fn optional(&self, column: &str) -> Option<&'a str> {
        let index = *self.table.columns.get(column)?;
        self.record
            .get(index)
            .map(str::trim)
            .filter(|cell| !cell.is_empty())
    }

    /// Text of a cell that must not be empty.
    pub(crate) fn text(&self, column: &str) -> Result<&'a str, LibraryError> {
        self.optional(column)
            .ok_or_else(|| self.fault(column, "the cell is empty"))
    }

    /// The parts of a cell that are separated by `;`.
    pub(crate) fn list(&self, column: &str) -> Vec<String> {
        let cell = self.optional(column).unwrap_or_default();
        let parts = cell
            .split(';')
            .map(str::trim)
            .filter(|part| !part.is_empty());
        parts.map(str::to_owned).collect()
    }

    /// A number within bounds, or none where the cell is empty.
    pub(crate) fn optional_number(
        &self,
        column: &str,
        least: f64,
        most: f64,
    ) -> Result<Option<f64>, LibraryError> {
        self.optional(column)
            .map(|cell| self.bounded(column, cell, least, most))
            .transpose()
    }

    /// A number within bounds.
    pub(crate) fn number(&self, column: &str, least: f64, most: f64) -> Result<f64, LibraryError> {
        self.bounded(column, self.text(column)?, least, most)
    }

    /// Reads a number out of the text of a cell.
    pub(crate) fn bounded(
        &self,
        column: &str,
        text: &str,
        least: f64,
        most: f64,
    ) -> Result<f64, LibraryError> {
        let number: f64 = text
            .parse()
            .map_err(|_| self.fault(column, format!("`{text}` is not a number")))?;
        if !(least..=most).contains(&number) {
            return Err(self.fault(column, format!("{number} is not within {least} to {most}")));
        }
        Ok(number)
    }

    /// One of the words that the column allows.
    pub(crate) fn choice<T: Copy>(
        &self,
        column: &str,
        choices: &[(&str, T)],
    ) -> Result<T, LibraryError> {
        self.chosen(column, self.text(column)?, choices)
    }

    /// Looks a word up among those that the column allows.
    pub(crate) fn chosen<T: Copy>(
        &self,
        column: &str,
        word: &str,
        choices: &[(&str, T)],
    ) -> Result<T, LibraryError> {
        let found = choices.iter().find(|(choice, _)| *choice == word);
        found.map(|(_, value)| *value).ok_or_else(|| {
            let allowed = choices
                .iter()
                .map(|(choice, _)| *choice)
                .collect::<Vec<_>>();
            self.fault(
                column,
                format!("`{word}` is none of {}", allowed.join(", ")),
            )
        })
    }

    /// `yes` or `no`.
    pub(crate) fn flag(&self, column: &str) -> Result<bool, LibraryError> {
        self.choice(column, &[("yes", true), ("no", false)])
    }

    /// A source: a key that the heading declares, `from memory` or `common practice`.
    pub(crate) fn source(&self, column: &str) -> Result<String, LibraryError> {
        let cell = self.text(column)?;
        if let Some(source) = self.table.sources.get(cell) {
            return Ok(source.clone());
        }
        if matches!(cell, "from memory" | "common practice") {
            return Ok(cell.to_owned());
        }
        Err(self.fault(
            column,
            format!("source `{cell}` is not declared in the heading"),
        ))
    }

    /// The number in `column` with σ and source from the columns named after it.
    pub(crate) fn value(&self, column: &str, least: f64, most: f64) -> Result<Value, LibraryError> {
        Ok(Value {
            value: self.number(column, least, most)?,
            sigma: self.number(&format!("{column}_sigma"), 0.0, 10.0)?,
            source: self.source(&format!("{column}_source"))?,
        })
    }

    /// A CAS registry number with a correct check digit.
    pub(crate) fn cas(&self, column: &str) -> Result<String, LibraryError> {
        let cell = self.text(column)?;
        if !cas_is_valid(cell) {
            return Err(self.fault(column, format!("`{cell}` is not a CAS number")));
        }
        Ok(cell.to_owned())
    }

    /// The hazard statements in `h_codes`, `h_source` and `h_date`.
    pub(crate) fn hazards(&self) -> Result<Hazards, LibraryError> {
        let h_codes = self.list("h_codes");
        if let Some(code) = h_codes.iter().find(|code| !h_code_is_valid(code)) {
            return Err(self.fault("h_codes", format!("`{code}` is not an H-code")));
        }
        let source = match self.text("h_source")? {
            "unknown" if h_codes.is_empty() => "unknown".to_owned(),
            _ => self.source("h_source")?,
        };
        let date = self.optional("h_date").unwrap_or_default().to_owned();
        if date.is_empty() != (source == "unknown") {
            return Err(self.fault("h_date", "a date goes with a source, and only with one"));
        }
        Ok(Hazards {
            h_codes,
            source,
            date,
        })
    }
}

/// Whether the text has the form of a CAS number and its check digit is right.
///
/// The check digit is the sum of the other digits, each times its place from the
/// right, modulo 10.
fn cas_is_valid(cas: &str) -> bool {
    let parts: Vec<&str> = cas.split('-').collect();
    let [head, middle, check] = parts[..] else {
        return false;
    };
    let lengths_fit = (2..=7).contains(&head.len()) && middle.len() == 2 && check.len() == 1;
    if !lengths_fit || !parts.concat().bytes().all(|b| b.is_ascii_digit()) {
        return false;
    }
    let digits = head
        .bytes()
        .chain(middle.bytes())
        .rev()
        .map(|b| u32::from(b - b'0'));
    let sum: u32 = (1..).zip(digits).map(|(place, digit)| place * digit).sum();
    sum % 10 == u32::from(check.as_bytes()[0] - b'0')
}

/// Whether the text is `H`, three digits that begin with 2, 3 or 4, and perhaps letters.
fn h_code_is_valid(code: &str) -> bool {
    let Some((digits, letters)) = code.strip_prefix('H').and_then(|c| c.split_at_checked(3)) else {
        return false;
    };
    digits.starts_with(['2', '3', '4'])
        && digits.bytes().all(|b| b.is_ascii_digit())
        && letters
            .bytes()
            .all(|b| matches!(b, b'D' | b'F' | b'd' | b'f' | b'i'))
}

#[cfg(test)]
mod tests {
    use super::*;

    const COLUMNS: [&str; 4] = ["name", "cas", "x", "x_source"];

    /// Reads a table with a heading line and one row; gives what the reader says of its cells.
    fn fault(text: &'static str) -> String {
        let table = TableText {
            file: "t.tsv",
            text,
        };
        let read = Table::read(table, &COLUMNS).and_then(|table| {
            let row = table.rows().next().expect("the table has a row");
            row.cas("cas")?;
            row.number("x", 0.0, 1.0)?;
            row.source("x_source")
        });
        read.map_or_else(|fault| fault.to_string(), |source| format!("ok, {source}"))
    }

    #[test]
    fn a_fault_names_the_table_the_line_the_column_and_the_value() {
        let check = |text, expected| assert_eq!(fault(text), expected);
        check(
            "# source k: A paper\nname\tcas\tx\tx_source\nTHF\t109-99-9\t0.5\tk\n",
            "ok, A paper",
        );
        check(
            "#\nname\tcas\tx\tx_source\nTHF\t109-99-8\t0.5\tk\n",
            "t.tsv, row 3, column `cas`: `109-99-8` is not a CAS number",
        );
        check(
            "#\nname\tcas\tx\tx_source\nTHF\t109-99-9\t1.5\tk\n",
            "t.tsv, row 3, column `x`: 1.5 is not within 0 to 1",
        );
        check(
            "name\tcas\tx\tx_source\nTHF\t109-99-9\t\tk\n",
            "t.tsv, row 2, column `x`: the cell is empty",
        );
        check(
            "name\tcas\tx\tx_source\nTHF\t109-99-9\tNaN\tk\n",
            "t.tsv, row 2, column `x`: NaN is not within 0 to 1",
        );
        check(
            "name\tcas\tx\tx_source\nTHF\t109-99-9\t1\tk\n",
            "t.tsv, row 2, column `x_source`: source `k` is not declared in the heading",
        );
        check(
            "name\tcas\ty\tx_source\nTHF\t109-99-9\t1\tk\n",
            "t.tsv, row 0, column ``: columns are `name, cas, y, x_source`, \
             expected `name, cas, x, x_source`",
        );
    }

    #[test]
    fn h_codes_are_told_from_other_text() {
        for code in ["H225", "H360FD", "H361d", "H350i"] {
            assert!(h_code_is_valid(code), "{code}");
        }
        for text in ["P210", "H22", "H525", "H2255", "H225x", "225", "", "Hé25"] {
            assert!(!h_code_is_valid(text), "{text}");
        }
    }
}
