//! Stores that were damaged anywhere: what is found is said, nothing false is shown, and there is a way back.

use std::collections::BTreeMap;
use std::fs;
use std::path::{Path, PathBuf};

use crate::common::{CELLS, START_MS, block, columns, new_job, open};
use enolattice_store::{
    Health, JobId, JobRecord, JobState, PlanId, PlanRecord, StateChange, Store, StoreError,
    copy_jobs, look, mend, restore, set_aside_databases,
};
use proptest::prelude::*;

const DOCUMENT: &str = r#"{"volume_ul":100.0,"note":"invented"}"#;

fn make_job(store: &Store, title: &str, now_unix_ms: u64) -> JobId {
    let made = store.create_job(new_job(title, ""), now_unix_ms);
    made.unwrap().record.id
}

fn keep_plan(store: &Store, job: JobId, now_unix_ms: u64) -> PlanId {
    let id = store.new_plan_id(now_unix_ms).unwrap();
    let record = PlanRecord {
        id,
        job,
        title: "kept".into(),
        made_unix_ms: now_unix_ms,
        plates: 1,
        wells: 96,
    };
    store.keep_plan(record, DOCUMENT.into()).unwrap();
    id
}

/// A store with two jobs that are done, of 30 blocks each, and a plan of each; closed.
fn filled(dir: &Path) -> Vec<JobRecord> {
    let store = open(dir);
    for title in ["esters", "ketones"] {
        let job = make_job(&store, title, START_MS);
        for index in 0..30 {
            let first = u64::from(index) * CELLS;
            let scores = columns(first, CELLS);
            store
                .commit_block(job, block(index), first, &scores)
                .unwrap();
        }
        store.acknowledge().unwrap();
        let done = StateChange {
            from: JobState::Queued,
            to: JobState::Done,
            at_unix_ms: START_MS,
            failure: String::new(),
        };
        store.change_state(job, &done).unwrap();
        keep_plan(&store, job, START_MS);
    }
    store.jobs()
}

fn copy(from: &Path, to: &Path) {
    restore(from, to).unwrap();
}

/// Every file below a directory with its bytes.
fn files(dir: &Path) -> BTreeMap<PathBuf, Vec<u8>> {
    let mut found = BTreeMap::new();
    for entry in fs::read_dir(dir).unwrap() {
        let path = entry.unwrap().path();
        match path.is_dir() {
            true => found.extend(files(&path)),
            false => drop(found.insert(path.clone(), fs::read(path).unwrap())),
        }
    }
    found
}

/// The files in which damage matters.
fn parts(dir: &Path) -> Vec<PathBuf> {
    let all = files(dir).into_iter();
    let filled = all.filter(|(path, bytes)| !path.ends_with("lock") && !bytes.is_empty());
    filled.map(|(path, _)| path).collect()
}

/// Looks at a damaged store and mends it: both say the same, and looking changed nothing.
fn looked_at_and_mended(dir: &Path) -> Result<Health, StoreError> {
    let before = files(dir);
    let scratch = tempfile::tempdir().unwrap();
    let would = look(dir, scratch.path(), START_MS + 9);
    assert!(files(dir) == before, "looking changed a file");
    assert_eq!(fs::read_dir(scratch.path()).unwrap().count(), 0);
    let did = mend(dir, START_MS + 9);
    match (&would, &did) {
        (Ok(would), Ok(did)) => {
            let mut would = would.clone();
            // Set aside now, so that only one of them has it.
            would.set_aside.clone_from(&did.set_aside);
            assert_eq!(would, *did);
        }
        (Err(would), Err(did)) => assert_eq!(would.to_string(), did.to_string()),
        _ => panic!("{would:?} is not {did:?}"),
    }
    did
}

