//! Copies: taken while others write, without scores, of a store in use, and put back.

use std::collections::BTreeSet;
use std::fs;
use std::path::Path;
use std::sync::Mutex;
use std::sync::atomic::{AtomicBool, Ordering};

use crate::common::{CELLS, START_MS, block, columns, new_job, open};
use enolattice_store::{
    JobId, JobState, Order, PlanId, PlanRecord, RankRequest, Scores, StateChange, Store,
    StoreError, copy_jobs, restore,
};

const DOCUMENT: &str = r#"{"volume_ul":100.0}"#;

fn commit(store: &Store, job: JobId, index: u32) {
    let first = u64::from(index) * CELLS;
    store
        .commit_block(job, block(index), first, &columns(first, CELLS))
        .unwrap();
}

fn change(store: &Store, job: JobId, from: JobState, to: JobState) {
    let change = StateChange {
        from,
        to,
        at_unix_ms: START_MS,
        failure: String::new(),
    };
    store.change_state(job, &change).unwrap();
}

fn make_job(store: &Store) -> JobId {
    let made = store.create_job(new_job("copied", ""), START_MS).unwrap();
    made.record.id
}

fn keep_plan(store: &Store, job: JobId) -> PlanId {
    let id = store.new_plan_id(START_MS).unwrap();
    let record = PlanRecord {
        id,
        job,
        title: "copied".into(),
        made_unix_ms: START_MS,
        plates: 1,
        wells: 96,
    };
    store.keep_plan(record, DOCUMENT.into()).unwrap();
    id
}

/// A store with a job of five blocks that is done, one of two blocks that is worked at, and a plan.
fn filled(dir: &Path) -> (Store, JobId, JobId) {
    let store = open(dir);
    let (done, running) = (make_job(&store), make_job(&store));
    for index in 0..5 {
        commit(&store, done, index);
    }
    commit(&store, running, 0);
    commit(&store, running, 7);
    store.acknowledge().unwrap();
    change(&store, done, JobState::Queued, JobState::Done);
    change(&store, running, JobState::Queued, JobState::Running);
    keep_plan(&store, done);
    (store, done, running)
}

/// What was acknowledged to the one who writes.
#[derive(Clone, Default)]
struct Acknowledged {
    jobs: Vec<(JobId, JobState)>,
    blocks: BTreeSet<(JobId, u32)>,
    plans: Vec<PlanId>,
}

impl Acknowledged {
    fn check(&self, copy: &Store) {
        for (id, state) in &self.jobs {
            let found = copy.job(*id).unwrap().state;
            assert!(found == *state || found.is_ended(), "{found}, not {state}");
        }
        for (job, index) in &self.blocks {
            let first = u64::from(*index) * CELLS;
            let found = copy.block(*job, block(*index)).unwrap();
            assert_eq!(found, Some(columns(first, CELLS)), "block {index}");
        }
        for plan in &self.plans {
            assert_eq!(copy.plan(*plan).unwrap().1, DOCUMENT);
        }
    }
}

/// Makes jobs, blocks and plans and notes what it was told is safe.
fn write_until(store: &Store, told: &Mutex<Acknowledged>, stop: &AtomicBool) {
    while !stop.load(Ordering::Relaxed) {
        let job = make_job(store);
        told.lock().unwrap().jobs.push((job, JobState::Queued));
        for index in 0..6 {
            commit(store, job, index);
            if index % 2 == 1 {
                store.acknowledge().unwrap();
                let safe = (0..=index).map(|index| (job, index));
                told.lock().unwrap().blocks.extend(safe);
            }
        }
        let plan = keep_plan(store, job);
        told.lock().unwrap().plans.push(plan);
        change(store, job, JobState::Queued, JobState::Done);
        told.lock().unwrap().jobs.push((job, JobState::Done));
    }
}

