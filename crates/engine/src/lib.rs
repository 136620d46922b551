//! The face of enolattice: submit, watch, rank, explain.
//!
//! Used embedded by the command line and behind the server, so that both give the same answer.

mod agreement;
mod axis;
mod care;
mod comparison;
mod differences;
mod distribution;
mod dry_run;
mod engine;
mod error;
mod explain;
mod filter;
mod given;
mod grids;
mod job;
mod kept_plans;
mod map;
mod models;
mod nearest;
mod open;
mod plan;
mod plan_orders;
mod query;
mod rank;
mod reagents;
mod report;
mod screened;
mod shared_cells;
mod sites;
mod submit;
mod terms;
mod watch;

pub use agreement::{
    AcidityAgreement, Agreement, CheckedAcidity, CheckedRun, Miss, YieldAgreement,
};
pub use axis::Axis;
pub use care::{BackedUp, back_up, back_up_jobs, look, mend, restore};
pub use comparison::{AxisOverlap, ComparedCell, Comparison, Difference, Mover};
pub use distribution::{Distribution, Histogram};
pub use dry_run::{AxisSize, DryRun, NotCovered};
pub use engine::Engine;
pub use enolattice_molecule::element_symbol;
pub use enolattice_store::{Copied, Health, OpenReport, SetAside, StoreError, Terms};
pub use error::EngineError;
pub use job::{Job, JobState, Planning, Submission};
pub use kept_plans::PlanSummary;
pub use map::{CellMap, MapAxis, MapField, MapQuery};
pub use open::EngineConfig;
pub use plan_orders::PlanOrder;
pub use query::{
    CellDescription, CellQuery, ExplainTarget, Order, RankPage, RankQuery, RankedCell, ReagentRow,
    ReasonedSite, SiteReport,
};
pub use report::ReportQuery;
pub use terms::MOST_UNFINISHED;
