//! `resume`: a held job goes on.

use clap::Args;

use super::EngineOptions;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::{JobRecord, state_name};
use crate::output::{print, print_json};

/// Let a paused job wait for its turn again.
///
/// Without `--server` it waits until an engine works at the directory: `watch` or `serve`.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  \
    enolattice resume JOB")]
pub(super) struct Resume {
    /// The job; `enolattice jobs` lists them.
    job: String,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON.
    #[arg(long)]
    json: bool,
}

impl Resume {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let resumed = client.resume(&self.job).await;
        client.close().await?;
        let job = resumed?;
        if self.json {
            return print_json(&JobRecord::from(job));
        }
        print(&format!("{} {}", job.job, state_name(job.state)))
    }
}
