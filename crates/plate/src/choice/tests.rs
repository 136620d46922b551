use enolattice_grid::{AXES, CellDigits};
use proptest::prelude::*;

use super::*;

fn digits(substrate: u32, base: u32, temperature: u32) -> CellDigits {
    CellDigits {
        substrate,
        electrophile: 0,
        base,
        solvent: 0,
        additive: 0,
        temperature,
        formation_temperature: 0,
        base_equiv: 0,
        electrophile_equiv: 0,
        concentration: 0,
        time: 0,
        dosing: 0,
        addition: 0,
    }
}

fn candidates(rows: &[(u32, u32, u32, Vec<f32>)]) -> Vec<Candidate> {
    let candidate =
        |(cell, (substrate, base, temperature, yields)): (usize, &(u32, u32, u32, Vec<f32>))| {
            Candidate {
                cell: cell as u64,
                digits: digits(*substrate, *base, *temperature),
                yields: yields.clone(),
                eligible: true,
            }
        };
    rows.iter().enumerate().map(candidate).collect()
}

fn task<'a>(candidates: &'a [Candidate], all: &'a [usize], places: usize) -> Task<'a> {
    Task {
        candidates,
        target: 0.5,
        hits_of: HitsOf::Substrates,
        weights: Weights::BALANCED,
        design: None,
        plates: 1,
        places,
        pinned: &[],
        quotas: &[],
        top_list: all,
        random: all,
        seed: 1,
    }
}

fn subsets(n: usize, k: usize) -> Vec<Vec<usize>> {
    (0u32..1 << n)
        .filter(|mask| mask.count_ones() as usize == k)
        .map(|mask| (0..n).filter(|i| mask >> i & 1 == 1).collect())
        .collect()
}

fn some_candidates() -> impl Strategy<Value = Vec<Candidate>> {
    let row = (0u32..3, 0u32..3, proptest::collection::vec(0.0f32..1.0, 6))
        .prop_map(|(substrate, base, yields)| (substrate, base, 0, yields));
    proptest::collection::vec(row, 8..10).prop_map(|rows| candidates(&rows))
}

proptest! {
    /// The greedy set has at least 1 − 1/e of the best set's worth, and the bound that is printed is one.
    #[test]
    fn the_choice_is_near_the_best_of_all_sets(candidates in some_candidates(), k in 2usize..5) {
        let all: Vec<usize> = (0..candidates.len()).collect();
        let task = task(&candidates, &all, k);
        let choice = choose(&task).expect("a choice");
        let objective = objective(&task, &all, k);
        let value = |set: &[usize]| objective.value(&objective.of(set));
        let best = subsets(candidates.len(), k).iter().map(|set| value(set)).fold(0.0, f64::max);
        let ratio = value(&choice.plates[0].members) / best;
        prop_assert!(ratio >= 1.0 - (-1.0f64).exp(), "{ratio}");
        prop_assert!(choice.at_least_of_best <= ratio + 1e-9, "{} {ratio}", choice.at_least_of_best);
    }

    /// A cell adds no more to a larger set, whatever the cell and the sets.
    #[test]
    fn gains_fall_as_the_set_grows(candidates in some_candidates(), few in 0usize..3, more in 3usize..7) {
        let all: Vec<usize> = (0..candidates.len()).collect();
        let task = task(&candidates, &all, 7);
        let objective = objective(&task, &all, 7);
        let (small, large) = (objective.of(&all[..few]), objective.of(&all[..more]));
        for &candidate in &all[more..] {
            prop_assert!(objective.gain(&large, candidate) <= objective.gain(&small, candidate) + 1e-9);
            let mut grown = small.clone();
            objective.add(&mut grown, candidate);
            let gained = objective.value(&grown) - objective.value(&small);
            prop_assert!((gained - objective.gain(&small, candidate)).abs() < 1e-6);
        }
    }

    #[test]
    fn limits_and_pins_are_kept(candidates in some_candidates(), pin in 0usize..8) {
        let all: Vec<usize> = (0..candidates.len()).collect();
        let with_base = |base: u32| candidates.iter().filter(|c| c.digits.base == base).count();
        let quota = |axis: &str, value: u32, least: usize, most: usize| Quota {
            axis: AXES.iter().position(|known| *known == axis).expect("an axis"),
            value,
            least,
            most,
            name: format!("{axis} {value}"),
            reason: "asked for".to_owned(),
        };
        let quotas = [quota("bases", 0, with_base(0).min(2), 9), quota("substrates", 1, 0, 1)];
        let pinned = [pin];
        let task = Task { quotas: &quotas, pinned: &pinned, ..task(&candidates, &all, 5) };
        let chosen = match choose(&task) {
            Ok(choice) => choice.plates[0].members.clone(),
            // two cells of base 0 may both be of the substrate that may come once
            Err(ChoiceError::Limit { .. }) => return Ok(()),
            Err(other) => return Err(TestCaseError::fail(other.to_string())),
        };
        prop_assert!(chosen.contains(&pin));
        let count = |f: &dyn Fn(&Candidate) -> bool| chosen.iter().filter(|&&i| f(&candidates[i])).count();
        prop_assert!(count(&|c| c.digits.base == 0) >= quotas[0].least);
        prop_assert!(count(&|c| c.digits.substrate == 1) <= 1);
        prop_assert_eq!(chosen.iter().collect::<BTreeSet<_>>().len(), chosen.len());
    }
}

