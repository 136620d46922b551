//! The record of a job in the journal, version 1.
//!
//! A JSON object `{version, crc32, job}`: `crc32` is over the text of `job`, so
//! that a changed digit or SMILES does not pass for the user's.

use std::sync::Arc;

use enolattice_grid::CampaignSpec;
use enolattice_model::Fingerprint;
use serde::{Deserialize, Serialize};
use serde_json::value::RawValue;
use sha2::{Digest, Sha256};

use crate::{JobKind, JobRecord, JobState, Terms};

/// Version of the record.
const VERSION: u32 = 1;

#[derive(Serialize, Deserialize)]
struct Envelope<'a> {
    version: u32,
    crc32: u32,
    #[serde(borrow)]
    job: &'a RawValue,
}

#[derive(Serialize, Deserialize)]
struct StoredJob {
    id: String,
    title: String,
    campaign_fingerprint: String,
    model_fingerprint: String,
    cells: u64,
    blocks: u64,
    request_id: String,
    request_digest: String,
    submitted_unix_ms: u64,
    ended_unix_ms: Option<u64>,
    state: String,
    committed_at_end: u64,
    failure: String,
    warnings: Vec<String>,
    generation: u32,
    campaign: Arc<CampaignSpec>,
    /// Records of jobs that screen have none.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    planning: Option<StoredPlanning>,
    #[serde(default, skip_serializing_if = "String::is_empty")]
    requester: String,
    #[serde(default)]
    priority: i32,
    #[serde(default)]
    not_before_unix_ms: Option<u64>,
    #[serde(default)]
    deadline_unix_ms: Option<u64>,
}

#[derive(Serialize, Deserialize)]
struct StoredPlanning {
    of: String,
    request: String,
}

/// The text of a record.
///
/// # Errors
/// What the JSON writer said; numbers that JSON has no word for (NaN, infinities) are written as null and refused on reading.
pub(crate) fn write(record: &JobRecord) -> Result<String, serde_json::Error> {
    let job = serde_json::value::to_raw_value(&StoredJob {
        id: record.id.to_string(),
        title: record.title.clone(),
        campaign_fingerprint: record.campaign_fingerprint.to_string(),
        model_fingerprint: record.model_fingerprint.to_string(),
        cells: record.cells,
        blocks: record.blocks,
        request_id: record.request_id.clone(),
        request_digest: record.request_digest.to_string(),
        submitted_unix_ms: record.submitted_unix_ms,
        ended_unix_ms: record.ended_unix_ms,
        state: record.state.name().into(),
        committed_at_end: record.committed_at_end,
        failure: record.failure.clone(),
        warnings: record.warnings.clone(),
        generation: record.generation,
        campaign: record.spec.clone(),
        planning: match &record.kind {
            JobKind::Screening => None,
            JobKind::Planning { of, request } => Some(StoredPlanning {
                of: of.to_string(),
                request: request.clone(),
            }),
        },
        requester: record.terms.requester.clone(),
        priority: record.terms.priority,
        not_before_unix_ms: record.terms.not_before_unix_ms,
        deadline_unix_ms: record.terms.deadline_unix_ms,
    })?;
    let crc32 = crc32fast::hash(job.get().as_bytes());
    serde_json::to_string(&Envelope {
        version: VERSION,
        crc32,
        job: &job,
    })
}

/// Reads a record.
///
/// # Errors
/// A sentence that says what is wrong with it.
pub(crate) fn read(text: &str) -> Result<JobRecord, String> {
    let envelope: Envelope<'_> =
        serde_json::from_str(text).map_err(|error| format!("it is no record of a job: {error}"))?;
    if envelope.version != VERSION {
        return Err(format!("its version {} is not known", envelope.version));
    }
    if crc32fast::hash(envelope.job.get().as_bytes()) != envelope.crc32 {
        return Err("its checksum does not match".into());
    }
    let job: StoredJob = serde_json::from_str(envelope.job.get())
        .map_err(|error| format!("it is no record of a job: {error}"))?;
    let id = |text: &str| {
        text.parse()
            .map_err(|_| format!("`{text}` is no id of a job"))
    };
    let kind = match job.planning {
        None => JobKind::Screening,
        Some(StoredPlanning { of, request }) => JobKind::Planning {
            of: id(&of)?,
            request,
        },
    };
    Ok(JobRecord {
        id: id(&job.id)?,
        title: job.title,
        spec: job.campaign,
        campaign_fingerprint: fingerprint(&job.campaign_fingerprint)?,
        model_fingerprint: fingerprint(&job.model_fingerprint)?,
        cells: job.cells,
        blocks: job.blocks,
        request_id: job.request_id,
        request_digest: fingerprint(&job.request_digest)?,
        submitted_unix_ms: job.submitted_unix_ms,
        ended_unix_ms: job.ended_unix_ms,
        state: JobState::from_name(&job.state)
            .ok_or_else(|| format!("`{}` is no state of a job", job.state))?,
        committed_at_end: job.committed_at_end,
        failure: job.failure,
        warnings: job.warnings,
        generation: job.generation,
        kind,
        terms: Terms {
            requester: job.requester,
            priority: job.priority,
            not_before_unix_ms: job.not_before_unix_ms,
            deadline_unix_ms: job.deadline_unix_ms,
        },
    })
}

