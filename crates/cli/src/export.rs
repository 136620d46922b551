//! Ranked cells as files for other programs; the columns are documented in `docs/columns.md`.

mod csv;

use std::io::Write;

use enolattice_engine::RankedCell;

use crate::fault::Fault;
use crate::json::CellLine;

/// Form of a file of cells.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Format {
    /// Comma-separated values, RFC 4180.
    Csv,
    /// One JSON object a line.
    JsonLines,
    /// Arrow IPC stream.
    #[cfg(feature = "columnar")]
    Arrow,
    /// Parquet.
    #[cfg(feature = "columnar")]
    Parquet,
}

/// Where a file of cells is written to.
pub(crate) type Out = Box<dyn Write + Send>;

/// Writes cells in one of the forms.
pub(crate) enum CellWriter {
    Csv(Box<csv::Writer>),
    JsonLines(Out),
    #[cfg(feature = "columnar")]
    Columnar(Box<enolattice_columnar::Writer<Out>>),
}

impl CellWriter {
    pub(crate) fn new(format: Format, out: Out) -> Result<CellWriter, Fault> {
        Ok(match format {
            Format::Csv => CellWriter::Csv(Box::new(csv::Writer::new(out)?)),
            Format::JsonLines => CellWriter::JsonLines(out),
            #[cfg(feature = "columnar")]
            Format::Arrow => {
                let writer = enolattice_columnar::Writer::arrow(out).map_err(unwritten)?;
                CellWriter::Columnar(Box::new(writer))
            }
            #[cfg(feature = "columnar")]
            Format::Parquet => {
                let writer = enolattice_columnar::Writer::parquet(out).map_err(unwritten)?;
                CellWriter::Columnar(Box::new(writer))
            }
        })
    }

    pub(crate) fn write(&mut self, rows: Vec<RankedCell>) -> Result<(), Fault> {
        match self {
            CellWriter::Csv(writer) => rows.iter().try_for_each(|row| writer.write(row)),
            CellWriter::JsonLines(out) => rows.into_iter().try_for_each(|row| {
                let line = serde_json::to_string(&CellLine::from(row));
                let line = line.map_err(|error| Fault::service(error.to_string()))?;
                Ok(writeln!(out, "{line}")?)
            }),
            #[cfg(feature = "columnar")]
            CellWriter::Columnar(writer) => writer.write(&rows).map_err(unwritten),
        }
    }

    /// Writes what is still to be written and gives the way out back.
    pub(crate) fn finish(self) -> Result<Out, Fault> {
        match self {
            CellWriter::Csv(writer) => writer.finish(),
            CellWriter::JsonLines(out) => Ok(out),
            #[cfg(feature = "columnar")]
            CellWriter::Columnar(writer) => writer.finish().map_err(unwritten),
        }
    }
}

#[cfg(feature = "columnar")]
fn unwritten(error: enolattice_columnar::ColumnarError) -> Fault {
    Fault::service(error.to_string())
}
