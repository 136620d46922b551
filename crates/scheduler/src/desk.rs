//! The loop that takes jobs from the journal, serves them and tells who watches.

use std::collections::{BTreeMap, BTreeSet, VecDeque};
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};
use std::time::{Duration, Instant, SystemTime, UNIX_EPOCH};

use enolattice_grid::BlockId;
use enolattice_store::{JobId, JobKind, JobRecord, JobState, StateChange, Store, StoreError};
use tokio::sync::{mpsc, oneshot};
use tokio::task::spawn_blocking;
use tokio::time::{MissedTickBehavior, interval, sleep};

use crate::compute::{self, Ready, Scored, caught};
use crate::served_job::{Hands, ServedJob};
use crate::{Candidate, Event, Progress, SchedulerConfig, SchedulerError, Served, transition};

/// Time between two acknowledgements, each followed by word of the progress.
const ACKNOWLEDGE_EVERY: Duration = Duration::from_millis(500);
/// Jobs that are served at a time, for each has its tables in memory; beyond it only more urgent ones are begun.
const MOST_SERVED: usize = 8;
/// The clock is looked at this often while a job waits for a time: it may be set.
const LOOK_AT_THE_CLOCK_EVERY: Duration = Duration::from_secs(30);

/// Who wants to hear what became of a command.
pub(crate) type Reply = oneshot::Sender<Result<JobRecord, SchedulerError>>;

/// What the loop is told from outside.
#[derive(Debug)]
pub(crate) enum Command {
    /// A job was queued.
    Look,
    /// The user wants something of a job: to pause, resume or cancel it.
    Ask(JobId, Event, Reply),
    /// Stop between two blocks.
    Shutdown,
}

/// What the loop is told by its own threads.
enum News {
    /// A job is ready to be served, or cannot be.
    Ready(JobId, Result<Ready, String>),
    /// A block has ended.
    Block(JobId, BlockId, Duration, Scored),
    /// The one piece of a job has ended.
    Piece(JobId, Result<(), String>),
    /// What was committed is safe, or cannot be made so.
    Acknowledged(Result<(), String>),
    /// The rows of an ended job are written in order, or will not be.
    Ordered,
}

/// The loop's own things.
pub(crate) struct Desk {
    store: Arc<Store>,
    config: SchedulerConfig,
    pool: Arc<rayon::ThreadPool>,
    /// Jobs that wait or are paused.
    waiting: BTreeMap<JobId, JobRecord>,
    served: BTreeMap<JobId, ServedJob>,
    shares: Served,
    /// Blocks in hand.
    busy: usize,
    /// Jobs whose change of state could not be journalled: left alone until the next start.
    stuck: BTreeSet<JobId>,
    acknowledging: bool,
    /// Ended jobs whose rows are to be written in order, one at a time.
    to_order: VecDeque<JobId>,
    ordering: bool,
    stop_ordering: Arc<AtomicBool>,
    closing: bool,
    tell_desk: mpsc::UnboundedSender<News>,
    news: mpsc::UnboundedReceiver<News>,
}

impl Desk {
    /// A desk that has not looked at its jobs yet.
    pub(crate) fn new(store: Arc<Store>, config: SchedulerConfig, pool: rayon::ThreadPool) -> Desk {
        let (tell_desk, news) = mpsc::unbounded_channel();
        Desk {
            store,
            config,
            pool: Arc::new(pool),
            waiting: BTreeMap::new(),
            served: BTreeMap::new(),
            shares: Served::default(),
            busy: 0,
            stuck: BTreeSet::new(),
            acknowledging: false,
            to_order: VecDeque::new(),
            ordering: false,
            stop_ordering: Arc::default(),
            closing: false,
            tell_desk,
            news,
        }
    }