/// SHA-256 over what a job is asked to do, as the journal would write it: its campaign, or the job that it plans from and the
/// plan's request.
///
/// # Errors
/// What the JSON writer said.
pub(crate) fn request_digest(
    spec: &CampaignSpec,
    kind: &JobKind,
) -> Result<Fingerprint, serde_json::Error> {
    let text = match kind {
        JobKind::Screening => serde_json::to_vec(spec)?,
        JobKind::Planning { of, request } => format!("{of} {request}").into_bytes(),
    };
    Ok(Fingerprint(Sha256::digest(text).into()))
}

fn fingerprint(text: &str) -> Result<Fingerprint, String> {
    let byte = |i: usize| {
        text.get(2 * i..2 * i + 2)
            .and_then(|hex| u8::from_str_radix(hex, 16).ok())
    };
    let mut bytes = [0; 32];
    for (i, target) in bytes.iter_mut().enumerate() {
        *target = byte(i).ok_or_else(|| format!("`{text}` is no fingerprint"))?;
    }
    Ok(Fingerprint(bytes))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// `testdata/job_v1.json` is a record as version 1 wrote it; it is never made anew.
    #[test]
    fn records_of_version_1_are_read_for_ever() {
        let record = read(include_str!("../testdata/job_v1.json")).unwrap();
        assert_eq!(record.id.to_string(), "06f3k8a5zr0q2");
        assert_eq!(record.title, "Invented aryl acetates");
        assert_eq!(record.state, JobState::DoneWithGaps);
        assert_eq!(
            (record.cells, record.blocks, record.committed_at_end),
            (24_576, 6, 5)
        );
        assert_eq!(record.request_id, "tuesday-1");
        assert_eq!(record.campaign_fingerprint, Fingerprint([0xab; 32]));
        assert_eq!(record.ended_unix_ms, Some(1_760_000_060_000));
        assert_eq!(record.warnings, ["one substrate given twice"]);
        assert_eq!(record.spec.substrates[0].smiles, "COC(=O)Cc1ccccc1");
        assert_eq!(record.spec.conditions.temperature_c, [-78.0, 0.1]);
        assert_eq!(read(&write(&record).unwrap()).unwrap(), record);
    }

    /// What a later version adds to a campaign is missing from the records of this one.
    #[test]
    fn a_campaign_without_some_of_its_fields_is_read() {
        let golden = include_str!("../testdata/job_v1.json");
        let whole = read(golden).unwrap();
        let (head, job) = golden.split_once("\"job\":").unwrap();
        let job = job
            .trim_end()
            .strip_suffix('}')
            .unwrap()
            .replace(r#""additives":{"all":false,"entries":[]},"#, "")
            .replace(r#""dosing_min":[],"#, "")
            .replace(r#""pka_sigma":null,"#, "");
        let crc32 = crc32fast::hash(job.as_bytes());
        assert!(job.len() + 50 < golden.len() - head.len());
        let older = format!(r#"{{"version":1,"crc32":{crc32},"job":{job}}}"#);
        assert_eq!(read(&older).unwrap(), whole);
    }

    #[test]
    fn a_changed_campaign_is_noticed() {
        let golden = include_str!("../testdata/job_v1.json");
        assert!(
            read(&golden.replace("-78.0", "-77.0"))
                .unwrap_err()
                .contains("checksum")
        );
        assert!(
            read(&golden.replacen("1", "2", 1))
                .unwrap_err()
                .contains("version 2")
        );
        assert!(read(&golden[..golden.len() / 2]).is_err());
    }
}
