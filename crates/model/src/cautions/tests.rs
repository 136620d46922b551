//! Pairs that every bench chemist knows (common practice), and pairs that must stay quiet.

mod examples;
mod page;
mod statements;
mod temperatures;

use std::sync::LazyLock;

use enolattice_molecule::Molecule;
use enolattice_reagents::{Library, NamedElectrophile};

use super::Category::*;
use super::rule::{Rule, Seat};
use super::rules::RULES;
use super::share::{JOINT, JOINT_MOST};
use super::*;

/// Read once: it parses some six hundred structures.
static LIBRARY: LazyLock<Library> =
    LazyLock::new(|| Library::builtin().expect("the library reads"));

const MALONATE: &str = "CCOC(=O)CC(=O)OCC";

fn every_rule() -> impl Iterator<Item = &'static Rule> {
    RULES.iter().copied().flatten()
}

fn found(base: &str, electrophile: &str, solvent: &str, t: f64, substrate: &str) -> Vec<Caution> {
    let library = &*LIBRARY;
    let electrophile = Molecule::parse(electrophile).unwrap();
    cautions(&Contents {
        base: library.base(base).unwrap(),
        solvent: library.solvent(solvent).unwrap(),
        electrophile: &electrophile,
        named: library.electrophile_by_structure(electrophile.canonical()),
        substrate: &Molecule::parse(substrate).unwrap(),
        additive: None,
        temperature_c: t,
        formation_temperature_c: t,
    })
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
K3PO4 | CCCCBr | DMF | 25 | gas
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
fn the_shares_join_to_the_bits_of_the_cell() {
    let library = &*LIBRARY;
    let substrates = [
        MALONATE,
        "CC[N+](=O)[O-]",
        "OC(=O)Cc1ccccc1",
        "CC(=O)CCCN=[N+]=[N-]",
    ];
    let substrates = substrates.map(|smiles| Molecule::parse(smiles).unwrap());
    let of_substrates = substrates.each_ref().map(CautionShare::of_substrate);
    let electrophiles: Vec<(Molecule, &NamedElectrophile)> = library
        .electrophiles()
        .iter()
        .step_by(5)
        .map(|named| (Molecule::parse_salt(&named.smiles).unwrap().molecule, named))
        .collect();
    let additives: Vec<_> = [None]
        .into_iter()
        .chain(library.additives().iter().map(Some))
        .collect();
    let of_additives: Vec<_> = additives
        .iter()
        .map(|a| CautionShare::of_additive(*a))
        .collect();
    let (t, formation) = (60.0, -20.0);
    let of_electrophiles: Vec<_> = electrophiles
        .iter()
        .map(|(molecule, named)| CautionShare::of_electrophile(molecule, Some(named), &[t])[0])
        .collect();
    // a walk over all axes at once, so that every value meets others and not all of them all
    for (i, base) in library.bases().iter().enumerate() {
        let of_base = CautionShare::of_base(base);
        for (j, solvent) in library
            .solvents()
            .iter()
            .enumerate()
            .skip(i % 11)
            .step_by(11)
        {
            let of_solvent = CautionShare::of_solvent(solvent, &[(t, formation)])[0];
            let (e, a) = ((7 * i + j) % electrophiles.len(), (i + j) % additives.len());
            let s = (i + 3 * j) % substrates.len();
            let joined = CautionShare::joined([
                of_base,
                of_solvent,
                of_electrophiles[e],
                of_substrates[s],
                of_additives[a],
            ]);
            let all = cautions(&Contents {
                base,
                solvent,
                electrophile: &electrophiles[e].0,
                named: Some(electrophiles[e].1),
                substrate: &substrates[s],
                additive: additives[a],
                temperature_c: t,
                formation_temperature_c: formation,
            });
            assert_eq!(joined, caution_bits(&all), "{all:#?}");
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

/// Stored columns hold these numbers.
#[test]
fn numbers_of_categories_and_severities_stay() {
    let numbers = [
        ("runaway", 0),
        ("violent", 1),
        ("gas", 2),
        ("pyrophoric", 3),
        ("explosive", 4),
        ("carcinogen", 5),
        ("acutely toxic", 6),
        ("flammable", 7),
        ("peroxide former", 8),
        ("above boiling point", 9),
        ("below melting point", 10),
    ];
    let known = Category::ALL.map(|category| (category.name(), category.bit().trailing_zeros()));
    assert_eq!(known, numbers);
    let severities = Severity::ALL.map(|severity| (severity.name(), severity.bits() >> 30));
    assert_eq!(severities, [("note", 1), ("warning", 2), ("stop", 3)]);
}

#[test]
fn the_better_rule_is_said_alone() {
    let all = found("NaH", "CCCCBr", "DMSO", 60.0, MALONATE);
    let runaways = all.iter().filter(|c| c.category == Runaway);
    let texts: Vec<&str> = runaways.map(|c| c.text.as_str()).collect();
    assert_eq!(texts.len(), 1, "{texts:#?}");
    assert!(texts[0].contains("NaH in DMSO at 60 °C"), "{texts:?}");
    // dimethyl sulfate has statements of its own: no rule of thumb beside them
    let all = found("NaOEt", "COS(=O)(=O)OC", "EtOH", 25.0, MALONATE);
    let carcinogens: Vec<_> = all.iter().filter(|c| c.category == Carcinogen).collect();
    assert_eq!(carcinogens.len(), 1, "{carcinogens:#?}");
    assert!(carcinogens[0].text.contains("H350 may cause cancer"));
    assert!(carcinogens[0].source.starts_with("hazard statements: "));
}

/// RT/p at 298.15 K and 101.325 kPa: 24.465 L/mol (CODATA molar volume 22.414 L/mol × 298.15 / 273.15).
#[test]
fn the_volume_of_gas_is_that_of_the_ideal_gas() {
    let expected = 22.413_969_54 * 298.15 / 273.15;
    assert!((contents::gas_ml_per_mmol() - expected).abs() < 1e-5);
    let all = found("NaH", "CCCCBr", "EtOH", 25.0, MALONATE);
    let gas = all.iter().find(|c| c.category == Gas).unwrap();
    assert!(gas.text.contains("24 mL per mmol"), "{}", gas.text);
}

#[test]
fn rules_are_well_formed() {
    let rules: Vec<&Rule> = every_rule().collect();
    assert!(JOINT.len() <= JOINT_MOST, "{}", JOINT.len());
    for rule in &rules {
        let same = rules.iter().filter(|other| other.id == rule.id).count();
        assert_eq!(same, 1, "{}", rule.id);
        assert!(!rule.reason.is_empty() && !rule.source.is_empty());
        let seats: Vec<Seat> = Seat::ALL
            .into_iter()
            .filter(|seat| !rule.seats[*seat as usize].is_empty())
            .collect();
        assert_eq!(rule.anyone.is_empty(), !seats.is_empty(), "{}", rule.id);
        assert!(
            rule.anyone.is_empty() || rule.above_c.is_none(),
            "{}",
            rule.id
        );
        for seat in Seat::ALL.into_iter().filter(|seat| !seats.contains(seat)) {
            let named = rule.reason.contains(seat.placeholder());
            assert!(!named, "{} names an empty seat", rule.id);
        }
        assert_eq!(
            rule.reason.contains("{reagent}"),
            !rule.anyone.is_empty(),
            "{}",
            rule.id
        );
        if let Some(milder) = rule.instead_of {
            let milder = rules.iter().find(|other| other.id == milder);
            let fits = |m: &&&Rule| m.category == rule.category && m.severity <= rule.severity;
            assert!(milder.as_ref().is_some_and(fits), "{}", rule.id);
        }
    }
}

#[test]
fn nothing_is_called_safe() {
    for rule in every_rule() {
        let words = rule.reason.split(|c: char| !c.is_alphabetic());
        for word in words {
            assert!(
                !matches!(word, "safe" | "safely" | "harmless"),
                "{}",
                rule.id
            );
        }
    }
}
