//! Hostile messages: nothing panics, and a server that met them goes on.

use std::sync::LazyLock;

use enolattice_engine::{ExplainTarget, RankQuery};
use enolattice_grid::{Campaign, MAX_FAULTS, MeasuredEntry};
use enolattice_reagents::Library;
use enolattice_wire::v1::job_service_client::JobServiceClient;
use enolattice_wire::{submission, v1};
use proptest::prelude::*;
use prost::Message;
use tonic::Code;

use crate::campaigns;
use crate::live::Live;

/// A request with a value in most of its fields, as bytes.
fn sound() -> Vec<u8> {
    let mut campaign = campaigns::small();
    campaign.additives = campaigns::library(&["none", "HMPA"]);
    campaign.conditions.addition = vec!["all together".into()];
    campaign.measured = vec![MeasuredEntry {
        substrate: "CCOC(=O)Cc1ccccc1".into(),
        base: "LDA".into(),
        electrophile: "MeI".into(),
        solvent: "THF".into(),
        additive: "none".into(),
        temperature_c: Some(-20.0),
        yield_fraction: Some(0.5),
        note: "isolated".into(),
        ..MeasuredEntry::default()
    }];
    let submission = campaigns::submission(campaign);
    let request = v1::SubmitJobRequest::try_from(&submission).expect("to wire");
    request.encode_to_vec()
}

/// Bytes of a sound request of which some are changed, removed or repeated.
fn changed() -> impl Strategy<Value = Vec<u8>> {
    let change = (any::<usize>(), 0u8..3, any::<u8>(), 0usize..30);
    prop::collection::vec(change, 1..6).prop_map(|changes| {
        let mut bytes = sound();
        for (at, kind, byte, length) in changes {
            let at = at % bytes.len();
            let end = (at + length).min(bytes.len());
            match kind {
                0 => bytes[at] = byte,
                1 if bytes.len() > 64 => drop(bytes.drain(at..end)),
                _ => {
                    let again = bytes[at..end].to_vec();
                    bytes.splice(end..end, again);
                }
            }
        }
        bytes
    })
}

proptest! {
    #[test]
    fn no_message_makes_the_check_of_a_campaign_panic(bytes in changed()) {
        static LIBRARY: LazyLock<Library> =
            LazyLock::new(|| Library::builtin().expect("the tables are sound"));
        if let Ok(request) = v1::SubmitJobRequest::decode(bytes.as_slice()) {
            let (read, faults) = submission(request);
            let found = Campaign::faults(&read.campaign, &LIBRARY);
            prop_assert!(found.len() <= MAX_FAULTS + 1);
            prop_assert!(faults.iter().chain(&found).all(|fault| !fault.code.is_empty()));
        }
    }

    #[test]
    fn no_message_makes_a_question_panic(bytes in prop::collection::vec(any::<u8>(), 0..60)) {
        if let Ok(request) = v1::RankCellsRequest::decode(bytes.as_slice()) {
            let _ = RankQuery::try_from(request);
        }
        if let Ok(request) = v1::ExplainCellRequest::decode(bytes.as_slice()) {
            let _ = ExplainTarget::try_from(request);
        }
    }
}

#[tokio::test(flavor = "multi_thread")]
async fn a_server_refuses_hostile_campaigns_and_goes_on() {
    let live = Live::start().await;
    let mut jobs = JobServiceClient::connect(live.url.clone())
        .await
        .expect("connects");
    let long = "C".repeat(1_000_000);
    let measured = |word: &str| v1::MeasuredYield {
        substrate: word.into(),
        base: word.into(),
        electrophile: word.into(),
        solvent: format!("{word}/{word}"),
        temperature_c: Some(f64::NAN),
        yield_fraction: Some(f64::INFINITY),
        addition: 77,
        ..Default::default()
    };
    let substrate = |smiles: &str| v1::Substrate {
        smiles: smiles.into(),
        ..Default::default()
    };
    let campaigns = [
        v1::Campaign::default(),
        v1::Campaign {
            title: long.clone(),
            substrates: vec![substrate(&long)],
            ..Default::default()
        },
        v1::Campaign {
            substrates: vec![substrate("C1CC"); 50_000],
            measured: vec![measured("x"); 20_000],
            ..Default::default()
        },
        v1::Campaign {
            measured: vec![measured(&long[..400_000])],
            ..Default::default()
        },
        v1::Campaign {
            conditions: Some(v1::ConditionAxes {
                temperature_c: vec![f64::NAN; 100_000],
                addition: vec![i32::MIN; 10_000],
                ..Default::default()
            }),
            ..Default::default()
        },
        v1::Campaign {
            conditions: Some(v1::ConditionAxes {
                temperature_c: (0..400_000).map(|i| f64::from(i) / 4_000.0).collect(),
                ..Default::default()
            }),
            ..Default::default()
        },
    ];
    for campaign in campaigns {
        let request = v1::SubmitJobRequest {
            campaign: Some(campaign),
            ..Default::default()
        };
        let refused = jobs.submit_job(request).await.expect_err("is refused");
        assert_eq!(refused.code(), Code::InvalidArgument, "{refused}");
    }
    assert!(live.client.jobs().await.expect("goes on").is_empty());
    live.stop().await;
}
