//! Writes cells as they come.

use std::io::Write;

use arrow_ipc::writer::StreamWriter;
use arrow_schema::ArrowError;
use enolattice_engine::RankedCell;
use parquet::arrow::ArrowWriter;
use parquet::basic::Compression;
use parquet::errors::ParquetError;
use parquet::file::properties::WriterProperties;

use crate::columns::batch;

/// Why cells could not be written.
#[derive(Debug, thiserror::Error)]
pub enum ColumnarError {
    /// As Arrow.
    #[error("the Arrow stream cannot be written: {0}")]
    Arrow(#[from] ArrowError),
    /// As Parquet.
    #[error("the Parquet file cannot be written: {0}")]
    Parquet(#[from] ParquetError),
}

/// Writes cells to `W`.
pub struct Writer<W: Write + Send> {
    out: Form<W>,
}

enum Form<W: Write + Send> {
    Arrow(Box<StreamWriter<W>>),
    Parquet(Box<ArrowWriter<W>>),
}

impl<W: Write + Send> Writer<W> {
    /// Begins an Arrow IPC stream.
    ///
    /// # Errors
    /// [`ColumnarError::Arrow`].
    pub fn arrow(out: W) -> Result<Writer<W>, ColumnarError> {
        let out = StreamWriter::try_new(out, &batch(&[])?.schema())?;
        Ok(Writer {
            out: Form::Arrow(Box::new(out)),
        })
    }

    /// Begins a Parquet file, compressed by Snappy.
    ///
    /// # Errors
    /// [`ColumnarError::Parquet`].
    pub fn parquet(out: W) -> Result<Writer<W>, ColumnarError> {
        let properties = WriterProperties::builder()
            .set_compression(Compression::SNAPPY)
            .build();
        let out = ArrowWriter::try_new(out, batch(&[])?.schema(), Some(properties))?;
        Ok(Writer {
            out: Form::Parquet(Box::new(out)),
        })
    }

    /// Writes some cells.
    ///
    /// # Errors
    /// [`ColumnarError`] where `W` takes no more.
    pub fn write(&mut self, rows: &[RankedCell]) -> Result<(), ColumnarError> {
        let batch = batch(rows)?;
        match &mut self.out {
            Form::Arrow(out) => Ok(out.write(&batch)?),
            Form::Parquet(out) => Ok(out.write(&batch)?),
        }
    }

    /// Writes what is still to be written and gives `W` back.
    ///
    /// # Errors
    /// [`ColumnarError`] where `W` takes no more.
    pub fn finish(self) -> Result<W, ColumnarError> {
        match self.out {
            Form::Arrow(out) => Ok(out.into_inner()?),
            Form::Parquet(out) => Ok(out.into_inner()?),
        }
    }
}
