//! What a user should know of a campaign that is sound.

use std::collections::HashMap;

use enolattice_molecule::Salt;

use crate::Campaign;

/// Warnings of one kind that are written out; the others are counted.
const WRITTEN_OUT: usize = 20;

/// Warnings, by kind.
#[derive(Debug, Default)]
pub(crate) struct Warnings {
    kinds: Vec<Kind>,
}

#[derive(Debug)]
struct Kind {
    name: String,
    written: Vec<String>,
    further: usize,
}

impl Warnings {
    /// A value that is the same as an earlier one of its axis.
    pub(crate) fn merged(&mut self, axis: &str, name: &str, first: &str) {
        let text = if name == first {
            format!("{axis}: `{name}` is given twice and counts once")
        } else {
            format!("{axis}: `{name}` is the same as `{first}` and counts once, as `{first}`")
        };
        self.add(&format!("{axis} given twice"), text);
    }

    /// What was noticed while the files were read.
    pub(crate) fn noted(&mut self, note: &str) {
        self.add("notes of the reader", note.to_owned());
    }

    /// A structure that was given as a salt or solvate and is screened without its companions.
    pub(crate) fn of_salt(&mut self, axis: &str, name: &str, salt: &Salt) {
        let Some(note) = salt.note() else { return };
        let mut text =
            format!("{axis}: `{name}` is screened without what stands beside it ({note})");
        if salt.acid_equivalents > 0.0 {
            let equiv = salt.acid_equivalents;
            text += &format!("; charge {equiv} equivalents of base more");
        }
        self.add(&format!("{axis} that are salts"), text);
    }

    /// A measured yield that no cell of the campaign has.
    pub(crate) fn of_no_cell(&mut self, row: &str, missing: &str) {
        let text = format!(
            "measured: {row} is of no cell of this campaign, which lacks {missing}; it is kept and shown nowhere"
        );
        self.add("measured yields of no cell", text);
    }

    /// What the model says of the reagents once they are prepared.
    pub(crate) fn of_prepared(&mut self, campaign: &Campaign) {
        for electrophile in &campaign.electrophiles {
            if let Some(reason) = &electrophile.not_covered {
                let name = &electrophile.name;
                let text = format!(
                    "electrophiles: `{name}` is not covered, its cells stay unknown: {reason}"
                );
                self.add("electrophiles not covered", text);
            }
        }
        for substrate in &campaign.substrates {
            if !substrate.sites.iter().any(|site| site.element == CARBON) {
                let name = &substrate.name;
                let text = format!("substrates: `{name}` has no acidic C–H that the model knows");
                self.add("substrates without acidic C–H", text);
            }
        }
        for solvent in &campaign.solvents {
            if solvent.record.biphasic {
                let name = &solvent.record.name;
                let text = format!(
                    "solvents: `{name}` is taken to separate into two liquids; its cells are computed as if it were one"
                );
                self.add("solvents of two liquids", text);
            }
        }
        self.shared_names(
            "substrates",
            campaign.substrates.iter().map(|s| s.name.as_str()),
        );
        self.shared_names(
            "electrophiles",
            campaign.electrophiles.iter().map(|e| e.name.as_str()),
        );
    }

    /// Different structures under one name cannot be told apart in a table.
    fn shared_names<'n>(&mut self, axis: &str, names: impl Iterator<Item = &'n str>) {
        let mut seen: HashMap<&str, usize> = HashMap::new();
        for name in names {
            let times = seen.entry(name).or_default();
            *times += 1;
            if *times == 2 {
                let text = format!(
                    "{axis}: different structures are called `{name}`; rankings show the name only"
                );
                self.add(&format!("{axis} of one name"), text);
            }
        }
    }

    fn add(&mut self, kind: &str, text: String) {
        let at = self
            .kinds
            .iter()
            .position(|known| known.name == kind)
            .unwrap_or_else(|| {
                self.kinds.push(Kind {
                    name: kind.to_owned(),
                    written: Vec::new(),
                    further: 0,
                });
                self.kinds.len() - 1
            });
        let kind = &mut self.kinds[at];
        if kind.written.len() < WRITTEN_OUT {
            kind.written.push(text);
        } else {
            kind.further += 1;
        }
    }

    /// The warnings, kind by kind; of each kind the first are written out and the others counted.
    pub(crate) fn into_list(self) -> Vec<String> {
        let mut list = Vec::new();
        for Kind {
            name,
            written,
            further,
        } in self.kinds
        {
            list.extend(written);
            if further > 0 {
                list.push(format!("{name}: {further} more"));
            }
        }
        list
    }
}

const CARBON: u8 = 6;

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn many_warnings_of_a_kind_are_counted() {
        let mut warnings = Warnings::default();
        for i in 0..25 {
            warnings.merged("substrates", &format!("s{i}"), "a");
        }
        warnings.merged("bases", "LDA", "LDA");
        let list = warnings.into_list();
        assert_eq!(list.len(), 22);
        assert_eq!(
            list[0],
            "substrates: `s0` is the same as `a` and counts once, as `a`"
        );
        assert_eq!(list[20], "substrates given twice: 5 more");
        assert_eq!(list[21], "bases: `LDA` is given twice and counts once");
    }
}
