//! `pause`: a job that is held.

use clap::Args;

use super::EngineOptions;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::{JobRecord, state_name};
use crate::output::{print, print_json};

/// Hold a job between two blocks; what was screened can be ranked, `resume` lets it go on.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  \
    enolattice pause JOB")]
pub(super) struct Pause {
    /// The job; `enolattice jobs` lists them.
    job: String,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON.
    #[arg(long)]
    json: bool,
}

impl Pause {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let paused = client.pause(&self.job).await;
        client.close().await?;
        let job = paused?;
        if self.json {
            return print_json(&JobRecord::from(job));
        }
        print(&format!("{} {}", job.job, state_name(job.state)))
    }
}
