//! What a campaign would take.

use enolattice_engine::{AxisSize, DryRun, NotCovered};
use enolattice_grid::{CautionCount, PairsNotCovered};
use serde::Serialize;

/// The document of `screen --dry-run --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct DryRunDocument {
    cells: u64,
    axes: Vec<AxisRecord>,
    seconds: f64,
    disk_bytes: u64,
    memory_bytes: u64,
    cells_scored: u64,
    cells_scored_not_covered: u64,
    not_covered: Vec<NotCoveredRecord>,
    pairs_looked_at: u64,
    pairs_not_covered: Vec<PairsRecord>,
    cells_looked_at: u64,
    severe_cautions: Vec<CautionRecord>,
    warnings: Vec<String>,
    campaign_fingerprint: String,
    model_fingerprint: String,
}

#[derive(Clone, Debug, Serialize)]
struct AxisRecord {
    axis: String,
    values: u64,
}

#[derive(Clone, Debug, Serialize)]
struct NotCoveredRecord {
    axis: &'static str,
    name: String,
    reason: String,
    cells: u64,
}

#[derive(Clone, Debug, Serialize)]
struct PairsRecord {
    reason: String,
    pairs: u64,
    substrate: String,
    electrophile: String,
}

#[derive(Clone, Debug, Serialize)]
struct CautionRecord {
    severity: &'static str,
    category: Option<&'static str>,
    cells: u64,
}

impl From<DryRun> for DryRunDocument {
    fn from(run: DryRun) -> DryRunDocument {
        DryRunDocument {
            cells: run.job.cells,
            axes: run.axes.into_iter().map(Into::into).collect(),
            seconds: run.seconds,
            disk_bytes: run.disk_bytes,
            memory_bytes: run.memory_bytes,
            cells_scored: run.cells_scored,
            cells_scored_not_covered: run.cells_scored_not_covered,
            not_covered: run.not_covered.into_iter().map(Into::into).collect(),
            pairs_looked_at: run.pairs_looked_at,
            pairs_not_covered: run.pairs_not_covered.into_iter().map(Into::into).collect(),
            cells_looked_at: run.cells_looked_at,
            severe_cautions: run.cautions.into_iter().map(Into::into).collect(),
            warnings: run.job.warnings,
            campaign_fingerprint: run.job.campaign_fingerprint,
            model_fingerprint: run.job.model_fingerprint,
        }
    }
}

impl From<AxisSize> for AxisRecord {
    fn from(size: AxisSize) -> AxisRecord {
        AxisRecord {
            axis: size.axis,
            values: size.values,
        }
    }
}

impl From<NotCovered> for NotCoveredRecord {
    fn from(known: NotCovered) -> NotCoveredRecord {
        NotCoveredRecord {
            axis: known.axis.name(),
            name: known.name,
            reason: known.reason,
            cells: known.cells,
        }
    }
}

impl From<PairsNotCovered> for PairsRecord {
    fn from(known: PairsNotCovered) -> PairsRecord {
        PairsRecord {
            reason: known.reason,
            pairs: known.pairs,
            substrate: known.substrate,
            electrophile: known.electrophile,
        }
    }
}

impl From<CautionCount> for CautionRecord {
    fn from(count: CautionCount) -> CautionRecord {
        CautionRecord {
            severity: count.severity.name(),
            category: count.category.map(|category| category.name()),
            cells: count.cells,
        }
    }
}