/// What a mended store shows is as it was; what it does not show it has told.
fn check_truth(dir: &Path, health: &Health, before: &[JobRecord]) {
    let store = open_told(dir);
    let known = store.jobs();
    assert_eq!(known.len() + health.report.unreadable.len(), before.len());
    assert_eq!(
        store.plans().len() + health.report.unreadable_plans.len(),
        2
    );
    for job in &known {
        let was = before.iter().find(|was| was.id == job.id);
        let was = was.expect("no job is made up");
        assert_eq!((&job.spec, job.cells), (&was.spec, was.cells));
        let blocks = store.committed_blocks(job.id).unwrap();
        for id in &blocks {
            let first = u64::from(id.index) * CELLS;
            let found = store.block(job.id, *id).unwrap();
            assert_eq!(found, Some(columns(first, CELLS)));
        }
        let complete = blocks.len() == 30;
        let again = health.report.queued_again.contains(&job.id);
        assert_eq!((complete, again), (job.state == JobState::Done, !complete));
    }
    for plan in store.plans() {
        assert_eq!(store.plan(plan.id).unwrap().1, DOCUMENT);
    }
}

/// Opens a store that was mended: only what needs somebody is told again.
fn open_told(dir: &Path) -> Store {
    let (store, report) = Store::open(dir, START_MS + 10).unwrap();
    let needs = report.unreadable.len() + report.unreadable_plans.len();
    assert_eq!(report.sentences().len(), needs, "{report:?}");
    store
}

/// Puts files of a sound copy in the place of those that cannot be read; then nothing is missing.
fn put_back(dir: &Path, sound: &Path, health: &Health, before: &[JobRecord]) {
    let report = &health.report;
    for (path, _) in report.unreadable.iter().chain(&report.unreadable_plans) {
        fs::copy(sound.join(path.strip_prefix(dir).unwrap()), path).unwrap();
    }
    let again = mend(dir, START_MS + 11).unwrap();
    assert!(!again.needs_somebody(), "{again:?}");
    let store = open(dir);
    let ids = |jobs: &[JobRecord]| jobs.iter().map(|job| job.id).collect::<Vec<_>>();
    assert_eq!(ids(&store.jobs()), ids(before));
    assert_eq!(store.plans().len(), 2);
}

#[test]
fn a_flipped_byte_anywhere_is_told_or_harmless() {
    let home = tempfile::tempdir().unwrap();
    let sound = home.path().join("sound");
    let before = filled(&sound);
    let names: Vec<PathBuf> = parts(&sound)
        .iter()
        .map(|path| path.strip_prefix(&sound).unwrap().to_owned())
        .collect();
    assert!(names.len() >= 7, "{names:?}");
    let config = ProptestConfig {
        cases: 48,
        failure_persistence: None,
        ..ProptestConfig::default()
    };
    proptest!(config, |(file in any::<prop::sample::Index>(), at in any::<prop::sample::Index>(), flip in 1u8..)| {
        let name = file.get(&names);
        let dir = tempfile::tempdir().unwrap();
        let dir = dir.path().join("damaged");
        copy(&sound, &dir);
        let path = dir.join(name);
        let mut bytes = fs::read(&path).unwrap();
        let at = at.index(bytes.len());
        bytes[at] ^= flip;
        fs::write(&path, bytes).unwrap();
        match looked_at_and_mended(&dir) {
            Ok(health) => {
                check_truth(&dir, &health, &before);
                put_back(&dir, &sound, &health, &before);
            }
            // A digit of the format that became another: who has no later version writes the digit again.
            Err(StoreError::TooNew { .. }) => {
                prop_assert!(name.ends_with("format"));
                fs::copy(sound.join("format"), path).unwrap();
                prop_assert!(mend(&dir, START_MS).unwrap().is_sound());
            }
            Err(error) => prop_assert!(false, "{name:?} at {at}: {error}"),
        }
    });
}

