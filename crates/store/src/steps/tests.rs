//! At every step towards the disk: the process dies there, or the disk is full from there on, or it refuses that step
//! alone. Nothing that was acknowledged is lost or doubled, and the night's work can be finished afterwards.
//!
//! A copy of the test does the work. It says on stdout what it begins and what is acknowledged; then this process opens
//! what it left.

use std::collections::BTreeSet;
use std::io::{self, Write};
use std::path::Path;
use std::process::{Command, Output};
use std::sync::atomic::{AtomicU64, Ordering};
use std::sync::{LazyLock, Mutex, PoisonError};

mod copying;
mod mending;
mod night;

/// Tells a copy of a test what happens at which step, e.g. `dies 17`.
const TROUBLE: &str = "ENOLATTICE_STORE_TROUBLE";
/// Tells a copy of a test the directory that it works in.
const PLACE: &str = "ENOLATTICE_STORE_PLACE";

/// Number of the error by which Unix tells that a disk failed.
const EIO: i32 = 5;

/// What happens to a step.
#[derive(Clone, Copy, Debug, PartialEq)]
enum Trouble {
    /// The process dies before it.
    Dies,
    /// The disk is full from it on.
    Full,
    /// The disk refuses it and no other.
    Refused,
}

impl Trouble {
    const ALL: [Trouble; 3] = [Trouble::Dies, Trouble::Full, Trouble::Refused];

    fn name(self) -> &'static str {
        match self {
            Trouble::Dies => "dies",
            Trouble::Full => "full",
            Trouble::Refused => "refused",
        }
    }
}

/// Announces a step; in a copy of a test it may be the one.
pub(crate) fn step(what: &'static str) -> io::Result<()> {
    static TOLD: LazyLock<Option<(Trouble, u64)>> = LazyLock::new(|| {
        let told = std::env::var(TROUBLE).ok()?;
        let (name, at) = told.split_once(' ')?;
        let trouble = Trouble::ALL.into_iter().find(|one| one.name() == name)?;
        Some((trouble, at.parse().ok()?))
    });
    static TAKEN: AtomicU64 = AtomicU64::new(0);
    let Some((trouble, at)) = *TOLD else {
        return Ok(());
    };
    let taken = TAKEN.fetch_add(1, Ordering::Relaxed);
    match trouble {
        Trouble::Dies if taken == at => {
            say(&format!("met {what}"));
            std::process::abort()
        }
        // A full disk still renames and removes.
        Trouble::Full
            if taken >= at && !what.starts_with("rename") && !what.starts_with("remove") =>
        {
            say(&format!("met {what}"));
            Err(io::ErrorKind::StorageFull.into())
        }
        Trouble::Refused if taken == at => {
            say(&format!("met {what}"));
            Err(io::Error::from_raw_os_error(EIO))
        }
        _ => Ok(()),
    }
}

/// One line to the process that watches.
fn say(line: &str) {
    let mut out = io::stdout().lock();
    // Begun on a line of its own: the test's name may stand before it.
    writeln!(out, "\n> {line}").expect("somebody reads");
    out.flush().expect("somebody reads");
}

/// What a copy of a test said.
#[derive(Debug)]
struct Heard {
    begun: BTreeSet<String>,
    acknowledged: BTreeSet<String>,
    met: Option<String>,
}

/// The directory that this process is told to work in, if it is a copy of a test.
fn place() -> Option<std::path::PathBuf> {
    std::env::var_os(PLACE).map(Into::into)
}

/// A directory on the disk that is memory, where the system has one: what a process that dies leaves behind is the same on
/// all, and hundreds of them need not wait for platters.
fn directory() -> tempfile::TempDir {
    let memory = Path::new("/dev/shm");
    let made = match memory.is_dir() {
        true => tempfile::tempdir_in(memory),
        false => tempfile::tempdir(),
    };
    made.expect("a directory")
}

/// Runs a copy of a test that meets a trouble; nothing met: the work has fewer steps.
fn run_copy(test: &str, dir: &Path, trouble: Trouble, at: u64) -> Heard {
    let output = Command::new(std::env::current_exe().expect("a path"))
        .args(["--exact", &format!("steps::tests::{test}"), "--nocapture"])
        .env(PLACE, dir)
        .env(TROUBLE, format!("{} {at}", trouble.name()))
        .output()
        .expect("the copy runs");
    let heard = Heard::of(&output);
    let died = trouble == Trouble::Dies && heard.met.is_some();
    assert_eq!(
        output.status.success(),
        !died,
        "{trouble:?} at {at}: {}{}",
        String::from_utf8_lossy(&output.stdout),
        String::from_utf8_lossy(&output.stderr)
    );
    heard
}

impl Heard {
    fn of(output: &Output) -> Heard {
        let text = String::from_utf8_lossy(&output.stdout);
        let said = |word: &'static str| {
            let lines = text.lines().filter_map(|line| line.strip_prefix("> "));
            lines.filter_map(move |line| line.strip_prefix(word).map(|rest| rest.trim().to_owned()))
        };
        Heard {
            begun: said("begins ").collect(),
            acknowledged: said("acknowledged ").collect(),
            met: said("met ").next(),
        }
    }
}

/// Between fork and exec a copy holds the locks of this process: one test at a time has copies and stores.
static ONE_AT_A_TIME: Mutex<()> = Mutex::new(());

/// Calls `attempt` with each trouble at each step, until the work has no such step; gives how often.
fn at_every_step(mut attempt: impl FnMut(Trouble, u64) -> Option<String>) -> u64 {
    let _alone = ONE_AT_A_TIME.lock().unwrap_or_else(PoisonError::into_inner);
    let mut times = 0;
    for trouble in Trouble::ALL {
        times += (0..)
            .take_while(|at| attempt(trouble, *at).is_some())
            .count() as u64;
    }
    times
}
