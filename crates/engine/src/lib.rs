//! The face of enolattice: submit, watch, rank, explain.
//!
//! Used embedded by the command line and behind the server, so that both give the same answer.

mod face;
mod filter;
mod nearest;
mod query;

pub use face::{Engine, EngineConfig, EngineError, Job, JobState, Submission};
pub use query::{
    Axis, CellQuery, ExplainTarget, Order, RankPage, RankQuery, RankedCell, ReagentRow, SiteReport,
};
