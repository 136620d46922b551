//! Caution bits of a campaign's cells, joined from what each reagent brings.

use enolattice_model::CautionShare;
use rayon::prelude::*;

use crate::Campaign;

/// Shares of the reagents in the cautions, by digits.
#[derive(Debug)]
pub(crate) struct CautionTable {
    bases: Vec<CautionShare>,
    /// solvent × temperature × temperature of the deprotonation
    solvents: Vec<CautionShare>,
    /// electrophile × temperature
    electrophiles: Vec<CautionShare>,
    substrates: Vec<CautionShare>,
    additives: Vec<CautionShare>,
    temperatures: usize,
    formation_temperatures: usize,
}

impl CautionTable {
    pub(crate) fn new(campaign: &Campaign) -> CautionTable {
        let temperatures = &campaign.temperature_c;
        let pairs = temperatures.iter().flat_map(|&t| {
            let forming = campaign.formation_temperature_c.iter();
            forming.map(move |forming| (t, forming.unwrap_or(t)))
        });
        let pairs: Vec<(f64, f64)> = pairs.collect();
        let bases = campaign.bases.iter();
        let solvents = campaign.solvents.iter();
        let electrophiles = campaign.electrophiles.par_iter();
        let substrates = campaign.substrates.par_iter();
        let additives = campaign.additives.iter();
        CautionTable {
            bases: bases
                .map(|base| CautionShare::of_base(&base.record))
                .collect(),
            solvents: solvents
                .flat_map(|solvent| CautionShare::of_solvent(&solvent.record, &pairs))
                .collect(),
            electrophiles: electrophiles
                .flat_map_iter(|e| {
                    CautionShare::of_electrophile(&e.molecule, e.named(), temperatures)
                })
                .collect(),
            substrates: substrates
                .map(|substrate| CautionShare::of_substrate(&substrate.molecule))
                .collect(),
            additives: additives
                .map(|dose| {
                    CautionShare::of_additive(dose.as_ref().map(|dose| &dose.additive.record))
                })
                .collect(),
            temperatures: temperatures.len(),
            formation_temperatures: campaign.formation_temperature_c.len(),
        }
    }

    /// Bits of the cell with these digits, in the order of [`crate::CellDigits`].
    pub(crate) fn bits(&self, digits: &[u32; 13]) -> u32 {
        CautionShare::joined(self.shares(digits))
    }

    /// Bits of the categories of that cell at each severity, in the order of
    /// [`enolattice_model::Severity::ALL`].
    pub(crate) fn categories(&self, digits: &[u32; 13]) -> [u32; 3] {
        CautionShare::categories(self.shares(digits))
    }

    fn shares(&self, digits: &[u32; 13]) -> [CautionShare; 5] {
        let [
            substrate,
            electrophile,
            base,
            solvent,
            additive,
            t,
            forming,
            ..,
        ] = digits.map(|digit| digit as usize);
        let solvent = (solvent * self.temperatures + t) * self.formation_temperatures + forming;
        [
            self.bases[base],
            self.solvents[solvent],
            self.electrophiles[electrophile * self.temperatures + t],
            self.substrates[substrate],
            self.additives[additive],
        ]
    }
}
