//! A live server in this process.

use std::sync::Arc;

use enolattice_engine::{Engine, EngineConfig, Job, RankQuery, RankedCell, Submission};
use enolattice_wire::{Client, RemoteError};
use tempfile::TempDir;
use tokio::net::TcpListener;
use tokio::sync::oneshot;
use tokio::task::JoinHandle;

/// A server with its engine and a client of it.
pub(crate) struct Live {
    pub(crate) engine: Arc<Engine>,
    pub(crate) client: Client,
    pub(crate) url: String,
    stop: oneshot::Sender<()>,
    served: JoinHandle<Result<(), enolattice_server::ServeError>>,
    _data: TempDir,
}

impl Live {
    /// Starts a server on a free port with an empty data directory.
    pub(crate) async fn start() -> Live {
        let data = tempfile::tempdir().expect("a directory");
        let engine = Arc::new(open(data.path()).await);
        let listener = TcpListener::bind("127.0.0.1:0").await.expect("a free port");
        let url = format!("http://{}", listener.local_addr().expect("an address"));
        let (stop, stopped) = oneshot::channel();
        let served = tokio::spawn(enolattice_server::serve(engine.clone(), listener, async {
            // A test that fails drops the sender, which stops the server too.
            let _ = stopped.await;
        }));
        let client = Client::connect(&url).await.expect("connects");
        Live {
            engine,
            client,
            url,
            stop,
            served,
            _data: data,
        }
    }

    /// Begins the shutdown and waits for its end.
    pub(crate) async fn stop(self) {
        self.stop.send(()).expect("the server runs");
        self.served.await.expect("no panic").expect("a clean end");
        self.engine.shutdown().await;
    }

    /// Submits a campaign and watches it to the end.
    pub(crate) async fn screened(&self, submission: Submission) -> Job {
        let job = self.client.submit(submission).await.expect("is accepted");
        watched(&self.client, &job.job)
            .await
            .pop()
            .expect("a final state")
    }
}

/// An engine with one compute thread.
async fn open(data: &std::path::Path) -> Engine {
    let config = EngineConfig {
        data_dir: data.to_owned(),
        threads: 1,
        library: Vec::new(),
    };
    Engine::open(config).await.expect("opens")
}

/// All states that a watch stream gives, to its end.
pub(crate) async fn watched(client: &Client, job: &str) -> Vec<Job> {
    let mut watch = client.watch(job).await.expect("is watched");
    let mut states = Vec::new();
    while let Some(job) = watch.next().await.expect("the stream ends well") {
        states.push(job);
    }
    states
}

/// The whole ranking, page by page.
pub(crate) async fn pages(
    client: &Client,
    mut query: RankQuery,
) -> Result<Vec<RankedCell>, RemoteError> {
    let mut rows = Vec::new();
    loop {
        let page = client.rank(query.clone()).await?;
        rows.extend(page.rows);
        query.page_token = page.next_page_token;
        if query.page_token.is_empty() {
            return Ok(rows);
        }
    }
}

/// The question for the whole ranking of a job.
pub(crate) fn all_of(job: &str, page_size: u32) -> RankQuery {
    RankQuery {
        job: job.to_owned(),
        page_size,
        ..RankQuery::default()
    }
}
