//! How many cells a second are screened, and where does the time go?
//!
//! An invented campaign of about 10^7 cells (or as many as the first argument says) is prepared,
//! its pairs are built, all its blocks are scored with two threads, and every sixteenth block with
//! one thread and with two: `cargo bench -p enolattice-grid --bench screening -- 10000000`. Compare
//! the lines of one run with each other; absolute figures depend on the machine and on what else it
//! does.
#![allow(clippy::print_stdout, reason = "a benchmark prints its answer")]

use std::sync::Arc;
use std::time::{Duration, Instant};

use enolattice_grid::{
    AxisSpec, BlockId, Campaign, CampaignSpec, ConditionsSpec, Entry, Grid, SubstrateEntry,
};
use enolattice_model::Model;
use enolattice_reagents::Library;
use rayon::prelude::*;
use sha2::{Digest, Sha256};

const DEFAULT_CELLS: u64 = 10_000_000;

/// One block in so many is scored with one thread and with two, to compare them.
const COMPARED_EVERY: usize = 16;

fn main() {
    let wanted = std::env::args()
        .skip(1)
        .find_map(|argument| argument.parse().ok())
        .unwrap_or(DEFAULT_CELLS);
    let library = Arc::new(Library::builtin().expect("the tables are sound"));
    let model = Arc::new(Model::new(library));
    let spec = invented_campaign(wanted, &model);

    let (campaign, preparing) = timed(|| Campaign::new(&spec, &model).expect("a sound campaign"));
    let new_grid = || Grid::new(campaign.clone(), model.clone()).expect("a grid within limits");
    let cells = new_grid().cells();
    println!(
        "{cells} cells: {} substrates x {} electrophiles x {} bases x {} solvents x conditions",
        campaign.substrates.len(),
        campaign.electrophiles.len(),
        campaign.bases.len(),
        campaign.solvents.len(),
    );
    let pairs = (campaign.substrates.len() * campaign.electrophiles.len()) as u64;
    let ((), pairing) = timed(|| build_pairs(&campaign, &model));
    let (all, scoring) = timed(|| score(&new_grid(), 2, 1));
    let (one, scoring_with_one) = timed(|| score(&new_grid(), 1, COMPARED_EVERY));
    let (two, scoring_with_two) = timed(|| score(&new_grid(), 2, COMPARED_EVERY));
    assert_eq!(
        one.digest, two.digest,
        "one thread and two must give the same bytes"
    );

    println!(
        "{:<34} {:>10} {:>14} {:>9}",
        "step", "s", "a second", "share"
    );
    let whole = preparing + scoring;
    let line = |step: &str, count: u64, took: Duration| {
        let seconds = took.as_secs_f64();
        let share = 100.0 * seconds / whole.as_secs_f64();
        println!(
            "{step:<34} {seconds:>10.3} {:>14.0} {share:>7.1} %",
            count as f64 / seconds
        );
    };
    line("tables: substrates, electrophiles", cells, preparing);
    line("scoring, two threads", all.cells, scoring);
    line("  of it pairs (one thread's time)", pairs, pairing);
    line("  of it columns to bytes", all.cells, all.encoding);
    line("a part: one thread", one.cells, scoring_with_one);
    line("a part: two threads", two.cells, scoring_with_two);
    println!(
        "two threads are {:.2} times as fast as one; {:.1} bytes a cell; same bytes: yes",
        scoring_with_one.as_secs_f64() / scoring_with_two.as_secs_f64(),
        all.bytes as f64 / all.cells as f64,
    );
}

fn timed<T>(work: impl FnOnce() -> T) -> (T, Duration) {
    let start = Instant::now();
    let result = work();
    (result, start.elapsed())
}

fn build_pairs(campaign: &Campaign, model: &Model) {
    for substrate in &campaign.substrates {
        for electrophile in &campaign.electrophiles {
            std::hint::black_box(model.pair(substrate, electrophile));
        }
    }
}

/// What scoring all blocks gave.
struct Scored {
    digest: [u8; 32],
    cells: u64,
    bytes: u64,
    encoding: Duration,
}

