//! The queue's rules and the compute pool: tokio outside, rayon inside.

mod compute;
mod desk;
mod rules;
mod scheduler;
mod served_job;
mod turn;
mod work;

pub use rules::{Event, Refused, transition};
pub use scheduler::{MakeWork, Notify, Progress, Scheduler, SchedulerConfig, SchedulerError};
pub use turn::{Candidate, Served};
pub use work::{Piece, Task, Work, WorkBlock};
