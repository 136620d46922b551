//! Jobs: what is kept, what is refused, what survives.

use crate::common::{CELLS, START_MS, block, columns, new_job, open};
use enolattice_grid::CampaignSpec;
use enolattice_store::{JobId, JobState, NewJob, StateChange, Store, StoreError};

#[test]
fn a_job_and_its_states_survive_reopening() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let first = store
        .create_job(new_job("first", ""), START_MS)
        .unwrap()
        .record;
    let second = store
        .create_job(new_job("second", ""), START_MS)
        .unwrap()
        .record;
    assert!(
        first.id < second.id,
        "the same millisecond, yet in the order of submission"
    );
    let mut from = JobState::Queued;
    for to in JobState::ALL {
        let failure = format!("became {to}");
        let change = StateChange {
            from,
            to,
            at_unix_ms: START_MS + 7,
            failure: failure.clone(),
        };
        let changed = store.change_state(second.id, &change).unwrap();
        assert_eq!(
            (changed.state, changed.ended_unix_ms.is_some()),
            (to, to.is_ended())
        );
        from = to;
    }
    let before = store.jobs();
    drop(store);
    let store = open(dir.path());
    assert_eq!(store.jobs(), before);
    assert_eq!(store.job(first.id).unwrap(), first);
    assert_eq!(
        store.job(second.id).unwrap().ended_unix_ms,
        Some(START_MS + 7)
    );
}

#[test]
fn a_change_from_another_state_is_refused() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = store
        .create_job(new_job("one", ""), START_MS)
        .unwrap()
        .record;
    let change = StateChange {
        from: JobState::Running,
        to: JobState::Done,
        at_unix_ms: START_MS,
        failure: String::new(),
    };
    let refused = store.change_state(job.id, &change);
    assert!(matches!(
        refused,
        Err(StoreError::StateMoved {
            found: JobState::Queued,
            ..
        })
    ));
    assert_eq!(store.job(job.id).unwrap(), job);
}

#[test]
fn a_repeated_request_gives_the_same_job_and_another_is_refused() {
    let dir = tempfile::tempdir().unwrap();
    let job = {
        let store = open(dir.path());
        store
            .create_job(new_job("a", "request-1"), START_MS)
            .unwrap()
            .record
            .id
    };
    let store = open(dir.path());
    let again = store
        .create_job(new_job("a", "request-1"), START_MS + 1)
        .unwrap();
    assert_eq!((again.record.id, again.is_new), (job, false));
    let other = store.create_job(new_job("b", "request-1"), START_MS + 2);
    assert!(matches!(other, Err(StoreError::RequestIdReused { job: known, .. }) if known == job));
    assert!(
        store
            .create_job(new_job("a", ""), START_MS + 3)
            .unwrap()
            .is_new,
        "no id, a new job"
    );
    assert_eq!(store.jobs().len(), 2);
    let long = store.create_job(new_job("a", &"x".repeat(129)), START_MS);
    assert!(matches!(
        long,
        Err(StoreError::RequestIdTooLong { length: 129, .. })
    ));
}

#[test]
fn one_request_sent_by_many_at_once_makes_one_job() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let create = || {
        store
            .create_job(new_job("a", "same"), START_MS)
            .unwrap()
            .is_new
    };
    let made: usize = std::thread::scope(|scope| {
        let threads: Vec<_> = (0..8).map(|_| scope.spawn(create)).collect();
        threads
            .into_iter()
            .map(|thread| usize::from(thread.join().unwrap()))
            .sum()
    });
    assert_eq!((made, store.jobs().len()), (1, 1));
}

#[test]
fn numbers_of_a_campaign_come_back_to_the_last_bit() {
    let dir = tempfile::tempdir().unwrap();
    let mut spec = CampaignSpec {
        title: "\u{3b1}-Alkylation \"\\\n".into(),
        ..CampaignSpec::default()
    };
    spec.conditions.temperature_c = vec![0.1 + 0.2, -78.000_000_000_000_01, 5e-324, 1.797e308];
    let new = NewJob {
        spec: spec.clone(),
        ..new_job("", "")
    };
    let job = open(dir.path())
        .create_job(new, START_MS)
        .unwrap()
        .record
        .id;
    assert_eq!(*open(dir.path()).job(job).unwrap().spec, spec);
}

#[test]
fn an_unknown_job_is_named_in_the_error() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let absent: JobId = "06f3k8a5zr0q2".parse().unwrap();
    let errors = [
        store.job(absent).unwrap_err(),
        store.progress(absent).unwrap_err(),
        store
            .commit_block(absent, block(0), 0, &columns(0, CELLS))
            .unwrap_err(),
    ];
    for error in errors {
        assert!(error.to_string().contains("`06f3k8a5zr0q2`"), "{error}");
    }
}

#[test]
fn a_second_opener_is_told_that_the_store_is_in_use() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    assert!(matches!(
        Store::open(dir.path(), START_MS),
        Err(StoreError::InUse { .. })
    ));
    drop(store);
    open(dir.path());
}

#[test]
fn a_store_of_a_later_format_is_refused() {
    let dir = tempfile::tempdir().unwrap();
    drop(open(dir.path()));
    std::fs::write(dir.path().join("format"), "2\n").unwrap();
    let error = Store::open(dir.path(), START_MS).unwrap_err();
    assert!(
        matches!(&error, StoreError::TooNew { found, known: 1, .. } if found == "2"),
        "{error}"
    );
}

#[test]
fn unfinished_records_are_removed_and_unreadable_ones_reported() {
    let dir = tempfile::tempdir().unwrap();
    let job = open(dir.path())
        .create_job(new_job("kept", ""), START_MS)
        .unwrap()
        .record;
    let journal = dir.path().join("journal");
    std::fs::write(journal.join("06f3k8a5zr0q2.unfinished"), "{\"ver").unwrap();
    std::fs::write(journal.join("06f3k8a5zr0q2.json"), "{\"version\":1").unwrap();
    let record = std::fs::read(journal.join(format!("{}.json", job.id))).unwrap();
    std::fs::write(journal.join("copy.json"), record).unwrap();
    let (store, report) = Store::open(dir.path(), START_MS).unwrap();
    assert_eq!(store.jobs(), [job]);
    let names: Vec<_> = report
        .unreadable
        .iter()
        .filter_map(|(path, _)| path.file_name())
        .collect();
    assert_eq!(names, ["06f3k8a5zr0q2.json", "copy.json"]);
    assert_eq!(report.sentences().len(), 2);
    assert!(!journal.join("06f3k8a5zr0q2.unfinished").exists());
    assert!(journal.join("copy.json").exists());
}
