//! An engine with a data directory: queue, watch, rank, explain, reopen.

use std::collections::{BTreeMap, BTreeSet};

use enolattice_engine::{
    Axis, Engine, EngineConfig, EngineError, ExplainTarget, Job, JobState, Order, RankQuery,
    RankedCell, Submission, Terms,
};
use enolattice_grid::{CampaignSpec, Entry, LibraryTable, MeasuredEntry, Sources};
use enolattice_model::Fingerprint;
use enolattice_reagents::OwnTable;
use enolattice_store::{JobKind, NewJob, Store};
use tempfile::TempDir;

/// 2 × 3 × 2 × 2 × 2 = 48 cells, a third of them with an electrophile that is not covered.
const CAMPAIGN: &str = r#"
title = "engine"
[substrates]
smiles = ["CCOC(=O)CC(=O)OCC", "CCC(=O)c1ccccc1"]
[bases]
library = ["LDA", "K2CO3"]
[electrophiles]
library = ["MeI"]
smiles = ["BrCc1ccccc1", "C=C=C"]
[solvents]
library = ["THF", "DMF"]
[conditions]
temperature_c = [-20, 25]
"#;

fn campaign() -> CampaignSpec {
    let sources = Sources {
        campaign_name: "c.toml".into(),
        campaign: CAMPAIGN.into(),
        files: BTreeMap::new(),
    };
    enolattice_grid::read(&sources).sound().expect("reads")
}

fn submission(request_id: &str) -> Submission {
    Submission {
        campaign: campaign(),
        request_id: request_id.into(),
        validate_only: false,
        terms: Terms::default(),
    }
}

fn config(folder: &TempDir) -> EngineConfig {
    EngineConfig {
        data_dir: folder.path().to_path_buf(),
        threads: 2,
        library: Vec::new(),
    }
}

async fn to_the_end(engine: &Engine, job: &str) -> Job {
    let mut changes = engine.watch(job).await.expect("watches");
    while changes.changed().await.is_ok() {}
    changes.borrow().clone()
}

async fn all_rows(engine: &Engine, query: &RankQuery) -> Vec<RankedCell> {
    let mut rows = Vec::new();
    let mut query = query.clone();
    loop {
        let page = engine.rank(query.clone()).await.expect("ranks");
        rows.extend(page.rows);
        query.page_token = page.next_page_token;
        query.skip = 0;
        if query.page_token.is_empty() {
            assert_eq!(rows.len() as u64, page.total);
            return rows;
        }
    }
}

#[tokio::test(flavor = "multi_thread")]
async fn a_job_runs_to_its_end_and_ranks_every_cell_once() {
    let folder = TempDir::new().expect("a folder");
    let engine = Engine::open(config(&folder)).await.expect("opens");
    assert!(engine.notices().is_empty());
    let queued = engine.submit(submission("")).await.expect("queued");
    assert_eq!((queued.cells, queued.title.as_str()), (48, "engine"));
    let done = to_the_end(&engine, &queued.job).await;
    assert_eq!((done.state, done.cells_done), (JobState::Done, 48));
    assert_eq!(engine.job(&queued.job).await.expect("read"), done);

    let query = RankQuery {
        job: queued.job.clone(),
        ..RankQuery::default()
    };
    let whole = all_rows(&engine, &query).await;
    for page_size in [1, 5, 7, 48] {
        let pages = all_rows(
            &engine,
            &RankQuery {
                page_size,
                ..query.clone()
            },
        )
        .await;
        assert_eq!(pages, whole, "pages of {page_size}");
    }
    let cells: BTreeSet<u64> = whole.iter().map(|row| row.cell).collect();
    assert_eq!(cells, (0..48).collect());
    assert_eq!(whole[0].expected_yield, done.best_yield);
    assert!(
        whole
            .iter()
            .all(|row| row.expected_yield.is_some() == (row.electrophile != "C=C=C"))
    );

    let best = RankQuery {
        best_per: Some(Axis::Base),
        order: Order::PHit,
        ..query.clone()
    };
    let best = all_rows(&engine, &best).await;
    for row in &best {
        let same_base = whole.iter().filter(|other| other.base == row.base);
        let highest = same_base
            .filter_map(|other| other.p_hit)
            .fold(0.0, f64::max);
        assert_eq!(row.p_hit, Some(highest), "{}", row.base);
    }
    assert_eq!(best.len(), 2);
    engine.close().await.expect("closes");
}

