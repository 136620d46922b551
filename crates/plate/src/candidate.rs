//! Cells among which a plan chooses.

use enolattice_grid::CellDigits;

/// A cell with its yields in joint draws.
#[derive(Clone, Debug, PartialEq)]
pub struct Candidate {
    /// Number of the cell.
    pub cell: u64,
    /// Its place on each axis.
    pub digits: CellDigits,
    /// Yield of the wanted product in each draw, 0–1; of all candidates in the same draws.
    pub yields: Vec<f32>,
    /// Whether it may be chosen; others are there to be compared with.
    pub eligible: bool,
}

impl Candidate {
    /// Mean yield over the draws, 0–1.
    pub fn mean_yield(&self) -> f64 {
        mean(self.yields.iter().map(|&y| f64::from(y)))
    }

    /// Share of the draws in which the yield reaches a target.
    pub fn p_hit(&self, target: f64) -> f64 {
        mean(self.yields.iter().map(|&y| f64::from(is_hit(y, target))))
    }

    /// What belongs to a whole plate: one block has one temperature and one program.
    pub fn setting(&self) -> Setting {
        Setting {
            temperature: self.digits.temperature,
            formation_temperature: self.digits.formation_temperature,
            time: self.digits.time,
            dosing: self.digits.dosing,
        }
    }
}

/// Conditions that all wells of a plate share, by their places on the axes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct Setting {
    /// Temperature.
    pub temperature: u32,
    /// Temperature of the deprotonation.
    pub formation_temperature: u32,
    /// Time.
    pub time: u32,
    /// Dosing time of the electrophile.
    pub dosing: u32,
}

/// Whether a yield counts as a hit.
pub(crate) fn is_hit(y: f32, target: f64) -> bool {
    f64::from(y) >= target
}

fn mean(values: impl ExactSizeIterator<Item = f64>) -> f64 {
    let n = values.len().max(1) as f64;
    values.sum::<f64>() / n
}
