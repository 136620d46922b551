//! A campaign as one message or, where it is too large, as a stream of parts.

use prost::Message;

use crate::v1::submit_job_stream_request::Part;
use crate::{MAX_MESSAGE_BYTES, v1};

/// Bytes of values in one part: well below the limit of a message.
const PART_BYTES: usize = MAX_MESSAGE_BYTES / 4;

/// How a submission travels.
pub(super) enum Upload {
    /// In one message.
    One(Box<v1::SubmitJobRequest>),
    /// As a header and chunks of its large lists.
    Stream(Vec<v1::SubmitJobStreamRequest>),
}

/// Cuts a submission into parts if it is too large for one message.
pub(super) fn parts(mut request: v1::SubmitJobRequest) -> Upload {
    if request.encoded_len() <= MAX_MESSAGE_BYTES {
        return Upload::One(Box::new(request));
    }
    let (mut substrates, mut electrophiles, mut measured) = (Vec::new(), Vec::new(), Vec::new());
    if let Some(campaign) = &mut request.campaign {
        substrates = std::mem::take(&mut campaign.substrates);
        measured = std::mem::take(&mut campaign.measured);
        if let Some(axis) = &mut campaign.electrophiles {
            electrophiles = std::mem::take(&mut axis.reagents);
        }
    }
    let mut parts = vec![part(Part::Header(request))];
    let mut send = |chunk| parts.push(part(Part::Chunk(chunk)));
    for substrates in runs(substrates) {
        send(v1::AxisChunk {
            substrates,
            ..Default::default()
        });
    }
    for electrophiles in runs(electrophiles) {
        send(v1::AxisChunk {
            electrophiles,
            ..Default::default()
        });
    }
    for measured in runs(measured) {
        send(v1::AxisChunk {
            measured,
            ..Default::default()
        });
    }
    Upload::Stream(parts)
}

fn part(part: Part) -> v1::SubmitJobStreamRequest {
    v1::SubmitJobStreamRequest { part: Some(part) }
}

/// Runs of values of about [`PART_BYTES`] each.
fn runs<M: Message>(values: Vec<M>) -> Vec<Vec<M>> {
    let mut runs: Vec<Vec<M>> = Vec::new();
    let mut bytes = PART_BYTES;
    for value in values {
        bytes += value.encoded_len();
        match runs.last_mut() {
            Some(run) if bytes <= PART_BYTES => run.push(value),
            _ => {
                bytes = value.encoded_len();
                runs.push(vec![value]);
            }
        }
    }
    runs
}

#[cfg(test)]
mod tests {
    use super::*;

    fn request(rows: usize) -> v1::SubmitJobRequest {
        let substrate = |i| v1::Substrate {
            name: format!("substrate {i}"),
            smiles: "C".repeat(1000),
            ..Default::default()
        };
        let measured = |i| v1::MeasuredYield {
            substrate: format!("substrate {i}"),
            ..Default::default()
        };
        v1::SubmitJobRequest {
            campaign: Some(v1::Campaign {
                substrates: (0..rows).map(substrate).collect(),
                measured: (0..rows).map(measured).collect(),
                ..Default::default()
            }),
            ..Default::default()
        }
    }

    #[test]
    fn small_campaigns_go_in_one_message() {
        assert!(matches!(parts(request(1000)), Upload::One(_)));
    }

    #[test]
    fn large_campaigns_keep_every_value_in_order() {
        let Upload::Stream(parts) = parts(request(20_000)) else {
            panic!("20 MB do not fit into a message");
        };
        assert!(matches!(parts[0].part, Some(Part::Header(_))));
        let (mut names, mut measured) = (Vec::new(), Vec::new());
        for part in parts {
            assert!(part.encoded_len() <= MAX_MESSAGE_BYTES / 2);
            if let Some(Part::Chunk(chunk)) = part.part {
                names.extend(chunk.substrates.into_iter().map(|substrate| substrate.name));
                measured.extend(chunk.measured.into_iter().map(|row| row.substrate));
            }
        }
        let expected: Vec<_> = (0..20_000).map(|i| format!("substrate {i}")).collect();
        assert_eq!(names, expected);
        assert_eq!(measured, expected);
    }
}
