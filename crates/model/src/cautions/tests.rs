//! Pairs that every bench chemist knows (common practice), and pairs that must stay quiet.

use std::sync::LazyLock;

use enolattice_molecule::Molecule;
use enolattice_reagents::Library;

use super::Category::*;
use super::*;

/// Read once: it parses some six hundred structures.
static LIBRARY: LazyLock<Library> =
    LazyLock::new(|| Library::builtin().expect("the library reads"));

const MALONATE: &str = "CCOC(=O)CC(=O)OCC";

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

/// Base, electrophile, solvent, temperature in °C, substrate, category, least severity.
const DANGEROUS: &str = "
# Bases and solvents.
nBuLi | BrCc1ccccc1 | THF | -78 | CC(=O)c1ccccc1 | pyrophoric | warning
LDA | BrCc1ccccc1 | THF | -78 | CC(=O)c1ccccc1 | pyrophoric | note
NaH | CCCCBr | DMSO | 60 | CCOC(=O)CC(=O)OCC | runaway | stop
NaH | CCCCBr | DMSO | 25 | CCOC(=O)CC(=O)OCC | runaway | warning
NaH | CCCCBr | DMF | 25 | CCOC(=O)CC(=O)OCC | runaway | warning
KH | CCCCBr | DMAc | 25 | CCOC(=O)CC(=O)OCC | runaway | warning
NaH | CCCCBr | THF | 25 | CCOC(=O)CC(=O)OCC | gas | note
NaH | CCCCBr | EtOH | 25 | CCOC(=O)CC(=O)OCC | gas | warning
NaH | CCCCBr | EtOH | 25 | CCOC(=O)CC(=O)OCC | violent | warning
NaH | CCCCBr | water | 25 | CCOC(=O)CC(=O)OCC | violent | stop
LDA | CCCCBr | water | 25 | CCOC(=O)CC(=O)OCC | violent | stop
nBuLi | CCCCBr | MeOH | -20 | CCOC(=O)CC(=O)OCC | violent | stop
KOtBu | CCCCBr | CHCl3 | 25 | CCOC(=O)CC(=O)OCC | violent | stop
NaOH | CCCCBr | CHCl3 | 25 | CCOC(=O)CC(=O)OCC | runaway | stop
KOtBu | CCCCBr | DCM | 25 | CCOC(=O)CC(=O)OCC | violent | warning
LDA | CCCCBr | DCM | -20 | CCOC(=O)CC(=O)OCC | runaway | warning
nBuLi | CCCCBr | DCM | -78 | CCOC(=O)CC(=O)OCC | runaway | stop
KOtBu | CCCCBr | acetone | 25 | CCOC(=O)CC(=O)OCC | runaway | note
LDA | CCCCBr | acetone | -20 | CCOC(=O)CC(=O)OCC | runaway | warning
NaNH2 | CCCCBr | toluene | 25 | CCOC(=O)CC(=O)OCC | explosive | note
# Substances by their hazard statements.
KOtBu | CCI | HMPA | 25 | CCOC(=O)CC(=O)OCC | carcinogen | warning
DBU | CCCCBr | benzene | 25 | CCOC(=O)CC(=O)OCC | carcinogen | warning
Et3N | CCCCBr | DCM | 25 | CCOC(=O)CC(=O)OCC | carcinogen | note
NaOEt | COS(=O)(=O)OC | EtOH | 25 | CCOC(=O)CC(=O)OCC | carcinogen | warning
NaOEt | COS(=O)(=O)OC | EtOH | 25 | CCOC(=O)CC(=O)OCC | acutely toxic | warning
K2CO3 | CI | acetone | 25 | CCOC(=O)CC(=O)OCC | carcinogen | note
K2CO3 | C=CC(C)=O | DMF | 25 | CCOC(=O)CC(=O)OCC | acutely toxic | warning
K2CO3 | CCOC(=O)CBr | DMF | 25 | CCOC(=O)CC(=O)OCC | acutely toxic | warning
K2CO3 | C=CC#N | DMF | 25 | CCOC(=O)CC(=O)OCC | carcinogen | warning
LDA | BrCc1ccccc1 | Et2O | 0 | CC(=O)c1ccccc1 | peroxide former | note
LDA | BrCc1ccccc1 | dioxane | 25 | CC(=O)c1ccccc1 | peroxide former | note
LDA | BrCc1ccccc1 | Et2O | 25 | CC(=O)c1ccccc1 | flammable | note
NaH | BrCc1ccccc1 | THF | 25 | CC(=O)c1ccccc1 | flammable | warning
# Structures, listed or not.
DBU | COCCl | MeCN | 25 | CC(=O)c1ccccc1 | carcinogen | note
DBU | CC1CO1 | MeCN | 25 | CC(=O)c1ccccc1 | carcinogen | note
DBU | BrCc1ccc(F)cc1 | MeCN | 25 | CC(=O)c1ccccc1 | carcinogen | note
DBU | CCOS(=O)(=O)C(F)(F)F | MeCN | 25 | CC(=O)c1ccccc1 | acutely toxic | warning
K2CO3 | C#CCBr | DMF | 25 | CC(=O)c1ccccc1 | explosive | warning
K2CO3 | BrCCCN=[N+]=[N-] | DMF | 25 | CC(=O)c1ccccc1 | explosive | stop
K2CO3 | BrCc1ccccc1 | DMF | 25 | CC(=O)CCCCCCCCCCN=[N+]=[N-] | explosive | warning
K2CO3 | BrCc1ccccc1 | DMF | 25 | CCOC(=O)C=[N+]=[N-] | explosive | warning
K2CO3 | BrCCO[N+](=O)[O-] | DMF | 25 | CC(=O)c1ccccc1 | explosive | warning
K2CO3 | BrCc1ccccc1 | DMF | 25 | CC(=O)CCOOC(C)(C)C | explosive | warning
K2CO3 | BrCc1ccccc1 | DMF | 25 | CC(=O)CCc1nnn[nH]1 | explosive | warning
K2CO3 | BrCc1ccccc1 | DMF | 25 | CC(=O)c1c([N+](=O)[O-])cc([N+](=O)[O-])cc1[N+](=O)[O-] | explosive | warning
NaOH | O=Cc1ccccc1 | water | 25 | C[N+](=O)[O-] | explosive | warning
Et3N | O=Cc1ccccc1 | EtOH | 25 | CC[N+](=O)[O-] | explosive | note
NaOEt | C=CC#N | EtOH | 25 | CCOC(=O)CC(=O)OCC | runaway | warning
KOtBu | C=CC(=O)OC | THF | 25 | CCOC(=O)CC(=O)OCC | runaway | warning
Et3N | C=CC=O | THF | 25 | CCOC(=O)CC(=O)OCC | runaway | warning
DBU | C=CC(=O)OC | MeCN | 25 | CCOC(=O)CC(=O)OCC | runaway | note
NaOH | CC=O | water | 10 | CCOC(=O)CC(=O)OCC | runaway | note
pyridine | COS(=O)(=O)C(F)(F)F | DCM | 0 | CCOC(=O)CC(=O)OCC | violent | warning
Et3N | CI | DMF | 25 | CCOC(=O)CC(=O)OCC | violent | note
K2CO3 | COS(=O)(=O)C(F)(F)F | DMSO | 25 | CCOC(=O)CC(=O)OCC | runaway | warning
K2CO3 | COS(=O)(=O)C(F)(F)F | THF | 25 | CCOC(=O)CC(=O)OCC | runaway | warning
K2CO3 | O=C(CBr)c1ccccc1 | DMSO | 25 | CCOC(=O)CC(=O)OCC | runaway | warning
K2CO3 | BrCc1ccccc1 | acetone | 25 | OC(=O)Cc1ccccc1 | gas | note
# Temperatures.
K2CO3 | CI | acetone | 60 | CCOC(=O)CC(=O)OCC | above boiling point | warning
K2CO3 | CI | DMF | 50 | CCOC(=O)CC(=O)OCC | above boiling point | warning
DBU | BrCc1ccccc1 | DMSO | 0 | CCOC(=O)CC(=O)OCC | below melting point | warning
NaOH | BrCc1ccccc1 | water | -20 | CCOC(=O)CC(=O)OCC | below melting point | warning
";