#[test]
fn a_copy_taken_while_others_write_holds_all_that_was_acknowledged() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(&dir.path().join("store"));
    let (told, stop) = (Mutex::new(Acknowledged::default()), AtomicBool::new(false));
    std::thread::scope(|scope| {
        for _ in 0..2 {
            scope.spawn(|| write_until(&store, &told, &stop));
        }
        for number in 0..6 {
            while told.lock().unwrap().plans.len() < 2 * (number + 1) {
                std::thread::yield_now();
            }
            let before = told.lock().unwrap().clone();
            let to = dir.path().join(format!("copy-{number}"));
            let copied = store.copy_to(&to, Scores::Included).unwrap();
            let copy = open(&to);
            before.check(&copy);
            assert_eq!(copied.jobs, copy.jobs().len() as u64);
            assert_eq!(copied.plans, copy.plans().len() as u64);
            assert_eq!(copied.left_out, Vec::<String>::new());
            for plan in copy.plans() {
                copy.job(plan.job).expect("the job of each plan is there");
            }
            let blocks = copy.jobs().into_iter().map(|job| {
                let progress = copy.progress(job.id).unwrap();
                if job.state == JobState::Done {
                    assert_eq!(progress.blocks, 6, "a job that is done is whole");
                }
                progress.blocks
            });
            assert_eq!(blocks.sum::<u64>(), copied.blocks);
        }
        stop.store(true, Ordering::Relaxed);
    });
    // The store itself is none the worse.
    drop(store);
    told.lock().unwrap().check(&open(&dir.path().join("store")));
}

#[test]
fn a_copy_ranks_like_the_store() {
    let dir = tempfile::tempdir().unwrap();
    let (store, done, running) = filled(&dir.path().join("store"));
    let to = dir.path().join("copy");
    let copied = store.copy_to(&to, Scores::Included).unwrap();
    assert_eq!((copied.jobs, copied.plans, copied.blocks), (2, 1, 7));
    assert_eq!(copied.cells, 7 * CELLS);
    let back = dir.path().join("back");
    restore(&to, &back).unwrap();
    assert!(fs::read_dir(&to).unwrap().count() > 0, "the copy stays");
    let back = open(&back);
    let ask = RankRequest {
        order: Order::PHit,
        after: None,
        skip: 0,
        limit: 10_000,
        filter: None,
        best_per: None,
    };
    for job in [done, running] {
        let (theirs, ours) = (
            store.rank(job, &ask).unwrap(),
            back.rank(job, &ask).unwrap(),
        );
        assert_eq!(theirs.total, ours.total);
        assert_eq!(theirs.rows, ours.rows);
        assert_eq!(back.job(job).unwrap().state, store.job(job).unwrap().state);
    }
    assert_eq!(back.plans(), store.plans());
}

#[test]
fn without_scores_what_was_done_waits_again() {
    let dir = tempfile::tempdir().unwrap();
    let (store, done, running) = filled(&dir.path().join("store"));
    let from_inside = dir.path().join("inside");
    let from_outside = dir.path().join("outside");
    store.copy_to(&from_inside, Scores::LeftOut).unwrap();
    // The store is open, as by another process.
    let copied = copy_jobs(&dir.path().join("store"), &from_outside).unwrap();
    assert_eq!((copied.jobs, copied.plans, copied.blocks), (2, 1, 0));
    for copy in [from_inside, from_outside] {
        let copy = open(&copy);
        let spec = |store: &Store| store.job(done).unwrap().spec;
        assert_eq!(copy.job(done).unwrap().state, JobState::Queued);
        assert_eq!(spec(&copy), spec(&store));
        assert_eq!(copy.job(running).unwrap().state, JobState::Running);
        assert_eq!(copy.progress(done).unwrap().blocks, 0);
        assert_eq!(copy.plans(), store.plans());
        commit(&copy, done, 0);
    }
}

