//! Two jobs compared.

use enolattice_engine::{AxisOverlap, ComparedCell, Comparison, Job, Mover};

use super::agreement::{lines, points, words};
use super::numbers::{count, fixed, percent};
use super::safety_notice;
use super::table::{Side, table, wrapped};

/// The page that `compare` prints.
pub(crate) fn comparison_page(compared: &Comparison) -> String {
    let mut parts = vec![format!("Jobs\n{}", jobs(compared))];
    let differing =
        |axis: &&AxisOverlap| axis.changed.is_some() || axis.left_only > 0 || axis.right_only > 0;
    let axes: Vec<&AxisOverlap> = compared.axes.iter().filter(differing).collect();
    if !axes.is_empty() {
        parts.push(format!("Axes that differ\n{}", axis_table(&axes)));
    }
    parts.push(format!("Shared cells\n{}", figures(compared)));
    if !compared.movers.is_empty() {
        let movers = (1..).zip(&compared.movers);
        let movers: Vec<String> = movers.map(|(number, mover)| one(number, mover)).collect();
        parts.push(format!("What moved most\n{}", movers.join("\n")));
    }
    parts.push(safety_notice());
    parts.join("\n\n")
}

fn jobs(compared: &Comparison) -> String {
    let line = |job: &Job| {
        format!(
            "{}, {} of {} cells, model {}: {}",
            job.job,
            count(job.cells_done),
            count(job.cells),
            job.model_fingerprint
                .get(..12)
                .unwrap_or(&job.model_fingerprint),
            job.title
        )
    };
    let mut told = lines(&[
        ("before", line(&compared.before)),
        ("after", line(&compared.after)),
    ]);
    for remark in &compared.remarks {
        told = format!("{told}\n{}", wrapped("  ", remark));
    }
    told
}

fn axis_table(axes: &[&AxisOverlap]) -> String {
    use Side::{Left, Right};
    let columns = [
        ("  axis", Left),
        ("shared", Right),
        ("before only", Right),
        ("after only", Right),
        ("changed", Left),
    ];
    let rows = axes.iter().map(|axis| {
        let changed = axis.changed.as_ref();
        vec![
            format!("  {}", axis.axis),
            count(axis.shared),
            count(axis.left_only),
            count(axis.right_only),
            changed.map_or_else(String::new, |(from, to)| format!("{from} → {to}")),
        ]
    });
    table(&columns, rows)
}

fn figures(compared: &Comparison) -> String {
    let Comparison {
        cells,
        cells_missing,
        cells_compared,
        ..
    } = compared;
    let share = |cells: u64| match *cells_compared {
        0 => "unknown".to_owned(),
        all => percent(Some(cells as f64 / all as f64)),
    };
    let mut shared = format!(
        "{}, of them {} with both yields",
        count(*cells),
        count(*cells_compared)
    );
    if *cells_missing > 0 {
        shared += &format!(
            ", {} not screened in one of the jobs",
            count(*cells_missing)
        );
    }
    let change = |change: Option<f64>| change.map_or_else(|| "unknown".to_owned(), points);
    lines(&[
        ("cells", shared),
        (
            "covered by one only",
            format!(
                "{} before, {} after",
                count(compared.covered_before_only),
                count(compared.covered_after_only)
            ),
        ),
        (
            "rank correlation",
            format!("{} (Spearman)", fixed(compared.spearman, 3)),
        ),
        (
            "change of yield",
            format!(
                "{} points on average, {} in size",
                change(compared.mean_change),
                change(compared.mean_absolute_change)
            ),
        ),
        (
            "moved by > 10 points",
            format!(
                "{} cells, {}",
                count(compared.cells_moved),
                share(compared.cells_moved)
            ),
        ),
        (
            "hits",
            format!(
                "{} before, {} after: {} entered, {} left",
                count(compared.hits_before),
                count(compared.hits_after),
                count(compared.hits_entered),
                count(compared.hits_left)
            ),
        ),
    ])
}

fn one(number: usize, mover: &Mover) -> String {
    let Mover {
        before,
        after,
        differences,
    } = mover;
    let change = after.expected_yield.zip(before.expected_yield);
    let change = change.map_or_else(String::new, |(after, before)| {
        let sign = if after > before { "+" } else { "" };
        format!(", {sign}{} points", points(after - before))
    });
    let title = format!("{}{change}", words(&before.cell));
    let mut told = vec![
        wrapped(&format!("  {number}. "), &title),
        side("before", before, after),
        side("after ", after, before),
    ];
    for difference in differences {
        let text = format!(
            "{}: {} → {}",
            difference.what, difference.before, difference.after
        );
        told.push(wrapped("     differs  ", &text));
    }
    told.join("\n")
}

/// A cell as one job has it, with the first limit that the other job does not name.
fn side(when: &str, cell: &ComparedCell, other: &ComparedCell) -> String {
    let number = cell
        .cell
        .cell
        .map_or_else(|| "?".to_owned(), |number| number.to_string());
    let loss = cell
        .largest_loss
        .map_or("none known", |channel| channel.name());
    let mut limits = cell.limits.iter();
    let limit = limits.find(|text| !other.limits.contains(text));
    let numbers = format!(
        "cell {number}: yield {}, p_hit {}, feasibility {}, selectivity {}; largest loss: {loss}",
        percent(cell.expected_yield),
        percent(cell.p_hit),
        percent(cell.feasibility),
        percent(cell.selectivity),
    );
    let first = wrapped(&format!("     {when}   "), &numbers);
    match limit {
        Some(limit) => format!("{first}\n{}", wrapped("              ", limit)),
        None => first,
    }
}
