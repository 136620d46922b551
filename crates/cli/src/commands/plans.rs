//! `plans`: what has been planned.

use clap::Args;

use super::EngineOptions;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::PlanRecord;
use crate::output::{print, print_json, talk};
use crate::text::plan_table;

/// List the plans that are kept, newest first.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice plans\n  \
    enolattice plans JOB")]
pub(super) struct Plans {
    /// Only plans of this job.
    job: Option<String>,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON: a list.
    #[arg(long)]
    json: bool,
}

impl Plans {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let plans = client.plans(self.job.as_deref()).await;
        client.close().await?;
        let plans = plans?;
        if self.json {
            return print_json(&plans.into_iter().map(PlanRecord::from).collect::<Vec<_>>());
        }
        if plans.is_empty() {
            talk("there are no plans; `enolattice plan JOB` makes one");
            return Ok(());
        }
        print(&plan_table(&plans))
    }
}
