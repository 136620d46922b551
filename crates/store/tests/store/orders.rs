//! Files of rows: pages are the same with them and without, and they are never needed.

use std::fs;
use std::path::{Path, PathBuf};
use std::sync::atomic::AtomicBool;

use enolattice_store::{JobId, JobState, Order, RankRequest, Ranking, StateChange, Store};

use crate::common::{CELLS, START_MS, block, columns, new_job, open};

/// Enough for a file of rows.
const BLOCKS: u32 = 300;

const PLAIN: RankRequest<'static> = RankRequest {
    order: Order::ExpectedYield,
    after: None,
    skip: 0,
    limit: 100,
    filter: None,
    best_per: None,
};

/// A store with a job that is done.
fn done(dir: &Path) -> (Store, JobId) {
    let store = open(dir);
    let job = store.create_job(new_job("rows", ""), START_MS).unwrap();
    let job = job.record.id;
    for index in 0..BLOCKS {
        let first = u64::from(index) * CELLS;
        store
            .commit_block(job, block(index), first, &columns(first, CELLS))
            .unwrap();
    }
    store.acknowledge().unwrap();
    for (from, to) in [
        (JobState::Queued, JobState::Running),
        (JobState::Running, JobState::Done),
    ] {
        let change = StateChange {
            from,
            to,
            at_unix_ms: START_MS,
            failure: String::new(),
        };
        store.change_state(job, &change).unwrap();
    }
    (store, job)
}

/// All pages from a rank on, each asked for by the end of the page before.
fn pages(store: &Store, job: JobId, skip: u64) -> Vec<Ranking> {
    let mut request = RankRequest { skip, ..PLAIN };
    let mut pages = Vec::new();
    loop {
        let page = store.rank(job, &request).unwrap();
        let next = page.next;
        pages.push(page);
        if next.is_none() {
            return pages;
        }
        request = RankRequest {
            after: next,
            ..PLAIN
        };
    }
}

fn file_of_rows(dir: &Path, job: JobId) -> PathBuf {
    dir.join("orders").join(format!("{job}.rows"))
}

#[test]
fn pages_are_the_same_with_the_file_without_it_and_with_a_damaged_one() {
    let dir = tempfile::tempdir().unwrap();
    let (store, job) = done(dir.path());
    let go_on = AtomicBool::new(false);
    let cells = u64::from(BLOCKS) * CELLS;
    let skips = [
        0,
        1,
        99,
        cells / 2,
        cells - 150,
        cells - 1,
        cells,
        cells + 7,
    ];
    let searched: Vec<_> = skips.map(|skip| pages(&store, job, skip)).into();
    let half_way = store.rank(job, &RankRequest { skip: 500, ..PLAIN });
    let half_way = half_way.unwrap().next;

    assert!(store.write_order(job, &go_on).unwrap());
    let file = file_of_rows(dir.path(), job);
    assert!(file.exists());
    let same = |store: &Store, what: &str| {
        for (skip, searched) in skips.iter().zip(&searched) {
            assert_eq!(&pages(store, job, *skip), searched, "{what}, {skip}");
        }
    };
    same(&store, "written");
    // a page that was begun before the file was there goes on
    let after = RankRequest {
        after: half_way,
        ..PLAIN
    };
    assert_eq!(store.rank(job, &after).unwrap().first_rank, 601);

    drop(store);
    let store = open(dir.path());
    assert!(file.exists(), "it is opened with the store");
    same(&store, "opened again");
    drop(store);

    // a flipped bit in a chunk is met when the chunk is read, one in the end when the file is opened
    let sound = fs::read(&file).unwrap();
    for at in [10, sound.len() / 2, sound.len() - 30] {
        let mut flipped = sound.clone();
        flipped[at] ^= 4;
        fs::write(&file, &flipped).unwrap();
        let store = open(dir.path());
        same(&store, "damaged");
    }
    fs::write(&file, &sound[..sound.len() / 2]).unwrap();
    let store = open(dir.path());
    assert!(!file.exists(), "what is cut short is removed");
    same(&store, "cut short");
}

#[test]
fn files_of_rows_go_with_their_jobs_and_are_whole_or_not_there() {
    let dir = tempfile::tempdir().unwrap();
    let (store, job) = done(dir.path());
    let file = file_of_rows(dir.path(), job);
    let stop = AtomicBool::new(true);
    assert!(!store.write_order(job, &stop).unwrap());
    let orders = dir.path().join("orders");
    assert_eq!(
        fs::read_dir(&orders).unwrap().count(),
        0,
        "nothing half done"
    );
    stop.store(false, std::sync::atomic::Ordering::Relaxed);
    assert!(store.write_order(job, &stop).unwrap());
    fs::write(orders.join("left.unfinished"), "half").unwrap();
    drop(store);
    let store = open(dir.path());
    assert_eq!(fs::read_dir(&orders).unwrap().count(), 1, "leftovers go");
    store.delete_job(job).unwrap();
    assert!(!file.exists());
    drop(store);
    let store = open(dir.path());
    assert!(store.jobs().is_empty());
}

#[test]
fn a_deleted_job_leaves_nothing_and_its_record_goes_first() {
    let dir = tempfile::tempdir().unwrap();
    let (store, job) = done(dir.path());
    let record = dir.path().join("journal").join(format!("{job}.json"));
    drop(store);
    // as a crash after the first step of deleting leaves it
    fs::rename(&record, record.with_extension("deleted")).unwrap();
    let store = open(dir.path());
    assert!(store.jobs().is_empty());
    drop(store);
    assert!(!record.with_extension("deleted").exists());
    let (store, report) = Store::open(dir.path(), START_MS).unwrap();
    assert_eq!(report.blocks_of_no_job, 0, "its blocks went");
    drop(store);
    // blocks whose record is unreadable are kept for the day when a copy is put back
    let (store, job) = done(dir.path());
    let record = dir.path().join("journal").join(format!("{job}.json"));
    drop(store);
    let sound = fs::read(&record).unwrap();
    fs::write(&record, "no record").unwrap();
    let (store, report) = Store::open(dir.path(), START_MS).unwrap();
    assert_eq!(report.unreadable.len(), 1);
    drop(store);
    fs::write(&record, sound).unwrap();
    let store = open(dir.path());
    assert_eq!(store.progress(job).unwrap().blocks, u64::from(BLOCKS));
}
