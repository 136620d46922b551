//! The rules of the queue: pure functions, no clock, no disk.

use enolattice_store::{JobId, JobRecord, JobState};

/// What happens to a job.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Event {
    /// Its turn has come.
    Start,
    /// The engine stopped before the job ended.
    Interrupt,
    /// The user gave it up.
    Cancel,
    /// All blocks are committed.
    Finish,
    /// Every block was tried, some failed for good.
    FinishWithGaps,
    /// It cannot go on.
    Fail,
}

impl Event {
    /// All events.
    pub const ALL: [Event; 6] = [
        Event::Start,
        Event::Interrupt,
        Event::Cancel,
        Event::Finish,
        Event::FinishWithGaps,
        Event::Fail,
    ];

    fn verb(self) -> &'static str {
        match self {
            Event::Start => "start",
            Event::Interrupt => "be interrupted",
            Event::Cancel => "be cancelled",
            Event::Finish => "finish",
            Event::FinishWithGaps => "finish with gaps",
            Event::Fail => "fail",
        }
    }
}

/// A job's state does not allow the event.
#[derive(Clone, Copy, Debug, PartialEq, Eq, thiserror::Error)]
#[error("a job that is {state} cannot {}", event.verb())]
pub struct Refused {
    /// State.
    pub state: JobState,
    /// Event.
    pub event: Event,
}

/// The state after an event. An ended job stays as it is. Nothing pauses a job yet; a paused
/// one can only be given up.
///
/// # Errors
/// [`Refused`] where the state does not allow the event.
pub fn transition(state: JobState, event: Event) -> Result<JobState, Refused> {
    match (state, event) {
        (JobState::Queued, Event::Start) => Ok(JobState::Running),
        (JobState::Running, Event::Interrupt) => Ok(JobState::Queued),
        (JobState::Running, Event::Finish) => Ok(JobState::Done),
        (JobState::Running, Event::FinishWithGaps) => Ok(JobState::DoneWithGaps),
        (JobState::Running, Event::Fail) => Ok(JobState::Failed),
        (JobState::Queued | JobState::Running | JobState::Paused, Event::Cancel) => {
            Ok(JobState::Cancelled)
        }
        _ => Err(Refused { state, event }),
    }
}

/// The job to run next: of those that wait, the one submitted first.
pub fn next_job<'a>(jobs: impl IntoIterator<Item = &'a JobRecord>) -> Option<JobId> {
    let waiting = jobs.into_iter().filter(|job| job.state == JobState::Queued);
    waiting.map(|job| job.id).min()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The table a person would draw: rows are states, columns the events in their order.
    #[test]
    fn every_pair_of_state_and_event_is_settled() {
        let table = [
            (
                JobState::Queued,
                "running    -       cancelled -    -              -",
            ),
            (
                JobState::Running,
                "-          queued  cancelled done done-with-gaps failed",
            ),
            (
                JobState::Paused,
                "-          -       cancelled -    -              -",
            ),
            (
                JobState::Done,
                "-          -       -         -    -              -",
            ),
            (
                JobState::DoneWithGaps,
                "-          -       -         -    -              -",
            ),
            (
                JobState::Failed,
                "-          -       -         -    -              -",
            ),
            (
                JobState::Cancelled,
                "-          -       -         -    -              -",
            ),
        ];
        assert_eq!(table.map(|(state, _)| state), JobState::ALL);
        for (state, row) in table {
            let cells: Vec<&str> = row.split_whitespace().collect();
            assert_eq!(cells.len(), Event::ALL.len());
            for (event, cell) in Event::ALL.into_iter().zip(cells) {
                let expected =
                    JobState::from_name(&cell.replace('-', " ")).ok_or(Refused { state, event });
                assert_eq!(transition(state, event), expected);
            }
        }
    }

    #[test]
    fn a_refusal_reads_as_a_sentence() {
        let refused = transition(JobState::Done, Event::Cancel).unwrap_err();
        assert_eq!(
            refused.to_string(),
            "a job that is done cannot be cancelled"
        );
    }
}
