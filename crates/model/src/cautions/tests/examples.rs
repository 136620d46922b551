//! Each rule has a cell that carries it and a close one that does not.

use std::sync::LazyLock;

use enolattice_molecule::Molecule;
use enolattice_reagents::{
    Additive, AdditiveKind, Base, BaseKind, Cation, Hazards, Solvent, Supply,
};

use super::super::Contents;
use super::super::contents::rules_of;
use super::{LIBRARY, MALONATE, every_rule};

const EXAMPLES: &str = include_str!("../examples.txt");

/// Bases that the examples need whatever the library holds.
static BASES: LazyLock<Vec<Base>> = LazyLock::new(|| {
    use BaseKind::{Alkoxide, Amide, Amine, Fluoride, Grignard, Organolithium};
    let made_up = [
        (
            "tBuLi",
            "[Li+].C[C-](C)C",
            "CC(C)C",
            Organolithium,
            Cation::Lithium,
            Supply::Solution,
        ),
        (
            "HexLi",
            "[Li+].[CH2-]CCCCC",
            "CCCCCC",
            Organolithium,
            Cation::Lithium,
            Supply::Solution,
        ),
        (
            "PhLi",
            "[Li+].[c-]1ccccc1",
            "c1ccccc1",
            Organolithium,
            Cation::Lithium,
            Supply::Solution,
        ),
        (
            "MeMgBr",
            "C[Mg]Br",
            "C",
            Grignard,
            Cation::Magnesium,
            Supply::Solution,
        ),
        (
            "TMPZnCl",
            "CC1(C)CCCC(C)(C)N1[Zn]Cl",
            "CC1(C)CCCC(C)(C)N1",
            Amide,
            Cation::Zinc,
            Supply::Solution,
        ),
        (
            "KF",
            "[K+].[F-]",
            "F",
            Fluoride,
            Cation::Potassium,
            Supply::Solid,
        ),
        (
            "piperidine",
            "C1CCNCC1",
            "C1CC[NH2+]CC1",
            Amine,
            Cation::None,
            Supply::Liquid,
        ),
        (
            "solid KOtBu",
            "[K+].CC(C)(C)[O-]",
            "CC(C)(C)O",
            Alkoxide,
            Cation::Potassium,
            Supply::Solid,
        ),
        (
            "KOtBu in THF",
            "[K+].CC(C)(C)[O-]",
            "CC(C)(C)O",
            Alkoxide,
            Cation::Potassium,
            Supply::Solution,
        ),
    ];
    let template = LIBRARY.base("LDA").unwrap();
    let base = |(name, smiles, acid, kind, cation, supply): (&str, &str, &str, _, _, _)| Base {
        name: name.to_owned(),
        smiles: smiles.to_owned(),
        conjugate_acid: acid.to_owned(),
        kind,
        cation,
        supply,
        hazards: unknown(),
        ..template.clone()
    };
    made_up.map(base).into()
});

/// Solvents of the same sort: name, SMILES, water in ppm.
static SOLVENTS: LazyLock<Vec<Solvent>> = LazyLock::new(|| {
    let made_up = [
        ("nitromethane", "C[N+](=O)[O-]", 100.0),
        ("formamide", "NC=O", 100.0),
        ("NH3", "N", 100.0),
        ("CS2", "S=C=S", 10.0),
        ("AcOH", "CC(=O)O", 1000.0),
        ("PhCl", "Clc1ccccc1", 30.0),
        ("CCl4", "ClC(Cl)(Cl)Cl", 30.0),
        ("pyridine", "c1ccncc1", 30.0),
        ("wet THF", "C1CCOC1", 5000.0),
    ];
    let template = LIBRARY.solvent("toluene").unwrap();
    let solvent = |(name, smiles, water_ppm): (&str, &str, f64)| Solvent {
        name: name.to_owned(),
        smiles: smiles.to_owned(),
        water_ppm,
        hazards: unknown(),
        ..template.clone()
    };
    made_up.map(solvent).into()
});

static ADDITIVES: LazyLock<Vec<Additive>> = LazyLock::new(|| {
    let made_up = [
        (
            "TBAB",
            "CCCC[N+](CCCC)(CCCC)CCCC.[Br-]",
            AdditiveKind::PhaseTransfer,
        ),
        ("TMEDA", "CN(C)CCN(C)C", AdditiveKind::Donor),
        ("18-crown-6", "C1COCCOCCOCCOCCOCCO1", AdditiveKind::Crown),
    ];
    let template = &LIBRARY.additives()[0];
    let additive = |(name, smiles, kind): (&str, &str, AdditiveKind)| Additive {
        name: name.to_owned(),
        smiles: smiles.to_owned(),
        kind,
        hazards: unknown(),
        ..template.clone()
    };
    made_up.map(additive).into()
});

