//! What goes into a well.

use enolattice_model::{Addition, Cell};
use serde::{Deserialize, Serialize};

use crate::Well;

/// What a well is there for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Content {
    /// A cell of the job.
    Cell,
    /// Control: the surest cell once more.
    Positive,
    /// Control: without base.
    NoBase,
    /// Control: without electrophile.
    NoElectrophile,
    /// Control: without electrophile, quenched with D2O.
    Deuterium,
    /// Control: solvent alone.
    SolventOnly,
}

impl Content {
    /// The word for it.
    pub fn name(self) -> &'static str {
        match self {
            Content::Cell => "cell",
            Content::Positive => "positive control",
            Content::NoBase => "no base",
            Content::NoElectrophile => "no electrophile",
            Content::Deuterium => "D2O quench",
            Content::SolventOnly => "solvent only",
        }
    }

    /// Whether the reaction of its cell runs in it.
    pub fn runs(self) -> bool {
        matches!(self, Content::Cell | Content::Positive)
    }

    /// Whether it is a control.
    pub fn is_control(self) -> bool {
        self != Content::Cell
    }

    /// Whether the well gets what has this role.
    pub fn holds(self, role: Role) -> bool {
        match role {
            Role::Base => !matches!(self, Content::NoBase | Content::SolventOnly),
            Role::Electrophile => self.runs() || self == Content::NoBase,
            Role::Substrate | Role::Additive => self != Content::SolventOnly,
            Role::Solvent | Role::Quench | Role::Diluent => true,
        }
    }
}

/// What a liquid is there for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Role {
    /// Fills the well up.
    Solvent,
    /// Additive.
    Additive,
    /// Substrate.
    Substrate,
    /// Base.
    Base,
    /// Electrophile.
    Electrophile,
    /// Ends the reaction.
    Quench,
    /// Dilutes the sample.
    Diluent,
}

impl Role {
    /// The word for it.
    pub fn name(self) -> &'static str {
        match self {
            Role::Solvent => "solvent",
            Role::Additive => "additive",
            Role::Substrate => "substrate",
            Role::Base => "base",
            Role::Electrophile => "electrophile",
            Role::Quench => "quench",
            Role::Diluent => "diluent",
        }
    }
}

/// A well and what goes into it.
#[derive(Clone, Debug)]
pub struct Recipe {
    /// Plate, from 0.
    pub plate: usize,
    /// Well.
    pub well: Well,
    /// The cell, of whose reagents a control lacks some.
    pub cell: Cell,
    /// What the well is there for.
    pub content: Content,
}

impl Recipe {
    /// Order in which the well's reagents meet.
    pub fn addition(&self) -> Addition {
        let asked = self.cell.conditions.addition;
        asked.unwrap_or_else(|| self.cell.base.usual_addition())
    }

    /// Amount of what has a role, umol in a volume of reaction in uL: c·V·equivalents.
    pub fn amount_umol(&self, role: Role, volume_ul: f64) -> f64 {
        let conditions = &self.cell.conditions;
        let substrate = conditions.concentration_m * volume_ul;
        match role {
            _ if !self.content.holds(role) => 0.0,
            Role::Substrate => substrate,
            Role::Base => substrate * conditions.base_equiv,
            Role::Electrophile => substrate * conditions.electrophile_equiv,
            Role::Additive if self.cell.additive.is_some() => substrate * conditions.additive_equiv,
            _ => 0.0,
        }
    }

    /// Name of what has a role; none where the well has none of it.
    pub fn reagent(&self, role: Role) -> Option<&str> {
        let cell = &self.cell;
        let name = match role {
            Role::Substrate => Some(cell.substrate.name.as_str()),
            Role::Base => Some(cell.base.record.name.as_str()),
            Role::Electrophile => Some(cell.electrophile.name.as_str()),
            Role::Additive => cell
                .additive
                .as_ref()
                .map(|known| known.record.name.as_str()),
            Role::Solvent => Some(cell.solvent.record.name.as_str()),
            Role::Quench | Role::Diluent => None,
        };
        name.filter(|_| self.content.holds(role))
    }
}
