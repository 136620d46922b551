//! A campaign from submission to explanation: a server answers as an embedded engine does.

use std::collections::BTreeSet;

use enolattice_engine::{Axis, CellQuery, ExplainTarget, JobState, Order, RankQuery, SiteReport};
use enolattice_wire::v1::MoleculeSites;

use crate::campaigns::{small, submission};
use crate::live::{Live, all_of, pages};

#[tokio::test(flavor = "multi_thread")]
async fn a_campaign_runs_to_its_ranking() {
    let live = Live::start().await;
    let job = live.screened(submission(small())).await;
    assert_eq!(
        (job.state, job.cells, job.cells_done),
        (JobState::Done, 24, 24)
    );
    assert!(
        job.ended_unix_ms
            .is_some_and(|ended| ended >= job.submitted_unix_ms)
    );
    assert_eq!(live.client.job(&job.job).await.expect("is there"), job);
    assert_eq!(live.engine.job(&job.job).await.expect("is there"), job);

    let whole = pages(&live.client, all_of(&job.job, 1000))
        .await
        .expect("a ranking");
    let numbers: BTreeSet<u64> = whole.iter().map(|row| row.cell).collect();
    assert_eq!(numbers, (0..24).collect(), "every cell once");
    let ranks: Vec<u64> = whole.iter().map(|row| row.rank).collect();
    assert_eq!(ranks, (1..=24).collect::<Vec<_>>());
    assert!(whole.is_sorted_by(|a, b| {
        let key = |yield_: Option<f64>| yield_.unwrap_or(-1.0);
        let (a_yield, b_yield) = (key(a.expected_yield), key(b.expected_yield));
        a_yield > b_yield || a_yield == b_yield && a.cell < b.cell
    }));
    let five = pages(&live.client, all_of(&job.job, 5))
        .await
        .expect("a ranking");
    assert_eq!(five, whole, "pages end to end are the ranking");
    let embedded = live
        .engine
        .rank(all_of(&job.job, 1000))
        .await
        .expect("a ranking");
    assert_eq!(embedded.rows, whole, "the embedded engine ranks alike");
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn every_question_for_a_ranking_is_answered_alike() {
    let live = Live::start().await;
    let job = live.screened(submission(small())).await.job;
    let questions = [
        RankQuery {
            order: Order::PHit,
            ..all_of(&job, 7)
        },
        RankQuery {
            order: Order::Selectivity,
            ..all_of(&job, 7)
        },
        RankQuery {
            order: Order::Feasibility,
            skip: 3,
            ..all_of(&job, 7)
        },
        RankQuery {
            filter: "solvent = \"THF\" AND base = \"LDA\"".into(),
            ..all_of(&job, 3)
        },
        RankQuery {
            best_per: Some(Axis::Substrate),
            ..all_of(&job, 10)
        },
        RankQuery {
            best_per: Some(Axis::Base),
            ..all_of(&job, 10)
        },
    ];
    for question in questions {
        let remote = live.client.rank(question.clone()).await.expect("a page");
        let embedded = live.engine.rank(question.clone()).await.expect("a page");
        assert_eq!(remote, embedded, "{question:?}");
        assert!(!remote.rows.is_empty(), "{question:?}");
    }
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn explanations_are_the_same_embedded_and_remote() {
    let live = Live::start().await;
    let job = live.screened(submission(small())).await.job;
    let given = CellQuery {
        substrate: "CCOC(=O)Cc1ccccc1".into(),
        base: "LDA".into(),
        electrophile: "BrCc1ccccc1".into(),
        solvent: "THF".into(),
        additive: None,
        additive_equiv: None,
        temperature_c: -20.0,
        formation_temperature_c: Some(-78.0),
        base_equiv: 1.1,
        electrophile_equiv: 1.2,
        time_h: 16.0,
        dosing_min: 10.0,
        concentration_m: 0.2,
        addition: None,
        yield_at_least: 0.5,
    };
    for target in [
        ExplainTarget::OfJob { job, cell: 5 },
        ExplainTarget::Given(given),
    ] {
        let (cell, explanation) = live
            .client
            .explain(target.clone())
            .await
            .expect("is explained");
        let embedded = live
            .engine
            .describe(target.clone())
            .await
            .expect("is described");
        assert_eq!(cell, embedded);
        let embedded = live.engine.explain(target).await.expect("is explained");
        assert_eq!(format!("{explanation:?}"), format!("{embedded:?}"));
        assert!(!explanation.sites.is_empty());
    }
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn molecules_and_the_library_are_the_same_embedded_and_remote() {
    let live = Live::start().await;
    let smiles = ["CC(=O)C", "C[N+](=O)[O-]", "CC(=O)CC(=O)OCC"].map(str::to_owned);
    let remote = live.client.sites(&smiles).await.expect("sites");
    let embedded = live.engine.sites(&smiles).await.expect("sites");
    // As messages: what the fit keeps for itself does not travel.
    let told = |reports: &[SiteReport]| reports.iter().map(Into::into).collect();
    let (remote, embedded): (Vec<MoleculeSites>, Vec<_>) = (told(&remote), told(&embedded));
    assert_eq!(remote, embedded);
    assert!(remote.iter().all(|molecule| !molecule.sites.is_empty()));
    for word in ["", "LDA", "nothing has this name"] {
        let remote = live.client.reagents(word).await.expect("reagents");
        assert_eq!(
            remote,
            live.engine.reagents(word).await.expect("reagents"),
            "{word}"
        );
    }
    live.stop().await;
}
