//! Rows of a `.smi` file: a SMILES and, after blanks or a tab, a name where there is one.

use crate::faults::Faults;
use crate::format::{MAX_ROWS, too_many_rows};
use crate::heading::Heading;
use crate::rows::{Row, start_of};
use crate::{FaultCode, Place};

/// Reads all lines; empty ones and those that begin with `#` are none.
pub(crate) fn rows(file: &str, bytes: &[u8], heading: &Heading, faults: &mut Faults) -> Vec<Row> {
    let mut rows = Vec::new();
    for (line, bytes) in (1..).zip(bytes.split(|byte| *byte == b'\n')) {
        let place = Place {
            file: file.to_owned(),
            line,
            field: "row".to_owned(),
        };
        let Ok(text) = std::str::from_utf8(bytes) else {
            let shown = start_of(bytes);
            let remedy = "save the file as UTF-8";
            faults.note(
                FaultCode::FileSyntax,
                place,
                &shown,
                "the text is not UTF-8",
                remedy,
            );
            continue;
        };
        let text = text.trim();
        if text.is_empty() || text.starts_with('#') {
            continue;
        }
        if rows.len() >= MAX_ROWS {
            too_many_rows(file, line, faults);
            break;
        }
        let (smiles, name) = text.split_once(char::is_whitespace).unwrap_or((text, ""));
        let name = name.trim();
        if name.contains('\t') {
            let reason = "the line has more than a SMILES and a name";
            let remedy = "leave the rest out, or write a CSV file with a line of column names";
            faults.note(FaultCode::FileSyntax, place, text, reason, remedy);
            continue;
        }
        rows.push(Row {
            line,
            values: heading.values(|column| match column {
                "name" => name.to_owned(),
                "smiles" => smiles.to_owned(),
                _ => String::new(),
            }),
        });
    }
    rows
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::heading::Column;

    #[test]
    fn names_may_have_blanks_or_be_left_out() {
        let heading = Heading::either(vec![Column::optional("name"), Column::optional("smiles")]);
        let text = b"# shelf\r\nCC(C)=O\tacetone\r\n\nCCO  ethyl alcohol \nC#N\nCO\ta\tb\nC\xff\n";
        let mut faults = Faults::default();
        let rows = rows("s.smi", text, &heading, &mut faults);
        let read: Vec<(u32, &str, &str)> = rows
            .iter()
            .map(|row| (row.line, row.values[0].as_str(), row.values[1].as_str()))
            .collect();
        assert_eq!(
            read,
            [
                (2, "acetone", "CC(C)=O"),
                (4, "ethyl alcohol", "CCO"),
                (5, "", "C#N")
            ]
        );
        let lines: Vec<u32> = faults
            .in_order("")
            .iter()
            .map(|fault| fault.place.line)
            .collect();
        assert_eq!(lines, [6, 7]);
    }
}
