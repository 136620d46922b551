//! Reading a campaign file and the files that it names.

use std::collections::BTreeMap;
use std::fs;
use std::path::{Path, PathBuf};

use enolattice_grid::{CampaignSpec, InputError, Sources, files_named, read, read_against};
use enolattice_reagents::Library;

use crate::fault::Fault;

/// Largest file that is read, bytes.
const LARGEST_BYTES: u64 = 256 << 20;

/// Reads a campaign; the files that it names are looked for beside it.
pub(crate) fn read_campaign(path: &Path) -> Result<CampaignSpec, Fault> {
    let shown = path.display().to_string();
    let bytes = read_file(path).map_err(|reason| unreadable(&shown, &reason))?;
    let campaign =
        String::from_utf8(bytes).map_err(|_| unreadable(&shown, "it is no UTF-8 text"))?;
    let folder = path.parent().map_or_else(PathBuf::new, Path::to_path_buf);
    let mut files = BTreeMap::new();
    for name in files_named(&campaign) {
        // A file that cannot be read stays out: the campaign's reader knows the line that names it.
        match read_file(&folder.join(&name)) {
            Ok(bytes) => drop(files.insert(name, bytes)),
            Err(reason) => {
                crate::output::talk(&format!("{}: {reason}", folder.join(&name).display()))
            }
        }
    }
    let sources = Sources {
        campaign_name: shown,
        campaign,
        files,
    };
    read(&sources).map_err(|faults| Fault::Input(with_unknown_names(&sources, faults)))
}

/// Adds the names of reagents that the library of this program does not know to the faults of a
/// campaign that is refused anyway. A sound one is left to the library of its engine.
fn with_unknown_names(sources: &Sources, faults: Vec<InputError>) -> Vec<InputError> {
    let Ok(library) = Library::builtin() else {
        return faults;
    };
    read_against(sources, &library).err().unwrap_or(faults)
}

fn unreadable(path: &str, reason: &str) -> Fault {
    Fault::option(
        "FILE",
        path,
        "FILE_MISSING",
        reason,
        "give the path of a campaign in TOML",
    )
}

fn read_file(path: &Path) -> Result<Vec<u8>, String> {
    let about = fs::metadata(path).map_err(|error| error.to_string())?;
    if !about.is_file() {
        return Err("it is no file".to_owned());
    }
    if about.len() > LARGEST_BYTES {
        return Err(format!(
            "it has {} bytes, more than {LARGEST_BYTES}",
            about.len()
        ));
    }
    fs::read(path).map_err(|error| error.to_string())
}
