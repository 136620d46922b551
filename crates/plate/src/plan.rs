//! A plan: plates, wells, stocks, transfers, masses, and what was checked.

use serde::{Deserialize, Serialize};

use crate::{
    Content, Dose, Finding, Movements, PlanRequest, PlateBalance, ProgramStep, Stock, Transfer,
    Well, WellMasses, Worth,
};

/// Stands on everything that is printed for the bench.
pub const PRECEDENCE: &str = "The supplier's safety data sheets, local rules and qualified staff take precedence over \
    everything that is said here; predictions and cautions are no substitute for a hazard assessment.";

/// A plan.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Plan {
    /// What takes precedence over the plan: [`PRECEDENCE`].
    pub precedence: String,
    /// Id by which it is kept; empty where it is not.
    pub id: String,
    /// When it was kept, milliseconds since 1970-01-01 UTC; 0 where it is not.
    pub made_unix_ms: u64,
    /// Title.
    pub title: String,
    /// Job whose ranking it was made from.
    pub job: String,
    /// Title of its campaign.
    pub campaign: String,
    /// Fingerprint of the model, hexadecimal.
    pub model: String,
    /// What was asked for, every default filled in.
    pub request: PlanRequest,
    /// Yield that makes a hit, 0–1.
    pub target: f64,
    /// Volume of each reaction, uL.
    pub volume_ul: f64,
    /// Plates.
    pub plates: Vec<Plate>,
    /// What the choice is worth beside others.
    pub gains: Gains,
    /// Cells that were left out before the choice, by reason.
    pub left_out: Vec<LeftOut>,
    /// Stocks.
    pub stocks: Vec<Stock>,
    /// The program of each plate.
    pub program: Vec<ProgramStep>,
    /// Transfers, in the order in which they are done.
    pub transfers: Vec<Transfer>,
    /// How often the head moves.
    pub movements: Movements,
    /// What was checked, worst first.
    pub findings: Vec<Finding>,
}

impl Plan {
    /// All wells of all plates.
    pub fn wells(&self) -> impl Iterator<Item = (&Plate, &PlannedWell)> {
        self.plates
            .iter()
            .flat_map(|plate| plate.wells.iter().map(move |well| (plate, well)))
    }
}

/// A plate of a plan.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Plate {
    /// Name.
    pub name: String,
    /// Temperature of the reaction, °C.
    pub temperature_c: f64,
    /// Temperature of the deprotonation, °C.
    pub formation_temperature_c: f64,
    /// Time after the electrophile, h.
    pub time_h: f64,
    /// Time over which the electrophile is added, min.
    pub dosing_min: f64,
    /// Wells, in the order of the plate.
    pub wells: Vec<PlannedWell>,
    /// How even the layout is.
    pub balance: PlateBalance,
}

/// A well of a plan.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct PlannedWell {
    /// Well.
    pub well: Well,
    /// What it is there for.
    pub content: Content,
    /// Number of its cell in the job.
    pub cell: u64,
    /// Which replicate of the cell it is, from 1.
    pub replicate: u32,
    /// Substrate.
    pub substrate: Option<Reagent>,
    /// Base.
    pub base: Option<Reagent>,
    /// Electrophile.
    pub electrophile: Option<Reagent>,
    /// Additive.
    pub additive: Option<Reagent>,
    /// Solvent of the cell.
    pub solvent: String,
    /// Order of addition.
    pub addition: String,
    /// What the well gets of each stock.
    pub doses: Vec<Dose>,
    /// Solvents as they are dosed, volume fractions, largest first.
    pub medium: Vec<(String, f64)>,
    /// Mean yield over the joint draws, 0–1; none of a control.
    pub expected_yield: Option<f64>,
    /// Share of the joint draws that reach the target.
    pub p_hit: Option<f64>,
    /// Mean yield in the medium as it is dosed, where that differs from the cell's solvent.
    pub yield_as_dosed: Option<f64>,
    /// Yield of the stiff reference at the mean of all parameters; none where it gives up.
    pub reference_yield: Option<f64>,
    /// Water in the well, equivalents on the base; none without a base.
    pub water_per_base: Option<f64>,
    /// Cautions of the cell, severest first: severity, category, reason.
    pub cautions: Vec<WellCaution>,
    /// What the LC-MS may find; the share of what may be there in an unknown amount is 0.
    pub masses: WellMasses,
    /// What the user said of the cell.
    pub note: String,
}

