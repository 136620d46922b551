//! The queue's rules and the compute pool: tokio outside, rayon inside.

mod compute;
mod queue;
mod rules;
mod work;

pub use queue::{Progress, Scheduler, SchedulerConfig, SchedulerError};
pub use rules::{Event, Refused, next_job, transition};
pub use work::{Work, WorkBlock};
