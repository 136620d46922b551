//! Kept plans.

use enolattice_engine::PlanSummary;

use super::jobs::ago;
use super::numbers::count;
use super::table::{Side, table};

/// A table of plans.
pub(crate) fn plan_table(plans: &[PlanSummary]) -> String {
    use Side::{Left, Right};
    let columns = [
        ("plan", Left),
        ("title", Left),
        ("job", Left),
        ("plates", Right),
        ("wells", Right),
        ("made", Right),
    ];
    let row = |plan: &PlanSummary| {
        vec![
            plan.plan.clone(),
            plan.title.clone(),
            plan.job.clone(),
            count(plan.plates.into()),
            count(plan.wells.into()),
            ago(plan.made_unix_ms),
        ]
    };
    table(&columns, plans.iter().map(row))
}
