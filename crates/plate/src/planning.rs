//! From chosen cells to a plan.

mod controls;
mod wells;

use enolattice_grid::{FaultCode, Grid, InputError};
use enolattice_model::Draw;
use enolattice_reagents::{ReagentKind, Solvent};

use crate::checks::findings;
use crate::choice::choose;
use crate::plan::PRECEDENCE;
use crate::request::fault;
use crate::stocks::supply;
use crate::transfers::{movements, plate_name, program, transfers};
use crate::{
    Candidate, Choice, ColumnsBy, Content, Finding, Gains, Layout, LayoutItem, LayoutOptions,
    LeftOut, Plan, PlanRequest, Plate, Quota, Recipe, Role, Task, WellOrder, lay_out,
};
use controls::Placed;

/// What a plan is made from.
#[derive(Debug)]
pub struct Ground<'a> {
    /// The job's grid.
    pub grid: &'a Grid,
    /// The job.
    pub job: String,
    /// What is asked for.
    pub request: &'a PlanRequest,
    /// Cells with their yields in the draws.
    pub candidates: Vec<Candidate>,
    /// The draws.
    pub draws: &'a [Draw],
    /// The best of the ranking, by index of the candidate.
    pub top_list: Vec<usize>,
    /// Random cells of the job, by index of the candidate.
    pub random: Vec<usize>,
    /// Lower and upper limits: what was asked, and what is on the shelf.
    pub quotas: Vec<Quota>,
    /// Cells that were left out, by reason.
    pub left_out: Vec<LeftOut>,
}

impl Ground<'_> {
    /// Volume of each reaction, uL.
    fn volume_ul(&self) -> f64 {
        let asked = self.request.well.volume_ul;
        asked.unwrap_or(self.request.plates.wells.default_volume_ul())
    }
}

/// Chooses the cells, lays the plates out, works out stocks and transfers, checks everything and says what each well should
/// show.
///
/// # Errors
/// Every reason why there is no such plan, with the way out.
pub fn plan(ground: &Ground<'_>) -> Result<Plan, Vec<InputError>> {
    let request = ground.request;
    let choice = chosen(ground)?;
    let placed = controls::with_controls(ground, &choice);
    let layout = laid_out(ground, &placed)?;
    let recipes: Vec<Recipe> = placed
        .iter()
        .zip(&layout.wells)
        .map(|(placed, well)| Recipe {
            plate: placed.plate,
            well: *well,
            cell: placed.cell.clone(),
            content: placed.content,
        })
        .collect();
    let volume_ul = ground.volume_ul();
    let library = ground.grid.model().library();
    let carrier = carrier(ground)?;
    let mut supply = supply(&recipes, volume_ul, &request.deck, library, carrier)?;
    let (well, deck) = (&request.well, &request.deck);
    let quench_ul = well.quench_share * volume_ul;
    let deuterium = |recipe: &Recipe| recipe.content == Content::Deuterium;
    let protic = |recipe: &Recipe| !deuterium(recipe);
    supply.add_for_all(
        Role::Quench,
        &well.quench,
        &recipes,
        protic,
        quench_ul,
        deck,
    );
    supply.add_for_all(Role::Quench, "D2O", &recipes, deuterium, quench_ul, deck);
    let diluent = match well.internal_standard.as_str() {
        "" => well.diluent.clone(),
        standard => format!("{} with {standard}", well.diluent),
    };
    supply.add_for_all(
        Role::Diluent,
        &diluent,
        &recipes,
        |_| true,
        well.diluent_ul,
        deck,
    );
    let sample_nl = (1000.0 * well.sample_ul / deck.step_nl).round() * deck.step_nl;
    let transfers = transfers(&recipes, &mut supply, sample_nl, deck);
    let fates = wells::fates(ground, &placed);
    let wells = wells::planned(ground, &placed, &recipes, &supply, &fates);
    let half_times_s: Vec<Option<f64>> = placed
        .iter()
        .map(|placed| {
            fates
                .get(&placed.candidate)
                .and_then(|fate| fate.half_time_s)
        })
        .collect();
    let mut plates: Vec<Plate> = Vec::new();
    for (plate, balance) in (0..choice.plates.len()).zip(&layout.plates) {
        let on_plate = || {
            recipes
                .iter()
                .zip(&wells)
                .filter(|(recipe, _)| recipe.plate == plate)
        };
        let Some((first, _)) = on_plate().next() else {
            continue;
        };
        let conditions = &first.cell.conditions;
        let mut of_plate: Vec<_> = on_plate().map(|(_, well)| well.clone()).collect();
        of_plate.sort_by_key(|planned| (planned.well.row, planned.well.column));
        plates.push(Plate {
            name: plate_name(plate),
            temperature_c: conditions.temperature_c,
            formation_temperature_c: conditions.formation_temperature_c,
            time_h: conditions.time_h,
            dosing_min: conditions.dosing_min,
            wells: of_plate,
            balance: balance.clone(),
        });
    }
    let mut findings = findings(
        &recipes,
        &supply,
        &transfers,
        &half_times_s,
        deck,
        request.plates.wells,
    );
    findings.splice(0..0, empty_places(ground, &choice));
    let campaign = ground.grid.campaign();
    Ok(Plan {
        precedence: PRECEDENCE.to_owned(),
        id: String::new(),
        made_unix_ms: 0,
        title: request.title.clone(),
        job: ground.job.clone(),
        campaign: campaign.title.clone(),
        model: ground.grid.model().fingerprint().to_string(),
        request: request.clone(),
        target: campaign.yield_at_least,
        volume_ul,
        plates,
        gains: gains(ground, &choice),
        left_out: ground.left_out.clone(),
        program: program(&recipes, &supply, sample_nl),
        movements: movements(&transfers, deck),
        findings,
        transfers,
        stocks: supply.stocks,
    })
}

