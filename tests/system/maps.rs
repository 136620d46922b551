//! Maps and distributions: what they say is what the ranking says, cell by cell, embedded and served.

use std::collections::BTreeMap;

use enolattice_engine::{Axis, CellMap, MapField, MapQuery, RankQuery, RankedCell};
use enolattice_grid::{AxisSpec, CampaignSpec, Entry};

use crate::campaigns::{long, small, submission};
use crate::live::{Live, all_of, pages};

/// The small campaign with an electrophile that the model does not cover, at two temperatures.
fn campaign() -> CampaignSpec {
    let mut campaign = small();
    let allene = Entry {
        smiles: "C=C=C".into(),
        ..Entry::default()
    };
    let AxisSpec { entries, .. } = &mut campaign.electrophiles;
    entries.push(allene);
    campaign.conditions.temperature_c = vec![-78.0, 25.0];
    campaign.conditions.dosing_min = vec![0.0, 60.0];
    campaign
}

/// The value of a cell on an axis, as a map writes it.
fn label(row: &RankedCell, axis: Axis) -> String {
    let number = |value: f64, unit: &str| format!("{value} {unit}").replace('-', "−");
    match axis {
        Axis::Substrate => row.substrate.clone(),
        Axis::Base => row.base.clone(),
        Axis::Electrophile => row.electrophile.clone(),
        Axis::Solvent => row.solvent.clone(),
        Axis::Temperature => number(row.temperature_c, "°C"),
        Axis::FormationTemperature => number(row.formation_temperature_c, "°C"),
        Axis::BaseEquiv => number(row.base_equiv, "equiv"),
        Axis::Dosing => number(row.dosing_min, "min"),
        other => panic!("{other:?} is not asked for"),
    }
}

fn mean(values: &[f64]) -> Option<f64> {
    (!values.is_empty()).then(|| values.iter().sum::<f64>() / values.len() as f64)
}

/// What the field of these rows of the ranking must say.
fn expected(rows: &[&RankedCell]) -> MapField {
    let yields: Vec<f64> = rows.iter().filter_map(|row| row.expected_yield).collect();
    let p_hits: Vec<f64> = rows.iter().filter_map(|row| row.p_hit).collect();
    let best = yields.iter().copied().reduce(f64::max);
    let of_best = rows
        .iter()
        .filter(|row| row.expected_yield == best && best.is_some());
    MapField {
        cells: rows.len() as u64,
        unknown: (rows.len() - yields.len()) as u64,
        best_expected_yield: best,
        mean_expected_yield: mean(&yields),
        best_p_hit: p_hits.iter().copied().reduce(f64::max),
        mean_p_hit: mean(&p_hits),
        best_cell: of_best.map(|row| row.cell).min(),
    }
}

fn close(got: Option<f64>, expected: Option<f64>) -> bool {
    match (got, expected) {
        (Some(got), Some(expected)) => (got - expected).abs() < 1e-12,
        (got, expected) => got == expected,
    }
}

fn check(map: &CellMap, ranking: &[RankedCell]) {
    let mut fields: BTreeMap<(String, String), Vec<&RankedCell>> = BTreeMap::new();
    for row in ranking {
        let key = (label(row, map.rows.axis), label(row, map.columns.axis));
        fields.entry(key).or_default().push(row);
    }
    assert_eq!(map.total, ranking.len() as u64);
    for (r, row) in map.rows.values.iter().enumerate() {
        for (c, column) in map.columns.values.iter().enumerate() {
            let rows = fields.remove(&(row.clone(), column.clone()));
            let expected = expected(&rows.unwrap_or_default());
            let got = *map.field(r, c).expect("a field");
            let means = [
                (got.mean_expected_yield, expected.mean_expected_yield),
                (got.mean_p_hit, expected.mean_p_hit),
            ];
            assert!(means.iter().all(|(got, expected)| close(*got, *expected)));
            let but_means = MapField {
                mean_expected_yield: expected.mean_expected_yield,
                mean_p_hit: expected.mean_p_hit,
                ..got
            };
            assert_eq!(but_means, expected, "{row}, {column}");
        }
    }
    assert!(fields.is_empty(), "the map lacks {:?}", fields.keys());
}

