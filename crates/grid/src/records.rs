//! Rows of an SDF: a structure (V2000 or V3000), a title and data fields.

use std::collections::BTreeSet;

use enolattice_molecule::Molecule;
use rayon::prelude::*;

use crate::faults::Faults;
use crate::heading::Heading;
use crate::keys::quoted;
use crate::load::{MAX_ATOMS, counted};
use crate::rows::{Row, start_of};
use crate::{FaultCode, Place};

/// Longest value of a data field that is kept, bytes.
const MAX_VALUE_BYTES: usize = 4_000;
/// Most names of data fields that are remembered as left out.
const MOST_LEFT_OUT: usize = 100;
/// Names of data fields that are written out as left out.
const WRITTEN_OUT: usize = 10;

/// Records that are read side by side.
const RECORDS_AT_ONCE: usize = 1_024;

/// A record as it stands in the file.
#[derive(Default)]
struct Record {
    line: u32,
    block: Vec<u8>,
    block_ended: bool,
    /// Data fields, name and value.
    fields: Vec<(String, Vec<u8>)>,
    in_field: bool,
}

/// What a record has to say.
#[derive(Default)]
struct ReadRecord {
    row: Option<Row>,
    faults: Faults,
    left_out: BTreeSet<String>,
    /// Atoms as they count against the limit of a campaign.
    atoms: u64,
}

/// Reads all records. Data fields that are no columns are left out, and a note says which.
pub(crate) fn rows(
    file: &str,
    bytes: &[u8],
    heading: &Heading,
    faults: &mut Faults,
    notes: &mut Vec<String>,
) -> Vec<Row> {
    let mut rows = Vec::new();
    let mut left_out = BTreeSet::new();
    let mut atoms = 0;
    let mut records = records(bytes);
    loop {
        let run: Vec<Record> = records.by_ref().take(RECORDS_AT_ONCE).collect();
        if run.is_empty() {
            break;
        }
        let read: Vec<ReadRecord> = run.par_iter().map(|r| r.read(file, heading)).collect();
        for record in read {
            faults.append(record.faults);
            left_out.extend(record.left_out);
            atoms += record.atoms;
            rows.extend(record.row);
        }
        // a campaign that has more is refused when it is checked
        if faults.is_full() || atoms > MAX_ATOMS {
            return rows;
        }
        while left_out.len() > MOST_LEFT_OUT {
            left_out.pop_last();
        }
    }
    if !left_out.is_empty() {
        let names: Vec<&str> = left_out
            .iter()
            .take(WRITTEN_OUT)
            .map(String::as_str)
            .collect();
        let further = left_out.len() - names.len();
        let and = match further {
            0 => String::new(),
            further => format!(" and {further} more"),
        };
        notes.push(format!(
            "{file}: data fields that are no columns of a campaign were left out: {}{and}",
            quoted(&names)
        ));
    }
    rows
}

/// The records of a file.
fn records(bytes: &[u8]) -> impl Iterator<Item = Record> + '_ {
    let mut lines = (1u32..).zip(bytes.split(|byte| *byte == b'\n'));
    let mut first_line = 1;
    std::iter::from_fn(move || {
        let mut record = Record::starting(first_line);
        for (line, text) in lines.by_ref() {
            let text = text.strip_suffix(b"\r").unwrap_or(text);
            if text.starts_with(b"$$$$") {
                first_line = line + 1;
                return Some(record);
            }
            record.take(text);
        }
        (!record.is_blank()).then_some(record)
    })
}

impl Record {
    fn starting(line: u32) -> Record {
        Record {
            line,
            ..Record::default()
        }
    }

    /// Whether there is nothing but empty lines, as after the last `$$$$`.
    fn is_blank(&self) -> bool {
        self.fields.is_empty() && self.block.iter().all(u8::is_ascii_whitespace)
    }

    fn take(&mut self, text: &[u8]) {
        if !self.block_ended {
            // What is beyond the limit is not kept: the reader of structures refuses the block.
            if self.block.len() <= Molecule::MAX_MOLFILE_BYTES {
                self.block
                    .extend_from_slice(&text[..text.len().min(Molecule::MAX_MOLFILE_BYTES + 1)]);
                self.block.push(b'\n');
            }
            self.block_ended = text.starts_with(b"M  END");
        } else if text.starts_with(b">") {
            let shown = start_of(text);
            let name = shown
                .split_once('<')
                .and_then(|(_, rest)| rest.split_once('>'));
            let name = name.map_or("", |(name, _)| name.trim());
            self.fields.push((name.to_owned(), Vec::new()));
            self.in_field = true;
        } else if text.trim_ascii().is_empty() {
            self.in_field = false;
        } else if self.in_field
            && let Some((_, value)) = self.fields.last_mut()
            && value.len() <= MAX_VALUE_BYTES
        {
            if !value.is_empty() {
                value.push(b' ');
            }
            value.extend_from_slice(&text[..text.len().min(MAX_VALUE_BYTES + 1)]);
        }
    }

    /// The record as a row, and why it is none.
    fn read(&self, file: &str, heading: &Heading) -> ReadRecord {
        let mut read = ReadRecord::default();
        read.row = self.row(file, heading, &mut read);
        read
    }

    fn row(&self, file: &str, heading: &Heading, read: &mut ReadRecord) -> Option<Row> {
        let place = |field: &str| Place {
            file: file.to_owned(),
            line: self.line,
            field: field.to_owned(),
        };
        let title = self.block.split(|byte| *byte == b'\n').next();
        let title = String::from_utf8_lossy(title.unwrap_or_default())
            .trim()
            .to_owned();
        let block = String::from_utf8_lossy(&self.block);
        let smiles = match Molecule::smiles_of_molfile(&block) {
            Ok(smiles) => smiles,
            Err(error) => {
                let code = FaultCode::StructureInvalid;
                let (reason, remedy) = (error.reason, error.remedy);
                read.faults
                    .note(code, place("molfile"), &title, reason, remedy);
                return None;
            }
        };
        read.atoms = counted(&smiles);
        let mut sound = true;
        for (name, value) in &self.fields {
            let is_known = heading
                .names()
                .any(|known| known.eq_ignore_ascii_case(name));
            if !is_known && read.left_out.len() < MOST_LEFT_OUT {
                read.left_out.insert(name.clone());
            }
            if is_known && (value.len() > MAX_VALUE_BYTES || std::str::from_utf8(value).is_err()) {
                let shown = start_of(value);
                let reason = "the value is no text in UTF-8 of at most 4000 bytes";
                let remedy = "save the file as UTF-8 and shorten the value";
                let code = FaultCode::FileSyntax;
                read.faults.note(code, place(name), &shown, reason, remedy);
                sound = false;
            }
        }
        let value = |column: &str| {
            let of_name = |(name, _): &&(String, Vec<u8>)| name.eq_ignore_ascii_case(column);
            let field = self.fields.iter().find(of_name);
            field.map_or_else(String::new, |(_, value)| {
                String::from_utf8_lossy(value).trim().to_owned()
            })
        };
        sound.then(|| Row {
            line: self.line,
            values: heading.values(|column| match (column, value(column)) {
                ("smiles", _) => smiles.clone(),
                ("name", name) if name.is_empty() => title.clone(),
                (_, value) => value,
            }),
        })
    }
}
