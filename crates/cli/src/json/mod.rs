//! What `--json` prints. The fields are documented in `docs/commands.md` and stable:
//! fields may be added, none changes its meaning.

mod agreement;
mod care;
mod cell;
mod comparison;
mod distribution;
mod dry_run;
mod explanation;
mod job;
mod map;
mod plan;
mod reagent;
mod screened;
mod site;

pub(crate) use agreement::AgreementDocument;
pub(crate) use care::{CopiedDocument, HealthDocument};
pub(crate) use cell::CellLine;
pub(crate) use comparison::ComparisonDocument;
pub(crate) use distribution::DistributionDocument;
pub(crate) use dry_run::DryRunDocument;
pub(crate) use explanation::ExplanationDocument;
pub(crate) use job::{JobRecord, state_name};
pub(crate) use map::MapLine;
pub(crate) use plan::PlanRecord;
pub(crate) use reagent::ReagentRecord;
pub(crate) use screened::ScreenedDocument;
pub(crate) use site::{MoleculeSites, SiteRecord};

#[cfg(test)]
mod documented;
