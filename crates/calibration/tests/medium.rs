//! The medium's page is the present one, and the form serves every kind of acid that has many members.

use std::sync::Arc;

use enolattice_calibration::medium;
use enolattice_model::Model;
use enolattice_reagents::Library;

fn model() -> Model {
    Model::new(Arc::new(Library::builtin().expect("the library reads")))
}

#[test]
fn the_page_on_the_medium_is_current() {
    let page = medium::page(&model()).expect("every row can be used");
    let stored = include_str!("../docs/medium.md");
    assert!(
        page == stored,
        "run `cargo run -p enolattice-calibration -- medium` and read what has changed"
    );
}

#[test]
fn carbon_acids_in_water_are_within_one_unit() {
    // published pairs of reference acids, Bordwell 1988 and standard compilations (from memory)
    let errors: Vec<f64> = medium::compare(&model())
        .expect("every row can be used")
        .into_iter()
        .filter(|one| one.kind == "carbon acids" && one.medium == "water")
        .map(|one| one.model - one.published)
        .collect();
    let rms = (errors.iter().map(|e| e * e).sum::<f64>() / errors.len() as f64).sqrt();
    assert!(
        errors.len() >= 15 && rms <= 1.0,
        "{rms:.2} over {}",
        errors.len()
    );
}
