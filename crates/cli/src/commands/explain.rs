//! `explain`: everything about one cell.

use clap::Args;
use enolattice_engine::{CellQuery, ExplainTarget};

use super::EngineOptions;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::ExplanationDocument;
use crate::output::{print, print_json};
use crate::text::explanation_page;

/// Explain one cell: every number with its source, what limits it, what a change would bring.
///
/// Either a cell of a job, or one given by its reagents (library names or SMILES), which needs no job.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice explain JOB 1234\n  \
    enolattice explain --substrate 'CC1CCCCC1=O' --base LDA --electrophile MeI --solvent THF --temperature-c -78")]
pub(super) struct Explain {
    /// The job; `enolattice jobs` lists them.
    #[arg(requires = "cell")]
    job: Option<String>,
    /// Number of the cell.
    cell: Option<u64>,
    #[command(flatten)]
    given: Given,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON.
    #[arg(long)]
    json: bool,
}

/// A cell given by its reagents.
#[derive(Debug, Args)]
struct Given {
    /// SMILES of the substrate.
    #[arg(
        long,
        value_name = "SMILES",
        conflicts_with = "job",
        required_unless_present = "job"
    )]
    substrate: Option<String>,
    /// Base.
    #[arg(
        long,
        value_name = "NAME",
        conflicts_with = "job",
        required_unless_present = "job"
    )]
    base: Option<String>,
    /// Electrophile, by name or SMILES.
    #[arg(
        long,
        value_name = "NAME",
        conflicts_with = "job",
        required_unless_present = "job"
    )]
    electrophile: Option<String>,
    /// Solvent or mixture, e.g. `THF/DMF 4:1`.
    #[arg(
        long,
        value_name = "NAME",
        conflicts_with = "job",
        required_unless_present = "job"
    )]
    solvent: Option<String>,
    /// Additive; default: none.
    #[arg(long, value_name = "NAME", conflicts_with = "job")]
    additive: Option<String>,
    /// Temperature of the reaction, °C.
    #[arg(
        long,
        value_name = "T",
        conflicts_with = "job",
        required_unless_present = "job",
        allow_negative_numbers = true
    )]
    temperature_c: Option<f64>,
    /// Temperature of the deprotonation, °C; default: that of the reaction.
    #[arg(
        long,
        value_name = "T",
        conflicts_with = "job",
        allow_negative_numbers = true
    )]
    formation_temperature_c: Option<f64>,
    /// Base, equivalents.
    #[arg(
        long,
        value_name = "N",
        conflicts_with = "job",
        default_value_t = 1.1,
        allow_negative_numbers = true
    )]
    base_equiv: f64,
    /// Electrophile, equivalents.
    #[arg(
        long,
        value_name = "N",
        conflicts_with = "job",
        default_value_t = 1.2,
        allow_negative_numbers = true
    )]
    electrophile_equiv: f64,
    /// Additive, equivalents; default: 1.1.
    #[arg(
        long,
        value_name = "N",
        requires = "additive",
        allow_negative_numbers = true
    )]
    additive_equiv: Option<f64>,
    /// Time after the electrophile, h.
    #[arg(
        long,
        value_name = "T",
        conflicts_with = "job",
        default_value_t = 16.0,
        allow_negative_numbers = true
    )]
    time_h: f64,
    /// Time over which the electrophile is added, min.
    #[arg(
        long,
        value_name = "T",
        conflicts_with = "job",
        default_value_t = 10.0,
        allow_negative_numbers = true
    )]
    dosing_min: f64,
    /// Substrate, mol/L.
    #[arg(
        long,
        value_name = "C",
        conflicts_with = "job",
        default_value_t = 0.2,
        allow_negative_numbers = true
    )]
    concentration_m: f64,
    /// Order of addition; default: the usual one of the base.
    #[arg(long, value_name = "ORDER", conflicts_with = "job")]
    addition: Option<String>,
    /// Yield that makes a hit, 0 to 1.
    #[arg(
        long,
        value_name = "Y",
        conflicts_with = "job",
        default_value_t = 0.5,
        allow_negative_numbers = true
    )]
    yield_at_least: f64,
}

impl Explain {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let need = if self.job.is_some() {
            Need::Jobs
        } else {
            Need::Chemistry
        };
        let target = match (self.job, self.cell) {
            (Some(job), Some(cell)) => ExplainTarget::OfJob { job, cell },
            _ => ExplainTarget::Given(self.given.query()),
        };
        let client = Client::open(&self.engine, need).await?;
        let explained = client.explain(target).await;
        client.close().await?;
        let (cell, explanation) = explained?;
        if self.json {
            return print_json(&ExplanationDocument::new(cell, explanation));
        }
        print(&explanation_page(&cell, &explanation))
    }
}

impl Given {
    fn query(self) -> CellQuery {
        CellQuery {
            substrate: self.substrate.unwrap_or_default(),
            base: self.base.unwrap_or_default(),
            electrophile: self.electrophile.unwrap_or_default(),
            solvent: self.solvent.unwrap_or_default(),
            additive: self.additive,
            temperature_c: self.temperature_c.unwrap_or_default(),
            formation_temperature_c: self.formation_temperature_c,
            base_equiv: self.base_equiv,
            electrophile_equiv: self.electrophile_equiv,
            additive_equiv: self.additive_equiv,
            time_h: self.time_h,
            dosing_min: self.dosing_min,
            concentration_m: self.concentration_m,
            addition: self.addition,
            yield_at_least: self.yield_at_least,
        }
    }
}
