//! What is run, resumed, cancelled and given up.

use std::collections::BTreeMap;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::sync::{Arc, Mutex};
use std::time::Duration;

use enolattice_model::Fingerprint;
use enolattice_scheduler::{SchedulerError, Work};
use enolattice_store::{JobState, StateChange};
use tokio::sync::mpsc;

use crate::common::{
    BLOCKS, Bench, CELLS, Gate, MODEL, all_blocks, block, columns, open, queue, truth, work,
};

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn one_thread_two_threads_and_an_interrupted_run_give_the_same_bytes() {
    for (threads, interrupted) in [(1, false), (2, false), (1, true), (2, true)] {
        let dir = tempfile::tempdir().unwrap();
        let mut store = open(dir.path());
        let job = queue(&store, "bytes");
        let scored = Arc::new(AtomicUsize::new(0));
        if interrupted {
            let (reached, mut hears) = mpsc::unbounded_channel();
            let gate = Arc::new(Gate::default());
            let at_the_gate = gate.clone();
            let bench = Bench::start(&store, threads, move |_| {
                let (reached, gate) = (reached.clone(), at_the_gate.clone());
                Ok(work(MODEL, move |id| {
                    if id.index >= 11 {
                        let _ = reached.send(());
                        gate.wait();
                    }
                    columns(id)
                }))
            });
            hears.recv().await.unwrap();
            let trickle = async {
                loop {
                    gate.permit();
                    tokio::time::sleep(Duration::from_millis(20)).await;
                }
            };
            tokio::select! {
                () = bench.scheduler.shutdown() => {}
                () = trickle => {}
            }
            drop(bench);
            assert_eq!(store.job(job).unwrap().state, JobState::Queued);
            assert!(
                Arc::into_inner(store).is_some(),
                "nobody holds the store after the shutdown"
            );
            store = open(dir.path());
        }
        let before = store.committed_blocks(job).unwrap().len();
        assert!(if interrupted {
            (11..BLOCKS as usize).contains(&before)
        } else {
            before == 0
        });
        let count = scored.clone();
        let mut bench = Bench::start(&store, threads, move |_| {
            let count = count.clone();
            Ok(work(MODEL, move |id| {
                count.fetch_add(1, Ordering::Relaxed);
                columns(id)
            }))
        });
        let done = bench.until(job, JobState::Done).await;
        assert_eq!(
            done.cells_done,
            u64::from(BLOCKS) * CELLS,
            "done means acknowledged"
        );
        assert_eq!(done.best_yield, store.progress(job).unwrap().best_yield);
        assert_eq!(
            scored.load(Ordering::Relaxed),
            BLOCKS as usize - before,
            "no block is scored twice"
        );
        assert_eq!(
            all_blocks(&store, job),
            truth(),
            "{threads} threads, interrupted: {interrupted}"
        );
    }
}

#[tokio::test]
async fn jobs_left_running_by_a_crash_are_taken_up_in_their_old_order() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let jobs = ["first", "second", "third"].map(|title| queue(&store, title));
    let crash = StateChange {
        from: JobState::Queued,
        to: JobState::Running,
        at_unix_ms: 0,
        failure: String::new(),
    };
    store.change_state(jobs[0], &crash).unwrap();
    store
        .commit_block(jobs[0], block(4), 4 * CELLS, &columns(block(4)))
        .unwrap();
    let order = Arc::new(Mutex::new(Vec::new()));
    let begun = order.clone();
    let mut bench = Bench::start(&store, 1, move |record| {
        begun.lock().unwrap().push(record.title.clone());
        Ok(work(MODEL, columns))
    });
    for job in jobs {
        bench.until(job, JobState::Done).await;
        assert_eq!(all_blocks(&store, job), truth());
    }
    let late = queue(&store, "late");
    bench.scheduler.submit(late);
    bench.until(late, JobState::Done).await;
    assert_eq!(*order.lock().unwrap(), ["first", "second", "third", "late"]);
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn a_cancelled_job_stops_between_blocks_and_a_waiting_one_at_once() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let [running, waiting, after] =
        ["running", "waiting", "after"].map(|title| queue(&store, title));
    let (reached, mut hears) = mpsc::unbounded_channel();
    let gate = Arc::new(Gate::default());
    let at_the_gate = gate.clone();
    let mut bench = Bench::start(&store, 1, move |record| {
        let (reached, gate) = (reached.clone(), at_the_gate.clone());
        let gated = record.title == "running";
        Ok(work(MODEL, move |id| {
            if gated && id.index == 5 {
                reached.send(()).unwrap();
                gate.wait();
            }
            columns(id)
        }))
    });
    hears.recv().await.unwrap();
    // Commands are heard in their order: when the second cancel is answered, the first has been heard.
    let then_go_on = async {
        let cancelled = bench.scheduler.cancel(waiting).await.unwrap();
        assert_eq!(cancelled.state, JobState::Cancelled);
        assert_eq!(store.job(running).unwrap().state, JobState::Running);
        gate.permit();
    };
    let (record, ()) = tokio::join!(bench.scheduler.cancel(running), then_go_on);
    let record = record.unwrap();
    assert_eq!(
        (record.state, record.failure.as_str()),
        (JobState::Cancelled, "")
    );
    assert_eq!(
        all_blocks(&store, running),
        truth().into_iter().take(6).collect(),
        "the block in hand is kept"
    );
    bench.until(after, JobState::Done).await;
    for job in [running, waiting, after] {
        let again = bench.scheduler.cancel(job).await;
        assert!(
            matches!(again, Err(SchedulerError::Refused { .. })),
            "{again:?}"
        );
    }
    bench.scheduler.shutdown().await;
    assert!(matches!(
        bench.scheduler.cancel(after).await,
        Err(SchedulerError::ShutDown)
    ));
}