    /// Serves jobs until it is told to stop or nobody is left to tell it anything.
    pub(crate) async fn work(mut self, mut commands: mpsc::UnboundedReceiver<Command>) {
        self.take_up_interrupted().await;
        self.look();
        let ended = self.store.jobs().into_iter().rev();
        self.to_order = ended
            .filter(|record| record.state.is_ended())
            .map(|record| record.id)
            .collect();
        let mut ticks = interval(ACKNOWLEDGE_EVERY);
        ticks.set_missed_tick_behavior(MissedTickBehavior::Delay);
        loop {
            self.serve().await;
            let is_idle = self.served.is_empty() && !self.acknowledging && !self.ordering;
            if self.closing && is_idle {
                return;
            }
            let patience = self.until_the_next_date();
            tokio::select! {
                news = self.news.recv() => match news {
                    Some(news) => self.hear(news).await,
                    None => return,
                },
                command = commands.recv(), if !self.closing => match command {
                    Some(Command::Look) => self.look(),
                    Some(Command::Ask(job, event, reply)) => self.obey(job, event, reply).await,
                    Some(Command::Shutdown) | None => self.close_down().await,
                },
                _ = ticks.tick(), if !self.served.is_empty() && !self.acknowledging => self.acknowledge_aside(),
                () = sleep(patience.unwrap_or_default()), if patience.is_some() => {}
            }
        }
    }

    /// A job found running was cut off by a crash: it waits again, in its old place.
    async fn take_up_interrupted(&mut self) {
        for record in self.store.jobs() {
            if record.state == JobState::Running {
                self.change(record.id, Event::Interrupt, String::new())
                    .await;
            }
        }
    }

    /// Reads anew which jobs wait.
    fn look(&mut self) {
        let waits = |record: &JobRecord| {
            matches!(record.state, JobState::Queued | JobState::Paused)
                && !self.stuck.contains(&record.id)
        };
        let records = self.store.jobs().into_iter().filter(waits);
        self.waiting = records.map(|record| (record.id, record)).collect();
    }

    /// Starts jobs and hands blocks out until all hands are full or there is nothing to do.
    async fn serve(&mut self) {
        if self.closing {
            return;
        }
        self.order_rows();
        self.give_up_the_late().await;
        while let Some(job) = self.next_piece() {
            self.start(job).await;
        }
        while self.busy < self.pool.current_num_threads() {
            let Some(job) = self.whose_turn() else {
                return;
            };
            match self.waiting.contains_key(&job) {
                true => self.start(job).await,
                false => self.hand_out(job),
            }
        }
    }

    /// Has the rows of an ended job written in order, beside the blocks.
    fn order_rows(&mut self) {
        if self.ordering {
            return;
        }
        let Some(job) = self.to_order.pop_front() else {
            return;
        };
        self.ordering = true;
        let (store, stop, pool, tell) = (
            self.store.clone(),
            self.stop_ordering.clone(),
            self.pool.clone(),
            self.tell_desk.clone(),
        );
        spawn_blocking(move || {
            let written = caught(|| pool.install(|| store.write_order(job, &stop)));
            drop(store);
            match written {
                Ok(Ok(_)) => {}
                // pages are found without it
                Ok(Err(error)) => tracing::warn!(%job, %error, "rows were not written in order"),
                Err(reason) => tracing::warn!(%job, reason, "rows were not written in order"),
            }
            let _ = tell.send(News::Ordered);
        });
    }

    /// The planning job to begin now: one at a time, beside the blocks.
    fn next_piece(&self) -> Option<JobId> {
        let is_piece = |record: &JobRecord| matches!(record.kind, JobKind::Planning { .. });
        if self.served.values().any(|served| is_piece(&served.record)) {
            return None;
        }
        let now = now_unix_ms();
        let ready = self.waiting.values().filter(|record| {
            is_piece(record) && self.may_start(record, now) && self.has_what_it_needs(record)
        });
        ready
            .min_by_key(|record| (-i64::from(record.terms.priority), record.id))
            .map(|record| record.id)
    }

