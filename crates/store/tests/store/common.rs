//! Synthetic jobs and blocks for the tests of the store.

use std::path::Path;

use enolattice_grid::{BlockId, CampaignSpec, Columns};
use enolattice_model::Fingerprint;
use enolattice_store::{JobKind, NewJob, Store, Terms};

/// Time at which tests begin, milliseconds since 1970.
pub(crate) const START_MS: u64 = 1_760_000_000_000;
/// Cells of a synthetic block.
pub(crate) const CELLS: u64 = 500;

/// A store that opens without anything to report.
pub(crate) fn open(dir: &Path) -> Store {
    let (store, report) = Store::open(dir, START_MS).unwrap();
    assert_eq!(report.sentences(), Vec::<String>::new());
    store
}

/// A job of 40 synthetic blocks.
pub(crate) fn new_job(title: &str, request_id: &str) -> NewJob {
    NewJob {
        spec: CampaignSpec {
            title: title.into(),
            ..CampaignSpec::default()
        },
        campaign_fingerprint: Fingerprint([1; 32]),
        model_fingerprint: Fingerprint([2; 32]),
        cells: 40 * CELLS,
        blocks: 40,
        request_id: request_id.into(),
        warnings: vec!["invented".into()],
        kind: JobKind::Screening,
        terms: Terms::default(),
    }
}

/// The `index`-th block.
pub(crate) fn block(index: u32) -> BlockId {
    BlockId { segment: 0, index }
}

/// Scores that look random but depend on the cell's number alone, with ties and unknowns.
pub(crate) fn columns(first_cell: u64, cells: u64) -> Columns {
    let mut columns = Columns::default();
    for cell in first_cell..first_cell + cells {
        let noise = noise(cell);
        let unknown = noise.is_multiple_of(11);
        columns.expected_yield.push(if unknown {
            u16::MAX
        } else {
            (noise >> 8) as u16 % 300 * 218
        });
        columns.p_hit.push(if unknown {
            u16::MAX
        } else {
            ((noise >> 24) as u16).min(65534)
        });
        columns.selectivity.push(if unknown {
            u8::MAX
        } else {
            (noise >> 40) as u8 % 20
        });
        columns.feasibility.push((noise >> 48) as u8);
        columns.largest_loss.push((noise >> 52) as u8 % 18);
        columns.cautions.push((noise >> 30) as u32);
    }
    columns
}

/// splitmix64 (Steele, Lea, Flood 2014, doi:10.1145/2660193.2660195).
pub(crate) fn noise(cell: u64) -> u64 {
    let mut z = cell.wrapping_add(1).wrapping_mul(0x9e37_79b9_7f4a_7c15);
    z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
    z ^ (z >> 31)
}
