//! What a campaign would take, for people.

use std::time::Duration;

use enolattice_engine::DryRun;

use super::numbers::{count, percent};
use super::table::{Side, table};

/// Values of axes that are written out as not covered.
const WRITTEN_OUT: usize = 20;

/// The page of `screen --dry-run`.
pub(crate) fn dry_run_page(run: &DryRun) -> String {
    let mut page = vec![sizes(run), cost(run), coverage(run), cautions(run)];
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
        "{table}\n(from {} cells that were scored)",
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

fn cautions(run: &DryRun) -> String {
    let heading = format!(
        "Severe cautions in {} cells that were looked at",
        count(run.cells_looked_at)
    );
    if run.cautions.is_empty() {
        return format!("{heading}: none; that never means that there is no hazard");
    }
    let rows = run.cautions.iter().map(|known| {
        let share = known.cells as f64 / run.cells_looked_at.max(1) as f64;
        vec![
            known.severity.name().to_owned(),
            known
                .category
                .map_or("any", |category| category.name())
                .to_owned(),
            count(known.cells),
            percent(Some(share)),
        ]
    });
    let columns = [
        ("severest caution", Side::Left),
        ("category", Side::Left),
        ("cells", Side::Right),
        ("share", Side::Right),
    ];
    format!("{heading}\n{}", table(&columns, rows))
}
