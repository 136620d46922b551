//! Jobs, blocks, ranking and pages on sled and a journal; plans as files.
//!
//! Layout, durability and what survives what: `docs/storage.md`. The store
//! reads no clock: where time matters it is an argument, in milliseconds since
//! 1970-01-01 UTC. All calls block; async callers use `spawn_blocking`.

mod block;
mod commit;
mod copy;
mod database;
mod error;
mod health;
mod id;
mod index;
mod job;
mod journal;
mod open;
mod open_report;
mod order;
mod orders;
mod plans;
mod rank;
mod rank_order;
mod record;
mod scan;
mod steps;
mod store;
mod token;

pub use commit::{Commit, Progress};
pub use copy::{Copied, Scores, copy_jobs, copy_store, restore};
pub use error::StoreError;
pub use health::{Health, SetAside, look, mend, set_aside_databases};
pub use id::{JobId, PlanId};
pub use job::{Created, JobKind, JobRecord, JobState, NewJob, StateChange, Terms};
pub use open_report::OpenReport;
pub use order::Order;
pub use plans::PlanRecord;
pub use rank::{BestPer, Filter, Position, RankRequest, Ranking};
pub use store::Store;
pub use token::{PageToken, TokenError};
