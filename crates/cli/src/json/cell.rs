//! A ranked cell.

use enolattice_engine::RankedCell;
use serde::Serialize;

/// One line of `rank --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct CellLine {
    rank: u64,
    cell: u64,
    substrate: String,
    base: String,
    electrophile: String,
    solvent: String,
    additive: Option<String>,
    temperature_c: f64,
    formation_temperature_c: f64,
    base_equiv: f64,
    electrophile_equiv: f64,
    additive_equiv: Option<f64>,
    concentration_m: f64,
    time_h: f64,
    dosing_min: f64,
    addition: String,
    expected_yield: Option<f64>,
    p_hit: Option<f64>,
    feasibility: Option<f64>,
    selectivity: Option<f64>,
    largest_loss: Option<&'static str>,
    cautions: Vec<String>,
    severity: Option<String>,
    measured_yield: Option<f64>,
}

impl From<RankedCell> for CellLine {
    fn from(row: RankedCell) -> CellLine {
        CellLine {
            rank: row.rank,
            cell: row.cell,
            substrate: row.substrate,
            base: row.base,
            electrophile: row.electrophile,
            solvent: row.solvent,
            additive: row.additive,
            temperature_c: row.temperature_c,
            formation_temperature_c: row.formation_temperature_c,
            base_equiv: row.base_equiv,
            electrophile_equiv: row.electrophile_equiv,
            additive_equiv: row.additive_equiv,
            concentration_m: row.concentration_m,
            time_h: row.time_h,
            dosing_min: row.dosing_min,
            addition: row.addition,
            expected_yield: row.expected_yield,
            p_hit: row.p_hit,
            feasibility: row.feasibility,
            selectivity: row.selectivity,
            largest_loss: row.largest_loss.map(|channel| channel.name()),
            cautions: row.cautions,
            severity: row.severity,
            measured_yield: row.measured_yield,
        }
    }
}