/// The solvent of all stocks, where one is asked for.
fn carrier<'a>(ground: &Ground<'a>) -> Result<Option<&'a Solvent>, Vec<InputError>> {
    let library = ground.grid.model().library();
    let Some(name) = &ground.request.well.carrier else {
        return Ok(None);
    };
    library.solvent(name).map(Some).ok_or_else(|| {
        let reason = "is no solvent of the library";
        let remedy = match library.suggest(ReagentKind::Solvent, name) {
            Some(near) => format!("did you mean `{near}`? `reagents` lists them"),
            None => "`reagents` lists them".to_owned(),
        };
        vec![fault(
            FaultCode::ReagentUnknown,
            "well.carrier",
            name,
            reason,
            remedy,
        )]
    })
}

fn chosen(ground: &Ground<'_>) -> Result<Choice, Vec<InputError>> {
    let request = ground.request;
    let pinned: Vec<usize> = request
        .choice
        .pin
        .iter()
        .filter_map(|pin| {
            ground
                .candidates
                .iter()
                .position(|known| known.cell == pin.cell)
        })
        .collect();
    let task = Task {
        candidates: &ground.candidates,
        target: ground.grid.campaign().yield_at_least,
        hits_of: request.choice.hits_of,
        weights: request.choice.aim.weights(),
        design: request.choice.design,
        plates: request.plates.count as usize,
        places: places(ground),
        pinned: &pinned,
        quotas: &ground.quotas,
        top_list: &ground.top_list,
        random: &ground.random,
        seed: request.seed,
    };
    choose(&task).map_err(|error| {
        let code = FaultCode::PlanImpossible;
        vec![fault(
            code,
            "choice",
            "",
            error.to_string(),
            "change the request",
        )]
    })
}

/// Said where fewer cells were found than there is room for.
fn empty_places(ground: &Ground<'_>, choice: &Choice) -> Option<Finding> {
    let request = ground.request;
    let places = places(ground) * request.plates.count as usize;
    let chosen: usize = choice.plates.iter().map(|plate| plate.members.len()).sum();
    (chosen < places).then(|| Finding {
        severity: "warning".to_owned(),
        check: "empty places".to_owned(),
        text: format!(
            "{chosen} cells were chosen for {places} places: limits, the shelf or the number of cells allow no more; raise \
             `most` of `choice.limits`, or ask for fewer wells"
        ),
    })
}

/// Different cells that a plate has room for.
fn places(ground: &Ground<'_>) -> usize {
    let request = ground.request;
    let room = request.plates.wells.wells() - request.controls.wells() as usize;
    usable(ground, room) / request.choice.replicates as usize
}

/// Wells of a plate that cells may have: all but those of controls, and without the edge where it stays empty.
fn usable(ground: &Ground<'_>, room: usize) -> usize {
    let format = ground.request.plates.wells;
    let edge = format
        .by_columns()
        .filter(|well| format.is_edge(*well))
        .count();
    let controls = ground.request.controls.wells() as usize;
    match ground.request.plates.edge_wells {
        crate::EdgeWells::Use => room,
        crate::EdgeWells::Empty => room.saturating_sub(edge),
        // controls take the edge first
        crate::EdgeWells::ControlsOnly => room.saturating_sub(edge.saturating_sub(controls)),
    }
}

fn laid_out(ground: &Ground<'_>, placed: &[Placed]) -> Result<Layout, Vec<InputError>> {
    let request = ground.request;
    let items: Vec<LayoutItem> = placed.iter().map(Placed::item).collect();
    let order = match request.plates.columns_by {
        None => WellOrder::Randomised,
        Some(axis) => WellOrder::Columns {
            axis: match axis {
                ColumnsBy::Substrate => 0,
                ColumnsBy::Base => 1,
                ColumnsBy::Electrophile => 2,
                ColumnsBy::Solvent => 3,
            },
        },
    };
    let options = LayoutOptions {
        format: request.plates.wells,
        seed: request.seed,
        edges: request.plates.edge_wells,
        order,
    };
    lay_out(&items, &options).map_err(|error| {
        let code = FaultCode::PlanImpossible;
        vec![fault(
            code,
            "plates",
            "",
            error.to_string(),
            "change `plates` or `controls`",
        )]
    })
}

fn gains(ground: &Ground<'_>, choice: &Choice) -> Gains {
    let [_, unlimited, top_list, random] = choice.relative;
    Gains {
        chosen: choice.chosen,
        unlimited: choice.unlimited,
        top_list: choice.top_list,
        random: choice.random,
        relative: [unlimited, top_list, random],
        at_least_of_best: choice.at_least_of_best,
        shortlist: ground
            .candidates
            .iter()
            .filter(|candidate| candidate.eligible)
            .count(),
        draws: ground.draws.len(),
        exchanged: choice.exchanged,
    }
}
