//! Plans: a server makes and keeps them as an embedded engine does.

use std::collections::BTreeSet;

use enolattice_engine::{Engine, EngineConfig, EngineError, RankQuery};
use enolattice_grid::{CampaignSpec, InputError};
use enolattice_model::Category;
use enolattice_plate::{Aim, AimWord, ColumnsBy, NamedCell, Plan, PlanRequest, PlateFormat};
use enolattice_wire::v1::plan_service_client::PlanServiceClient;
use enolattice_wire::v1::{self, ErrorReason};
use enolattice_wire::{MAX_MESSAGE_BYTES, RemoteError};
use serde_json::{Map, Value};
use tonic::Code;

use crate::campaigns::{library, small, submission, substrates};
use crate::live::Live;

/// 4 substrates × 3 bases × 2 electrophiles × 3 solvents at room temperature.
pub(crate) fn campaign() -> CampaignSpec {
    let mut campaign = small();
    campaign.title = "Invented, at room temperature".into();
    campaign.substrates = substrates(&[
        "CCOC(=O)Cc1ccccc1",
        "O=C1CCCCC1",
        "CCOC(=O)CC(=O)OCC",
        "CC(=O)CC(C)=O",
    ]);
    campaign.bases = library(&["KOtBu", "DBU", "K2CO3"]);
    campaign.solvents = library(&["THF", "DMF", "DMSO"]);
    campaign.conditions.temperature_c = vec![25.0];
    campaign.conditions.formation_temperature_c = Vec::new();
    campaign
}

/// One plate of 24 wells on a deck under inert gas, with a pinned cell.
pub(crate) fn request() -> PlanRequest {
    let mut request = PlanRequest {
        seed: 7,
        ..PlanRequest::default()
    };
    request.plates.wells = PlateFormat::Wells24;
    request.choice.aim = Aim::Word(AimWord::Explore);
    request.choice.draws = 16;
    request.choice.pin = vec![NamedCell {
        cell: 0,
        note: "asked for".into(),
    }];
    request.deck.inert = true;
    request
}

/// The plan as JSON, without what differs from one keeping to the next.
pub(crate) fn unstamped(plan: &Plan) -> Value {
    let mut json = serde_json::to_value(plan).expect("serialises");
    let fields = json.as_object_mut().expect("an object");
    for stamp in ["id", "made_unix_ms"] {
        assert!(fields.remove(stamp).is_some());
    }
    json
}