#[tokio::test(flavor = "multi_thread")]
async fn filters_and_skips_agree_with_the_whole_ranking() {
    let folder = TempDir::new().expect("a folder");
    let engine = Engine::open(config(&folder)).await.expect("opens");
    let job = engine.submit(submission("")).await.expect("queued").job;
    to_the_end(&engine, &job).await;
    let query = RankQuery {
        job,
        page_size: 5,
        ..RankQuery::default()
    };
    let whole = all_rows(&engine, &query).await;
    let filter = "solvent = DMF AND temperature_c > 0 OR base = LDA AND expected_yield:*";
    let filtered = RankQuery {
        filter: filter.into(),
        ..query.clone()
    };
    let expected: Vec<u64> = whole
        .iter()
        .filter(|row| {
            row.solvent == "DMF"
                && (row.temperature_c > 0.0 || row.base == "LDA")
                && row.expected_yield.is_some()
        })
        .map(|row| row.cell)
        .collect();
    let found: Vec<u64> = all_rows(&engine, &filtered)
        .await
        .iter()
        .map(|row| row.cell)
        .collect();
    assert_eq!(found, expected);
    let skipped = RankQuery {
        skip: 11,
        ..query.clone()
    };
    let skipped = engine.rank(skipped).await.expect("ranks");
    assert_eq!(skipped.rows, whole[11..16]);
    assert_eq!(skipped.total, 48);

    let first = engine.rank(query.clone()).await.expect("ranks");
    let other_order = RankQuery {
        order: Order::Selectivity,
        page_token: first.next_page_token.clone(),
        ..query.clone()
    };
    assert!(matches!(
        engine.rank(other_order).await,
        Err(EngineError::PageToken { .. })
    ));
    let damaged = RankQuery {
        page_token: "nonsense".into(),
        ..query
    };
    assert!(matches!(
        engine.rank(damaged).await,
        Err(EngineError::PageToken { .. })
    ));
    engine.close().await.expect("closes");
}

#[tokio::test(flavor = "multi_thread")]
async fn explain_of_a_cell_agrees_with_its_stored_score() {
    let folder = TempDir::new().expect("a folder");
    let engine = Engine::open(config(&folder)).await.expect("opens");
    let job = engine.submit(submission("")).await.expect("queued").job;
    to_the_end(&engine, &job).await;
    let query = RankQuery {
        job: job.clone(),
        ..RankQuery::default()
    };
    for row in all_rows(&engine, &query).await.iter().step_by(9) {
        let target = ExplainTarget::OfJob {
            job: job.clone(),
            cell: row.cell,
        };
        let cell = engine.describe(target.clone()).await.expect("describes");
        assert_eq!((cell.cell, &cell.base), (Some(row.cell), &row.base));
        assert_eq!(cell.addition, row.addition);
        let told = engine.explain(target).await.expect("explains");
        assert_eq!(told.expected_yield.is_some(), row.expected_yield.is_some());
        let step = 1.0 / 65534.0;
        if let (Some(told), Some(stored)) = (told.expected_yield, row.expected_yield) {
            assert!(
                (told - stored).abs() < step,
                "cell {}: {told} {stored}",
                row.cell
            );
        }
    }
    let beyond = ExplainTarget::OfJob { job, cell: 48 };
    let refused = engine.explain(beyond).await;
    assert!(matches!(
        refused,
        Err(EngineError::CellUnknown { last: 47, .. })
    ));
    engine.close().await.expect("closes");
}

#[tokio::test(flavor = "multi_thread")]
async fn a_request_id_gives_one_job_and_validation_none() {
    let folder = TempDir::new().expect("a folder");
    let engine = Engine::open_idle(config(&folder)).await.expect("opens");
    let checked = Submission {
        validate_only: true,
        ..submission("r")
    };
    let checked = engine.submit(checked).await.expect("valid");
    assert_eq!((checked.job.as_str(), checked.cells), ("", 48));
    assert!(engine.jobs().await.expect("lists").is_empty());

    let first = engine.submit(submission("r")).await.expect("queued");
    let again = engine.submit(submission("r")).await.expect("the same");
    assert_eq!(first, again);
    let mut other = submission("r");
    other.campaign.title = "another".into();
    let refused = engine.submit(other).await;
    assert!(
        matches!(refused, Err(EngineError::RequestIdReused { .. })),
        "{refused:?}"
    );
    let mut faulty = submission("");
    faulty.campaign.bases.entries[0].name = "LDE".into();
    faulty.campaign.solvents.entries[0].name = "THG".into();
    match engine.submit(faulty).await {
        Err(EngineError::Input(faults)) => assert_eq!(faults.len(), 2, "{faults:?}"),
        other => panic!("{other:?}"),
    }
    assert_eq!(engine.jobs().await.expect("lists"), [first]);
    engine.close().await.expect("closes");
}