fn unknown() -> Hazards {
    Hazards {
        source: "unknown".to_owned(),
        ..Hazards::default()
    }
}

struct Example {
    line: &'static str,
    carries: bool,
    rule: &'static str,
    differs: Vec<(char, String)>,
}

fn examples() -> Vec<Example> {
    let lines = EXAMPLES
        .lines()
        .filter(|line| !line.is_empty() && !line.starts_with('#'));
    lines.map(example).collect()
}

fn example(line: &'static str) -> Example {
    let fields: Vec<&str> = line.split(" | ").collect();
    let [sign @ ("+" | "-"), rule, differs] = fields[..] else {
        panic!("{line}");
    };
    let mut parts: Vec<(char, String)> = Vec::new();
    for word in differs.split(' ') {
        match word.split_once('=') {
            Some((key, value)) if key.len() == 1 && "bevsatf".contains(key) => {
                parts.push((key.chars().next().unwrap(), value.to_owned()));
            }
            // a name of two words
            _ => {
                let (_, name) = parts.last_mut().unwrap_or_else(|| panic!("{line}"));
                name.push(' ');
                name.push_str(word);
            }
        }
    }
    Example {
        line,
        carries: sign == "+",
        rule,
        differs: parts,
    }
}

impl Example {
    fn get(&self, key: char, plain: &str) -> String {
        let own = self.differs.iter().find(|(of, _)| *of == key);
        own.map_or(plain.to_owned(), |(_, value)| value.clone())
    }

    /// The rules that the cell carries.
    fn rules(&self) -> Vec<&'static str> {
        let molecule = |smiles: &str| {
            Molecule::parse(smiles).unwrap_or_else(|error| panic!("{}: {error}", self.line))
        };
        let (base, solvent) = (self.get('b', "K3PO4"), self.get('v', "toluene"));
        let additive = self.get('a', "");
        let made_up = BASES.iter().find(|known| known.name == base);
        let base = made_up.or_else(|| LIBRARY.base(&base));
        let made_up = SOLVENTS.iter().find(|known| known.name == solvent);
        let solvent = made_up.or_else(|| LIBRARY.solvent(&solvent));
        let temperature: f64 = self.get('t', "25").parse().unwrap();
        let formation = self.get('f', &temperature.to_string());
        rules_of(&Contents {
            base: base.unwrap_or_else(|| panic!("base of {}", self.line)),
            solvent: solvent.unwrap_or_else(|| panic!("solvent of {}", self.line)),
            electrophile: &molecule(&self.get('e', "CCCCBr")),
            named: None,
            substrate: &molecule(&self.get('s', MALONATE)),
            additive: ADDITIVES.iter().find(|known| known.name == additive),
            temperature_c: temperature,
            formation_temperature_c: formation.parse().unwrap(),
        })
    }
}

#[test]
fn every_rule_has_a_cell_that_carries_it_and_one_that_does_not() {
    let examples = examples();
    let has = |rule: &str, carries: bool| {
        let mut of_rule = examples.iter().filter(|example| example.rule == rule);
        of_rule.any(|example| example.carries == carries)
    };
    let without: Vec<&str> = every_rule()
        .map(|rule| rule.id)
        .filter(|id| !has(id, true) || !has(id, false))
        .collect();
    assert!(without.is_empty(), "{without:#?}");
    let known = |example: &Example| every_rule().any(|rule| rule.id == example.rule);
    let strays: Vec<&str> = examples
        .iter()
        .filter(|example| !known(example))
        .map(|example| example.line)
        .collect();
    assert!(strays.is_empty(), "{strays:#?}");
}

#[test]
fn the_examples_carry_their_rules_or_not() {
    let wrong: Vec<String> = examples()
        .iter()
        .filter_map(|example| {
            let rules = example.rules();
            let carries = rules.contains(&example.rule);
            (carries != example.carries).then(|| format!("{}: {rules:?}", example.line))
        })
        .collect();
    assert!(wrong.is_empty(), "{wrong:#?}");
}
