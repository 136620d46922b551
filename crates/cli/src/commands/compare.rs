//! `compare`: what two jobs say of the cells that they share.

use clap::Args;

use super::EngineOptions;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::ComparisonDocument;
use crate::output::{print, print_json};
use crate::text::comparison_page;

/// Compare two jobs that have ended: what moved, by how much, and why.
///
/// Cells are matched by their structures, reagents and conditions, not by their numbers; an axis on which each job
/// has one value may differ: two solvents, two temperatures. The same campaign submitted again after an upgrade
/// compares two models.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  \
    enolattice compare BEFORE AFTER --movers 5")]
pub(super) struct Compare {
    /// The first job.
    before: String,
    /// The second job.
    after: String,
    /// How many of the cells that moved most to show, at most 50.
    #[arg(long, value_name = "N", default_value_t = 10)]
    movers: u32,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON.
    #[arg(long)]
    json: bool,
}

impl Compare {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let compared = client.compare(&self.before, &self.after, self.movers).await;
        client.close().await?;
        let compared = compared?;
        if self.json {
            return print_json(&ComparisonDocument::from(compared));
        }
        print(&comparison_page(&compared))
    }
}
