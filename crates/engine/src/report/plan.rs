//! What the report of a plan is made from.

use std::collections::BTreeSet;
use std::sync::Arc;

use enolattice_grid::Grid;
use enolattice_model::Model;
use enolattice_plate::{Content, Plan, PlannedWell, Plate};
use enolattice_report::{ExplainedCell, PlanReport, ShownCell, Versions, plan_report};

use crate::engine::{blocking, job_id};
use crate::report::cells::{Promise, Ranked, explained, shown, sure_and_doubtful};
use crate::report::sources::Sources;
use crate::{Engine, EngineError};

impl Engine {
    pub(super) async fn plan_report(&self, plan: Plan) -> Result<String, EngineError> {
        let queue = self.queue()?;
        let (store, grids, job) = (queue.store.clone(), queue.grids.clone(), job_id(&plan.job)?);
        let engines = self.model().clone();
        blocking(move || {
            // where the job cannot be read any more, the plan still stands for itself
            let record = store.job(job).ok();
            let grid = record
                .as_ref()
                .and_then(|record| grids.of_record(record).ok());
            let campaign = record.map(|record| record.campaign_fingerprint.to_string());
            Ok(plan_report(&gathered(
                plan,
                grid,
                &engines,
                campaign.unwrap_or_default(),
            )))
        })
        .await
    }
}

fn gathered(plan: Plan, grid: Option<Arc<Grid>>, engines: &Model, campaign: String) -> PlanReport {
    let explained = grid
        .as_ref()
        .map_or(Vec::new(), |grid| in_full(&plan, grid));
    let model = grid.as_ref().map_or(engines, |grid| grid.model());
    let mut sources = Sources::default();
    sources.explained(&explained);
    reagents(&plan, model, &mut sources);
    let now = model.fingerprint().to_string();
    PlanReport {
        sources: sources.into_list(),
        versions: Versions {
            program: env!("CARGO_PKG_VERSION").to_owned(),
            arithmetic: model.arithmetic(),
            explained_by: (now != plan.model).then_some(now),
            model: plan.model.clone(),
            campaign,
        },
        explained,
        plan,
    }
}

/// The surest cells and those most in doubt, of different substrates, with their wells.
fn in_full(plan: &Plan, grid: &Grid) -> Vec<ExplainedCell> {
    let wells = plan
        .wells()
        .filter(|(_, well)| well.content == Content::Cell);
    let wells: Vec<(&Plate, &PlannedWell)> = wells.collect();
    let chosen = sure_and_doubtful(&wells, |(_, well)| Promise {
        substrate: well.substrate.as_ref().map_or("", |known| &known.name),
        cell: well.cell,
        expected_yield: well.expected_yield,
        p_hit: well.p_hit,
    });
    let wells: Vec<(&Plate, &PlannedWell)> = chosen.into_iter().map(|i| wells[i]).collect();
    let ranked = |well: &PlannedWell| Ranked {
        cell: well.cell,
        expected_yield: well.expected_yield,
        p_hit: well.p_hit,
    };
    let cells = shown(
        grid,
        &wells
            .iter()
            .map(|(_, well)| ranked(well))
            .collect::<Vec<_>>(),
    );
    let place = |cell: &ShownCell| {
        let at = wells.iter().find(|(_, well)| well.cell == cell.cell);
        at.map_or(String::new(), |(plate, well)| {
            format!("{} {}", plate.name, well.well)
        })
    };
    let placed: Vec<(ShownCell, String)> = cells
        .iter()
        .map(|cell| (cell.clone(), place(cell)))
        .collect();
    explained(grid, &placed)
}

fn reagents(plan: &Plan, model: &Model, sources: &mut Sources) {
    let library = model.library();
    let mut names: BTreeSet<(u8, &str)> = BTreeSet::new();
    for (_, well) in plan.wells() {
        let reagents = [
            (0, &well.base),
            (1, &well.electrophile),
            (2, &well.additive),
        ];
        for (role, reagent) in reagents {
            names.extend(reagent.as_ref().map(|known| (role, known.name.as_str())));
        }
        names.insert((3, &well.solvent));
        for caution in &well.cautions {
            sources.add(&caution.source, format!("caution: {}", caution.category));
        }
    }
    for (role, name) in names {
        match role {
            0 => sources.base(library, name),
            1 => sources.electrophile(library, name),
            2 => sources.additive(library, name),
            _ => sources.solvent(library, name),
        }
    }
}
