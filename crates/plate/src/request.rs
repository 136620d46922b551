//! What a plan is asked to be.

mod read;

use serde::{Deserialize, Serialize};

use crate::{Deck, DesignKind, EdgeWells, HitsOf, PlateFormat, Weights};

pub(crate) use read::fault;

/// What a plan is asked to be, as in a request file. Whatever is left out has the default of its field.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct PlanRequest {
    /// Title.
    pub title: String,
    /// Seed of the layout and of everything random.
    pub seed: u64,
    /// The plates.
    pub plates: Plates,
    /// How cells are chosen.
    pub choice: ChoiceRequest,
    /// Wells that hold no cell of the job.
    pub controls: Controls,
    /// What each well gets beside the reagents of its cell.
    pub well: WellRequest,
    /// What the deck can do.
    pub deck: Deck,
}

/// The plates.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct Plates {
    /// Wells of each: 24, 96, 384 or 1536.
    pub wells: PlateFormat,
    /// How many.
    pub count: u32,
    /// What the outer ring of wells is for.
    pub edge_wells: EdgeWells,
    /// Axis whose values share columns, for a multichannel head: `base`, `electrophile`, `solvent` or `substrate`; none:
    /// wells in random order.
    pub columns_by: Option<ColumnsBy>,
}

impl Default for Plates {
    fn default() -> Plates {
        Plates {
            wells: PlateFormat::Wells96,
            count: 1,
            edge_wells: EdgeWells::default(),
            columns_by: None,
        }
    }
}

/// Axis whose values share columns.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum ColumnsBy {
    /// Substrates.
    Substrate,
    /// Bases.
    Base,
    /// Electrophiles.
    Electrophile,
    /// Solvents.
    Solvent,
}

/// How much each term of a choice counts: a word, or numbers.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(untagged)]
pub enum Aim {
    /// A word.
    Word(AimWord),
    /// Numbers.
    Numbers(Weights),
}

/// An aim in a word.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum AimWord {
    /// To learn most.
    Explore,
    /// Some of each.
    Balanced,
    /// To get products.
    Exploit,
}

impl Aim {
    /// The weights.
    pub fn weights(self) -> Weights {
        match self {
            Aim::Word(AimWord::Explore) => Weights::EXPLORE,
            Aim::Word(AimWord::Balanced) => Weights::BALANCED,
            Aim::Word(AimWord::Exploit) => Weights::EXPLOIT,
            Aim::Numbers(weights) => weights,
        }
    }
}

/// How cells are chosen.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct ChoiceRequest {
    /// `explore`, `balanced`, `exploit`, or `{ hits = 0.6, information = 0.3, spread = 0.1 }`.
    pub aim: Aim,
    /// What hits are counted of: `substrates` or `products`.
    pub hits_of: HitsOf,
    /// A classical design in the place of a choice by worth: `full factorial`, `fractional factorial`, `Plackett-Burman`,
    /// `D-optimal` or `space filling`, over the axes that vary within a plate.
    pub design: Option<DesignKind>,
    /// Wells that each cell gets.
    pub replicates: u32,
    /// Cells that are scored again with joint draws.
    pub shortlist: u32,
    /// Joint draws.
    pub draws: u32,
    /// Only cells that pass this filter, in the language of `rank --filter`.
    pub only: String,
    /// Cells that must be on a plate.
    pub pin: Vec<NamedCell>,
    /// Cells that must not.
    pub veto: Vec<NamedCell>,
    /// Least and most wells that carry a value of an axis.
    pub limits: Vec<Limit>,
    /// Whether only reagents are used of which the campaign says what is on the shelf.
    pub only_in_stock: bool,
    /// Categories of caution whose severity `stop` does not keep a cell off the plates.
    pub allow_stop: Vec<String>,
}

impl Default for ChoiceRequest {
    fn default() -> ChoiceRequest {
        ChoiceRequest {
            aim: Aim::Word(AimWord::Balanced),
            hits_of: HitsOf::Substrates,
            design: None,
            replicates: 1,
            shortlist: 4_000,
            draws: 64,
            only: String::new(),
            pin: Vec::new(),
            veto: Vec::new(),
            limits: Vec::new(),
            only_in_stock: false,
            allow_stop: Vec::new(),
        }
    }
}

