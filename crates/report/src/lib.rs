//! What a person looks at: a job or a plan as one self-contained page of HTML.
//!
//! Pure: takes values and gives a text; reads no disk and no clock. The page needs no network, no script and no colour;
//! its charts are SVG. What each part says: `docs/report.md`.

mod cards;
mod cautions;
mod cell;
mod charts;
mod detail;
mod facts;
mod heat_map;
mod histogram;
mod job;
mod numbers;
mod page;
mod palette;
mod plan;
mod structure;

pub use cell::{End, Share, ShownCell};
pub use facts::{AxisValues, Source, Versions};
pub use heat_map::HeatMap;
pub use histogram::Histogram;
pub use job::{Counts, ExplainedCell, JobReport, job_report};
pub use plan::{PlanReport, plan_report};
