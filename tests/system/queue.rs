//! The queue through the service: who comes first, what is held, what is ordered, what is deleted.

use enolattice_engine::{Engine, EngineConfig, JobState, PlanOrder, Submission, Terms};
use enolattice_wire::RemoteError;
use enolattice_wire::v1::ErrorReason;

use crate::campaigns::{long, small, submission};
use crate::live::{Live, watched};
use crate::plans::{campaign, request, unstamped};

fn asked_by(requester: &str, cells: Submission) -> Submission {
    let terms = Terms {
        requester: requester.into(),
        ..Terms::default()
    };
    Submission { terms, ..cells }
}

#[tokio::test(flavor = "multi_thread")]
async fn a_small_job_does_not_wait_for_a_large_one() {
    let live = Live::start().await;
    let large = live.client.submit(asked_by("anna", submission(long(100))));
    let large = large.await.expect("is accepted").job;
    let mut watch = live.client.watch(&large).await.expect("is watched");
    while watch
        .next()
        .await
        .expect("no error")
        .expect("not ended")
        .state
        != JobState::Running
    {}
    for requester in ["anna", "boris"] {
        let small = live
            .screened(asked_by(requester, submission(small())))
            .await;
        assert_eq!((small.state, small.cells_done), (JobState::Done, 24));
        let large = live.client.job(&large).await.expect("is known");
        assert!(!large.state.is_ended(), "{large:?}");
    }
    let refused = live.client.delete_job(&large).await.expect_err("it runs");
    assert_eq!(refused.reason(), Some(ErrorReason::JobWrongState));
    let paused = live.client.pause(&large).await.expect("is paused");
    assert_eq!(paused.state, JobState::Paused);
    let refused = live.client.pause(&large).await.expect_err("is paused");
    assert_eq!(refused.reason(), Some(ErrorReason::JobWrongState));
    let resumed = live.client.resume(&large).await.expect("goes on");
    // its turn may have come before the answer
    assert!(matches!(
        resumed.state,
        JobState::Queued | JobState::Running
    ));
    assert_eq!(resumed.terms.requester, "anna");
    live.client.cancel(&large).await.expect("is cancelled");
    live.client.delete_job(&large).await.expect("is deleted");
    let gone = live.client.job(&large).await.expect_err("is gone");
    assert_eq!(gone.reason(), Some(ErrorReason::JobUnknown));
    assert_eq!(live.client.jobs().await.expect("a list").len(), 2);
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn terms_that_cannot_be_are_refused_by_their_names() {
    let live = Live::start().await;
    let mut wrong = submission(small());
    wrong.terms.priority = 101;
    wrong.terms.deadline_unix_ms = Some(1);
    match live.client.submit(wrong).await {
        Err(RemoteError::Input(faults)) => {
            let fields: Vec<&str> = faults.iter().map(|f| f.place.field.as_str()).collect();
            assert_eq!(fields, ["terms.priority", "terms.deadline_time"]);
        }
        other => panic!("{other:?}"),
    }
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn a_plan_is_ordered_while_its_job_waits_and_made_once() {
    let data = tempfile::tempdir().expect("a directory");
    let config = EngineConfig {
        data_dir: data.path().to_owned(),
        threads: 1,
        library: Vec::new(),
    };
    // both wait: no engine works at the directory
    let engine = Engine::open_idle(config.clone()).await.expect("opens");
    let job = engine
        .submit(submission(campaign()))
        .await
        .expect("a job")
        .job;
    let order = PlanOrder {
        job: job.clone(),
        request: request(),
        request_id: "tonight".into(),
        terms: Terms::default(),
    };
    let ordered = engine.order_plan(order.clone()).await.expect("is ordered");
    let again = engine.order_plan(order.clone()).await.expect("is known");
    assert_eq!(ordered.job, again.job, "one request, one plan");
    let planning = ordered.planning.expect("plans");
    assert_eq!((planning.job.as_str(), planning.plan), (job.as_str(), None));
    engine.close().await.expect("closes");

    let engine = Engine::open(config).await.expect("opens again");
    let mut states = engine.watch(&ordered.job).await.expect("is watched");
    while states.changed().await.is_ok() {}
    let made = engine.job(&ordered.job).await.expect("is known");
    assert_eq!((made.state, made.failure.as_str()), (JobState::Done, ""));
    let plan = made.planning.expect("plans").plan.expect("is made");
    let kept = engine.kept_plan(&plan).await.expect("is kept");
    let asked_now = engine.plan(job.clone(), request()).await.expect("a plan");
    assert_eq!(unstamped(&kept), unstamped(&asked_now));
    let plans = engine.plans(Some(&job)).await.expect("a list");
    assert_eq!(
        plans.len(),
        2,
        "the ordered one once, and the one asked now"
    );
    // who names the planning job where cells are wanted is told so
    let of_itself = PlanOrder {
        job: ordered.job.clone(),
        request_id: String::new(),
        ..order
    };
    let refused = engine.order_plan(of_itself).await.expect_err("no cells");
    assert!(refused.to_string().contains("name the job"), "{refused}");
    engine.delete_job(&ordered.job).await.expect("is deleted");
    assert!(
        engine.kept_plan(&plan).await.is_err(),
        "the plan went with it"
    );
    engine.close().await.expect("closes");
}

#[tokio::test(flavor = "multi_thread")]
async fn a_plan_that_cannot_be_made_says_why() {
    let live = Live::start().await;
    let job = live.screened(submission(campaign())).await.job;
    let mut impossible = request();
    impossible.choice.pin[0].cell = 10_000_000;
    let order = PlanOrder {
        job,
        request: impossible,
        ..PlanOrder::default()
    };
    let ordered = live.client.order_plan(order).await.expect("is ordered");
    let ended = watched(&live.client, &ordered.job).await.pop();
    let ended = ended.expect("a final state");
    assert_eq!(ended.state, JobState::Failed);
    assert!(ended.failure.contains("choice.pin"), "{}", ended.failure);
    live.stop().await;
}