    /// The screening job that gets the next free thread.
    fn whose_turn(&mut self) -> Option<JobId> {
        let now = now_unix_ms();
        let getting_ready = self.served.values().any(|served| {
            matches!(served.hands, Hands::GettingReady) && served.record.kind == JobKind::Screening
        });
        let candidate = |record: &JobRecord, cells_left| {
            let (job, priority) = (record.id, record.terms.priority);
            (job, priority, cells_left, record.terms.requester.clone())
        };
        let in_hand = self.served.values();
        let in_hand =
            in_hand.filter_map(|served| Some(candidate(&served.record, served.cells_left()?)));
        let urgent = self
            .served
            .values()
            .map(|served| served.record.terms.priority);
        let urgent = urgent.max().filter(|_| self.served.len() >= MOST_SERVED);
        let waiting = self.waiting.values().filter(|record| {
            // one at a time: until it is ready nobody knows what is left of it
            !getting_ready
                && record.kind == JobKind::Screening
                && self.may_start(record, now)
                && urgent.is_none_or(|urgent| record.terms.priority > urgent)
        });
        let waiting = waiting.map(|record| candidate(record, record.cells));
        let known: Vec<_> = in_hand.chain(waiting).collect();
        let candidates: Vec<Candidate<'_>> = known
            .iter()
            .map(|(job, priority, cells_left, requester)| Candidate {
                job: *job,
                requester,
                priority: *priority,
                cells_left: *cells_left,
            })
            .collect();
        let at_work = self.served.values();
        let at_work = at_work.map(|served| served.record.terms.requester.as_str());
        self.shares.turn(&candidates, at_work)
    }

    fn may_start(&self, record: &JobRecord, now_unix_ms: u64) -> bool {
        let due = record
            .terms
            .not_before_unix_ms
            .is_none_or(|not_before| not_before <= now_unix_ms);
        record.state == JobState::Queued && due
    }

    /// Whether the job that a plan is made from has ended, or is gone.
    fn has_what_it_needs(&self, record: &JobRecord) -> bool {
        let JobKind::Planning { of, .. } = record.kind else {
            return true;
        };
        self.store.job(of).is_ok_and(|of| of.state.is_ended()) || self.store.job(of).is_err()
    }

    async fn start(&mut self, job: JobId) {
        let Some(record) = self.change(job, Event::Start, String::new()).await else {
            return;
        };
        let (store, make, tell) = (
            self.store.clone(),
            self.config.work.clone(),
            self.tell_desk.clone(),
        );
        self.served.insert(job, ServedJob::new(record.clone()));
        spawn_blocking(move || {
            let ready = caught(|| compute::ready(&make, &store, &record)).and_then(|ready| ready);
            // the store is let go before word of it is heard
            drop((store, make));
            let _ = tell.send(News::Ready(job, ready));
        });
    }

    fn hand_out(&mut self, job: JobId) {
        let Some(served) = self.served.get_mut(&job) else {
            return;
        };
        let Some((work, block)) = served.take() else {
            return;
        };
        self.busy += 1;
        let (store, record, tell) = (
            self.store.clone(),
            served.record.clone(),
            self.tell_desk.clone(),
        );
        self.pool.spawn(move || {
            let begun = Instant::now();
            let scored = caught(|| compute::score(&store, &record, &work, &block));
            drop((store, work));
            let scored = scored.unwrap_or_else(Scored::Lost);
            let _ = tell.send(News::Block(job, block.id, begun.elapsed(), scored));
        });
    }

    fn begin_piece(&mut self, job: JobId, piece: crate::Piece) {
        let Some(served) = self.served.get_mut(&job) else {
            return;
        };
        served.hands = Hands::Piece;
        let (tell, stop) = (self.tell_desk.clone(), served.stop.clone());
        spawn_blocking(move || {
            let ended = caught(|| piece(&stop)).and_then(|ended| ended);
            let _ = tell.send(News::Piece(job, ended));
        });
    }

    async fn hear(&mut self, news: News) {
        match news {
            News::Ready(job, ready) => {
                let Some(served) = self.served.get_mut(&job) else {
                    return;
                };
                match ready {
                    Err(reason) => served.fail(reason),
                    Ok(Ready::Piece(piece)) if served.goes_on() => {
                        return self.begin_piece(job, piece);
                    }
                    Ok(Ready::Piece(_)) => {}
                    Ok(Ready::Blocks(work, missing)) => {
                        served.hands = Hands::Blocks {
                            work: Arc::new(work),
                            cells_left: missing.iter().map(|block| block.cells).sum(),
                            missing,
                            next: 0,
                        };
                    }
                }
                served.in_hand -= 1;
                self.settle(job).await;
            }
            News::Block(job, block, taken, scored) => {
                self.busy -= 1;
                let Some(served) = self.served.get_mut(&job) else {
                    return;
                };
                self.shares.count(&served.record.terms.requester, taken);
                served.in_hand -= 1;
                match scored {
                    Scored::Committed => {}
                    Scored::Gap(reason) => served.gaps.push((block, reason)),
                    Scored::Lost(reason) => served.fail(reason),
                }
                self.settle(job).await;
            }
            News::Piece(job, ended) => {
                let Some(served) = self.served.get_mut(&job) else {
                    return;
                };
                served.in_hand -= 1;
                match (ended, &served.stopping) {
                    (Ok(()), _) => {}
                    // what was told to stop has no result to speak of
                    (Err(_), Some(_)) => served.hands = Hands::GettingReady,
                    (Err(reason), None) => served.fail(reason),
                }
                self.settle(job).await;
            }
            News::Ordered => self.ordering = false,
            News::Acknowledged(outcome) => {
                self.acknowledging = false;
                match outcome {
                    Ok(()) => self.served.keys().for_each(|job| self.tell(*job, None)),
                    Err(reason) => self.fail_all(&reason).await,
                }
            }
        }
    }

