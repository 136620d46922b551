//! An engine in this process or behind a server: the commands cannot tell them apart.

use enolattice_engine::{
    Agreement, CellDescription, CellMap, Comparison, Distribution, DryRun, Engine, EngineConfig,
    EngineError, ExplainTarget, Job, MapQuery, PlanOrder, PlanSummary, RankPage, RankQuery,
    ReagentRow, ReportQuery, SiteReport, Submission,
};
use enolattice_grid::{CampaignSpec, InputError};
use enolattice_model::Explanation;
use enolattice_plate::{Plan, PlanRequest};
use enolattice_wire::v1::ErrorReason;

use crate::campaign_file::own_tables;
use crate::commands::EngineOptions;
use crate::fault::Fault;

/// What a command needs of an engine in this process.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Need {
    /// Chemistry only: no data directory is opened.
    Chemistry,
    /// The jobs of the data directory, as they are.
    Jobs,
    /// Jobs that are worked at.
    Work,
}

/// An engine, wherever it is.
#[derive(Debug)]
pub(crate) enum Client {
    /// In this process.
    Embedded(Engine),
    /// Behind a server.
    Remote(Box<enolattice_wire::Client>),
}

/// The changes of a job.
#[derive(Debug)]
pub(crate) enum Changes {
    /// From an engine in this process.
    Embedded {
        /// Where they come from.
        receiver: tokio::sync::watch::Receiver<Job>,
        /// Whether the present state has been given.
        begun: bool,
    },
    /// From a server.
    Remote(Box<enolattice_wire::JobWatch>),
}

impl Client {
    /// Opens the data directory or connects to the server.
    pub(crate) async fn open(options: &EngineOptions, need: Need) -> Result<Client, Fault> {
        if let Some(server) = &options.server {
            return Ok(Client::Remote(Box::new(
                enolattice_wire::Client::connect(server).await?,
            )));
        }
        let config = EngineConfig {
            data_dir: options.data_dir(),
            threads: options.threads,
            library: own_tables(&options.library)?,
        };
        Ok(Client::Embedded(match need {
            Need::Chemistry => Engine::without_data(config.threads, config.library).await?,
            Need::Jobs => Engine::open_idle(config).await?,
            Need::Work => Engine::open(config).await?,
        }))
    }

    /// Whether the engine is in this process.
    pub(crate) fn is_embedded(&self) -> bool {
        matches!(self, Client::Embedded(_))
    }