#[test]
fn a_file_that_is_cut_short_is_told_and_there_is_a_way_back() {
    let home = tempfile::tempdir().unwrap();
    let sound = home.path().join("sound");
    let before = filled(&sound);
    for path in parts(&sound) {
        let name = path.strip_prefix(&sound).unwrap();
        let length = fs::metadata(&path).unwrap().len();
        for keep in [0, length / 2, length - 1] {
            let dir = home.path().join("damaged");
            copy(&sound, &dir);
            let file = fs::File::options().write(true).open(dir.join(name));
            file.unwrap().set_len(keep).unwrap();
            let health = looked_at_and_mended(&dir).unwrap();
            if name.extension().is_some_and(|ending| ending == "json") {
                assert!(
                    health.needs_somebody(),
                    "{name:?} cut at {keep}: {health:?}"
                );
            }
            if name.ends_with("format") {
                assert_eq!(health.format_damaged.is_some(), keep == 0);
            }
            check_truth(&dir, &health, &before);
            put_back(&dir, &sound, &health, &before);
            fs::remove_dir_all(&dir).unwrap();
        }
    }
}

#[test]
fn another_format_is_told_as_what_it_is() {
    let home = tempfile::tempdir().unwrap();
    let dir = home.path().join("store");
    filled(&dir);
    for (found, later) in [
        ("2", true),
        ("77\n", true),
        ("0", false),
        ("", false),
        ("one", false),
    ] {
        fs::write(dir.join("format"), found).unwrap();
        let error = Store::open(&dir, START_MS).unwrap_err();
        assert_eq!(matches!(error, StoreError::TooNew { .. }), later, "{error}");
        assert!(error.to_string().contains(found.trim()), "{error}");
        let copied = copy_jobs(&dir, &home.path().join("copy"));
        assert!(copied.is_err() && !home.path().join("copy").exists());
        let mended = mend(&dir, START_MS);
        assert_eq!(mended.is_err(), later, "no later format is written over");
        assert_eq!(
            fs::read_to_string(dir.join("format")).unwrap() == "1\n",
            !later
        );
    }
    fs::write(dir.join("format"), [0xff, 0xfe]).unwrap();
    let mended = mend(&dir, START_MS).unwrap();
    assert!(mended.format_damaged.is_some() && !mended.is_sound());
    assert!(mend(&dir, START_MS).unwrap().is_sound());
}

#[test]
fn a_directory_without_a_store_stays_as_it_is() {
    let dir = tempfile::tempdir().unwrap();
    let scratch = tempfile::tempdir().unwrap();
    for outcome in [
        mend(dir.path(), START_MS),
        look(dir.path(), scratch.path(), START_MS),
        mend(&dir.path().join("absent"), START_MS),
    ] {
        let error = outcome.unwrap_err();
        assert!(matches!(error, StoreError::NoStore { .. }), "{error}");
    }
    assert_eq!(fs::read_dir(dir.path()).unwrap().count(), 0);
}

#[test]
fn a_store_in_use_is_neither_looked_at_nor_mended() {
    let dir = tempfile::tempdir().unwrap();
    let scratch = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    for outcome in [
        mend(dir.path(), START_MS),
        look(dir.path(), scratch.path(), START_MS),
    ] {
        let error = outcome.unwrap_err();
        assert!(matches!(error, StoreError::InUse { .. }), "{error}");
    }
    drop(store);
    assert!(mend(dir.path(), START_MS).unwrap().is_sound());
}

#[test]
fn leftovers_of_a_crash_are_named_and_removed() {
    let dir = tempfile::tempdir().unwrap();
    filled(dir.path());
    let left = [
        dir.path().join("journal/06f3k8a5zr0q2.unfinished"),
        dir.path().join("plans/06f3k8a5zr0q7.unfinished"),
    ];
    for path in &left {
        fs::write(path, "{\"ver").unwrap();
    }
    let health = looked_at_and_mended(dir.path()).unwrap();
    assert_eq!(health.report.leftovers, left);
    assert!(health.is_sound(), "after a crash they are usual");
    assert!(left.iter().all(|path| !path.exists()));
}

#[test]
fn blocks_whose_record_is_lost_are_counted_and_kept() {
    let dir = tempfile::tempdir().unwrap();
    let before = filled(dir.path());
    let record = dir.path().join(format!("journal/{}.json", before[0].id));
    let bytes = fs::read(&record).unwrap();
    fs::write(&record, "{").unwrap();
    let health = looked_at_and_mended(dir.path()).unwrap();
    assert_eq!(health.report.blocks_of_no_job, 30);
    assert!(health.needs_somebody());
    fs::write(&record, bytes).unwrap();
    let health = looked_at_and_mended(dir.path()).unwrap();
    assert!(health.is_sound(), "{health:?}");
    assert_eq!((health.jobs, health.blocks), (2, 60));
}