/// A cell that a user speaks of, and why.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct NamedCell {
    /// Its number in the job.
    pub cell: u64,
    /// What the user says of it.
    #[serde(default)]
    pub note: String,
}

/// Least and most cells that carry a value of an axis.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Limit {
    /// Axis: `substrate`, `base`, `electrophile`, `solvent` or `additive`.
    pub axis: LimitAxis,
    /// Name of the value; none: each value of the axis.
    #[serde(default)]
    pub value: Option<String>,
    /// At least so many cells.
    #[serde(default)]
    pub least: u32,
    /// At most so many cells; none: as many as there are places.
    #[serde(default)]
    pub most: Option<u32>,
}

/// An axis that can be limited.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum LimitAxis {
    /// Substrates.
    Substrate,
    /// Electrophiles.
    Electrophile,
    /// Bases.
    Base,
    /// Solvents.
    Solvent,
    /// Additives.
    Additive,
}

impl LimitAxis {
    /// Index in the order of [`enolattice_grid::AXES`].
    pub fn index(self) -> usize {
        match self {
            LimitAxis::Substrate => 0,
            LimitAxis::Electrophile => 1,
            LimitAxis::Base => 2,
            LimitAxis::Solvent => 3,
            LimitAxis::Additive => 4,
        }
    }

    /// The axis's name.
    pub fn name(self) -> &'static str {
        match self {
            LimitAxis::Substrate => "substrate",
            LimitAxis::Electrophile => "electrophile",
            LimitAxis::Base => "base",
            LimitAxis::Solvent => "solvent",
            LimitAxis::Additive => "additive",
        }
    }
}

/// Wells on each plate that hold no cell of the job.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct Controls {
    /// A cell without its base: what goes on without an enolate.
    pub no_base: u32,
    /// A cell without its electrophile: what base and substrate do by themselves.
    pub no_electrophile: u32,
    /// Solvent alone: what the analysis sees of nothing.
    pub solvent_only: u32,
    /// The surest cell of the plate, again and again: the plate's own scatter.
    pub positive: u32,
    /// A cell without electrophile, quenched with D2O: whether the deprotonation or the attack failed.
    pub deuterium: u32,
}

impl Default for Controls {
    fn default() -> Controls {
        Controls {
            no_base: 1,
            no_electrophile: 1,
            solvent_only: 1,
            positive: 3,
            deuterium: 2,
        }
    }
}

impl Controls {
    /// Wells of a plate that controls take.
    pub fn wells(&self) -> u32 {
        self.no_base
            .saturating_add(self.no_electrophile)
            .saturating_add(self.solvent_only)
            .saturating_add(self.positive)
            .saturating_add(self.deuterium)
    }
}

/// What each well gets beside the reagents of its cell.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct WellRequest {
    /// Volume of the reaction, uL; none: the usual one of the format.
    pub volume_ul: Option<f64>,
    /// Solvent in which stocks are made whatever the solvent of their wells, concentrated; none: stocks are made in the
    /// solvents of their wells, one for each.
    pub carrier: Option<String>,
    /// What ends the reaction.
    pub quench: String,
    /// Its volume, as a share of the reaction's.
    pub quench_share: f64,
    /// What the sample for the LC-MS is diluted with.
    pub diluent: String,
    /// Internal standard, dissolved in the diluent.
    pub internal_standard: String,
    /// Sample of each well that goes to the analysis plate, uL.
    pub sample_ul: f64,
    /// Diluent on the analysis plate, uL.
    pub diluent_ul: f64,
}

impl Default for WellRequest {
    fn default() -> WellRequest {
        WellRequest {
            volume_ul: None,
            carrier: None,
            quench: "acetic acid, 1 mol/L in acetonitrile".to_owned(),
            quench_share: 0.5,
            diluent: "acetonitrile/water 1:1".to_owned(),
            internal_standard: "biphenyl, 0.5 mmol/L".to_owned(),
            sample_ul: 2.0,
            diluent_ul: 200.0,
        }
    }
}
