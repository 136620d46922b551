//! Proton balances as JSON, for a check against an independent equilibrium solver.

use enolattice_model::{Acid, proton_balance};
use serde_json::{Value, json};

/// Balances that a laboratory meets, then mixtures drawn with a fixed seed.
fn cases() -> Vec<(String, Vec<Acid>)> {
    let acid = |name: &str, pkas: &[f64], charged_m: &[f64]| Acid {
        name: name.to_owned(),
        pkas: pkas.to_vec(),
        charged_m: charged_m.to_vec(),
    };
    let mut cases = vec![
        (
            "malonate and ethoxide in ethanol".to_owned(),
            vec![
                acid("diethyl malonate", &[13.6], &[0.2, 0.0]),
                acid("ethanol", &[20.3], &[16.9, 0.22]),
            ],
        ),
        (
            "malonate and carbonate in water".to_owned(),
            vec![
                acid("diethyl malonate", &[13.3], &[0.2, 0.0]),
                acid("carbonic acid", &[6.35, 10.33], &[0.0, 0.0, 0.3]),
                acid("water", &[15.7], &[55.0, 0.0]),
            ],
        ),
        (
            "phosphate and a 1,3-diketone in water".to_owned(),
            vec![
                acid("acetylacetone", &[8.9], &[0.1, 0.0]),
                acid(
                    "phosphoric acid",
                    &[2.15, 7.2, 12.35],
                    &[0.0, 0.0, 0.0, 0.1],
                ),
                acid("water", &[15.7], &[55.0, 0.0]),
            ],
        ),
    ];
    let mut state = 20_261_201_u64;
    let mut uniform = || {
        state = state
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (state >> 11) as f64 / (1_u64 << 53) as f64
    };
    for number in 1..=24 {
        let mut acids = Vec::new();
        for index in 0..2 + number % 4 {
            let steps = 1 + usize::from(index == 0 && number % 3 == 0);
            let mut pkas: Vec<f64> = (0..steps).map(|_| 8.0 + 12.0 * uniform()).collect();
            pkas.sort_by(f64::total_cmp);
            let charged_m: Vec<f64> = (0..=steps).map(|_| 0.02 + 0.3 * uniform()).collect();
            acids.push(acid(&format!("acid {}", index + 1), &pkas, &charged_m));
        }
        cases.push((format!("mixture {number}"), acids));
    }
    cases
}

/// All balances with our solution.
pub fn to_json() -> Value {
    let cases: Vec<Value> = cases()
        .into_iter()
        .map(|(name, acids)| {
            let solution = proton_balance(&acids);
            let acids: Vec<Value> = acids
                .iter()
                .zip(solution)
                .map(|(acid, forms)| {
                    json!({
                        "name": acid.name,
                        "pkas": acid.pkas,
                        "charged_m": acid.charged_m,
                        "solution_m": forms,
                    })
                })
                .collect();
            json!({ "name": name, "acids": acids })
        })
        .collect();
    json!({ "cases": cases })
}
