//! The same campaign gives the same bytes on any machine with any number of threads.

use std::sync::Arc;

use enolattice_grid::{AxisSpec, Campaign, CampaignSpec, ConditionsSpec, Grid};
use enolattice_model::Model;
use enolattice_reagents::Library;
use rayon::prelude::*;
use sha2::{Digest, Sha256};

use crate::campaigns::{library, substrates};

/// SHA-256 of the columns of all blocks, hexadecimal, as some machine of ours gave it.
const KEPT: &str = include_str!("small_campaign.sha256");
/// Where it is written with this variable of the environment set to anything.
const RENEW: &str = "ENOLATTICE_RENEW_CHECKSUM";

/// 12 substrates of all kinds × 6 electrophiles × 12 bases × 10 solvents at one condition: 8,640
/// cells in three blocks.
fn campaign() -> CampaignSpec {
    CampaignSpec {
        title: "A little of everything".into(),
        substrates: substrates(&[
            "CC(=O)c1ccccc1",
            "CC1CCCCC1=O",
            "CCOC(=O)Cc1ccccc1",
            "O=C1CCCCO1",
            "CC(=O)N(C)C",
            "CCCC#N",
            "CCOC(=O)CC(C)=O",
            "CCOC(=O)CC(=O)OCC",
            "CC[N+](=O)[O-]",
            "CS(=O)(=O)c1ccccc1",
            "CC(C)C=O",
            "CC(=O)Cc1ccc(O)cc1",
        ]),
        bases: library(&[
            "LDA", "LiHMDS", "NaHMDS", "KHMDS", "KOtBu", "NaOEt", "NaH", "K2CO3", "Cs2CO3", "DBU",
            "Et3N", "NaOH",
        ]),
        electrophiles: library(&[
            "MeI",
            "iPrBr",
            "BnBr",
            "allyl bromide",
            "methyl acrylate",
            "benzaldehyde",
        ]),
        solvents: library(&[
            "THF", "Et2O", "toluene", "DCM", "DMF", "DMSO", "MeCN", "acetone", "EtOH", "water",
        ]),
        additives: AxisSpec::default(),
        conditions: ConditionsSpec {
            temperature_c: vec![0.0],
            ..ConditionsSpec::default()
        },
        ..CampaignSpec::default()
    }
}

fn checksum(threads: usize) -> String {
    let library = Library::builtin().expect("the tables are sound");
    let model = Arc::new(Model::new(Arc::new(library)));
    let campaign = Campaign::new(&campaign(), &model).expect("a sound campaign");
    let grid = Grid::new(campaign, model).expect("a grid within limits");
    let blocks: Vec<_> = grid.blocks().collect();
    assert!(blocks.len() > 2, "each thread has a block");
    let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build();
    let columns: Vec<Vec<u8>> = pool.expect("threads").install(|| {
        blocks
            .par_iter()
            .map(|block| grid.score(*block).to_bytes())
            .collect()
    });
    let digest = Sha256::digest(columns.concat());
    digest.iter().map(|byte| format!("{byte:02x}")).collect()
}

#[test]
fn a_small_campaign_has_the_same_bytes_everywhere() {
    let (one, two) = (checksum(1), checksum(2));
    assert_eq!(one, two, "one thread and two");
    if std::env::var_os(RENEW).is_some() {
        let file = concat!(env!("CARGO_MANIFEST_DIR"), "/system/small_campaign.sha256");
        std::fs::write(file, format!("{one}\n")).expect("written");
        return;
    }
    assert_eq!(
        one,
        KEPT.trim(),
        "scores have changed. If the model was changed on purpose, raise ARITHMETIC_VERSION unless \
         its data or parameters changed too, and write the new checksum: \
         {RENEW}=1 cargo test -p enolattice-tests portable. If not, find out what is not portable"
    );
}