#[tokio::test(flavor = "multi_thread")]
async fn a_queued_job_is_taken_up_when_the_directory_is_opened_again() {
    let folder = TempDir::new().expect("a folder");
    let idle = Engine::open_idle(config(&folder)).await.expect("opens");
    let kept = idle.submit(submission("")).await.expect("queued");
    let dropped = idle.submit(submission("")).await.expect("queued");
    let cancelled = idle.cancel(&dropped.job).await.expect("cancelled");
    assert_eq!(cancelled.state, JobState::Cancelled);
    let second = Engine::open(config(&folder)).await;
    assert!(
        matches!(second, Err(EngineError::Store { .. })),
        "one engine a directory"
    );
    idle.close().await.expect("closes");

    let engine = Engine::open(config(&folder)).await.expect("opens");
    let done = to_the_end(&engine, &kept.job).await;
    assert_eq!(done.state, JobState::Done);
    let jobs = engine.jobs().await.expect("lists");
    let ids: Vec<_> = jobs.iter().map(|job| job.job.as_str()).collect();
    assert_eq!(
        ids,
        [dropped.job.as_str(), kept.job.as_str()],
        "newest first"
    );
    for ended in [&kept.job, &dropped.job] {
        let refused = engine.cancel(ended).await;
        assert!(
            matches!(refused, Err(EngineError::WrongState { .. })),
            "{refused:?}"
        );
    }
    let watched = to_the_end(&engine, &dropped.job).await;
    assert_eq!(watched, cancelled);
    engine.close().await.expect("closes");
    let again = Engine::open(config(&folder)).await.expect("opens at once");
    assert_eq!(again.job(&kept.job).await.expect("kept"), done);
    again.close().await.expect("closes");
}

/// A job as a version with another library left it: the same text, but another meaning.
#[tokio::test(flavor = "multi_thread")]
async fn a_job_whose_campaign_means_something_else_now_fails_and_says_so() {
    let folder = TempDir::new().expect("a folder");
    let (store, _) = Store::open(folder.path(), 0).expect("opens");
    let new = NewJob {
        spec: campaign(),
        campaign_fingerprint: Fingerprint([7; 32]),
        model_fingerprint: Fingerprint([8; 32]),
        cells: 48,
        blocks: 1,
        request_id: String::new(),
        warnings: Vec::new(),
        kind: JobKind::Screening,
        terms: Terms::default(),
    };
    let job = store.create_job(new, 0).expect("kept").record.id;
    drop(store);

    let engine = Engine::open(config(&folder)).await.expect("opens");
    let failed = to_the_end(&engine, &job.to_string()).await;
    assert_eq!((failed.state, failed.cells_done), (JobState::Failed, 0));
    assert!(failed.failure.contains("submit it again"), "{failed:?}");
    let query = RankQuery {
        job: job.to_string(),
        ..RankQuery::default()
    };
    let refused = engine.rank(query).await;
    assert!(
        matches!(refused, Err(EngineError::WrongState { .. })),
        "{refused:?}"
    );
    engine.close().await.expect("closes");
}

#[tokio::test(flavor = "multi_thread")]
async fn an_engine_without_data_has_no_jobs() {
    let engine = Engine::without_data(0, Vec::new()).await.expect("opens");
    assert!(matches!(
        engine.jobs().await,
        Err(EngineError::Store { .. })
    ));
    assert!(!engine.reagents("").await.expect("lists").is_empty());
    assert_eq!(engine.reagents("LDA").await.expect("lists")[0].name, "LDA");
    match engine
        .sites(&["CC(C)=O".into(), "C1CC".into(), "XX".into()])
        .await
    {
        Err(EngineError::Input(faults)) => {
            let fields: Vec<_> = faults
                .iter()
                .map(|fault| fault.place.field.as_str())
                .collect();
            assert_eq!(fields, ["smiles[1]", "smiles[2]"]);
        }
        other => panic!("{other:?}"),
    }
    engine.close().await.expect("closes");
}

