//! A process that is killed while it commits, or whose writes fail, loses nothing that it acknowledged.
//!
//! A program of its own: between fork and exec a child holds copies of all locks of its parent,
//! so other tests must not open stores meanwhile.

#[path = "../store/common.rs"]
mod common;

use std::collections::BTreeSet;
use std::io::{BufRead, BufReader, Write};
use std::path::Path;
use std::process::{Child, Command, Stdio};
use std::sync::Mutex;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::time::Duration;

use common::{START_MS, block, columns, new_job, noise, open};
use enolattice_store::{Commit, JobId, JobState, StateChange, Store, StoreError};

/// Held by the test that has children.
static ONE_AT_A_TIME: Mutex<()> = Mutex::new(());

/// Names the directory to a copy of this test that is to be killed.
const VICTIM: &str = "ENOLATTICE_STORE_VICTIM";
/// Cells of a block as large as the real ones.
const FULL: u64 = 4096;
/// Blocks a victim commits between two acknowledgements.
const BATCH: usize = 6;
/// Times that a victim is killed.
const RUNS: u64 = 14;

#[test]
fn every_acknowledged_block_and_job_outlives_a_kill() {
    if let Some(dir) = std::env::var_os(VICTIM) {
        victim(Path::new(&dir));
    }
    let _alone = ONE_AT_A_TIME.lock().unwrap();
    let dir = tempfile::tempdir().unwrap();
    let job = open(dir.path())
        .create_job(new_job("killed", ""), START_MS)
        .unwrap()
        .record
        .id;
    let mut acknowledged = BTreeSet::new();
    let mut jobs = BTreeSet::from([job]);
    for run in 0..RUNS {
        let mut child = spawn(dir.path());
        let mut lines = BufReader::new(child.stdout.take().unwrap()).lines();
        // Die in mid-flight: after a few lines and a moment, or at once.
        let patience = noise(run) % 12;
        let mut heard: Vec<String> = lines
            .by_ref()
            .map_while(Result::ok)
            .take(patience as usize)
            .collect();
        std::thread::sleep(Duration::from_micros(noise(run + 100) % 9000));
        child.kill().unwrap();
        child.wait().unwrap();
        heard.extend(lines.map_while(Result::ok));
        for line in heard {
            match line.rsplit_once("acknowledged ") {
                Some((_, index)) => drop(acknowledged.insert(index.parse::<u32>().unwrap())),
                None => jobs.extend(
                    line.rsplit_once("made ")
                        .map(|(_, id)| id.parse::<JobId>().unwrap()),
                ),
            }
        }
        check(&open(dir.path()), job, &acknowledged, &jobs);
    }
    assert!(
        acknowledged.len() > BATCH && jobs.len() > 1,
        "the victims did not get to work"
    );
}

fn check(store: &Store, job: JobId, acknowledged: &BTreeSet<u32>, jobs: &BTreeSet<JobId>) {
    let known: BTreeSet<JobId> = store.jobs().iter().map(|record| record.id).collect();
    assert!(
        known.is_superset(jobs),
        "a job was lost: {jobs:?} of {known:?}"
    );
    let committed = store.committed_blocks(job).unwrap();
    for index in acknowledged {
        assert!(committed.contains(&block(*index)), "block {index} was lost");
    }
    for id in &committed {
        let expected = columns(u64::from(id.index) * FULL, FULL);
        assert_eq!(
            store.block(job, *id).unwrap(),
            Some(expected),
            "block {id:?}"
        );
    }
    let progress = store.progress(job).unwrap();
    assert_eq!(
        (progress.blocks, progress.cells),
        (committed.len() as u64, committed.len() as u64 * FULL)
    );
    assert_eq!(progress.cells_acknowledged, progress.cells);
}

fn spawn(dir: &Path) -> Child {
    Command::new(std::env::current_exe().unwrap())
        .args([
            "--exact",
            "every_acknowledged_block_and_job_outlives_a_kill",
            "--nocapture",
        ])
        .env(VICTIM, dir)
        .stdout(Stdio::piped())
        .stderr(Stdio::null())
        .spawn()
        .unwrap()
}

