//! Opening an engine.

use std::path::PathBuf;
use std::sync::Arc;
use std::time::{SystemTime, UNIX_EPOCH};

use enolattice_reagents::{Library, OwnTable};
use enolattice_scheduler::{Scheduler, SchedulerConfig, Task, Work};
use enolattice_store::{JobKind, JobRecord, Store};

use crate::engine::{Queue, blocking};
use crate::grids::Grids;
use crate::models::{Models, OwnModel, laid_over};
use crate::plan_orders::planning;
use crate::{Engine, EngineError};

/// How an engine is opened.
#[derive(Clone, Debug, Default)]
pub struct EngineConfig {
    /// Directory of its data.
    pub data_dir: PathBuf,
    /// Compute threads; 0: one for each core.
    pub threads: usize,
    /// The laboratory's own tables of reagents, laid over the library for all that the engine does.
    pub library: Vec<OwnTable>,
}

impl Engine {
    /// Opens the data directory, takes up unfinished jobs and starts the scheduler.
    ///
    /// # Errors
    /// [`EngineError::Store`] where the directory is in use or cannot be read.
    pub async fn open(config: EngineConfig) -> Result<Engine, EngineError> {
        let threads = config.threads;
        let mut engine = Engine::open_idle(config).await?;
        if let Some(queue) = &mut engine.queue {
            let (grids, store) = (queue.grids.clone(), queue.store.clone());
            let kept_in = store.clone();
            let work = move |record: &JobRecord| match &record.kind {
                JobKind::Screening => {
                    let grid = grids.of_record(record).map_err(|error| error.to_string())?;
                    Ok(Task::Blocks(Work::of_grid(grid)))
                }
                JobKind::Planning { of, request } => {
                    planning(&kept_in, &grids, record, *of, request).map(Task::Piece)
                }
            };
            let config = SchedulerConfig {
                threads,
                work: Arc::new(work),
                notify: queue.watchers.clone().follow(store),
            };
            queue.scheduler = Some(Scheduler::start(queue.store.clone(), config)?);
        }
        Ok(engine)
    }

    /// Opens the data directory to look at its jobs and to queue or cancel some; works at none.
    ///
    /// # Errors
    /// [`EngineError::Store`] where the directory is in use or cannot be read.
    pub async fn open_idle(config: EngineConfig) -> Result<Engine, EngineError> {
        blocking(move || {
            let OwnModel { model, conflicts } = model(&config.library)?;
            let models = Arc::new(Models::new(model));
            let (store, report) = Store::open(&config.data_dir, now_unix_ms())?;
            let notices = report.sentences();
            for notice in &notices {
                tracing::warn!(data_dir = %config.data_dir.display(), notice, "data directory");
            }
            let queue = Queue {
                store: Arc::new(store),
                grids: Arc::new(Grids::new(models.clone())),
                watchers: Arc::default(),
                scheduler: None,
            };
            Ok(Engine {
                models,
                notices: conflicts.into_iter().chain(notices).collect(),
                threads: config.threads,
                queue: Some(queue),
            })
        })
        .await
    }

    /// An engine without a data directory: it explains given cells, finds sites, knows the library and
    /// looks at campaigns, and refuses whatever needs a job.
    ///
    /// # Errors
    /// [`EngineError::Input`] with every fault of the own tables, [`EngineError::Store`] where the
    /// built-in library is damaged.
    pub async fn without_data(
        threads: usize,
        library: Vec<OwnTable>,
    ) -> Result<Engine, EngineError> {
        blocking(move || {
            let OwnModel { model, conflicts } = model(&library)?;
            Ok(Engine {
                models: Arc::new(Models::new(model)),
                notices: conflicts,
                threads,
                queue: None,
            })
        })
        .await
    }
}

/// The model of the built-in library and what a laboratory lays over it.
fn model(own: &[OwnTable]) -> Result<OwnModel, EngineError> {
    let library = Library::builtin().map_err(|fault| EngineError::Store {
        reason: format!("the built-in library is damaged: {fault}"),
    })?;
    let own = laid_over(&library, own).map_err(EngineError::Input)?;
    for conflict in &own.conflicts {
        tracing::warn!(conflict, "own library");
    }
    Ok(own)
}

/// The clock, milliseconds since 1970-01-01 UTC.
pub(crate) fn now_unix_ms() -> u64 {
    SystemTime::now()
        .duration_since(UNIX_EPOCH)
        .map_or(0, |since| since.as_millis() as u64)
}
