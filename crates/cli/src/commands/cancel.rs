//! `cancel`: an end to a job.

use clap::Args;

use super::EngineOptions;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::{JobRecord, state_name};
use crate::output::{print, print_json};

/// Cancel a job between two blocks; what was screened can still be ranked.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  \
    enolattice cancel JOB")]
pub(super) struct Cancel {
    /// The job; `enolattice jobs` lists them.
    job: String,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON.
    #[arg(long)]
    json: bool,
}

impl Cancel {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let cancelled = client.cancel(&self.job).await;
        client.close().await?;
        let job = cancelled?;
        if self.json {
            return print_json(&JobRecord::from(job));
        }
        print(&format!("{} {}", job.job, state_name(job.state)))
    }
}
