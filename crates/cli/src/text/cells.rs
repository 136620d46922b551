//! Ranked cells.

use enolattice_engine::RankedCell;

use super::numbers::{percent, temperatures};
use super::table::{Side, table, width};

/// Below this width selectivity is left out and of the cautions only the severity is shown.
const NARROW: usize = 120;

/// Heading, side and text of a column.
type Column = (&'static str, Side, fn(&RankedCell) -> String);

/// A table of ranked cells.
pub(crate) fn cell_table(cells: &[RankedCell]) -> String {
    use Side::{Left, Right};
    let narrow = width() < NARROW;
    let has_measured = cells.iter().any(|cell| cell.measured_yield.is_some());
    let has_additives = cells.iter().any(|cell| cell.additive.is_some());
    let columns: Vec<Column> = vec![
        ("rank", Right, |cell| cell.rank.to_string()),
        ("cell", Right, |cell| cell.cell.to_string()),
        ("substrate", Left, |cell| cell.substrate.clone()),
        ("base", Left, |cell| cell.base.clone()),
        ("electrophile", Left, |cell| cell.electrophile.clone()),
        ("solvent", Left, |cell| cell.solvent.clone()),
        ("additive", Left, |cell| {
            cell.additive.clone().unwrap_or_default()
        }),
        ("T/°C", Right, |cell| {
            temperatures(cell.formation_temperature_c, cell.temperature_c)
        }),
        ("yield", Right, |cell| percent(cell.expected_yield)),
        ("measured", Right, |cell| match cell.measured_yield {
            Some(_) => percent(cell.measured_yield),
            None => String::new(),
        }),
        ("p_hit", Right, |cell| percent(cell.p_hit)),
        ("selectivity", Right, |cell| percent(cell.selectivity)),
        ("largest loss", Left, |cell| {
            cell.largest_loss
                .map_or("", |channel| channel.name())
                .to_owned()
        }),
        ("cautions", Left, if narrow { severity } else { cautions }),
    ];
    let shown: Vec<_> = columns
        .into_iter()
        .filter(|(name, ..)| !narrow || *name != "selectivity")
        .filter(|(name, ..)| has_additives || *name != "additive")
        .filter(|(name, ..)| has_measured || *name != "measured")
        .collect();
    let headings: Vec<(&str, Side)> = shown.iter().map(|(name, side, _)| (*name, *side)).collect();
    let row = |cell| shown.iter().map(|(.., text)| text(cell)).collect();
    table(&headings, cells.iter().map(row))
}

fn severity(cell: &RankedCell) -> String {
    cell.severity.clone().unwrap_or_default()
}

fn cautions(cell: &RankedCell) -> String {
    match &cell.severity {
        Some(severity) => format!("{severity}: {}", cell.cautions.join(", ")),
        None => String::new(),
    }
}
