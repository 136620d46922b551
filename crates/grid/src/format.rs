//! Forms of the files that a campaign names, told apart by the ending of their names.

use crate::faults::Faults;
use crate::heading::Heading;
use crate::rows::Row;
use crate::{FaultCode, Place, records, rows, smiles_lines};

/// Largest file that is read, bytes.
pub const MAX_FILE_BYTES: usize = 64 << 20;

/// Most rows of a file.
pub(crate) const MAX_ROWS: usize = 100_000;

/// Rows of a file, whatever its form; what is wrong with the file is noted.
pub(crate) fn rows_of(
    file: &str,
    bytes: &[u8],
    heading: &Heading,
    faults: &mut Faults,
    notes: &mut Vec<String>,
) -> Vec<Row> {
    if bytes.len() > MAX_FILE_BYTES {
        let reason = format!("the file has {} bytes", bytes.len());
        let remedy = format!("give at most {MAX_FILE_BYTES} bytes; split the file");
        faults.note(FaultCode::FileSyntax, whole(file), "", reason, remedy);
        return Vec::new();
    }
    let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
    // files of structures say nothing of a yield
    let holds_structures = heading.names().any(|column| column == "smiles");
    match ending(file).as_str() {
        "" | "csv" => rows::rows(file, bytes, b',', heading, faults),
        "tsv" | "tab" => rows::rows(file, bytes, b'\t', heading, faults),
        "smi" | "smiles" if holds_structures => smiles_lines::rows(file, bytes, heading, faults),
        "sdf" | "sd" | "mol" if holds_structures => {
            records::rows(file, bytes, heading, faults, notes)
        }
        other => {
            let reason = format!("files that end in `.{other}` are not read here");
            let remedy = match holds_structures {
                true => "save it as `.csv`, `.tsv`, `.smi` or `.sdf`",
                false => "save it as `.csv` or `.tsv`",
            };
            faults.note(FaultCode::FileSyntax, whole(file), file, reason, remedy);
            Vec::new()
        }
    }
}

/// The place of a file as a whole.
fn whole(file: &str) -> Place {
    Place {
        file: file.to_owned(),
        line: 0,
        field: "file".to_owned(),
    }
}

/// What follows the last dot of the name, in small letters.
fn ending(file: &str) -> String {
    let name = file.rsplit(['/', '\\']).next().unwrap_or(file);
    let ending = name.rsplit_once('.').map_or("", |(_, ending)| ending);
    ending.to_lowercase()
}

/// Notes that a file has more rows than are read.
pub(crate) fn too_many_rows(file: &str, line: u32, faults: &mut Faults) {
    let place = Place {
        file: file.to_owned(),
        line,
        field: "row".to_owned(),
    };
    let reason = format!("the file has more than {MAX_ROWS} rows");
    faults.note(FaultCode::FileSyntax, place, "", reason, "split the file");
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn endings_are_told_apart_whatever_their_case() {
        for (file, expected) in [
            ("a.CSV", "csv"),
            ("shelf.v2.Sdf", "sdf"),
            ("dir.d/shelf", ""),
            ("shelf", ""),
        ] {
            assert_eq!(ending(file), expected, "{file}");
        }
    }
}
