//! One kind of reagents with their names, and rows laid over others.

use std::collections::{HashMap, HashSet};

use crate::names::{NameIndex, folded};
use crate::table::Lined;
use crate::{Additive, Base, LibraryError, NamedElectrophile, Solvent};

/// What a reagent is found by.
pub(crate) trait Named {
    /// Name, synonyms and CAS number.
    fn identity(&self) -> (&String, &Vec<String>, &String);
    /// The same, to change.
    fn identity_mut(&mut self) -> (&mut String, &mut Vec<String>, &mut String);

    /// Name, synonyms and CAS number, in the columns that hold them.
    fn names(&self) -> impl Iterator<Item = (&'static str, &str)> {
        let (name, synonyms, cas) = self.identity();
        let synonyms = synonyms
            .iter()
            .map(|synonym| ("synonyms", synonym.as_str()));
        let cas = (!cas.is_empty()).then_some(("cas", cas.as_str()));
        std::iter::once(("name", name.as_str()))
            .chain(synonyms)
            .chain(cas)
    }
}

macro_rules! named {
    ($($record:ty),*) => {$(
        impl Named for $record {
            fn identity(&self) -> (&String, &Vec<String>, &String) {
                (&self.name, &self.synonyms, &self.cas)
            }
            fn identity_mut(&mut self) -> (&mut String, &mut Vec<String>, &mut String) {
                (&mut self.name, &mut self.synonyms, &mut self.cas)
            }
        }
    )*};
}

named!(Base, Solvent, NamedElectrophile, Additive);

/// What laying a row over others did to them.
#[derive(Clone, Debug, PartialEq)]
pub(crate) enum Laid {
    /// The row stands in place of the one with this name.
    Replaced { line: usize, name: String },
    /// A synonym or CAS number means this row now, no longer another.
    Taken {
        line: usize,
        name: String,
        taken: String,
        from: String,
    },
}

/// One kind of reagents.
#[derive(Clone, Debug)]
pub(crate) struct Shelf<T> {
    rows: Vec<T>,
    names: NameIndex,
}

impl<T> Default for Shelf<T> {
    fn default() -> Shelf<T> {
        Shelf {
            rows: Vec::new(),
            names: NameIndex::default(),
        }
    }
}

impl<T: Named> Shelf<T> {
    /// All rows: those of the first table in its order, then what others added.
    pub(crate) fn rows(&self) -> &[T] {
        &self.rows
    }

    /// All rows, to change anything but what they are found by.
    pub(crate) fn rows_mut(&mut self) -> &mut [T] {
        &mut self.rows
    }

    /// Where the row with this name, synonym or CAS number is, whatever the case.
    pub(crate) fn position(&self, name: &str) -> Option<usize> {
        self.names.find(name)
    }

    /// The row with this name, synonym or CAS number, whatever the case.
    pub(crate) fn find(&self, name: &str) -> Option<&T> {
        self.position(name).map(|row| &self.rows[row])
    }

    /// The known name nearest to a misspelt one.
    pub(crate) fn nearest(&self, name: &str) -> Option<&str> {
        self.names.nearest(name)
    }

    /// Lays the rows of a table over those that are there.
    ///
    /// A row whose name is known, or that has the name of another as a synonym, replaces that row:
    /// it keeps the name that was there, and the synonyms and CAS number that the new row does
    /// not state. Any other row is added; a synonym or CAS number that belonged to another
    /// row means the new one from now on.
    pub(crate) fn lay_over(
        &mut self,
        table: &str,
        rows: Vec<Lined<T>>,
    ) -> Result<Vec<Laid>, Vec<LibraryError>> {
        let stated = stated_names(table, &rows)?;
        let targets = self.targets(table, &rows)?;
        let mut laid = Vec::new();
        let mut places = Vec::new();
        for (index, (mut new, target)) in rows.into_iter().zip(targets).enumerate() {
            let Some(target) = target else {
                places.push((self.rows.len(), new.line));
                self.rows.push(new.record);
                continue;
            };
            let free = |name: &str| {
                stated
                    .get(&folded(name))
                    .is_none_or(|owner| *owner == index)
            };
            inherit(&mut new.record, &self.rows[target], free);
            places.push((target, new.line));
            laid.push(Laid::Replaced {
                line: new.line,
                name: new.record.identity().0.clone(),
            });
            self.rows[target] = new.record;
        }
        self.take_names(&stated, &places, &mut laid);
        self.names = NameIndex::default();
        for (position, row) in self.rows.iter().enumerate() {
            self.names.add(position, row.names().map(|(_, name)| name));
        }
        Ok(laid)
    }