#[test]
fn jobs_can_be_copied_from_outside_while_they_are_made() {
    let dir = tempfile::tempdir().unwrap();
    let home = dir.path().join("store");
    let store = open(&home);
    let (told, stop) = (Mutex::new(Acknowledged::default()), AtomicBool::new(false));
    std::thread::scope(|scope| {
        scope.spawn(|| write_until(&store, &told, &stop));
        for number in 0..10 {
            let before = told.lock().unwrap().clone();
            let to = dir.path().join(format!("copy-{number}"));
            let copied = copy_jobs(&home, &to).unwrap();
            assert_eq!(copied.left_out, Vec::<String>::new());
            let copy = open(&to);
            for (job, _) in before.jobs {
                assert_eq!(copy.job(job).unwrap().state, JobState::Queued);
            }
            for plan in before.plans {
                assert_eq!(copy.plan(plan).unwrap().1, DOCUMENT);
            }
        }
        stop.store(true, Ordering::Relaxed);
    });
}

#[test]
fn what_cannot_be_read_is_left_out_and_said() {
    let dir = tempfile::tempdir().unwrap();
    let home = dir.path().join("store");
    let (store, done, running) = filled(&home);
    let plan = store.plans()[0].id;
    fs::write(home.join(format!("plans/{plan}.json")), "{").unwrap();
    fs::write(home.join(format!("journal/{running}.json")), "{").unwrap();
    // The store still has the record in memory; the plan's document is on the disk alone.
    let inside = store
        .copy_to(&dir.path().join("inside"), Scores::Included)
        .unwrap();
    assert_eq!((inside.jobs, inside.plans), (2, 0));
    assert!(inside.left_out[0].contains(&plan.to_string()), "{inside:?}");
    let to = dir.path().join("outside");
    let outside = copy_jobs(&home, &to).unwrap();
    assert_eq!((outside.jobs, outside.plans), (1, 0));
    assert_eq!(outside.left_out.len(), 2);
    assert_eq!(open(&to).jobs()[0].id, done);
}

#[test]
fn copies_go_into_new_or_empty_directories_and_come_from_stores() {
    let dir = tempfile::tempdir().unwrap();
    let (store, ..) = filled(&dir.path().join("store"));
    let taken = dir.path().join("taken");
    fs::create_dir(&taken).unwrap();
    fs::write(taken.join("thesis.txt"), "three years").unwrap();
    let refused = |outcome: StoreError| assert!(matches!(outcome, StoreError::NotEmpty { .. }));
    refused(store.copy_to(&taken, Scores::Included).unwrap_err());
    refused(copy_jobs(&dir.path().join("store"), &taken).unwrap_err());
    refused(
        store
            .copy_to(&taken.join("thesis.txt"), Scores::Included)
            .unwrap_err(),
    );
    drop(store);
    refused(restore(&dir.path().join("store"), &taken).unwrap_err());
    assert_eq!(fs::read(taken.join("thesis.txt")).unwrap(), b"three years");
    let none = restore(&taken, &dir.path().join("new")).unwrap_err();
    assert!(matches!(none, StoreError::NoStore { .. }), "{none}");
    assert!(!dir.path().join("new").exists());

    let empty = dir.path().join("empty");
    fs::create_dir(&empty).unwrap();
    restore(&dir.path().join("store"), &empty).unwrap();
    open(&empty);
}

#[test]
fn a_store_in_use_is_not_restored_from() {
    let dir = tempfile::tempdir().unwrap();
    let (store, ..) = filled(&dir.path().join("store"));
    let to = dir.path().join("to");
    let refused = restore(&dir.path().join("store"), &to).unwrap_err();
    assert!(matches!(refused, StoreError::InUse { .. }), "{refused}");
    assert!(!to.exists());
    drop(store);
    restore(&dir.path().join("store"), &to).unwrap();
}

#[test]
fn a_part_of_a_copy_is_no_store() {
    let dir = tempfile::tempdir().unwrap();
    let (store, ..) = filled(&dir.path().join("store"));
    let to = dir.path().join("copy");
    store.copy_to(&to, Scores::Included).unwrap();
    fs::write(to.join("unfinished-copy"), "").unwrap();
    let told = [
        Store::open(&to, START_MS).map(drop).unwrap_err(),
        restore(&to, &dir.path().join("new")).unwrap_err(),
        store.copy_to(&to, Scores::Included).map(drop).unwrap_err(),
    ];
    for error in told {
        assert!(
            matches!(error, StoreError::CopyUnfinished { .. }),
            "{error}"
        );
    }
}
