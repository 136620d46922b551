//! Damaged files: nothing false is shown, and what was lost is computed again.

use std::collections::BTreeSet;
use std::fs::{self, File};
use std::os::unix::fs::FileExt;
use std::path::{Path, PathBuf};

use crate::common::{START_MS, block, columns, new_job, noise, open};
use enolattice_store::{
    Commit, JobId, JobRecord, JobState, OpenReport, Order, RankRequest, StateChange, Store,
    StoreError,
};

/// Cells of a block as large as the real ones.
const FULL: u64 = 4096;
/// Blocks of the synthetic job: enough for several segments of the log.
const BLOCKS: u32 = 200;

fn commit(store: &Store, job: JobId, index: u32) -> Commit {
    let first = u64::from(index) * FULL;
    store
        .commit_block(job, block(index), first, &columns(first, FULL))
        .unwrap()
}

fn finish(store: &Store, job: JobId, to: JobState) -> JobRecord {
    let change = StateChange {
        from: JobState::Queued,
        to,
        at_unix_ms: START_MS,
        failure: String::new(),
    };
    store.change_state(job, &change).unwrap()
}

/// A store with a job of all blocks, ended or not, and a cancelled one of two blocks; closed.
fn filled(dir: &Path, ended: bool) -> (JobId, JobId) {
    let store = open(dir);
    let done = store
        .create_job(new_job("finished", ""), START_MS)
        .unwrap()
        .record
        .id;
    let cancelled = store
        .create_job(new_job("cancelled", ""), START_MS)
        .unwrap()
        .record
        .id;
    for index in 0..BLOCKS {
        commit(&store, done, index);
    }
    for index in 0..2 {
        commit(&store, cancelled, index);
    }
    store.acknowledge().unwrap();
    if ended {
        finish(&store, done, JobState::Done);
    }
    finish(&store, cancelled, JobState::Cancelled);
    (done, cancelled)
}

fn copy(from: &Path, to: &Path) {
    fs::create_dir_all(to).unwrap();
    for entry in fs::read_dir(from).unwrap().map(Result::unwrap) {
        let target = to.join(entry.file_name());
        match entry.file_type().unwrap().is_dir() {
            true => copy(&entry.path(), &target),
            false => drop(fs::copy(entry.path(), target).unwrap()),
        }
    }
}

/// Reopens a damaged copy, checks that it shows only the truth, and computes what is missing.
fn reopen_and_mend(dir: &Path, done: JobId, cancelled: JobId) -> OpenReport {
    let (store, report) = Store::open(dir, START_MS + 5).unwrap();
    assert_eq!(store.job(cancelled).unwrap().state, JobState::Cancelled);
    let there: BTreeSet<_> = store.committed_blocks(done).unwrap();
    for id in &there {
        let expected = columns(u64::from(id.index) * FULL, FULL);
        assert_eq!(store.block(done, *id).unwrap(), Some(expected));
    }
    let record = store.job(done).unwrap();
    let complete = there.len() == BLOCKS as usize;
    assert_eq!(
        record.state,
        if complete {
            JobState::Done
        } else {
            JobState::Queued
        }
    );
    assert_eq!(report.queued_again.contains(&done), !complete);
    assert_eq!(
        report.sentences().is_empty(),
        complete && report == OpenReport::default()
    );
    for index in 0..BLOCKS {
        let expected = if there.contains(&block(index)) {
            Commit::AlreadyThere
        } else {
            Commit::Stored
        };
        assert_eq!(commit(&store, done, index), expected);
    }
    store.acknowledge().unwrap();
    if !complete {
        finish(&store, done, JobState::Done);
    }
    drop(store);
    let store = open(dir);
    assert_eq!(store.progress(done).unwrap().blocks, u64::from(BLOCKS));
    report
}

/// Flips one bit of a copy's database.
fn flip(sound: &Path, dir: &Path, run: u64) {
    copy(sound, dir);
    let file = File::options()
        .read(true)
        .write(true)
        .open(dir.join("db/db"))
        .unwrap();
    let at = noise(run) % file.metadata().unwrap().len();
    let mut byte = [0];
    file.read_exact_at(&mut byte, at).unwrap();
    file.write_all_at(&[byte[0] ^ 0x10], at).unwrap();
}

#[test]
fn flipped_bits_under_a_finished_job_never_show() {
    let sound = tempfile::tempdir().unwrap();
    let (done, cancelled) = filled(sound.path(), true);
    let mut set_aside = 0;
    for run in 0..10 {
        let dir = tempfile::tempdir().unwrap();
        flip(sound.path(), dir.path(), run);
        let report = reopen_and_mend(dir.path(), done, cancelled);
        if let Some((aside, _)) = &report.set_aside {
            set_aside += 1;
            assert_eq!(
                *aside,
                dir.path().join(format!("db.broken-{}", START_MS + 5))
            );
            assert!(aside.join("db").exists(), "nothing is thrown away");
        }
    }
    assert!(set_aside > 0, "no flip hit a page");
}

