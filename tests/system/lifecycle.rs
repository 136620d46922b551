//! Jobs from the first request to the last: ids, checks, cancelling, stopping.

use enolattice_engine::{JobState, Submission};
use enolattice_wire::v1::job_service_client::JobServiceClient;
use enolattice_wire::v1::{self, ErrorReason};

use crate::campaigns::{long, small, submission};
use crate::live::{Live, watched};

#[tokio::test(flavor = "multi_thread")]
async fn a_request_id_makes_one_job() {
    let live = Live::start().await;
    let ask = |campaign| Submission {
        campaign,
        request_id: "7b1f0a52-0d4c-4a5e-9c53-3f2f5f0f6a11".into(),
        validate_only: false,
        terms: enolattice_engine::Terms::default(),
    };
    let first = live.client.submit(ask(small())).await.expect("is accepted");
    let again = live.client.submit(ask(small())).await.expect("is accepted");
    assert_eq!(first.job, again.job);
    assert_eq!(live.client.jobs().await.expect("jobs").len(), 1);
    let other = live
        .client
        .submit(ask(long(1)))
        .await
        .expect_err("is another request");
    assert_eq!(other.reason(), Some(ErrorReason::RequestIdReused));
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn checking_a_campaign_queues_nothing() {
    let live = Live::start().await;
    let check = Submission {
        validate_only: true,
        ..submission(small())
    };
    let would_be = live.client.submit(check).await.expect("is sound");
    assert_eq!((would_be.job.as_str(), would_be.cells), ("", 24));
    assert!(live.client.jobs().await.expect("jobs").is_empty());
    let real = live
        .client
        .submit(submission(small()))
        .await
        .expect("is accepted");
    assert_eq!(real.campaign_fingerprint, would_be.campaign_fingerprint);
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn a_cancelled_job_ends_its_watch() {
    let live = Live::start().await;
    let job = live
        .client
        .submit(submission(long(1000)))
        .await
        .expect("is accepted")
        .job;
    let (client, watched_job) = (live.client.clone(), job.clone());
    let watch = tokio::spawn(async move { watched(&client, &watched_job).await });
    let cancelled = live.client.cancel(&job).await.expect("is cancelled");
    assert_eq!(cancelled.state, JobState::Cancelled);
    let states = watch.await.expect("no panic");
    assert_eq!(
        states.last().map(|job| job.state),
        Some(JobState::Cancelled)
    );
    let again = live.client.cancel(&job).await.expect_err("has ended");
    assert_eq!(again.reason(), Some(ErrorReason::JobWrongState));
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn stopping_ends_watch_streams_and_says_so() {
    let live = Live::start().await;
    let job = live
        .client
        .submit(submission(long(1000)))
        .await
        .expect("is accepted")
        .job;
    let mut watch = live.client.watch(&job).await.expect("is watched");
    watch.next().await.expect("the present state");
    let stopped = tokio::spawn(live.stop());
    let end = loop {
        match watch.next().await {
            Ok(Some(_)) => {}
            Ok(None) => panic!("an unfinished job has no final state"),
            Err(error) => break error,
        }
    };
    assert_eq!(end.reason(), Some(ErrorReason::ShuttingDown), "{end}");
    stopped.await.expect("a clean end");
}

#[tokio::test(flavor = "multi_thread")]
async fn jobs_are_listed_newest_first_in_pages() {
    let live = Live::start().await;
    let mut submitted = Vec::new();
    for _ in 0..5 {
        submitted.push(
            live.client
                .submit(submission(small()))
                .await
                .expect("is accepted")
                .job,
        );
    }
    submitted.reverse();
    let mut jobs = JobServiceClient::connect(live.url.clone())
        .await
        .expect("connects");
    let (mut listed, mut page_token) = (Vec::new(), String::new());
    loop {
        let request = v1::ListJobsRequest {
            page_size: 2,
            page_token,
        };
        let page = jobs.list_jobs(request).await.expect("a page").into_inner();
        assert!(page.jobs.len() <= 2);
        listed.extend(page.jobs.into_iter().map(|job| job.job_id));
        page_token = page.next_page_token;
        if page_token.is_empty() {
            break;
        }
    }
    assert_eq!(listed, submitted);
    live.stop().await;
}
