//! From a cell to its network: what is charged, in which order, for how long.

use crate::kinetics::{Kinetics, Nudge};
use crate::network::{Amounts, Network, Species, Stage};
use crate::parameters::Values;
use crate::reactions::Reactions;
use crate::{Addition, Cell};

/// Time over which base or substrate is added in the deprotonation, s (common practice).
const ADDING_S: f64 = 600.0;
/// Time for which the deprotonation is left to itself, s (common practice).
const WAITING_S: f64 = 1200.0;

impl Network {
    /// The network of a cell with all parameters at `values`.
    pub(crate) fn new(cell: &Cell, values: &Values, nudge: Nudge) -> Network {
        let [network] = Network::nudged(cell, values, [nudge]);
        network
    }

    /// Networks of a cell that differ by a nudge each and have the same reactions.
    pub(crate) fn nudged<const L: usize>(
        cell: &Cell,
        values: &Values,
        nudges: [Nudge; L],
    ) -> [Network; L] {
        let mut networks = nudges.map(|nudge| Network::whole(cell, values, nudge));
        Network::prune(&mut networks);
        networks
    }

    fn whole(cell: &Cell, values: &Values, nudge: Nudge) -> Network {
        let conditions = &cell.conditions;
        let order = conditions
            .addition
            .unwrap_or_else(|| cell.base.usual_addition());
        let reacting = Kinetics::new(cell, conditions.temperature_c, values, nudge);
        let mut reactions: Vec<_> = Reactions::of(&reacting)
            .into_iter()
            .map(|(reaction, k)| crate::network::Reaction {
                k: [k; 2],
                ..reaction
            })
            .collect();
        let same = conditions.formation_temperature_c == conditions.temperature_c;
        if order != Addition::AllTogether && !same {
            let cold = Kinetics::new(cell, conditions.formation_temperature_c, values, nudge);
            for (reaction, (_, k)) in reactions.iter_mut().zip(Reactions::of(&cold)) {
                reaction.k[0] = k;
            }
        }
        let substrate = conditions.concentration_m;
        let mut network = Network {
            reactions,
            charged: [
                substrate,
                substrate * conditions.base_equiv,
                substrate * conditions.electrophile_equiv,
            ],
            start: Amounts::NONE,
            stages: Vec::with_capacity(4),
            first_reacting_stage: 0,
        };
        network.start.add(Species::Water, cell.solvent.water_m());
        let base = if reacting.solubility_m().is_some() {
            Species::Solid
        } else {
            Species::Base
        };
        network.schedule(
            order,
            base,
            conditions.time_h * 3600.0,
            conditions.dosing_min * 60.0,
        );
        network
    }

    fn schedule(&mut self, order: Addition, base: Species, time_s: f64, dosing_s: f64) {
        let [substrate_m, base_m, electrophile_m] = self.charged;
        let mut stage = |duration_s, temperature, added| {
            self.stages.push(Stage {
                duration_s,
                temperature,
                added,
            });
        };
        match order {
            Addition::SubstrateIntoBase => {
                self.start.add(base, base_m);
                stage(ADDING_S, 0, Some((Species::Substrate, substrate_m)));
            }
            Addition::BaseIntoSubstrate => {
                self.start.add(Species::Substrate, substrate_m);
                stage(ADDING_S, 0, Some((base, base_m)));
            }
            Addition::AllTogether => {
                self.start.add(base, base_m);
                self.start.add(Species::Substrate, substrate_m);
                self.start.add(Species::Electrophile, electrophile_m);
                stage(time_s, 1, None);
                return;
            }
        }
        stage(WAITING_S, 0, None);
        let dosing_s = dosing_s.clamp(1.0, 0.9 * time_s);
        stage(dosing_s, 1, Some((Species::Electrophile, electrophile_m)));
        stage(time_s - dosing_s, 1, None);
        self.first_reacting_stage = 2;
    }
}
