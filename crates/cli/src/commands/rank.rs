//! `rank`: the cells of a job, best first.

use clap::Args;
use enolattice_engine::{RankQuery, RankedCell};

use super::EngineOptions;
use super::options::{AxisName, OrderName};
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::CellLine;
use crate::output::{print, print_json_line, talk};
use crate::text::{cell_table, count, safety_notice};

/// Most rows asked for at once.
const LARGEST_PAGE: u64 = 1000;

/// Rank the cells of a job, best first.
///
/// FILTER compares the fields of a cell, e.g. `expected_yield >= 0.5 AND solvent = "THF"`;
/// OR binds tighter than AND.
#[derive(Debug, Args)]
pub(super) struct Rank {
    /// The job.
    job: String,
    /// What to rank by; ties by cell number, unknown last.
    #[arg(long, value_enum, default_value_t)]
    order: OrderName,
    /// Which cells to keep.
    #[arg(long, value_name = "FILTER", default_value = "")]
    filter: String,
    /// Rows to print; 0: all.
    #[arg(long, value_name = "N", default_value_t = 50)]
    limit: u64,
    /// Rows to leave out before.
    #[arg(long, value_name = "N", default_value_t = 0)]
    skip: u64,
    /// Only the best cell of each value of this axis.
    #[arg(long, value_enum, value_name = "AXIS")]
    best_per: Option<AxisName>,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON: one cell a line.
    #[arg(long)]
    json: bool,
}

impl Rank {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let ranked = self.print_pages(&client).await;
        client.close().await?;
        ranked
    }

    async fn print_pages(&self, client: &Client) -> Result<(), Fault> {
        let limit = if self.limit == 0 {
            u64::MAX
        } else {
            self.limit
        };
        let mut query = RankQuery {
            job: self.job.clone(),
            order: self.order.into(),
            filter: self.filter.clone(),
            skip: self.skip,
            best_per: self.best_per.map(Into::into),
            ..RankQuery::default()
        };
        let mut kept: Vec<RankedCell> = Vec::new();
        let mut given = 0;
        loop {
            query.page_size = (limit - given).min(LARGEST_PAGE) as u32;
            let page = client.rank(query.clone()).await?;
            given += page.rows.len() as u64;
            if self.json {
                page.rows
                    .into_iter()
                    .try_for_each(|row| print_json_line(&CellLine::from(row)))?;
            } else {
                kept.extend(page.rows);
            }
            query.page_token = page.next_page_token;
            query.skip = 0;
            if query.page_token.is_empty() || given >= limit {
                return self.print_rest(&kept, page.total, page.cells_done);
            }
        }
    }

    fn print_rest(&self, kept: &[RankedCell], total: u64, cells_done: u64) -> Result<(), Fault> {
        if self.json {
            return Ok(());
        }
        talk(&format!(
            "{} cells in this ranking, {} screened",
            count(total),
            count(cells_done)
        ));
        if kept.is_empty() {
            return Ok(());
        }
        print(&format!("{}\n\n{}", cell_table(kept), safety_notice()))
    }
}
