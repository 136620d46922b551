//! The progress of a job, on stderr.

use std::time::{Duration, Instant};

use enolattice_engine::{Job, JobState};
use indicatif::{HumanCount, ProgressBar, ProgressStyle};

use crate::text::percent;

/// A progress bar with rate, time left and the best cell so far; silent where stderr is no terminal.
pub(crate) struct Progress {
    bar: ProgressBar,
    /// When and at how many cells it was first seen running: the rate counts from there.
    begun: Option<(Instant, u64)>,
}

impl Progress {
    pub(crate) fn new() -> Progress {
        let bar = ProgressBar::new(0);
        let style = ProgressStyle::with_template("{bar:28} {percent:>3} % {msg}");
        bar.set_style(style.unwrap_or_else(|_| ProgressStyle::default_bar()));
        bar.enable_steady_tick(Duration::from_millis(500));
        Progress { bar, begun: None }
    }

    /// Shows the job as it is.
    pub(crate) fn show(&mut self, job: &Job) {
        if job.planning.is_some() {
            let doing = match job.state {
                JobState::Running => "making the plan",
                JobState::Paused => "paused",
                _ => "waiting for the job that it plans from",
            };
            self.bar.set_length(1);
            return self.bar.set_message(doing);
        }
        self.bar.set_length(job.cells);
        self.bar.set_position(job.cells_done);
        let (since, at_first) = *self.begun.get_or_insert((Instant::now(), job.cells_done));
        let seconds = since.elapsed().as_secs_f64();
        let done_since = job.cells_done.saturating_sub(at_first) as f64;
        let mut message = match job.state {
            JobState::Queued => "waiting for its turn".to_owned(),
            JobState::Paused => "paused; `resume` lets it go on".to_owned(),
            _ => format!(
                "{} of {} cells",
                HumanCount(job.cells_done),
                HumanCount(job.cells)
            ),
        };
        if seconds > 0.0 && done_since > 0.0 {
            let rate = done_since / seconds;
            let left =
                Duration::from_secs_f64((job.cells - job.cells_done.min(job.cells)) as f64 / rate);
            message += &format!(", {}/s, {} left", HumanCount(rate as u64), clock(left));
        }
        if let Some(best) = job.best_yield {
            message += &format!(", best so far {}", percent(Some(best)));
        }
        self.bar.set_message(message);
    }

    /// Takes the bar away.
    pub(crate) fn end(self) {
        self.bar.finish_and_clear();
    }
}

/// A time as hours, minutes and seconds.
fn clock(time: Duration) -> String {
    let seconds = time.as_secs();
    match seconds / 3600 {
        0 => format!("{}:{:02}", seconds / 60, seconds % 60),
        hours => format!("{hours}:{:02}:{:02}", seconds / 60 % 60, seconds % 60),
    }
}
