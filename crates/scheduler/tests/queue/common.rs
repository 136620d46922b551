//! A queue with a synthetic scorer.

use std::collections::BTreeMap;
use std::path::Path;
use std::sync::Arc;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::time::Duration;

use enolattice_grid::{BlockId, CampaignSpec, Columns};
use enolattice_model::Fingerprint;
use enolattice_scheduler::{Progress, Scheduler, SchedulerConfig, Work, WorkBlock};
use enolattice_store::{JobId, JobKind, JobRecord, JobState, NewJob, Store, Terms};
use tokio::sync::mpsc;

pub(crate) const BLOCKS: u32 = 40;
pub(crate) const CELLS: u64 = 50;
pub(crate) const MODEL: Fingerprint = Fingerprint([1; 32]);
/// How long a test waits for what must come; only a hanging queue ever waits that long.
pub(crate) const PATIENCE: Duration = Duration::from_secs(60);

pub(crate) fn block(index: u32) -> BlockId {
    BlockId { segment: 0, index }
}

/// Scores that depend on the cell's number alone.
pub(crate) fn columns(id: BlockId) -> Columns {
    let cells =
        (0..CELLS).map(|i| (u64::from(id.index) * CELLS + i).wrapping_mul(0x9e37_79b9_7f4a_7c15));
    let mut columns = Columns::default();
    for noise in cells {
        columns.expected_yield.push((noise >> 48) as u16);
        columns.p_hit.push((noise >> 32) as u16);
        columns.selectivity.push((noise >> 24) as u8);
        columns.feasibility.push((noise >> 16) as u8);
        columns.largest_loss.push(0);
        columns.cautions.push(noise as u32);
    }
    columns
}

pub(crate) fn work(
    model: Fingerprint,
    score: impl Fn(BlockId) -> Columns + Send + Sync + 'static,
) -> Work {
    let block = |index| WorkBlock {
        id: block(index),
        first_cell: u64::from(index) * CELLS,
        cells: CELLS,
    };
    Work {
        model_fingerprint: model,
        blocks: (0..BLOCKS).map(block).collect(),
        score: Arc::new(score),
    }
}

pub(crate) fn open(dir: &Path) -> Arc<Store> {
    Arc::new(Store::open(dir, 1_760_000_000_000).unwrap().0)
}

pub(crate) fn queue(store: &Store, title: &str) -> JobId {
    queue_with(store, title, Terms::default())
}

pub(crate) fn queue_with(store: &Store, title: &str, terms: Terms) -> JobId {
    let new = NewJob {
        spec: CampaignSpec {
            title: title.into(),
            ..CampaignSpec::default()
        },
        campaign_fingerprint: Fingerprint([7; 32]),
        model_fingerprint: MODEL,
        cells: u64::from(BLOCKS) * CELLS,
        blocks: u64::from(BLOCKS),
        request_id: String::new(),
        warnings: vec![],
        kind: JobKind::Screening,
        terms,
    };
    store.create_job(new, 1_760_000_000_000).unwrap().record.id
}

/// A scheduler and what it tells.
pub(crate) struct Bench {
    pub(crate) scheduler: Scheduler,
    pub(crate) told: mpsc::UnboundedReceiver<Progress>,
}

impl Bench {
    pub(crate) fn start(
        store: &Arc<Store>,
        threads: usize,
        work: impl Fn(&JobRecord) -> Result<Work, String> + Send + Sync + 'static,
    ) -> Bench {
        let (tell, told) = mpsc::unbounded_channel();
        let notify = Arc::new(move |progress| drop(tell.send(progress)));
        let config = SchedulerConfig {
            threads,
            work: Arc::new(move |record| Ok(work(record)?.into())),
            notify,
        };
        Bench {
            scheduler: Scheduler::start(store.clone(), config).unwrap(),
            told,
        }
    }

    /// Waits for word that a job is in a state.
    pub(crate) async fn until(&mut self, job: JobId, state: JobState) -> Progress {
        let wait = async {
            loop {
                let progress = self.told.recv().await.unwrap();
                if progress.job == job && progress.state == state {
                    return progress;
                }
            }
        };
        tokio::time::timeout(PATIENCE, wait).await.unwrap()
    }
}

pub(crate) fn all_blocks(store: &Store, job: JobId) -> BTreeMap<BlockId, Vec<u8>> {
    let bytes = |id| (id, store.block(job, id).unwrap().unwrap().to_bytes());
    store
        .committed_blocks(job)
        .unwrap()
        .into_iter()
        .map(bytes)
        .collect()
}

pub(crate) fn truth() -> BTreeMap<BlockId, Vec<u8>> {
    (0..BLOCKS)
        .map(|index| (block(index), columns(block(index)).to_bytes()))
        .collect()
}

/// Lets one block through for each permit.
#[derive(Default)]
pub(crate) struct Gate(pub(crate) AtomicUsize);

impl Gate {
    pub(crate) fn wait(&self) {
        let take = |permits: usize| permits.checked_sub(1);
        while self
            .0
            .fetch_update(Ordering::AcqRel, Ordering::Acquire, take)
            .is_err()
        {
            std::thread::sleep(Duration::from_millis(1));
        }
    }

    pub(crate) fn permit(&self) {
        self.0.fetch_add(1, Ordering::AcqRel);
    }
}