    /// Ends a job of which nothing is in hand any more.
    async fn settle(&mut self, job: JobId) {
        if !self.served.get(&job).is_some_and(ServedJob::is_over) {
            return;
        }
        let Some(mut served) = self.served.remove(&job) else {
            return;
        };
        // Nothing is reported done before it is on disk.
        if let Err(error) = self.acknowledge().await {
            served.fail(error.to_string());
        }
        let progress = self.store.progress(job);
        let none_committed = progress.is_ok_and(|progress| progress.blocks == 0);
        let (event, failure) = served.verdict(none_committed);
        if let Some(record) = self.change(job, event, failure).await
            && record.state.is_ended()
        {
            self.to_order.push_back(job);
        }
        let Some((wanted, replies)) = served.stopping else {
            return;
        };
        for reply in replies {
            let answer = match self.store.job(job) {
                Ok(record) if event == wanted => Ok(record),
                Ok(JobRecord { state, .. }) => Err(SchedulerError::refused(job, state, wanted)),
                Err(error) => Err(error.into()),
            };
            // Whoever asked may have left.
            let _ = reply.send(answer);
        }
    }

    async fn settle_all(&mut self) {
        let jobs: Vec<JobId> = self.served.keys().copied().collect();
        for job in jobs {
            self.settle(job).await;
        }
    }

    async fn fail_all(&mut self, reason: &str) {
        for served in self.served.values_mut() {
            served.fail(reason.to_owned());
        }
        self.settle_all().await;
    }

    /// Pauses, resumes or cancels a job.
    async fn obey(&mut self, job: JobId, event: Event, reply: Reply) {
        match self.served.get_mut(&job) {
            Some(served) if transition(JobState::Running, event).is_ok() => {
                served.stop_for(event, Some(reply));
                self.settle(job).await;
            }
            _ => {
                let answer = self.apply(job, event, String::new()).await;
                // Whoever asked may have left.
                let _ = reply.send(answer);
            }
        }
    }

    async fn close_down(&mut self) {
        self.closing = true;
        self.stop_ordering.store(true, Ordering::Relaxed);
        for served in self.served.values_mut() {
            served.stop_for(Event::Interrupt, None);
        }
        self.settle_all().await;
    }

    /// Gives up jobs whose deadline has passed.
    async fn give_up_the_late(&mut self) {
        let now = now_unix_ms();
        let late = |record: &JobRecord| {
            let deadline = record.terms.deadline_unix_ms;
            deadline.is_some_and(|deadline| deadline <= now)
        };
        let waiting = self.waiting.values().filter(|record| late(record));
        let waiting: Vec<JobId> = waiting.map(|record| record.id).collect();
        for job in waiting {
            let reason = self.lateness(job);
            self.change(job, Event::Fail, reason).await;
        }
        let served = self.served.values();
        let served = served.filter(|served| served.goes_on() && late(&served.record));
        let served: Vec<JobId> = served.map(|served| served.record.id).collect();
        for job in served {
            let reason = self.lateness(job);
            if let Some(served) = self.served.get_mut(&job) {
                served.fail(reason);
            }
            self.settle(job).await;
        }
    }

    fn lateness(&self, job: JobId) -> String {
        let screened = self
            .store
            .progress(job)
            .map_or(0, |progress| progress.cells);
        match screened {
            0 => "its deadline passed before any of it was done".to_owned(),
            screened => format!(
                "its deadline passed when {screened} of its cells were screened; these can be ranked"
            ),
        }
    }

