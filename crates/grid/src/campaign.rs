//! A campaign whose every reagent is known and every number in range.

use std::sync::Arc;

use enolattice_model::{Addition, Base, Electrophile, MeasuredPka, Model, Solvent, Substrate};

use crate::{CampaignSpec, InputError};

/// A checked campaign, prepared for the model. Axes in their order.
#[derive(Clone, Debug)]
pub struct Campaign {
    /// Title.
    pub title: String,
    /// Substrates.
    pub substrates: Vec<Arc<Substrate>>,
    /// The laboratory's own pKa of each substrate, in the order of `substrates`.
    pub own_pka: Vec<Option<MeasuredPka>>,
    /// Bases.
    pub bases: Vec<Arc<Base>>,
    /// Electrophiles.
    pub electrophiles: Vec<Arc<Electrophile>>,
    /// Solvents.
    pub solvents: Vec<Arc<Solvent>>,
    /// Temperatures, °C.
    pub temperature_c: Vec<f64>,
    /// Temperatures of the deprotonation, °C; `None`: that of the reaction.
    pub formation_temperature_c: Vec<Option<f64>>,
    /// Equivalents of base.
    pub base_equiv: Vec<f64>,
    /// Equivalents of electrophile.
    pub electrophile_equiv: Vec<f64>,
    /// Concentrations of substrate, mol/L.
    pub concentration_m: Vec<f64>,
    /// Times, h.
    pub time_h: Vec<f64>,
    /// Dosing times, min.
    pub dosing_min: Vec<f64>,
    /// Orders of addition; `None`: the usual one of the base.
    pub addition: Vec<Option<Addition>>,
    /// Yield that makes a hit.
    pub yield_at_least: f64,
    /// What was changed silently on the way in (duplicates merged, ...), for the user.
    pub warnings: Vec<String>,
}

impl Campaign {
    /// Checks a specification against the model's library and prepares every reagent.
    ///
    /// # Errors
    /// Every fault at once.
    pub fn new(spec: &CampaignSpec, model: &Model) -> Result<Campaign, Vec<InputError>> {
        unimplemented!("{spec:?}{model:?}")
    }
}
