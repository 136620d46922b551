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

/// The means of the model are those of the fit to the published pairs.
#[test]
fn the_parameters_are_those_of_the_fit() {
    for one in medium::parameters(&model()).expect("every row can be used") {
        assert!((one.mean - one.fitted).abs() <= one.sigma, "{one:?}");
    }
}

/// Published pairs (from memory); acids foretold from all others too, where a kind has five members and more.
#[test]
fn bases_of_every_kind_are_within_one_unit_in_every_solvent() {
    let compared = medium::compare(&model()).expect("every row can be used");
    for kind in [
        "alkylamines",
        "anilines",
        "pyridines and imidazole",
        "amidines and guanidines",
        "phosphazenes",
    ] {
        for solvent in ["water", "MeCN", "THF", "MeOH"] {
            let of = |error: fn(&medium::Comparison) -> Option<f64>| -> Vec<f64> {
                let mut set = compared.iter().collect::<Vec<_>>();
                set.retain(|one| one.kind == kind && one.medium == solvent);
                set.into_iter().filter_map(error).collect()
            };
            let rms = |errors: &[f64]| {
                let sum: f64 = errors.iter().map(|error| error * error).sum();
                (sum / errors.len().max(1) as f64).sqrt()
            };
            let fitted = of(|one| Some(one.error()));
            let left_out = of(|one| one.left_out);
            assert!(rms(&fitted) <= 1.0, "{kind} in {solvent}: {fitted:?}");
            assert!(
                left_out.len() < 5 || rms(&left_out) <= 1.0,
                "{kind} in {solvent}"
            );
        }
    }
}
