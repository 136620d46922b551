//! A laboratory's own acidities are those of the sites, in place of the library's and of the estimate's.

use enolattice_model::{AcidSite, Origin, acid_sites};
use enolattice_molecule::Molecule;
use enolattice_reagents::{Library, OwnTable};

fn with_own() -> Library {
    let own = OwnTable {
        name: "own_acidities.tsv".to_owned(),
        text: include_str!("../../reagents/testdata/own_acidities.tsv").to_owned(),
    };
    let builtin = Library::builtin().unwrap();
    let (library, _) = builtin
        .with_own(&[own])
        .unwrap_or_else(|faults| panic!("{faults:?}"));
    library
}

fn site(smiles: &str, atom: usize, library: &Library) -> AcidSite {
    let sites = acid_sites(&Molecule::parse(smiles).unwrap(), library);
    let mut of_atom = sites
        .into_iter()
        .filter(|site| site.equivalent.contains(&atom));
    of_atom.next().unwrap_or_else(|| panic!("{smiles}: {atom}"))
}

/// The file of the laboratory says 26.1 for cyclohexanone, where Bordwell's list has 26.4, and 15.1 and 18.9 for
/// the C–H and the N–H of a malonic ester anilide, which was estimated so far.
#[test]
fn the_laboratory_s_values_come_first() {
    let (builtin, own) = (Library::builtin().unwrap(), with_own());
    let cyclohexanone = "C1CCCCC1=O";
    assert_eq!(site(cyclohexanone, 0, &builtin).pka_dmso, 26.4);
    let measured = site(cyclohexanone, 0, &own);
    assert_eq!(measured.pka_dmso, 26.1);
    assert!(measured.source.contains("notebook"), "{}", measured.source);

    let anilide = "c1ccccc1NC(=O)CC(=O)OCC";
    let (nitrogen, carbon) = (6, 9);
    for (atom, expected) in [(nitrogen, 18.9), (carbon, 15.1)] {
        assert_eq!(site(anilide, atom, &builtin).origin, Origin::Estimated);
        let measured = site(anilide, atom, &own);
        assert_eq!(measured.origin, Origin::Measured);
        assert_eq!(measured.pka_dmso, expected);
    }
    // other compounds keep the estimate
    let other = "CCOC(=O)CC(=O)Nc1ccc(C)cc1";
    assert_eq!(
        site(other, 5, &own).pka_dmso,
        site(other, 5, &builtin).pka_dmso
    );
}
