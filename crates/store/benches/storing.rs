//! How quickly are blocks stored, and how long does a page of a ranking take?
//!
//! `cargo bench -p enolattice-store --bench storing [-- CELLS]`; 10^7 cells by default.
//! Two threads commit blocks of synthetic scores while the store is acknowledged every 64
//! blocks; then pages are asked for, warm and after reopening. Scores are noise, the worst
//! case for a ranking: the best cells lie scattered over all blocks.

use std::sync::atomic::{AtomicBool, AtomicU64, Ordering};
use std::time::{Duration, Instant};

use enolattice_grid::{BlockId, CELLS_PER_BLOCK, CampaignSpec, Columns};
use enolattice_model::{Fingerprint, Score};
use enolattice_store::{
    JobId, JobKind, JobState, NewJob, Order, RankRequest, Ranking, StateChange, Store, Terms,
};

/// Threads that commit.
const THREADS: u64 = 2;
/// Blocks a thread commits between two acknowledgements.
const ACKNOWLEDGE_EVERY: u64 = 64;
/// Times a page is asked for; the median is printed.
const REPEATS: usize = 9;

type Fault = Box<dyn std::error::Error>;

fn main() -> Result<(), Fault> {
    let cells = std::env::args()
        .skip(1)
        .find_map(|word| word.parse().ok())
        .unwrap_or(10_000_000u64);
    let blocks = cells.div_ceil(CELLS_PER_BLOCK);
    let cells = blocks * CELLS_PER_BLOCK;
    let dir = tempfile::tempdir()?;
    let (store, _) = Store::open(dir.path(), 0)?;
    let job = store.create_job(synthetic_job(cells, blocks), 0)?.record.id;
    let (took, scoring) = store_blocks(&store, job, blocks)?;
    say(&format!(
        "{cells} cells in {blocks} blocks, {THREADS} threads, acknowledged every {ACKNOWLEDGE_EVERY} blocks"
    ));
    say(&format!(
        "stored: {:.1} M cells/s in {took:.2?} (of which each thread {scoring:.2?} making scores)",
        cells as f64 / took.as_secs_f64() / 1e6
    ));
    pages("warm", &store, job)?;
    end(&store, job)?;
    let begin = Instant::now();
    store.write_order(job, &AtomicBool::new(false))?;
    say(&format!("rows written in order: {:.2?}", begin.elapsed()));
    at_any_rank("in order", &store, job, cells)?;
    drop(store);
    say(&format!(
        "on disk: {:.1} bytes a cell",
        disk_bytes(dir.path())? as f64 / cells as f64
    ));
    let begin = Instant::now();
    let (store, report) = Store::open(dir.path(), 0)?;
    say(&format!(
        "reopened, every block read and checked: {:.2?} {}",
        begin.elapsed(),
        report.sentences().join("; ")
    ));
    pages("reopened", &store, job)?;
    at_any_rank("reopened, in order", &store, job, cells)?;
    say(&format!(
        "resident memory at the end: {} MiB",
        resident_mib()
    ));
    Ok(())
}

/// Commits all blocks; gives the time it took and the part of it a thread spent making scores.
fn store_blocks(store: &Store, job: JobId, blocks: u64) -> Result<(Duration, Duration), Fault> {
    let scoring_ns = AtomicU64::new(0);
    let next = AtomicU64::new(0);
    let begin = Instant::now();
    let work = || -> Result<(), enolattice_store::StoreError> {
        let mut own = 0;
        loop {
            let block = next.fetch_add(1, Ordering::Relaxed);
            if block >= blocks {
                return store.acknowledge();
            }
            let started = Instant::now();
            let columns = noise_columns(block * CELLS_PER_BLOCK);
            scoring_ns.fetch_add(started.elapsed().as_nanos() as u64, Ordering::Relaxed);
            let id = BlockId {
                segment: 0,
                index: block as u32,
            };
            store.commit_block(job, id, block * CELLS_PER_BLOCK, &columns)?;
            own += 1;
            if own % ACKNOWLEDGE_EVERY == 0 {
                store.acknowledge()?;
            }
        }
    };
    std::thread::scope(|scope| {
        let threads: Vec<_> = (0..THREADS).map(|_| scope.spawn(work)).collect();
        threads
            .into_iter()
            .try_for_each(|thread| thread.join().unwrap_or(Ok(())))
    })?;
    Ok((
        begin.elapsed(),
        Duration::from_nanos(scoring_ns.into_inner() / THREADS),
    ))
}

/// The job is done.
fn end(store: &Store, job: JobId) -> Result<(), Fault> {
    for (from, to) in [
        (JobState::Queued, JobState::Running),
        (JobState::Running, JobState::Done),
    ] {
        let change = StateChange {
            from,
            to,
            at_unix_ms: 0,
            failure: String::new(),
        };
        store.change_state(job, &change)?;
    }
    Ok(())
}

