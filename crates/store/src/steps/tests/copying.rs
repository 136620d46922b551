//! A copy that is cut short is complete, or says that it is not, or is not there; the store is none the worse.

use std::fs;
use std::path::Path;

use super::night::{START_MS, block, columns, commit, new_job, to_state};
use super::{Trouble, at_every_step, directory, place, run_copy, say};
use crate::{JobState, Scores, Store, StoreError, restore};

/// A job with two blocks; open.
fn store(dir: &Path) -> Store {
    let (store, _) = Store::open(&dir.join("store"), START_MS).expect("opens");
    if store.jobs().is_empty() {
        let made = store.create_job(new_job("esters"), START_MS);
        let job = made.expect("is made").record;
        for index in 0..2 {
            commit(&store, &job, index).expect("is stored");
        }
        store.acknowledge().expect("is synced");
        let done = to_state(JobState::Queued, JobState::Done);
        store.change_state(job.id, &done).expect("is journalled");
    }
    store
}

/// What is at the place of a copy that was cut short.
fn check(copy: &Path, trouble: Trouble, acknowledged: bool) {
    let is_empty = |mut entries: fs::ReadDir| entries.next().is_none();
    if fs::read_dir(copy).map_or(true, is_empty) {
        assert!(!acknowledged, "an acknowledged copy is gone");
        return;
    }
    match Store::open(copy, START_MS) {
        Ok((copy, report)) => {
            assert_eq!(report.sentences(), Vec::<String>::new());
            let job = &copy.jobs()[0];
            assert_eq!(job.state, JobState::Done);
            for index in 0..2 {
                let found = copy.block(job.id, block(index)).expect("is sound");
                assert_eq!(found, Some(columns(index)));
            }
        }
        Err(StoreError::CopyUnfinished { .. }) => {
            assert_eq!(
                trouble,
                Trouble::Dies,
                "nothing half is left by one who lives"
            );
            assert!(!acknowledged);
        }
        Err(error) => panic!("{error}"),
    }
}

#[test]
fn a_copy_that_is_cut_short_passes_for_none() {
    if let Some(dir) = place() {
        // The store is there already: opening it takes steps too, which other tests go through.
        let Ok((store, _)) = Store::open(&dir.join("store"), START_MS) else {
            return;
        };
        if store.copy_to(&dir.join("copy"), Scores::Included).is_ok() {
            say("acknowledged copy");
            drop(store);
            if restore(&dir.join("copy"), &dir.join("restored")).is_ok() {
                say("acknowledged restored");
            }
        }
        return;
    }
    let test = "copying::a_copy_that_is_cut_short_passes_for_none";
    let times = at_every_step(|trouble, at| {
        let dir = directory();
        let dir = dir.path();
        drop(store(dir));
        let heard = run_copy(test, dir, trouble, at);
        for name in ["copy", "restored"] {
            check(&dir.join(name), trouble, heard.acknowledged.contains(name));
        }
        let jobs = store(dir).jobs();
        assert_eq!((jobs.len(), jobs[0].state), (1, JobState::Done));
        heard.met
    });
    assert!(times > 50, "only {times} steps");
}
