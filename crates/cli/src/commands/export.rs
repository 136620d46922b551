//! `export`: ranked cells as a file for other programs.

use std::path::{Path, PathBuf};

use clap::{Args, ValueEnum};
use enolattice_engine::RankQuery;
use enolattice_grid::FaultCode;

use super::EngineOptions;
use super::options::{AxisName, OrderName};
use crate::client::{Client, Need};
use crate::export::{CellWriter, Format};
use crate::fault::Fault;
use crate::out_file::OutFile;
use crate::output::talk;
use crate::text::count;

/// Rows of a page, each of which is a pass over the scores; a server gives fewer.
const PAGE: u64 = 50_000;

/// Write the ranked cells of a job to a file: CSV, JSON lines, Arrow or Parquet.
///
/// Unknown numbers are empty in CSV and null elsewhere. The columns are those of `rank --json`, in its order; the page
/// of the columns gives their types and units.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice export JOB --out cells.csv\n  \
    enolattice export JOB --filter 'p_hit >= 0.5' --limit 10000 --out likely.parquet\n  \
    enolattice export JOB --format jsonl --out - | head")]
pub(super) struct Export {
    /// The job; `jobs` lists them.
    job: String,
    /// File to write; `-` writes to stdout.
    #[arg(long, value_name = "FILE")]
    out: PathBuf,
    /// Form of the file [default: by its name, e.g. `cells.csv`].
    #[arg(long, value_enum)]
    format: Option<FormatName>,
    /// What to rank by; ties by cell number, unknown last.
    #[arg(long, value_enum, default_value_t)]
    order: OrderName,
    /// Which cells to keep, as `rank --filter`.
    #[arg(
        long,
        value_name = "FILTER",
        default_value = "",
        hide_default_value = true
    )]
    filter: String,
    /// Only the best cell of each value of this axis.
    #[arg(long, value_enum, value_name = "AXIS")]
    best_per: Option<AxisName>,
    /// Cells to write; 0: all.
    #[arg(long, value_name = "N", default_value_t = 0)]
    limit: u64,
    /// Write over a file that is there already.
    #[arg(long)]
    force: bool,
    #[command(flatten)]
    engine: EngineOptions,
}

/// Form of a file of cells.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
enum FormatName {
    /// Comma-separated values, RFC 4180.
    Csv,
    /// One JSON object a line.
    Jsonl,
    /// Arrow IPC stream.
    Arrow,
    /// Parquet.
    Parquet,
}

impl Export {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let format = self.format()?;
        let out = OutFile::new("--out", &self.out, self.force)?;
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let written = self.write(&client, format, &out).await;
        client.close().await?;
        let cells = written?;
        if let Some(file) = out.shown() {
            talk(&format!("wrote {} cells to {file}", count(cells)));
        }
        Ok(())
    }

    async fn write(&self, client: &Client, format: Format, out: &OutFile) -> Result<u64, Fault> {
        let most = if self.limit == 0 {
            u64::MAX
        } else {
            self.limit
        };
        let mut query = RankQuery {
            job: self.job.clone(),
            order: self.order.into(),
            filter: self.filter.clone(),
            best_per: self.best_per.map(Into::into),
            page_size: most.min(PAGE) as u32,
            ..RankQuery::default()
        };
        // a question that is refused leaves no file
        let mut page = client.rank(query.clone()).await?;
        let mut unfinished = out.begin()?;
        let mut writer = CellWriter::new(format, unfinished.take())?;
        let mut written = 0;
        loop {
            written += page.rows.len() as u64;
            writer.write(page.rows)?;
            query.page_token = page.next_page_token;
            if query.page_token.is_empty() || written >= most {
                unfinished.finish_with(writer.finish()?)?;
                return Ok(written);
            }
            query.page_size = (most - written).min(PAGE) as u32;
            page = client.rank(query.clone()).await?;
        }
    }

    fn format(&self) -> Result<Format, Fault> {
        let to_stdout = self.out.as_os_str() == "-";
        let Some(name) = self.format.or_else(|| by_name(&self.out)) else {
            return Err(Fault::option(
                "--format",
                "",
                FaultCode::ValueUnknown.name(),
                "is not said, and the name of the file does not tell it",
                "give csv, jsonl, arrow or parquet",
            ));
        };
        if to_stdout && name == FormatName::Parquet {
            return Err(Fault::option(
                "--out",
                "-",
                FaultCode::ValueUnknown.name(),
                "Parquet is read from its end and cannot be piped",
                "name a file, or pipe `--format arrow`",
            ));
        }
        match name {
            FormatName::Csv => Ok(Format::Csv),
            FormatName::Jsonl => Ok(Format::JsonLines),
            FormatName::Arrow => columnar("arrow", Columnar::Arrow),
            FormatName::Parquet => columnar("parquet", Columnar::Parquet),
        }
    }
}

/// The form that a file's name ends on.
fn by_name(path: &Path) -> Option<FormatName> {
    let ending = path.extension()?.to_str()?.to_ascii_lowercase();
    match ending.as_str() {
        "csv" => Some(FormatName::Csv),
        "jsonl" | "ndjson" => Some(FormatName::Jsonl),
        "arrow" | "arrows" => Some(FormatName::Arrow),
        "parquet" => Some(FormatName::Parquet),
        _ => None,
    }
}

/// Forms that only a program with the feature `columnar` writes.
#[derive(Clone, Copy, Debug)]
enum Columnar {
    Arrow,
    Parquet,
}

#[cfg(feature = "columnar")]
fn columnar(_: &str, form: Columnar) -> Result<Format, Fault> {
    Ok(match form {
        Columnar::Arrow => Format::Arrow,
        Columnar::Parquet => Format::Parquet,
    })
}

#[cfg(not(feature = "columnar"))]
fn columnar(name: &str, _: Columnar) -> Result<Format, Fault> {
    Err(Fault::option(
        "--format",
        name,
        FaultCode::ValueUnknown.name(),
        "this program was built without it",
        "build it with `cargo install --path crates/cli --features columnar`, or write csv or jsonl",
    ))
}
