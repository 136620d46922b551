//! What a person reads: tables and pages of text.

mod agreement;
mod care;
mod cells;
mod chart;
mod comparison;
mod distribution;
mod dry_run;
mod explanation;
mod jobs;
mod map;
mod numbers;
mod plan;
mod plans;
mod plate;
mod reagents;
mod shade;
mod sites;
mod table;

pub(crate) use agreement::agreement_page;
pub(crate) use care::{copied_line, health_page};
pub(crate) use cells::cell_table;
pub(crate) use comparison::comparison_page;
pub(crate) use distribution::distribution_page;
pub(crate) use dry_run::dry_run_page;
pub(crate) use explanation::explanation_page;
pub(crate) use jobs::job_table;
pub(crate) use map::{MapOf, MapStyle, map_page};
pub(crate) use numbers::{count, percent};
pub(crate) use plan::plan_page;
pub(crate) use plans::plan_table;
pub(crate) use plate::{LetteredAxis, plates_page};
pub(crate) use reagents::reagent_table;
pub(crate) use shade::may_colour;
pub(crate) use sites::molecule_page;
pub(crate) use table::width;

const SAFETY: &str = "Predictions and cautions are no substitute for a hazard assessment: the \
supplier's safety data sheet, local rules and qualified staff take precedence. No caution does not \
mean no hazard.";

/// What stands below everything that is printed for the bench.
pub(crate) fn safety_notice() -> String {
    table::wrapped("", SAFETY)
}
