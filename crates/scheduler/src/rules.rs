//! The rules of a job's state: pure functions, no clock, no disk.

use enolattice_store::JobState;

/// What happens to a job.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Event {
    /// Its turn has come.
    Start,
    /// The engine stopped before the job ended.
    Interrupt,
    /// The user holds it.
    Pause,
    /// The user lets it go on.
    Resume,
    /// The user gave it up.
    Cancel,
    /// All its work is kept.
    Finish,
    /// Every block was tried, some failed for good.
    FinishWithGaps,
    /// It cannot go on, or its deadline passed.
    Fail,
}

impl Event {
    /// All events.
    pub const ALL: [Event; 8] = [
        Event::Start,
        Event::Interrupt,
        Event::Pause,
        Event::Resume,
        Event::Cancel,
        Event::Finish,
        Event::FinishWithGaps,
        Event::Fail,
    ];

    fn verb(self) -> &'static str {
        match self {
            Event::Start => "start",
            Event::Interrupt => "be interrupted",
            Event::Pause => "be paused",
            Event::Resume => "be resumed",
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

/// The state after an event. An ended job stays as it is.
///
/// # Errors
/// [`Refused`] where the state does not allow the event.
pub fn transition(state: JobState, event: Event) -> Result<JobState, Refused> {
    use JobState::{Cancelled, Done, DoneWithGaps, Failed, Paused, Queued, Running};
    match (state, event) {
        (Queued, Event::Start) => Ok(Running),
        (Running, Event::Interrupt) | (Paused, Event::Resume) => Ok(Queued),
        (Queued | Running, Event::Pause) => Ok(Paused),
        (Running, Event::Finish) => Ok(Done),
        (Running, Event::FinishWithGaps) => Ok(DoneWithGaps),
        (Queued | Running | Paused, Event::Fail) => Ok(Failed),
        (Queued | Running | Paused, Event::Cancel) => Ok(Cancelled),
        _ => Err(Refused { state, event }),
    }
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
                "running -      paused -      cancelled -    -              failed",
            ),
            (
                JobState::Running,
                "-       queued paused -      cancelled done done-with-gaps failed",
            ),
            (
                JobState::Paused,
                "-       -      -      queued cancelled -    -              failed",
            ),
            (JobState::Done, "- - - - - - - -"),
            (JobState::DoneWithGaps, "- - - - - - - -"),
            (JobState::Failed, "- - - - - - - -"),
            (JobState::Cancelled, "- - - - - - - -"),
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
