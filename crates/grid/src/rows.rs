//! Rows of a CSV file (RFC 4180, UTF-8) that a campaign names.

use std::io::{self, Read};

use crate::faults::Faults;
use crate::format::{MAX_ROWS, too_many_rows};
use crate::heading::{Heading, positions};
use crate::keys::quoted;
use crate::{FaultCode, Place};

/// A row: values in the order of the columns asked for, empty where the file has no such column.
pub(crate) struct Row {
    pub(crate) line: u32,
    pub(crate) values: Vec<String>,
}

/// Reads all rows; rows with a fault are noted and left out.
pub(crate) fn rows(
    file: &str,
    bytes: &[u8],
    delimiter: u8,
    heading: &Heading,
    faults: &mut Faults,
) -> Vec<Row> {
    let mut records = Records::of(bytes, delimiter).peekable();
    let Some((line, titles)) = records.next() else {
        let place = Place {
            file: file.to_owned(),
            line: 1,
            field: "heading".to_owned(),
        };
        let names: Vec<&str> = heading.names().collect();
        let remedy = format!("begin with a line of column names: {}", quoted(&names));
        faults.note(
            FaultCode::ColumnMissing,
            place,
            "",
            "the file is empty",
            remedy,
        );
        return Vec::new();
    };
    let Some(titles) = titles else {
        note_too_long(file, line, bytes, faults);
        return Vec::new();
    };
    let Some(positions) = positions(file, line, &titles, delimiter, heading, faults) else {
        return Vec::new();
    };
    let is_unclosed = bytes.iter().filter(|byte| **byte == b'"').count() % 2 == 1;
    let mut rows = Vec::new();
    while let Some((line, record)) = records.next() {
        if is_unclosed && records.peek().is_none() {
            note_unclosed(file, line, record.as_ref(), faults);
            break;
        }
        let Some(record) = record else {
            note_too_long(file, line, &[], faults);
            break;
        };
        if rows.len() >= MAX_ROWS {
            too_many_rows(file, line, faults);
            break;
        }
        if faults.is_full() {
            break;
        }
        let place = |field: &str| Place {
            file: file.to_owned(),
            line,
            field: field.to_owned(),
        };
        if record.len() != titles.len() {
            let reason = format!(
                "the row has {} fields and the heading {}",
                record.len(),
                titles.len()
            );
            let remedy = "give each column a field, empty where nothing is known, and put a field with a comma in quotation marks";
            let shown = as_written(&record, delimiter);
            faults.note(FaultCode::FileSyntax, place("row"), &shown, reason, remedy);
            continue;
        }
        let mut values = Vec::with_capacity(positions.len());
        for (column, position) in heading.names().zip(&positions) {
            match position
                .and_then(|at| record.get(at))
                .map(std::str::from_utf8)
            {
                None => values.push(String::new()),
                Some(Ok(text)) => values.push(text.trim().to_owned()),
                Some(Err(_)) => {
                    let shown = start_of(&record[position.unwrap_or(0)]);
                    let reason = "the text is not UTF-8";
                    let remedy = "save the file as UTF-8";
                    faults.note(FaultCode::FileSyntax, place(column), &shown, reason, remedy);
                }
            }
        }
        if values.len() == positions.len() {
            rows.push(Row { line, values });
        }
    }
    rows
}

/// Longest row that is read, bytes. It bounds what the reader keeps of a file without line ends.
const MOST_ROW_BYTES: usize = 64 << 10;

/// The records with the lines on which they begin; empty lines are none. The last may be too long.
struct Records<'b> {
    bytes: &'b [u8],
    reader: csv::Reader<Metered<'b>>,
    ended: bool,
}

/// Bytes in memory of which so many may still be read.
struct Metered<'b> {
    rest: &'b [u8],
    left: usize,
}

impl Read for Metered<'_> {
    fn read(&mut self, buffer: &mut [u8]) -> io::Result<usize> {
        if self.left == 0 && !self.rest.is_empty() {
            return Err(io::ErrorKind::FileTooLarge.into());
        }
        let length = buffer.len().min(self.left).min(self.rest.len());
        let (read, rest) = self.rest.split_at(length);
        buffer[..length].copy_from_slice(read);
        self.rest = rest;
        self.left -= length;
        Ok(length)
    }
}

impl<'b> Records<'b> {
    fn of(bytes: &'b [u8], delimiter: u8) -> Records<'b> {
        let reader = csv::ReaderBuilder::new()
            .has_headers(false)
            .flexible(true)
            .delimiter(delimiter)
            .from_reader(Metered {
                rest: bytes,
                left: 0,
            });
        Records {
            bytes,
            reader,
            ended: false,
        }
    }
}

impl Iterator for Records<'_> {
    type Item = (u32, Option<csv::ByteRecord>);

