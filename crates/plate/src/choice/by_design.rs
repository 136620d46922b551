//! Cells by a classical design over the axes that vary within a plate.

use std::collections::{BTreeMap, BTreeSet};

use serde::{Deserialize, Serialize};

use crate::choice::{ChoiceError, ChosenPlate, Task};
use crate::{
    DOptimalOptions, DesignError, Factor, ResponseModel, Setting, d_optimal, full_factorial,
    plackett_burman, space_filling, two_level_fraction,
};

/// A classical design instead of a choice by worth.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub enum DesignKind {
    /// Every combination of the values of all axes that vary.
    #[serde(rename = "full factorial")]
    FullFactorial,
    /// A regular fraction of all combinations of axes with two values, of the highest resolution that the places allow.
    #[serde(rename = "fractional factorial")]
    FractionalFactorial,
    /// Plackett and Burman's runs for axes with two values.
    #[serde(rename = "Plackett-Burman")]
    PlackettBurman,
    /// The allowed cells that determine the main effects of all axes best.
    #[serde(rename = "D-optimal")]
    DOptimal,
    /// Allowed cells that differ from each other on as many axes as possible.
    #[serde(rename = "space filling")]
    SpaceFilling,
}

/// Axes that vary within a plate, by index: all but temperatures and times.
const AXES_OF_PLATE: [usize; 9] = [0, 1, 2, 3, 4, 7, 8, 9, 12];
/// Random starts of a D-optimal design.
const STARTS: usize = 3;

/// Chooses the cells of each plate by a design; the second plate has the setting with the next most cells, and so on.
pub(super) fn by_design(
    task: &Task<'_>,
    kind: DesignKind,
    eligible: &[usize],
) -> Result<Vec<ChosenPlate>, ChoiceError> {
    let mut by_setting: BTreeMap<Setting, Vec<usize>> = BTreeMap::new();
    for &candidate in eligible {
        by_setting
            .entry(task.candidates[candidate].setting())
            .or_default()
            .push(candidate);
    }
    let mut settings: Vec<(Setting, Vec<usize>)> = by_setting.into_iter().collect();
    settings.sort_by_key(|(setting, cells)| (usize::MAX - cells.len(), *setting));
    let plates = settings.into_iter().take(task.plates);
    plates
        .map(|(setting, cells)| {
            let runs = Runs::of(task, &cells);
            let chosen = runs
                .chosen(task, kind)
                .map_err(|error| ChoiceError::Design {
                    reason: error.to_string(),
                })?;
            Ok(ChosenPlate {
                setting,
                members: chosen.map_err(|reason| ChoiceError::Design { reason })?,
            })
        })
        .collect()
}

/// The cells of one setting as runs of a design.
struct Runs<'a> {
    cells: &'a [usize],
    runs: Vec<Vec<u16>>,
    levels: Vec<u16>,
}

impl<'a> Runs<'a> {
    fn of(task: &Task<'_>, cells: &'a [usize]) -> Runs<'a> {
        let digit = |cell: usize, axis: usize| task.candidates[cell].digits.to_array()[axis];
        let values = AXES_OF_PLATE.map(|axis| {
            let values: BTreeSet<u32> = cells.iter().map(|&cell| digit(cell, axis)).collect();
            (axis, values.into_iter().collect::<Vec<u32>>())
        });
        let varying: Vec<&(usize, Vec<u32>)> = values
            .iter()
            .filter(|(_, values)| values.len() > 1)
            .collect();
        let level = |cell: usize, (axis, values): &(usize, Vec<u32>)| {
            values.binary_search(&digit(cell, *axis)).unwrap_or(0) as u16
        };
        Runs {
            cells,
            runs: cells
                .iter()
                .map(|&cell| varying.iter().map(|of| level(cell, of)).collect())
                .collect(),
            levels: varying
                .iter()
                .map(|(_, values)| values.len() as u16)
                .collect(),
        }
    }

    fn factors(&self) -> Vec<Factor> {
        let factor = |levels: &u16| Factor::Categorical { levels: *levels };
        self.levels.iter().map(factor).collect()
    }

    /// The chosen candidates, or why some runs of the design cannot be had.
    fn chosen(
        &self,
        task: &Task<'_>,
        kind: DesignKind,
    ) -> Result<Result<Vec<usize>, String>, DesignError> {
        let places = task.places.min(self.runs.len());
        let at = |index: usize| self.cells[index];
        Ok(match kind {
            DesignKind::FullFactorial => self.there(&full_factorial(&self.levels, task.places)?),
            DesignKind::PlackettBurman => {
                self.of_two_levels(task, &plackett_burman(self.levels.len())?)
            }
            DesignKind::FractionalFactorial => {
                let runs: usize = 1 << task.places.max(1).ilog2().min(self.levels.len() as u32);
                match self.levels.len() as u32 == runs.ilog2() {
                    true => self.of_two_levels(task, &full_factorial(&self.levels, task.places)?),
                    false => {
                        self.of_two_levels(task, &two_level_fraction(self.levels.len(), runs)?.runs)
                    }
                }
            }
            DesignKind::DOptimal => {
                let model = ResponseModel::main_effects(self.factors());
                let options = DOptimalOptions {
                    runs: places,
                    must: Vec::new(),
                    repeats: false,
                    starts: STARTS,
                    seed: task.seed,
                };
                let design = d_optimal(&self.runs, &model, &options)?;
                Ok(design.candidates.into_iter().map(at).collect())
            }
            DesignKind::SpaceFilling => {
                let filling = space_filling(&self.runs, &self.factors(), &[], places, task.seed)?;
                Ok(filling.candidates.into_iter().map(at).collect())
            }
        })
    }

    fn of_two_levels(&self, task: &Task<'_>, runs: &[Vec<u16>]) -> Result<Vec<usize>, String> {
        if let Some(levels) = self.levels.iter().find(|levels| **levels != 2) {
            return Err(format!(
                "it needs axes of two values, and one has {levels}; choose with `only`, or take the D-optimal design"
            ));
        }
        if runs.len() > task.places {
            return Err(format!(
                "it has {} runs for {} places",
                runs.len(),
                task.places
            ));
        }
        self.there(runs)
    }

    /// The candidates of all runs, each of which must be allowed.
    fn there(&self, runs: &[Vec<u16>]) -> Result<Vec<usize>, String> {
        let known: BTreeMap<&Vec<u16>, usize> =
            self.runs.iter().zip(self.cells.iter().copied()).collect();
        let missing = runs.iter().filter(|run| !known.contains_key(run)).count();
        match missing {
            0 => Ok(runs.iter().map(|run| known[run]).collect()),
            _ => Err(format!(
                "{missing} of its {} runs are cells that may not be chosen; narrow the axes with `only`, or take the \
                 D-optimal design, which does with the cells that may",
                runs.len()
            )),
        }
    }
}
