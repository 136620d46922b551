//! The sled database of blocks, and when its writes may be believed.

use std::fs::File;
use std::io;
use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::{Path, PathBuf};
use std::sync::{Mutex, PoisonError};
use std::time::Duration;

use sled::IVec;

use crate::StoreError;
use crate::block::KEY_BYTES;
use crate::steps::step;

/// Bytes of a segment of sled's log, fixed when the database is made. A page
/// holds up to 17 values and must stay below a quarter of a segment, or sled
/// moves it to a blob file that it never syncs: 17 × 45 KiB < 2 MiB.
const SEGMENT_BYTES: usize = 8 << 20;
/// Bytes of cache asked of sled; it bounds writes, hardly reads.
const CACHE_BYTES: u64 = 64 << 20;
/// How the names of databases begin that were set aside.
pub(crate) const ASIDE: &str = "db.broken-";
/// How often a database is tried that is locked.
const TRIES: u32 = 100;
/// Time between two tries.
const BETWEEN_TRIES: Duration = Duration::from_millis(20);
/// Tree that holds the blocks.
const TREE: &str = "blocks";

/// Why the database could not be opened or read.
#[derive(Debug)]
pub(crate) enum Fault {
    /// Its files are damaged: set it aside and begin anew.
    Broken(String),
    /// Something else stands in the way; the files may be sound.
    Refused(StoreError),
}

/// The database of blocks.
pub(crate) struct Database {
    db: sled::Db,
    tree: sled::Tree,
    /// Our own handle on sled's file: its `flush` is no fsync.
    file: File,
    /// The first write that failed. Later ones may claim success, so nothing is believed after it.
    failed: Mutex<Option<String>>,
}

impl Database {
    /// Opens or makes the database in the directory `path`.
    ///
    /// Who opens it holds the lock of the store, so that a lock on the database is that of a store which this process has
    /// just closed: sled's threads let go of it a moment later.
    pub(crate) fn open(path: &Path) -> Result<Database, Fault> {
        for _ in 0..TRIES {
            match Database::try_open(path) {
                Err(Fault::Refused(StoreError::InUse { .. })) => std::thread::sleep(BETWEEN_TRIES),
                outcome => return outcome,
            }
        }
        Database::try_open(path)
    }

    fn try_open(path: &Path) -> Result<Database, Fault> {
        guarded(|| {
            step("open the database").map_err(|error| fault(path, error.into()))?;
            let config = sled::Config::new()
                .path(path)
                .segment_size(SEGMENT_BYTES)
                .cache_capacity(CACHE_BYTES)
                .flush_every_ms(None);
            let db = config.open().map_err(|error| fault(path, error))?;
            let tree = db.open_tree(TREE).map_err(|error| fault(path, error))?;
            let refused = |source| Fault::Refused(StoreError::io(path)(source));
            let file = File::open(path.join("db")).map_err(refused)?;
            File::open(path)
                .and_then(|directory| directory.sync_all())
                .map_err(refused)?;
            Ok(Database {
                db,
                tree,
                file,
                failed: Mutex::new(None),
            })
        })
    }

    /// Calls `visit` with every key and value, in order.
    pub(crate) fn scan(&self, path: &Path, mut visit: impl FnMut(IVec, IVec)) -> Result<(), Fault> {
        guarded(|| {
            for entry in self.tree.iter() {
                let (key, value) = entry.map_err(|error| fault(path, error))?;
                visit(key, value);
            }
            Ok(())
        })
    }

    /// The value under a key.
    pub(crate) fn get(&self, key: &[u8]) -> Result<Option<IVec>, String> {
        self.tree.get(key).map_err(|error| error.to_string())
    }

    /// Stores a value where there is none, else gives the one that is there.
    pub(crate) fn put_once(
        &self,
        key: &[u8; KEY_BYTES],
        value: &[u8],
    ) -> Result<Option<IVec>, StoreError> {
        self.writing(|| {
            step("store a block")?;
            let outcome = self
                .tree
                .compare_and_swap(key, None::<&[u8]>, Some(value))?;
            Ok(outcome.err().and_then(|swap| swap.current))
        })
    }

    /// Stores a value whatever was there.
    pub(crate) fn replace(&self, key: &[u8; KEY_BYTES], value: &[u8]) -> Result<(), StoreError> {
        self.writing(|| {
            step("replace a block")?;
            self.tree.insert(key, value).map(drop)
        })
    }

    /// Removes a key.
    pub(crate) fn remove(&self, key: &[u8]) -> Result<(), StoreError> {
        self.writing(|| {
            step("remove a block")?;
            self.tree.remove(key).map(drop)
        })
    }

    /// Returns when everything written before survives a power cut.
    pub(crate) fn sync(&self) -> Result<(), StoreError> {
        self.writing(|| {
            step("flush the database")?;
            self.db.flush()?;
            step("sync the database")?;
            self.file.sync_data().map_err(sled::Error::Io)
        })
    }

    /// Runs a write unless one failed before, and remembers if this one fails.
    fn writing<T>(&self, write: impl FnOnce() -> sled::Result<T>) -> Result<T, StoreError> {
        let failed = || self.failed.lock().unwrap_or_else(PoisonError::into_inner);
        if let Some(reason) = failed().clone() {
            return Err(StoreError::Stopped { reason });
        }
        write().map_err(|error| {
            let reason = failed().get_or_insert_with(|| error.to_string()).clone();
            StoreError::Stopped { reason }
        })
    }
}

/// Where a broken database may be put: named after the time, and after a number where the clock says a time again.
pub(crate) fn free_name(path: &Path, now_unix_ms: u64) -> PathBuf {
    let name = format!("{ASIDE}{now_unix_ms}");
    let later = (2..).map(|number| format!("{name}-{number}"));
    let mut targets = std::iter::once(name.clone())
        .chain(later)
        .map(|name| path.with_file_name(name));
    let free = |target: &PathBuf| target.symlink_metadata().is_err();
    targets
        .find(free)
        .unwrap_or_else(|| path.with_file_name(name))
}

/// Moves a broken database out of the way.
pub(crate) fn set_aside(path: &Path, target: &Path) -> Result<(), StoreError> {
    step("set the database aside")
        .and_then(|()| std::fs::rename(path, target))
        .map_err(StoreError::io(path))
}

/// sled panics on some damage instead of returning an error.
fn guarded<T>(work: impl FnOnce() -> Result<T, Fault>) -> Result<T, Fault> {
    catch_unwind(AssertUnwindSafe(work)).unwrap_or_else(|panic| {
        let text = panic.downcast_ref::<String>().map(String::as_str);
        let text = text.or_else(|| panic.downcast_ref::<&str>().copied());
        Err(Fault::Broken(text.unwrap_or("the database gave up").into()))
    })
}

/// Tells damage from a system that says no.
fn fault(path: &Path, error: sled::Error) -> Fault {
    use io::ErrorKind::{InvalidData, InvalidInput, Other, UnexpectedEof};
    match &error {
        sled::Error::Io(io)
            if !matches!(
                io.kind(),
                InvalidData | InvalidInput | UnexpectedEof | Other
            ) =>
        {
            Fault::Refused(StoreError::Database {
                path: path.into(),
                reason: error.to_string(),
            })
        }
        sled::Error::Io(io) if io.to_string().contains("could not acquire lock") => {
            let dir = path.parent().unwrap_or(path).into();
            Fault::Refused(StoreError::InUse { dir })
        }
        _ => Fault::Broken(error.to_string()),
    }
}
