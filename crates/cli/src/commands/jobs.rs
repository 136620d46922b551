//! `jobs`: what is in the queue and what was.

use clap::Args;

use super::EngineOptions;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::JobRecord;
use crate::output::{print, print_json, talk};
use crate::text::job_table;

/// List the jobs, newest first.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice jobs\n  \
    enolattice jobs --json")]
pub(super) struct Jobs {
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON: a list.
    #[arg(long)]
    json: bool,
}

impl Jobs {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let jobs = client.jobs().await;
        client.close().await?;
        let jobs = jobs?;
        if self.json {
            return print_json(&jobs.into_iter().map(JobRecord::from).collect::<Vec<_>>());
        }
        if jobs.is_empty() {
            talk("there are no jobs; `enolattice screen FILE` makes one");
            return Ok(());
        }
        print(&job_table(&jobs))
    }
}
