//! Kept plans: one file a plan, version 1, written whole, synced and renamed into place; it never changes.
//!
//! A JSON object `{version, crc32, plan}`, the checksum being over the text of `plan`. Its `document` is the plan as
//! the engine gave it; the store looks at what stands beside it alone.

use std::collections::BTreeMap;
use std::fs;
use std::path::{Path, PathBuf};
use std::sync::Mutex;

use serde::{Deserialize, Serialize};
use serde_json::value::RawValue;

use crate::journal::{ENDING, Found, files, sync_dir, write_durably};
use crate::store::lock;
use crate::{JobId, PlanId, StoreError};

/// Version of the file.
const VERSION: u32 = 1;

/// What is known of a kept plan without reading it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PlanRecord {
    /// Id.
    pub id: PlanId,
    /// Job whose ranking it was made from.
    pub job: JobId,
    /// Title.
    pub title: String,
    /// When it was made, milliseconds since 1970-01-01 UTC.
    pub made_unix_ms: u64,
    /// Plates.
    pub plates: u32,
    /// Wells of all plates that hold something.
    pub wells: u32,
}

/// What opening the directory of plans found beside them.
#[derive(Debug, Default)]
pub(crate) struct PlansFound {
    /// Files that could not be read, each with the reason.
    pub(crate) unreadable: Vec<(PathBuf, String)>,
    /// Files that a crash left unfinished; they are gone.
    pub(crate) leftovers: Vec<PathBuf>,
}

/// The directory of plans. Documents stay on the disk until they are asked for.
#[derive(Debug)]
pub(crate) struct Plans {
    dir: PathBuf,
    known: Mutex<BTreeMap<PlanId, PlanRecord>>,
    /// The last id that was given.
    last: Mutex<Option<PlanId>>,
}

#[derive(Serialize, Deserialize)]
struct Envelope<'a> {
    version: u32,
    crc32: u32,
    #[serde(borrow)]
    plan: &'a RawValue,
}

#[derive(Serialize, Deserialize)]
struct StoredPlan<'a> {
    id: String,
    job: String,
    title: String,
    made_unix_ms: u64,
    plates: u32,
    wells: u32,
    #[serde(borrow)]
    document: &'a RawValue,
}

impl Plans {
    /// Opens or makes the directory and reads every plan; those that cannot be read are told with the reason.
    pub(crate) fn open(dir: &Path) -> Result<(Plans, PlansFound), StoreError> {
        let Found { whole, leftovers } = files(dir)?;
        let mut found = PlansFound {
            leftovers,
            ..PlansFound::default()
        };
        let mut known = BTreeMap::new();
        // A plan that cannot be read keeps its id to itself.
        let mut last = None;
        for path in whole {
            let stem = path.file_stem().and_then(|stem| stem.to_str());
            last = last.max(stem.and_then(|stem| stem.parse().ok()));
            match read_file(&path) {
                Ok((record, _)) => drop(known.insert(record.id, record)),
                Err(reason) => found.unreadable.push((path, reason)),
            }
        }
        let plans = Plans {
            dir: dir.into(),
            last: Mutex::new(last),
            known: Mutex::new(known),
        };
        Ok((plans, found))
    }

    /// An id that no plan has.
    pub(crate) fn new_id(&self, now_unix_ms: u64) -> Result<PlanId, StoreError> {
        let random = getrandom::u64().map_err(StoreError::unwritable)?;
        let mut last = lock(&self.last);
        let id = PlanId::after(*last, now_unix_ms, random);
        *last = Some(id);
        Ok(id)
    }

    /// Writes a plan; when this returns, it survives a power cut.
    pub(crate) fn keep(&self, record: PlanRecord, document: String) -> Result<(), StoreError> {
        let document = RawValue::from_string(document).map_err(StoreError::unwritable)?;
        let text = write(&record, &document).map_err(StoreError::unwritable)?;
        write_durably(&self.path(record.id), text.as_bytes())?;
        lock(&self.known).insert(record.id, record);
        Ok(())
    }

    /// A plan with its document.
    pub(crate) fn plan(&self, plan: PlanId) -> Result<(PlanRecord, String), StoreError> {
        if !lock(&self.known).contains_key(&plan) {
            return Err(StoreError::PlanUnknown {
                plan: plan.to_string(),
            });
        }
        let path = self.path(plan);
        read_file(&path).map_err(|reason| StoreError::PlanDamaged { plan, path, reason })
    }

