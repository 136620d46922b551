//! What is refused, and what the client learns from it.

use enolattice_engine::{EngineError, ExplainTarget, RankQuery, Submission};
use enolattice_grid::{Campaign, CampaignSpec, InputError, MAX_FAULTS, Place, Sources, read};
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
async fn faults_of_files_and_of_names_come_in_one_list_from_a_server_too() {
    let campaign = "titel = 1\n[substrates]\nfile = 's.csv'\n[bases]\nlibrary = 'LDDA'\n\
                    [electrophiles]\nlibrary = 'MeI'\n[solvents]\nfile = 'v.csv'\n\
                    [conditions]\ntemperature_c = 400\n";
    let files = [
        (
            "s.csv",
            "name,smiles,pka_dmso\nopen,C1CC,\nhigh,CC#N,much\n",
        ),
        ("v.csv", "name,smiles\nTHG,\n,CCCCCCCCCCCCCCCCCC\n"),
    ];
    let reading = read(&Sources {
        campaign_name: "c.toml".into(),
        campaign: campaign.into(),
        files: files
            .iter()
            .map(|(name, text)| ((*name).to_owned(), text.as_bytes().to_vec()))
            .collect(),
    });
    let live = Live::start().await;
    let found = live.client.faults(reading.spec.clone()).await;
    let remote = reading.with(found.expect("the server answers"));
    let library = enolattice_reagents::Library::builtin().expect("the tables are sound");
    let embedded = reading.with(Campaign::faults(&reading.spec, &library));
    assert_eq!(remote, embedded);
    let places: Vec<_> = remote.into_iter().map(|fault| fault.place).collect();
    assert_eq!(
        places,
        [
            place("c.toml", 1, "titel"),
            place("c.toml", 5, "bases.library"),
            place("c.toml", 11, "conditions.temperature_c"),
            place("s.csv", 2, "smiles"),
            place("s.csv", 3, "pka_dmso"),
            place("v.csv", 2, "name"),
            place("v.csv", 3, "smiles"),
        ]
    );
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn a_dry_run_of_a_server_is_that_of_the_engine() {
    let live = Live::start().await;
    let remote = live
        .client
        .dry_run(small())
        .await
        .expect("a sound campaign");
    let embedded = live
        .engine
        .dry_run(small())
        .await
        .expect("a sound campaign");
    assert_eq!(remote.job.cells, 24);
    // a campaign of less than a block is scored whole
    assert_eq!((remote.cells_scored, remote.cells_looked_at), (24, 24));
    assert_eq!(remote.axes, embedded.axes);
    assert_eq!(remote.cautions, embedded.cautions);
    assert_eq!(remote.disk_bytes, embedded.disk_bytes);
    assert!(live.client.jobs().await.expect("jobs").is_empty());
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn a_campaign_too_large_for_a_message_comes_through_as_a_stream() {
    let live = Live::start().await;
    let mut campaign = small();
    // Long and no structure, so that every row is a fault and the campaign has few atoms.
    let no_structure = "=".repeat(1990);
    campaign.substrates = substrates(&vec![no_structure.as_str(); 2500]);
    for (i, substrate) in campaign.substrates.iter_mut().enumerate() {
        substrate.name = format!("substrate {i}");
        substrate.place = place("substrates.csv", 2 + i as u32, "smiles");
    }
    let check = Submission {
        validate_only: true,
        ..submission(campaign)
    };
    let remote = faults(live.client.submit(check.clone()).await);
    let last = remote.last().expect("faults");
    assert_eq!((remote.len(), last.code), (MAX_FAULTS + 1, "MORE_FAULTS"));
    assert_eq!(last.value, (2500 - MAX_FAULTS).to_string());
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
