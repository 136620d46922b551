//! From a cell to its networks: what is charged, in which order, for how long.

use crate::kinetics::{Kinetics, Nudge};
use crate::network::{Amounts, Network, Species, Stage};
use crate::parameters::Values;
use crate::reactions::Reactions;
use crate::{Addition, Cell};

/// Time over which base or substrate is added in the deprotonation, s (common practice).
const ADDING_S: f64 = 600.0;
/// Time for which the deprotonation is left to itself, s (common practice).
const WAITING_S: f64 = 1200.0;
/// Share of the time given that dosing may take at most.
const DOSING_SHARE: f64 = 0.9;

/// What a cell's pot holds and when.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Charge {
    order: Addition,
    base: Species,
    water_m: f64,
    substrate_m: f64,
    base_m: f64,
    electrophile_m: f64,
    time_s: f64,
    dosing_s: f64,
}

impl Charge {
    /// The charge of a cell.
    pub(crate) fn of(cell: &Cell) -> Charge {
        let conditions = &cell.conditions;
        let substrate_m = conditions.concentration_m;
        let dissolves = cell
            .base
            .record
            .log_solubility_for(&cell.solvent.record)
            .is_none();
        let time_s = conditions.time_h * 3600.0;
        Charge {
            order: conditions
                .addition
                .unwrap_or_else(|| cell.base.usual_addition()),
            base: if dissolves {
                Species::Base
            } else {
                Species::Solid
            },
            water_m: cell.solvent.water_m()
                + substrate_m * conditions.base_equiv * cell.base.record.water_equiv,
            substrate_m,
            base_m: substrate_m * conditions.base_equiv,
            electrophile_m: substrate_m * conditions.electrophile_equiv,
            time_s,
            dosing_s: (conditions.dosing_min * 60.0).clamp(1.0, DOSING_SHARE * time_s),
        }
    }

    /// Whether there is a deprotonation before the electrophile comes.
    pub(crate) fn forms_first(&self) -> bool {
        self.order != Addition::AllTogether
    }

    /// What is in the pot at the very beginning.
    pub(crate) fn start(&self) -> Amounts {
        let mut pot = Amounts::NONE;
        pot.add(Species::Water, self.water_m);
        if self.order != Addition::SubstrateIntoBase {
            pot.add(Species::Substrate, self.substrate_m);
        }
        if self.order != Addition::BaseIntoSubstrate {
            pot.add(self.base, self.base_m);
        }
        if self.order == Addition::AllTogether {
            pot.add(Species::Electrophile, self.electrophile_m);
        }
        pot
    }

    fn charged(&self) -> [f64; 3] {
        [self.substrate_m, self.base_m, self.electrophile_m]
    }

    fn forming_stages(&self) -> Vec<Stage> {
        let added = match self.order {
            Addition::SubstrateIntoBase => Some((Species::Substrate, self.substrate_m)),
            _ => Some((self.base, self.base_m)),
        };
        vec![
            Stage {
                duration_s: ADDING_S,
                added,
            },
            Stage {
                duration_s: WAITING_S,
                added: None,
            },
        ]
    }

    fn reacting_stages(&self) -> Vec<Stage> {
        if self.order == Addition::AllTogether {
            return vec![Stage {
                duration_s: self.time_s,
                added: None,
            }];
        }
        let dose = Some((Species::Electrophile, self.electrophile_m));
        vec![
            Stage {
                duration_s: self.dosing_s,
                added: dose,
            },
            Stage {
                duration_s: self.time_s - self.dosing_s,
                added: None,
            },
        ]
    }

    /// Networks of the deprotonation, one for each nudge; the electrophile is not there yet.
    pub(crate) fn forming<const L: usize>(
        &self,
        cell: &Cell,
        values: &Values,
        nudges: [Nudge; L],
    ) -> [Network; L] {
        let at = cell.conditions.formation_temperature_c;
        let mut networks = nudges.map(|nudge| Network {
            reactions: Reactions::of(&Kinetics::new(cell, at, values, nudge)),
            stages: self.forming_stages(),
            // nothing of the electrophile may show here: the result serves all electrophiles
            charged: [self.substrate_m, self.base_m, 0.0],
        });
        Network::prune(
            &mut networks,
            &[Species::Substrate, self.base, Species::Water],
        );
        networks
    }

    /// Networks of the reaction, one for each nudge.
    pub(crate) fn reacting<const L: usize>(
        &self,
        cell: &Cell,
        values: &Values,
        nudges: [Nudge; L],
    ) -> [Network; L] {
        let at = cell.conditions.temperature_c;
        let mut networks = nudges.map(|nudge| Network {
            reactions: Reactions::of(&Kinetics::new(cell, at, values, nudge)),
            stages: self.reacting_stages(),
            charged: self.charged(),
        });
        let present = [
            Species::Substrate,
            self.base,
            Species::Water,
            Species::Electrophile,
        ];
        Network::prune(&mut networks, &present);
        networks
    }
}
