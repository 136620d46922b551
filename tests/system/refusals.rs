//! What is refused, and what the client learns from it.

use enolattice_engine::{EngineError, ExplainTarget, RankQuery, Submission};
use enolattice_grid::{CampaignSpec, InputError, Place};
use enolattice_wire::RemoteError;
use enolattice_wire::v1::ErrorReason;

use crate::campaigns::{library, small, submission, substrates};
use crate::live::{Live, all_of};

fn faults<T: std::fmt::Debug>(answer: Result<T, RemoteError>) -> Vec<InputError> {
    match answer {
        Err(RemoteError::Input(faults)) => faults,
        other => panic!("{other:?}"),
    }
}

async fn embedded_faults(live: &Live, submission: Submission) -> Vec<InputError> {
    match live.engine.submit(submission).await {
        Err(EngineError::Input(faults)) => faults,
        other => panic!("{other:?}"),
    }
}

fn place(file: &str, line: u32, field: &str) -> Place {
    Place {
        file: file.into(),
        line,
        field: field.into(),
    }
}

/// A campaign as read from a file, with a fault on every axis.
fn faulty() -> CampaignSpec {
    let mut campaign = small();
    campaign.substrates = substrates(&["CC(=O)C", "C1CC", "C(C)(C)(C)(C)C"]);
    for (i, substrate) in campaign.substrates.iter_mut().enumerate() {
        substrate.place = place("substrates.csv", 2 + i as u32, "smiles");
    }
    campaign.substrates[0].pka_dmso = Some(f64::NAN);
    campaign.bases = library(&["LDDA", "KOtBu"]);
    campaign.bases.entries[0].place = place("campaign.toml", 5, "bases.library[0]");
    campaign.electrophiles = library(&["no such thing"]);
    campaign.electrophiles.entries[0].place = place("campaign.toml", 7, "electrophiles.library[0]");
    campaign.solvents = library(&["THF", "unobtainium"]);
    campaign.solvents.entries[1].place = place("campaign.toml", 9, "solvents.library[1]");
    campaign.conditions.temperature_c = vec![25.0, -400.0];
    campaign.target.yield_at_least = Some(1.5);
    campaign
}

#[tokio::test(flavor = "multi_thread")]
async fn every_fault_is_told_where_it_was_written() {
    let live = Live::start().await;
    let remote = faults(live.client.submit(submission(faulty())).await);
    let embedded = embedded_faults(&live, submission(faulty())).await;
    assert_eq!(remote, embedded);
    for written in [
        place("substrates.csv", 3, "smiles"),
        place("substrates.csv", 4, "smiles"),
        place("campaign.toml", 5, "bases.library[0]"),
        place("campaign.toml", 7, "electrophiles.library[0]"),
        place("campaign.toml", 9, "solvents.library[1]"),
    ] {
        assert!(
            remote.iter().any(|fault| fault.place == written),
            "{written:?} in {remote:?}"
        );
    }
    assert!(
        remote
            .iter()
            .any(|fault| fault.code == "VALUE_OUT_OF_RANGE")
    );
    assert!(live.client.jobs().await.expect("jobs").is_empty());
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn a_campaign_too_large_for_a_message_comes_through_as_a_stream() {
    let live = Live::start().await;
    let mut campaign = small();
    // More atoms than a molecule may have, so that the check is quick and every row is a fault.
    let too_long = "C".repeat(1990);
    campaign.substrates = substrates(&vec![too_long.as_str(); 2500]);
    for (i, substrate) in campaign.substrates.iter_mut().enumerate() {
        substrate.name = format!("substrate {i}");
        substrate.place = place("substrates.csv", 2 + i as u32, "smiles");
    }
    let check = Submission {
        validate_only: true,
        ..submission(campaign)
    };
    let remote = faults(live.client.submit(check.clone()).await);
    assert!(remote.len() >= 2500, "{} faults", remote.len());
    assert_eq!(remote, embedded_faults(&live, check).await);
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn refusals_keep_their_reason_and_the_engines_words() {
    let live = Live::start().await;
    let job = live.screened(submission(small())).await.job;
    let first = live.client.rank(all_of(&job, 5)).await.expect("a page");
    let other_filter = RankQuery {
        filter: "p_hit > 0.1".into(),
        page_token: first.next_page_token,
        ..all_of(&job, 5)
    };
    let damaged = RankQuery {
        page_token: "not a token".into(),
        ..all_of(&job, 5)
    };
    for (question, expected) in [
        (all_of("no-such-job", 5), ErrorReason::JobUnknown),
        (other_filter, ErrorReason::PageTokenInvalid),
        (damaged, ErrorReason::PageTokenInvalid),
    ] {
        let remote = live
            .client
            .rank(question.clone())
            .await
            .expect_err("is refused");
        let embedded = live.engine.rank(question).await.expect_err("is refused");
        assert_eq!(remote.to_string(), embedded.to_string());
        assert!(remote.is_callers_fault());
        assert!(
            matches!(&remote, RemoteError::Refused { reason, .. } if *reason == expected),
            "{remote:?}"
        );
    }
    let beyond = ExplainTarget::OfJob {
        job: job.clone(),
        cell: 24,
    };
    let remote = live.client.explain(beyond).await.expect_err("is refused");
    assert!(
        matches!(
            remote,
            RemoteError::Refused {
                reason: ErrorReason::CellUnknown,
                ..
            }
        ),
        "{remote:?}"
    );
    let bad_filter = RankQuery {
        filter: "p_hit >> 1".into(),
        ..all_of(&job, 5)
    };
    let remote = faults(live.client.rank(bad_filter).await);
    assert_eq!(
        (remote[0].code, remote[0].place.field.as_str()),
        ("FILTER_INVALID", "filter")
    );
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn molecules_that_cannot_be_read_are_all_named() {
    let live = Live::start().await;
    let smiles = ["CC(=O)C", "C1CC", "not a molecule"].map(str::to_owned);
    let remote = faults(live.client.sites(&smiles).await);
    let fields: Vec<_> = remote
        .iter()
        .map(|fault| fault.place.field.as_str())
        .collect();
    assert_eq!(fields, ["smiles[1]", "smiles[2]"]);
    assert!(remote.iter().all(|fault| fault.code == "STRUCTURE_INVALID"));
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn a_server_that_is_not_there_is_said_so() {
    let port = tokio::net::TcpListener::bind("127.0.0.1:0")
        .await
        .expect("a free port");
    let address = port.local_addr().expect("an address").to_string();
    drop(port);
    let error = enolattice_wire::Client::connect(&address)
        .await
        .expect_err("nobody listens");
    assert!(
        matches!(&error, RemoteError::Unreachable { url, .. } if *url == address),
        "{error:?}"
    );
    assert!(!error.is_callers_fault());
}
