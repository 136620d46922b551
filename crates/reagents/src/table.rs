//! One tab-separated table: heading lines, a row of columns, rows.
//!
//! Heading lines begin with `#`. A line `# source KEY: TEXT` declares a source that
//! cells may name by its key, so that no value stands without one.

use std::cell::RefCell;
use std::collections::HashMap;

use crate::LibraryError;
use crate::row::Row;

/// Longest table read, bytes.
const MAX_BYTES: usize = 1 << 20;

/// Most rows read.
const MAX_ROWS: usize = 1_000;

/// Most faults listed of one table.
pub(crate) const MOST_FAULTS: usize = 1_000;

/// A table as text, with the name of its file.
#[derive(Clone, Copy, Debug)]
pub(crate) struct TableText<'a> {
    /// File name.
    pub(crate) file: &'a str,
    /// Contents of the file.
    pub(crate) text: &'a str,
    /// Whether it is a laboratory's, not the program's.
    pub(crate) is_own: bool,
}

impl<'a> TableText<'a> {
    /// A table of the program.
    pub(crate) const fn builtin(file: &'a str, text: &'a str) -> TableText<'a> {
        TableText {
            file,
            text,
            is_own: false,
        }
    }

    /// A table of a laboratory.
    pub(crate) const fn own(file: &'a str, text: &'a str) -> TableText<'a> {
        TableText {
            file,
            text,
            is_own: true,
        }
    }

    /// A fault of the whole table.
    pub(crate) fn fault(&self, reason: impl Into<String>) -> LibraryError {
        LibraryError {
            table: self.file.to_owned(),
            row: 0,
            column: String::new(),
            value: String::new(),
            reason: reason.into(),
        }
    }
}

/// A record with the line of its row.
#[derive(Clone, Debug)]
pub(crate) struct Lined<T> {
    /// Line of the file, from 1.
    pub(crate) line: usize,
    pub(crate) record: T,
}

/// A table cut into cells.
#[derive(Debug)]
pub(crate) struct Table {
    pub(crate) file: String,
    pub(crate) is_own: bool,
    pub(crate) columns: HashMap<String, usize>,
    pub(crate) sources: HashMap<String, String>,
    pub(crate) records: Vec<csv::StringRecord>,
    pub(crate) faults: RefCell<Vec<LibraryError>>,
}

impl Table {
    /// Cuts the text into cells; the columns must be those `expected`, in any order.
    pub(crate) fn cut(table: TableText<'_>, expected: &[&str]) -> Result<Table, LibraryError> {
        if table.text.len() > MAX_BYTES {
            return Err(table.fault(format!("the table is longer than {} MiB", MAX_BYTES >> 20)));
        }
        let text = table.text.trim_start_matches('\u{feff}');
        let mut reader = csv::ReaderBuilder::new()
            .delimiter(b'\t')
            .comment(Some(b'#'))
            .quoting(false)
            .flexible(true)
            .from_reader(text.as_bytes());
        let heading = reader.headers().map_err(|e| table.fault(e.to_string()))?;
        let columns = columns(table, heading, expected)?;
        let mut cut = Table {
            file: table.file.to_owned(),
            is_own: table.is_own,
            columns,
            sources: declared_sources(text),
            records: Vec::new(),
            faults: RefCell::default(),
        };
        for record in reader.records() {
            let record = record.map_err(|e| table.fault(e.to_string()))?;
            if cut.records.len() == MAX_ROWS {
                return Err(table.fault(format!("the table has more than {MAX_ROWS} rows")));
            }
            cut.take(record);
        }
        Ok(cut)
    }

    /// What `read` makes of each row, or all faults of all rows.
    ///
    /// `read` gives none only where it has reported a fault.
    pub(crate) fn read<T>(
        &self,
        read: impl Fn(Row<'_>) -> Option<T>,
    ) -> Result<Vec<Lined<T>>, Vec<LibraryError>> {
        let lined = |row: Row<'_>| {
            Some(Lined {
                line: row.line(),
                record: read(row)?,
            })
        };
        let records = self.rows().filter_map(lined).collect();
        let faults = self.faults.take();
        if faults.is_empty() {
            Ok(records)
        } else {
            Err(faults)
        }
    }

    /// The rows, in the order of the file.
    pub(crate) fn rows(&self) -> impl Iterator<Item = Row<'_>> {
        self.records.iter().map(|record| Row::new(self, record))
    }

    /// Keeps a row that is as long as the heading.
    fn take(&mut self, record: csv::StringRecord) {
        let (found, wanted) = (record.len(), self.columns.len());
        if found != wanted {
            let reason = format!(
                "the row has {found} cells, the heading {wanted}: one tab between two cells"
            );
            Row::new(self, &record).fault("", reason);
            return;
        }
        if record.iter().any(|cell| cell.contains(char::is_control)) {
            Row::new(self, &record).fault("", "the row has a control character");
            return;
        }
        self.records.push(record);
    }
}

/// Where each column is; a column that is missing, unknown or there twice is a fault.
fn columns(
    table: TableText<'_>,
    heading: &csv::StringRecord,
    expected: &[&str],
) -> Result<HashMap<String, usize>, LibraryError> {
    let mut columns = HashMap::new();
    let mut wrong = Vec::new();
    for (index, column) in heading.iter().map(str::trim).enumerate() {
        if !expected.contains(&column) {
            wrong.push(format!("`{column}` is no column of this table"));
        } else if columns.insert(column.to_owned(), index).is_some() {
            wrong.push(format!("`{column}` is there twice"));
        }
    }
    let missing = expected
        .iter()
        .filter(|column| !columns.contains_key(**column));
    wrong.extend(missing.map(|column| format!("`{column}` is missing")));
    if wrong.is_empty() {
        Ok(columns)
    } else {
        Err(table.fault(format!("columns: {}", wrong.join(", "))))
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
