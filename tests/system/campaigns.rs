//! Campaigns of these tests.

use enolattice_engine::Submission;
use enolattice_grid::{AxisSpec, CampaignSpec, ConditionsSpec, Entry, SubstrateEntry, TargetSpec};

/// An axis of reagents of the library.
pub(crate) fn library(names: &[&str]) -> AxisSpec {
    let entry = |name: &&str| Entry {
        name: (*name).to_owned(),
        ..Entry::default()
    };
    AxisSpec {
        all: false,
        entries: names.iter().map(entry).collect(),
    }
}

/// Substrates by SMILES.
pub(crate) fn substrates(smiles: &[&str]) -> Vec<SubstrateEntry> {
    let entry = |smiles: &&str| SubstrateEntry {
        name: (*smiles).to_owned(),
        smiles: (*smiles).to_owned(),
        ..SubstrateEntry::default()
    };
    smiles.iter().map(entry).collect()
}

/// 2 substrates × 3 bases × 2 electrophiles × 2 solvents.
pub(crate) fn small() -> CampaignSpec {
    CampaignSpec {
        title: "An ester and a ketone".into(),
        substrates: substrates(&["CCOC(=O)Cc1ccccc1", "O=C1CCCCC1"]),
        bases: library(&["LDA", "KOtBu", "Et3N"]),
        electrophiles: library(&["MeI", "BnBr"]),
        solvents: library(&["THF", "DMF"]),
        conditions: ConditionsSpec {
            temperature_c: vec![-20.0],
            formation_temperature_c: vec![-78.0],
            ..ConditionsSpec::default()
        },
        target: TargetSpec {
            yield_at_least: Some(0.5),
        },
        ..CampaignSpec::default()
    }
}

/// The small campaign at many temperatures and concentrations: 24 × 100 × `concentrations` cells.
pub(crate) fn long(concentrations: u32) -> CampaignSpec {
    let mut campaign = small();
    campaign.title = "The same, at many conditions".into();
    campaign.conditions.temperature_c = (0..100).map(|i| -40.0 + f64::from(i)).collect();
    campaign.conditions.concentration_m =
        (1..=concentrations).map(|i| 0.005 * f64::from(i)).collect();
    campaign
}

/// A submission without request id.
pub(crate) fn submission(campaign: CampaignSpec) -> Submission {
    Submission {
        campaign,
        request_id: String::new(),
        validate_only: false,
        terms: enolattice_engine::Terms::default(),
    }
}
