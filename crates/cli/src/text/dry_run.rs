//! What a campaign would take, for people.

use std::time::Duration;

use enolattice_engine::DryRun;
use enolattice_model::{Category, Severity};

use super::numbers::{count, percent};
use super::table::{Side, table};

/// Values of axes that are written out as not covered.
const WRITTEN_OUT: usize = 20;

/// The page of `screen --dry-run`.
pub(crate) fn dry_run_page(run: &DryRun) -> String {
    let mut page = vec![
        sizes(run),
        cost(run),
        coverage(run),
        pairs(run),
        cautions(run),
    ];
    page.retain(|part| !part.is_empty());
    page.join("\n\n")
}

fn sizes(run: &DryRun) -> String {
    let axes: Vec<String> = run
        .axes
        .iter()
        .filter(|size| size.values > 1)
        .map(|size| format!("{} {}", count(size.values), size.axis))
        .collect();
    format!("{} cells: {}", count(run.job.cells), axes.join(" × "))
}

fn cost(run: &DryRun) -> String {
    let time = Duration::try_from_secs_f64(run.seconds.max(0.0)).unwrap_or(Duration::MAX);
    let row = |what: &str, much: String| vec![what.to_owned(), much];
    let rows = [
        row("time", indicatif::HumanDuration(time).to_string()),
        row("disk", indicatif::BinaryBytes(run.disk_bytes).to_string()),
        row(
            "memory",
            indicatif::BinaryBytes(run.memory_bytes).to_string(),
        ),
    ];
    let table = table(
        &[("what it takes, about", Side::Left), ("", Side::Left)],
        rows,
    );
    format!(
        "{table}\n(time and disk from {} of its cells that were scored, memory from what other campaigns took)",
        count(run.cells_scored)
    )
}

fn coverage(run: &DryRun) -> String {
    let share = run.cells_scored_not_covered as f64 / run.cells_scored.max(1) as f64;
    let heading = format!(
        "Not covered by the model: {} of the cells that were scored",
        percent(Some(share))
    );
    if run.not_covered.is_empty() {
        return heading;
    }
    let mut largest_first: Vec<_> = run.not_covered.iter().collect();
    largest_first.sort_by_key(|known| std::cmp::Reverse(known.cells));
    let rows = largest_first.iter().take(WRITTEN_OUT).map(|known| {
        vec![
            known.axis.name().to_owned(),
            known.name.clone(),
            count(known.cells),
            known.reason.clone(),
        ]
    });
    let columns = [
        ("axis", Side::Left),
        ("value", Side::Left),
        ("cells", Side::Right),
        ("why", Side::Left),
    ];
    let further = run.not_covered.len().saturating_sub(WRITTEN_OUT);
    let more = match further {
        0 => String::new(),
        further => format!("\nand {further} more"),
    };
    format!("{heading}\n{}{more}", table(&columns, rows))
}

fn pairs(run: &DryRun) -> String {
    if run.pairs_not_covered.is_empty() {
        return String::new();
    }
    let heading = format!(
        "Not covered together, of {} pairs of substrate and electrophile",
        count(run.pairs_looked_at)
    );
    let rows = run.pairs_not_covered.iter().map(|known| {
        vec![
            count(known.pairs),
            format!("{} with {}", known.substrate, known.electrophile),
            known.reason.clone(),
        ]
    });
    let columns = [
        ("pairs", Side::Right),
        ("one of them", Side::Left),
        ("why", Side::Left),
    ];
    format!("{heading}\n{}", table(&columns, rows))
}

/// A row for each category, with the cells in which it stops and in which it warns.
fn cautions(run: &DryRun) -> String {
    let heading = format!(
        "Severe cautions in {} cells that were looked at; a category counts at its own severity",
        count(run.cells_looked_at)
    );
    if run.cautions.is_empty() {
        return format!("{heading}: none; that never means that there is no hazard");
    }
    let cells = |category: Option<Category>, severity: Severity| {
        let mut counts = run.cautions.iter();
        let known = counts.find(|known| (known.category, known.severity) == (category, severity));
        known.map_or(0, |known| known.cells)
    };
    let severe = |category| {
        let [stop, warning] = [Severity::Stop, Severity::Warning];
        (cells(category, stop), cells(category, warning))
    };
    let mut categories: Vec<_> = Category::ALL
        .into_iter()
        .map(|category| (category.name(), severe(Some(category))))
        .filter(|(_, counts)| *counts != (0, 0))
        .collect();
    categories.sort_by_key(|(_, counts)| std::cmp::Reverse(*counts));
    let all = ("any, each cell once", severe(None));
    let of = |cells: u64| {
        let share = cells as f64 / run.cells_looked_at.max(1) as f64;
        [count(cells), percent(Some(share))]
    };
    let rows = std::iter::once(all).chain(categories);
    let rows = rows.map(|(name, (stop, warning))| {
        let counts = [of(stop), of(warning)].concat();
        std::iter::once(name.to_owned()).chain(counts).collect()
    });
    let columns = [
        ("category", Side::Left),
        ("stop", Side::Right),
        ("share", Side::Right),
        ("warning", Side::Right),
        ("share", Side::Right),
    ];
    format!("{heading}\n{}", table(&columns, rows))
}
