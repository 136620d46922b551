//! Two jobs compared.

use enolattice_engine::{AxisOverlap, ComparedCell, Comparison, Difference, Mover};
use enolattice_grid::{AXES, InputError};
use enolattice_model::Channel;

use super::{ConversionError, enums, numbers};
use crate::bad_field;
use crate::v1::{self, ErrorReason};

/// Movers that are given where the request does not say how many.
const USUAL_MOVERS: u32 = 10;

/// How many movers a request of `CompareJobs` asks for.
///
/// # Errors
/// A negative number.
pub fn movers(request: &v1::CompareJobsRequest) -> Result<u32, Vec<InputError>> {
    let Some(movers) = request.movers else {
        return Ok(USUAL_MOVERS);
    };
    u32::try_from(movers).map_err(|_| {
        vec![bad_field(
            ErrorReason::ValueOutOfRange,
            "movers",
            movers.to_string(),
            "it is negative",
            "use 0 or more",
        )]
    })
}

impl From<&Comparison> for v1::CompareJobsResponse {
    fn from(compared: &Comparison) -> Self {
        v1::CompareJobsResponse {
            before: Some((&compared.before).into()),
            after: Some((&compared.after).into()),
            axes: compared.axes.iter().map(Into::into).collect(),
            cells: numbers::to_wire(compared.cells),
            cells_missing: numbers::to_wire(compared.cells_missing),
            cells_compared: numbers::to_wire(compared.cells_compared),
            covered_before_only: numbers::to_wire(compared.covered_before_only),
            covered_after_only: numbers::to_wire(compared.covered_after_only),
            spearman: compared.spearman,
            mean_change: compared.mean_change,
            mean_absolute_change: compared.mean_absolute_change,
            cells_moved: numbers::to_wire(compared.cells_moved),
            hits_before: numbers::to_wire(compared.hits_before),
            hits_after: numbers::to_wire(compared.hits_after),
            hits_entered: numbers::to_wire(compared.hits_entered),
            hits_left: numbers::to_wire(compared.hits_left),
            movers: compared.movers.iter().map(Into::into).collect(),
            remarks: compared.remarks.clone(),
        }
    }
}

impl TryFrom<v1::CompareJobsResponse> for Comparison {
    type Error = ConversionError;

    fn try_from(answer: v1::CompareJobsResponse) -> Result<Self, ConversionError> {
        let axes = answer.axes.into_iter().map(TryInto::try_into);
        let movers = answer.movers.into_iter().map(TryInto::try_into);
        let count = |field, value: i64| numbers::from_wire(field, value);
        Ok(Comparison {
            before: answer.before.unwrap_or_default().try_into()?,
            after: answer.after.unwrap_or_default().try_into()?,
            axes: axes.collect::<Result<_, _>>()?,
            cells: count("CompareJobsResponse.cells", answer.cells)?,
            cells_missing: count("CompareJobsResponse.cells_missing", answer.cells_missing)?,
            cells_compared: count("CompareJobsResponse.cells_compared", answer.cells_compared)?,
            covered_before_only: count(
                "CompareJobsResponse.covered_before_only",
                answer.covered_before_only,
            )?,
            covered_after_only: count(
                "CompareJobsResponse.covered_after_only",
                answer.covered_after_only,
            )?,
            spearman: answer.spearman,
            mean_change: answer.mean_change,
            mean_absolute_change: answer.mean_absolute_change,
            cells_moved: count("CompareJobsResponse.cells_moved", answer.cells_moved)?,
            hits_before: count("CompareJobsResponse.hits_before", answer.hits_before)?,
            hits_after: count("CompareJobsResponse.hits_after", answer.hits_after)?,
            hits_entered: count("CompareJobsResponse.hits_entered", answer.hits_entered)?,
            hits_left: count("CompareJobsResponse.hits_left", answer.hits_left)?,
            movers: movers.collect::<Result<_, _>>()?,
            remarks: answer.remarks,
        })
    }
}

impl From<&AxisOverlap> for v1::AxisOverlap {
    fn from(axis: &AxisOverlap) -> Self {
        let (changed_from, changed_to) = axis.changed.clone().unzip();
        v1::AxisOverlap {
            axis: axis.axis.to_owned(),
            shared: numbers::to_wire(axis.shared),
            before_only: numbers::to_wire(axis.left_only),
            after_only: numbers::to_wire(axis.right_only),
            changed_from,
            changed_to,
        }
    }
}

impl TryFrom<v1::AxisOverlap> for AxisOverlap {
    type Error = ConversionError;

    fn try_from(axis: v1::AxisOverlap) -> Result<Self, ConversionError> {
        let known = AXES.into_iter().find(|known| *known == axis.axis);
        Ok(AxisOverlap {
            axis: known.ok_or(ConversionError::Unknown {
                field: "AxisOverlap.axis",
                value: axis.axis,
            })?,
            shared: numbers::from_wire("AxisOverlap.shared", axis.shared)?,
            left_only: numbers::from_wire("AxisOverlap.before_only", axis.before_only)?,
            right_only: numbers::from_wire("AxisOverlap.after_only", axis.after_only)?,
            changed: axis.changed_from.zip(axis.changed_to),
        })
    }
}

