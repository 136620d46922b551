//! Finding things by name, and the nearest name for a misspelt one.

use std::collections::HashMap;

/// How alike two names must be (Jaro–Winkler, 0 to 1) for one to be offered for the other.
const ALIKE: f64 = 0.75;

/// Longest text that is compared with all names, bytes.
const LONGEST_COMPARED: usize = 200;

/// Names, synonyms and CAS numbers of a table, whatever the case, with the row they stand for.
#[derive(Clone, Debug, Default)]
pub(crate) struct NameIndex {
    rows: HashMap<String, usize>,
    written: Vec<String>,
}

impl NameIndex {
    /// Adds the names of a row; no other row has any of them.
    pub(crate) fn add<'a>(&mut self, row: usize, names: impl Iterator<Item = &'a str>) {
        for name in names {
            self.rows.insert(folded(name), row);
            self.written.push(name.to_owned());
        }
    }

    /// The row with this name.
    pub(crate) fn find(&self, name: &str) -> Option<usize> {
        self.rows.get(&folded(name)).copied()
    }

    /// The name nearest to a misspelt one, as the table writes it.
    pub(crate) fn nearest(&self, name: &str) -> Option<&str> {
        let wanted = folded(name);
        if wanted.len() > LONGEST_COMPARED {
            return None;
        }
        let likeness = |written: &String| strsim::jaro_winkler(&folded(written), &wanted);
        let best = self
            .written
            .iter()
            .map(|w| (likeness(w), w))
            .fold(None, nearer);
        best.filter(|(likeness, _)| *likeness >= ALIKE)
            .map(|(_, written)| written.as_str())
    }
}

/// Keeps the more alike of two; the earlier one where they are equal.
fn nearer<'a>(
    best: Option<(f64, &'a String)>,
    next: (f64, &'a String),
) -> Option<(f64, &'a String)> {
    match best {
        Some(kept) if kept.0 >= next.0 => Some(kept),
        _ => Some(next),
    }
}

/// A name as it is compared.
pub(crate) fn folded(name: &str) -> String {
    name.trim().to_lowercase()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn index() -> NameIndex {
        let mut index = NameIndex::default();
        index.add(0, ["KOtBu", "potassium tert-butoxide"].into_iter());
        index.add(1, ["LiHMDS", "4039-32-1"].into_iter());
        index
    }

    #[test]
    fn names_are_found_whatever_the_case() {
        assert_eq!(index().find("kotbu"), Some(0));
        assert_eq!(index().find(" LIHMDS "), Some(1));
        assert_eq!(index().find("4039-32-1"), Some(1));
        assert_eq!(index().find("LDA"), None);
    }

    #[test]
    fn a_misspelt_name_gets_the_nearest_one_and_nonsense_none() {
        assert_eq!(index().nearest("LiHDMS"), Some("LiHMDS"));
        assert_eq!(
            index().nearest("potassium t-butoxide"),
            Some("potassium tert-butoxide")
        );
        assert_eq!(index().nearest("zzzz"), None);
    }
}
