//! Reading a campaign file and the files that it names.

use std::collections::BTreeMap;
use std::fs;
use std::path::{Path, PathBuf};

use enolattice_grid::{CampaignSpec, Sources, read};

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
    read(&Sources {
        campaign_name: shown,
        campaign,
        files,
    })
    .map_err(Fault::Input)
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

/// The values of every `file` key of the axes; nothing where the text is no TOML, which the
/// campaign's reader reports.
fn files_named(campaign: &str) -> Vec<String> {
    let Ok(campaign) = campaign.parse::<toml::Table>() else {
        return Vec::new();
    };
    let axes = campaign.values().filter_map(toml::Value::as_table);
    axes.filter_map(|axis| axis.get("file"))
        .flat_map(|value| match value {
            toml::Value::Array(names) => names.clone(),
            name => vec![name.clone()],
        })
        .filter_map(|name| name.as_str().map(str::to_owned))
        .collect()
}