    /// The rows that new ones replace, by the order of the new ones.
    fn targets(
        &self,
        table: &str,
        rows: &[Lined<T>],
    ) -> Result<Vec<Option<usize>>, Vec<LibraryError>> {
        let mut faults = Vec::new();
        let mut targets: Vec<Option<usize>> = Vec::with_capacity(rows.len());
        for row in rows {
            let (name, synonyms, _) = row.record.identity();
            let by_name = self.position(name);
            let by_synonym = synonyms.iter().filter_map(|synonym| self.primary(synonym));
            let mut found: Vec<usize> = by_name.into_iter().chain(by_synonym).collect();
            found.sort_unstable();
            found.dedup();
            let names = |found: &[usize]| {
                let names = found
                    .iter()
                    .map(|row| self.rows[*row].identity().0.as_str());
                names.collect::<Vec<_>>().join("` and `")
            };
            let target = found.first().copied();
            let reason = if found.len() > 1 {
                format!(
                    "this row stands for `{}` of the library: leave one out",
                    names(&found)
                )
            } else if target.is_some() && targets.contains(&target) {
                format!(
                    "an earlier row of this table stands for `{}` too",
                    names(&found)
                )
            } else {
                targets.push(target);
                continue;
            };
            targets.push(None);
            faults.push(fault(table, row.line, "name", name, reason));
        }
        if faults.is_empty() {
            Ok(targets)
        } else {
            Err(faults)
        }
    }

    /// The row whose name, not synonym, this is.
    fn primary(&self, name: &str) -> Option<usize> {
        let row = self.position(name)?;
        (folded(self.rows[row].identity().0) == folded(name)).then_some(row)
    }

    /// Takes the names that new rows state away from all others.
    fn take_names(
        &mut self,
        stated: &HashMap<String, usize>,
        places: &[(usize, usize)],
        laid: &mut Vec<Laid>,
    ) {
        let owners: Vec<(usize, String)> = places
            .iter()
            .map(|(place, line)| (*line, self.rows[*place].identity().0.clone()))
            .collect();
        let new: HashSet<usize> = places.iter().map(|(place, _)| *place).collect();
        for (place, row) in self.rows.iter_mut().enumerate() {
            if new.contains(&place) {
                continue;
            }
            let (name, synonyms, cas) = row.identity_mut();
            let mut is_taken = |word: &String| {
                let Some(owner) = stated.get(&folded(word)) else {
                    return false;
                };
                let (line, owner) = owners[*owner].clone();
                laid.push(Laid::Taken {
                    line,
                    name: owner,
                    taken: word.clone(),
                    from: name.clone(),
                });
                true
            };
            synonyms.retain(|synonym| !is_taken(synonym));
            if is_taken(cas) {
                cas.clear();
            }
        }
    }
}

/// All names that the rows state, with the place of the row; two rows cannot share one.
fn stated_names<T: Named>(
    table: &str,
    rows: &[Lined<T>],
) -> Result<HashMap<String, usize>, Vec<LibraryError>> {
    let mut stated = HashMap::new();
    let mut faults = Vec::new();
    for (index, row) in rows.iter().enumerate() {
        for (column, name) in row.record.names() {
            match stated.insert(folded(name), index) {
                Some(earlier) if earlier != index => {
                    let reason = format!(
                        "`{name}` stands for the row of line {} too",
                        rows[earlier].line
                    );
                    faults.push(fault(table, row.line, column, name, reason));
                }
                _ => {}
            }
        }
    }
    if faults.is_empty() {
        Ok(stated)
    } else {
        Err(faults)
    }
}

/// Gives a row the name of the one that it replaces, and the synonyms and CAS number that it
/// does not state itself and that are free.
fn inherit<T: Named>(row: &mut T, replaced: &T, free: impl Fn(&str) -> bool) {
    let (old_name, old_synonyms, old_cas) = replaced.identity();
    let (name, synonyms, cas) = row.identity_mut();
    let own_name = std::mem::replace(name, old_name.clone());
    let known: Vec<String> = std::mem::take(synonyms);
    let inherited = old_synonyms.iter().filter(|synonym| free(synonym)).cloned();
    for synonym in std::iter::once(own_name).chain(known).chain(inherited) {
        let is_there = std::iter::once(&*name)
            .chain(&*synonyms)
            .any(|there| folded(there) == folded(&synonym));
        if !is_there {
            synonyms.push(synonym);
        }
    }
    if cas.is_empty() && free(old_cas) {
        cas.clone_from(old_cas);
    }
}

fn fault(table: &str, line: usize, column: &str, value: &str, reason: String) -> LibraryError {
    LibraryError {
        table: table.to_owned(),
        row: line,
        column: column.to_owned(),
        value: value.to_owned(),
        reason,
    }
}
