//! What the report of a job is made from.

use std::sync::Arc;

use enolattice_grid::Grid;
use enolattice_report::{AxisValues, Counts, HeatMap, Histogram, JobReport, Versions, job_report};

use crate::engine::{blocking, job_id};
use crate::report::ReportQuery;
use crate::report::cells::{Promise, Ranked, explained, shown, sure_and_doubtful};
use crate::report::maps;
use crate::report::sources::Sources;
use crate::{Axis, Engine, EngineError, Job, MapQuery, RankPage, RankQuery};

/// Substrates whose best cells are shown.
const SUBSTRATES: u32 = 200;
/// Rows of the ranking that are shown.
const TOP: u32 = 12;
/// What keeps cells that may not be run off the proposals.
const MAY_BE_RUN: &str = "expected_yield:* AND severity < \"stop\"";

/// What is asked of a ranking.
struct Asked {
    best: RankPage,
    top: RankPage,
    counts: Counts,
    maps: Vec<HeatMap>,
    histogram: Histogram,
}

impl Engine {
    pub(super) async fn job_report(&self, query: &ReportQuery) -> Result<String, EngineError> {
        let job = self.job(&query.id).await?;
        let queue = self.queue()?;
        let (store, grids, id) = (queue.store.clone(), queue.grids.clone(), job_id(&query.id)?);
        let read = move || {
            let record = store.job(id)?;
            Ok((grids.of_record(&record)?, record.state.name()))
        };
        let (grid, state) = blocking(read).await?;
        let asked = self.asked(query, &job, &grid).await?;
        blocking(move || Ok(job_report(&gathered(job, state, &grid, asked)))).await
    }

    async fn asked(
        &self,
        query: &ReportQuery,
        job: &Job,
        grid: &Grid,
    ) -> Result<Asked, EngineError> {
        let rank = |filter: &str, page_size: u32, best_per: Option<Axis>| {
            self.rank(RankQuery {
                job: job.job.clone(),
                filter: filter.to_owned(),
                page_size,
                best_per,
                ..RankQuery::default()
            })
        };
        let likely = format!("p_hit >= 0.5 AND {MAY_BE_RUN}");
        let distribution = self.distribution(job.job.clone(), String::new()).await?;
        let histogram = Histogram {
            cells: distribution.expected_yield.bins,
            unknown: distribution.expected_yield.unknown,
        };
        let counts = Counts {
            likely: rank(&likely, 1, None).await?.total,
            stopped: rank("severity = \"stop\"", 1, None).await?.total,
            unknown: histogram.unknown,
            substrates: grid.campaign().substrates.len() as u64,
        };
        Ok(Asked {
            best: rank(MAY_BE_RUN, SUBSTRATES, Some(Axis::Substrate)).await?,
            top: rank("expected_yield:*", TOP, None).await?,
            counts,
            maps: self.maps(query, job, grid).await?,
            histogram,
        })
    }

    async fn maps(
        &self,
        query: &ReportQuery,
        job: &Job,
        grid: &Grid,
    ) -> Result<Vec<HeatMap>, EngineError> {
        let mut maps = Vec::new();
        for [rows, columns] in maps::axes_of(query, grid)? {
            let map = MapQuery {
                job: job.job.clone(),
                rows,
                columns,
                filter: String::new(),
            };
            maps.push(maps::heat_map(&self.map_cells(map).await?));
        }
        Ok(maps)
    }
}

fn gathered(job: Job, state: &str, grid: &Arc<Grid>, asked: Asked) -> JobReport {
    let best = shown(grid, &rows(&asked.best));
    let chosen = sure_and_doubtful(&best, |cell| Promise {
        substrate: &cell.substrate,
        cell: cell.cell,
        expected_yield: cell.expected_yield,
        p_hit: cell.p_hit,
    });
    let first: Vec<_> = chosen
        .into_iter()
        .map(|i| (best[i].clone(), String::new()))
        .collect();
    let explained = explained(grid, &first);
    let mut sources = Sources::default();
    sources.explained(&explained);
    let library = grid.model().library();
    for cell in &best {
        sources.base(library, &cell.base);
        sources.electrophile(library, &cell.electrophile);
        sources.solvent(library, &cell.solvent);
        if let Some((additive, _)) = &cell.additive {
            sources.additive(library, additive);
        }
    }
    JobReport {
        without: match asked.best.next_page_token.is_empty() {
            true => without(grid, &best),
            // there are more substrates than are shown
            false => Vec::new(),
        },
        top: shown(grid, &rows(&asked.top)),
        counts: asked.counts,
        axes: axes(grid),
        target: grid.campaign().yield_at_least,
        state: state.to_owned(),
        versions: versions(grid, &job),
        job: job.job,
        title: job.title,
        failure: job.failure,
        submitted_unix_ms: job.submitted_unix_ms,
        ended_unix_ms: job.ended_unix_ms,
        cells: job.cells,
        cells_done: job.cells_done,
        warnings: job.warnings,
        maps: asked.maps,
        histogram: Some(asked.histogram),
        sources: sources.into_list(),
        explained,
        best,
    }
}

fn rows(page: &RankPage) -> Vec<Ranked> {
    let rows = page.rows.iter();
    rows.map(|row| Ranked {
        cell: row.cell,
        expected_yield: row.expected_yield,
        p_hit: row.p_hit,
    })
    .collect()
}

/// Substrates that none of the cells has.
fn without(grid: &Grid, best: &[enolattice_report::ShownCell]) -> Vec<String> {
    let substrates = grid.campaign().substrates.iter();
    let names = substrates.map(|substrate| substrate.name.clone());
    names
        .filter(|name| best.iter().all(|cell| cell.substrate != *name))
        .collect()
}

fn versions(grid: &Grid, job: &Job) -> Versions {
    let model = grid.model().fingerprint().to_string();
    Versions {
        program: env!("CARGO_PKG_VERSION").to_owned(),
        arithmetic: grid.model().arithmetic(),
        explained_by: (model != job.model_fingerprint).then_some(model),
        model: job.model_fingerprint.clone(),
        campaign: job.campaign_fingerprint.clone(),
    }
}

/// The axes in the order of a cell's digits, with their values as they are written.
fn axes(grid: &Grid) -> Vec<AxisValues> {
    let mut axes = Axis::ALL;
    axes.sort_by_key(|axis| axis.index());
    axes.into_iter()
        .map(|axis| AxisValues {
            axis: axis.name().replace('_', " "),
            values: axis.labels(grid.campaign()),
        })
        .collect()
}