    /// How long until a job may start or is late; none where no job waits for a time.
    fn until_the_next_date(&self) -> Option<Duration> {
        if self.closing {
            return None;
        }
        let now = now_unix_ms();
        let served = self.served.values().filter(|served| served.goes_on());
        let served = served.filter_map(|served| served.record.terms.deadline_unix_ms);
        let waiting = self.waiting.values().flat_map(|record| {
            let starts = record.terms.not_before_unix_ms;
            let starts = starts.filter(|starts| *starts > now);
            starts.into_iter().chain(record.terms.deadline_unix_ms)
        });
        let next = served.chain(waiting).min()?;
        let wait = Duration::from_millis(next.saturating_sub(now).max(1));
        Some(wait.min(LOOK_AT_THE_CLOCK_EVERY))
    }

    /// Acknowledges what is committed without keeping the threads waiting.
    fn acknowledge_aside(&mut self) {
        self.acknowledging = true;
        let (store, tell) = (self.store.clone(), self.tell_desk.clone());
        spawn_blocking(move || {
            let outcome = store.acknowledge().map_err(|error| error.to_string());
            drop(store);
            let _ = tell.send(News::Acknowledged(outcome));
        });
    }

    async fn acknowledge(&self) -> Result<(), SchedulerError> {
        let store = self.store.clone();
        blocking(move || Ok(store.acknowledge()?)).await
    }

    /// Does to a job what an event asks; if that cannot be journalled, leaves the job alone and tells that it failed.
    async fn change(&mut self, job: JobId, event: Event, failure: String) -> Option<JobRecord> {
        match self.apply(job, event, failure).await {
            Ok(record) => Some(record),
            Err(error) => {
                tracing::error!(%job, %error, "the job's state could not be journalled");
                self.stuck.insert(job);
                self.waiting.remove(&job);
                self.tell(job, Some(error.to_string()));
                None
            }
        }
    }

    /// Journals what an event does to a job and tells of it.
    async fn apply(
        &mut self,
        job: JobId,
        event: Event,
        failure: String,
    ) -> Result<JobRecord, SchedulerError> {
        let store = self.store.clone();
        let at_unix_ms = now_unix_ms();
        let record = blocking(move || {
            let from = store.job(job)?.state;
            let to = transition(from, event)
                .map_err(|refused| SchedulerError::Refused { job, refused })?;
            Ok(store.change_state(
                job,
                &StateChange {
                    from,
                    to,
                    at_unix_ms,
                    failure,
                },
            )?)
        })
        .await?;
        match record.state {
            JobState::Queued | JobState::Paused => {
                self.waiting.insert(job, record.clone());
            }
            _ => {
                self.waiting.remove(&job);
            }
        }
        tracing::info!(%job, state = %record.state, failure = record.failure, "job changed");
        self.tell(job, None);
        Ok(record)
    }

    /// Tells who watches how far a job is; `failure` where it failed without the journal knowing.
    fn tell(&self, job: JobId, failure: Option<String>) {
        let (Ok(record), Ok(progress)) = (self.store.job(job), self.store.progress(job)) else {
            return;
        };
        (self.config.notify)(Progress {
            job,
            state: if failure.is_some() {
                JobState::Failed
            } else {
                record.state
            },
            cells_done: progress.cells_acknowledged,
            best_yield: progress.best_yield,
            failure: failure.unwrap_or(record.failure),
        });
    }
}

/// Runs what waits for the disk where waiting is allowed.
async fn blocking<T: Send + 'static>(
    work: impl FnOnce() -> Result<T, SchedulerError> + Send + 'static,
) -> Result<T, SchedulerError> {
    match spawn_blocking(work).await {
        Ok(outcome) => outcome,
        Err(error) => Err(StoreError::Stopped {
            reason: error.to_string(),
        }
        .into()),
    }
}

/// The one clock of the queue.
fn now_unix_ms() -> u64 {
    let since = SystemTime::now()
        .duration_since(UNIX_EPOCH)
        .unwrap_or_default();
    u64::try_from(since.as_millis()).unwrap_or(u64::MAX)
}
