//! The queue's rules and the compute pool: tokio outside, rayon inside.

mod compute;
mod desk;
mod rules;
mod scheduler;
mod work;

pub use rules::{Event, Refused, next_job, transition};
pub use scheduler::{MakeWork, Notify, Progress, Scheduler, SchedulerConfig, SchedulerError};
pub use work::{Work, WorkBlock};
