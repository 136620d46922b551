//! A damaged store is opened, and that is cut short.

use std::fs;
use std::path::Path;

use super::night::{START_MS, block, columns, commit, new_job, to_state};
use super::{at_every_step, directory, place, run_copy};
use crate::{JobId, JobState, Store, set_aside_databases};

/// A job that has ended and one that is worked at, three and two blocks; closed.
fn filled(dir: &Path) {
    let (store, _) = Store::open(dir, START_MS).expect("opens");
    for (title, blocks, to) in [
        ("esters", 3, JobState::Done),
        ("ketones", 2, JobState::Running),
    ] {
        let made = store.create_job(new_job(title), START_MS);
        let job = made.expect("is made").record;
        for index in 0..blocks {
            commit(&store, &job, index).expect("is stored");
        }
        store.acknowledge().expect("is synced");
        let changed = store.change_state(job.id, &to_state(JobState::Queued, to));
        changed.expect("is journalled");
    }
}

/// Spoils a byte of the second block of the first job, so that only its checksum tells.
fn spoil(dir: &Path) -> JobId {
    let (store, _) = Store::open(dir, START_MS).expect("opens");
    let id = store.jobs()[0].id;
    let key = crate::block::key(id, block(1));
    let value = store.database.get(&key).expect("reads");
    let mut value = value.expect("is there").to_vec();
    value[100] ^= 1;
    store.database.replace(&key, &value).expect("is written");
    store.database.sync().expect("is synced");
    id
}

/// What the copy does: it opens, and at a full disk says no.
fn open_only(dir: &Path) {
    let _ = Store::open(dir, START_MS);
}

#[test]
fn a_broken_database_is_set_aside_whatever_cuts_it_short() {
    if let Some(dir) = place() {
        return open_only(&dir);
    }
    let test = "mending::a_broken_database_is_set_aside_whatever_cuts_it_short";
    let times = at_every_step(|trouble, at| {
        let dir = directory();
        let dir = dir.path();
        filled(dir);
        let log = dir.join("db/db");
        let length = fs::metadata(&log).expect("is there").len();
        fs::write(&log, vec![0x5a; length as usize]).expect("is written");
        let heard = run_copy(test, dir, trouble, at);
        let (store, _) = Store::open(dir, START_MS).expect("opens");
        let jobs = store.jobs();
        let states: Vec<JobState> = jobs.iter().map(|job| job.state).collect();
        assert_eq!(states, [JobState::Queued, JobState::Running], "{heard:?}");
        for job in &jobs {
            // Commit numbers begin again: pages begun before must be refused.
            assert!(job.generation > 1, "{trouble:?} at {at}: {heard:?}");
            assert_eq!(store.progress(job.id).expect("is known").blocks, 0);
        }
        let aside = set_aside_databases(dir).expect("a list");
        let whole = aside.iter().filter(|one| one.bytes >= length).count();
        assert!(whole > 0, "nothing is thrown away: {aside:?}");
        heard.met
    });
    assert!(times > 10, "only {times} steps");
}

#[test]
fn a_damaged_block_takes_no_other_with_it_whatever_cuts_it_short() {
    if let Some(dir) = place() {
        return open_only(&dir);
    }
    let test = "mending::a_damaged_block_takes_no_other_with_it_whatever_cuts_it_short";
    let times = at_every_step(|trouble, at| {
        let dir = directory();
        let dir = dir.path();
        filled(dir);
        let id = spoil(dir);
        let heard = run_copy(test, dir, trouble, at);
        let (store, report) = Store::open(dir, START_MS).expect("opens");
        assert_eq!(report.set_aside, None, "{trouble:?} at {at}: {heard:?}");
        let job = store.job(id).expect("is known");
        assert_eq!(job.state, JobState::Queued);
        assert!(job.generation > 1);
        let stored = |index| store.block(id, block(index)).expect("is sound");
        assert_eq!(
            [stored(0), stored(1), stored(2)],
            [Some(columns(0)), None, Some(columns(2))]
        );
        let other = store.jobs()[1].id;
        assert_eq!(store.progress(other).expect("is known").blocks, 2);
        heard.met
    });
    assert!(times > 10, "only {times} steps");
}
