//! Two jobs compared, and what was measured held against the model: embedded and served alike.

use std::collections::HashMap;

use enolattice_engine::{Agreement, Comparison, RankedCell};
use enolattice_grid::{CampaignSpec, MeasuredEntry, Place, SubstrateEntry};
use enolattice_wire::RemoteError;
use enolattice_wire::v1::ErrorReason;

use crate::campaigns::{library, long, small, submission, substrates};
use crate::live::{Live, all_of, pages};

/// Screens two campaigns and compares them, by the server and by its engine, which must agree.
async fn compared(live: &Live, before: CampaignSpec, after: CampaignSpec) -> Comparison {
    let before = live.screened(submission(before)).await.job;
    let after = live.screened(submission(after)).await.job;
    let served = live
        .client
        .compare(&before, &after, 3)
        .await
        .expect("is compared");
    let embedded = live
        .engine
        .compare(&before, &after, 3)
        .await
        .expect("is compared");
    assert_eq!(served, embedded);
    served
}

/// The small campaign with every axis in another order, a substrate less and a solvent more.
fn turned() -> CampaignSpec {
    CampaignSpec {
        substrates: substrates(&["C1CCC(=O)CC1"]),
        bases: library(&["Et3N", "LDA", "KOtBu"]),
        electrophiles: library(&["BnBr", "MeI"]),
        solvents: library(&["DMSO", "DMF", "THF"]),
        ..small()
    }
}

#[tokio::test(flavor = "multi_thread")]
async fn the_same_cells_under_other_numbers_have_not_moved() {
    let live = Live::start().await;
    let compared = compared(&live, small(), turned()).await;
    // one substrate, three bases, two electrophiles, two solvents
    assert_eq!((compared.cells, compared.cells_missing), (12, 0));
    assert_eq!(compared.cells_compared, 12);
    assert!(
        compared
            .spearman
            .is_some_and(|rho| (rho - 1.0).abs() < 1e-12)
    );
    assert_eq!(compared.mean_absolute_change, Some(0.0));
    assert_eq!((compared.cells_moved, compared.movers.len()), (0, 0));
    assert_eq!((compared.hits_entered, compared.hits_left), (0, 0));
    assert_eq!(compared.hits_before, compared.hits_after);
    let axis = |name| {
        compared
            .axes
            .iter()
            .find(|axis| axis.axis == name)
            .expect("an axis")
    };
    assert_eq!(
        (axis("substrates").left_only, axis("substrates").right_only),
        (1, 0)
    );
    assert_eq!(
        (axis("solvents").left_only, axis("solvents").right_only),
        (0, 1)
    );
    assert_eq!(compared.remarks, Vec::<String>::new());
    live.stop().await;
}

/// A cell by its reagents.
fn key(cell: &RankedCell) -> String {
    format!(
        "{} {} {} {}",
        cell.substrate, cell.base, cell.electrophile, cell.solvent
    )
}

#[tokio::test(flavor = "multi_thread")]
async fn what_moved_is_what_the_rankings_say() {
    let live = Live::start().await;
    let mut warmer = small();
    warmer.conditions.temperature_c = vec![60.0];
    let compared = compared(&live, small(), warmer).await;
    let ranked = |job: &str| pages(&live.client, all_of(job, 100));
    let before = ranked(&compared.before.job).await.expect("is ranked");
    let after = ranked(&compared.after.job).await.expect("is ranked");
    let after: HashMap<String, &RankedCell> = after.iter().map(|cell| (key(cell), cell)).collect();
    let pairs: Vec<(f64, f64)> = before
        .iter()
        .filter_map(|cell| Some((cell.expected_yield?, after[&key(cell)].expected_yield?)))
        .collect();
    let count = |holds: &dyn Fn(&(f64, f64)) -> bool| {
        pairs.iter().filter(|pair| holds(pair)).count() as u64
    };
    assert_eq!(compared.cells_compared, pairs.len() as u64);
    assert_eq!(compared.cells_moved, count(&|(a, b)| (a - b).abs() > 0.1));
    assert!(compared.cells_moved > 0, "the test must see something move");
    assert_eq!(compared.hits_before, count(&|(a, _)| *a >= 0.5));
    assert_eq!(compared.hits_after, count(&|(_, b)| *b >= 0.5));
    assert_eq!(
        compared.hits_entered,
        count(&|(a, b)| *a < 0.5 && *b >= 0.5)
    );
    assert_eq!(compared.hits_left, count(&|(a, b)| *a >= 0.5 && *b < 0.5));
    let mean = pairs.iter().map(|(a, b)| b - a).sum::<f64>() / pairs.len() as f64;
    assert!(
        compared
            .mean_change
            .is_some_and(|change| (change - mean).abs() < 1e-9)
    );
    let rho = correlation_of_ranks(&pairs);
    assert!(
        compared
            .spearman
            .is_some_and(|known| (known - rho).abs() < 1e-9),
        "{rho}"
    );
    let largest = pairs.iter().map(|(a, b)| (a - b).abs()).fold(0.0, f64::max);
    let first = &compared.movers[0];
    let change = first.before.expected_yield.zip(first.after.expected_yield);
    assert!(change.is_some_and(|(a, b)| ((a - b).abs() - largest).abs() < 1e-9));
    let told: Vec<&str> = first.differences.iter().map(|d| d.what.as_str()).collect();
    assert_eq!(told[0], "temperature_c");
    assert!(
        told.iter().any(|what| what.starts_with("log10 k: ")),
        "{told:?}"
    );
    live.stop().await;
}

