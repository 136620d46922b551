//! Mixtures of solvents against handbook values and what every bench chemist knows.

use enolattice_molecule::AnionClass;
use enolattice_reagents::{Library, MixtureError, SolventClass};

fn library() -> Library {
    Library::builtin().unwrap_or_else(|fault| panic!("{fault}"))
}

#[test]
fn a_mixture_is_named_by_its_parts_in_the_smallest_whole_volumes() {
    let library = library();
    let name = |text: &str| library.solvent_or_mixture(text).unwrap().name;
    assert_eq!(name("THF/DMF 4:1"), "THF/DMF 4:1");
    assert_eq!(name(" tetrahydrofuran / 68-12-2   8:2 "), "THF/DMF 4:1");
    assert_eq!(name("DMF/THF 1:4"), "DMF/THF 1:4");
    assert_eq!(name("EtOH/water"), "EtOH/water 1:1");
    assert_eq!(name("toluene/EtOH/water 4:1:1"), "toluene/EtOH/water 4:1:1");
    assert_eq!(name("1,4-dioxane/H2O 2.5:1"), "dioxane/water 5:2");
    assert_eq!(name("ethyl acetate/2-butanone 9:1"), "EtOAc/butanone 9:1");
    let mixture = library.mixture(&[("THF", 0.8), ("HMPA", 0.2)]).unwrap();
    assert_eq!(mixture.name, "THF/HMPA 4:1");
    assert_eq!(
        mixture.parts,
        [("THF".to_owned(), 0.8), ("HMPA".to_owned(), 0.2)]
    );
    assert!(library.solvent_or_mixture("THF").unwrap().parts.is_empty());
}

#[test]
fn what_is_no_mixture_is_refused_with_the_reason() {
    let library = library();
    let fault = |text: &str| library.solvent_or_mixture(text).unwrap_err().to_string();
    for (text, expected) in [
        (
            "THFF",
            "no solvent `THFF` in the library; did you mean `THF`?",
        ),
        ("THF/zzzz 4:1", "no solvent `zzzz` in the library"),
        (
            "THF/THF 4:1",
            "`THF` is there twice: write each part of a mixture once",
        ),
        (
            "THF/DMF 4",
            "no solvent `DMF 4` in the library; did you mean `DMF`?",
        ),
        (
            "THF/DMF 4:1:1",
            "3 volumes for 2 parts: write one for each, as in `THF/DMF 4:1`, or none for equal volumes",
        ),
        (
            "THF/DMF 4:0",
            "`0` is no volume of a part: write a number from 0.001 to 1000",
        ),
        (
            "THF/DMF 4:1.2.3",
            "`1.2.3` is no volume of a part: write a number from 0.001 to 1000",
        ),
        (
            "THF/DMF 4:x",
            "`x` is no volume of a part: write a number from 0.001 to 1000",
        ),
        (
            "THF/DMF/DMSO/water",
            "4 parts: a mixture has two or three, written `THF/DMF 4:1`",
        ),
    ] {
        assert_eq!(fault(text), expected, "{text}");
    }
    for text in [
        "",
        "/",
        " ",
        "::",
        "THF/",
        "4:1",
        "/ 1:1",
        "é/ü 1:1",
        "\u{0}/\u{0}",
    ] {
        assert!(library.solvent_or_mixture(text).is_err(), "{text}");
    }
    for volume in [f64::NAN, f64::INFINITY, -1.0, 0.0, 1e-9, 1e300] {
        let mixed = library.mixture(&[("THF", 1.0), ("DMF", volume)]);
        assert!(
            matches!(mixed, Err(MixtureError::Volume { .. })),
            "{volume}"
        );
    }
}

/// 50 % ethanol by mass is 56 % by volume before mixing; relative permittivity 49.0, density
/// 0.910 at 25 °C (Åkerlöf, J. Am. Chem. Soc. 1932, 54, 4125, and handbooks; quoted from memory).
#[test]
fn ethanol_and_water_are_near_the_handbook() {
    let mixture = library().solvent_or_mixture("EtOH/water 56:44").unwrap();
    assert!(
        (mixture.permittivity - 49.0).abs() < 1.0,
        "{}",
        mixture.permittivity
    );
    // volumes are taken to add up; these two lose 3.5 %
    assert!(
        (mixture.density_g_ml - 0.910).abs() < 0.04,
        "{}",
        mixture.density_g_ml
    );
    assert_eq!(mixture.class, SolventClass::Alcohol);
}

