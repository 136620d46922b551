//! Priorities, shares among requesters, pauses, times to begin and deadlines.

use std::sync::{Arc, Mutex};
use std::time::{SystemTime, UNIX_EPOCH};

use enolattice_grid::BlockId;
use enolattice_scheduler::SchedulerError;
use enolattice_store::{JobId, JobState, Terms};
use tokio::sync::mpsc;

use crate::common::{BLOCKS, Bench, CELLS, Gate, MODEL, columns, open, queue, queue_with, work};

fn now_unix_ms() -> u64 {
    let since = SystemTime::now().duration_since(UNIX_EPOCH).unwrap();
    since.as_millis() as u64
}

fn of(requester: &str) -> Terms {
    Terms {
        requester: requester.into(),
        ..Terms::default()
    }
}

/// The titles of the jobs whose blocks were scored, block by block.
type Order = Arc<Mutex<Vec<String>>>;

/// A bench whose first job waits at its first block until a permit is given, so that the others are queued by then.
fn gated(store: &Arc<enolattice_store::Store>) -> (Bench, Order, Arc<Gate>) {
    let (order, gate) = (Order::default(), Arc::new(Gate::default()));
    let (begun, at_the_gate) = (order.clone(), gate.clone());
    let bench = Bench::start(store, 1, move |record| {
        let (begun, gate, title) = (begun.clone(), at_the_gate.clone(), record.title.clone());
        Ok(work(MODEL, move |id: BlockId| {
            if title == "first" && id.index == 0 {
                gate.wait();
            }
            begun.lock().unwrap().push(title.clone());
            columns(id)
        }))
    });
    (bench, order, gate)
}

async fn all_done(bench: &mut Bench, jobs: &[JobId]) {
    let mut left: Vec<JobId> = jobs.to_vec();
    while !left.is_empty() {
        let progress = bench.told.recv().await.unwrap();
        if progress.state == JobState::Done {
            left.retain(|job| *job != progress.job);
        }
    }
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn the_urgent_come_first_and_requesters_share() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let first = queue_with(&store, "first", of("anna"));
    let (mut bench, order, gate) = gated(&store);
    bench.until(first, JobState::Running).await;
    let second = queue_with(&store, "second", of("anna"));
    let other = queue_with(&store, "other", of("boris"));
    let urgent = Terms {
        priority: 5,
        ..of("clara")
    };
    let urgent = queue_with(&store, "urgent", urgent);
    bench.scheduler.submit(urgent);
    // the cancel is answered after the word of the new jobs was heard
    let heard = queue(&store, "heard");
    bench.scheduler.cancel(heard).await.unwrap();
    gate.permit();
    all_done(&mut bench, &[first, second, other, urgent]).await;
    let order = order.lock().unwrap();
    let blocks = BLOCKS as usize;
    // while the urgent one was made ready, the first went on
    let begins = order.iter().position(|title| title == "urgent").unwrap();
    assert!(
        order[..begins].iter().all(|title| title == "first"),
        "{order:?}"
    );
    let ends = begins + blocks;
    assert!(
        order[begins..ends].iter().all(|title| title == "urgent"),
        "{order:?}"
    );
    // both requesters have two to one jobs, yet as long as both wait they get about the same
    let last_of_other = order.iter().rposition(|title| title == "other").unwrap();
    let meanwhile = &order[ends..=last_of_other];
    let of_anna = meanwhile.iter().filter(|title| *title != "other").count();
    assert!(of_anna > 0 && of_anna < 2 * blocks, "{order:?}");
    // of one requester's jobs the one with the least left goes first
    let last_of_first = order.iter().rposition(|title| title == "first").unwrap();
    let first_of_second = order.iter().position(|title| title == "second").unwrap();
    assert!(last_of_first < first_of_second, "{order:?}");
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn a_paused_job_keeps_its_blocks_and_goes_on_when_resumed() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = queue(&store, "first");
    let (mut bench, order, gate) = gated(&store);
    bench.until(job, JobState::Running).await;
    let refused = bench.scheduler.resume(job).await;
    assert!(
        matches!(refused, Err(SchedulerError::Refused { .. })),
        "{refused:?}"
    );
    let (paused, ()) = tokio::join!(bench.scheduler.pause(job), async { gate.permit() });
    assert_eq!(paused.unwrap().state, JobState::Paused);
    let before = store.progress(job).unwrap();
    assert_eq!(before.cells, before.cells_acknowledged);
    // a paused job survives the engine
    bench.scheduler.shutdown().await;
    drop(bench);
    drop(store);
    let store = open(dir.path());
    let (mut bench, again, gate) = gated(&store);
    gate.permit();
    let other = queue(&store, "other");
    bench.scheduler.submit(other);
    bench.until(other, JobState::Done).await;
    assert_eq!(store.job(job).unwrap().state, JobState::Paused);
    bench.scheduler.resume(job).await.unwrap();
    bench.until(job, JobState::Done).await;
    let scored = |order: &Order| {
        let order = order.lock().unwrap();
        order.iter().filter(|title| *title == "first").count()
    };
    assert_eq!(scored(&order) + scored(&again), BLOCKS as usize);
}

#[tokio::test(flavor = "multi_thread", worker_threads = 2)]
async fn jobs_wait_for_their_time_and_are_given_up_after_their_deadline() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let now = now_unix_ms();
    let later = Terms {
        not_before_unix_ms: Some(now + 1500),
        priority: 9,
        ..Terms::default()
    };
    let later = queue_with(&store, "later", later);
    let late = Terms {
        deadline_unix_ms: Some(now - 1),
        ..Terms::default()
    };
    let late = queue_with(&store, "late", late);
    let slow = Terms {
        deadline_unix_ms: Some(now + 1000),
        ..Terms::default()
    };
    let slow = queue_with(&store, "slow", slow);
    let (told, mut slow_began) = mpsc::unbounded_channel();
    let mut bench = Bench::start(&store, 1, move |record| {
        let (slow, told) = (record.title == "slow", told.clone());
        Ok(work(MODEL, move |id: BlockId| {
            if slow {
                told.send(()).unwrap();
                std::thread::sleep(std::time::Duration::from_millis(60));
            }
            columns(id)
        }))
    });
    let given_up = bench.until(late, JobState::Failed).await;
    assert!(given_up.failure.contains("before any"), "{given_up:?}");
    slow_began.recv().await.unwrap();
    let given_up = bench.until(slow, JobState::Failed).await;
    assert!(given_up.failure.contains("can be ranked"), "{given_up:?}");
    assert!((CELLS..u64::from(BLOCKS) * CELLS).contains(&given_up.cells_done));
    bench.until(later, JobState::Done).await;
    assert!(now_unix_ms() >= now + 1500);
}