/// A reagent of a well.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Reagent {
    /// Name.
    pub name: String,
    /// SMILES.
    pub smiles: String,
    /// Amount, umol.
    pub amount_umol: f64,
    /// Equivalents on substrate.
    pub equiv: f64,
}

/// A caution of a well.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct WellCaution {
    /// Severity: note, warning or stop.
    pub severity: String,
    /// Category.
    pub category: String,
    /// Reason.
    pub text: String,
    /// Who says so.
    pub source: String,
}

/// Cells that were left out before the choice.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct LeftOut {
    /// Why.
    pub reason: String,
    /// How many.
    pub cells: u64,
}

/// What a choice is worth beside others of as many cells.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Gains {
    /// The plan's.
    pub chosen: Worth,
    /// A choice without limits, pins and whole-plate conditions.
    pub unlimited: Worth,
    /// The best of the ranking.
    pub top_list: Worth,
    /// Mean of random sets of the job's cells.
    pub random: Worth,
    /// Weighted worth of the unlimited choice, the top list and random sets, relative to the plan's.
    pub relative: [f64; 3],
    /// The plan's weighted worth is at least this share of the best that any set of the shortlist could have, 0–1.
    pub at_least_of_best: f64,
    /// Cells of the shortlist.
    pub shortlist: usize,
    /// Joint draws.
    pub draws: usize,
    /// Cells that exchange has put in the place of greedily chosen ones.
    pub exchanged: usize,
}

#[cfg(test)]
mod tests {
    use super::*;

    /// `testdata/plan_document_v1.json` is a plan as the first version that kept plans wrote it, its lists cut short; it is never
    /// made anew.
    #[test]
    fn kept_plans_are_read_for_ever() {
        let golden = include_str!("../testdata/plan_document_v1.json");
        let plan: Plan = serde_json::from_str(golden).unwrap();
        assert_eq!(plan.campaign, "Invented, small");
        assert_eq!(plan.request.plates.wells.wells(), 24);
        let well = &plan.plates[0].wells[0];
        assert_eq!(
            (well.well.to_string().as_str(), well.solvent.as_str()),
            ("A1", "THF")
        );
        // nothing that was written is lost
        let written: serde_json::Value = serde_json::from_str(golden).unwrap();
        let again = serde_json::to_value(&plan).unwrap();
        assert_eq!(kept(&written, &again), Vec::<String>::new());
    }

    /// Paths of what stands in the first document and not, or otherwise, in the second.
    fn kept(written: &serde_json::Value, again: &serde_json::Value) -> Vec<String> {
        use serde_json::Value::{Array, Object};
        let within = |name: &str, lost: Vec<String>| -> Vec<String> {
            lost.iter().map(|path| format!("{name}/{path}")).collect()
        };
        match (written, again) {
            (Object(written), Object(again)) => written
                .iter()
                .flat_map(|(name, value)| match again.get(name) {
                    Some(again) => within(name, kept(value, again)),
                    None => vec![name.clone()],
                })
                .collect(),
            (Array(written), Array(again)) if written.len() == again.len() => written
                .iter()
                .zip(again)
                .enumerate()
                .flat_map(|(i, (value, again))| within(&i.to_string(), kept(value, again)))
                .collect(),
            (written, again) if written == again => Vec::new(),
            (written, again) => vec![format!("{written} became {again}")],
        }
    }
}