#[test]
fn amounts_of_a_mixture_add_up() {
    let library = library();
    let mixture = library
        .solvent_or_mixture("toluene/EtOH/water 4:1:1")
        .unwrap();
    let pure = |name: &str| library.solvent(name).unwrap();
    let parts = ["toluene", "EtOH", "water"].map(pure);
    let volumes = [4.0 / 6.0, 1.0 / 6.0, 1.0 / 6.0];
    let sum = |of: &dyn Fn(usize) -> f64| (0..3).map(of).sum::<f64>();
    let moles = sum(&|i| volumes[i] * parts[i].concentration_m());
    assert!((mixture.concentration_m() - moles).abs() < 1e-9);
    let water_g = sum(&|i| volumes[i] * parts[i].density_g_ml * parts[i].water_ppm * 1e-6);
    assert!((mixture.water_ppm * 1e-6 * mixture.density_g_ml - water_g).abs() < 1e-12);
    assert!(mixture.viscosity_mpa_s < pure("EtOH").viscosity_mpa_s);
    assert!(mixture.viscosity_mpa_s > pure("toluene").viscosity_mpa_s);
    assert_eq!(mixture.boiling_c, pure("EtOH").boiling_c);
    assert_eq!(mixture.flash_c, pure("toluene").flash_c);
    let fractions: f64 = mixture.components().map(|part| part.volume_fraction).sum();
    assert!((fractions - 1.0).abs() < 1e-12);
    for code in ["H225", "H319", "H361d"] {
        assert!(mixture.hazards.has(code), "{code}");
    }
}

/// Benzene and cyclohexane, 1:1 by volume (0.55 and 0.45 by moles): the liquidus is near -40 °C
/// (handbooks, from memory); Walden's rule fits neither well, and errs towards freezing early.
#[test]
fn a_mixture_freezes_below_its_parts() {
    let library = library();
    let mixture = library
        .solvent_or_mixture("benzene/cyclohexane 1:1")
        .unwrap();
    assert!(
        mixture.melting_c < -10.0 && mixture.melting_c > -45.0,
        "{}",
        mixture.melting_c
    );
    // the classic medium of lithium enolates is a liquid
    let classic = library.solvent_or_mixture("THF/HMPA 9:1").unwrap();
    assert!(classic.melting_c < -78.0, "{}", classic.melting_c);
}

/// Which pairs separate in the funnel, and which do not (common practice).
#[test]
fn pairs_that_separate_are_flagged() {
    let library = library();
    for (text, biphasic) in [
        ("toluene/water 1:1", true),
        ("DCM/water 1:1", true),
        ("EtOAc/water 1:1", true),
        ("2-MeTHF/water 4:1", true),
        ("hexane/MeCN 1:1", true),
        ("heptane/DMF 1:1", true),
        ("toluene/EtOH/water 4:1:1", true),
        ("EtOH/toluene/water 4:1:1", false),
        ("THF/water 4:1", false),
        ("EtOH/water 1:1", false),
        ("toluene/DMF 1:1", false),
        ("DCM/MeOH 9:1", false),
        ("THF/hexane 1:1", false),
    ] {
        let mixture = library.solvent_or_mixture(text).unwrap();
        assert_eq!(mixture.biphasic, biphasic, "{text}");
    }
}

/// Acetone (19.3) is a weaker acid than water (15.7) in water and a stronger one in DMSO.
#[test]
fn the_acid_of_a_mixture_depends_on_what_it_is_made_of() {
    let library = library();
    let acid = |text: &str| {
        let mixture = library.solvent_or_mixture(text).unwrap();
        (mixture.acid.unwrap().1, mixture.acid_m)
    };
    assert_eq!(acid("acetone/water 1:9").0, AnionClass::Hydroxide);
    assert_eq!(acid("acetone/water 9:1").0, AnionClass::Ketone);
    let (class, acid_m) = acid("THF/MeOH 9:1");
    assert_eq!(class, AnionClass::Alkoxide);
    assert!((acid_m - 2.454).abs() < 0.01, "{acid_m}");
    let none = library.solvent_or_mixture("THF/hexane").unwrap();
    assert!(none.acid.is_none() && none.acid_m == 0.0);
}

#[test]
fn a_solid_dissolves_in_the_part_that_dissolves_it() {
    let library = library();
    let log = |base: &str, solvent: &str| {
        let solvent = library.solvent_or_mixture(solvent).unwrap();
        library.base(base).unwrap().log_solubility_for(&solvent)
    };
    // S = 0.5 · 10^-4.2 + 0.5 · 10^-2
    let half = log("K2CO3", "THF/DMF 1:1").unwrap();
    assert!((half - -2.298).abs() < 0.001, "{half}");
    // ethanol does not limit the ethoxide, THF does: a tenth of 1 mol/L
    let some = log("NaOEt", "THF/EtOH 9:1").unwrap();
    assert!((some - -0.963).abs() < 0.001, "{some}");
    assert_eq!(log("LDA", "THF/hexane 1:1"), None);
}

#[test]
fn a_mixture_lists_what_it_is_made_of_and_classes_follow_the_larger_part() {
    let library = library();
    let class = |text: &str| library.solvent_or_mixture(text).unwrap().class;
    assert_eq!(class("THF/DMF 4:1"), SolventClass::Ether);
    assert_eq!(class("THF/DMF 1:4"), SolventClass::DipolarAprotic);
    assert_eq!(class("DMSO/EtOH/water 2:1:1"), SolventClass::Alcohol);
    assert_eq!(class("THF/water 3:1"), SolventClass::Ether);
    assert_eq!(class("THF/water 1:1"), SolventClass::Water);
    let mixture = library.solvent_or_mixture("THF/DMF 4:1").unwrap();
    let classes: Vec<SolventClass> = mixture.components().map(|part| part.class).collect();
    assert_eq!(classes, [SolventClass::Ether, SolventClass::DipolarAprotic]);
    assert!(mixture.peroxide_former);
}
