//! The binary is killed in mid-job and takes its job up again.

use std::io::{BufRead, BufReader};
use std::path::{Path, PathBuf};
use std::process::{Child, Command, Stdio};
use std::sync::LazyLock;

use enolattice_engine::{JobState, RankedCell};
use enolattice_grid::CampaignSpec;
use enolattice_wire::Client;

use crate::campaigns::{long, submission};
use crate::live::{all_of, pages, watched};

/// A server process; killed when dropped.
pub(crate) struct Server {
    process: Child,
}

impl Server {
    /// Starts a server and waits until it listens.
    pub(crate) async fn start(data: &Path) -> (Server, Client) {
        let mut server = Server::spawn(data);
        let mut line = String::new();
        let stdout = server.process.stdout.take().expect("is piped");
        BufReader::new(stdout).read_line(&mut line).expect("a line");
        let address = line
            .trim()
            .strip_prefix("listening on ")
            .expect("says where it listens");
        let client = Client::connect(address).await.expect("connects");
        (server, client)
    }

    /// Starts a server, which begins by opening its store.
    pub(crate) fn spawn(data: &Path) -> Server {
        let process = Command::new(BINARY.as_path())
            .args(SERVE)
            .arg(data)
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            .spawn()
            .expect("the binary starts");
        Server { process }
    }

    /// SIGKILL: no handler, no flush.
    pub(crate) fn kill(&mut self) {
        self.process.kill().expect("runs");
        self.process.wait().expect("has ended");
    }
}

impl Drop for Server {
    fn drop(&mut self) {
        // Already dead after `kill`.
        let _ = self.process.kill();
        let _ = self.process.wait();
    }
}

/// Arguments of a server with one compute thread on a free port; its data directory follows.
pub(crate) const SERVE: [&str; 6] = [
    "serve",
    "--listen",
    "127.0.0.1:0",
    "--threads",
    "1",
    "--data",
];

/// The binary, built once in the profile of this test.
pub(crate) static BINARY: LazyLock<PathBuf> = LazyLock::new(|| {
    let test = std::env::current_exe().expect("a path");
    let profile = test.ancestors().nth(2).expect("target/PROFILE/deps/TEST");
    let mut build = Command::new(env!("CARGO"));
    // the whole workspace, as the tests were built: with other features of shared crates most would be compiled again
    build.args(["build", "--quiet", "--workspace", "--bins"]);
    build
        .arg("--target-dir")
        .arg(profile.parent().expect("target"));
    if profile.ends_with("release") {
        build.arg("--release");
    }
    let built = build
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .status()
        .expect("cargo runs");
    assert!(built.success(), "the binary does not build");
    profile
        .join("enolattice")
        .with_extension(std::env::consts::EXE_EXTENSION)
});

/// Kills the server as soon as the job has got further; gives the cells that were acknowledged,
/// or nothing where the job ended before.
async fn kill_in_mid_job(
    (mut server, client): (Server, Client),
    job: &str,
    further_than: u64,
) -> Option<u64> {
    let mut watch = client.watch(job).await.expect("is watched");
    loop {
        let job = watch.next().await.expect("no error").expect("not ended");
        if job.state.is_ended() {
            return None;
        }
        if job.cells_done > further_than {
            server.kill();
            return Some(job.cells_done);
        }
    }
}

/// The ranking of a job whose server was killed twice; nothing where the job was too quick for it.
async fn killed_twice(campaign: &CampaignSpec) -> Option<Vec<RankedCell>> {
    let data = tempfile::tempdir().expect("a directory");
    let (server, client) = Server::start(data.path()).await;
    let submitted = client.submit(submission(campaign.clone())).await;
    let job = submitted.expect("is accepted").job;
    let before = kill_in_mid_job((server, client), &job, 0).await?;

    let (server, client) = Server::start(data.path()).await;
    let resumed = client.job(&job).await.expect("is still known");
    assert!(resumed.cells_done >= before, "acknowledged cells stay");
    kill_in_mid_job((server, client), &job, resumed.cells_done).await?;

    let (_server, client) = Server::start(data.path()).await;
    let ended = watched(&client, &job).await.pop().expect("a final state");
    assert_eq!(
        (ended.state, ended.cells_done),
        (JobState::Done, ended.cells)
    );
    let ranking = pages(&client, all_of(&job, 1000)).await.expect("a ranking");
    assert_eq!(ranking.len() as u64, ended.cells);
    Some(ranking)
}

/// The ranking of a server that nobody disturbs.
async fn undisturbed(campaign: CampaignSpec) -> Vec<RankedCell> {
    let data = tempfile::tempdir().expect("a directory");
    let (_server, client) = Server::start(data.path()).await;
    let submitted = client.submit(submission(campaign)).await;
    let job = submitted.expect("is accepted").job;
    watched(&client, &job).await;
    pages(&client, all_of(&job, 1000)).await.expect("a ranking")
}

#[tokio::test(flavor = "multi_thread")]
async fn a_killed_engine_takes_its_job_up_again() {
    // A campaign that this machine needs some seconds for.
    for concentrations in [8, 80, 800] {
        let campaign = long(concentrations);
        if let Some(ranking) = killed_twice(&campaign).await {
            let expected = undisturbed(campaign).await;
            assert!(ranking == expected, "the ranking after two kills differs");
            return;
        }
    }
    panic!("every campaign ended before its server could be killed");
}
