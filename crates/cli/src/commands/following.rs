//! Following a job to its end.

use enolattice_engine::{Job, JobState};

use super::EngineOptions;
use crate::client::Client;
use crate::fault::Fault;
use crate::progress::Progress;

/// Follows a job to its end and tells each change; stops at ctrl-c.
pub(super) async fn follow(
    client: &Client,
    job: &str,
    engine: &EngineOptions,
    mut each: impl FnMut(&Job) -> Result<(), Fault>,
) -> Result<Job, Fault> {
    let mut changes = client.watch(job).await?;
    let mut progress = Progress::new();
    let mut last: Option<Job> = None;
    loop {
        let change = tokio::select! {
            change = changes.next() => change?,
            _ = tokio::signal::ctrl_c() => {
                progress.end();
                return Err(Fault::Job(format!("stopped watching; job `{job}` is kept: `enolattice watch {job}{}` goes on", engine.repeated())));
            }
        };
        match (change, last) {
            (Some(job), _) => {
                each(&job)?;
                progress.show(&job);
                last = Some(job);
            }
            (None, Some(job)) => {
                progress.end();
                return Ok(job);
            }
            (None, None) => return Err(Fault::service(format!("nothing is told of job `{job}`"))),
        }
    }
}

/// A fault unless the job is done.
pub(super) fn expect_done(job: &Job) -> Result<(), Fault> {
    let id = &job.job;
    match job.state {
        JobState::Done => Ok(()),
        JobState::DoneWithGaps => Err(Fault::Job(format!(
            "job `{id}` has gaps, its other cells can be ranked: {}",
            job.failure
        ))),
        JobState::Failed => Err(Fault::Job(format!("job `{id}` failed: {}", job.failure))),
        JobState::Cancelled => Err(Fault::Job(format!("job `{id}` was cancelled"))),
        JobState::Queued | JobState::Running | JobState::Paused => Err(Fault::Service(format!(
            "the engine stopped before job `{id}` ended; the job is kept and goes on when it is back"
        ))),
    }
}