/// Commits blocks from two threads that both try every block, says what is acknowledged, never ends.
fn victim(dir: &Path) -> ! {
    let (store, _) = Store::open(dir, START_MS).unwrap();
    let job = store.jobs()[0].id;
    let mut out = std::io::stdout();
    let mut batch = (0..).filter(|index| {
        !store
            .committed_blocks(job)
            .unwrap()
            .contains(&block(*index))
    });
    loop {
        let some: Vec<u32> = batch.by_ref().take(BATCH).collect();
        let stored = AtomicUsize::new(0);
        let commit = || {
            for index in &some {
                let first = u64::from(*index) * FULL;
                let outcome = store.commit_block(job, block(*index), first, &columns(first, FULL));
                stored.fetch_add(
                    usize::from(outcome.unwrap() == Commit::Stored),
                    Ordering::Relaxed,
                );
            }
        };
        std::thread::scope(|scope| {
            scope.spawn(commit);
            scope.spawn(commit);
        });
        assert_eq!(stored.into_inner(), some.len(), "each block is stored once");
        store.acknowledge().unwrap();
        some.iter()
            .for_each(|index| writeln!(out, "acknowledged {index}").unwrap());
        let made = store
            .create_job(new_job("another", ""), START_MS)
            .unwrap()
            .record
            .id;
        writeln!(out, "made {made}").unwrap();
        out.flush().unwrap();
    }
}

/// Names the directory to a copy of the next test that may write only small files.
const CRAMPED: &str = "ENOLATTICE_STORE_CRAMPED";

/// A limit on the size of files stands in for a full disk: writes fail, the process lives on.
#[test]
fn nothing_is_acknowledged_after_a_failed_write() {
    if let Some(dir) = std::env::var_os(CRAMPED) {
        return cramped(Path::new(&dir));
    }
    let _alone = ONE_AT_A_TIME.lock().unwrap();
    let dir = tempfile::tempdir().unwrap();
    let job = open(dir.path())
        .create_job(new_job("cramped", ""), START_MS)
        .unwrap()
        .record
        .id;
    let test = "nothing_is_acknowledged_after_a_failed_write";
    let output = Command::new("sh")
        .args(["-c", "trap '' XFSZ; ulimit -f 20000; exec \"$0\" \"$@\""])
        .arg(std::env::current_exe().unwrap())
        .args(["--exact", test, "--nocapture"])
        .env(CRAMPED, dir.path())
        .output()
        .unwrap();
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    let said = String::from_utf8(output.stdout).unwrap();
    let indices = said
        .lines()
        .filter_map(|line| line.rsplit_once("acknowledged "));
    let acknowledged: BTreeSet<u32> = indices.map(|(_, index)| index.parse().unwrap()).collect();
    assert!(acknowledged.len() > BATCH, "{said}");
    check(
        &open(dir.path()),
        job,
        &acknowledged,
        &BTreeSet::from([job]),
    );
}

fn cramped(dir: &Path) {
    let (store, _) = Store::open(dir, START_MS).unwrap();
    let job = store.jobs()[0].id;
    let commit = |index: u32| {
        let first = u64::from(index) * FULL;
        store.commit_block(job, block(index), first, &columns(first, FULL))
    };
    let mut out = std::io::stdout();
    let failed = (0..10_000).find(|index| {
        let stored = commit(*index).and_then(|_| store.acknowledge());
        if stored.is_ok() {
            writeln!(out, "acknowledged {index}").unwrap();
        }
        stored.is_err()
    });
    let failed = failed.expect("the limit was never met");
    let seen = store.progress(job).unwrap().cells_acknowledged;
    assert_eq!(seen, u64::from(failed) * FULL);
    for again in [
        store.acknowledge().unwrap_err(),
        commit(failed + 1).unwrap_err(),
    ] {
        assert!(matches!(again, StoreError::Stopped { .. }), "{again}");
    }
    assert_eq!(store.progress(job).unwrap().cells_acknowledged, seen);
    // What the job claims at its end must be there at the next start, or all scores would be distrusted.
    let change = StateChange {
        from: JobState::Queued,
        to: JobState::Failed,
        at_unix_ms: START_MS,
        failure: "the disk is full".into(),
    };
    store.change_state(job, &change).unwrap();
}
