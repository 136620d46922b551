//! Transfers for the robot's planner, and the program of a plate.

use std::collections::BTreeMap;

use enolattice_model::Addition;
use serde::{Deserialize, Serialize};

use crate::stocks::{Dose, Stock, Supply};
use crate::{Deck, Form, Recipe, Role, Well};

/// One movement of liquid.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Transfer {
    /// Order group: all transfers of a group are done before the next group begins.
    pub group: u32,
    /// Plate that it is taken from.
    pub source_plate: String,
    /// Well that it is taken from.
    pub source_well: Well,
    /// Plate that it goes to.
    pub plate: String,
    /// Well that it goes to.
    pub well: Well,
    /// Volume, nL.
    pub volume_nl: f64,
    /// What is moved.
    pub liquid: String,
    /// Index of its stock; none of a sample.
    pub stock: Option<usize>,
}

/// A step of a plate's program.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ProgramStep {
    /// Plate.
    pub plate: String,
    /// Order group of the transfers of this step; none where nothing is moved.
    pub group: Option<u32>,
    /// What is done.
    pub what: String,
    /// Temperature of the block, °C.
    pub temperature_c: f64,
    /// Time after it, min.
    pub wait_min: f64,
}

/// Order groups of a plate.
const SOLVENT: u32 = 1;
const ADDITIVE: u32 = 2;
const FIRST: u32 = 3;
const SECOND: u32 = 4;
const ELECTROPHILE: u32 = 5;
const QUENCH: u32 = 6;
const DILUENT: u32 = 7;
const SAMPLE: u32 = 8;
/// Groups of a plate, so that those of the next begin after them.
const GROUPS: u32 = 8;

/// Name of a plate from its number.
pub(crate) fn plate_name(plate: usize) -> String {
    format!("plate {}", plate + 1)
}

fn analysis_name(plate: usize) -> String {
    format!("analysis {}", plate + 1)
}

impl Role {
    /// Order group of what has this role, from 1, in the order of addition of its well.
    pub fn order_group(self, addition: Addition) -> u32 {
        match (self, addition) {
            (Role::Solvent, _) => SOLVENT,
            (Role::Additive, _) => ADDITIVE,
            (Role::Base, Addition::SubstrateIntoBase) => FIRST,
            (Role::Substrate, Addition::SubstrateIntoBase) => SECOND,
            (Role::Substrate, _) => FIRST,
            (Role::Base, Addition::BaseIntoSubstrate) => SECOND,
            // what must not wait for anything comes last
            (Role::Electrophile, Addition::AllTogether) => SECOND,
            (Role::Base, Addition::AllTogether) => ELECTROPHILE,
            (Role::Electrophile, _) => ELECTROPHILE,
            (Role::Quench, _) => QUENCH,
            (Role::Diluent, _) => DILUENT,
        }
    }
}

/// All transfers in the order in which they are done: by plate and order group, then source by source, so that a tip that
/// has taken a liquid up serves all its wells.
pub(crate) fn transfers(
    recipes: &[Recipe],
    supply: &mut Supply,
    sample_nl: f64,
    deck: &Deck,
) -> Vec<Transfer> {
    let mut wanted: Vec<(Turn, usize, f64)> = Vec::new();
    for (recipe, doses) in recipes.iter().zip(&supply.doses) {
        for dose in doses.iter().filter(|dose| dose.volume_nl > 0.0) {
            let turn = Turn::of(recipe, supply.stocks[dose.stock].role);
            wanted.push((turn, dose.stock, dose.volume_nl));
        }
    }
    wanted.sort_by_key(|&(turn, stock, _)| (turn.plate, turn.group, stock, turn));
    let mut transfers = Vec::new();
    let mut levels = Levels::default();
    for (turn, stock, volume_nl) in wanted {
        let of = &mut supply.stocks[stock];
        let is_diluent = of.role == Role::Diluent;
        let plate = turn.plate;
        for volume_nl in split(volume_nl, deck) {
            let source = levels.draw(stock, of, volume_nl, deck);
            transfers.push(Transfer {
                group: GROUPS * plate as u32 + turn.group,
                source_plate: of.sources[source].plate.clone(),
                source_well: of.sources[source].well,
                plate: if is_diluent {
                    analysis_name(plate)
                } else {
                    plate_name(plate)
                },
                well: turn.well(),
                volume_nl,
                liquid: of.reagent.clone(),
                stock: Some(stock),
            });
        }
    }
    if sample_nl > 0.0 {
        transfers.extend(recipes.iter().map(|recipe| Transfer {
            group: GROUPS * recipe.plate as u32 + SAMPLE,
            source_plate: plate_name(recipe.plate),
            source_well: recipe.well,
            plate: analysis_name(recipe.plate),
            well: recipe.well,
            volume_nl: sample_nl,
            liquid: "sample".to_owned(),
            stock: None,
        }));
    }
    transfers.sort_by_key(|transfer| transfer.group);
    transfers
}

