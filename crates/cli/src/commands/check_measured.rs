//! `check-measured`: what a laboratory has measured, held against the model.

use std::path::PathBuf;

use clap::Args;
use enolattice_grid::{CampaignSpec, Reading};

use super::EngineOptions;
use crate::campaign_file::{named_files, read_campaign, sound};
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::AgreementDocument;
use crate::output::{print, print_json};
use crate::text::agreement_page;

/// Hold measured yields and pKa against the model: order, error, calibration, and the worst explained.
///
/// A FILE of yields has the columns of a campaign's measured yields: substrate (SMILES, or a name that
/// the campaign or a file of pKa knows), base, electrophile, solvent, temperature_c, yield_fraction, and
/// any other condition. Needs no job and no data directory.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice check-measured yields.csv\n  \
    enolattice check-measured yields.csv --campaign campaign.toml --misses 3")]
pub(super) struct CheckMeasured {
    /// Measured yields (CSV); may be several.
    #[arg(required_unless_present_any = ["pka", "campaign"])]
    file: Vec<PathBuf>,
    /// Measured pKa (CSV): name, smiles, pka_dmso and, where known, pka_sigma; may be given several times.
    #[arg(long, value_name = "FILE")]
    pka: Vec<PathBuf>,
    /// A campaign: its measured yields, names, own pKa, library, target, and the conditions that a row leaves out.
    #[arg(long, value_name = "FILE")]
    campaign: Option<PathBuf>,
    /// Yield that makes a hit, 0 to 1 [default: that of the campaign, else 0.5].
    #[arg(long, value_name = "Y", allow_negative_numbers = true)]
    yield_at_least: Option<f64>,
    /// How many of the worst to explain, at most 50.
    #[arg(long, value_name = "N", default_value_t = 5)]
    misses: u32,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON.
    #[arg(long)]
    json: bool,
}

impl CheckMeasured {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let reading = self.reading()?;
        let client = Client::open(&self.engine, Need::Chemistry).await?;
        let spec = sound(reading, &client).await?;
        let agreement = client.check_measured(spec.clone(), self.misses).await;
        client.close().await?;
        let agreement = agreement?;
        if self.json {
            return print_json(&AgreementDocument::new(agreement, &spec));
        }
        print(&agreement_page(&agreement, &rows(&spec)))
    }

    fn reading(&self) -> Result<Reading, Fault> {
        let mut reading = match &self.campaign {
            Some(file) => read_campaign(file)?,
            None => Reading::default(),
        };
        let (yields, unread) = named_files("FILE", &self.file);
        reading.faults.extend(unread);
        let (acidities, unread) = named_files("--pka", &self.pka);
        reading.faults.extend(unread);
        reading.add_measured(&yields, &acidities);
        if self.yield_at_least.is_some() {
            reading.spec.target.yield_at_least = self.yield_at_least;
        }
        Ok(reading)
    }
}

/// Where each measured yield was written, as `file:line`.
fn rows(spec: &CampaignSpec) -> Vec<String> {
    let place = spec.measured.iter().map(|row| &row.place);
    place
        .map(|place| format!("{}:{}", place.file, place.line))
        .collect()
}
