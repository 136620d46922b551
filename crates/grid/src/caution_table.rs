//! Caution bits of a campaign's cells, tabled by the few axes that each part depends on.

use enolattice_model::{
    base_electrophile_cautions, base_solvent_cautions, base_substrate_cautions, caution_bits,
    electrophile_solvent_cautions, join_caution_bits,
};

use crate::Campaign;

/// Bits of the parts of the cautions, by digits.
#[derive(Debug)]
pub(crate) struct CautionTable {
    /// base × solvent × temperature × temperature of the deprotonation
    base_solvent: Vec<u32>,
    /// electrophile × solvent × temperature
    electrophile_solvent: Vec<u32>,
    /// base × electrophile
    base_electrophile: Vec<u32>,
    /// base × substrate
    base_substrate: Vec<u32>,
    solvents: usize,
    temperatures: usize,
    formation_temperatures: usize,
    electrophiles: usize,
    substrates: usize,
}

impl CautionTable {
    pub(crate) fn new(campaign: &Campaign) -> CautionTable {
        let Campaign {
            bases,
            solvents,
            electrophiles,
            substrates,
            ..
        } = campaign;
        let mut base_solvent = Vec::new();
        let mut base_electrophile = Vec::new();
        let mut base_substrate = Vec::new();
        for base in bases {
            for solvent in solvents {
                for &t in &campaign.temperature_c {
                    for forming in &campaign.formation_temperature_c {
                        let (base, solvent) = (&base.record, &solvent.record);
                        let all = base_solvent_cautions(base, solvent, t, forming.unwrap_or(t));
                        base_solvent.push(caution_bits(&all));
                    }
                }
            }
            for electrophile in electrophiles {
                let all = base_electrophile_cautions(&base.record, &electrophile.molecule);
                base_electrophile.push(caution_bits(&all));
            }
            for substrate in substrates {
                let all = base_substrate_cautions(&base.record, &substrate.molecule);
                base_substrate.push(caution_bits(&all));
            }
        }
        let mut electrophile_solvent = Vec::new();
        for electrophile in electrophiles {
            for solvent in solvents {
                for &t in &campaign.temperature_c {
                    let named = electrophile.named();
                    let solvent = &solvent.record;
                    let all =
                        electrophile_solvent_cautions(&electrophile.molecule, named, solvent, t);
                    electrophile_solvent.push(caution_bits(&all));
                }
            }
        }
        CautionTable {
            base_solvent,
            electrophile_solvent,
            base_electrophile,
            base_substrate,
            solvents: solvents.len(),
            temperatures: campaign.temperature_c.len(),
            formation_temperatures: campaign.formation_temperature_c.len(),
            electrophiles: electrophiles.len(),
            substrates: substrates.len(),
        }
    }

    /// Bits of the cell with these digits, in the order of [`crate::CellDigits`].
    pub(crate) fn bits(&self, digits: &[u32; 13]) -> u32 {
        let [substrate, electrophile, base, solvent, _, t, forming, ..] =
            digits.map(|digit| digit as usize);
        let at = base * self.solvents + solvent;
        let at = (at * self.temperatures + t) * self.formation_temperatures + forming;
        let parts = [
            self.base_solvent[at],
            self.electrophile_solvent
                [(electrophile * self.solvents + solvent) * self.temperatures + t],
            self.base_electrophile[base * self.electrophiles + electrophile],
            self.base_substrate[base * self.substrates + substrate],
        ];
        parts.into_iter().fold(0, join_caution_bits)
    }
}
