//! What a campaign would take.

use enolattice_engine::{Axis, AxisSize, DryRun, Job, NotCovered};
use enolattice_grid::{CautionCount, PairsNotCovered};
use enolattice_model::{Category, Severity};

use super::{ConversionError, enums, numbers};
use crate::v1;

impl From<&DryRun> for v1::Job {
    fn from(run: &DryRun) -> Self {
        let axis = |size: &AxisSize| v1::AxisSize {
            axis: size.axis.clone(),
            values: numbers::to_wire(size.values),
        };
        let not_covered = |known: &NotCovered| v1::NotCovered {
            axis: v1::Axis::from(known.axis).into(),
            name: known.name.clone(),
            why: known.reason.clone(),
            cells: numbers::to_wire(known.cells),
        };
        let caution = |count: &CautionCount| v1::CautionCount {
            severity: v1::CautionSeverity::from(count.severity).into(),
            category: count
                .category
                .map_or(v1::CautionCategory::Unspecified, Into::into)
                .into(),
            cells: numbers::to_wire(count.cells),
        };
        let pairs = |known: &PairsNotCovered| v1::PairsNotCovered {
            why: known.reason.clone(),
            pairs: numbers::to_wire(known.pairs),
            substrate: known.substrate.clone(),
            electrophile: known.electrophile.clone(),
        };
        v1::Job {
            dry_run: Some(v1::DryRun {
                axes: run.axes.iter().map(axis).collect(),
                seconds: run.seconds,
                disk_bytes: numbers::to_wire(run.disk_bytes),
                memory_bytes: numbers::to_wire(run.memory_bytes),
                cells_scored: numbers::to_wire(run.cells_scored),
                cells_scored_not_covered: numbers::to_wire(run.cells_scored_not_covered),
                not_covered: run.not_covered.iter().map(not_covered).collect(),
                cells_looked_at: numbers::to_wire(run.cells_looked_at),
                cautions: run.cautions.iter().map(caution).collect(),
                pairs_looked_at: numbers::to_wire(run.pairs_looked_at),
                pairs_not_covered: run.pairs_not_covered.iter().map(pairs).collect(),
            }),
            ..v1::Job::from(&run.job)
        }
    }
}

impl TryFrom<v1::Job> for DryRun {
    type Error = ConversionError;

    fn try_from(mut job: v1::Job) -> Result<Self, ConversionError> {
        let run = job.dry_run.take().ok_or(ConversionError::Missing {
            field: "Job.dry_run",
        })?;
        Ok(DryRun {
            job: Job::try_from(job)?,
            axes: run
                .axes
                .into_iter()
                .map(|size| {
                    let values = numbers::from_wire("AxisSize.values", size.values)?;
                    Ok(AxisSize {
                        axis: size.axis,
                        values,
                    })
                })
                .collect::<Result<_, _>>()?,
            seconds: run.seconds,
            disk_bytes: numbers::from_wire("DryRun.disk_bytes", run.disk_bytes)?,
            memory_bytes: numbers::from_wire("DryRun.memory_bytes", run.memory_bytes)?,
            cells_scored: numbers::from_wire("DryRun.cells_scored", run.cells_scored)?,
            cells_scored_not_covered: numbers::from_wire(
                "DryRun.cells_scored_not_covered",
                run.cells_scored_not_covered,
            )?,
            not_covered: run
                .not_covered
                .into_iter()
                .map(not_covered)
                .collect::<Result<_, _>>()?,
            pairs_looked_at: numbers::from_wire("DryRun.pairs_looked_at", run.pairs_looked_at)?,
            pairs_not_covered: run
                .pairs_not_covered
                .into_iter()
                .map(pairs)
                .collect::<Result<_, _>>()?,
            cells_looked_at: numbers::from_wire("DryRun.cells_looked_at", run.cells_looked_at)?,
            cautions: run
                .cautions
                .into_iter()
                .map(caution)
                .collect::<Result<_, _>>()?,
        })
    }
}

fn not_covered(known: v1::NotCovered) -> Result<NotCovered, ConversionError> {
    Ok(NotCovered {
        axis: enums::from_wire::<Axis, v1::Axis>("NotCovered.axis", &Axis::ALL, known.axis)?,
        name: known.name,
        reason: known.why,
        cells: numbers::from_wire("NotCovered.cells", known.cells)?,
    })
}

fn pairs(known: v1::PairsNotCovered) -> Result<PairsNotCovered, ConversionError> {
    Ok(PairsNotCovered {
        reason: known.why,
        pairs: numbers::from_wire("PairsNotCovered.pairs", known.pairs)?,
        substrate: known.substrate,
        electrophile: known.electrophile,
    })
}

fn caution(count: v1::CautionCount) -> Result<CautionCount, ConversionError> {
    Ok(CautionCount {
        severity: enums::from_wire::<_, v1::CautionSeverity>(
            "CautionCount.severity",
            &Severity::ALL,
            count.severity,
        )?,
        category: enums::optional_from_wire::<_, v1::CautionCategory>(
            "CautionCount.category",
            &Category::ALL,
            count.category,
        )?,
        cells: numbers::from_wire("CautionCount.cells", count.cells)?,
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_engine::JobState;

    #[test]
    fn dry_runs_come_back() {
        let job = Job {
            job: String::new(),
            title: "Nitriles".into(),
            state: JobState::Queued,
            cells: 1 << 33,
            cells_done: 0,
            best_yield: None,
            campaign_fingerprint: "ab".into(),
            model_fingerprint: "cd".into(),
            submitted_unix_ms: 1_700_000_000_123,
            ended_unix_ms: None,
            failure: String::new(),
            warnings: vec!["counts once".into()],
            planning: None,
            terms: Default::default(),
        };
        let run = DryRun {
            job,
            axes: vec![AxisSize {
                axis: "substrates".into(),
                values: 12,
            }],
            seconds: 17.5,
            disk_bytes: 1 << 40,
            memory_bytes: 3,
            cells_scored: 4096,
            cells_scored_not_covered: 7,
            not_covered: vec![NotCovered {
                axis: Axis::Electrophile,
                name: "bromobenzene".into(),
                reason: "aryl".into(),
                cells: 99,
            }],
            pairs_looked_at: 100_001,
            pairs_not_covered: vec![PairsNotCovered {
                reason: "no product".into(),
                pairs: 11,
                substrate: "propionitrile".into(),
                electrophile: "water".into(),
            }],
            cells_looked_at: 1 << 20,
            cautions: vec![
                CautionCount {
                    severity: Severity::Stop,
                    category: None,
                    cells: 5,
                },
                CautionCount {
                    severity: Severity::Warning,
                    category: Some(Category::Gas),
                    cells: 4,
                },
            ],
        };
        assert_eq!(DryRun::try_from(v1::Job::from(&run)), Ok(run));
    }
}