/// When a well gets a dose: plate by plate, group by group, column by column.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
struct Turn {
    plate: usize,
    group: u32,
    column: u8,
    row: u8,
}

impl Turn {
    fn of(recipe: &Recipe, role: Role) -> Turn {
        Turn {
            plate: recipe.plate,
            group: role.order_group(recipe.addition()),
            column: recipe.well.column,
            row: recipe.well.row,
        }
    }

    fn well(self) -> Well {
        Well {
            row: self.row,
            column: self.column,
        }
    }
}

/// What each source well of a stock gives, uL: filled up one after the other in the order of the transfers, so that none
/// has to give what it no longer holds. One source well at least.
pub(crate) fn source_wells(
    stock: usize,
    role: Role,
    recipes: &[Recipe],
    doses: &[Vec<Dose>],
    deck: &Deck,
) -> Vec<f64> {
    let mut draws: Vec<(Turn, f64)> = Vec::new();
    for (recipe, doses) in recipes.iter().zip(doses) {
        let of_stock = doses.iter().filter(|dose| dose.stock == stock);
        draws.extend(of_stock.map(|dose| (Turn::of(recipe, role), dose.volume_nl)));
    }
    draws.sort_by_key(|&(turn, _)| turn);
    let mut wells = vec![0.0];
    for volume_nl in draws.into_iter().flat_map(|(_, nl)| split(nl, deck)) {
        let last = wells.len() - 1;
        if has_room(wells[last], volume_nl, deck) {
            wells[last] += volume_nl / 1000.0;
        } else {
            wells.push(volume_nl / 1000.0);
        }
    }
    wells
}

/// Whether a source well that has given so much, uL, can give this much more and keep its excess.
fn has_room(taken_ul: f64, volume_nl: f64, deck: &Deck) -> bool {
    taken_ul + volume_nl / 1000.0 <= deck.source_room_ul() + 1e-9
}

/// Which source well of each stock is drawn on.
#[derive(Default)]
struct Levels {
    current: BTreeMap<usize, usize>,
}

impl Levels {
    /// The source well that still holds enough, and takes the volume from it.
    fn draw(&mut self, stock: usize, of: &mut Stock, volume_nl: f64, deck: &Deck) -> usize {
        let at = self.current.entry(stock).or_default();
        if !has_room(of.sources[*at].taken_ul, volume_nl, deck) {
            *at += 1;
        }
        of.sources[*at].taken_ul += volume_nl / 1000.0;
        *at
    }
}

/// A volume in transfers of what the head and a source well hold at most, none below the deck's smallest.
fn split(volume_nl: f64, deck: &Deck) -> Vec<f64> {
    let largest_nl = deck.largest_nl.min(1000.0 * deck.source_room_ul());
    let n = (volume_nl / largest_nl - 1e-9).ceil().max(1.0);
    let each = (volume_nl / n / deck.step_nl).floor() * deck.step_nl;
    let mut left = volume_nl - each * n;
    let part = |_| {
        let more = left.min(deck.step_nl);
        left -= more;
        each + more
    };
    let parts = (0..n as usize).map(part);
    parts.filter(|part| *part > 0.0).collect()
}

/// Movements of the head. A naive list has one uptake for each transfer.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Movements {
    /// Uptakes when one serves as many wells as it holds liquid for.
    pub uptakes: usize,
    /// Deliveries: wells of a column that get the same volume of the same liquid count once for a multichannel head.
    pub deliveries: usize,
    /// Transfers.
    pub transfers: usize,
}

/// Counts what the head does.
pub(crate) fn movements(transfers: &[Transfer], deck: &Deck) -> Movements {
    let mut uptakes = 0;
    let mut in_tip: (Option<(u32, &str, Well)>, f64) = (None, 0.0);
    for transfer in transfers {
        let from = Some((
            transfer.group,
            transfer.source_plate.as_str(),
            transfer.source_well,
        ));
        if in_tip.0 != from || in_tip.1 < transfer.volume_nl {
            uptakes += 1;
            in_tip = (from, deck.largest_nl);
        }
        in_tip.1 -= transfer.volume_nl;
    }
    let mut columns: BTreeMap<(u32, &str, Well, &str, u8, u64), usize> = BTreeMap::new();
    for transfer in transfers {
        let key = (
            transfer.group,
            transfer.source_plate.as_str(),
            transfer.source_well,
            transfer.plate.as_str(),
            transfer.well.column,
            transfer.volume_nl.to_bits(),
        );
        *columns.entry(key).or_default() += 1;
    }
    let deliveries = columns
        .values()
        .map(|n| n.div_ceil(deck.channels as usize))
        .sum();
    Movements {
        uptakes,
        deliveries,
        transfers: transfers.len(),
    }
}

