//! Options that say whose a job is and when it may run.

use std::time::{Duration, SystemTime};

use chrono::DateTime;
use clap::Args;
use enolattice_engine::Terms;

/// Whose a job is and when it may run.
#[derive(Clone, Debug, Default, Args)]
#[command(next_help_heading = "Queue")]
pub(super) struct TermsOptions {
    /// Who asks: requesters share the engine alike.
    #[arg(
        long,
        value_name = "NAME",
        default_value = "",
        hide_default_value = true,
        env = "ENOLATTICE_REQUESTER"
    )]
    requester: String,
    /// Priority from -100 to 100, more is more urgent.
    #[arg(long, value_name = "N", default_value_t = 0, allow_negative_numbers = true,
          value_parser = clap::value_parser!(i32).range(-100..=100))]
    priority: i32,
    /// Start no sooner: a time such as 2026-12-24T18:00:00+01:00, or from now on such as 8h.
    #[arg(long, value_name = "TIME", value_parser = unix_ms)]
    not_before: Option<u64>,
    /// Give it up when it has not ended by this time, written alike.
    #[arg(long, value_name = "TIME", value_parser = unix_ms)]
    deadline: Option<u64>,
}

impl TermsOptions {
    pub(super) fn terms(&self) -> Terms {
        Terms {
            requester: self.requester.clone(),
            priority: self.priority,
            not_before_unix_ms: self.not_before,
            deadline_unix_ms: self.deadline,
        }
    }
}

/// A time as RFC 3339 has it, or a time from now, in milliseconds since 1970-01-01 UTC.
fn unix_ms(text: &str) -> Result<u64, String> {
    if let Ok(from_now) = humantime::parse_duration(text) {
        let now = SystemTime::now()
            .duration_since(SystemTime::UNIX_EPOCH)
            .unwrap_or(Duration::ZERO);
        let at = now.checked_add(from_now).map(|at| at.as_millis());
        return at
            .and_then(|ms| u64::try_from(ms).ok())
            .ok_or_else(|| "is too far away".to_owned());
    }
    match DateTime::parse_from_rfc3339(text) {
        Ok(time) => u64::try_from(time.timestamp_millis()).map_err(|_| "is before 1970".to_owned()),
        Err(_) => {
            Err("is no time; write 2026-12-24T18:00:00+01:00, or 8h or 90min from now".to_owned())
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn times_are_read_as_they_are_said() {
        assert_eq!(unix_ms("1970-01-01T01:00:01.5+01:00"), Ok(1500));
        let now = SystemTime::now().duration_since(SystemTime::UNIX_EPOCH);
        let now_ms = now.unwrap().as_millis() as u64;
        let in_90_minutes = unix_ms("1h 30min").unwrap();
        assert!((in_90_minutes - now_ms).abs_diff(5_400_000) < 60_000);
        assert!(unix_ms("tonight").is_err_and(|reason| reason.contains("from now")));
    }
}
