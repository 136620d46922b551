//! Rows of a CSV file (RFC 4180, UTF-8) that a campaign names.

use crate::fault::Faults;
use crate::keys::{nearest, quoted};
use crate::{FaultCode, Place};

/// A column that a file may have.
pub(crate) struct Column {
    pub(crate) name: &'static str,
    pub(crate) required: bool,
}

/// A row: values in the order of the columns asked for, empty where the file has no such column.
pub(crate) struct Row {
    pub(crate) line: u32,
    pub(crate) values: Vec<String>,
}

/// Reads all rows; rows with a fault are noted and left out.
pub(crate) fn rows(file: &str, bytes: &[u8], columns: &[Column], faults: &mut Faults) -> Vec<Row> {
    let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
    let mut records = records(bytes).into_iter();
    let Some((line, heading)) = records.next() else {
        let place = Place {
            file: file.to_owned(),
            line: 1,
            field: "heading".to_owned(),
        };
        let names: Vec<&str> = columns.iter().map(|column| column.name).collect();
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
    let Some(positions) = positions(file, line, &heading, columns, faults) else {
        return Vec::new();
    };
    if bytes.iter().filter(|byte| **byte == b'"').count() % 2 == 1 {
        unclosed(file, &records.next_back(), faults);
    }
    let mut rows = Vec::new();
    for (line, record) in records {
        let place = |field: &str| Place {
            file: file.to_owned(),
            line,
            field: field.to_owned(),
        };
        if record.len() != heading.len() {
            let reason = format!(
                "the row has {} fields and the heading {}",
                record.len(),
                heading.len()
            );
            let remedy = "give each column a field, empty where nothing is known, and put a field with a comma in quotation marks";
            let shown = String::from_utf8_lossy(record.as_slice()).into_owned();
            faults.note(FaultCode::FileSyntax, place("row"), &shown, reason, remedy);
            continue;
        }
        let mut values = Vec::with_capacity(columns.len());
        for (column, position) in columns.iter().zip(&positions) {
            match position
                .and_then(|at| record.get(at))
                .map(std::str::from_utf8)
            {
                None => values.push(String::new()),
                Some(Ok(text)) => values.push(text.trim().to_owned()),
                Some(Err(_)) => {
                    let shown =
                        String::from_utf8_lossy(&record[position.unwrap_or(0)]).into_owned();
                    let reason = "the text is not UTF-8";
                    let remedy = "save the file as UTF-8";
                    faults.note(
                        FaultCode::FileSyntax,
                        place(column.name),
                        &shown,
                        reason,
                        remedy,
                    );
                }
            }
        }
        if values.len() == columns.len() {
            rows.push(Row { line, values });
        }
    }
    rows
}

/// All records with the lines on which they begin; empty lines are none.
fn records(bytes: &[u8]) -> Vec<(u32, csv::ByteRecord)> {
    let mut reader = csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .from_reader(bytes);
    let mut records = Vec::new();
    // a flexible reader over bytes in memory has no way to fail
    for record in reader.byte_records().flatten() {
        let (byte, line) = record
            .position()
            .map_or((0, 1), |at| (at.byte(), at.line()));
        // the reader's position is that before the empty lines it skipped
        let skipped = bytes[byte as usize..]
            .iter()
            .take_while(|byte| matches!(byte, b'\r' | b'\n'));
        let line = line as u32 + skipped.filter(|byte| **byte == b'\n').count() as u32;
        records.push((line, record));
    }
    records
}

/// Where each column asked for stands; none if the heading is at fault.
fn positions(
    file: &str,
    line: u32,
    heading: &csv::ByteRecord,
    columns: &[Column],
    faults: &mut Faults,
) -> Option<Vec<Option<usize>>> {
    let mut positions = vec![None; columns.len()];
    let mut sound = true;
    let names: Vec<&str> = columns.iter().map(|column| column.name).collect();
    let written: Vec<String> = heading
        .iter()
        .map(|name| String::from_utf8_lossy(name).trim().to_owned())
        .collect();
    let mut note = |code, value: &str, reason: String, remedy: String| {
        let place = Place {
            file: file.to_owned(),
            line,
            field: value.to_owned(),
        };
        faults.note(code, place, &written.join(","), reason, remedy);
        sound = false;
    };
    for (at, name) in written.iter().enumerate() {
        match names
            .iter()
            .position(|known| known.eq_ignore_ascii_case(name))
        {
            Some(column) if positions[column].is_none() => positions[column] = Some(at),
            Some(_) => {
                let reason = format!("the column `{name}` is there twice");
                note(
                    FaultCode::FileSyntax,
                    name,
                    reason,
                    "keep one of the two".to_owned(),
                );
            }
            None => {
                let remedy = match nearest(name, names.iter().copied()) {
                    Some(near) => format!("did you mean `{near}`?"),
                    None => format!("the columns are {}, separated by commas", quoted(&names)),
                };
                note(
                    FaultCode::ColumnUnknown,
                    name,
                    format!("there is no column `{name}`"),
                    remedy,
                );
            }
        }
    }
    for (column, position) in columns.iter().zip(&positions) {
        if column.required && position.is_none() {
            let reason = format!("the column `{}` is missing", column.name);
            let remedy = format!("name it in the first line of the file: {}", quoted(&names));
            note(FaultCode::ColumnMissing, column.name, reason, remedy);
        }
    }
    sound.then_some(positions)
}

/// Notes a quotation mark without its fellow; the reader takes all that follows as one field.
fn unclosed(file: &str, last: &Option<(u32, csv::ByteRecord)>, faults: &mut Faults) {
    let Some((line, record)) = last else { return };
    let place = Place {
        file: file.to_owned(),
        line: *line,
        field: "row".to_owned(),
    };
    let shown = String::from_utf8_lossy(record.as_slice()).into_owned();
    let reason = "a quotation mark is not closed from here to the end of the file";
    let remedy = "close it, and write a quotation mark inside a quoted field twice";
    faults.note(FaultCode::FileSyntax, place, &shown, reason, remedy);
}

#[cfg(test)]
mod tests {
    use super::*;

    const COLUMNS: [Column; 2] = [
        Column {
            name: "name",
            required: true,
        },
        Column {
            name: "smiles",
            required: true,
        },
    ];

    /// Rows, and line and code of each fault.
    fn read(text: &[u8]) -> (Vec<Row>, Vec<(u32, &'static str)>) {
        let mut faults = Faults::default();
        let rows = rows("f.csv", text, &COLUMNS, &mut faults);
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
        check(
            b"name;smiles\n",
            &[
                (1, "COLUMN_UNKNOWN"),
                (1, "COLUMN_MISSING"),
                (1, "COLUMN_MISSING"),
            ],
        );
        check(
            b"name,smiles\na\nb,CC,d\n",
            &[(2, "FILE_SYNTAX"), (3, "FILE_SYNTAX")],
        );
        check(b"name,smiles\na,CC\nb\xff,CC\n", &[(3, "FILE_SYNTAX")]);
        check(b"name,smiles\na,CC\n\"b,CC\nc,CC\n", &[(3, "FILE_SYNTAX")]);
    }
}
