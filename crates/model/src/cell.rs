//! What a cell is made of: prepared reagents and conditions.

use std::sync::Arc;

use crate::{Additive, Base, Electrophile, Pair, Solvent, Substrate};

/// Order in which the reagents meet.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Addition {
    /// The substrate goes into the base, the electrophile last: the kinetic order.
    SubstrateIntoBase,
    /// The base goes into the substrate, the electrophile last.
    BaseIntoSubstrate,
    /// Everything at once.
    AllTogether,
}

impl Addition {
    /// All orders.
    pub const ALL: [Addition; 3] = [
        Addition::SubstrateIntoBase,
        Addition::BaseIntoSubstrate,
        Addition::AllTogether,
    ];

    /// The order's name in campaigns and tables.
    pub fn name(self) -> &'static str {
        match self {
            Addition::SubstrateIntoBase => "substrate into base",
            Addition::BaseIntoSubstrate => "base into substrate",
            Addition::AllTogether => "all together",
        }
    }

    /// The order with this name.
    pub fn from_name(name: &str) -> Option<Addition> {
        Addition::ALL.into_iter().find(|order| order.name() == name)
    }
}

/// Conditions of a cell.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Conditions {
    /// Temperature of the reaction, °C.
    pub temperature_c: f64,
    /// Temperature of the deprotonation, °C; the same as `temperature_c` where the campaign does not say.
    pub formation_temperature_c: f64,
    /// Base, equivalents on substrate.
    pub base_equiv: f64,
    /// Electrophile, equivalents on substrate.
    pub electrophile_equiv: f64,
    /// Additive, equivalents on substrate; without meaning where the cell has none.
    pub additive_equiv: f64,
    /// Substrate, mol/L.
    pub concentration_m: f64,
    /// Time after the electrophile, h.
    pub time_h: f64,
    /// Time over which the electrophile is added, min.
    pub dosing_min: f64,
    /// Order of addition; `None`: the usual one for the base ([`Base::usual_addition`]).
    pub addition: Option<Addition>,
}

/// One combination of reagents and conditions.
#[derive(Clone, Debug)]
pub struct Cell {
    /// Substrate.
    pub substrate: Arc<Substrate>,
    /// Base.
    pub base: Arc<Base>,
    /// Electrophile.
    pub electrophile: Arc<Electrophile>,
    /// Solvent.
    pub solvent: Arc<Solvent>,
    /// Additive, if any.
    pub additive: Option<Arc<Additive>>,
    /// What substrate and electrophile make together.
    pub pair: Arc<Pair>,
    /// Conditions.
    pub conditions: Conditions,
}
