//! Cells as comma-separated values by RFC 4180, UTF-8.

use ::csv::{Terminator, WriterBuilder};
use enolattice_engine::RankedCell;

use super::Out;
use crate::fault::Fault;

/// Names of the columns, those of `rank --json`.
const COLUMNS: [&str; 24] = [
    "rank",
    "cell",
    "substrate",
    "base",
    "electrophile",
    "solvent",
    "additive",
    "temperature_c",
    "formation_temperature_c",
    "base_equiv",
    "electrophile_equiv",
    "additive_equiv",
    "concentration_m",
    "time_h",
    "dosing_min",
    "addition",
    "expected_yield",
    "p_hit",
    "feasibility",
    "selectivity",
    "largest_loss",
    "cautions",
    "severity",
    "measured_yield",
];

/// Writes cells as CSV.
pub(crate) struct Writer {
    out: ::csv::Writer<Out>,
}

impl Writer {
    pub(super) fn new(out: Out) -> Result<Writer, Fault> {
        let mut builder = WriterBuilder::new();
        let mut out = builder.terminator(Terminator::CRLF).from_writer(out);
        out.write_record(COLUMNS).map_err(unwritten)?;
        Ok(Writer { out })
    }

    pub(super) fn write(&mut self, cell: &RankedCell) -> Result<(), Fault> {
        let known = |value: Option<f64>| value.map_or(String::new(), |value| value.to_string());
        let word = |word: Option<&str>| word.unwrap_or_default().to_owned();
        let record: [String; 24] = [
            cell.rank.to_string(),
            cell.cell.to_string(),
            text(&cell.substrate),
            text(&cell.base),
            text(&cell.electrophile),
            text(&cell.solvent),
            text(cell.additive.as_deref().unwrap_or_default()),
            cell.temperature_c.to_string(),
            cell.formation_temperature_c.to_string(),
            cell.base_equiv.to_string(),
            cell.electrophile_equiv.to_string(),
            known(cell.additive_equiv),
            cell.concentration_m.to_string(),
            cell.time_h.to_string(),
            cell.dosing_min.to_string(),
            cell.addition.clone(),
            known(cell.expected_yield),
            known(cell.p_hit),
            known(cell.feasibility),
            known(cell.selectivity),
            word(cell.largest_loss.map(|channel| channel.name())),
            cell.cautions.join("; "),
            word(cell.severity.as_deref()),
            known(cell.measured_yield),
        ];
        self.out.write_record(record).map_err(unwritten)
    }

    pub(super) fn finish(self) -> Result<Out, Fault> {
        let out = self.out.into_inner();
        out.map_err(|error| Fault::from(error.into_error()))
    }
}

/// A name that a spreadsheet must not take for a formula.
fn text(name: &str) -> String {
    match name.starts_with(['=', '+', '-', '@']) {
        true => format!("'{name}"),
        false => name.to_owned(),
    }
}

fn unwritten(error: ::csv::Error) -> Fault {
    match error.into_kind() {
        ::csv::ErrorKind::Io(error) => Fault::from(error),
        other => Fault::service(format!("a cell cannot be written as CSV: {other:?}")),
    }
}
