//! A campaign put together from a stream.

use enolattice_wire::v1::submit_job_stream_request::Part;
use enolattice_wire::v1::{self, ErrorReason};
use enolattice_wire::{MAX_STREAMED_CAMPAIGN_BYTES, bad_field};
use prost::Message;
use tokio_stream::{Stream, StreamExt};
use tonic::Status;

use crate::status::Refusal;

/// Puts the parts of a submission together.
///
/// The outer error is that of the stream itself, passed on as it is.
pub(crate) async fn collect(
    mut parts: impl Stream<Item = Result<v1::SubmitJobStreamRequest, Status>> + Unpin,
) -> Result<Result<v1::SubmitJobRequest, Refusal>, Status> {
    let mut submission: Option<v1::SubmitJobRequest> = None;
    let mut bytes = 0;
    while let Some(message) = parts.next().await {
        let message = message?;
        bytes += message.encoded_len();
        if bytes > MAX_STREAMED_CAMPAIGN_BYTES {
            return Ok(Err(Refusal::TooLarge {
                limit_bytes: MAX_STREAMED_CAMPAIGN_BYTES,
            }));
        }
        match (message.part, &mut submission) {
            (Some(Part::Header(header)), None) => submission = Some(header),
            (Some(Part::Chunk(chunk)), Some(submission)) => append(submission, chunk),
            (Some(Part::Header(_)), Some(_)) => {
                return Ok(Err(out_of_place("header", "the header comes once, first")));
            }
            (Some(Part::Chunk(_)), None) => {
                return Ok(Err(out_of_place("chunk", "the header comes first")));
            }
            (None, _) => return Ok(Err(out_of_place("part", "the message is empty"))),
        }
    }
    Ok(submission.ok_or_else(|| out_of_place("header", "the stream is empty")))
}

fn append(submission: &mut v1::SubmitJobRequest, chunk: v1::AxisChunk) {
    let campaign = submission.campaign.get_or_insert_default();
    campaign.substrates.extend(chunk.substrates);
    let electrophiles = campaign.electrophiles.get_or_insert_default();
    electrophiles.reagents.extend(chunk.electrophiles);
    campaign.measured.extend(chunk.measured);
}

fn out_of_place(part: &str, why: &str) -> Refusal {
    let remedy = "send one header, then chunks";
    Refusal::from(vec![bad_field(
        ErrorReason::ValueMissing,
        part,
        "",
        why,
        remedy,
    )])
}

#[cfg(test)]
mod tests {
    use super::*;

    fn header(substrate: &str) -> Part {
        let substrates = vec![named(substrate)];
        let campaign = v1::Campaign {
            substrates,
            ..Default::default()
        };
        Part::Header(v1::SubmitJobRequest {
            campaign: Some(campaign),
            ..Default::default()
        })
    }

    fn chunk(substrate: &str, electrophile: &str) -> Part {
        let reagent = v1::Reagent {
            name: electrophile.into(),
            ..Default::default()
        };
        let measured = v1::MeasuredYield {
            substrate: substrate.into(),
            ..Default::default()
        };
        Part::Chunk(v1::AxisChunk {
            substrates: vec![named(substrate)],
            electrophiles: vec![reagent],
            measured: vec![measured],
        })
    }

    fn named(name: &str) -> v1::Substrate {
        v1::Substrate {
            name: name.into(),
            ..Default::default()
        }
    }

    async fn collected(parts: Vec<Part>) -> Result<v1::SubmitJobRequest, Refusal> {
        let messages = parts
            .into_iter()
            .map(|part| v1::SubmitJobStreamRequest { part: Some(part) });
        collect(tokio_stream::iter(messages.map(Ok)))
            .await
            .expect("the stream is sound")
    }

    #[tokio::test]
    async fn chunks_are_appended_in_order() {
        let request = collected(vec![header("a"), chunk("b", "x"), chunk("c", "y")]).await;
        let campaign = request.expect("is sound").campaign.expect("a campaign");
        let substrates: Vec<_> = campaign
            .substrates
            .iter()
            .map(|s| s.name.as_str())
            .collect();
        let measured: Vec<_> = campaign
            .measured
            .iter()
            .map(|row| row.substrate.as_str())
            .collect();
        assert_eq!(measured, ["b", "c"]);
        let electrophiles = campaign.electrophiles.expect("an axis").reagents;
        assert_eq!(substrates, ["a", "b", "c"]);
        assert_eq!(
            electrophiles
                .iter()
                .map(|e| e.name.as_str())
                .collect::<Vec<_>>(),
            ["x", "y"]
        );
    }

    #[tokio::test]
    async fn parts_out_of_place_are_refused() {
        for parts in [
            vec![],
            vec![chunk("b", "x")],
            vec![header("a"), header("b")],
        ] {
            assert!(matches!(collected(parts).await, Err(Refusal::Input(_))));
        }
    }

    #[tokio::test]
    async fn a_stream_beyond_the_limit_is_refused() {
        let name = "x".repeat(1 << 20);
        let mut parts = vec![header("a")];
        parts.extend((0..65).map(|_| chunk(&name, "")));
        assert!(matches!(
            collected(parts).await,
            Err(Refusal::TooLarge { .. })
        ));
    }
}