impl From<&Mover> for v1::Mover {
    fn from(mover: &Mover) -> Self {
        let difference = |difference: &Difference| v1::Difference {
            what: difference.what.clone(),
            before: difference.before.clone(),
            after: difference.after.clone(),
        };
        v1::Mover {
            before: Some((&mover.before).into()),
            after: Some((&mover.after).into()),
            differences: mover.differences.iter().map(difference).collect(),
        }
    }
}

impl TryFrom<v1::Mover> for Mover {
    type Error = ConversionError;

    fn try_from(mover: v1::Mover) -> Result<Self, ConversionError> {
        let difference = |difference: v1::Difference| Difference {
            what: difference.what,
            before: difference.before,
            after: difference.after,
        };
        Ok(Mover {
            before: mover.before.unwrap_or_default().try_into()?,
            after: mover.after.unwrap_or_default().try_into()?,
            differences: mover.differences.into_iter().map(difference).collect(),
        })
    }
}

impl From<&ComparedCell> for v1::ComparedCell {
    fn from(cell: &ComparedCell) -> Self {
        v1::ComparedCell {
            cell: Some((&cell.cell).into()),
            expected_yield: cell.expected_yield,
            p_hit: cell.p_hit,
            feasibility: cell.feasibility,
            selectivity: cell.selectivity,
            largest_loss: cell
                .largest_loss
                .map_or(v1::Channel::Unspecified, Into::into)
                .into(),
            limits: cell.limits.clone(),
        }
    }
}

impl TryFrom<v1::ComparedCell> for ComparedCell {
    type Error = ConversionError;

    fn try_from(cell: v1::ComparedCell) -> Result<Self, ConversionError> {
        Ok(ComparedCell {
            cell: cell.cell.unwrap_or_default().try_into()?,
            expected_yield: cell.expected_yield,
            p_hit: cell.p_hit,
            feasibility: cell.feasibility,
            selectivity: cell.selectivity,
            largest_loss: enums::optional_from_wire::<_, v1::Channel>(
                "ComparedCell.largest_loss",
                &Channel::ALL,
                cell.largest_loss,
            )?,
            limits: cell.limits,
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_engine::{CellDescription, Job, JobState};

    fn job(id: &str) -> Job {
        Job {
            job: id.into(),
            title: "Nitriles".into(),
            state: JobState::DoneWithGaps,
            cells: 1 << 33,
            cells_done: 1 << 32,
            best_yield: Some(0.9),
            campaign_fingerprint: "ab".into(),
            model_fingerprint: "cd".into(),
            submitted_unix_ms: 1_700_000_000_123,
            ended_unix_ms: Some(1_700_000_001_000),
            failure: "a block failed".into(),
            warnings: vec!["counts once".into()],
            planning: None,
            terms: Default::default(),
        }
    }

    fn cell(number: u64) -> ComparedCell {
        ComparedCell {
            cell: CellDescription {
                cell: Some(number),
                substrate: "propionitrile".into(),
                substrate_smiles: "CCC#N".into(),
                base: "LDA".into(),
                electrophile: "MeI".into(),
                electrophile_smiles: "CI".into(),
                solvent: "THF".into(),
                additive: None,
                temperature_c: -20.0,
                formation_temperature_c: -78.0,
                base_equiv: 1.1,
                electrophile_equiv: 1.2,
                additive_equiv: None,
                concentration_m: 0.2,
                time_h: 16.0,
                dosing_min: 10.0,
                addition: "substrate into base".into(),
                measured: None,
            },
            expected_yield: Some(0.7),
            p_hit: None,
            feasibility: Some(1.0),
            selectivity: Some(0.8),
            largest_loss: Some(Channel::OverAlkylation),
            limits: vec!["largest loss: over-alkylation".into()],
        }
    }

    #[test]
    fn comparisons_come_back() {
        let axis = |axis, changed| AxisOverlap {
            axis,
            shared: 3,
            left_only: 2,
            right_only: 1,
            changed,
        };
        let compared = Comparison {
            before: job("a"),
            after: job("b"),
            axes: vec![
                axis("substrates", None),
                axis("time_h", Some(("2".into(), "16".into()))),
            ],
            cells: 1,
            cells_missing: 2,
            cells_compared: 3,
            covered_before_only: 4,
            covered_after_only: 5,
            spearman: Some(0.9),
            mean_change: Some(-0.1),
            mean_absolute_change: Some(0.2),
            cells_moved: 6,
            hits_before: 7,
            hits_after: 8,
            hits_entered: 9,
            hits_left: 10,
            movers: vec![Mover {
                before: cell(7),
                after: ComparedCell {
                    largest_loss: None,
                    limits: Vec::new(),
                    ..cell(8)
                },
                differences: vec![Difference {
                    what: "time_h".into(),
                    before: "2".into(),
                    after: "16".into(),
                }],
            }],
            remarks: vec!["two models".into()],
        };
        let message = v1::CompareJobsResponse::from(&compared);
        assert_eq!(Comparison::try_from(message), Ok(compared));
    }

    #[test]
    fn the_number_of_movers_has_a_default_and_is_not_negative() {
        let asked = |movers| v1::CompareJobsRequest {
            movers,
            ..Default::default()
        };
        assert_eq!(movers(&asked(None)), Ok(10));
        assert_eq!(movers(&asked(Some(0))), Ok(0));
        let refused = movers(&asked(Some(-1))).expect_err("is refused");
        assert_eq!(refused[0].code, "VALUE_OUT_OF_RANGE");
    }
}
