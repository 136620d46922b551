//! Reports: a server gives the bytes of an embedded engine; what users write stays text.

use enolattice_engine::{Axis, EngineError, ReportQuery};
use enolattice_grid::SubstrateEntry;
use enolattice_plate::{PlanRequest, PlateFormat};
use enolattice_wire::RemoteError;
use enolattice_wire::v1::{self, ErrorReason};
use proptest::prelude::*;
use proptest::test_runner::TestRunner;

use crate::campaigns::{long, small, submission};
use crate::live::Live;

fn query(id: &str, maps: Vec<[Axis; 2]>) -> ReportQuery {
    ReportQuery {
        id: id.to_owned(),
        maps,
    }
}

/// One plate of 24 wells on a deck under inert gas.
fn request() -> PlanRequest {
    let mut request = PlanRequest::default();
    request.plates.wells = PlateFormat::Wells24;
    request.choice.draws = 16;
    request.deck.inert = true;
    request.deck.lowest_temperature_c = Some(-80.0);
    request
}

#[tokio::test(flavor = "multi_thread")]
async fn a_served_report_is_the_embedded_one() {
    let live = Live::start().await;
    let job = live.screened(submission(small())).await;
    let plan = live.engine.plan(job.job.clone(), request()).await;
    let plan = plan.expect("is planned");
    let maps = vec![[Axis::Base, Axis::Electrophile]];
    for (asked, needed) in [
        (query(&job.job, Vec::new()), &job.campaign_fingerprint),
        (query(&job.job, maps), &job.model_fingerprint),
        (query(&plan.id, Vec::new()), &plan.model),
    ] {
        let embedded = live.engine.report(asked.clone()).await.expect("a report");
        let served = live.client.report(&asked).await.expect("a report");
        assert_eq!(served, embedded);
        assert!(embedded.contains(needed.as_str()));
        assert!(embedded.contains(enolattice_plate::PRECEDENCE));
    }
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn what_is_not_there_and_what_is_no_map_is_refused() {
    let live = Live::start().await;
    let nothing = query("0000000000000", Vec::new());
    match live.client.report(&nothing).await {
        Err(RemoteError::Refused { reason, message }) => {
            assert_eq!(reason, ErrorReason::NothingKept);
            assert!(message.contains("`0000000000000`"), "{message}");
            let embedded = live.engine.report(nothing).await;
            assert_eq!(message, embedded.expect_err("is refused").to_string());
        }
        other => panic!("{other:?}"),
    }
    let job = live.screened(submission(small())).await.job;
    let same = query(&job, vec![[Axis::Base, Axis::Base]]);
    let Err(EngineError::Input(embedded)) = live.engine.report(same.clone()).await else {
        panic!("a map of one axis");
    };
    match live.client.report(&same).await {
        Err(RemoteError::Input(served)) => assert_eq!(served, embedded),
        other => panic!("{other:?}"),
    }
    let channel = tonic::transport::Endpoint::new(live.url.clone()).expect("an address");
    let mut plain = v1::report_service_client::ReportServiceClient::new(channel.connect_lazy());
    let request = v1::RenderReportRequest {
        id: job,
        maps: vec![v1::ReportMap {
            rows: 99,
            columns: 1,
        }],
    };
    let refused = plain.render_report(request).await.expect_err("no axis 99");
    assert_eq!(refused.code(), tonic::Code::InvalidArgument);
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn a_cancelled_job_says_what_is_missing() {
    let live = Live::start().await;
    let job = live
        .client
        .submit(submission(long(400)))
        .await
        .expect("a job")
        .job;
    let cancelled = live.client.cancel(&job).await.expect("is cancelled");
    assert!(cancelled.cells_done < cancelled.cells);
    let report = live.client.report(&query(&job, Vec::new())).await;
    let report = report.expect("a report");
    assert!(report.contains("Not all is screened."));
    assert!(report.contains("The job is cancelled"));
    live.stop().await;
}

/// Names of substrates with everything that has a meaning in HTML, and some in other directions of writing.
fn hostile() -> impl Strategy<Value = String> {
    let piece = prop_oneof![
        Just("<script>alert(1)</script>"),
        Just("\"><img src=x onerror=alert(1)>"),
        Just("' onload='x"),
        Just("&amp;&#60;"),
        Just("</style></title></svg>"),
        Just("مركب"),
        Just("תרכובת"),
        Just("β-酮 №1"),
        Just("{{7*7}}"),
    ];
    proptest::collection::vec(piece, 1..4).prop_map(|pieces| pieces.concat())
}

/// Whatever a substrate and a campaign are called, the page has the elements that it has without them.
#[test]
fn hostile_names_stay_text() {
    let runtime = tokio::runtime::Runtime::new().expect("threads");
    let live = runtime.block_on(Live::start());
    let render = |name: &str| {
        runtime.block_on(async {
            let mut campaign = small();
            campaign.title = name.to_owned();
            campaign.substrates = vec![SubstrateEntry {
                name: name.to_owned(),
                smiles: "CCOC(=O)Cc1ccccc1".to_owned(),
                ..SubstrateEntry::default()
            }];
            let job = live.screened(submission(campaign)).await.job;
            live.client
                .report(&query(&job, Vec::new()))
                .await
                .expect("a report")
        })
    };
    let elements = |html: &str| html.matches('<').count();
    let harmless = elements(&render("plain"));
    let mut runner = TestRunner::new(ProptestConfig {
        cases: 8,
        failure_persistence: None,
        ..ProptestConfig::default()
    });
    let checked = runner.run(&hostile(), |name| {
        let html = render(&name);
        prop_assert_eq!(elements(&html), harmless);
        prop_assert!(!html.contains("<script>alert") && !html.contains("<img"));
        Ok(())
    });
    checked.expect("names stay text");
    runtime.block_on(live.stop());
}
