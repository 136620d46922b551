//! Whatever is asked in whatever order, and wherever the engine stops: no job is lost, none is done twice, and what is done
//! has the bytes of an undisturbed run.

use std::collections::BTreeMap;
use std::path::Path;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::sync::{Arc, Mutex};
use std::time::Duration;

use enolattice_grid::BlockId;
use enolattice_scheduler::SchedulerError;
use enolattice_store::{JobId, JobState, Store, Terms};
use proptest::prelude::*;

use crate::common::{BLOCKS, Bench, MODEL, all_blocks, columns, open, queue_with, truth, work};

/// Something that happens.
#[derive(Clone, Debug)]
enum Step {
    Submit {
        requester: u8,
        priority: i32,
    },
    Pause(usize),
    Resume(usize),
    Cancel(usize),
    /// Time passes.
    Wait(u64),
    /// The engine stops between two blocks and is started again.
    Restart,
    /// The engine dies: nobody writes down that its jobs no longer run.
    Crash,
}

fn steps() -> impl Strategy<Value = Vec<Step>> {
    let step = prop_oneof![
        3 => (0u8..3, -1i32..2).prop_map(|(requester, priority)| Step::Submit { requester, priority }),
        2 => (0usize..8).prop_map(Step::Pause),
        2 => (0usize..8).prop_map(Step::Resume),
        1 => (0usize..8).prop_map(Step::Cancel),
        3 => (0u64..40).prop_map(Step::Wait),
        1 => Just(Step::Restart),
        1 => Just(Step::Crash),
    ];
    proptest::collection::vec(step, 1..24)
}

/// How often each block of each job was scored since the scores of the run before were last sure to be kept.
type Scored = Arc<Mutex<BTreeMap<(JobId, BlockId), usize>>>;

struct Night {
    store: Arc<Store>,
    bench: Bench,
    scored: Scored,
    jobs: Vec<JobId>,
    cancelled: Vec<JobId>,
}

fn begin(store: &Arc<Store>, scored: &Scored) -> Bench {
    let scored = scored.clone();
    Bench::start(store, 2, move |record| {
        let (scored, job) = (scored.clone(), record.id);
        Ok(work(MODEL, move |id: BlockId| {
            *scored.lock().unwrap().entry((job, id)).or_default() += 1;
            std::thread::sleep(Duration::from_micros(300));
            columns(id)
        }))
    })
}

impl Night {
    fn begin(dir: &Path) -> Night {
        let (store, scored) = (open(dir), Scored::default());
        Night {
            bench: begin(&store, &scored),
            store,
            scored,
            jobs: Vec::new(),
            cancelled: Vec::new(),
        }
    }

    fn job(&self, i: usize) -> Option<JobId> {
        (!self.jobs.is_empty()).then(|| self.jobs[i % self.jobs.len()])
    }

    async fn take(&mut self, step: &Step, dir: &Path) {
        let answer = match *step {
            Step::Submit {
                requester,
                priority,
            } => {
                let terms = Terms {
                    requester: requester.to_string(),
                    priority,
                    ..Terms::default()
                };
                let job = queue_with(&self.store, "one of many", terms);
                self.jobs.push(job);
                return self.bench.scheduler.submit(job);
            }
            Step::Wait(ms) => return tokio::time::sleep(Duration::from_millis(ms)).await,
            Step::Restart => return self.reopen(dir, true).await,
            Step::Crash => return self.reopen(dir, false).await,
            Step::Pause(i) => match self.job(i) {
                Some(job) => self.bench.scheduler.pause(job).await,
                None => return,
            },
            Step::Resume(i) => match self.job(i) {
                Some(job) => self.bench.scheduler.resume(job).await,
                None => return,
            },
            Step::Cancel(i) => match self.job(i) {
                Some(job) => {
                    let answer = self.bench.scheduler.cancel(job).await;
                    if answer.is_ok() {
                        self.cancelled.push(job);
                    }
                    answer
                }
                None => return,
            },
        };
        match answer {
            Ok(record) => assert_eq!(self.store.job(record.id).unwrap().id, record.id),
            Err(SchedulerError::Refused { .. }) => {}
            Err(other) => panic!("{other}"),
        }
    }

    /// Closes the store, be it in order or as a crash leaves it, and opens it again.
    async fn reopen(&mut self, dir: &Path, in_order: bool) {
        let running: Vec<JobId> = self.in_state(JobState::Running);
        self.bench.scheduler.shutdown().await;
        if !in_order {
            for job in running {
                // as if nobody had written down that it was interrupted
                if self.store.job(job).unwrap().state == JobState::Queued {
                    let crash = enolattice_store::StateChange {
                        from: JobState::Queued,
                        to: JobState::Running,
                        at_unix_ms: 0,
                        failure: String::new(),
                    };
                    self.store.change_state(job, &crash).unwrap();
                }
            }
        }
        // the directory has one owner: the old store and all who know it go first
        let nowhere = tempfile::tempdir().unwrap();
        self.store = open(nowhere.path());
        self.bench = begin(&self.store, &self.scored);
        self.store = open(dir);
        self.bench = begin(&self.store, &self.scored);
    }

    fn in_state(&self, state: JobState) -> Vec<JobId> {
        let jobs = self.store.jobs().into_iter();
        jobs.filter(|job| job.state == state)
            .map(|job| job.id)
            .collect()
    }

    /// Lets everything go on to its end.
    async fn morning(&mut self) {
        for job in self.in_state(JobState::Paused) {
            self.bench.scheduler.resume(job).await.unwrap();
        }
        let ended = |store: &Store| store.jobs().iter().all(|job| job.state.is_ended());
        let wait = async {
            while !ended(&self.store) {
                tokio::time::sleep(Duration::from_millis(5)).await;
            }
        };
        tokio::time::timeout(crate::common::PATIENCE, wait)
            .await
            .unwrap();
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(12))]

    #[test]
    fn no_job_is_lost_or_done_twice(steps in steps()) {
        let dir = tempfile::tempdir().unwrap();
        let runtime = tokio::runtime::Builder::new_multi_thread()
            .worker_threads(2)
            .enable_all()
            .build()
            .unwrap();
        runtime.block_on(async {
            let mut night = Night::begin(dir.path());
            for step in &steps {
                night.take(step, dir.path()).await;
            }
            night.morning().await;
            let known: Vec<JobId> = night.store.jobs().iter().map(|job| job.id).collect();
            prop_assert_eq!(&known, &night.jobs);
            let cells = AtomicUsize::new(0);
            for job in &night.jobs {
                let state = night.store.job(*job).unwrap().state;
                let blocks = all_blocks(&night.store, *job);
                if night.cancelled.contains(job) {
                    prop_assert_eq!(state, JobState::Cancelled);
                    let truth = truth();
                    prop_assert!(blocks.iter().all(|(id, bytes)| truth.get(id) == Some(bytes)));
                } else {
                    prop_assert_eq!(state, JobState::Done);
                    prop_assert_eq!(blocks, truth());
                }
                cells.fetch_add(BLOCKS as usize, Ordering::Relaxed);
            }
            // the engine was never killed in mid-block: no block was scored a second time
            let scored = night.scored.lock().unwrap();
            prop_assert!(scored.values().all(|times| *times == 1));
            prop_assert!(scored.len() <= cells.into_inner());
            Ok(())
        })?;
    }
}