/// Base, electrophile, solvent, temperature in °C, category that must be absent; with malonate.
const QUIET: &str = "
K2CO3 | CCCCBr | DMF | 25 | runaway
K2CO3 | CCCCBr | DMF | 25 | gas
LDA | CCCCBr | THF | -78 | runaway
LDA | CCCCBr | THF | -78 | below melting point
NaOEt | CCCCBr | EtOH | 78 | above boiling point
NaOEt | CCCCBr | EtOH | 78 | violent
Et3N | CCCCBr | DCM | 25 | violent
DBU | CCCCBr | toluene | 25 | explosive
DBU | O=[N+]([O-])/C=C/c1ccccc1 | MeCN | 25 | explosive
DBU | BrCc1ccccc1 | water | 25 | flammable
NaH | O=Cc1ccc([N+](=O)[O-])cc1 | toluene | 25 | explosive
DBU | C/C=C/C(=O)OC | MeCN | 25 | runaway
K2CO3 | CCCCCl | DMF | 25 | carcinogen
";

fn rows(table: &str) -> impl Iterator<Item = Vec<&str>> {
    let lines = table
        .lines()
        .filter(|line| !line.is_empty() && !line.starts_with('#'));
    lines.map(|line| line.split(" | ").collect())
}

fn category(name: &str) -> Category {
    Category::ALL
        .into_iter()
        .find(|c| c.name() == name)
        .expect("the category exists")
}

#[test]
fn known_dangerous_cells_carry_their_caution() {
    for row in rows(DANGEROUS) {
        let [base, electrophile, solvent, t, substrate, name, least] = row[..] else {
            panic!("{row:?}");
        };
        let cautions = found(base, electrophile, solvent, t.parse().unwrap(), substrate);
        let highest = severity(&cautions, category(name));
        let least = Severity::ALL.into_iter().find(|s| s.name() == least);
        assert!(
            least.is_some() && highest >= least,
            "{row:?}: {cautions:#?}"
        );
    }
}

#[test]
fn what_is_not_dangerous_in_that_way_stays_quiet() {
    for row in rows(QUIET) {
        let [base, electrophile, solvent, t, name] = row[..] else {
            panic!("{row:?}");
        };
        let cautions = found(base, electrophile, solvent, t.parse().unwrap(), MALONATE);
        assert_eq!(
            severity(&cautions, category(name)),
            None,
            "{row:?}: {cautions:#?}"
        );
    }
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