/// Spearman's correlation as its definition says it: Pearson's of the ranks, a rank being the number of smaller
/// values and half that of equal ones.
fn correlation_of_ranks(pairs: &[(f64, f64)]) -> f64 {
    let rank = |of: &dyn Fn(&(f64, f64)) -> f64, value: f64| {
        let smaller = pairs.iter().filter(|pair| of(pair) < value).count() as f64;
        let equal = pairs.iter().filter(|pair| of(pair) == value).count() as f64;
        smaller + equal / 2.0 - pairs.len() as f64 / 2.0
    };
    let (mut together, mut squares) = (0.0, [0.0, 0.0]);
    for (a, b) in pairs {
        let (a, b) = (rank(&|pair| pair.0, *a), rank(&|pair| pair.1, *b));
        together += a * b;
        squares[0] += a * a;
        squares[1] += b * b;
    }
    together / f64::sqrt(squares[0] * squares[1])
}

#[tokio::test(flavor = "multi_thread")]
async fn jobs_that_run_or_do_not_exist_are_not_compared() {
    let live = Live::start().await;
    let done = live.screened(submission(small())).await.job;
    let running = live
        .client
        .submit(submission(long(400)))
        .await
        .expect("is accepted")
        .job;
    let refused = |before: String, after: String, reason: ErrorReason| {
        let client = live.client.clone();
        async move {
            let error = client
                .compare(&before, &after, 3)
                .await
                .expect_err("is refused");
            assert!(
                matches!(error, RemoteError::Refused { reason: known, .. } if known == reason),
                "{error}"
            );
        }
    };
    refused(done.clone(), running.clone(), ErrorReason::JobWrongState).await;
    refused("none".into(), done.clone(), ErrorReason::JobUnknown).await;
    live.client.cancel(&running).await.expect("is cancelled");
    // what a cancelled job has screened is compared, the rest is counted
    let compared = live
        .client
        .compare(&done, &running, 0)
        .await
        .expect("is compared");
    assert!(compared.cells_missing <= compared.cells);
    live.stop().await;
}

fn measured(substrate: &str, base: &str, yield_fraction: f64, line: u32) -> MeasuredEntry {
    MeasuredEntry {
        substrate: substrate.into(),
        base: base.into(),
        electrophile: "BnBr".into(),
        solvent: "THF".into(),
        temperature_c: Some(25.0),
        yield_fraction: Some(yield_fraction),
        place: Place {
            file: "yields.csv".into(),
            line,
            field: String::new(),
        },
        ..MeasuredEntry::default()
    }
}

fn runs() -> CampaignSpec {
    CampaignSpec {
        substrates: vec![SubstrateEntry {
            name: "our ester".into(),
            smiles: "CCOC(=O)Cc1ccccc1".into(),
            pka_dmso: Some(22.0),
            ..SubstrateEntry::default()
        }],
        measured: vec![
            measured("our ester", "LDA", 0.9, 2),
            measured("O=C1CCCCC1", "Et3N", 0.3, 3),
            measured("O=C1CCCCC1", "KOtBu", 0.2, 4),
            measured("CCOC(=O)CC(=O)OCC", "K2CO3", 0.6, 5),
        ],
        ..CampaignSpec::default()
    }
}

