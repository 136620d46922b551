//! Pairs that every bench chemist knows (common practice), and pairs that must stay quiet.

use std::sync::LazyLock;

use enolattice_molecule::Molecule;
use enolattice_reagents::Library;

use super::Category::*;
use super::*;

/// Read once: it parses some six hundred structures.
static LIBRARY: LazyLock<Library> = LazyLock::new(|| Library::builtin().expect("the library reads"));

const MALONATE: &str = "CCOC(=O)CC(=O)OCC";
const KETONE: &str = "CC(=O)c1ccccc1";

fn found(base: &str, electrophile: &str, solvent: &str, t: f64, substrate: &str) -> Vec<Caution> {
    let library = &*LIBRARY;
    let molecule = Molecule::parse(electrophile).unwrap();
    cautions(
        library.base(base).unwrap(),
        &molecule,
        library.electrophile_by_structure(molecule.canonical()),
        &Molecule::parse(substrate).unwrap(),
        library.solvent(solvent).unwrap(),
        t,
        t,
    )
}

fn severity(cautions: &[Caution], category: Category) -> Option<Severity> {
    cautions
        .iter()
        .filter(|c| c.category == category)
        .map(|c| c.severity)
        .max()
}

#[test]
fn known_dangerous_cells_carry_their_caution() {
    let check = |(base, electrophile, solvent, t, substrate, category, at_least): (
        &str,
        &str,
        &str,
        f64,
        &str,
        Category,
        Severity,
    )| {
        let cautions = found(base, electrophile, solvent, t, substrate);
        assert!(
            severity(&cautions, category) >= Some(at_least),
            "{base}, {electrophile}, {solvent}, {t}: {category:?} in {cautions:#?}"
        );
    };
    use Severity::{Note, Stop, Warning};
    let (bu_br, bn_br, methyl_iodide) = ("CCCCBr", "BrCc1ccccc1", "CI");
    // Bases and solvents.
    check(("nBuLi", bn_br, "THF", -78.0, KETONE, Pyrophoric, Warning));
    check(("LDA", bn_br, "THF", -78.0, KETONE, Pyrophoric, Note));
    check(("NaH", bu_br, "DMSO", 60.0, MALONATE, Runaway, Stop));
    check(("NaH", bu_br, "DMSO", 25.0, MALONATE, Runaway, Warning));
    check(("NaH", bu_br, "DMF", 25.0, MALONATE, Runaway, Warning));
    check(("KH", bu_br, "DMAc", 25.0, MALONATE, Runaway, Warning));
    check(("NaH", bu_br, "THF", 25.0, MALONATE, Gas, Note));
    check(("NaH", bu_br, "EtOH", 25.0, MALONATE, Gas, Warning));
    check(("NaH", bu_br, "EtOH", 25.0, MALONATE, Violent, Warning));
    check(("NaH", bu_br, "water", 25.0, MALONATE, Violent, Stop));
    check(("LDA", bu_br, "water", 25.0, MALONATE, Violent, Stop));
    check(("nBuLi", bu_br, "MeOH", -20.0, MALONATE, Violent, Stop));
    check(("KOtBu", bu_br, "CHCl3", 25.0, MALONATE, Violent, Stop));
    check(("NaOH", bu_br, "CHCl3", 25.0, MALONATE, Runaway, Stop));
    check(("KOtBu", bu_br, "DCM", 25.0, MALONATE, Violent, Warning));
    check(("LDA", bu_br, "DCM", -20.0, MALONATE, Runaway, Warning));
    check(("nBuLi", bu_br, "DCM", -78.0, MALONATE, Runaway, Stop));
    check(("KOtBu", bu_br, "acetone", 25.0, MALONATE, Runaway, Note));
    check(("LDA", bu_br, "acetone", -20.0, MALONATE, Runaway, Warning));
    check(("NaNH2", bu_br, "toluene", 25.0, MALONATE, Explosive, Note));
    // Substances by their hazard statements.
    check(("KOtBu", "CCI", "HMPA", 25.0, MALONATE, Carcinogen, Warning));
    check(("DBU", bu_br, "benzene", 25.0, MALONATE, Carcinogen, Warning));
    check(("Et3N", bu_br, "DCM", 25.0, MALONATE, Carcinogen, Note));
    check((
        "NaOEt",
        "COS(=O)(=O)OC",
        "EtOH",
        25.0,
        MALONATE,
        Carcinogen,
        Warning,
    ));
    check((
        "NaOEt",
        "COS(=O)(=O)OC",
        "EtOH",
        25.0,
        MALONATE,
        AcutelyToxic,
        Warning,
    ));
    check((
        "K2CO3",
        methyl_iodide,
        "acetone",
        25.0,
        MALONATE,
        Carcinogen,
        Note,
    ));
    check((
        "K2CO3",
        "C=CC(C)=O",
        "DMF",
        25.0,
        MALONATE,
        AcutelyToxic,
        Warning,
    ));
    check((
        "K2CO3",
        "CCOC(=O)CBr",
        "DMF",
        25.0,
        MALONATE,
        AcutelyToxic,
        Warning,
    ));
    check((
        "K2CO3", "C=CC#N", "DMF", 25.0, MALONATE, Carcinogen, Warning,
    ));
    check(("LDA", bn_br, "Et2O", 0.0, KETONE, PeroxideFormer, Note));
    check(("LDA", bn_br, "dioxane", 25.0, KETONE, PeroxideFormer, Note));
    check(("LDA", bn_br, "Et2O", 25.0, KETONE, Flammable, Note));
    check(("NaH", bn_br, "THF", 25.0, KETONE, Flammable, Warning));
    // Structures, listed or not.
    check((
        "DBU",
        "BrCc1ccc(F)cc1",
        "MeCN",
        25.0,
        KETONE,
        Carcinogen,
        Note,
    ));
    check((
        "DBU",
        "CCOS(=O)(=O)C(F)(F)F",
        "MeCN",
        25.0,
        KETONE,
        AcutelyToxic,
        Warning,
    ));
    check(("K2CO3", "C#CCBr", "DMF", 25.0, KETONE, Explosive, Warning));
    check((
        "K2CO3",
        "BrCCCN=[N+]=[N-]",
        "DMF",
        25.0,
        KETONE,
        Explosive,
        Stop,
    ));
    check((
        "K2CO3",
        bn_br,
        "DMF",
        25.0,
        "CC(=O)CCCCCCCCCCN=[N+]=[N-]",
        Explosive,
        Warning,
    ));
    check((
        "K2CO3",
        bn_br,
        "DMF",
        25.0,
        "CCOC(=O)C=[N+]=[N-]",
        Explosive,
        Warning,
    ));
    check((
        "NaOH",
        "O=Cc1ccccc1",
        "water",
        25.0,
        "C[N+](=O)[O-]",
        Explosive,
        Warning,
    ));
    check((
        "Et3N",
        "O=Cc1ccccc1",
        "EtOH",
        25.0,
        "CC[N+](=O)[O-]",
        Explosive,
        Note,
    ));
    check(("NaOEt", "C=CC#N", "EtOH", 25.0, MALONATE, Runaway, Warning));
    check((
        "KOtBu",
        "C=CC(=O)OC",
        "THF",
        25.0,
        MALONATE,
        Runaway,
        Warning,
    ));
    check(("Et3N", "C=CC=O", "THF", 25.0, MALONATE, Runaway, Warning));
    check(("DBU", "C=CC(=O)OC", "MeCN", 25.0, MALONATE, Runaway, Note));
    check(("NaOH", "CC=O", "water", 10.0, MALONATE, Runaway, Note));
    check((
        "pyridine",
        "COS(=O)(=O)C(F)(F)F",
        "DCM",
        0.0,
        MALONATE,
        Violent,
        Warning,
    ));
    check(("Et3N", methyl_iodide, "DMF", 25.0, MALONATE, Violent, Note));
    check((
        "K2CO3",
        "COS(=O)(=O)C(F)(F)F",
        "DMSO",
        25.0,
        MALONATE,
        Runaway,
        Warning,
    ));
    check((
        "K2CO3",
        "COS(=O)(=O)C(F)(F)F",
        "THF",
        25.0,
        MALONATE,
        Runaway,
        Warning,
    ));
    check((
        "K2CO3",
        "O=C(CBr)c1ccccc1",
        "DMSO",
        25.0,
        MALONATE,
        Runaway,
        Warning,
    ));
    check((
        "K2CO3",
        bn_br,
        "acetone",
        25.0,
        "OC(=O)Cc1ccccc1",
        Gas,
        Note,
    ));
    // Temperatures.
    check((
        "K2CO3",
        methyl_iodide,
        "acetone",
        60.0,
        MALONATE,
        AboveBoilingPoint,
        Warning,
    ));
    check((
        "K2CO3",
        methyl_iodide,
        "DMF",
        50.0,
        MALONATE,
        AboveBoilingPoint,
        Warning,
    ));
    check((
        "DBU",
        bn_br,
        "DMSO",
        0.0,
        MALONATE,
        BelowMeltingPoint,
        Warning,
    ));
    check((
        "NaOH",
        bn_br,
        "water",
        -20.0,
        MALONATE,
        BelowMeltingPoint,
        Warning,
    ));
}

