//! Two jobs compared.

use enolattice_engine::{AxisOverlap, ComparedCell, Comparison, Difference, Mover};
use serde::Serialize;

use super::JobRecord;
use super::explanation::CellRecord;

/// The document of `compare --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct ComparisonDocument {
    before: JobRecord,
    after: JobRecord,
    remarks: Vec<String>,
    axes: Vec<AxisRecord>,
    cells: u64,
    cells_missing: u64,
    cells_compared: u64,
    covered_before_only: u64,
    covered_after_only: u64,
    spearman: Option<f64>,
    mean_change: Option<f64>,
    mean_absolute_change: Option<f64>,
    cells_moved: u64,
    hits_before: u64,
    hits_after: u64,
    hits_entered: u64,
    hits_left: u64,
    movers: Vec<MoverRecord>,
}

#[derive(Clone, Debug, Serialize)]
struct AxisRecord {
    axis: &'static str,
    shared: u64,
    before_only: u64,
    after_only: u64,
    changed_from: Option<String>,
    changed_to: Option<String>,
}

#[derive(Clone, Debug, Serialize)]
struct MoverRecord {
    before: ComparedRecord,
    after: ComparedRecord,
    differences: Vec<DifferenceRecord>,
}

#[derive(Clone, Debug, Serialize)]
struct ComparedRecord {
    expected_yield: Option<f64>,
    p_hit: Option<f64>,
    feasibility: Option<f64>,
    selectivity: Option<f64>,
    largest_loss: Option<&'static str>,
    limits: Vec<String>,
    cell: CellRecord,
}

#[derive(Clone, Debug, Serialize)]
struct DifferenceRecord {
    what: String,
    before: String,
    after: String,
}

impl From<Comparison> for ComparisonDocument {
    fn from(compared: Comparison) -> ComparisonDocument {
        ComparisonDocument {
            before: compared.before.into(),
            after: compared.after.into(),
            remarks: compared.remarks,
            axes: compared.axes.into_iter().map(axis).collect(),
            cells: compared.cells,
            cells_missing: compared.cells_missing,
            cells_compared: compared.cells_compared,
            covered_before_only: compared.covered_before_only,
            covered_after_only: compared.covered_after_only,
            spearman: compared.spearman,
            mean_change: compared.mean_change,
            mean_absolute_change: compared.mean_absolute_change,
            cells_moved: compared.cells_moved,
            hits_before: compared.hits_before,
            hits_after: compared.hits_after,
            hits_entered: compared.hits_entered,
            hits_left: compared.hits_left,
            movers: compared.movers.into_iter().map(mover).collect(),
        }
    }
}

fn axis(axis: AxisOverlap) -> AxisRecord {
    let (changed_from, changed_to) = axis.changed.unzip();
    AxisRecord {
        axis: axis.axis,
        shared: axis.shared,
        before_only: axis.left_only,
        after_only: axis.right_only,
        changed_from,
        changed_to,
    }
}

fn mover(mover: Mover) -> MoverRecord {
    MoverRecord {
        before: compared(mover.before),
        after: compared(mover.after),
        differences: mover.differences.into_iter().map(difference).collect(),
    }
}

fn compared(cell: ComparedCell) -> ComparedRecord {
    ComparedRecord {
        expected_yield: cell.expected_yield,
        p_hit: cell.p_hit,
        feasibility: cell.feasibility,
        selectivity: cell.selectivity,
        largest_loss: cell.largest_loss.map(|channel| channel.name()),
        limits: cell.limits,
        cell: cell.cell.into(),
    }
}

fn difference(difference: Difference) -> DifferenceRecord {
    DifferenceRecord {
        what: difference.what,
        before: difference.before,
        after: difference.after,
    }
}
