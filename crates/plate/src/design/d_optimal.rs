//! D-optimal choice of runs by exchange.

use super::linear::{Symmetric, dot};
use super::{ChosenDesign, DesignError, ResponseModel};
use crate::random::Random;

/// How runs are chosen.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct DOptimalOptions {
    /// Runs wanted, those that must be there among them.
    pub runs: usize,
    /// Candidates that must be there.
    pub must: Vec<usize>,
    /// Whether a candidate may be run more than once.
    pub repeats: bool,
    /// Random starts, of which the best is kept; at least one is made.
    pub starts: usize,
    /// The same seed gives the same runs on every machine.
    pub seed: u64,
}

/// Rounds of exchanges of a start.
const MOST_ROUNDS: usize = 30;
/// An exchange must raise the determinant by more than this share.
const LEAST_GAIN: f64 = 1e-6;
/// Start of the information matrix, so that it can be inverted before there are enough runs.
const RIDGE: f64 = 1e-4;
/// Most multiplications of one round of exchanges.
const MOST_WORK: u128 = 1 << 33;

/// The runs that determine a model best: det(XᵀX) as large as exchanges can make it.
///
/// A start takes a few runs at random and adds those that the model knows least of; then each run is
/// exchanged for the candidate that raises the determinant most, until none does. Optimal designs are
/// not guaranteed, only local optima of several starts.
///
/// # Errors
/// [`DesignError`]: axes and levels that do not fit, fewer runs than parameters, fewer candidates than
/// runs, candidates that do not determine the model, too much work.
///
/// # Source
/// Fedorov 1972, Theory of Optimal Experiments; one exchange a run as by Cook & Nachtsheim 1980,
/// doi:10.1080/00401706.1980.10486162.
pub fn d_optimal(
    candidates: &[Vec<u16>],
    model: &ResponseModel,
    options: &DOptimalOptions,
) -> Result<ChosenDesign, DesignError> {
    check(candidates, model, options)?;
    let rows: Vec<Vec<f64>> = candidates.iter().map(|run| model.row(run)).collect();
    let mut best: Option<ChosenDesign> = None;
    for start in 0..options.starts.max(1) {
        let random = Random::stream(options.seed, start as u64);
        let mut search = Search::start(&rows, options, random);
        search.exchange();
        let chosen = search.chosen.iter().map(|run| rows[*run].as_slice());
        let Some(quality) = model.quality_of_rows(chosen) else {
            continue;
        };
        if best
            .as_ref()
            .is_none_or(|best| quality.ln_det > best.quality.ln_det + 1e-9)
        {
            let mut candidates = search.chosen;
            candidates.sort_unstable();
            best = Some(ChosenDesign {
                candidates,
                quality,
            });
        }
    }
    best.ok_or(DesignError::NotEstimable {
        parameters: model.parameters(),
    })
}

fn check(
    candidates: &[Vec<u16>],
    model: &ResponseModel,
    options: &DOptimalOptions,
) -> Result<(), DesignError> {
    model.check(candidates)?;
    let (runs, parameters) = (options.runs.max(options.must.len()), model.parameters());
    if runs < parameters {
        return Err(DesignError::TooFewRuns { runs, parameters });
    }
    if candidates.is_empty() || (!options.repeats && runs > candidates.len()) {
        return Err(DesignError::TooFewCandidates {
            runs,
            candidates: candidates.len(),
        });
    }
    let unknown = options
        .must
        .iter()
        .find(|index| **index >= candidates.len());
    if let Some(index) = unknown {
        return Err(DesignError::NoSuchCandidate {
            index: *index,
            candidates: candidates.len(),
        });
    }
    let parameters_work = (parameters as u128).saturating_mul(candidates.len() as u128);
    if parameters_work.saturating_mul(runs as u128) > MOST_WORK {
        return Err(DesignError::TooMuchWork {
            runs,
            candidates: candidates.len(),
            parameters,
        });
    }
    Ok(())
}

struct Search<'a> {
    rows: &'a [Vec<f64>],
    chosen: Vec<usize>,
    /// The first so many runs of the chosen must stay.
    kept: usize,
    times: Vec<u32>,
    repeats: bool,
    /// Inverse of RIDGE · I + XᵀX.
    inverse: Symmetric,
    /// xᵀ M⁻¹ x of every candidate.
    variance: Vec<f64>,
}

