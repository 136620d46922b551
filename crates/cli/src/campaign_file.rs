//! Reading a campaign file and the files that it names.

use std::collections::BTreeMap;
use std::fs;
use std::path::{Path, PathBuf};

use enolattice_grid::{
    CampaignSpec, FaultCode, InputError, MAX_FILE_BYTES, Place, Reading, Sources, files_named, read,
};
use enolattice_reagents::OwnTable;

use crate::client::Client;
use crate::fault::Fault;
use crate::output::talk;

/// Reads a campaign; the files that it names are looked for beside it.
pub(crate) fn read_campaign(path: &Path) -> Result<Reading, Fault> {
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
            Err(reason) => talk(&format!("{}: {reason}", folder.join(&name).display())),
        }
    }
    Ok(read(&Sources {
        campaign_name: shown,
        campaign,
        files,
    }))
}

/// The campaign, if its text and files are sound. If not, the engine is asked for the faults of what
/// could be read, so that the user sees all in one list.
pub(crate) async fn sound(reading: Reading, client: &Client) -> Result<CampaignSpec, Fault> {
    if reading.faults.is_empty() {
        return Ok(reading.spec);
    }
    match client.faults(reading.spec.clone()).await {
        Ok(found) => Err(Fault::Input(reading.with(found))),
        Err(error) => {
            talk(&format!("names and structures were not looked at: {error}"));
            Err(Fault::Input(reading.faults))
        }
    }
}

/// A text file that an option names, with its name as it is shown.
pub(crate) fn read_text(option: &str, path: &Path) -> Result<(String, String), Fault> {
    let name = path.display().to_string();
    let text = read_file(path)
        .and_then(|bytes| String::from_utf8(bytes).map_err(|_| "it is no UTF-8 text".into()));
    match text {
        Ok(text) => Ok((name, text)),
        Err(reason) => {
            let (code, remedy) = (
                FaultCode::FileMissing.name(),
                "give the path of a file in TOML",
            );
            Err(Fault::option(option, &name, code, &reason, remedy))
        }
    }
}

/// Files that the command line names, each with its name as it is shown, and the faults of those that
/// cannot be read.
pub(crate) fn named_files(
    option: &str,
    files: &[PathBuf],
) -> (Vec<(String, Vec<u8>)>, Vec<InputError>) {
    let (mut named, mut faults) = (Vec::with_capacity(files.len()), Vec::new());
    for file in files {
        let name = file.display().to_string();
        match read_file(file) {
            Ok(bytes) => named.push((name, bytes)),
            Err(reason) => faults.push(InputError {
                place: Place {
                    field: option.to_owned(),
                    ..Place::default()
                },
                value: name,
                code: FaultCode::FileMissing.name(),
                reason,
                remedy: "give the path of a CSV file".to_owned(),
            }),
        }
    }
    (named, faults)
}

/// The laboratory's own tables that the command line names.
pub(crate) fn own_tables(files: &[PathBuf]) -> Result<Vec<OwnTable>, Fault> {
    let mut tables = Vec::with_capacity(files.len());
    for file in files {
        let name = file.display().to_string();
        let text = read_file(file)
            .and_then(|bytes| String::from_utf8(bytes).map_err(|_| "it is no UTF-8 text".into()));
        let text = text.map_err(|reason| {
            let remedy = "give the path of a table of reagents";
            Fault::option("--library", &name, "FILE_MISSING", &reason, remedy)
        })?;
        tables.push(OwnTable { name, text });
    }
    Ok(tables)
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
    if about.len() > MAX_FILE_BYTES as u64 {
        return Err(format!(
            "it has {} bytes, more than {MAX_FILE_BYTES}",
            about.len()
        ));
    }
    fs::read(path).map_err(|error| error.to_string())
}
