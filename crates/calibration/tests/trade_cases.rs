//! How many of the trade's statements hold.

#![allow(clippy::print_stdout)] // the list is for whoever reads the run with --nocapture

use std::sync::Arc;

use enolattice_calibration::cases;
use enolattice_model::Model;
use enolattice_reagents::Library;

/// Least number of cases that must hold.
const LEAST: usize = 40;

#[test]
fn the_trade_is_right_about_most_cases() {
    let model = Model::new(Arc::new(Library::builtin().expect("the library reads")));
    let all = cases::all().expect("the cases read");
    let others: Vec<String> = all
        .iter()
        .filter_map(|case| {
            let verdict = case.verdict(&model);
            (verdict.holds != Some(true)).then(|| format!("{}: {}", case.id, verdict.found))
        })
        .collect();
    let holding = all.len() - others.len();
    println!(
        "{holding} of {} hold; the others:\n{}",
        all.len(),
        others.join("\n")
    );
    assert!(
        holding >= LEAST,
        "{holding} of {} hold:\n{}",
        all.len(),
        others.join("\n")
    );
}
