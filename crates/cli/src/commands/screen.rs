//! `screen`: a campaign from file to ranking.

use std::path::PathBuf;
use std::time::{Duration, Instant};

use clap::Args;
use enolattice_engine::{Axis, Job, RankQuery, RankedCell, Submission};
use enolattice_grid::CampaignSpec;

use super::EngineOptions;
use super::following::{expect_done, follow};
use super::terms::TermsOptions;
use crate::campaign_file::{read_campaign, sound};
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::{CellLine, DryRunDocument, ScreenedDocument};
use crate::output::{print, print_json, talk};
use crate::text::{cell_table, count, dry_run_page, safety_notice};

/// Rows of the table of top cells.
const TOP: u32 = 20;
/// Most substrates of which the best cell is shown.
const MOST_SUBSTRATES: u32 = 1000;

/// Screen a campaign to the end; print the top cells and the best of each substrate.
///
/// FILE is a campaign in TOML. The results are kept, for `rank` and `explain`.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice screen campaign.toml --dry-run\n  \
    enolattice screen campaign.toml")]
pub(super) struct Screen {
    /// The campaign, a TOML file.
    file: PathBuf,
    /// Only say what it would take, what the model does not cover and what is dangerous.
    #[arg(long)]
    dry_run: bool,
    #[command(flatten)]
    engine: EngineOptions,
    #[command(flatten)]
    terms: TermsOptions,
    /// Print JSON.
    #[arg(long)]
    json: bool,
}

/// What a screen came to.
struct Screened {
    job: Job,
    time: Duration,
    not_covered: u64,
    top: Vec<RankedCell>,
    best: Vec<RankedCell>,
}

impl Screen {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let reading = read_campaign(&self.file)?;
        if self.dry_run || !reading.faults.is_empty() {
            // No data directory is opened for what is not screened.
            let client = Client::open(&self.engine, Need::Chemistry).await?;
            let campaign = sound(reading, &client).await?;
            return self.look(&client, campaign).await;
        }
        let campaign = reading.spec;
        let client = Client::open(&self.engine, Need::Work).await?;
        if client.is_embedded() {
            talk(&format!(
                "results are kept in {}",
                self.engine.data_dir().display()
            ));
        }
        let outcome = self
            .screen(
                &client,
                Submission {
                    campaign,
                    request_id: String::new(),
                    validate_only: false,
                    terms: self.terms.terms(),
                },
            )
            .await;
        client.close().await?;
        let screened = outcome?;
        if self.json {
            print_json(&screened.document())
        } else {
            self.print_page(&screened)
        }
    }

    async fn look(&self, client: &Client, campaign: CampaignSpec) -> Result<(), Fault> {
        let run = client.dry_run(campaign).await?;
        run.job
            .warnings
            .iter()
            .for_each(|warning| talk(&format!("note: {warning}")));
        if self.json {
            return print_json(&DryRunDocument::from(run));
        }
        print(&[dry_run_page(&run), safety_notice()].join("\n\n"))
    }

    async fn screen(&self, client: &Client, submission: Submission) -> Result<Screened, Fault> {
        let begun = Instant::now();
        let queued = client.submit(submission).await?;
        queued
            .warnings
            .iter()
            .for_each(|warning| talk(&format!("note: {warning}")));
        talk(&format!(
            "job {}: {} cells",
            queued.job,
            count(queued.cells)
        ));
        let job = follow(client, &queued.job, &self.engine, |_| Ok(())).await?;
        let time = begun.elapsed();
        expect_done(&job)?;
        let top = RankQuery {
            job: job.job.clone(),
            page_size: TOP,
            ..RankQuery::default()
        };
        let best = RankQuery {
            page_size: MOST_SUBSTRATES,
            best_per: Some(Axis::Substrate),
            ..top.clone()
        };
        let unknown = RankQuery {
            page_size: 1,
            filter: "NOT expected_yield:*".to_owned(),
            ..top.clone()
        };
        Ok(Screened {
            time,
            not_covered: client.rank(unknown).await?.total,
            top: client.rank(top).await?.rows,
            best: client.rank(best).await?.rows,
            job,
        })
    }

    fn print_page(&self, screened: &Screened) -> Result<(), Fault> {
        let job = &screened.job;
        let title = if job.title.is_empty() {
            "Campaign"
        } else {
            &job.title
        };
        let page = [
            format!("{title}: {}", screened.summary()),
            format!("The top {} cells", screened.top.len()),
            cell_table(&screened.top),
            "The best cell of each substrate".to_owned(),
            cell_table(&screened.best),
            safety_notice(),
        ];
        print(&page.join("\n\n"))?;
        let engine = self.engine.repeated();
        let first = screened.top.first().map_or(0, |cell| cell.cell);
        talk(&format!(
            "next: enolattice rank {}{engine} --filter 'p_hit >= 0.7'",
            job.job
        ));
        talk(&format!(
            "      enolattice explain {} {first}{engine}",
            job.job
        ));
        Ok(())
    }
}

impl Screened {
    fn cells_per_second(&self) -> f64 {
        self.job.cells as f64 / self.time.as_secs_f64().max(1e-3)
    }

    fn summary(&self) -> String {
        format!(
            "{} cells in {:.1} s ({} cells/s); {} not covered by the model",
            count(self.job.cells),
            self.time.as_secs_f64(),
            count(self.cells_per_second() as u64),
            count(self.not_covered),
        )
    }

    fn document(self) -> ScreenedDocument {
        ScreenedDocument {
            seconds: self.time.as_secs_f64(),
            cells_per_second: self.cells_per_second(),
            cells_not_covered: self.not_covered,
            top: self.top.into_iter().map(CellLine::from).collect(),
            best_of_each_substrate: self.best.into_iter().map(CellLine::from).collect(),
            job: self.job.into(),
        }
    }
}
