//! Ranked cells.

use enolattice_engine::RankedCell;

use super::numbers::{percent, temperatures};
use super::table::{Side, table, width};

/// Below this width the columns that can be done without are left out.
const NARROW: usize = 120;

/// A table of ranked cells.
pub(crate) fn cell_table(cells: &[RankedCell]) -> String {
    use Side::{Left, Right};
    let narrow = width() < NARROW;
    let mut columns = vec![
        ("rank", Right),
        ("cell", Right),
        ("substrate", Left),
        ("base", Left),
        ("electrophile", Left),
        ("solvent", Left),
        ("T/°C", Right),
        ("yield", Right),
        ("p_hit", Right),
        ("selectivity", Right),
        ("largest loss", Left),
        ("cautions", Left),
    ];
    let dispensable = ["selectivity", "cautions"];
    let kept: Vec<bool> = columns
        .iter()
        .map(|(name, _)| !narrow || !dispensable.contains(name))
        .collect();
    let keep = |row: Vec<String>| {
        row.into_iter()
            .zip(&kept)
            .filter(|(_, kept)| **kept)
            .map(|(text, _)| text)
            .collect()
    };
    let rows: Vec<Vec<String>> = cells.iter().map(|cell| keep(row(cell))).collect();
    columns.retain(|(name, _)| !narrow || !dispensable.contains(name));
    table(&columns, rows)
}

fn row(cell: &RankedCell) -> Vec<String> {
    vec![
        cell.rank.to_string(),
        cell.cell.to_string(),
        cell.substrate.clone(),
        cell.base.clone(),
        cell.electrophile.clone(),
        cell.solvent.clone(),
        temperatures(cell.formation_temperature_c, cell.temperature_c),
        percent(cell.expected_yield),
        percent(cell.p_hit),
        percent(cell.selectivity),
        cell.largest_loss
            .map_or("", |channel| channel.name())
            .to_owned(),
        match &cell.severity {
            Some(severity) => format!("{severity}: {}", cell.cautions.join(", ")),
            None => String::new(),
        },
    ]
}