#[tokio::test(flavor = "multi_thread")]
async fn a_served_plan_is_the_embedded_one() {
    let live = Live::start().await;
    let job = live.screened(submission(campaign())).await.job;
    let embedded = live.engine.plan(job.clone(), request()).await;
    let embedded = embedded.expect("is planned");
    let served = live.client.plan(job.clone(), request()).await;
    let served = served.expect("is planned");
    assert_eq!(unstamped(&served), unstamped(&embedded));
    assert!(embedded.id < served.id && embedded.made_unix_ms <= served.made_unix_ms);
    assert!(served.wells().any(|(_, well)| well.note == "asked for"));

    for plan in [&embedded, &served] {
        let read = live.client.kept_plan(&plan.id).await;
        assert_eq!(&read.expect("is kept"), plan);
        let read = live.engine.kept_plan(&plan.id).await;
        assert_eq!(&read.expect("is kept"), plan);
    }
    let listed = live.client.plans(Some(&job)).await.expect("a list");
    let ids: Vec<&str> = listed.iter().map(|plan| plan.plan.as_str()).collect();
    assert_eq!(ids, [&served.id, &embedded.id], "newest first");
    assert_eq!(listed[0].wells as usize, served.wells().count());
    assert_eq!(listed[0].title, "Invented, at room temperature");
    assert_eq!(live.engine.plans(None).await.expect("a list"), listed);
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn a_plan_survives_the_engine() {
    let data = tempfile::tempdir().expect("a directory");
    let config = EngineConfig {
        data_dir: data.path().to_owned(),
        threads: 1,
        library: Vec::new(),
    };
    let engine = Engine::open(config.clone()).await.expect("opens");
    let job = engine.submit(submission(campaign())).await.expect("a job");
    let mut states = engine.watch(&job.job).await.expect("is watched");
    while states.changed().await.is_ok() {}
    let plan = engine.plan(job.job, request()).await.expect("is planned");
    engine.close().await.expect("closes");

    let engine = Engine::open_idle(config).await.expect("opens again");
    assert_eq!(engine.notices(), Vec::<String>::new());
    assert_eq!(engine.kept_plan(&plan.id).await.expect("is kept"), plan);
}

#[tokio::test(flavor = "multi_thread")]
async fn transfers_are_columns_of_the_plan() {
    let live = Live::start().await;
    let job = live.screened(submission(campaign())).await.job;
    let plan = live.client.plan(job, request()).await.expect("is planned");
    let mut plans = PlanServiceClient::connect(live.url.clone())
        .await
        .expect("connects")
        .max_decoding_message_size(MAX_MESSAGE_BYTES);
    let request = v1::StreamTransfersRequest {
        plan_id: plan.id.clone(),
    };
    let answer = plans.stream_transfers(request).await.expect("a stream");
    let mut parts = answer.into_inner();
    let mut rows = Vec::new();
    while let Some(part) = parts.message().await.expect("ends well") {
        for i in 0..part.groups.len() {
            let name = |index: i32| part.plates[index as usize].clone();
            rows.push((
                part.groups[i] as u32,
                name(part.source_plate_indices[i]),
                name(part.plate_indices[i]),
                part.rows[i] as u8 - 1,
                part.columns[i] as u8 - 1,
                part.volumes_nl[i],
            ));
        }
    }
    let wanted = plan.transfers.iter().map(|transfer| {
        (
            transfer.group,
            transfer.source_plate.clone(),
            transfer.plate.clone(),
            transfer.well.row,
            transfer.well.column,
            transfer.volume_nl,
        )
    });
    assert_eq!(rows, wanted.collect::<Vec<_>>());
    assert!(
        rows.is_sorted_by_key(|row| row.0),
        "in the order of their groups"
    );
    live.stop().await;
}

fn faults(answer: Result<Plan, RemoteError>) -> Vec<InputError> {
    match answer {
        Err(RemoteError::Input(faults)) => faults,
        other => panic!("{other:?}"),
    }
}

#[tokio::test(flavor = "multi_thread")]
async fn what_cannot_be_planned_is_refused_alike() {
    let live = Live::start().await;
    let job = live.screened(submission(campaign())).await.job;
    let out_of_range = {
        let mut request = request();
        request.plates.count = 0;
        request.deck.smallest_nl = -1.0;
        request
    };
    let unreadable = {
        let mut request = request();
        request.choice.only = "p_hit >> 1".into();
        request
    };
    let unknown_cell = {
        let mut request = request();
        request.choice.pin[0].cell = 1 << 40;
        request
    };
    let too_cold = {
        let mut request = request();
        request.choice.pin.clear();
        request.deck.lowest_temperature_c = Some(60.0);
        request
    };
    for wrong in [out_of_range, unreadable, unknown_cell, too_cold] {
        let embedded = match live.engine.plan(job.clone(), wrong.clone()).await {
            Err(EngineError::Input(faults)) => faults,
            other => panic!("{other:?}"),
        };
        assert!(!embedded.is_empty());
        assert_eq!(faults(live.client.plan(job.clone(), wrong).await), embedded);
    }
    let unknown = |answer: Result<Plan, RemoteError>, wanted| {
        let found = match answer {
            Err(RemoteError::Refused { reason, .. }) => reason,
            other => panic!("{other:?}"),
        };
        assert_eq!(found, wanted);
    };
    let nothing = "0000000000000".to_owned();
    let answer = live.client.plan(nothing.clone(), request()).await;
    unknown(answer, ErrorReason::JobUnknown);
    let answer = live.client.kept_plan(&nothing).await;
    unknown(answer, ErrorReason::PlanUnknown);
    assert!(live.engine.plans(None).await.expect("a list").is_empty());
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn a_draft_is_not_kept() {
    let live = Live::start().await;
    let job = live.screened(submission(campaign())).await.job;
    let mut plans = PlanServiceClient::connect(live.url.clone())
        .await
        .expect("connects");
    let draft = v1::PlanPlatesRequest {
        job_id: job,
        request: Some((&request()).into()),
        validate_only: true,
    };
    let answer = plans.plan_plates(draft.clone()).await.expect("is planned");
    let head = answer.into_inner();
    assert_eq!((head.plan_id.as_str(), head.create_time), ("", None));
    assert_eq!(head.plates[0].well_count, 24);
    assert!(live.client.plans(None).await.expect("a list").is_empty());

    let mut wrong = draft;
    let plates = wrong
        .request
        .as_mut()
        .and_then(|request| request.plates.as_mut());
    plates.expect("plates").wells = Some(95);
    let status = plans.plan_plates(wrong).await.expect_err("is refused");
    assert_eq!(status.code(), Code::InvalidArgument);
    match RemoteError::from_status(&status, &live.url) {
        RemoteError::Input(faults) => assert_eq!(faults[0].place.field, "request.plates.wells"),
        other => panic!("{other:?}"),
    }
    live.stop().await;
}

/// The page on the plan's JSON.
const PAGE: &str = include_str!("../../crates/plate/docs/plan-files.md");

/// The fields that the page lists for the objects at a path; the plan itself has none.
fn documented(path: &str) -> Option<BTreeSet<String>> {
    let quoted = format!("`{path}`");
    let mut lines = PAGE.lines().skip_while(|line| {
        !(path.is_empty() || line.starts_with("### ") && line.contains(&quoted))
    });
    lines.next()?;
    let section = lines.take_while(|line| !line.starts_with("###"));
    let names = section.filter_map(|line| line.strip_prefix("| `")?.split('`').next());
    Some(names.map(str::to_owned).collect())
}

/// Every object of a document with its path, values that stand for a closed list left out.
fn objects<'a>(path: &str, value: &'a Value, found: &mut Vec<(String, &'a Map<String, Value>)>) {
    match value {
        Value::Array(values) => values.iter().for_each(|value| objects(path, value, found)),
        Value::Object(fields) if !path.ends_with(".axis") && !path.ends_with(".kind") => {
            found.push((path.to_owned(), fields));
            for (name, value) in fields.iter().filter(|(name, _)| *name != "request") {
                let path = format!("{path}.{name}");
                objects(path.trim_start_matches('.'), value, found);
            }
        }
        _ => {}
    }
}

#[tokio::test(flavor = "multi_thread")]
async fn every_field_of_a_plan_is_documented() {
    let live = Live::start().await;
    let job = live.screened(submission(campaign())).await.job;
    let mut request = request();
    request.plates.columns_by = Some(ColumnsBy::Base);
    let plan = live.engine.plan(job, request).await.expect("is planned");
    let json = serde_json::to_value(&plan).expect("serialises");
    let mut found = Vec::new();
    objects("", &json, &mut found);
    for (path, fields) in &found {
        let names: BTreeSet<String> = fields.keys().cloned().collect();
        assert_eq!(documented(path), Some(names), "{path}");
    }
    let paths: BTreeSet<&str> = found.iter().map(|(path, _)| path.as_str()).collect();
    for path in [
        "plates.wells.masses.species.ions",
        "stocks.sources",
        "plates.balance.columns",
    ] {
        assert!(paths.contains(path), "{path}");
    }
    live.stop().await;
}

/// Hydrides in dimethyl sulfoxide, and lithium amides in chloroform: what nobody puts on a plate unless it is named.
#[tokio::test(flavor = "multi_thread")]
async fn what_must_be_stopped_is_on_no_plate_unless_it_is_named() {
    let live = Live::start().await;
    let mut campaign = campaign();
    campaign.bases = library(&["NaH", "KOtBu", "DBU"]);
    campaign.solvents = library(&["DMSO", "CHCl3", "THF"]);
    let job = live.screened(submission(campaign)).await.job;
    let query = RankQuery {
        job: job.clone(),
        filter: "severity = \"stop\"".into(),
        page_size: 1000,
        ..RankQuery::default()
    };
    let stopped = live.engine.rank(query).await.expect("a page").rows;
    let known = stopped.iter().find(|row| row.expected_yield.is_some());
    let known = known.expect("a cell that is stopped and covered");

    let mut request = request();
    request.choice.pin.clear();
    let plan = live
        .engine
        .plan(job.clone(), request.clone())
        .await
        .expect("is planned");
    let stops = |plan: &Plan| {
        let wells = plan.wells().flat_map(|(_, well)| &well.cautions);
        wells.filter(|caution| caution.severity == "stop").count()
    };
    assert_eq!(stops(&plan), 0);

    request.choice.pin = vec![NamedCell {
        cell: known.cell,
        note: String::new(),
    }];
    let refused = live.engine.plan(job.clone(), request.clone()).await;
    match refused.expect_err("is stopped") {
        EngineError::Input(faults) => {
            assert_eq!(faults[0].place.field, "choice.pin[0].cell");
            assert!(faults[0].reason.contains("stop"), "{faults:?}");
        }
        other => panic!("{other}"),
    }

    request.choice.allow_stop = Category::ALL
        .map(|category| category.name().to_owned())
        .to_vec();
    let named = live.engine.plan(job, request).await.expect("is planned");
    assert!(stops(&named) > 0);
    live.stop().await;
}