/// A table of one additive: the first row of the library's under another name.
fn own_table(name: &str) -> LibraryTable {
    let library = include_str!("../../reagents/data/additives.tsv");
    let (comments, rows): (Vec<&str>, Vec<&str>) =
        library.lines().partition(|line| line.starts_with('#'));
    let columns: Vec<&str> = rows[0].split('\t').collect();
    let row = columns
        .iter()
        .zip(rows[1].split('\t'))
        .map(|(column, value)| match *column {
            "name" => name,
            "synonyms" | "cas" => "",
            _ => value,
        });
    let row: Vec<&str> = row.collect();
    LibraryTable {
        name: "own.tsv".into(),
        text: format!("{}\n{}\n{}\n", comments.join("\n"), rows[0], row.join("\t")),
    }
}

#[tokio::test(flavor = "multi_thread")]
async fn a_campaign_brings_reagents_of_its_own() {
    let folder = TempDir::new().expect("a folder");
    let mut with_own = submission("");
    with_own.campaign.additives.entries = ["none", "house crown"]
        .map(|name| Entry {
            name: name.into(),
            ..Entry::default()
        })
        .to_vec();
    let engine = Engine::open(config(&folder)).await.expect("opens");
    match engine.submit(with_own.clone()).await {
        Err(EngineError::Input(faults)) => assert_eq!(faults[0].code, "REAGENT_UNKNOWN"),
        other => panic!("{other:?}"),
    }
    with_own.campaign.library = vec![own_table("house crown")];
    let job = engine.submit(with_own.clone()).await.expect("is queued");
    assert_eq!(to_the_end(&engine, &job.job).await.state, JobState::Done);
    assert_ne!(job.model_fingerprint, engine.model_fingerprint());
    let query = RankQuery {
        job: job.job.clone(),
        filter: "additive = \"house crown\"".into(),
        ..RankQuery::default()
    };
    let ranked = all_rows(&engine, &query).await;
    assert_eq!(ranked.len() as u64, job.cells / 2);
    let target = ExplainTarget::OfJob {
        job: job.job.clone(),
        cell: ranked[0].cell,
    };
    let told = engine.explain(target).await.expect("explains");
    assert_eq!(told.model, job.model_fingerprint);
    engine.close().await.expect("closes");

    // the tables are kept with the job
    let engine = Engine::open_idle(config(&folder)).await.expect("opens");
    assert_eq!(all_rows(&engine, &query).await, ranked);
    with_own.campaign.library[0].text = "# table: additives\nname\tcolour\nx\tred\n".into();
    match engine.submit(with_own).await {
        Err(EngineError::Input(faults)) => {
            assert!(
                faults.iter().all(|fault| fault.code == "LIBRARY_INVALID"),
                "{faults:?}"
            );
            assert!(
                faults.iter().all(|fault| fault.place.file == "own.tsv"),
                "{faults:?}"
            );
        }
        other => panic!("{other:?}"),
    }
    engine.close().await.expect("closes");
}

#[tokio::test(flavor = "multi_thread")]
async fn tables_of_the_engine_hold_for_all_that_it_does() {
    let table = own_table("18-crown-6");
    let own = OwnTable {
        name: table.name,
        text: table.text.replace("K 0.9", "K 0.8"),
    };
    let engine = Engine::without_data(1, vec![own]).await.expect("opens");
    assert!(
        engine
            .notices()
            .iter()
            .any(|notice| notice.contains("K 0.8")),
        "{:?}",
        engine.notices()
    );
}

#[tokio::test(flavor = "multi_thread")]
async fn a_dry_run_says_what_is_not_covered_and_queues_nothing() {
    let engine = Engine::without_data(1, Vec::new()).await.expect("opens");
    let spec = campaign();
    let run = engine.dry_run(spec).await.expect("a sound campaign");
    assert_eq!(run.job.cells, 48);
    assert_eq!((run.cells_scored, run.cells_scored_not_covered), (48, 16));
    let cells: Vec<(Axis, u64)> = run
        .not_covered
        .iter()
        .map(|known| (known.axis, known.cells))
        .collect();
    assert_eq!(cells, [(Axis::Electrophile, 16)]);
    assert!(!run.not_covered[0].reason.is_empty());
    assert_eq!(run.cells_looked_at, 48);
    assert_eq!((run.pairs_looked_at, run.pairs_not_covered.len()), (6, 0));
}

