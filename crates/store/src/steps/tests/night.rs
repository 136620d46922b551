//! A night's work: jobs made, screened, begun anew by another model, planned, ended and cancelled.

use std::path::Path;

use enolattice_grid::{BlockId, CampaignSpec, Columns};
use enolattice_model::Fingerprint;

use super::{at_every_step, directory, place, run_copy, say};
use crate::{
    Commit, JobRecord, JobState, NewJob, OpenReport, PlanRecord, StateChange, Store, StoreError,
};

pub(super) const START_MS: u64 = 1_760_000_000_000;
const CELLS: u64 = 300;
const PLAN: &str = r#"{"volume_ul":100.0}"#;
const FIRST_MODEL: Fingerprint = Fingerprint([2; 32]);
const OTHER_MODEL: Fingerprint = Fingerprint([3; 32]);

/// One thing to do, which may be done before.
#[derive(Clone, Copy, Debug)]
enum Task {
    Submit(&'static str),
    State(&'static str, JobState),
    Blocks(&'static str, u32),
    OtherModel(&'static str),
    Plan(&'static str),
}

/// The night, in its order.
const NIGHT: [Task; 11] = [
    Task::Submit("esters"),
    Task::State("esters", JobState::Running),
    Task::Blocks("esters", 3),
    Task::Submit("ketones"),
    Task::State("esters", JobState::Done),
    Task::Plan("esters"),
    Task::State("ketones", JobState::Running),
    Task::Blocks("ketones", 2),
    Task::OtherModel("ketones"),
    Task::Blocks("ketones", 1),
    Task::State("ketones", JobState::Cancelled),
];

pub(super) fn columns(index: u32) -> Columns {
    let n = CELLS as usize;
    let number = |i: usize| ((i as u64 * 7919 + u64::from(index) * 131) % 60_000) as u16;
    Columns {
        expected_yield: (0..n).map(number).collect(),
        p_hit: (0..n).rev().map(number).collect(),
        selectivity: vec![index as u8; n],
        feasibility: vec![7; n],
        largest_loss: vec![1; n],
        cautions: vec![index; n],
    }
}

pub(super) fn block(index: u32) -> BlockId {
    BlockId { segment: 0, index }
}

pub(super) fn new_job(title: &str) -> NewJob {
    NewJob {
        spec: CampaignSpec {
            title: title.into(),
            ..CampaignSpec::default()
        },
        campaign_fingerprint: Fingerprint([1; 32]),
        model_fingerprint: FIRST_MODEL,
        cells: 3 * CELLS,
        blocks: 3,
        request_id: format!("request of {title}"),
        warnings: Vec::new(),
        kind: crate::JobKind::Screening,
        terms: crate::Terms::default(),
    }
}

pub(super) fn commit(store: &Store, job: &JobRecord, index: u32) -> Result<Commit, StoreError> {
    let first_cell = u64::from(index) * CELLS;
    store.commit_block(job.id, block(index), first_cell, &columns(index))
}

pub(super) fn to_state(from: JobState, to: JobState) -> StateChange {
    StateChange {
        from,
        to,
        at_unix_ms: START_MS,
        failure: String::new(),
    }
}

/// The job, if it was made.
fn job(store: &Store, title: &str) -> Option<JobRecord> {
    store.job_of_request(&format!("request of {title}"))
}

impl Task {
    /// Does it, where it is not done.
    fn work(self, store: &Store) -> Result<(), StoreError> {
        let of = |title: &str| {
            job(store, title).ok_or_else(|| StoreError::JobUnknown { job: title.into() })
        };
        match self {
            Task::Submit(title) => store.create_job(new_job(title), START_MS).map(drop),
            Task::State(title, to) => {
                let JobRecord { id, state, .. } = of(title)?;
                match state == to || state.is_ended() {
                    true => Ok(()),
                    false => store.change_state(id, &to_state(state, to)).map(drop),
                }
            }
            Task::Blocks(title, blocks) => {
                for index in 0..blocks {
                    commit(store, &of(title)?, index)?;
                }
                store.acknowledge()
            }
            Task::OtherModel(title) => match of(title)? {
                job if job.model_fingerprint == OTHER_MODEL || job.state.is_ended() => Ok(()),
                job => store.restart(job.id, OTHER_MODEL).map(drop),
            },
            Task::Plan(_) if !store.plans().is_empty() => Ok(()),
            Task::Plan(title) => {
                let record = PlanRecord {
                    id: store.new_plan_id(START_MS)?,
                    job: of(title)?.id,
                    title: title.into(),
                    made_unix_ms: START_MS,
                    plates: 1,
                    wells: 96,
                };
                store.keep_plan(record, PLAN.into())
            }
        }
    }

    /// Whether it is done, or more than that.
    fn is_done(self, store: &Store) -> bool {
        let is = |title, done: &dyn Fn(JobRecord) -> bool| job(store, title).is_some_and(done);
        match self {
            Task::Submit(title) => is(title, &|_| true),
            Task::State(title, to) => is(title, &|job| job.state == to || job.state.is_ended()),
            Task::Blocks(title, blocks) => is(title, &|job| {
                let stored = |index| store.block(job.id, block(index)).expect("is sound");
                (0..blocks).all(|index| stored(index) == Some(columns(index)))
            }),
            Task::OtherModel(title) => is(title, &|job| job.model_fingerprint == OTHER_MODEL),
            Task::Plan(title) => {
                let kept = store.plans().into_iter().find(|plan| plan.title == title);
                kept.is_some_and(|kept| store.plan(kept.id).expect("is read").1 == PLAN)
            }
        }
    }

    fn name(self) -> String {
        format!("{self:?}")
    }
}

/// What the copy does: task after task, whatever becomes of the one before.
fn work_and_say(dir: &Path) {
    let Ok((store, _)) = Store::open(dir, START_MS) else {
        return;
    };
    for task in NIGHT {
        say(&format!("begins {}", task.name()));
        if task.work(&store).is_ok() {
            say(&format!("acknowledged {}", task.name()));
        }
    }
}

/// No job, block, plan or file is there that nobody asked for, and none twice.
fn check_nothing_else(store: &Store, dir: &Path) {
    let jobs = store.jobs();
    for title in ["esters", "ketones"] {
        let same = jobs.iter().filter(|job| job.title == title);
        assert!(same.count() <= 1, "{title} twice");
    }
    assert!(jobs.len() <= 2);
    assert!(store.plans().len() <= 1);
    for job in &jobs {
        for block in store.committed_blocks(job.id).expect("is known") {
            let found = store.block(job.id, block).expect("is sound");
            assert_eq!(found, Some(columns(block.index)));
        }
        let progress = store.progress(job.id).expect("is known");
        assert_eq!(progress.cells, progress.blocks * CELLS);
        assert_eq!(progress.cells, progress.cells_acknowledged);
    }
    for part in ["journal", "plans"] {
        for entry in std::fs::read_dir(dir.join(part)).expect("is there") {
            let name = entry.expect("an entry").file_name();
            let name = name.to_string_lossy();
            assert!(name.ends_with(".json"), "`{name}` is left");
        }
    }
}

/// Does the whole night again. A job that was cancelled before the other model came stays with its own.
fn finish(store: &Store) {
    for task in NIGHT {
        task.work(store).expect("the disk is well again");
        let other = matches!(task, Task::OtherModel(_) | Task::Blocks("ketones", 2));
        assert!(other || task.is_done(store), "{task:?}");
    }
}

#[test]
fn nothing_acknowledged_is_lost_at_any_step() {
    if let Some(dir) = place() {
        return work_and_say(&dir);
    }
    let test = "night::nothing_acknowledged_is_lost_at_any_step";
    let times = at_every_step(|trouble, at| {
        let dir = directory();
        let dir = dir.path();
        let heard = run_copy(test, dir, trouble, at);
        let (store, report) = Store::open(dir, START_MS).expect("opens");
        assert_eq!(report.sentences(), Vec::<String>::new(), "{heard:?}");
        check_nothing_else(&store, dir);
        let restarting = heard.begun.contains(&Task::OtherModel("ketones").name());
        for task in NIGHT {
            let dropped = restarting && matches!(task, Task::Blocks("ketones", 2));
            assert!(
                dropped || task.is_done(&store) || !heard.acknowledged.contains(&task.name()),
                "{trouble:?} at step {at}: {task:?} was acknowledged and is lost; {heard:?}"
            );
        }
        finish(&store);
        drop(store);
        let (store, report) = Store::open(dir, START_MS).expect("opens");
        assert_eq!(
            report,
            OpenReport::default(),
            "{trouble:?} at {at}: {heard:?}"
        );
        check_nothing_else(&store, dir);
        let end = |title| job(&store, title).map(|job| job.state);
        assert_eq!(end("esters"), Some(JobState::Done));
        assert_eq!(end("ketones"), Some(JobState::Cancelled));
        assert_eq!(store.plans().len(), 1);
        heard.met
    });
    assert!(times > 100, "only {times} steps");
}
