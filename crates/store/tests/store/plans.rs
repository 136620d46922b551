//! Plans: what is kept, what is refused, what survives.

use std::fs;
use std::path::{Path, PathBuf};

use crate::common::{START_MS, new_job, open};
use enolattice_store::{JobId, PlanId, PlanRecord, Store, StoreError};

/// A document whose numbers would not survive a float in between.
const DOCUMENT: &str =
    r#"{"wells":["A1","AF48"],"volume_ul":0.30000000000000004,"seed":18446744073709551615}"#;

fn job(store: &Store) -> JobId {
    let created = store.create_job(new_job("planned", ""), START_MS);
    created.unwrap().record.id
}

fn keep(store: &Store, job: JobId, title: &str) -> PlanRecord {
    let record = PlanRecord {
        id: store.new_plan_id(START_MS).unwrap(),
        job,
        title: title.into(),
        made_unix_ms: START_MS,
        plates: 1,
        wells: 96,
    };
    store.keep_plan(record.clone(), DOCUMENT.into()).unwrap();
    record
}

fn file(dir: &Path, plan: PlanId) -> PathBuf {
    dir.join("plans").join(format!("{plan}.json"))
}

#[test]
fn kept_plans_survive_reopening_in_their_order() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = job(&store);
    let kept = ["first", "second", "third"].map(|title| keep(&store, job, title));
    assert_eq!(
        store.plans(),
        kept,
        "the same millisecond, yet in their order"
    );
    drop(store);
    let store = open(dir.path());
    assert_eq!(store.plans(), kept);
    for record in kept {
        let (read, document) = store.plan(record.id).unwrap();
        assert_eq!((read, document.as_str()), (record, DOCUMENT));
    }
    let later = keep(&store, job, "fourth");
    assert!(
        store.plans()[..3]
            .iter()
            .all(|earlier| earlier.id < later.id)
    );
}

#[test]
fn a_damaged_plan_is_told_and_the_others_are_read() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = job(&store);
    let [whole, changed, cut] = ["whole", "changed", "cut"].map(|title| keep(&store, job, title));
    drop(store);
    let text = fs::read_to_string(file(dir.path(), changed.id)).unwrap();
    fs::write(file(dir.path(), changed.id), text.replace("AF48", "AF47")).unwrap();
    fs::write(file(dir.path(), cut.id), &text[..text.len() / 2]).unwrap();
    let begun = file(dir.path(), cut.id).with_extension("unfinished");
    fs::write(&begun, &text[..9]).unwrap();

    let (store, report) = Store::open(dir.path(), START_MS).unwrap();
    assert_eq!(store.plans(), std::slice::from_ref(&whole));
    assert_eq!(store.plan(whole.id).unwrap().1, DOCUMENT);
    let told: Vec<_> = report
        .unreadable_plans
        .iter()
        .map(|(path, _)| path.clone())
        .collect();
    assert_eq!(
        told,
        [file(dir.path(), changed.id), file(dir.path(), cut.id)]
    );
    assert!(report.unreadable_plans[0].1.contains("checksum"));
    assert_eq!(report.sentences().len(), 2);
    assert!(told.iter().all(|path| path.exists()) && !begun.exists());
    assert!(matches!(
        store.plan(changed.id),
        Err(StoreError::PlanUnknown { .. })
    ));
}

#[test]
fn a_plan_that_is_damaged_while_the_store_is_open_is_not_shown() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = job(&store);
    let plan = keep(&store, job, "");
    let other = keep(&store, job, "");
    fs::copy(file(dir.path(), other.id), file(dir.path(), plan.id)).unwrap();
    match store.plan(plan.id) {
        Err(StoreError::PlanDamaged {
            plan: named,
            reason,
            ..
        }) => {
            assert_eq!(named, plan.id);
            assert!(reason.contains(&other.id.to_string()), "{reason}");
        }
        shown => panic!("{shown:?}"),
    }
}

#[test]
fn what_is_no_plan_is_refused() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = job(&store);
    let record = PlanRecord {
        id: store.new_plan_id(START_MS).unwrap(),
        job,
        title: String::new(),
        made_unix_ms: START_MS,
        plates: 1,
        wells: 1,
    };
    let refused = store.keep_plan(record.clone(), "{\"half\":".into());
    assert!(matches!(refused, Err(StoreError::Unwritable { .. })));
    let of_nothing = PlanRecord {
        job: "0000000000000".parse().unwrap(),
        ..record.clone()
    };
    let refused = store.keep_plan(of_nothing, DOCUMENT.into());
    assert!(matches!(refused, Err(StoreError::JobUnknown { .. })));
    assert!(store.plans().is_empty());
    assert!(matches!(
        store.plan(record.id),
        Err(StoreError::PlanUnknown { .. })
    ));
    assert!(matches!(
        "no plan".parse::<PlanId>(),
        Err(StoreError::PlanUnknown { .. })
    ));
}
