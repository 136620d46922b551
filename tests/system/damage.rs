//! A server whose disk is full, and one whose store was damaged in the night: it says so, and in the morning all that was
//! acknowledged is there or computed again.

use std::fs;
use std::io::{BufRead, BufReader, Read};
use std::path::Path;
use std::process::{Child, Command, Stdio};

use enolattice_engine::{JobState, RankedCell};
use enolattice_wire::Client;

use crate::campaigns::{long, small, submission};
use crate::crash::{BINARY, SERVE, Server};
use crate::live::{all_of, pages, watched};

/// A server that lives on where no file can grow beyond so many bytes: what a full disk does, without a disk to fill.
///
/// It listens, or it refuses to start with an exit code and words.
async fn cramped(data: &Path, bytes: &str) -> Result<(Killed, Client), (Option<i32>, String)> {
    let mut process = Command::new("sh")
        .args(["-c", "trap '' XFSZ; exec \"$0\" \"$@\"", "prlimit"])
        .arg(format!("--fsize={bytes}:"))
        .arg(BINARY.as_path())
        .args(SERVE)
        .arg(data)
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("sh runs");
    let stdout = process.stdout.take().expect("is piped");
    let mut line = String::new();
    BufReader::new(stdout).read_line(&mut line).expect("reads");
    let mut process = Killed(process);
    match line.trim().strip_prefix("listening on ") {
        Some(address) => {
            let client = Client::connect(address).await.expect("connects");
            Ok((process, client))
        }
        None => {
            let mut told = String::new();
            let mut stderr = process.0.stderr.take().expect("is piped");
            stderr.read_to_string(&mut told).expect("reads");
            Err((process.0.wait().expect("has ended").code(), told))
        }
    }
}

/// A process that is killed when dropped.
struct Killed(Child);

impl Killed {
    /// From now on no file of it can grow beyond so many bytes.
    fn cramp(&self, bytes: u64) {
        let limited = Command::new("prlimit")
            .args(["--pid", &self.0.id().to_string()])
            .arg(format!("--fsize={bytes}:"))
            .status();
        assert!(limited.expect("prlimit of util-linux runs").success());
    }
}

impl Drop for Killed {
    fn drop(&mut self) {
        // It may have ended by itself.
        let _ = self.0.kill();
        let _ = self.0.wait();
    }
}

async fn ranking(client: &Client, job: &str) -> Vec<RankedCell> {
    let ranking = pages(client, all_of(job, 1000)).await;
    ranking.expect("a ranking")
}

/// Whether a database was set aside in a data directory.
fn set_aside(data: &Path) -> bool {
    let names = fs::read_dir(data).expect("is there");
    names
        .map(|entry| entry.expect("an entry").file_name())
        .any(|name| name.to_string_lossy().starts_with("db.broken-"))
}

/// A data directory with a small job that is done; its id and ranking.
async fn screened(data: &Path) -> (String, Vec<RankedCell>) {
    let (_server, client) = Server::start(data).await;
    let job = client.submit(submission(small())).await;
    let job = job.expect("is accepted").job;
    watched(&client, &job).await;
    let ranking = ranking(&client, &job).await;
    (job, ranking)
}

#[tokio::test(flavor = "multi_thread")]
async fn a_disk_that_is_full_at_the_start_is_told_and_no_damage() {
    let data = tempfile::tempdir().expect("a directory");
    let data = data.path();
    let (job, expected) = screened(data).await;
    for bytes in ["0", "1024", "100000"] {
        let refused = cramped(data, bytes).await.err();
        let (code, told) = refused.expect("the database needs more");
        assert_eq!(code, Some(3), "{told}");
        assert!(told.contains("free space"), "{told}");
        assert!(!set_aside(data), "a full disk is no damage ({bytes} bytes)");
    }
    let (_server, client) = Server::start(data).await;
    assert!(ranking(&client, &job).await == expected);
}

/// Room for records but not for blocks, or for nothing; from before a job is submitted, or while it runs.
#[tokio::test(flavor = "multi_thread")]
async fn a_disk_that_fills_up_costs_nothing_that_was_acknowledged() {
    let data = tempfile::tempdir().expect("a directory");
    let data = data.path();
    let (first, expected) = screened(data).await;
    let mut accepted = 1;
    for (bytes, before) in [(20_000, true), (0, true), (20_000, false), (0, false)] {
        let started = cramped(data, "unlimited").await;
        let (server, client) = started.map_err(|(_, told)| told).expect("starts");
        if before {
            server.cramp(bytes);
        }
        let outcome = client.submit(submission(long(4))).await;
        server.cramp(bytes);
        match outcome {
            Ok(job) => {
                accepted += 1;
                let ended = watched(&client, &job.job).await.pop();
                let ended = ended.expect("a final state");
                assert_eq!(ended.state, JobState::Failed, "{ended:?}");
                assert!(ended.failure.contains("free space"), "{ended:?}");
            }
            Err(error) => {
                assert_eq!((bytes, before), (0, true), "{error}");
                assert!(error.to_string().contains("free space"), "{error}");
            }
        }
        assert!(
            ranking(&client, &first).await == expected,
            "it still answers"
        );
        drop(server);
        let (_server, client) = Server::start(data).await;
        assert!(!set_aside(data), "a full disk is no damage ({bytes} bytes)");
        assert!(ranking(&client, &first).await == expected);
        assert_eq!(client.jobs().await.expect("a list").len(), accepted);
    }
    let (_server, client) = Server::start(data).await;
    let again = client.submit(submission(long(4))).await;
    let again = again.expect("is accepted").job;
    let ended = watched(&client, &again).await.pop();
    assert_eq!(ended.expect("a final state").state, JobState::Done);
}

#[tokio::test(flavor = "multi_thread")]
async fn a_store_that_was_damaged_in_the_night_is_rebuilt_by_computing() {
    let data = tempfile::tempdir().expect("a directory");
    let data = data.path();
    let (server, client) = Server::start(data).await;
    let job = client.submit(submission(long(2))).await;
    let job = job.expect("is accepted").job;
    watched(&client, &job).await;
    let expected = ranking(&client, &job).await;
    drop(server);
    let log = data.join("db/db");
    let mut bytes = fs::read(&log).expect("reads");
    let middle = bytes.len() / 2;
    bytes[..middle].fill(0x5a);
    fs::write(&log, bytes).expect("is written");
    let (_server, client) = Server::start(data).await;
    assert!(set_aside(data), "nothing is thrown away");
    let ended = watched(&client, &job).await.pop();
    assert_eq!(ended.expect("a final state").state, JobState::Done);
    assert!(ranking(&client, &job).await == expected);
}
