//! Alkylating agents by themselves: what published series of relative rates and of elimination are held against.

use crate::kinetics::{Kinetics, Nudge};
use crate::network::Species;
use crate::parameters::Values;
use crate::{Cell, Electrophile, Model};
use enolattice_molecule::ElectrophileKind;

impl Model {
    /// log10 of the rate of substitution at an alkylating agent relative to ethyl bromide; `None` for electrophiles
    /// that are none.
    pub fn relative_substitution(&self, electrophile: &Electrophile) -> Option<f64> {
        match electrophile.group.as_ref()?.kind {
            ElectrophileKind::Alkyl { group, leaving, .. } => {
                Some(crate::rates::alkyl_group(group) + crate::rates::leaving_group(leaving))
            }
            _ => None,
        }
    }

    /// log10 of the rate constants at which a cell's base substitutes and eliminates its alkylating agent, L/(mol s), at the
    /// temperature of the reaction; `None` for electrophiles that are none and for those without β hydrogens.
    pub fn substitution_and_elimination(&self, cell: &Cell) -> Option<(f64, f64)> {
        self.relative_substitution(&cell.electrophile)?;
        let means = Values::means();
        let temperature_c = cell.conditions.temperature_c;
        let kinetics = Kinetics::new(cell, temperature_c, &means, Nudge::default());
        let substitution = kinetics.attack(&kinetics.base_nucleophile())?;
        let lag = kinetics.lag_of_alkoxide(Species::Base);
        let elimination = kinetics.elimination(kinetics.pka_base() + lag);
        (elimination > 0.0).then(|| (substitution, enolattice_units::math::log10(elimination)))
    }
}
