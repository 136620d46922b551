//! Jobs.

use enolattice_engine::{Job, Planning, Terms};
use enolattice_grid::InputError;
use prost_types::Timestamp;

use super::{ConversionError, enums, numbers};
use crate::v1::ErrorReason;
use crate::{bad_field, v1};

impl From<&Job> for v1::Job {
    fn from(job: &Job) -> Self {
        v1::Job {
            job_id: job.job.clone(),
            title: job.title.clone(),
            state: v1::JobState::from(job.state).into(),
            cells: numbers::to_wire(job.cells),
            cells_done: numbers::to_wire(job.cells_done),
            best_yield: job.best_yield,
            campaign_fingerprint: job.campaign_fingerprint.clone(),
            model_fingerprint: job.model_fingerprint.clone(),
            submit_time: Some(timestamp(job.submitted_unix_ms)),
            end_time: job.ended_unix_ms.map(timestamp),
            failure: job.failure.clone(),
            warnings: job.warnings.clone(),
            dry_run: None,
            terms: Some((&job.terms).into()),
            planning: job.planning.as_ref().map(|planning| v1::Planning {
                job_id: planning.job.clone(),
                plan_id: planning.plan.clone().unwrap_or_default(),
            }),
        }
    }
}

impl From<&Terms> for v1::JobTerms {
    fn from(terms: &Terms) -> Self {
        v1::JobTerms {
            requester: terms.requester.clone(),
            priority: terms.priority,
            not_before_time: terms.not_before_unix_ms.map(timestamp),
            deadline_time: terms.deadline_unix_ms.map(timestamp),
        }
    }
}

/// The terms of a request, and the faults of their times.
pub fn terms(message: Option<v1::JobTerms>) -> (Terms, Vec<InputError>) {
    let message = message.unwrap_or_default();
    let mut faults = Vec::new();
    let mut time = |field: &'static str, time: Option<Timestamp>| {
        let time = time?;
        match unix_ms(field, &time) {
            Ok(unix_ms) => Some(unix_ms),
            Err(_) => {
                let (reason, remedy) = ("is no time after 1970", "give a time to come");
                let value = format!("{} s", time.seconds);
                faults.push(bad_field(
                    ErrorReason::ValueOutOfRange,
                    field,
                    value,
                    reason,
                    remedy,
                ));
                None
            }
        }
    };
    let terms = Terms {
        not_before_unix_ms: time("terms.not_before_time", message.not_before_time),
        deadline_unix_ms: time("terms.deadline_time", message.deadline_time),
        requester: message.requester,
        priority: message.priority,
    };
    (terms, faults)
}

impl TryFrom<v1::Job> for Job {
    type Error = ConversionError;

    fn try_from(job: v1::Job) -> Result<Self, ConversionError> {
        let submitted = job.submit_time.ok_or(ConversionError::Missing {
            field: "Job.submit_time",
        })?;
        Ok(Job {
            state: enums::from_wire::<_, v1::JobState>("Job.state", &enums::JOB_STATES, job.state)?,
            cells: numbers::from_wire("Job.cells", job.cells)?,
            cells_done: numbers::from_wire("Job.cells_done", job.cells_done)?,
            submitted_unix_ms: unix_ms("Job.submit_time", &submitted)?,
            ended_unix_ms: optional_unix_ms("Job.end_time", job.end_time)?,
            job: job.job_id,
            title: job.title,
            best_yield: job.best_yield,
            campaign_fingerprint: job.campaign_fingerprint,
            model_fingerprint: job.model_fingerprint,
            failure: job.failure,
            warnings: job.warnings,
            terms: match job.terms {
                None => Terms::default(),
                Some(terms) => Terms {
                    not_before_unix_ms: optional_unix_ms(
                        "Job.terms.not_before_time",
                        terms.not_before_time,
                    )?,
                    deadline_unix_ms: optional_unix_ms(
                        "Job.terms.deadline_time",
                        terms.deadline_time,
                    )?,
                    requester: terms.requester,
                    priority: terms.priority,
                },
            },
            planning: job.planning.map(|planning| Planning {
                job: planning.job_id,
                plan: Some(planning.plan_id).filter(|plan| !plan.is_empty()),
            }),
        })
    }
}

pub(crate) fn timestamp(unix_ms: u64) -> Timestamp {
    Timestamp {
        seconds: numbers::to_wire(unix_ms / 1000),
        nanos: (unix_ms % 1000) as i32 * 1_000_000,
    }
}

fn optional_unix_ms(
    field: &'static str,
    time: Option<Timestamp>,
) -> Result<Option<u64>, ConversionError> {
    time.map(|time| unix_ms(field, &time)).transpose()
}

pub(crate) fn unix_ms(field: &'static str, time: &Timestamp) -> Result<u64, ConversionError> {
    let seconds: u64 = numbers::from_wire(field, time.seconds)?;
    let nanos: u64 = numbers::from_wire(field, time.nanos)?;
    seconds
        .checked_mul(1000)
        .and_then(|ms| ms.checked_add(nanos / 1_000_000))
        .ok_or(ConversionError::OutOfRange {
            field,
            value: time.seconds,
        })
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_engine::JobState;

    fn job() -> Job {
        Job {
            job: "0191f3".into(),
            title: "Aryl acetates".into(),
            state: JobState::DoneWithGaps,
            cells: 1 << 47,
            cells_done: 4097,
            best_yield: Some(0.93),
            campaign_fingerprint: "ab".into(),
            model_fingerprint: "cd".into(),
            submitted_unix_ms: 1_764_583_200_123,
            ended_unix_ms: Some(1_764_583_260_999),
            failure: "disk full".into(),
            warnings: vec!["two substrates are the same".into()],
            planning: Some(Planning {
                job: "0191f2".into(),
                plan: None,
            }),
            terms: Terms {
                requester: "night shift".into(),
                priority: -3,
                not_before_unix_ms: Some(1_764_590_000_000),
                deadline_unix_ms: Some(1_764_600_000_001),
            },
        }
    }

    #[test]
    fn jobs_come_back() {
        let job = job();
        assert_eq!(Job::try_from(v1::Job::from(&job)), Ok(job));
    }

    #[test]
    fn unknown_yield_and_end_stay_unknown() {
        let job = Job {
            best_yield: None,
            ended_unix_ms: None,
            planning: None,
            terms: Terms::default(),
            ..job()
        };
        assert_eq!(Job::try_from(v1::Job::from(&job)), Ok(job));
    }

    #[test]
    fn negative_counts_are_refused() {
        let message = v1::Job {
            cells: -1,
            ..v1::Job::from(&job())
        };
        assert_eq!(
            Job::try_from(message),
            Err(ConversionError::OutOfRange {
                field: "Job.cells",
                value: -1
            })
        );
    }
}
