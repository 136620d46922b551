//! Designs over random lists of allowed cells.

use std::collections::BTreeSet;

use enolattice_plate::{
    DOptimalOptions, DesignError, Factor, ResponseModel, d_optimal, full_factorial,
    sobol_candidates, space_filling,
};
use proptest::prelude::*;

prop_compose! {
    /// Up to four axes, one of them a condition, with some cells not allowed.
    fn allowed()(levels in prop::collection::vec(2u16..5, 2..5))
        (
            keep in prop::collection::vec(prop::bool::weighted(0.7), levels.iter().map(|l| *l as usize).product::<usize>()),
            levels in Just(levels),
        ) -> (Vec<Vec<u16>>, Vec<Factor>) {
        let mut kept = keep.into_iter();
        let mut cells = full_factorial(&levels, 1_000).unwrap();
        cells.retain(|_| kept.next().unwrap_or(false));
        let mut factors: Vec<Factor> =
            levels.iter().map(|levels| Factor::Categorical { levels: *levels }).collect();
        let values = (0..levels[0]).map(|level| 20.0 * f64::from(level) - 40.0).collect();
        factors[0] = Factor::Numeric { values };
        (cells, factors)
    }
}

fn runs_of(candidates: &[Vec<u16>], chosen: &[usize]) -> Vec<Vec<u16>> {
    chosen.iter().map(|run| candidates[*run].clone()).collect()
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(48))]

    /// No choice by chance is better than the one by exchange, and the figure is that of the runs.
    #[test]
    fn d_optimal_beats_chance((candidates, factors) in allowed(), more in 0usize..6, seed in any::<u64>()) {
        let model = ResponseModel::main_effects(factors);
        let runs = model.parameters() + more;
        let options = DOptimalOptions { runs, must: Vec::new(), repeats: false, starts: 3, seed };
        let design = match d_optimal(&candidates, &model, &options) {
            Ok(design) => design,
            Err(DesignError::TooFewCandidates { .. }) => return Ok(()),
            Err(DesignError::NotEstimable { .. }) => {
                prop_assert!(model.quality(&candidates).is_err());
                return Ok(());
            }
            Err(error) => return Err(TestCaseError::fail(error.to_string())),
        };
        let distinct: BTreeSet<_> = design.candidates.iter().collect();
        prop_assert_eq!((design.candidates.len(), distinct.len()), (runs, runs));
        let quality = model.quality(&runs_of(&candidates, &design.candidates)).unwrap();
        prop_assert!((quality.ln_det - design.quality.ln_det).abs() < 1e-9);
        for shift in 0..20 {
            // runs that are spread over the list by a step without a common divisor
            let step = [1, 3, 7, 11, 13][shift % 5];
            let by_chance: BTreeSet<usize> =
                (0..runs).map(|run| (seed as usize % 97 + shift * 5 + run * step) % candidates.len()).collect();
            if by_chance.len() == runs {
                let by_chance: Vec<usize> = by_chance.into_iter().collect();
                if let Ok(other) = model.quality(&runs_of(&candidates, &by_chance)) {
                    prop_assert!(other.ln_det <= quality.ln_det + 1e-9, "{:?} {:?}", other, quality);
                }
            }
        }
    }

    #[test]
    fn designs_without_a_model_choose_allowed_cells_once((candidates, factors) in allowed(), runs in 1usize..20, seed in any::<u64>()) {
        let runs = runs.min(candidates.len());
        let spread = space_filling(&candidates, &factors, &[], runs, seed).unwrap();
        let sobol = sobol_candidates(&candidates, &factors, runs).unwrap();
        for chosen in [&spread.candidates, &sobol] {
            let distinct: BTreeSet<_> = chosen.iter().collect();
            prop_assert_eq!((chosen.len(), distinct.len()), (runs, runs));
            prop_assert!(chosen.iter().all(|run| *run < candidates.len()));
        }
        if let Some(least) = spread.least_distance {
            prop_assert!(least > 0.0 && least <= 1.0);
        }
        for (met, factor) in spread.levels_met.iter().zip(&factors) {
            prop_assert!(*met <= factor.levels() && *met <= runs);
        }
    }
}