#[test]
fn two_databases_may_be_set_aside_at_the_same_time_of_a_clock_that_stands() {
    let dir = tempfile::tempdir().unwrap();
    filled(dir.path());
    for times in 1..=3 {
        let log = dir.path().join("db/db");
        let length = fs::metadata(&log).unwrap().len() as usize;
        let mut log_bytes = fs::read(&log).unwrap();
        log_bytes[..length / 2].fill(0x77);
        fs::write(&log, log_bytes).unwrap();
        let (store, report) = Store::open(dir.path(), 0).unwrap();
        let (aside, _) = report.set_aside.expect("is damaged");
        assert!(aside.exists());
        assert_eq!(set_aside_databases(dir.path()).unwrap().len(), times);
        for job in store.jobs() {
            let scores = columns(0, CELLS);
            store.commit_block(job.id, block(0), 0, &scores).unwrap();
            store.acknowledge().unwrap();
            let done = StateChange {
                from: JobState::Queued,
                to: JobState::Done,
                at_unix_ms: 0,
                failure: String::new(),
            };
            store.change_state(job.id, &done).unwrap();
        }
    }
}

/// A clock that jumps forward for centuries and back to 1970, as one without a battery does.
#[test]
fn ids_are_new_and_in_order_whatever_the_clock_says() {
    let dir = tempfile::tempdir().unwrap();
    let clock = [START_MS, 0, START_MS * 9, START_MS, 5, 0, START_MS + 1];
    let (mut jobs, mut plans) = (Vec::new(), Vec::new());
    for now_unix_ms in clock {
        let (store, _) = Store::open(dir.path(), now_unix_ms).unwrap();
        for _ in 0..3 {
            let job = make_job(&store, "jumping", now_unix_ms);
            jobs.push(job);
            plans.push(keep_plan(&store, job, now_unix_ms));
        }
        let listed: Vec<JobId> = store.jobs().iter().map(|job| job.id).collect();
        assert_eq!(listed, jobs, "in the order of submission");
    }
    assert!(jobs.is_sorted_by(|a, b| a < b));
    assert!(plans.is_sorted_by(|a, b| a < b));
}

/// With a clock that stands or went back, ids are counted on from the last: from all that were ever given.
#[test]
fn what_cannot_be_read_keeps_its_id() {
    let dir = tempfile::tempdir().unwrap();
    let (unreadable, gone, plan) = {
        let store = open(dir.path());
        let first = make_job(&store, "first", START_MS);
        let plan = keep_plan(&store, first, START_MS);
        let unreadable = make_job(&store, "unreadable", 0);
        let gone = make_job(&store, "gone", 0);
        store
            .commit_block(gone, block(0), 0, &columns(0, CELLS))
            .unwrap();
        store.acknowledge().unwrap();
        (unreadable, gone, plan)
    };
    let record = |job: JobId| dir.path().join(format!("journal/{job}.json"));
    fs::write(record(unreadable), "damaged").unwrap();
    fs::remove_file(record(gone)).unwrap();
    fs::write(dir.path().join(format!("plans/{plan}.json")), "damaged").unwrap();
    let (store, report) = Store::open(dir.path(), 0).unwrap();
    assert_eq!((report.unreadable.len(), report.blocks_of_no_job), (1, 1));
    let job = make_job(&store, "new", 0);
    assert!(job > gone && gone > unreadable);
    assert_eq!(store.progress(job).unwrap().blocks, 0);
    assert!(keep_plan(&store, job, 0) > plan);
    drop(store);
    assert_eq!(fs::read(record(unreadable)).unwrap(), b"damaged");
    let (store, _) = Store::open(dir.path(), 0).unwrap();
    assert_eq!(
        store.progress(job).unwrap().blocks,
        0,
        "no blocks of others"
    );
}
