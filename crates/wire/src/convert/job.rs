//! Jobs.

use enolattice_engine::Job;
use prost_types::Timestamp;

use super::{ConversionError, enums, numbers};
use crate::v1;

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
        }
    }
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
            ended_unix_ms: match job.end_time {
                Some(time) => Some(unix_ms("Job.end_time", &time)?),
                None => None,
            },
            job: job.job_id,
            title: job.title,
            best_yield: job.best_yield,
            campaign_fingerprint: job.campaign_fingerprint,
            model_fingerprint: job.model_fingerprint,
            failure: job.failure,
            warnings: job.warnings,
        })
    }
}

pub(crate) fn timestamp(unix_ms: u64) -> Timestamp {
    Timestamp {
        seconds: numbers::to_wire(unix_ms / 1000),
        nanos: (unix_ms % 1000) as i32 * 1_000_000,
    }
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
