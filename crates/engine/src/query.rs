//! What can be asked of an engine and what it answers.

use enolattice_grid::MeasuredYield;
use enolattice_model::{AcidSite, Channel, SiteReasons};

use crate::Axis;

/// Order of a ranking; ties always by cell, ascending; unknown last.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash)]
pub enum Order {
    /// Expected yield, descending.
    #[default]
    ExpectedYield,
    /// Probability of a hit, descending.
    PHit,
    /// Selectivity, descending.
    Selectivity,
    /// Feasibility, descending.
    Feasibility,
}

/// A question for a page of a ranking.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct RankQuery {
    /// Job.
    pub job: String,
    /// Order.
    pub order: Order,
    /// Filter (AIP-160 subset); empty: all cells.
    pub filter: String,
    /// Rows wanted.
    pub page_size: u32,
    /// Token of the page before; empty: the first page.
    pub page_token: String,
    /// Rows to skip before the page.
    pub skip: u64,
    /// Only the best cell of each value of this axis.
    pub best_per: Option<Axis>,
}

/// A ranked cell.
#[derive(Clone, Debug, PartialEq)]
pub struct RankedCell {
    /// Rank, from 1.
    pub rank: u64,
    /// Cell number.
    pub cell: u64,
    /// Substrate's name.
    pub substrate: String,
    /// Base's name.
    pub base: String,
    /// Electrophile's name.
    pub electrophile: String,
    /// Solvent's name.
    pub solvent: String,
    /// Additive's name; none without one.
    pub additive: Option<String>,
    /// Temperature, °C.
    pub temperature_c: f64,
    /// Temperature of the deprotonation, °C.
    pub formation_temperature_c: f64,
    /// Equivalents of base.
    pub base_equiv: f64,
    /// Equivalents of electrophile.
    pub electrophile_equiv: f64,
    /// Equivalents of additive; none without one.
    pub additive_equiv: Option<f64>,
    /// Concentration, mol/L.
    pub concentration_m: f64,
    /// Time, h.
    pub time_h: f64,
    /// Dosing time, min.
    pub dosing_min: f64,
    /// Order of addition.
    pub addition: String,
    /// Expected yield.
    pub expected_yield: Option<f64>,
    /// Probability of a hit.
    pub p_hit: Option<f64>,
    /// Feasibility.
    pub feasibility: Option<f64>,
    /// Selectivity.
    pub selectivity: Option<f64>,
    /// Largest loss.
    pub largest_loss: Option<Channel>,
    /// Names of the categories of caution.
    pub cautions: Vec<String>,
    /// Severest caution: `note`, `warning`, `stop`; none without cautions.
    pub severity: Option<String>,
    /// Yield that the laboratory has measured; none where it gave none.
    pub measured_yield: Option<f64>,
}

/// A page of a ranking.
#[derive(Clone, Debug, PartialEq)]
pub struct RankPage {
    /// Rows.
    pub rows: Vec<RankedCell>,
    /// Token of the next page; empty at the end.
    pub next_page_token: String,
    /// Cells that pass the filter in this snapshot.
    pub total: u64,
    /// Cells screened in this snapshot.
    pub cells_done: u64,
}

/// A cell given by names, without a job.
#[derive(Clone, Debug, PartialEq)]
pub struct CellQuery {
    /// Substrate: SMILES.
    pub substrate: String,
    /// Base: library name.
    pub base: String,
    /// Electrophile: library name or SMILES.
    pub electrophile: String,
    /// Solvent or mixture: library name.
    pub solvent: String,
    /// Additive: library name; none without one.
    pub additive: Option<String>,
    /// Temperature, °C.
    pub temperature_c: f64,
    /// Temperature of the deprotonation; `None`: that of the reaction.
    pub formation_temperature_c: Option<f64>,
    /// Equivalents of base; default 1.1.
    pub base_equiv: f64,
    /// Equivalents of electrophile; default 1.2.
    pub electrophile_equiv: f64,
    /// Equivalents of additive; `None`: 1.1.
    pub additive_equiv: Option<f64>,
    /// Time, h; default 16.
    pub time_h: f64,
    /// Dosing time, min; default 10.
    pub dosing_min: f64,
    /// Concentration, mol/L; default 0.2.
    pub concentration_m: f64,
    /// Order of addition by name; `None`: usual for the base.
    pub addition: Option<String>,
    /// Yield that makes a hit; default 0.5.
    pub yield_at_least: f64,
}

/// Which cell to explain.
#[derive(Clone, Debug, PartialEq)]
pub enum ExplainTarget {
    /// A cell of a job.
    OfJob {
        /// Job.
        job: String,
        /// Cell number.
        cell: u64,
    },
    /// A cell given by names.
    Given(CellQuery),
}

/// What a cell is made of, every default filled in.
#[derive(Clone, Debug, PartialEq)]
pub struct CellDescription {
    /// Number in its job; none where the cell was given by names.
    pub cell: Option<u64>,
    /// Substrate's name.
    pub substrate: String,
    /// Substrate's SMILES as given; sites count its atoms.
    pub substrate_smiles: String,
    /// Base's name.
    pub base: String,
    /// Electrophile's name.
    pub electrophile: String,
    /// Electrophile's SMILES as given.
    pub electrophile_smiles: String,
    /// Solvent's name.
    pub solvent: String,
    /// Additive's name; none without one.
    pub additive: Option<String>,
    /// Temperature, °C.
    pub temperature_c: f64,
    /// Temperature of the deprotonation, °C.
    pub formation_temperature_c: f64,
    /// Equivalents of base.
    pub base_equiv: f64,
    /// Equivalents of electrophile.
    pub electrophile_equiv: f64,
    /// Equivalents of additive; none without one.
    pub additive_equiv: Option<f64>,
    /// Concentration, mol/L.
    pub concentration_m: f64,
    /// Time, h.
    pub time_h: f64,
    /// Dosing time, min.
    pub dosing_min: f64,
    /// Order of addition.
    pub addition: String,
    /// What the laboratory has measured of it; none where it gave nothing.
    pub measured: Option<MeasuredYield>,
}

/// Acidic sites of a molecule.
#[derive(Clone, Debug)]
pub struct SiteReport {
    /// SMILES as given.
    pub smiles: String,
    /// Sites, most acidic first, with their pKa in DMSO.
    pub sites: Vec<ReasonedSite>,
}

/// An acidic site and why it has the pKa that it has.
#[derive(Clone, Debug)]
pub struct ReasonedSite {
    /// The site.
    pub site: AcidSite,
    /// Terms of the estimate and measured neighbours; empty for a measured site.
    pub reasons: SiteReasons,
}

/// A reagent of the library.
#[derive(Clone, Debug, PartialEq)]
pub struct ReagentRow {
    /// `base`, `solvent`, `electrophile` or `additive`.
    pub kind: String,
    /// Name.
    pub name: String,
    /// Other names.
    pub synonyms: Vec<String>,
    /// CAS number.
    pub cas: String,
    /// SMILES.
    pub smiles: String,
    /// What the model knows of it, in a line (pKa of the conjugate acid, permittivity, ...).
    pub facts: String,
    /// GHS H-codes; empty: unknown.
    pub h_codes: Vec<String>,
}
