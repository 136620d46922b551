//! How much structure a campaign may bring: what bounds the time that reading it takes.

use std::collections::HashSet;

use enolattice_molecule::Molecule;

use crate::fault::value_of_row;
use crate::faults::Faults;
use crate::resolve::in_list;
use crate::{AxisSpec, CampaignSpec, FaultCode, Place};

/// Most atoms of all structures of a campaign together, as [`counted`] counts them.
///
/// The benchmark `reading` shows what they take: up to 1.3 s of processor time, whatever they are, so
/// that two free cores need less than a second.
pub const MAX_ATOMS: u64 = 120_000;

/// A structure counts as many atoms at least: reading the smallest takes as long.
const FEWEST: u64 = 8;
/// Atoms of a structure above which each counts more: rings and ranks take time with the square.
const LARGE: u64 = 64;

/// Atoms of a text that may be a SMILES, as they count against [`MAX_ATOMS`]: at least eight, and
/// above 64 their square over 64.
pub(crate) fn counted(smiles: &str) -> u64 {
    let written = Molecule::atoms_written(smiles).min(Molecule::MAX_ATOMS) as u64;
    written.max(FEWEST).max(written * written / LARGE)
}

/// Whether the structures of a campaign can be read in the time that there is; notes where they
/// are too many.
pub(crate) fn is_bearable(spec: &CampaignSpec, faults: &mut Faults) -> bool {
    let mut load = Load::default();
    let found = load.crossed_in(spec);
    if let Some(place) = found {
        let reason = format!(
            "with this row the campaign has {} structures that count {} atoms, more than the {MAX_ATOMS} \
             that are read",
            load.structures, load.atoms
        );
        let remedy = "screen them in several campaigns, and large molecules as model compounds \
                      with the same reacting group";
        faults.note(FaultCode::CampaignTooLarge, place, "", reason, remedy);
    }
    load.atoms <= MAX_ATOMS
}

/// Structures met so far.
#[derive(Default)]
struct Load<'s> {
    structures: u64,
    atoms: u64,
    measured: HashSet<&'s str>,
}

impl<'s> Load<'s> {
    /// The place of the structure with which the limit is passed.
    fn crossed_in(&mut self, spec: &'s CampaignSpec) -> Option<Place> {
        for (i, substrate) in spec.substrates.iter().enumerate() {
            if self.takes(&substrate.smiles) {
                return Some(of_value(&substrate.place, "smiles", "substrates", i));
            }
        }
        let axes: [(&AxisSpec, &str); 4] = [
            (&spec.bases, "bases"),
            (&spec.electrophiles, "electrophiles"),
            (&spec.solvents, "solvents"),
            (&spec.additives, "additives"),
        ];
        for (axis, name) in axes {
            for (i, entry) in axis.entries.iter().enumerate() {
                if self.takes(&entry.smiles) {
                    return Some(of_value(&entry.place, "smiles", name, i));
                }
            }
        }
        for (i, row) in spec.measured.iter().enumerate() {
            let words = [
                (&row.substrate, "substrate"),
                (&row.base, "base"),
                (&row.electrophile, "electrophile"),
                (&row.solvent, "solvent"),
                (&row.additive, "additive"),
            ];
            for (word, column) in words {
                // each word is looked up once, as a name or as a structure
                if self.measured.insert(word) && self.takes(word) {
                    return Some(of_value(&row.place, column, "measured", i));
                }
            }
        }
        None
    }

    /// Takes a structure on, and says whether that is too much.
    fn takes(&mut self, smiles: &str) -> bool {
        if !smiles.is_empty() {
            self.structures += 1;
            self.atoms += counted(smiles);
        }
        self.atoms > MAX_ATOMS
    }
}

/// The place of a value of a row, or of a row that is in no file.
fn of_value(place: &Place, value: &str, axis: &str, index: usize) -> Place {
    match place.file.is_empty() {
        true => in_list(place, axis, index),
        false => value_of_row(place, value),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::{Entry, Located, SubstrateEntry};

    fn row(smiles: &str, line: u32) -> SubstrateEntry {
        SubstrateEntry {
            smiles: smiles.to_owned(),
            place: Place {
                file: "shelf.smi".to_owned(),
                line,
                field: String::new(),
            },
            ..SubstrateEntry::default()
        }
    }

    #[test]
    fn the_row_with_which_the_limit_is_passed_is_told() {
        let atoms = "C".repeat(50);
        let fit = MAX_ATOMS as u32 / 50;
        let mut spec = CampaignSpec {
            substrates: (1..=fit).map(|line| row(&atoms, line)).collect(),
            ..CampaignSpec::default()
        };
        let mut faults = Faults::default();
        assert!(is_bearable(&spec, &mut faults) && !faults.any());
        spec.electrophiles.entries.push(Entry {
            smiles: "CI".to_owned(),
            ..Entry::default()
        });
        assert!(!is_bearable(&spec, &mut faults));
        spec.substrates.push(row("CCO", fit + 1));
        spec.substrates.push(row("CCO", fit + 2));
        assert!(!is_bearable(&spec, &mut faults));
        let faults = faults.in_order("");
        let told: Vec<String> = faults
            .iter()
            .map(|f| Located(&f.place).to_string())
            .collect();
        let row = format!("shelf.smi:{}: smiles", fit + 1);
        assert_eq!(told, ["electrophiles[0]".to_owned(), row]);
        let count = format!("count {} atoms", MAX_ATOMS + 8);
        assert!(faults.iter().all(|fault| fault.reason.contains(&count)));
    }

    /// A library of several thousand molecules of the size of drugs is no hostile input.
    #[test]
    fn thousands_of_drug_like_molecules_are_bearable() {
        let molecule = "COc1ccc(cc1)C(=O)CC(=O)N1CCN(CC1)c1ncnc2cc(OC)c(OCCCN3CCOCC3)cc12";
        let spec = CampaignSpec {
            substrates: (1..=2_900).map(|line| row(molecule, line)).collect(),
            ..CampaignSpec::default()
        };
        assert!(is_bearable(&spec, &mut Faults::default()));
    }

    #[test]
    fn small_structures_count_eight_atoms_and_large_ones_more_than_they_have() {
        for (smiles, atoms) in [
            ("C", 8),
            ("CCOC(=O)CC(C)=O", 9),
            (&"C".repeat(64), 64),
            (&"C".repeat(128), 256),
            (&"C".repeat(300), 1406),
            (&"C".repeat(1_000_000), 1406),
        ] {
            assert_eq!(
                counted(smiles),
                atoms,
                "{}",
                &smiles[..smiles.len().min(20)]
            );
        }
    }
}