#[test]
fn what_is_not_dangerous_in_that_way_stays_quiet() {
    let check = |(base, electrophile, solvent, t, category): (&str, &str, &str, f64, Category)| {
        let cautions = found(base, electrophile, solvent, t, MALONATE);
        assert_eq!(
            severity(&cautions, category),
            None,
            "{base}, {solvent}: {cautions:#?}"
        );
    };
    check(("K2CO3", "CCCCBr", "DMF", 25.0, Runaway));
    check(("K2CO3", "CCCCBr", "DMF", 25.0, Gas));
    check(("LDA", "CCCCBr", "THF", -78.0, Runaway));
    check(("LDA", "CCCCBr", "THF", -78.0, BelowMeltingPoint));
    check(("NaOEt", "CCCCBr", "EtOH", 78.0, AboveBoilingPoint));
    check(("NaOEt", "CCCCBr", "EtOH", 78.0, Violent));
    check(("Et3N", "CCCCBr", "DCM", 25.0, Violent));
    check(("DBU", "CCCCBr", "toluene", 25.0, Explosive));
    check(("DBU", "O=[N+]([O-])/C=C/c1ccccc1", "MeCN", 25.0, Explosive));
    check(("DBU", "BrCc1ccccc1", "water", 25.0, Flammable));
    check((
        "NaH",
        "O=Cc1ccc([N+](=O)[O-])cc1",
        "toluene",
        25.0,
        Explosive,
    ));
    check(("DBU", "C/C=C/C(=O)OC", "MeCN", 25.0, Runaway));
    check(("K2CO3", "CCCCCl", "DMF", 25.0, Carcinogen));
}

