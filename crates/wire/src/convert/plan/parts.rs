//! The parts of a plan that are streamed, none larger than what any client takes.

use enolattice_plate::Plan;
use prost::Message;

use super::transfers::columns;
use crate::v1;
use crate::{MAX_TRANSFERS_OF_A_PART, PART_BYTES};

/// The wells of a plan, for `StreamWells`.
pub fn well_parts(plan: &Plan) -> Vec<v1::StreamWellsResponse> {
    let mut parts = Vec::new();
    for (plate_index, plate) in (0..).zip(&plan.plates) {
        for wells in by_size(plate.wells.iter().map(Into::into)) {
            parts.push(v1::StreamWellsResponse { plate_index, wells });
        }
    }
    parts
}

/// The stocks of a plan, for `StreamStocks`.
pub fn stock_parts(plan: &Plan) -> Vec<v1::StreamStocksResponse> {
    by_size(plan.stocks.iter().map(Into::into))
        .into_iter()
        .map(|stocks| v1::StreamStocksResponse { stocks })
        .collect()
}

/// The transfers of a plan, for `StreamTransfers`.
pub fn transfer_parts(plan: &Plan) -> Vec<v1::StreamTransfersResponse> {
    plan.transfers
        .chunks(MAX_TRANSFERS_OF_A_PART)
        .map(columns)
        .collect()
}

/// Messages in runs of about [`PART_BYTES`].
fn by_size<T: Message>(messages: impl Iterator<Item = T>) -> Vec<Vec<T>> {
    let (mut runs, mut bytes) = (Vec::new(), PART_BYTES);
    for message in messages {
        if bytes >= PART_BYTES {
            runs.push(Vec::new());
            bytes = 0;
        }
        bytes += message.encoded_len();
        if let Some(run) = runs.last_mut() {
            run.push(message);
        }
    }
    runs
}
