//! The face of enolattice: submit, watch, rank, explain.
//!
//! Used embedded by the command line and behind the server, so that both give the same answer.

mod agreement;
mod comparison;
mod differences;
mod dry_run;
mod engine;
mod error;
mod explain;
mod filter;
mod given;
mod grids;
mod job;
mod kept_plans;
mod models;
mod nearest;
mod open;
mod plan;
mod query;
mod rank;
mod reagents;
mod shared_cells;
mod sites;
mod submit;
mod watch;

pub use agreement::{
    AcidityAgreement, Agreement, CheckedAcidity, CheckedRun, Miss, YieldAgreement,
};
pub use comparison::{AxisOverlap, ComparedCell, Comparison, Difference, Mover};
pub use dry_run::{AxisSize, DryRun, NotCovered};
pub use engine::Engine;
pub use error::EngineError;
pub use job::{Job, JobState, Submission};
pub use kept_plans::PlanSummary;
pub use open::EngineConfig;
pub use query::{
    Axis, CellDescription, CellQuery, ExplainTarget, Order, RankPage, RankQuery, RankedCell,
    ReagentRow, ReasonedSite, SiteReport,
};
pub use sites::element_symbol;
