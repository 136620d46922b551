//! Rankings equal a full sort, page by page, whatever is asked.

use std::collections::BTreeMap;

use crate::common::{CELLS, START_MS, block, columns, new_job, open};
use enolattice_model::{Fingerprint, Score};
use enolattice_store::{JobId, Order, RankRequest, Ranking, Store, StoreError};
use proptest::prelude::*;

const FIRST_PAGE: RankRequest<'static> = RankRequest {
    order: Order::ExpectedYield,
    after: None,
    skip: 0,
    limit: 10,
    filter: None,
    best_per: None,
};

fn commit(store: &Store, job: JobId, index: u32) {
    let first = u64::from(index) * CELLS;
    store
        .commit_block(job, block(index), first, &columns(first, CELLS))
        .unwrap();
}

fn value(order: Order, score: &Score) -> Option<f64> {
    match order {
        Order::ExpectedYield => score.expected_yield,
        Order::PHit => score.p_hit,
        Order::Selectivity => score.selectivity,
        Order::Feasibility => score.feasibility,
    }
}

fn keeps(cell: u64, score: &Score) -> bool {
    cell % 3 != 1
        && score
            .feasibility
            .is_some_and(|feasibility| feasibility > 0.3)
}

fn group(cell: u64) -> u32 {
    (cell / 70 % 40) as u32
}

/// What a ranking of these blocks should be, by sorting everything.
fn sorted(blocks: &[u32], order: Order, filter: bool, best_per: bool) -> Vec<u64> {
    let mut cells: Vec<(u64, Score)> = Vec::new();
    for index in blocks {
        let first = u64::from(*index) * CELLS;
        let columns = columns(first, CELLS);
        cells.extend((0..CELLS as usize).map(|i| (first + i as u64, columns.score(i))));
    }
    cells.retain(|(cell, score)| !filter || keeps(*cell, score));
    cells.sort_by(|(a, a_score), (b, b_score)| {
        let [a_value, b_value] =
            [a_score, b_score].map(|score| value(order, score).unwrap_or(-1.0));
        b_value.total_cmp(&a_value).then(a.cmp(b))
    });
    let mut best = BTreeMap::new();
    let first_of_group = |(cell, _): &(u64, Score)| best.insert(group(*cell), ()).is_none();
    if best_per {
        cells = cells.into_iter().filter(first_of_group).collect();
    }
    cells.into_iter().map(|(cell, _)| cell).collect()
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 48, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn pages_are_a_full_sort_even_while_blocks_are_committed(
        early in prop::collection::btree_set(0..12u32, 1..8),
        order in prop::sample::select(&Order::ALL[..]),
        limit in 1..900usize,
        skip in prop_oneof![Just(0), 0..700u64],
        filter in any::<bool>(),
        best_per in any::<bool>(),
    ) {
        let dir = tempfile::tempdir().unwrap();
        let store = open(dir.path());
        let job = store.create_job(new_job("ranked", ""), START_MS).unwrap().record.id;
        let early: Vec<u32> = early.into_iter().collect();
        early.iter().rev().for_each(|index| commit(&store, job, *index));
        store.acknowledge().unwrap();
        let expected = sorted(&early, order, filter, best_per);
        let ask = RankRequest {
            order,
            limit,
            skip,
            filter: filter.then_some(&keeps),
            best_per: best_per.then_some(&group),
            ..FIRST_PAGE
        };
        let mut page = store.rank(job, &ask).unwrap();
        let mut cells = Vec::new();
        let mut late = (0..12).filter(|index| !early.contains(index));
        loop {
            prop_assert_eq!(page.total, expected.len() as u64);
            prop_assert_eq!(page.cells, early.len() as u64 * CELLS);
            prop_assert_eq!(page.first_rank, skip + cells.len() as u64 + 1);
            cells.extend(page.rows.iter().map(|(cell, _)| *cell));
            let Some(after) = page.next else { break };
            prop_assert_eq!(page.rows.len(), limit);
            if let Some(index) = late.next() {
                commit(&store, job, index);
                store.acknowledge().unwrap();
            }
            page = store.rank(job, &RankRequest { after: Some(after), skip: 0, ..ask }).unwrap();
        }
        prop_assert_eq!(cells, expected.into_iter().skip(skip as usize).collect::<Vec<_>>());
    }
}