    fn next(&mut self) -> Option<(u32, Option<csv::ByteRecord>)> {
        if self.ended {
            return None;
        }
        // the reader's position is that before the empty lines it skips
        let (byte, line) = (
            self.reader.position().byte() as usize,
            self.reader.position().line(),
        );
        let rest = &self.bytes[byte.min(self.bytes.len())..];
        let is_end = |byte: &u8| matches!(byte, b'\r' | b'\n');
        let skipped = rest.iter().take_while(|byte| is_end(byte)).count();
        let line_ends = rest[..skipped].iter().filter(|byte| **byte == b'\n');
        let line = line as u32 + line_ends.count() as u32;
        self.reader.get_mut().left = skipped + MOST_ROW_BYTES;
        let mut record = csv::ByteRecord::new();
        // a flexible reader over bytes in memory fails where the meter ends only
        match self.reader.read_byte_record(&mut record) {
            Ok(true) => Some((line, Some(record))),
            Ok(false) => None,
            Err(_) => {
                self.ended = true;
                Some((line, None))
            }
        }
    }
}

/// Notes a row that is too long to be read; what follows it is not looked at.
fn note_too_long(file: &str, line: u32, bytes: &[u8], faults: &mut Faults) {
    let place = Place {
        file: file.to_owned(),
        line,
        field: "row".to_owned(),
    };
    let shown = start_of(bytes);
    let reason = format!("the row has more than {MOST_ROW_BYTES} bytes");
    let remedy = "write a row a line, and close every quotation mark";
    faults.note(FaultCode::FileSyntax, place, &shown, reason, remedy);
}

/// A row as it was written, for a fault: its beginning, without quotation marks.
pub(crate) fn as_written(record: &csv::ByteRecord, delimiter: u8) -> String {
    let fields: Vec<&[u8]> = record.iter().take(20).collect();
    start_of(&fields.join(&delimiter))
}

/// The first characters of a text, for a fault.
pub(crate) fn start_of(bytes: &[u8]) -> String {
    String::from_utf8_lossy(&bytes[..bytes.len().min(400)]).into_owned()
}

/// Notes a quotation mark without its fellow; the reader takes all that follows as one field.
fn note_unclosed(file: &str, line: u32, record: Option<&csv::ByteRecord>, faults: &mut Faults) {
    let place = Place {
        file: file.to_owned(),
        line,
        field: "row".to_owned(),
    };
    let shown = record.map_or_else(String::new, |record| start_of(record.as_slice()));
    let reason = "a quotation mark is not closed from here to the end of the file";
    let remedy = "close it, and write a quotation mark inside a quoted field twice";
    faults.note(FaultCode::FileSyntax, place, &shown, reason, remedy);
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::heading::Column;

    /// Rows, and line and code of each fault.
    fn read(text: &[u8]) -> (Vec<Row>, Vec<(u32, &'static str)>) {
        let mut faults = Faults::default();
        let heading = Heading::new(vec![Column::required("name"), Column::required("smiles")]);
        let rows = crate::format::rows_of("f.csv", text, &heading, &mut faults, &mut Vec::new());
        let faults = faults.in_order("").into_iter();
        (
            rows,
            faults.map(|fault| (fault.place.line, fault.code)).collect(),
        )
    }

    #[test]
    fn quoted_fields_marks_and_empty_lines_are_read_as_the_standard_says() {
        let text = "\u{feff}Name,SMILES\r\n\r\n\"a, \"\"b\"\"\nc\",CC\r\n\r\n\r\nd,CO\r\n";
        let (rows, faults) = read(text.as_bytes());
        assert_eq!(faults, []);
        assert_eq!((rows[0].line, rows[1].line), (3, 7));
        assert_eq!(rows[0].values, ["a, \"b\"\nc", "CC"]);
        assert_eq!(rows[1].values, ["d", "CO"]);
    }

    #[test]
    fn columns_may_stand_in_any_order() {
        let (rows, faults) = read(b"smiles,name\nCC,a\n");
        assert_eq!(faults, []);
        assert_eq!(rows[0].values, ["a", "CC"]);
    }

    #[test]
    fn faults_of_headings_and_rows_have_lines() {
        let check = |text: &[u8], expected: &[(u32, &'static str)]| {
            let (_, faults) = read(text);
            assert_eq!(faults, expected, "{}", String::from_utf8_lossy(text));
        };
        check(b"", &[(1, "COLUMN_MISSING")]);
        check(b"name\n", &[(1, "COLUMN_MISSING")]);
        check(b"name,smiles,mass\n", &[(1, "COLUMN_UNKNOWN")]);
        check(b"name,smiles,name\n", &[(1, "FILE_SYNTAX")]);
        check(b"name;smiles\n", &[(1, "FILE_SYNTAX")]);
        check(b"name\tsmiles\n", &[(1, "FILE_SYNTAX")]);
        check(
            b"name,smiles\na\nb,CC,d\n",
            &[(2, "FILE_SYNTAX"), (3, "FILE_SYNTAX")],
        );
        check(b"name,smiles\na,CC\nb\xff,CC\n", &[(3, "FILE_SYNTAX")]);
        check(b"name,smiles\na,CC\n\"b,CC\nc,CC\n", &[(3, "FILE_SYNTAX")]);
    }
}