/// Time for which the deprotonation is left to itself before the electrophile comes, min: as the model takes it.
const FORMING_MIN: f64 = 20.0;

/// The program of each plate. All its wells have the same temperatures and times.
pub(crate) fn program(recipes: &[Recipe], supply: &Supply, sample_nl: f64) -> Vec<ProgramStep> {
    let mut steps = Vec::new();
    let plates = recipes
        .iter()
        .map(|recipe| recipe.plate)
        .max()
        .map_or(0, |last| last + 1);
    for plate in 0..plates {
        let on_plate = recipes.iter().filter(|recipe| recipe.plate == plate);
        let Some(first) = on_plate.clone().next() else {
            continue;
        };
        let conditions = &first.cell.conditions;
        let (forming_c, reacting_c) =
            (conditions.formation_temperature_c, conditions.temperature_c);
        let has = |group_wanted: u32| {
            recipes.iter().zip(&supply.doses).any(|(recipe, doses)| {
                recipe.plate == plate
                    && doses.iter().any(|dose| {
                        let role = supply.stocks[dose.stock].role;
                        dose.volume_nl > 0.0 && role.order_group(recipe.addition()) == group_wanted
                    })
            })
        };
        let mut step = |group: Option<u32>, what: String, temperature_c: f64, wait_min: f64| {
            steps.push(ProgramStep {
                plate: plate_name(plate),
                group: group.map(|group| GROUPS * plate as u32 + group),
                what,
                temperature_c,
                wait_min,
            });
        };
        let has_solid = recipes.iter().zip(&supply.doses).any(|(recipe, doses)| {
            recipe.plate == plate
                && doses
                    .iter()
                    .any(|dose| supply.stocks[dose.stock].form == Form::Solid)
        });
        if has_solid {
            step(
                None,
                "weigh the solids into their wells".to_owned(),
                25.0,
                0.0,
            );
        }
        step(
            Some(SOLVENT),
            "solvent into all wells".to_owned(),
            25.0,
            0.0,
        );
        if has(ADDITIVE) {
            step(Some(ADDITIVE), "additives".to_owned(), 25.0, 0.0);
        }
        if forming_c != 25.0 {
            step(
                None,
                "bring the block to temperature".to_owned(),
                forming_c,
                15.0,
            );
        }
        step(
            Some(FIRST),
            "first reagent of each well: base or substrate".to_owned(),
            forming_c,
            0.0,
        );
        step(
            Some(SECOND),
            "second reagent of each well: substrate, base or electrophile".to_owned(),
            forming_c,
            FORMING_MIN,
        );
        if reacting_c != forming_c {
            step(
                None,
                "bring the block to temperature".to_owned(),
                reacting_c,
                10.0,
            );
        }
        let dosing = conditions.dosing_min;
        step(
            Some(ELECTROPHILE),
            format!(
                "last reagent of each well (electrophile, or base where all come together), within {dosing} min"
            ),
            reacting_c,
            conditions.time_h * 60.0,
        );
        step(
            Some(QUENCH),
            "quench at this temperature; the plate open to the extraction, for gas may come"
                .to_owned(),
            reacting_c,
            10.0,
        );
        if has(DILUENT) {
            step(
                Some(DILUENT),
                "diluent with internal standard on the analysis plate".to_owned(),
                25.0,
                0.0,
            );
        }
        if sample_nl > 0.0 {
            step(
                Some(SAMPLE),
                "sample of each well to the same well of the analysis plate".to_owned(),
                25.0,
                0.0,
            );
        }
    }
    steps
}

/// Time from the first to the last well of an order group, s.
pub(crate) fn duration_s(transfers: &[Transfer], group: u32, deck: &Deck) -> f64 {
    let of_group: Vec<Transfer> = transfers
        .iter()
        .filter(|transfer| transfer.group == group)
        .cloned()
        .collect();
    movements(&of_group, deck).deliveries as f64 * deck.seconds_per_transfer
}

/// Order group of the last reagent on a plate.
pub(crate) fn last_reagent(plate: usize) -> u32 {
    GROUPS * plate as u32 + ELECTROPHILE
}

/// Order group of the quench on a plate.
pub(crate) fn quench(plate: usize) -> u32 {
    GROUPS * plate as u32 + QUENCH
}
