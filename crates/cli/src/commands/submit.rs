//! `submit`: a campaign into the queue.

use std::path::PathBuf;

use clap::Args;
use enolattice_engine::Submission;

use super::EngineOptions;
use super::terms::TermsOptions;
use crate::campaign_file::{read_campaign, sound};
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::JobRecord;
use crate::output::{print, print_json, talk};
use crate::text::count;

/// Queue a campaign and print the id of its job.
///
/// When this returns, the job survives a power cut. Without `--server` it waits until an
/// engine works at the directory: `watch` or `serve`.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice submit campaign.toml --server http://127.0.0.1:7413\n  \
    enolattice submit large.toml --not-before 8h --priority -5\n  \
    enolattice submit campaign.toml && enolattice watch JOB")]
pub(super) struct Submit {
    /// The campaign, a TOML file.
    file: PathBuf,
    /// Your id of this request: sent again, it gives the same job.
    #[arg(long, value_name = "ID", default_value = "", hide_default_value = true)]
    request_id: String,
    /// Check the campaign; queue nothing.
    #[arg(long)]
    validate_only: bool,
    #[command(flatten)]
    engine: EngineOptions,
    #[command(flatten)]
    terms: TermsOptions,
    /// Print JSON.
    #[arg(long)]
    json: bool,
}

impl Submit {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let reading = read_campaign(&self.file)?;
        let checks_only = self.validate_only || !reading.faults.is_empty();
        let need = if checks_only {
            Need::Chemistry
        } else {
            Need::Jobs
        };
        let client = Client::open(&self.engine, need).await?;
        let campaign = sound(reading, &client).await?;
        let submission = Submission {
            campaign,
            request_id: self.request_id,
            validate_only: self.validate_only,
            terms: self.terms.terms(),
        };
        let submitted = client.submit(submission).await;
        client.close().await?;
        let job = submitted?;
        job.warnings
            .iter()
            .for_each(|warning| talk(&format!("note: {warning}")));
        if self.validate_only {
            talk(&format!(
                "the campaign is valid: {} cells; nothing was queued",
                count(job.cells)
            ));
        } else {
            talk(&format!(
                "queued {} cells; next: enolattice watch {}{}",
                count(job.cells),
                job.job,
                self.engine.repeated()
            ));
        }
        match (self.json, self.validate_only) {
            (true, _) => print_json(&JobRecord::from(job)),
            (false, false) => print(&job.job),
            (false, true) => Ok(()),
        }
    }
}