#[tokio::test]
async fn a_block_that_panics_is_tried_twice_and_leaves_a_gap() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = queue(&store, "panics");
    let tries = Arc::new(Mutex::new(BTreeMap::<u32, usize>::new()));
    let count = tries.clone();
    let mut bench = Bench::start(&store, 2, move |_| {
        let tries = count.clone();
        Ok(work(MODEL, move |id| {
            let tried = {
                let mut tries = tries.lock().unwrap();
                let tried = tries.entry(id.index).or_default();
                *tried += 1;
                *tried
            };
            assert!(id.index != 3, "invented fault in block {}", id.index);
            assert!(id.index != 8 || tried > 1, "passing fault");
            columns(id)
        }))
    });
    let ended = bench.until(job, JobState::DoneWithGaps).await;
    assert_eq!(ended.cells_done, u64::from(BLOCKS - 1) * CELLS);
    assert!(
        ended.failure.contains("0/3: invented fault in block 3"),
        "{}",
        ended.failure
    );
    assert_eq!(store.job(job).unwrap().failure, ended.failure);
    let mut expected = truth();
    expected.remove(&block(3));
    assert_eq!(all_blocks(&store, job), expected);
    let tries = tries.lock().unwrap();
    assert_eq!([tries[&3], tries[&8], tries[&9]], [2, 2, 1]);
}

#[tokio::test]
async fn work_that_cannot_be_made_or_never_succeeds_fails_with_the_reason() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let titles = ["refused", "breaks", "shrunk", "hopeless", "sound"];
    let jobs = titles.map(|title| queue(&store, title));
    let mut bench = Bench::start(&store, 2, |record| match record.title.as_str() {
        "refused" => Err("the base `LDA` is no longer in the library".into()),
        "breaks" => panic!("invented fault"),
        "shrunk" => Ok(Work {
            blocks: vec![],
            ..work(MODEL, columns)
        }),
        "hopeless" => Ok(work(MODEL, |_| panic!("never works"))),
        _ => Ok(work(MODEL, columns)),
    });
    let reasons = [
        "no longer in the library",
        "invented fault",
        "0 blocks now and had 40",
        "never works",
    ];
    for (job, reason) in jobs.into_iter().zip(reasons) {
        let failed = bench.until(job, JobState::Failed).await;
        assert!(failed.failure.contains(reason), "{}", failed.failure);
    }
    bench.until(jobs[4], JobState::Done).await;
}

#[tokio::test]
async fn a_job_begun_by_another_model_is_begun_anew() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = queue(&store, "upgraded");
    store
        .commit_block(job, block(0), 0, &columns(block(17)))
        .unwrap();
    let newer = Fingerprint([2; 32]);
    let mut bench = Bench::start(&store, 1, move |_| Ok(work(newer, columns)));
    bench.until(job, JobState::Done).await;
    let record = store.job(job).unwrap();
    assert_eq!((record.model_fingerprint, record.generation), (newer, 2));
    assert_eq!(all_blocks(&store, job), truth());
}
