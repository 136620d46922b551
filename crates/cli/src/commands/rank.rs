//! `rank`: the cells of a job, best first.

use clap::{Args, ValueEnum};
use enolattice_engine::{Axis, MapQuery, RankQuery, RankedCell};

use super::EngineOptions;
use super::options::{AxisName, OrderName, map_axes};
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::{CellLine, DistributionDocument, MapLine};
use crate::output::{print, print_json, print_json_line, talk};
use crate::text::{
    MapOf, MapStyle, cell_table, count, distribution_page, map_page, may_colour, safety_notice,
    width,
};

/// Most rows asked for at once.
const LARGEST_PAGE: u64 = 1000;

/// Rank the cells of a job, best first.
///
/// FILTER compares the fields of a cell, e.g. `expected_yield >= 0.5 AND solvent = "THF"`;
/// OR binds tighter than AND.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice rank JOB --limit 20\n  \
    enolattice rank JOB --filter 'p_hit >= 0.7 AND severity < \"stop\"' --best-per substrate\n  \
    enolattice rank JOB --map substrate,base --of p-hit\n  \
    enolattice rank JOB --distribution")]
pub(super) struct Rank {
    /// The job; `enolattice jobs` lists them.
    job: String,
    /// What to rank by; ties by cell number, unknown last.
    #[arg(long, value_enum, default_value_t)]
    order: OrderName,
    /// Which cells to keep.
    #[arg(
        long,
        value_name = "FILTER",
        default_value = "",
        hide_default_value = true
    )]
    filter: String,
    /// Rows to print, of a map the best ones; 0: all.
    #[arg(long, value_name = "N", default_value_t = 50)]
    limit: u64,
    /// Rows to leave out before.
    #[arg(long, value_name = "N", default_value_t = 0)]
    skip: u64,
    /// Only the best cell of each value of this axis.
    #[arg(long, value_enum, value_name = "AXIS")]
    best_per: Option<AxisName>,
    /// A map of the cells over two axes instead of a list, e.g. `substrate,base`.
    #[arg(long, value_name = "AXIS,AXIS", value_parser = map_axes,
        conflicts_with_all = ["order", "skip", "best_per", "distribution"])]
    map: Option<[Axis; 2]>,
    /// What the map shows of each field.
    #[arg(
        long,
        value_enum,
        value_name = "WHAT",
        default_value_t,
        requires = "map"
    )]
    of: MapOfName,
    /// Histograms of expected yield and p_hit instead of a list.
    #[arg(long, conflicts_with_all = ["order", "skip", "best_per", "limit"])]
    distribution: bool,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON: one cell, or field of a map, a line.
    #[arg(long)]
    json: bool,
}

impl Rank {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let ranked = match self.map {
            Some(axes) => self.print_map(&client, axes).await,
            None if self.distribution => self.print_distribution(&client).await,
            None => self.print_pages(&client).await,
        };
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

    async fn print_map(&self, client: &Client, [rows, columns]: [Axis; 2]) -> Result<(), Fault> {
        let query = MapQuery {
            job: self.job.clone(),
            rows,
            columns,
            filter: self.filter.clone(),
        };
        let map = client.map_cells(query).await?;
        if self.json {
            return MapLine::all(&map).try_for_each(|line| print_json_line(&line));
        }
        let style = MapStyle {
            of: self.of.into(),
            most_rows: usize::try_from(self.limit).ok().filter(|limit| *limit > 0),
            width: width(),
            colour: may_colour(),
        };
        print(&format!("{}\n\n{}", map_page(&map, style), safety_notice()))
    }

    async fn print_distribution(&self, client: &Client) -> Result<(), Fault> {
        let known = client.distribution(&self.job, &self.filter).await?;
        if self.json {
            return print_json(&DistributionDocument::from(known));
        }
        talk_of_cells(known.total, known.cells_done);
        print(&format!(
            "{}\n\n{}",
            distribution_page(&known),
            safety_notice()
        ))
    }

    fn print_rest(&self, kept: &[RankedCell], total: u64, cells_done: u64) -> Result<(), Fault> {
        if self.json {
            return Ok(());
        }
        talk_of_cells(total, cells_done);
        if kept.is_empty() {
            return Ok(());
        }
        print(&format!("{}\n\n{}", cell_table(kept), safety_notice()))
    }
}

fn talk_of_cells(total: u64, cells_done: u64) {
    talk(&format!(
        "{} cells in this ranking, {} screened",
        count(total),
        count(cells_done)
    ));
}

/// What a map shows of each field.
#[derive(Clone, Copy, Debug, Default, ValueEnum)]
enum MapOfName {
    /// Greatest expected yield.
    #[default]
    Best,
    /// Mean expected yield.
    Mean,
    /// Greatest probability of a hit.
    PHit,
    /// Mean probability of a hit.
    MeanPHit,
}

impl From<MapOfName> for MapOf {
    fn from(name: MapOfName) -> MapOf {
        match name {
            MapOfName::Best => MapOf::BestYield,
            MapOfName::Mean => MapOf::MeanYield,
            MapOfName::PHit => MapOf::BestPHit,
            MapOfName::MeanPHit => MapOf::MeanPHit,
        }
    }
}
