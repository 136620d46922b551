//! The stream of a job's changes.

use enolattice_engine::Job;
use enolattice_wire::v1;
use tokio::sync::{mpsc, watch};
use tokio_stream::wrappers::ReceiverStream;
use tonic::Status;

use crate::status::Refusal;

type Message = Result<v1::WatchJobResponse, Status>;

/// The present state, then changes, to the final state.
///
/// A reader that is slower than the job gets the newest state, never a queue
/// of old ones.
pub(crate) fn changes(
    states: watch::Receiver<Job>,
    stopping: watch::Receiver<bool>,
) -> ReceiverStream<Message> {
    let (sender, receiver) = mpsc::channel(1);
    tokio::spawn(async move {
        let mut stopping = stopping;
        tokio::select! {
            () = forward(states, &sender) => {}
            _ = stopping.wait_for(|stopping| *stopping) => stopped(&sender),
        }
    });
    ReceiverStream::new(receiver)
}

async fn forward(mut states: watch::Receiver<Job>, sender: &mpsc::Sender<Message>) {
    loop {
        let job = states.borrow_and_update().clone();
        let message = v1::WatchJobResponse {
            job: Some(v1::Job::from(&job)),
        };
        if sender.send(Ok(message)).await.is_err() || job.state.is_ended() {
            return;
        }
        tokio::select! {
            changed = states.changed() => if changed.is_err() {
                return stopped(sender);
            },
            () = sender.closed() => return,
        }
    }
}

/// Says that the service stops; a reader that is stalled learns it from the closed connection.
fn stopped(sender: &mpsc::Sender<Message>) {
    let _ = sender.try_send(Err(Refusal::ShuttingDown.status(&Default::default())));
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_engine::JobState;
    use tokio_stream::StreamExt;

    fn job(state: JobState, cells_done: u64) -> Job {
        Job {
            job: "j".into(),
            title: String::new(),
            state,
            cells: 3,
            cells_done,
            best_yield: None,
            campaign_fingerprint: String::new(),
            model_fingerprint: String::new(),
            submitted_unix_ms: 0,
            ended_unix_ms: None,
            failure: String::new(),
            warnings: vec![],
            planning: None,
            terms: Default::default(),
        }
    }

    async fn done(stream: &mut ReceiverStream<Message>) -> Option<i64> {
        let message = stream.next().await?.expect("not an error");
        message.job.map(|job| job.cells_done)
    }

    #[tokio::test]
    async fn the_present_state_comes_first_and_the_final_one_last() {
        let (change, states) = watch::channel(job(JobState::Running, 1));
        let (_stop, stopping) = watch::channel(false);
        let mut stream = changes(states, stopping);
        assert_eq!(done(&mut stream).await, Some(1));
        change.send_replace(job(JobState::Running, 2));
        assert_eq!(done(&mut stream).await, Some(2));
        change.send_replace(job(JobState::Done, 3));
        assert_eq!(done(&mut stream).await, Some(3));
        assert_eq!(done(&mut stream).await, None);
    }

    #[tokio::test]
    async fn a_job_that_has_ended_is_one_message() {
        let (_change, states) = watch::channel(job(JobState::Cancelled, 1));
        let (_stop, stopping) = watch::channel(false);
        let mut stream = changes(states, stopping);
        assert_eq!(done(&mut stream).await, Some(1));
        assert_eq!(done(&mut stream).await, None);
    }

    #[tokio::test]
    async fn a_stop_ends_the_stream_with_an_error() {
        let (_change, states) = watch::channel(job(JobState::Running, 1));
        let (stop, stopping) = watch::channel(false);
        let mut stream = changes(states, stopping);
        assert_eq!(done(&mut stream).await, Some(1));
        stop.send_replace(true);
        let status = stream
            .next()
            .await
            .expect("a message")
            .expect_err("an error");
        assert_eq!(status.code(), tonic::Code::Unavailable);
        assert!(stream.next().await.is_none());
    }
}