/// Scores one block in `every`.
fn score(grid: &Grid, threads: usize, every: usize) -> Scored {
    let pool = rayon::ThreadPoolBuilder::new()
        .num_threads(threads)
        .build()
        .expect("threads can be had");
    let blocks: Vec<BlockId> = grid.blocks().step_by(every).collect();
    let stored: Vec<([u8; 32], u64, u64, Duration)> = pool.install(|| {
        let one = |block: &BlockId| {
            let columns = grid.score(*block);
            let (bytes, took) = timed(|| columns.to_bytes());
            let digest: [u8; 32] = Sha256::digest(&bytes).into();
            (digest, columns.len() as u64, bytes.len() as u64, took)
        };
        blocks.par_iter().map(one).collect()
    });
    let mut digest = Sha256::new();
    stored.iter().for_each(|(block, ..)| digest.update(block));
    Scored {
        digest: digest.finalize().into(),
        cells: stored.iter().map(|(_, cells, ..)| cells).sum(),
        bytes: stored.iter().map(|(_, _, bytes, _)| bytes).sum(),
        encoding: stored.iter().map(|(.., took)| *took).sum(),
    }
}

/// A campaign of at least `cells` cells: 12 bases, 10 electrophiles and 10 solvents from all over
/// the library, under 84 conditions unless that is too many, and as many substrates as it takes.
fn invented_campaign(cells: u64, model: &Model) -> CampaignSpec {
    const REAGENTS: u64 = 12 * 10 * 10;
    const CONDITIONS: u64 = 7 * 3 * 4;
    let library = model.library();
    let broad = cells >= REAGENTS * CONDITIONS;
    let conditions = ConditionsSpec {
        temperature_c: vec![-78.0, -40.0, -20.0, 0.0, 25.0, 50.0, 80.0],
        base_equiv: vec![1.05, 1.5, 2.2],
        time_h: vec![0.5, 2.0, 8.0, 24.0],
        ..ConditionsSpec::default()
    };
    let of_one_substrate = if broad {
        REAGENTS * CONDITIONS
    } else {
        REAGENTS
    };
    CampaignSpec {
        title: "invented, for timing".into(),
        substrates: (0..cells.div_ceil(of_one_substrate))
            .map(invented_substrate)
            .collect(),
        bases: spread(12, library.bases().iter().map(|base| &base.name)),
        electrophiles: spread(10, library.electrophiles().iter().map(|known| &known.name)),
        solvents: spread(10, library.solvents().iter().map(|solvent| &solvent.name)),
        conditions: if broad {
            conditions
        } else {
            ConditionsSpec::default()
        },
        ..CampaignSpec::default()
    }
}

/// `count` of the names, evenly spread over them.
fn spread<'n>(count: usize, names: impl ExactSizeIterator<Item = &'n String>) -> AxisSpec {
    let step = (names.len() / count).max(1);
    let entries = names
        .step_by(step)
        .take(count)
        .map(|name| Entry {
            name: name.clone(),
            ..Entry::default()
        })
        .collect();
    AxisSpec {
        all: false,
        entries,
    }
}

/// Carbon acids of every kind the model covers, each with two varied groups at the acidic carbon.
fn invented_substrate(i: u64) -> SubstrateEntry {
    const ACCEPTORS: [&str; 8] = [
        "CC(=O)",
        "COC(=O)",
        "CN(C)C(=O)",
        "N#C",
        "CS(=O)(=O)",
        "[O-][N+](=O)",
        "c1ccccc1C(=O)",
        "CCOC(=O)C(C(=O)OCC)",
    ];
    const GROUPS: [&str; 9] = [
        "C",
        "CC",
        "CCC",
        "c1ccccc1",
        "c1ccc(OC)cc1",
        "c1ccc(C)cc1",
        "CCOC",
        "CC(C)C",
        "c1ccc(F)cc1",
    ];
    let (acceptor, i) = (ACCEPTORS[(i % 8) as usize], i / 8);
    let (group, i) = (GROUPS[(i % 9) as usize], i / 9);
    // steps of four keep chains and groups from making one structure twice
    let chain = "C".repeat(4 * (i as usize % 40));
    let smiles = format!("{acceptor}C{chain}{group}");
    SubstrateEntry {
        smiles,
        ..SubstrateEntry::default()
    }
}