/// A phosphonate makes an alkene of benzaldehyde (Horner, Wadsworth and Emmons), which one new bond at
/// carbon is not.
#[tokio::test(flavor = "multi_thread")]
async fn a_dry_run_counts_pairs_without_a_product_among_all() {
    let engine = Engine::without_data(1, Vec::new()).await.expect("opens");
    let mut spec = campaign();
    spec.substrates[1].smiles = "CCOC(=O)CP(=O)(OCC)OCC".into();
    spec.electrophiles.entries[0].name = "benzaldehyde".into();
    let run = engine.dry_run(spec).await.expect("a sound campaign");
    assert_eq!(run.pairs_looked_at, 6);
    let [known] = run.pairs_not_covered.as_slice() else {
        panic!("{:?}", run.pairs_not_covered);
    };
    assert_eq!(
        (known.pairs, known.electrophile.as_str()),
        (1, "benzaldehyde")
    );
    assert!(known.reason.contains("alkene"), "{}", known.reason);
    // its eight cells, and the sixteen of the allene
    assert_eq!(run.cells_scored_not_covered, 24);
}

/// tert-Butyllithium ignites in air at once, which is a stop; the solvents of its cells are flammable, which is none.
#[tokio::test(flavor = "multi_thread")]
async fn a_category_of_caution_counts_at_its_own_severity() {
    use enolattice_model::{Category, Severity};
    let engine = Engine::without_data(1, Vec::new()).await.expect("opens");
    let mut spec = campaign();
    spec.bases.entries[1].name = "tBuLi".into();
    let run = engine.dry_run(spec).await.expect("a sound campaign");
    let cells = |severity, category| {
        let mut counts = run.cautions.iter();
        let known = counts.find(|known| (known.severity, known.category) == (severity, category));
        known.map_or(0, |known| known.cells)
    };
    assert_eq!(cells(Severity::Stop, Some(Category::Pyrophoric)), 24);
    assert_eq!(cells(Severity::Stop, None), 24);
    assert_eq!(cells(Severity::Stop, Some(Category::Flammable)), 0);
    // LDA ignites in air as a solid
    assert_eq!(cells(Severity::Warning, Some(Category::Pyrophoric)), 24);
    assert_eq!(cells(Severity::Warning, None), 24);
}

#[tokio::test(flavor = "multi_thread")]
async fn measured_yields_stand_beside_the_computed_ones_and_change_nothing() {
    let folder = TempDir::new().expect("a folder");
    let engine = Engine::open(config(&folder)).await.expect("opens");
    let without = engine.submit(submission("")).await.expect("queued");
    to_the_end(&engine, &without.job).await;
    let mut measured = submission("");
    measured.campaign.measured = vec![MeasuredEntry {
        substrate: "CCC(=O)c1ccccc1".into(),
        base: "LDA".into(),
        electrophile: "iodomethane".into(),
        solvent: "tetrahydrofuran".into(),
        temperature_c: Some(-20.0),
        yield_fraction: Some(0.62),
        sigma: Some(0.03),
        note: "by NMR".into(),
        ..MeasuredEntry::default()
    }];
    let with = engine.submit(measured).await.expect("queued");
    assert_eq!(with.campaign_fingerprint, without.campaign_fingerprint);
    assert_eq!(with.warnings, without.warnings);
    to_the_end(&engine, &with.job).await;
    engine.close().await.expect("closes");

    let engine = Engine::open_idle(config(&folder)).await.expect("opens");
    let all = |job: &str| RankQuery {
        job: job.to_owned(),
        ..RankQuery::default()
    };
    let plain = all_rows(&engine, &all(&without.job)).await;
    let mut beside = all_rows(&engine, &all(&with.job)).await;
    let only = RankQuery {
        filter: "measured_yield:*".into(),
        ..all(&with.job)
    };
    let found = all_rows(&engine, &only).await;
    assert_eq!(found.len(), 1);
    let row = &found[0];
    assert_eq!((row.base.as_str(), row.solvent.as_str()), ("LDA", "THF"));
    assert_eq!((row.temperature_c, row.measured_yield), (-20.0, Some(0.62)));
    let target = ExplainTarget::OfJob {
        job: with.job.clone(),
        cell: row.cell,
    };
    let told = engine.describe(target).await.expect("describes").measured;
    let told = told.expect("was measured");
    assert_eq!((told.sigma, told.note.as_str()), (Some(0.03), "by NMR"));
    beside.iter_mut().for_each(|row| row.measured_yield = None);
    assert_eq!(beside, plain);
    engine.close().await.expect("closes");
}