/// What was measured, held against the model by the server and by its engine, which must agree.
async fn checked(live: &Live, spec: CampaignSpec) -> Agreement {
    let served = live
        .client
        .check_measured(spec.clone(), 1)
        .await
        .expect("is checked");
    let mut embedded = live
        .engine
        .check_measured(spec, 1)
        .await
        .expect("is checked");
    for compound in &mut embedded.acidities.compounds {
        if let Some(site) = &mut compound.site {
            // how an estimate hangs on its coefficients stays with the engine
            site.site.contribution = Default::default();
        }
    }
    assert_eq!(format!("{served:?}"), format!("{embedded:?}"));
    served
}

#[tokio::test(flavor = "multi_thread")]
async fn runs_without_a_campaign_are_held_against_the_model() {
    let live = Live::start().await;
    let found = checked(&live, runs()).await;
    assert_eq!((found.yields.runs.len(), found.yields.covered), (4, 4));
    let worst = |at: usize| {
        let run = &found.yields.runs[at];
        let measured = run
            .cell
            .measured
            .as_ref()
            .expect("was measured")
            .yield_fraction;
        (run.expected_yield.expect("is covered") - measured).abs()
    };
    let missed = found.yields.misses[0].run as usize;
    assert!((0..4).all(|at| worst(at) <= worst(missed)));
    assert_eq!(
        found
            .yields
            .deciles
            .iter()
            .map(|decile| decile.runs)
            .sum::<u64>(),
        4
    );
    assert_eq!(found.yields.hits_measured, 2);
    // the compound stands in the tables: the model's value is not the laboratory's
    let [ester] = found.acidities.compounds.as_slice() else {
        panic!("one compound has a pKa");
    };
    let site = ester.site.as_ref().expect("an ester has an acidic C–H");
    assert!((site.site.pka_dmso - 22.7).abs() < 0.3 && ester.measured == 22.0);

    // what the model itself expects agrees with it
    let mut echoed = runs();
    for (row, run) in echoed.measured.iter_mut().zip(&found.yields.runs) {
        row.yield_fraction = run.expected_yield;
    }
    let echo = checked(&live, echoed).await.yields;
    assert_eq!(echo.mean_absolute_error, Some(0.0));
    assert!(echo.spearman.is_some_and(|rho| (rho - 1.0).abs() < 1e-12));
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn an_own_pka_counts_in_the_cells_and_not_in_its_own_check() {
    let live = Live::start().await;
    let with_pka = |pka_dmso| {
        let mut spec = runs();
        spec.substrates[0].pka_dmso = pka_dmso;
        spec.measured = vec![measured("our ester", "K2CO3", 0.5, 2)];
        spec
    };
    let usual = checked(&live, with_pka(None)).await;
    let weaker = checked(&live, with_pka(Some(30.0))).await;
    let of = |found: &Agreement| found.yields.runs[0].expected_yield.expect("is covered");
    assert!(of(&weaker) < of(&usual));
    assert_eq!(usual.acidities.compounds.len(), 0);
    assert!(
        weaker
            .acidities
            .mean_absolute_error
            .is_some_and(|error| error > 7.0)
    );
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn what_the_model_does_not_cover_is_told_and_not_counted() {
    let live = Live::start().await;
    let mut spec = runs();
    // a C–H acid that the model knows, and nothing to alkylate it with
    spec.measured[1].electrophile = "C".into();
    let found = checked(&live, spec).await.yields;
    let unknown = &found.runs[1];
    assert_eq!((unknown.expected_yield, unknown.p_hit), (None, None));
    assert!(
        unknown
            .not_covered
            .starts_with("not covered by the model: "),
        "{unknown:?}"
    );
    assert_eq!((found.runs.len(), found.covered), (4, 3));
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn all_faults_of_measured_rows_come_at_once_with_their_lines() {
    let live = Live::start().await;
    let mut spec = runs();
    spec.measured[0].base = "LDAA".into();
    spec.measured[1].yield_fraction = Some(30.0);
    spec.measured[2].temperature_c = None;
    let faults = match live.client.check_measured(spec, 1).await {
        Err(RemoteError::Input(faults)) => faults,
        other => panic!("{other:?}"),
    };
    let told: Vec<(u32, &str, &str)> = faults
        .iter()
        .map(|fault| (fault.place.line, fault.place.field.as_str(), fault.code))
        .collect();
    assert_eq!(
        told,
        [
            (2, "base", "REAGENT_UNKNOWN"),
            (3, "yield_fraction", "VALUE_OUT_OF_RANGE"),
            (4, "temperature_c", "VALUE_MISSING"),
        ]
    );
    let nothing = live.client.check_measured(CampaignSpec::default(), 1).await;
    assert!(
        matches!(nothing, Err(RemoteError::Input(faults)) if faults[0].code == "VALUE_MISSING")
    );
    live.stop().await;
}