/// Pages of 100 at ranks that are spread over the whole ranking.
fn at_any_rank(when: &str, store: &Store, job: JobId, cells: u64) -> Result<(), Fault> {
    const PAGES: u64 = 500;
    let mut times = Vec::new();
    for i in 0..PAGES {
        let request = RankRequest {
            order: Order::ExpectedYield,
            after: None,
            skip: (i.wrapping_mul(0x9e37_79b9_7f4a_7c15) >> 11) % cells,
            limit: 100,
            filter: None,
            best_per: None,
        };
        let begin = Instant::now();
        store.rank(job, &request)?;
        times.push(begin.elapsed());
    }
    times.sort();
    let at = |percent: usize| times[times.len() * percent / 100];
    say(&format!(
        "{when}: page of 100 at any rank: median {:.2?}, 99 of 100 below {:.2?}",
        at(50),
        at(99)
    ));
    Ok(())
}

fn pages(when: &str, store: &Store, job: JobId) -> Result<(), Fault> {
    let filter = |cell: u64, score: &Score| cell % 10 == 3 && score.p_hit.is_some_and(|p| p > 0.5);
    let group = |cell: u64| (cell / 100_000) as u32;
    let first = RankRequest {
        order: Order::ExpectedYield,
        after: None,
        skip: 0,
        limit: 100,
        filter: None,
        best_per: None,
    };
    let ask = |what: &str, request: RankRequest<'_>| -> Result<Ranking, Fault> {
        let mut times = Vec::new();
        let mut page = store.rank(job, &request)?;
        for _ in 0..REPEATS {
            let begin = Instant::now();
            page = store.rank(job, &request)?;
            times.push(begin.elapsed());
        }
        times.sort();
        say(&format!(
            "{when}: {what}: {:.1?}, rows {} of {}",
            times[REPEATS / 2],
            page.rows.len(),
            page.total
        ));
        Ok(page)
    };
    let page = ask("first page of 100 by expected yield", first)?;
    ask(
        "second page",
        RankRequest {
            after: page.next,
            ..first
        },
    )?;
    let middle = ask(
        "page of 100 in the middle",
        RankRequest {
            skip: page.total / 2,
            ..first
        },
    )?;
    ask(
        "the page after it",
        RankRequest {
            after: middle.next,
            ..first
        },
    )?;
    ask(
        "first page by selectivity (8 bits, many ties)",
        RankRequest {
            order: Order::Selectivity,
            ..first
        },
    )?;
    let filtered = ask(
        "first page with a filter that keeps 5 %",
        RankRequest {
            filter: Some(&filter),
            ..first
        },
    )?;
    ask(
        "second page with the filter",
        RankRequest {
            filter: Some(&filter),
            after: filtered.next,
            ..first
        },
    )?;
    ask(
        "best of each of the groups",
        RankRequest {
            best_per: Some(&group),
            ..first
        },
    )?;
    Ok(())
}

fn noise_columns(first_cell: u64) -> Columns {
    let mut columns = Columns::default();
    for cell in first_cell..first_cell + CELLS_PER_BLOCK {
        // splitmix64 (Steele, Lea, Flood 2014, doi:10.1145/2660193.2660195).
        let mut z = cell.wrapping_add(1).wrapping_mul(0x9e37_79b9_7f4a_7c15);
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        columns.expected_yield.push((z >> 48) as u16);
        columns.p_hit.push((z >> 32) as u16);
        columns.selectivity.push((z >> 24) as u8);
        columns.feasibility.push((z >> 16) as u8);
        columns.largest_loss.push((z >> 8) as u8 % 18);
        columns.cautions.push(0);
    }
    columns
}

fn synthetic_job(cells: u64, blocks: u64) -> NewJob {
    NewJob {
        spec: CampaignSpec {
            title: "noise".into(),
            ..CampaignSpec::default()
        },
        campaign_fingerprint: Fingerprint([0; 32]),
        model_fingerprint: Fingerprint([0; 32]),
        cells,
        blocks,
        request_id: String::new(),
        warnings: vec![],
        kind: JobKind::Screening,
        terms: Terms::default(),
    }
}

fn disk_bytes(dir: &std::path::Path) -> std::io::Result<u64> {
    std::fs::read_dir(dir)?.try_fold(0, |sum, entry| {
        let entry = entry?;
        let bytes = match entry.file_type()?.is_dir() {
            true => disk_bytes(&entry.path())?,
            false => entry.metadata()?.len(),
        };
        Ok(sum + bytes)
    })
}

/// From `/proc`; 0 where there is none.
fn resident_mib() -> u64 {
    let status = std::fs::read_to_string("/proc/self/status").unwrap_or_default();
    let line = status.lines().find_map(|line| line.strip_prefix("VmRSS:"));
    line.and_then(|line| line.trim().trim_end_matches(" kB").parse::<u64>().ok())
        .unwrap_or(0)
        / 1024
}

#[expect(clippy::print_stdout, reason = "figures are what this program is for")]
fn say(line: &str) {
    println!("{line}");
}