    /// Removes a plan; gives whether there was one. When this returns, it stays away after a power cut.
    pub(crate) fn remove(&self, plan: PlanId) -> Result<bool, StoreError> {
        let mut known = lock(&self.known);
        if !known.contains_key(&plan) {
            return Ok(false);
        }
        let path = self.path(plan);
        fs::remove_file(&path).map_err(StoreError::io(&path))?;
        sync_dir(&self.dir)?;
        known.remove(&plan);
        Ok(true)
    }

    /// All plans in the order in which they were made.
    pub(crate) fn records(&self) -> Vec<PlanRecord> {
        lock(&self.known).values().cloned().collect()
    }

    fn path(&self, plan: PlanId) -> PathBuf {
        self.dir.join(format!("{plan}.{ENDING}"))
    }
}

/// Reads a kept plan and its document.
///
/// # Errors
/// A sentence that says what is wrong with it.
pub(crate) fn read_file(path: &Path) -> Result<(PlanRecord, String), String> {
    let text = fs::read_to_string(path).map_err(|error| error.to_string())?;
    let (record, document) = read(&text)?;
    match path.file_stem().and_then(|stem| stem.to_str()) {
        Some(name) if name == record.id.to_string() => Ok((record, document.get().to_owned())),
        _ => Err(format!("it holds plan `{}`; is it a copy?", record.id)),
    }
}

fn write(record: &PlanRecord, document: &RawValue) -> Result<String, serde_json::Error> {
    let plan = serde_json::value::to_raw_value(&StoredPlan {
        id: record.id.to_string(),
        job: record.job.to_string(),
        title: record.title.clone(),
        made_unix_ms: record.made_unix_ms,
        plates: record.plates,
        wells: record.wells,
        document,
    })?;
    serde_json::to_string(&Envelope {
        version: VERSION,
        crc32: crc32fast::hash(plan.get().as_bytes()),
        plan: &plan,
    })
}

fn read(text: &str) -> Result<(PlanRecord, &RawValue), String> {
    let no_plan = |error: serde_json::Error| format!("it is no kept plan: {error}");
    let envelope: Envelope<'_> = serde_json::from_str(text).map_err(no_plan)?;
    if envelope.version != VERSION {
        return Err(format!("its version {} is not known", envelope.version));
    }
    if crc32fast::hash(envelope.plan.get().as_bytes()) != envelope.crc32 {
        return Err("its checksum does not match".into());
    }
    let plan: StoredPlan<'_> = serde_json::from_str(envelope.plan.get()).map_err(no_plan)?;
    let no_id = |kind: &str, id: &str| format!("`{id}` is no id of a {kind}");
    let record = PlanRecord {
        id: plan.id.parse().map_err(|_| no_id("plan", &plan.id))?,
        job: plan.job.parse().map_err(|_| no_id("job", &plan.job))?,
        title: plan.title,
        made_unix_ms: plan.made_unix_ms,
        plates: plan.plates,
        wells: plan.wells,
    };
    Ok((record, plan.document))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// `testdata/plan_v1.json` is a plan as version 1 wrote it; it is never made anew.
    #[test]
    fn plans_of_version_1_are_read_for_ever() {
        let golden = include_str!("../testdata/plan_v1.json").trim_end();
        let (record, document) = read(golden).unwrap();
        assert_eq!(record.id.to_string(), "06f3k8a5zr0q7");
        assert_eq!(record.job.to_string(), "06f3k8a5zr0q2");
        assert_eq!(record.title, "Invented esters, first plates");
        assert_eq!(record.made_unix_ms, 1_760_000_120_000);
        assert_eq!((record.plates, record.wells), (2, 188));
        assert_eq!(
            document.get(),
            r#"{"title":"","volume_ul":100.0,"shares":[0.1,1e-300]}"#
        );
        assert_eq!(write(&record, document).unwrap(), golden);
    }

    #[test]
    fn a_changed_volume_is_noticed() {
        let golden = include_str!("../testdata/plan_v1.json");
        let told = |text: &str| read(text).map(|_| ()).unwrap_err();
        assert!(told(&golden.replace("100.0", "900.0")).contains("checksum"));
        assert!(told(&golden.replacen('1', "2", 1)).contains("version 2"));
        assert!(told(&golden[..golden.len() / 2]).contains("no kept plan"));
    }
}
