//! The linear model that a design is to determine.

use enolattice_units::math;
use serde::{Deserialize, Serialize};

use super::DesignError;
use super::linear::Symmetric;

/// One axis of a design.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub enum Factor {
    /// So many levels without an order: substrates, bases, solvents.
    Categorical {
        /// Levels, at least two.
        levels: u16,
    },
    /// A condition with these values in any unit: temperature, time.
    Numeric {
        /// The value of each level, at least two different ones.
        values: Vec<f64>,
    },
}

/// What is assumed of the response: a sum of terms.
///
/// Every axis has main effects. A categorical axis of L levels has L − 1 columns, the Helmert contrasts
/// scaled to mean square 1 over its levels, so that a full factorial has XᵀX = n · I. A numeric axis is
/// coded from −1 at its least value to 1 at its greatest.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ResponseModel {
    /// The axes.
    pub factors: Vec<Factor>,
    /// Whether every two axes interact.
    pub interactions: bool,
    /// Whether numeric axes of three values or more have a square.
    pub quadratic: bool,
}

/// How well runs determine a model.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Quality {
    /// Parameters of the model.
    pub parameters: usize,
    /// ln det(XᵀX).
    pub ln_det: f64,
    /// det(XᵀX)^(1/p) / n: 1 for an orthogonal design of categorical axes; relative to that.
    pub d_efficiency: f64,
}

impl Factor {
    /// Levels.
    pub fn levels(&self) -> usize {
        match self {
            Factor::Categorical { levels } => (*levels).into(),
            Factor::Numeric { values } => values.len(),
        }
    }

    pub(super) fn check(&self, axis: usize) -> Result<(), DesignError> {
        let distinct = match self {
            Factor::Categorical { levels } => *levels >= 2,
            Factor::Numeric { values } => {
                let infinite = values.iter().position(|value| !value.is_finite());
                if let Some(level) = infinite {
                    return Err(DesignError::NotFinite {
                        axis,
                        level,
                        value: values[level],
                    });
                }
                values.iter().any(|value| *value != values[0])
            }
        };
        if distinct {
            Ok(())
        } else {
            Err(DesignError::OneLevel { axis })
        }
    }

    /// Place of a level between 0 and 1, for numeric axes.
    pub(super) fn place(&self, level: u16) -> Option<f64> {
        let Factor::Numeric { values } = self else {
            return None;
        };
        let least = values.iter().copied().fold(f64::INFINITY, f64::min);
        let most = values.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        // halves, so that no difference of finite values overflows
        Some((0.5 * values[usize::from(level)] - 0.5 * least) / (0.5 * most - 0.5 * least))
    }

    /// The columns of the main effect at a level.
    fn main_effect(&self, level: u16) -> Vec<f64> {
        if let Some(place) = self.place(level) {
            return vec![2.0 * place - 1.0];
        }
        let levels = self.levels();
        let level = usize::from(level);
        // contrast k compares level k with the mean of the k before it
        let contrast = |k: usize| {
            let scale = (levels as f64 / (k * (k + 1)) as f64).sqrt();
            match level.cmp(&k) {
                std::cmp::Ordering::Less => -scale,
                std::cmp::Ordering::Equal => k as f64 * scale,
                std::cmp::Ordering::Greater => 0.0,
            }
        };
        (1..levels).map(contrast).collect()
    }

    /// Whether the axis has a square in a quadratic model.
    fn has_square(&self) -> bool {
        let Factor::Numeric { values } = self else {
            return false;
        };
        let other = values.iter().find(|value| **value != values[0]);
        other.is_some_and(|other| {
            values
                .iter()
                .any(|value| value != other && *value != values[0])
        })
    }
}

impl ResponseModel {
    /// A model of main effects alone.
    pub fn main_effects(factors: Vec<Factor>) -> ResponseModel {
        ResponseModel {
            factors,
            interactions: false,
            quadratic: false,
        }
    }

    /// Number of parameters, the mean among them.
    pub fn parameters(&self) -> usize {
        let columns = |factor: &Factor| match factor {
            Factor::Categorical { levels } => usize::from(*levels).saturating_sub(1),
            Factor::Numeric { .. } => 1,
        };
        let main: Vec<usize> = self.factors.iter().map(columns).collect();
        let sum: usize = main.iter().sum();
        let squares: usize = main.iter().map(|columns| columns * columns).sum();
        let interactions = if self.interactions {
            (sum * sum - squares) / 2
        } else {
            0
        };
        let quadratic = self
            .factors
            .iter()
            .filter(|factor| self.quadratic && factor.has_square());
        1 + sum + interactions + quadratic.count()
    }

    /// How well the runs determine the model.
    ///
    /// # Errors
    /// Runs with wrong axes or levels, fewer runs than parameters, runs that do not determine them.
    pub fn quality(&self, runs: &[Vec<u16>]) -> Result<Quality, DesignError> {
        self.check(runs)?;
        let parameters = self.parameters();
        if runs.len() < parameters {
            return Err(DesignError::TooFewRuns {
                runs: runs.len(),
                parameters,
            });
        }
        let rows: Vec<Vec<f64>> = runs.iter().map(|run| self.row(run)).collect();
        self.quality_of_rows(rows.iter().map(Vec::as_slice))
            .ok_or(DesignError::NotEstimable { parameters })
    }

    pub(super) fn quality_of_rows<'a>(
        &self,
        rows: impl ExactSizeIterator<Item = &'a [f64]>,
    ) -> Option<Quality> {
        let parameters = self.parameters();
        let runs = rows.len() as f64;
        let ln_det = Symmetric::information(parameters, rows).ln_det()?;
        Some(Quality {
            parameters,
            ln_det,
            d_efficiency: math::exp(ln_det / parameters as f64) / runs,
        })
    }

    pub(super) fn check(&self, candidates: &[Vec<u16>]) -> Result<(), DesignError> {
        check_levels(&self.factors, candidates)
    }

    /// The row of X of a run: mean, main effects, interactions, squares.
    pub(super) fn row(&self, run: &[u16]) -> Vec<f64> {
        let levels = self.factors.iter().zip(run);
        let main: Vec<Vec<f64>> = levels
            .map(|(factor, level)| factor.main_effect(*level))
            .collect();
        let mut row = vec![1.0];
        row.extend(main.iter().flatten());
        if self.interactions {
            for (index, one) in main.iter().enumerate() {
                for other in &main[index + 1..] {
                    for a in one {
                        row.extend(other.iter().map(|b| a * b));
                    }
                }
            }
        }
        if self.quadratic {
            let squared = self
                .factors
                .iter()
                .zip(&main)
                .filter(|(factor, _)| factor.has_square());
            row.extend(squared.map(|(_, columns)| columns[0] * columns[0]));
        }
        row
    }
}

pub(super) fn check_levels(factors: &[Factor], candidates: &[Vec<u16>]) -> Result<(), DesignError> {
    if factors.is_empty() {
        return Err(DesignError::NoAxis);
    }
    for (axis, factor) in factors.iter().enumerate() {
        factor.check(axis)?;
    }
    for (candidate, levels) in candidates.iter().enumerate() {
        if levels.len() != factors.len() {
            return Err(DesignError::AxesDiffer {
                candidate,
                given: levels.len(),
                axes: factors.len(),
            });
        }
        for (axis, (level, factor)) in levels.iter().zip(factors).enumerate() {
            if usize::from(*level) >= factor.levels() {
                return Err(DesignError::NoSuchLevel {
                    candidate,
                    axis,
                    level: *level,
                    levels: factor.levels(),
                });
            }
        }
    }
    Ok(())
}
