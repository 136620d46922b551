//! `delete`: a job or a plan that nobody needs any more.

use clap::Args;

use super::EngineOptions;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::output::talk;

/// Delete a job that has ended, with its scores, or a kept plan.
///
/// Nothing brings it back. Plans that were made from the job stay; the space that its scores took is used for the scores
/// to come.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  \
    enolattice delete JOB")]
pub(super) struct Delete {
    /// The job or the plan; `enolattice jobs` and `enolattice plans` list them.
    id: String,
    #[command(flatten)]
    engine: EngineOptions,
}

impl Delete {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let gone = client.delete(&self.id).await;
        client.close().await?;
        gone?;
        talk(&format!("{} is deleted", self.id));
        Ok(())
    }
}