/// Which blocks an unfinished job should have is not known: what is left is believed, the rest computed.
/// Where sled then still hides some, the next opening notices.
#[test]
fn flipped_bits_under_an_unfinished_job_never_show() {
    let sound = tempfile::tempdir().unwrap();
    let (job, _) = filled(sound.path(), false);
    for run in 20..26 {
        let dir = tempfile::tempdir().unwrap();
        flip(sound.path(), dir.path(), run);
        let (store, _) = Store::open(dir.path(), START_MS + 5).unwrap();
        for index in 0..BLOCKS {
            commit(&store, job, index);
        }
        store.acknowledge().unwrap();
        finish(&store, job, JobState::Done);
        for index in 0..BLOCKS {
            let expected = columns(u64::from(index) * FULL, FULL);
            assert_eq!(store.block(job, block(index)).unwrap(), Some(expected));
        }
        drop(store);
        let (store, report) = Store::open(dir.path(), START_MS + 6).unwrap();
        let complete = store.progress(job).unwrap().blocks == u64::from(BLOCKS);
        let waits = store.job(job).unwrap().state == JobState::Queued;
        assert_eq!(
            (complete, report.queued_again.contains(&job)),
            (!waits, waits)
        );
    }
}

#[test]
fn a_block_with_a_wrong_checksum_is_removed_and_computed_again() {
    let dir = tempfile::tempdir().unwrap();
    let (done, cancelled) = filled(dir.path(), true);
    {
        let db = sled::Config::new()
            .path(dir.path().join("db"))
            .segment_size(8 << 20)
            .open()
            .unwrap();
        let tree = db.open_tree("blocks").unwrap();
        let (key, value) = tree.iter().nth(70).unwrap().unwrap();
        let mut value = value.to_vec();
        value[9000] ^= 1;
        tree.insert(key, value).unwrap();
        db.flush().unwrap();
    }
    let report = reopen_and_mend(dir.path(), done, cancelled);
    assert_eq!(
        report.damaged,
        [(done, block(70), "the checksum does not match".to_string())]
    );
    assert_eq!((report.queued_again, report.set_aside), (vec![done], None));
}

#[test]
fn a_truncated_database_is_noticed() {
    let sound = tempfile::tempdir().unwrap();
    let (done, cancelled) = filled(sound.path(), true);
    let length = fs::metadata(sound.path().join("db/db")).unwrap().len();
    for keep in [0, 1, length / 3, length / 2, length - (9 << 20), length - 1] {
        let dir = tempfile::tempdir().unwrap();
        copy(sound.path(), dir.path());
        File::options()
            .write(true)
            .open(dir.path().join("db/db"))
            .unwrap()
            .set_len(keep)
            .unwrap();
        let report = reopen_and_mend(dir.path(), done, cancelled);
        if keep <= length / 2 {
            assert_eq!(report.queued_again, [done], "{keep} of {length}");
        }
    }
}

#[test]
fn a_lost_database_is_begun_anew() {
    let dir = tempfile::tempdir().unwrap();
    let (done, cancelled) = filled(dir.path(), true);
    fs::remove_dir_all(dir.path().join("db")).unwrap();
    let report = reopen_and_mend(dir.path(), done, cancelled);
    assert_eq!((report.queued_again, report.set_aside), (vec![done], None));
}

#[test]
fn damaged_settings_and_snapshots_of_the_database_are_survived() {
    let sound = tempfile::tempdir().unwrap();
    let (done, cancelled) = filled(sound.path(), true);
    let names = fs::read_dir(sound.path().join("db"))
        .unwrap()
        .map(|entry| entry.unwrap().path());
    let small: Vec<PathBuf> = names
        .filter(|path| path.is_file() && !path.ends_with("db/db"))
        .collect();
    assert!(!small.is_empty());
    for path in small {
        let dir = tempfile::tempdir().unwrap();
        copy(sound.path(), dir.path());
        let path = dir.path().join("db").join(path.file_name().unwrap());
        fs::write(&path, b"garbage").unwrap();
        reopen_and_mend(dir.path(), done, cancelled);
    }
}

#[test]
fn a_block_that_is_stored_with_other_scores_is_an_error() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = store
        .create_job(new_job("twice", ""), START_MS)
        .unwrap()
        .record
        .id;
    assert_eq!(commit(&store, job, 0), Commit::Stored);
    assert_eq!(commit(&store, job, 0), Commit::AlreadyThere);
    let other = store.commit_block(job, block(0), 0, &columns(1, FULL));
    assert!(matches!(other, Err(StoreError::BlockDiffers { .. })));
    assert_eq!(store.block(job, block(0)).unwrap(), Some(columns(0, FULL)));
    store.acknowledge().unwrap();
    let ask = RankRequest {
        order: Order::PHit,
        after: None,
        skip: 0,
        limit: 0,
        filter: None,
        best_per: None,
    };
    assert_eq!(store.rank(job, &ask).unwrap().total, FULL);
}