#[tokio::test(flavor = "multi_thread")]
async fn maps_say_what_the_ranking_says() {
    let live = Live::start().await;
    let job = live.screened(submission(campaign())).await.job;
    for (rows, columns, filter) in [
        (Axis::Substrate, Axis::Base, ""),
        (Axis::Electrophile, Axis::Solvent, ""),
        (Axis::Temperature, Axis::Dosing, "p_hit >= 0.3"),
        (Axis::FormationTemperature, Axis::BaseEquiv, ""),
        (
            Axis::Base,
            Axis::Electrophile,
            "solvent = THF AND expected_yield < 0.9",
        ),
    ] {
        let query = MapQuery {
            job: job.clone(),
            rows,
            columns,
            filter: filter.into(),
        };
        let map = live.client.map_cells(query.clone()).await.expect("a map");
        let embedded = live.engine.map_cells(query).await.expect("a map");
        assert_eq!(map, embedded);
        assert_eq!(map.cells_done, 144);
        let question = RankQuery {
            filter: filter.into(),
            ..all_of(&job, 1000)
        };
        check(
            &map,
            &pages(&live.client, question).await.expect("a ranking"),
        );
    }
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn distributions_count_every_cell_once() {
    let live = Live::start().await;
    let job = live.screened(submission(campaign())).await.job;
    for filter in ["", "base = LDA", "NOT expected_yield:*"] {
        let known = live
            .client
            .distribution(&job, filter)
            .await
            .expect("is told");
        let embedded = live.engine.distribution(job.clone(), filter.into()).await;
        assert_eq!(Ok(&known), embedded.as_ref().map_err(ToString::to_string));
        let question = RankQuery {
            filter: filter.into(),
            ..all_of(&job, 1000)
        };
        let ranking = pages(&live.client, question).await.expect("a ranking");
        assert_eq!(known.total, ranking.len() as u64);
        for (histogram, of) in [
            (
                &known.expected_yield,
                (|row| row.expected_yield) as fn(&RankedCell) -> _,
            ),
            (&known.p_hit, |row| row.p_hit),
        ] {
            let mut bins = vec![0; 20];
            for value in ranking.iter().filter_map(of) {
                // 65534 / 20 is no whole number: no stored value lies on an inner edge
                bins[((20.0 * value) as usize).min(19)] += 1;
            }
            assert_eq!(histogram.bins, bins, "{filter}");
            let unknown = ranking.iter().filter(|row| of(row).is_none());
            assert_eq!(histogram.unknown, unknown.count() as u64);
        }
    }
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn a_map_of_a_running_job_is_of_one_snapshot() {
    let live = Live::start().await;
    let job = live
        .client
        .submit(submission(long(8)))
        .await
        .expect("is accepted");
    let (mut seen, query) = (Vec::new(), |job: &str| MapQuery {
        job: job.to_owned(),
        rows: Axis::Temperature,
        columns: Axis::Concentration,
        filter: String::new(),
    });
    loop {
        let ended = live
            .client
            .job(&job.job)
            .await
            .expect("is there")
            .ended_unix_ms;
        let map = live.client.map_cells(query(&job.job)).await.expect("a map");
        let in_fields: u64 = map.fields.iter().map(|field| field.cells).sum();
        assert_eq!((map.total, in_fields), (map.cells_done, map.cells_done));
        seen.push(map.cells_done);
        if ended.is_some() {
            break;
        }
    }
    assert!(seen.is_sorted() && seen.last() == Some(&19_200), "{seen:?}");
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn maps_that_nobody_could_read_are_refused() {
    let live = Live::start().await;
    let mut campaign = long(600);
    // 100 temperatures and 600 concentrations: 60,000 fields
    campaign.substrates.truncate(1);
    campaign.bases.entries.truncate(1);
    campaign.electrophiles.entries.truncate(1);
    campaign.solvents.entries.truncate(1);
    // refused at once, whether or not anything is screened
    let job = live.client.submit(submission(campaign)).await;
    let job = job.expect("is accepted").job;
    for (rows, columns, reason) in [
        (Axis::Temperature, Axis::Concentration, "60000 fields"),
        (Axis::Base, Axis::Base, "it is the axis of the rows"),
    ] {
        let query = MapQuery {
            job: job.clone(),
            rows,
            columns,
            filter: String::new(),
        };
        let refused = live
            .client
            .map_cells(query.clone())
            .await
            .expect_err("is refused");
        let embedded = live.engine.map_cells(query).await.expect_err("is refused");
        for told in [refused.to_string(), embedded.to_string()] {
            assert!(told.contains(reason), "{told}");
        }
    }
    live.stop().await;
}
