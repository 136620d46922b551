//! Everything about one cell.

use std::sync::Arc;

use enolattice_grid::{CellId, MeasuredYield};
use enolattice_model::{Cell, Explanation, Model};

use crate::engine::{blocking, job_id};
use crate::{CellDescription, Engine, EngineError, ExplainTarget, given};

/// A cell with what is asked of it.
struct Target {
    number: Option<u64>,
    cell: Cell,
    model: Arc<Model>,
    yield_at_least: f64,
    /// Fingerprint of the model that scored the cell's job.
    scored_with: Option<String>,
    /// What was changed of a given cell on the way in.
    warnings: Vec<String>,
    measured: Option<MeasuredYield>,
}

impl Engine {
    /// Everything about one cell.
    ///
    /// # Errors
    /// [`EngineError::Input`] with every fault of a given cell, [`EngineError::JobUnknown`],
    /// [`EngineError::CellUnknown`], [`EngineError::Model`].
    pub async fn explain(&self, target: ExplainTarget) -> Result<Explanation, EngineError> {
        let target = self.target(target).await?;
        blocking(move || {
            let mut explanation = target.model.explain(&target.cell, target.yield_at_least)?;
            explanation.limits.extend(target.warnings);
            if target.scored_with.is_some_and(|scored_with| scored_with != explanation.model) {
                explanation.limits.push(
                    "The model has changed since the job was screened: these numbers are of the present \
                     model and may differ from those of the ranking."
                        .to_owned(),
                );
            }
            Ok(explanation)
        })
        .await
    }

    /// What a cell is made of, with every default filled in.
    ///
    /// # Errors
    /// As [`Engine::explain`].
    pub async fn describe(&self, target: ExplainTarget) -> Result<CellDescription, EngineError> {
        let target = self.target(target).await?;
        Ok(CellDescription {
            measured: target.measured,
            ..CellDescription::of(target.number, &target.cell)
        })
    }

    async fn target(&self, target: ExplainTarget) -> Result<Target, EngineError> {
        match target {
            ExplainTarget::Given(query) => {
                let model = self.model().clone();
                blocking(move || {
                    let (cell, warnings) = given::cell(&query, &model)?;
                    Ok(Target {
                        number: None,
                        cell,
                        model,
                        yield_at_least: query.yield_at_least,
                        scored_with: None,
                        warnings,
                        measured: None,
                    })
                })
                .await
            }
            ExplainTarget::OfJob { job, cell: number } => {
                let queue = self.queue()?;
                let (store, grids, id) = (queue.store.clone(), queue.grids.clone(), job_id(&job)?);
                blocking(move || {
                    let record = store.job(id)?;
                    let grid = grids.of_record(&record)?;
                    let cell =
                        grid.cell(CellId(number))
                            .ok_or_else(|| EngineError::CellUnknown {
                                job,
                                cell: number,
                                last: grid.cells().saturating_sub(1),
                            })?;
                    Ok(Target {
                        number: Some(number),
                        cell,
                        model: grid.model().clone(),
                        yield_at_least: grid.campaign().yield_at_least,
                        scored_with: Some(record.model_fingerprint.to_string()),
                        warnings: Vec::new(),
                        measured: grid.measured(CellId(number)).cloned(),
                    })
                })
                .await
            }
        }
    }
}

impl CellDescription {
    pub(crate) fn of(number: Option<u64>, cell: &Cell) -> CellDescription {
        let conditions = &cell.conditions;
        CellDescription {
            cell: number,
            substrate: cell.substrate.name.clone(),
            substrate_smiles: cell.substrate.molecule.smiles().to_owned(),
            base: cell.base.record.name.clone(),
            electrophile: cell.electrophile.name.clone(),
            electrophile_smiles: cell.electrophile.molecule.smiles().to_owned(),
            solvent: cell.solvent.record.name.clone(),
            additive: cell
                .additive
                .as_ref()
                .map(|known| known.record.name.clone()),
            temperature_c: conditions.temperature_c,
            formation_temperature_c: conditions.formation_temperature_c,
            base_equiv: conditions.base_equiv,
            electrophile_equiv: conditions.electrophile_equiv,
            additive_equiv: cell.additive.as_ref().map(|_| conditions.additive_equiv),
            concentration_m: conditions.concentration_m,
            time_h: conditions.time_h,
            dosing_min: conditions.dosing_min,
            addition: conditions
                .addition
                .unwrap_or_else(|| cell.base.usual_addition())
                .name()
                .to_owned(),
            measured: None,
        }
    }
}
