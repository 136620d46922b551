//! Whose a job is and when it may run: what is checked before a job is queued.

use enolattice_grid::{FaultCode, InputError};
use enolattice_store::{JobRecord, Terms};

use crate::EngineError;
use crate::open::now_unix_ms;

/// Jobs of one requester that have not ended, at most.
pub const MOST_UNFINISHED: usize = 1000;
/// Longest name of a requester, in bytes.
const REQUESTER_BYTES: usize = 64;
/// Priorities reach from its negative to it.
const MOST_PRIORITY: i32 = 100;

/// Every fault of terms.
pub(crate) fn faults(terms: &Terms) -> Vec<InputError> {
    let mut faults = Vec::new();
    let mut fault = |field: &str, value: String, reason: &str, remedy: &str| {
        let code = FaultCode::ValueOutOfRange.name();
        faults.push(InputError::of_field(code, field, value, reason, remedy));
    };
    if terms.requester.len() > REQUESTER_BYTES || terms.requester.chars().any(char::is_control) {
        let shown = terms.requester.chars().take(80).collect();
        let reason = "is longer than 64 bytes or holds control characters";
        fault("terms.requester", shown, reason, "give a short name");
    }
    if !(-MOST_PRIORITY..=MOST_PRIORITY).contains(&terms.priority) {
        let value = terms.priority.to_string();
        let remedy = "give a whole number from -100 to 100; 0 is usual, more is more urgent";
        fault("terms.priority", value, "is outside its range", remedy);
    }
    let Some(deadline) = terms.deadline_unix_ms else {
        return faults;
    };
    if deadline <= terms.not_before_unix_ms.unwrap_or(0) {
        let reason = "is not after the time before which the job is not started";
        let remedy = "give a later deadline, or an earlier start";
        fault("terms.deadline_time", deadline.to_string(), reason, remedy);
    } else if deadline <= now_unix_ms() {
        let remedy = "give a time to come, in milliseconds since 1970-01-01 UTC";
        fault(
            "terms.deadline_time",
            deadline.to_string(),
            "has passed",
            remedy,
        );
    }
    faults
}

/// Refuses a job where its requester has too many that have not ended; a request that was made before is let through.
pub(crate) fn room(jobs: &[JobRecord], terms: &Terms, request_id: &str) -> Result<(), EngineError> {
    let known = !request_id.is_empty() && jobs.iter().any(|job| job.request_id == request_id);
    let unfinished = jobs
        .iter()
        .filter(|job| !job.state.is_ended() && job.terms.requester == terms.requester)
        .count();
    match known || unfinished < MOST_UNFINISHED {
        true => Ok(()),
        false => Err(EngineError::QueueFull {
            requester: terms.requester.clone(),
            most: MOST_UNFINISHED,
        }),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn fields(terms: Terms) -> Vec<String> {
        let faults = faults(&terms);
        faults
            .iter()
            .map(|fault| fault.place.field.clone())
            .collect()
    }

    #[test]
    fn every_fault_of_terms_is_told() {
        assert_eq!(fields(Terms::default()), Vec::<String>::new());
        let hour = 3_600_000;
        let all = Terms {
            requester: "line\nbreak".into(),
            priority: 101,
            not_before_unix_ms: Some(now_unix_ms() + 2 * hour),
            deadline_unix_ms: Some(now_unix_ms() + hour),
        };
        let told = fields(all.clone());
        assert_eq!(told.len(), 3, "{told:?}");
        let past = Terms {
            deadline_unix_ms: Some(now_unix_ms() - 1),
            ..Terms::default()
        };
        assert_eq!(fields(past).len(), 1);
        let night = Terms {
            requester: "\u{e9}lise".into(),
            priority: -100,
            deadline_unix_ms: Some(now_unix_ms() + 3 * hour),
            ..all
        };
        assert_eq!(fields(night), Vec::<String>::new());
    }
}