impl<'a> Search<'a> {
    fn start(rows: &'a [Vec<f64>], options: &DOptimalOptions, mut random: Random) -> Search<'a> {
        let parameters = rows[0].len();
        let mut search = Search {
            rows,
            chosen: Vec::with_capacity(options.runs),
            kept: options.must.len(),
            times: vec![0; rows.len()],
            repeats: options.repeats,
            inverse: Symmetric::scaled_identity(parameters, 1.0 / RIDGE),
            variance: rows.iter().map(|row| dot(row, row) / RIDGE).collect(),
        };
        for run in &options.must {
            search.add(*run);
            search.chosen.push(*run);
        }
        let at_random = (parameters / 2).max(1);
        let runs = options.runs.max(options.must.len());
        while search.chosen.len() < runs {
            let by_chance = search.chosen.len() < search.kept + at_random;
            let run = if by_chance {
                search.any(&mut random)
            } else {
                search.least_known()
            };
            search.add(run);
            search.chosen.push(run);
        }
        search
    }

    fn is_free(&self, candidate: usize) -> bool {
        self.repeats || self.times[candidate] == 0
    }

    fn any(&self, random: &mut Random) -> usize {
        let drawn = random.below(self.rows.len());
        let from_there = (drawn..self.rows.len()).chain(0..drawn);
        from_there
            .into_iter()
            .find(|run| self.is_free(*run))
            .unwrap_or(drawn)
    }

    fn least_known(&self) -> usize {
        let free = (0..self.rows.len()).filter(|run| self.is_free(*run));
        free.max_by(|one, other| self.variance[*one].total_cmp(&self.variance[*other]))
            .unwrap_or(0)
    }

    fn add(&mut self, run: usize) {
        self.times[run] += 1;
        self.update(run, 1.0);
    }

    fn remove(&mut self, run: usize) {
        self.times[run] -= 1;
        self.update(run, -1.0);
    }

    fn update(&mut self, run: usize, factor: f64) {
        let along = self.inverse.times(&self.rows[run]);
        let ratio = self.inverse.update_inverse(&self.rows[run], factor);
        for (variance, row) in self.variance.iter_mut().zip(self.rows) {
            let with = dot(&along, row);
            *variance -= factor / ratio * with * with;
        }
    }

    /// Exchanges until no exchange helps.
    fn exchange(&mut self) {
        for _ in 0..MOST_ROUNDS {
            self.renew();
            let mut exchanged = false;
            for place in self.kept..self.chosen.len() {
                let out = self.chosen[place];
                if let Some(run) = self.best_instead_of(out) {
                    self.remove(out);
                    self.add(run);
                    self.chosen[place] = run;
                    exchanged = true;
                }
            }
            if !exchanged {
                break;
            }
        }
    }

    /// The candidate that raises the determinant most in place of a run: its factor is
    /// 1 + d(x) − d(out) − d(x) d(out) + d(x, out)² (Fedorov 1972).
    fn best_instead_of(&self, out: usize) -> Option<usize> {
        let along = self.inverse.times(&self.rows[out]);
        let of_out = self.variance[out];
        let mut best = (LEAST_GAIN, None);
        for (run, row) in self.rows.iter().enumerate() {
            // a bound from above saves the product of two rows for most candidates
            let variance = self.variance[run];
            if variance - of_out <= best.0 || !self.is_free(run) {
                continue;
            }
            let with = dot(&along, row);
            let gain = variance - of_out - variance * of_out + with * with;
            if gain > best.0 {
                best = (gain, Some(run));
            }
        }
        best.1
    }

    /// The inverse and the variances anew, so that rounding does not add up.
    fn renew(&mut self) {
        let mut information = Symmetric::scaled_identity(self.inverse.size, RIDGE);
        for run in &self.chosen {
            information.add_square(&self.rows[*run], 1.0);
        }
        if let Some(inverse) = information.inverse() {
            self.inverse = inverse;
            let rows = self.rows.iter();
            self.variance = rows.map(|row| dot(row, &self.inverse.times(row))).collect();
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::design::{Factor, full_factorial, plackett_burman, two_level_fraction};

    fn options(runs: usize) -> DOptimalOptions {
        DOptimalOptions {
            runs,
            must: Vec::new(),
            repeats: true,
            starts: 10,
            seed: 1,
        }
    }

    /// Best determinants of a full quadratic model on 3 × 3 points, as published for exact designs.
    #[test]
    fn quadratic_designs_on_nine_points_are_the_best_there_are() {
        let numeric = Factor::Numeric {
            values: vec![20.0, 40.0, 60.0],
        };
        let model = ResponseModel {
            factors: vec![numeric.clone(), numeric],
            interactions: true,
            quadratic: true,
        };
        assert_eq!(model.parameters(), 6);
        let points = full_factorial(&[3, 3], 9).unwrap();
        for (runs, det) in [(6, 256.0), (7, 960.0), (8, 2304.0), (9, 5184.0)] {
            let design = d_optimal(&points, &model, &options(runs)).unwrap();
            let found = design.quality.ln_det.exp();
            assert!((found / det - 1.0).abs() < 1e-9, "{runs}: {found}");
            assert_eq!(design.candidates.len(), runs);
        }
    }

    /// No choice of eight runs for seven factors has a larger determinant than 8⁸ (Hadamard's bound).
    #[test]
    fn seven_factors_in_eight_runs_reach_the_bound_of_hadamard() {
        let model = ResponseModel::main_effects(vec![Factor::Categorical { levels: 2 }; 7]);
        let bound = 8.0 * 8f64.ln();
        let all = full_factorial(&[2; 7], 128).unwrap();
        let chosen = d_optimal(&all, &model, &options(8)).unwrap().quality;
        let fraction = model
            .quality(&two_level_fraction(7, 8).unwrap().runs)
            .unwrap();
        let screening = model.quality(&plackett_burman(7).unwrap()).unwrap();
        for quality in [chosen, fraction, screening] {
            assert!((quality.ln_det - bound).abs() < 1e-9, "{quality:?}");
            assert!((quality.d_efficiency - 1.0).abs() < 1e-12, "{quality:?}");
        }
    }

    /// The contrasts of a full factorial are orthogonal whatever the numbers of levels.
    #[test]
    fn a_full_factorial_is_fully_efficient() {
        let levels = [3, 2, 5];
        let factors = levels.map(|levels| Factor::Categorical { levels }).to_vec();
        let runs = full_factorial(&levels, 30).unwrap();
        for interactions in [false, true] {
            let model = ResponseModel {
                factors: factors.clone(),
                interactions,
                quadratic: true,
            };
            assert_eq!(model.row(&runs[0]).len(), model.parameters());
            let quality = model.quality(&runs).unwrap();
            assert!((quality.d_efficiency - 1.0).abs() < 1e-12, "{quality:?}");
        }
    }

    /// An orthogonal array of 9 runs for four axes of three levels exists (Taguchi's L9); a local search
    /// must come close to its efficiency of 1.
    #[test]
    fn four_axes_of_three_levels_in_nine_runs() {
        let model = ResponseModel::main_effects(vec![Factor::Categorical { levels: 3 }; 4]);
        let all = full_factorial(&[3; 4], 81).unwrap();
        let design = d_optimal(
            &all,
            &model,
            &DOptimalOptions {
                starts: 40,
                ..options(9)
            },
        )
        .unwrap();
        assert!(
            (design.quality.d_efficiency - 1.0).abs() < 1e-9,
            "{:?}",
            design.quality
        );
    }

    #[test]
    fn what_must_be_is_there_and_what_is_not_allowed_is_not() {
        let model = ResponseModel::main_effects(vec![
            Factor::Categorical { levels: 4 },
            Factor::Categorical { levels: 3 },
        ]);
        let mut allowed = full_factorial(&[4, 3], 12).unwrap();
        allowed.retain(|run| run != &[0, 0] && run != &[3, 2]);
        let options = DOptimalOptions {
            must: vec![4, 2],
            repeats: false,
            ..options(8)
        };
        let design = d_optimal(&allowed, &model, &options).unwrap();
        assert!(design.candidates.contains(&4) && design.candidates.contains(&2));
        assert!(
            design.candidates.windows(2).all(|pair| pair[0] < pair[1]),
            "a run twice"
        );
        assert_eq!(design, d_optimal(&allowed, &model, &options).unwrap());
        let runs: Vec<Vec<u16>> = design
            .candidates
            .iter()
            .map(|run| allowed[*run].clone())
            .collect();
        let quality = model.quality(&runs).unwrap();
        assert!((quality.ln_det - design.quality.ln_det).abs() < 1e-9);
    }

    #[test]
    fn what_cannot_be_is_refused() {
        let model = ResponseModel::main_effects(vec![
            Factor::Categorical { levels: 3 },
            Factor::Categorical { levels: 3 },
        ]);
        let diagonal: Vec<Vec<u16>> = (0..3).map(|level| vec![level, level]).collect();
        let refused = |candidates: &[Vec<u16>], options: &DOptimalOptions| {
            d_optimal(candidates, &model, options).unwrap_err()
        };
        assert_eq!(
            refused(&diagonal, &options(9)),
            DesignError::NotEstimable { parameters: 5 }
        );
        assert_eq!(
            refused(&diagonal, &options(4)),
            DesignError::TooFewRuns {
                runs: 4,
                parameters: 5
            }
        );
        let once = DOptimalOptions {
            repeats: false,
            ..options(5)
        };
        assert_eq!(
            refused(&diagonal, &once),
            DesignError::TooFewCandidates {
                runs: 5,
                candidates: 3
            }
        );
        let must = DOptimalOptions {
            must: vec![3],
            ..options(5)
        };
        assert!(matches!(
            refused(&diagonal, &must),
            DesignError::NoSuchCandidate { index: 3, .. }
        ));
        assert!(matches!(
            refused(&[vec![0]], &options(5)),
            DesignError::AxesDiffer { .. }
        ));
        assert!(matches!(
            refused(&[vec![0, 3]], &options(5)),
            DesignError::NoSuchLevel { axis: 1, .. }
        ));
        let none = ResponseModel::main_effects(Vec::new());
        assert_eq!(
            d_optimal(&[vec![]], &none, &options(1)),
            Err(DesignError::NoAxis)
        );
        for values in [vec![], vec![1.0, 1.0], vec![1.0, f64::NAN]] {
            let model = ResponseModel::main_effects(vec![Factor::Numeric { values }]);
            assert!(d_optimal(&[vec![0]], &model, &options(2)).is_err());
        }
    }
}
