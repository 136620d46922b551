//! A laboratory's own tables, laid over the library.

use std::collections::HashSet;

use crate::conflicts::{Cells, replaced_values};
use crate::library::{Library, builtin_table};
use crate::shelf::{Laid, Shelf};
use crate::table::{MOST_FAULTS, TableText};
use crate::{
    Conflict, LibraryError, ReagentKind, additives, bases, electrophiles, measured, solvents,
};

/// A table of a laboratory's own reagents or measured acidities, of the same form as those of the library.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct OwnTable {
    /// Name for messages, e.g. of the file.
    pub name: String,
    /// Its text; a line `# table: bases` (or solvents, electrophiles, additives, acidities) says what it is.
    pub text: String,
}

const KINDS: [ReagentKind; 4] = [
    ReagentKind::Base,
    ReagentKind::Solvent,
    ReagentKind::Electrophile,
    ReagentKind::Additive,
];

impl Library {
    /// The library with a laboratory's own tables laid over it, the later over the earlier.
    ///
    /// A row whose name is known (as a name or a synonym) replaces that row and keeps its name; any
    /// other is added. A measured acidity takes the place of those of the same structure and element.
    /// What differs from the library is reported as [`Conflict`].
    ///
    /// # Errors
    /// All faults of all rows of all tables, with line, column, value and reason.
    pub fn with_own(
        &self,
        tables: &[OwnTable],
    ) -> Result<(Library, Vec<Conflict>), Vec<LibraryError>> {
        let mut library = self.clone();
        let mut conflicts = Vec::new();
        let mut faults = Vec::new();
        let mut new_bases = Vec::new();
        for table in tables {
            match library.lay_over(table, &mut new_bases) {
                Ok(found) => conflicts.extend(found),
                Err(found) => faults.extend(found),
            }
            library.own.push(table.clone());
        }
        // Only now: a base may name a solvent of a later table.
        if faults.is_empty() {
            faults = library.name_solvents_of(&new_bases);
        }
        if faults.is_empty() {
            Ok((library, conflicts))
        } else {
            Err(faults)
        }
    }

    fn lay_over(
        &mut self,
        table: &OwnTable,
        new_bases: &mut Vec<NewBase>,
    ) -> Result<Vec<Conflict>, Vec<LibraryError>> {
        let text = TableText::own(&table.name, &table.text);
        let kind = match content_of(text).map_err(|fault| vec![fault])? {
            Content::Acidities => {
                return self.lay_acidities(text.file, measured::acidities(text)?);
            }
            Content::Reagents(kind) => kind,
        };
        let laid = match kind {
            ReagentKind::Base => {
                let rows = bases::read(text)?;
                new_bases.extend(rows.iter().map(|row| NewBase {
                    table: table.name.clone(),
                    line: row.line,
                    name: row.record.name.clone(),
                }));
                self.bases.lay_over(text.file, rows)
            }
            ReagentKind::Solvent => self.solvents.lay_over(text.file, solvents::read(text)?),
            ReagentKind::Electrophile => {
                self.lay_electrophiles(text.file, electrophiles::read(text)?)
            }
            ReagentKind::Additive => self.additives.lay_over(text.file, additives::read(text)?),
        }?;
        Ok(self.conflicts(text, kind, laid))
    }

    fn conflicts(&self, own: TableText<'_>, kind: ReagentKind, laid: Vec<Laid>) -> Vec<Conflict> {
        if laid.is_empty() {
            return Vec::new();
        }
        let table = own.file.to_owned();
        let new = Cells::of(own, kind);
        let earlier = self
            .own
            .iter()
            .rev()
            .map(|table| TableText::own(&table.name, &table.text));
        let earlier = earlier.filter(|text| content_of(*text) == Ok(Content::Reagents(kind)));
        let old: Vec<Cells> = earlier
            .chain([builtin_table(kind)])
            .map(|text| Cells::of(text, kind))
            .collect();
        let conflict = |laid: Laid| match laid {
            Laid::Replaced { line, name } => Conflict::Replaced {
                table: table.clone(),
                line,
                kind,
                values: replaced_values(kind, &old, &new, line, &name),
                name,
            },
            Laid::Taken {
                line,
                name,
                taken,
                from,
            } => Conflict::Renamed {
                table: table.clone(),
                line,
                kind,
                name,
                shared: taken,
                other: from,
            },
        };
        laid.into_iter().map(conflict).collect()
    }

    /// Writes solvents that new bases name as the library names them; what it does not know is a fault.
    fn name_solvents_of(&mut self, new: &[NewBase]) -> Vec<LibraryError> {
        let mut faults = Vec::new();
        for base in new {
            let Some(place) = self.bases.position(&base.name) else {
                continue;
            };
            let row = &mut self.bases.rows_mut()[place];
            let solubilities = row
                .log_solubility_in
                .iter_mut()
                .map(|(name, _)| ("log_solubility_in", name));
            let decays = row
                .decay
                .iter_mut()
                .map(|decay| ("decay", &mut decay.solvent));
            if faults.len() >= MOST_FAULTS {
                break;
            }
            for (column, name) in solubilities.chain(decays) {
                if let Some(solvent) = self.solvents.find(name) {
                    name.clone_from(&solvent.name);
                } else if column == "log_solubility_in" || !is_class(name) {
                    faults.push(base.unknown_solvent(column, name, &self.solvents));
                }
            }
            if let Some(name) = &mut row.supply_solvent
                && let Some(solvent) = self.solvents.find(name)
            {
                name.clone_from(&solvent.name);
            }
        }
        faults
    }
}

/// Where a new base was read.
struct NewBase {
    table: String,
    line: usize,
    name: String,
}

impl NewBase {
    fn unknown_solvent(
        &self,
        column: &str,
        name: &str,
        solvents: &Shelf<crate::Solvent>,
    ) -> LibraryError {
        let offer = solvents
            .nearest(name)
            .map(|near| format!("; did you mean `{near}`?"));
        LibraryError {
            table: self.table.clone(),
            row: self.line,
            column: column.to_owned(),
            value: name.to_owned(),
            reason: format!(
                "no such solvent in the library{}",
                offer.unwrap_or_default()
            ),
        }
    }
}

fn is_class(name: &str) -> bool {
    solvents::CLASSES.iter().any(|(class, _)| *class == name)
}

/// What the rows of an own table are.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Content {
    Reagents(ReagentKind),
    Acidities,
}

/// What a table says that it is.
fn content_of(table: TableText<'_>) -> Result<Content, LibraryError> {
    let words: HashSet<&str> = table
        .text
        .trim_start_matches('\u{feff}')
        .lines()
        .filter_map(|line| line.strip_prefix("# table:"))
        .map(str::trim)
        .collect();
    let reagents = KINDS.map(|kind| (kind.table(), Content::Reagents(kind)));
    let known = reagents
        .into_iter()
        .chain([("acidities", Content::Acidities)]);
    let contents: Vec<Content> = known
        .filter(|(word, _)| words.contains(word))
        .map(|(_, content)| content)
        .collect();
    match (contents.first(), words.len()) {
        (Some(content), 1) => Ok(*content),
        _ => Err(table.fault(
            "write one heading line `# table: bases`, or solvents, electrophiles, additives, \
             acidities, so that it is known what the rows are",
        )),
    }
}
