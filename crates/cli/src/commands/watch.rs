//! `watch`: a job to its end.

use clap::Args;

use super::EngineOptions;
use super::following::{expect_done, follow};
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::{JobRecord, state_name};
use crate::output::{print, print_json_line};
use crate::text::{count, percent};

/// Follow a job to its end; without `--server` also work at it.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  \
    enolattice watch JOB")]
pub(super) struct Watch {
    /// The job; `enolattice jobs` lists them.
    job: String,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON: the job at each change, one a line.
    #[arg(long)]
    json: bool,
}

impl Watch {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Work).await?;
        let each = |job: &_| {
            if self.json {
                print_json_line(&JobRecord::from(Clone::clone(job)))
            } else {
                Ok(())
            }
        };
        let ended = follow(&client, &self.job, &self.engine, each).await;
        client.close().await?;
        let job = ended?;
        if !self.json && job.planning.is_some() {
            print(&format!("{} {}", job.job, state_name(job.state)))?;
        } else if !self.json {
            print(&format!(
                "{} {}: {} of {} cells, best {}",
                job.job,
                state_name(job.state),
                count(job.cells_done),
                count(job.cells),
                percent(job.best_yield)
            ))?;
        }
        expect_done(&job)
    }
}
