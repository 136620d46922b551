//! The cells of one row as values.
//!
//! What is wrong in a cell is kept in the table and a stand-in is given, so that one look at a row
//! finds all its faults; [`Table::read`] gives no record where there is a fault.

use enolattice_molecule::Molecule;

use crate::composition;
use crate::notation::{cas_is_valid, h_code_is_valid, month_is_valid};
use crate::table::{MOST_FAULTS, Table};
use crate::{Hazards, LibraryError, Value};

/// Most of a cell that an error quotes, characters.
const QUOTED: usize = 80;

/// Longest structure of a laboratory's own reagent, bytes: reading takes time that grows with its
/// square, and a thousand rows must not take more than a second.
const LONGEST_OWN_STRUCTURE: usize = 150;

/// One row of a table.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Row<'a> {
    table: &'a Table,
    record: &'a csv::StringRecord,
}

impl<'a> Row<'a> {
    pub(crate) fn new(table: &'a Table, record: &'a csv::StringRecord) -> Row<'a> {
        Row { table, record }
    }

    /// Line of the file, from 1.
    pub(crate) fn line(&self) -> usize {
        self.record.position().map_or(0, csv::Position::line) as usize
    }

    /// Reports a fault in one of this row's cells, or in the whole row for an empty column.
    pub(crate) fn fault(&self, column: &str, reason: impl Into<String>) {
        let mut faults = self.table.faults.borrow_mut();
        if faults.len() > MOST_FAULTS {
            return;
        }
        let value = self.optional(column).unwrap_or_default();
        let fault = LibraryError {
            table: self.table.file.clone(),
            row: self.line(),
            column: column.to_owned(),
            value: value.chars().take(QUOTED).collect(),
            reason: reason.into(),
        };
        if faults.len() < MOST_FAULTS {
            faults.push(fault);
        } else {
            faults.push(LibraryError {
                column: String::new(),
                value: String::new(),
                reason: format!("more than {MOST_FAULTS} faults: from here on they are not listed"),
                ..fault
            });
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
    pub(crate) fn text(&self, column: &str) -> String {
        let cell = self.optional(column);
        if cell.is_none() {
            self.fault(column, "the cell is empty");
        }
        cell.unwrap_or_default().to_owned()
    }

    /// Text of a cell that may be empty.
    pub(crate) fn text_or_empty(&self, column: &str) -> String {
        self.optional(column).unwrap_or_default().to_owned()
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
    pub(crate) fn optional_number(&self, column: &str, least: f64, most: f64) -> Option<f64> {
        let cell = self.optional(column)?;
        Some(self.bounded(column, cell, least, most))
    }

    /// A number within bounds.
    pub(crate) fn number(&self, column: &str, least: f64, most: f64) -> f64 {
        let Some(number) = self.optional_number(column, least, most) else {
            self.fault(column, "the cell is empty");
            return least;
        };
        number
    }

    /// Reads a number out of the text of a cell.
    pub(crate) fn bounded(&self, column: &str, text: &str, least: f64, most: f64) -> f64 {
        match text.parse::<f64>() {
            Ok(number) if (least..=most).contains(&number) => return number,
            Ok(number) => self.fault(column, format!("{number} is not within {least} to {most}")),
            Err(_) => self.fault(column, format!("`{text}` is not a number")),
        }
        least
    }

    /// One of the words that the column allows.
    pub(crate) fn choice<T: Copy>(&self, column: &str, choices: &[(&str, T)]) -> T {
        self.chosen(column, &self.text_or_empty(column), choices)
    }

    /// Looks a word up among those that the column allows.
    pub(crate) fn chosen<T: Copy>(&self, column: &str, word: &str, choices: &[(&str, T)]) -> T {
        let found = choices.iter().find(|(choice, _)| *choice == word);
        found.map_or_else(
            || {
                let allowed: Vec<&str> = choices.iter().map(|(choice, _)| *choice).collect();
                self.fault(
                    column,
                    format!("`{word}` is none of {}", allowed.join(", ")),
                );
                choices[0].1
            },
            |(_, value)| *value,
        )
    }

    /// `yes` or `no`.
    pub(crate) fn flag(&self, column: &str) -> bool {
        self.choice(column, &[("yes", true), ("no", false)])
    }

    /// A source: a key that the heading declares, `from memory` or `common practice`.
    pub(crate) fn source(&self, column: &str) -> String {
        let cell = self.text(column);
        if let Some(source) = self.table.sources.get(&cell) {
            return source.clone();
        }
        if !matches!(cell.as_str(), "" | "from memory" | "common practice") {
            let reason = format!(
                "source `{cell}` is not declared in the heading: write a line `# source {cell}: …`, \
                 or `from memory`, or `common practice`"
            );
            self.fault(column, reason);
        }
        cell
    }

    /// The number in `column` with σ and source from the columns named after it.
    pub(crate) fn value(&self, column: &str, least: f64, most: f64) -> Value {
        Value {
            value: self.number(column, least, most),
            sigma: self.number(&format!("{column}_sigma"), 0.0, 10.0),
            source: self.source(&format!("{column}_source")),
        }
    }

    /// A CAS registry number with a correct check digit, or nothing.
    pub(crate) fn cas(&self, column: &str) -> String {
        let cell = self.text_or_empty(column);
        if !cell.is_empty() && !cas_is_valid(&cell) {
            self.fault(column, "not a CAS number, or its check digit is wrong");
        }
        cell
    }

    /// A month, `YYYY-MM`.
    pub(crate) fn month(&self, column: &str) -> String {
        let cell = self.text(column);
        if !cell.is_empty() && !month_is_valid(&cell) {
            self.fault(column, "not a month: write `2026-12`");
        }
        cell
    }

    /// A structure of parts such as `[K+].CC(C)(C)[O-]`, as text.
    pub(crate) fn salt(&self, column: &str) -> String {
        let smiles = self.structure(column);
        // The program's own tables are checked by tests, which saves the time here.
        if self.table.is_own
            && !smiles.is_empty()
            && let Err(reason) = composition::of_structure(&smiles)
        {
            self.fault(column, reason);
        }
        smiles
    }

    /// Text of a structure, or an empty one after a fault.
    fn structure(&self, column: &str) -> String {
        let smiles = self.text(column);
        if self.table.is_own && smiles.len() > LONGEST_OWN_STRUCTURE {
            let reason = format!("a structure has at most {LONGEST_OWN_STRUCTURE} characters here");
            self.fault(column, reason);
            return String::new();
        }
        smiles
    }

    /// The formula, which is that of the structure in `smiles`.
    pub(crate) fn formula(&self) -> String {
        let formula = self.text("formula");
        if self.table.is_own
            && !formula.is_empty()
            && let Some(smiles) = self.optional("smiles")
            && smiles.len() <= LONGEST_OWN_STRUCTURE
            && let Ok(drawn) = composition::of_structure(smiles)
            && composition::of_formula(&formula).as_ref() != Some(&drawn)
        {
            let drawn = composition::hill(&drawn);
            self.fault("formula", format!("the structure in `smiles` is {drawn}"));
        }
        formula
    }

    /// A structure; of a salt the molecule that reacts.
    pub(crate) fn molecule(&self, column: &str) -> Option<Molecule> {
        let smiles = self.structure(column);
        if smiles.is_empty() {
            return None;
        }
        let read = Molecule::parse_salt(&smiles).map(|salt| salt.molecule);
        read.map_err(|error| self.fault(column, error.to_string()))
            .ok()
    }

    /// Refuses names and synonyms that hold `mark`.
    pub(crate) fn names_without(&self, mark: char) {
        for column in ["name", "synonyms"] {
            if self
                .optional(column)
                .is_some_and(|cell| cell.contains(mark))
            {
                self.fault(
                    column,
                    format!("`{mark}` stands between the parts of a mixture, not within a name"),
                );
            }
        }
    }

    /// The hazard statements in `h_codes`, `h_source` and `h_date`.
    pub(crate) fn hazards(&self) -> Hazards {
        let h_codes = self.list("h_codes");
        for code in h_codes.iter().filter(|code| !h_code_is_valid(code)) {
            self.fault("h_codes", format!("`{code}` is not an H-code"));
        }
        let unknown = self.optional("h_source") == Some("unknown");
        if unknown && !h_codes.is_empty() {
            self.fault("h_source", "codes have a source, so they are not `unknown`");
        }
        if unknown && self.optional("h_date").is_some() {
            self.fault("h_date", "a date goes with a source, and only with one");
        }
        Hazards {
            h_codes,
            source: if unknown {
                "unknown".to_owned()
            } else {
                self.source("h_source")
            },
            date: if unknown {
                String::new()
            } else {
                self.month("h_date")
            },
        }
    }
}

#[cfg(test)]
mod tests {
    use crate::table::{Table, TableText};

    const COLUMNS: [&str; 4] = ["name", "cas", "x", "x_source"];

    /// Reads a table; gives what the reader says of its cells.
    fn faults(text: &str) -> Vec<String> {
        let table = TableText::own("t.tsv", text);
        let read = Table::cut(table, &COLUMNS)
            .map_err(|fault| vec![fault])
            .and_then(|table| {
                table.read(|row| {
                    row.cas("cas");
                    row.number("x", 0.0, 1.0);
                    Some(row.source("x_source"))
                })
            });
        match read {
            Ok(rows) => rows
                .into_iter()
                .map(|row| format!("ok, {}", row.record))
                .collect(),
            Err(faults) => faults.iter().map(ToString::to_string).collect(),
        }
    }

    #[test]
    fn a_fault_names_the_table_the_line_the_column_and_the_reason() {
        let check = |text, expected| assert_eq!(faults(text), [expected]);
        check(
            "# source k: A paper\nname\tcas\tx\tx_source\nTHF\t109-99-9\t0.5\tk\n",
            "ok, A paper",
        );
        check(
            "#\nname\tx\tcas\tx_source\nTHF\t0.5\t\tfrom memory\n",
            "ok, from memory",
        );
        check(
            "#\nname\tcas\tx\tx_source\nTHF\t109-99-8\t0.5\tfrom memory\n",
            "t.tsv, line 3, column `cas`, `109-99-8`: not a CAS number, or its check digit is wrong",
        );
        check(
            "name\tcas\tx\tx_source\nTHF\t109-99-9\t\tfrom memory\n",
            "t.tsv, line 2, column `x`: the cell is empty",
        );
        check(
            "name\tcas\tx\tx_source\nTHF\t109-99-9\tNaN\tfrom memory\n",
            "t.tsv, line 2, column `x`, `NaN`: NaN is not within 0 to 1",
        );
        check(
            "name\tcas\tx\tx_source\nTHF\t109-99-9\t1\n",
            "t.tsv, line 2: the row has 3 cells, the heading 4: one tab between two cells",
        );
        check(
            "name\tcas\ty\tx_source\tcas\nTHF\t109-99-9\t1\tk\n",
            "t.tsv: columns: `y` is no column of this table, `cas` is there twice, `x` is missing",
        );
    }

    #[test]
    fn all_faults_of_all_rows_come_at_once() {
        let text = "name\tcas\tx\tx_source\nA\t109-99-8\t1.5\tk\nB\t\tmuch\tfrom memory\n";
        assert_eq!(
            faults(text),
            [
                "t.tsv, line 2, column `cas`, `109-99-8`: not a CAS number, or its check digit is wrong",
                "t.tsv, line 2, column `x`, `1.5`: 1.5 is not within 0 to 1",
                "t.tsv, line 2, column `x_source`, `k`: source `k` is not declared in the heading: \
                 write a line `# source k: …`, or `from memory`, or `common practice`",
                "t.tsv, line 3, column `x`, `much`: `much` is not a number",
            ]
        );
    }

    #[test]
    fn hostile_tables_are_refused_not_suffered() {
        for text in [
            "",
            "\u{0}",
            "name",
            "\t\t\t",
            "#\n#",
            "name\tcas\tx\tx_source",
        ] {
            faults(text);
        }
        let long = "x".repeat(2 << 20);
        assert_eq!(faults(&long), ["t.tsv: the table is longer than 1 MiB"]);
        let wrong = format!("name\tcas\tx\tx_source\n{}", "a\tb\t2\tk\n".repeat(1_000));
        assert_eq!(faults(&wrong).len(), 1_001);
        let many = format!("name\tcas\tx\tx_source\n{}", "a\t\t1\tk\n".repeat(1_001));
        assert_eq!(faults(&many), ["t.tsv: the table has more than 1000 rows"]);
    }
}