#[test]
fn the_bits_of_the_parts_join_to_the_bits_of_the_cell() {
    let library = &*LIBRARY;
    let substrates = [MALONATE, "CC[N+](=O)[O-]", "OC(=O)Cc1ccccc1"];
    let substrates = substrates.map(|smiles| Molecule::parse(smiles).unwrap());
    let electrophiles: Vec<(Molecule, _)> = library
        .electrophiles()
        .iter()
        .map(|named| (Molecule::parse(&named.smiles).unwrap(), named))
        .collect();
    for (base, solvent) in library
        .bases()
        .iter()
        .flat_map(|b| library.solvents().iter().map(move |s| (b, s)))
    {
        let (t, formation) = (60.0, -20.0);
        let pot = caution_bits(&base_solvent_cautions(base, solvent, t, formation));
        for (electrophile, named) in electrophiles.iter().step_by(7) {
            let named = Some(*named);
            let parts = [
                caution_bits(&electrophile_solvent_cautions(
                    electrophile,
                    named,
                    solvent,
                    t,
                )),
                caution_bits(&base_electrophile_cautions(base, electrophile)),
            ];
            let mixed = parts.into_iter().fold(pot, join_caution_bits);
            for substrate in &substrates {
                let last = caution_bits(&base_substrate_cautions(base, substrate));
                let all = cautions(base, electrophile, named, substrate, solvent, t, formation);
                assert_eq!(join_caution_bits(mixed, last), caution_bits(&all));
            }
        }
    }
}

#[test]
fn the_severest_caution_comes_first_and_is_the_severity_of_the_bits() {
    let all = found("NaH", "CCCCBr", "DMSO", 60.0, MALONATE);
    assert!(all.is_sorted_by_key(|c| std::cmp::Reverse(c.severity)));
    assert_eq!(
        Severity::from_bits(caution_bits(&all)),
        Some(Severity::Stop)
    );
    assert_eq!(Severity::from_bits(caution_bits(&[])), None);
    // A note and a warning make a warning, not the stop that or-ing their bits would.
    let note = Severity::Note.bits() | Gas.bit();
    let warning = Severity::Warning.bits() | Violent.bit();
    let joined = join_caution_bits(note, warning);
    assert_eq!(joined, Severity::Warning.bits() | Gas.bit() | Violent.bit());
}

#[test]
fn unknown_hazards_are_said_to_be_unknown() {
    let library = &*LIBRARY;
    let of = |name: &str| {
        let hazards = library.electrophile(name).map(|named| &named.hazards);
        hazard_statements(name, hazards)
    };
    let unknown = "unknown, consult the supplier's safety data sheet";
    assert!(of("chalcone").ends_with(unknown), "{}", of("chalcone"));
    assert!(of("not in the library").ends_with(unknown));
    assert_eq!(
        of("hexanal"),
        "hazards of hexanal: H226, H319 (from memory, 2026-12)"
    );
    let every = library.search("");
    assert!(
        every
            .iter()
            .all(|r| !hazard_statements(r.name(), Some(r.hazards())).contains("safe "))
    );
}