    pub(crate) async fn submit(&self, submission: Submission) -> Result<Job, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.submit(submission).await?),
            Client::Remote(server) => Ok(server.submit(submission).await?),
        }
    }

    /// Every fault in the values of a campaign.
    pub(crate) async fn faults(&self, campaign: CampaignSpec) -> Result<Vec<InputError>, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.faults(campaign).await?),
            Client::Remote(server) => Ok(server.faults(campaign).await?),
        }
    }

    pub(crate) async fn dry_run(&self, campaign: CampaignSpec) -> Result<DryRun, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.dry_run(campaign).await?),
            Client::Remote(server) => Ok(server.dry_run(campaign).await?),
        }
    }

    pub(crate) async fn jobs(&self) -> Result<Vec<Job>, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.jobs().await?),
            Client::Remote(server) => Ok(server.jobs().await?),
        }
    }

    pub(crate) async fn watch(&self, job: &str) -> Result<Changes, Fault> {
        match self {
            Client::Embedded(engine) => Ok(Changes::Embedded {
                receiver: engine.watch(job).await?,
                begun: false,
            }),
            Client::Remote(server) => Ok(Changes::Remote(Box::new(server.watch(job).await?))),
        }
    }

    pub(crate) async fn cancel(&self, job: &str) -> Result<Job, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.cancel(job).await?),
            Client::Remote(server) => Ok(server.cancel(job).await?),
        }
    }

    pub(crate) async fn pause(&self, job: &str) -> Result<Job, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.pause(job).await?),
            Client::Remote(server) => Ok(server.pause(job).await?),
        }
    }

    pub(crate) async fn resume(&self, job: &str) -> Result<Job, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.resume(job).await?),
            Client::Remote(server) => Ok(server.resume(job).await?),
        }
    }

    /// Deletes a job, or else the plan of this id.
    pub(crate) async fn delete(&self, id: &str) -> Result<(), Fault> {
        match self {
            Client::Embedded(engine) => match engine.delete_job(id).await {
                Err(EngineError::JobUnknown { job }) => match engine.delete_plan(id).await {
                    Err(EngineError::PlanUnknown { .. }) => {
                        Err(EngineError::NothingKept { id: job }.into())
                    }
                    other => Ok(other?),
                },
                other => Ok(other?),
            },
            Client::Remote(server) => match server.delete_job(id).await {
                Err(error) if error.reason() == Some(ErrorReason::JobUnknown) => {
                    Ok(server.delete_plan(id).await?)
                }
                other => Ok(other?),
            },
        }
    }

    pub(crate) async fn rank(&self, query: RankQuery) -> Result<RankPage, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.rank(query).await?),
            Client::Remote(server) => Ok(server.rank(query).await?),
        }
    }

    /// The cells of a job over two axes.
    pub(crate) async fn map_cells(&self, query: MapQuery) -> Result<CellMap, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.map_cells(query).await?),
            Client::Remote(server) => Ok(server.map_cells(query).await?),
        }
    }

    /// How the scores of a job are distributed.
    pub(crate) async fn distribution(
        &self,
        job: &str,
        filter: &str,
    ) -> Result<Distribution, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine
                .distribution(job.to_owned(), filter.to_owned())
                .await?),
            Client::Remote(server) => Ok(server.distribution(job, filter).await?),
        }
    }

    /// What a cell is made of and everything about it.
    pub(crate) async fn explain(
        &self,
        target: ExplainTarget,
    ) -> Result<(CellDescription, Explanation), Fault> {
        match self {
            Client::Embedded(engine) => Ok((
                engine.describe(target.clone()).await?,
                engine.explain(target).await?,
            )),
            Client::Remote(server) => Ok(server.explain(target).await?),
        }
    }

    /// Plates made from a job; the plan is kept.
    pub(crate) async fn plan(&self, job: &str, request: PlanRequest) -> Result<Plan, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.plan(job.to_owned(), request).await?),
            Client::Remote(server) => Ok(server.plan(job.to_owned(), request).await?),
        }
    }

    /// A job that will make a plan.
    pub(crate) async fn order_plan(&self, order: PlanOrder) -> Result<Job, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.order_plan(order).await?),
            Client::Remote(server) => Ok(server.order_plan(order).await?),
        }
    }

    /// A kept plan.
    pub(crate) async fn kept_plan(&self, plan: &str) -> Result<Plan, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.kept_plan(plan).await?),
            Client::Remote(server) => Ok(server.kept_plan(plan).await?),
        }
    }

    /// Kept plans, newest first: those of a job, or all.
    pub(crate) async fn plans(&self, job: Option<&str>) -> Result<Vec<PlanSummary>, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.plans(job).await?),
            Client::Remote(server) => Ok(server.plans(job).await?),
        }
    }

    /// A report of a job or of a plan, as HTML.
    pub(crate) async fn report(&self, query: ReportQuery) -> Result<String, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.report(query).await?),
            Client::Remote(server) => Ok(server.report(&query).await?),
        }
    }

    /// Two jobs compared.
    pub(crate) async fn compare(
        &self,
        before: &str,
        after: &str,
        movers: u32,
    ) -> Result<Comparison, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.compare(before, after, movers).await?),
            Client::Remote(server) => Ok(server.compare(before, after, movers).await?),
        }
    }

    /// What was measured, held against the model.
    pub(crate) async fn check_measured(
        &self,
        spec: CampaignSpec,
        misses: u32,
    ) -> Result<Agreement, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.check_measured(spec, misses).await?),
            Client::Remote(server) => Ok(server.check_measured(spec, misses).await?),
        }
    }

    pub(crate) async fn sites(&self, smiles: &[String]) -> Result<Vec<SiteReport>, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.sites(smiles).await?),
            Client::Remote(server) => Ok(server.sites(smiles).await?),
        }
    }

    pub(crate) async fn reagents(&self, word: &str) -> Result<Vec<ReagentRow>, Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.reagents(word).await?),
            Client::Remote(server) => Ok(server.reagents(word).await?),
        }
    }

    /// Closes the data directory; unfinished jobs go on when it is opened again.
    pub(crate) async fn close(self) -> Result<(), Fault> {
        match self {
            Client::Embedded(engine) => Ok(engine.close().await?),
            Client::Remote(_) => Ok(()),
        }
    }
}

impl Changes {
    /// The present state at first, then each change; none after the end.
    pub(crate) async fn next(&mut self) -> Result<Option<Job>, Fault> {
        match self {
            Changes::Embedded {
                receiver,
                begun: begun @ false,
            } => {
                *begun = true;
                Ok(Some(receiver.borrow_and_update().clone()))
            }
            Changes::Embedded { receiver, .. } => match receiver.changed().await {
                Ok(()) => Ok(Some(receiver.borrow_and_update().clone())),
                Err(_) => Ok(None),
            },
            Changes::Remote(watch) => Ok(watch.next().await?),
        }
    }
}