/// Two draws, one cell: V = (d, −d)/(σ√2) with d half the difference, so VᵀV has the one value d²·/σ² and the information
/// is ½ ln(1 + d²/σ²); a second cell that does the same adds ½ ln((1 + 2x)/(1 + x)).
#[test]
fn information_is_that_of_gaussian_errors() {
    let rows = [
        (0, 0, 0, vec![0.2f32, 0.6]),
        (1, 0, 0, vec![0.2f32, 0.6]),
        (2, 0, 0, vec![0.7f32, 0.7]),
    ];
    let candidates = candidates(&rows);
    let all = [0, 1, 2];
    let objective = objective(&task(&candidates, &all, 3), &all, 3);
    let information = |set: &[usize]| objective.worth(set).information_nats;
    let x = (0.2f64 / 0.1).powi(2);
    assert!((information(&[0]) - 0.5 * (1.0 + x).ln()).abs() < 1e-6);
    assert!((information(&[0, 1]) - 0.5 * (1.0 + 2.0 * x).ln()).abs() < 1e-6);
    assert!(
        information(&[2]).abs() < 1e-12,
        "a sure cell teaches nothing"
    );
}

/// The best two single cells are of one substrate and share their fate; the set that covers both substrates hits more.
#[test]
fn cells_that_share_their_fate_are_not_chosen_together() {
    let rows = [
        (0, 0, 0, vec![0.9f32, 0.9, 0.9, 0.0]),
        (0, 1, 0, vec![0.9f32, 0.9, 0.9, 0.0]),
        (1, 0, 0, vec![0.8f32, 0.0, 0.0, 0.8]),
    ];
    let candidates = candidates(&rows);
    let all = [0, 1, 2];
    let choice = choose(&Task {
        weights: Weights::EXPLOIT,
        ..task(&candidates, &all, 2)
    })
    .expect("a choice");
    assert!(choice.plates[0].members.contains(&2));
    // 3/4 + 1/2 against 3/4 of the plain list
    assert!((choice.chosen.units_with_hit - 1.25).abs() < 1e-12);
    assert!((choice.top_list.units_with_hit - 0.75).abs() < 1e-12);
}

#[test]
fn a_plate_has_one_temperature() {
    let rows: Vec<_> = (0..12u32)
        .map(|i| (i % 6, 0, i / 6, vec![0.5 + 0.01 * i as f32; 4]))
        .collect();
    let candidates = candidates(&rows);
    let all: Vec<usize> = (0..12).collect();
    let choice = choose(&Task {
        plates: 2,
        ..task(&candidates, &all, 4)
    })
    .expect("a choice");
    assert_eq!(choice.plates.len(), 2);
    for plate in &choice.plates {
        assert_eq!(plate.members.len(), 4);
        let mut settings = plate.members.iter().map(|&i| candidates[i].setting());
        assert!(settings.all(|setting| setting == plate.setting));
    }
    let pinned = [0, 6];
    let refused = choose(&Task {
        pinned: &pinned,
        ..task(&candidates, &all, 4)
    });
    assert!(
        matches!(refused, Err(ChoiceError::Pinned { .. })),
        "{refused:?}"
    );
}

/// Three substrates and two bases on a plate: the full factorial is all six, and D-optimal takes it too when it has six
/// places. Without one of the cells the factorial cannot be had.
#[test]
fn classical_designs_take_the_cells_they_name() {
    let rows: Vec<_> = (0..6u32)
        .map(|i| (i % 3, i / 3, 0, vec![0.1 * i as f32; 4]))
        .collect();
    let mut candidates = candidates(&rows);
    let all: Vec<usize> = (0..6).collect();
    let by = |candidates: &[Candidate], kind: DesignKind| {
        choose(&Task {
            design: Some(kind),
            ..task(candidates, &all, 6)
        })
    };
    for kind in [
        DesignKind::FullFactorial,
        DesignKind::DOptimal,
        DesignKind::SpaceFilling,
    ] {
        let choice = by(&candidates, kind).expect("a design");
        let chosen: BTreeSet<usize> = choice.plates[0].members.iter().copied().collect();
        assert_eq!(chosen, all.iter().copied().collect(), "{kind:?}");
    }
    candidates[4].eligible = false;
    let refused = by(&candidates, DesignKind::FullFactorial).expect_err("a run is missing");
    assert!(refused.to_string().contains("1 of its 6 runs"), "{refused}");
    let of_three = by(&candidates, DesignKind::PlackettBurman).expect_err("three substrates");
    assert!(of_three.to_string().contains("two values"), "{of_three}");
}
