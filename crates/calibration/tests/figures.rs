//! The page of all figures is the present one, and what it promises holds.

use std::sync::Arc;

use enolattice_calibration::{dianions, figures};
use enolattice_model::Model;
use enolattice_reagents::Library;

fn model() -> Model {
    Model::new(Arc::new(Library::builtin().expect("the library reads")))
}

#[test]
fn the_page_of_figures_is_current() {
    let page = figures::page(&model()).expect("every table can be used");
    let stored = include_str!("../docs/figures.md");
    assert!(
        page == stored,
        "run `cargo run -p enolattice-calibration -- figures` and read what has changed"
    );
}

/// A second proton goes to the bases that are known to take it, not to those that leave it, and is where it was
/// measured (`data/dianions.tsv`).
#[test]
fn second_protons_lie_between_the_bases_that_take_and_leave_them() {
    for one in dianions::compare(&model()).expect("every row can be used") {
        if let Some(published) = one.published {
            assert!((one.second - published).abs() <= 2.5, "{one:?}");
        }
        if let Some((_, pka)) = &one.taken_by {
            assert!(one.second < *pka, "{one:?}");
        }
        if let Some((_, pka)) = &one.left_by {
            assert!(one.second > pka - 1.0, "{one:?}");
        }
        assert!(one.second > one.first, "{one:?}");
        assert!(
            one.known_site.is_none_or(|site| site == one.site),
            "{one:?}"
        );
    }
}
