//! The fast solver keeps close to the stiff reference.

use std::sync::Arc;

use enolattice_calibration::solvers;
use enolattice_model::Model;
use enolattice_reagents::Library;

#[test]
fn most_random_cells_agree_within_five_percent() {
    let model = Model::new(Arc::new(Library::builtin().expect("the library reads")));
    let compared = solvers::compare(&model, 200).expect("the demo's substrates read");
    let given_up = &compared.given_up;
    assert!(given_up.is_empty(), "{given_up:?}");
    let all = compared.found.len();
    let close = |c: &&solvers::Comparison| c.difference() <= 0.05;
    let close = compared.found.iter().filter(close).count();
    // the aim of the design
    assert!(close * 100 >= all * 95, "{close} of {all}");
}
