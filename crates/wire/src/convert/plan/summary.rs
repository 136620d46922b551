//! Kept plans in a line.

use enolattice_engine::PlanSummary;

use super::given;
use crate::convert::job::{timestamp, unix_ms};
use crate::convert::{ConversionError, numbers};
use crate::v1;

impl From<&PlanSummary> for v1::PlanSummary {
    fn from(summary: &PlanSummary) -> Self {
        v1::PlanSummary {
            plan_id: summary.plan.clone(),
            job_id: summary.job.clone(),
            title: summary.title.clone(),
            create_time: Some(timestamp(summary.made_unix_ms)),
            plate_count: numbers::index_to_wire(summary.plates as usize),
            well_count: numbers::index_to_wire(summary.wells as usize),
        }
    }
}

impl TryFrom<v1::PlanSummary> for PlanSummary {
    type Error = ConversionError;

    fn try_from(summary: v1::PlanSummary) -> Result<Self, ConversionError> {
        let time = given("PlanSummary.create_time", summary.create_time)?;
        Ok(PlanSummary {
            made_unix_ms: unix_ms("PlanSummary.create_time", &time)?,
            plates: numbers::from_wire("PlanSummary.plate_count", summary.plate_count)?,
            wells: numbers::from_wire("PlanSummary.well_count", summary.well_count)?,
            plan: summary.plan_id,
            job: summary.job_id,
            title: summary.title,
        })
    }
}