/// 60,000 cells, so that long skips are counted by key instead of dropped.
#[test]
fn long_skips_land_where_a_full_sort_says() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = store
        .create_job(new_job("long", ""), START_MS)
        .unwrap()
        .record
        .id;
    let all: Vec<u32> = (0..120).collect();
    all.iter().for_each(|index| commit(&store, job, *index));
    store.acknowledge().unwrap();
    for order in Order::ALL {
        for filter in [false, true] {
            let expected = sorted(&all, order, filter, false);
            let ask = RankRequest {
                order,
                filter: filter.then_some(&keeps),
                ..FIRST_PAGE
            };
            let after = store.rank(job, &ask).unwrap().next;
            for skip in [
                16_384,
                16_385,
                expected.len() as u64 - 15,
                expected.len() as u64,
            ] {
                let page = store
                    .rank(job, &RankRequest { skip, after, ..ask })
                    .unwrap();
                let cells: Vec<u64> = page.rows.iter().map(|(cell, _)| *cell).collect();
                let here = expected.iter().skip(10 + skip as usize).take(10);
                assert_eq!(
                    cells,
                    here.copied().collect::<Vec<_>>(),
                    "{order:?} {filter} {skip}"
                );
                assert_eq!(
                    (page.first_rank, page.total),
                    (skip + 11, expected.len() as u64)
                );
            }
        }
    }
}

#[test]
fn rows_carry_the_scores_that_were_committed() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = store
        .create_job(new_job("scores", ""), START_MS)
        .unwrap()
        .record
        .id;
    (0..3).for_each(|index| commit(&store, job, index));
    store.acknowledge().unwrap();
    let all = columns(0, 3 * CELLS);
    let page = store
        .rank(
            job,
            &RankRequest {
                limit: 2000,
                ..FIRST_PAGE
            },
        )
        .unwrap();
    assert_eq!(page.rows.len(), 1500);
    for (cell, score) in &page.rows {
        assert_eq!(*score, all.score(*cell as usize));
        assert_eq!(store.score(job, *cell).unwrap().as_ref(), Some(score));
    }
    let best = all
        .expected_yield
        .iter()
        .filter(|code| **code != u16::MAX)
        .max()
        .unwrap();
    assert_eq!(
        store.progress(job).unwrap().best_yield,
        Some(f64::from(*best) / 65534.0)
    );
    assert_eq!(store.score(job, 3 * CELLS).unwrap(), None);
}

#[test]
fn only_acknowledged_blocks_are_shown() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = store
        .create_job(new_job("young", ""), START_MS)
        .unwrap()
        .record
        .id;
    let empty = Ranking {
        rows: vec![],
        first_rank: 1,
        total: 0,
        cells: 0,
        next: None,
    };
    assert_eq!(store.rank(job, &FIRST_PAGE).unwrap(), empty);
    commit(&store, job, 0);
    assert_eq!(store.rank(job, &FIRST_PAGE).unwrap(), empty);
    let progress = store.progress(job).unwrap();
    assert_eq!((progress.cells, progress.cells_acknowledged), (CELLS, 0));
    store.acknowledge().unwrap();
    assert_eq!(store.rank(job, &FIRST_PAGE).unwrap().total, CELLS);
    assert_eq!(store.progress(job).unwrap().cells_acknowledged, CELLS);
}

#[test]
fn a_page_of_blocks_that_were_dropped_is_refused() {
    let dir = tempfile::tempdir().unwrap();
    let store = open(dir.path());
    let job = store
        .create_job(new_job("again", ""), START_MS)
        .unwrap()
        .record
        .id;
    (0..2).for_each(|index| commit(&store, job, index));
    store.acknowledge().unwrap();
    let after = store.rank(job, &FIRST_PAGE).unwrap().next;
    let record = store.restart(job, Fingerprint([9; 32])).unwrap();
    assert_eq!(
        (record.model_fingerprint, record.generation),
        (Fingerprint([9; 32]), 2)
    );
    assert_eq!(store.progress(job).unwrap().cells, 0);
    (0..2).for_each(|index| commit(&store, job, index));
    store.acknowledge().unwrap();
    let next = RankRequest {
        after,
        ..FIRST_PAGE
    };
    assert!(matches!(
        store.rank(job, &next),
        Err(StoreError::PageOutdated)
    ));
    assert_eq!(store.rank(job, &FIRST_PAGE).unwrap().total, 2 * CELLS);
}
