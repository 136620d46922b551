//! Structures of the tables: they parse, and they are what formula and conjugate acid say.

use std::collections::BTreeMap;

use enolattice_molecule::Molecule;
use enolattice_reagents::{Cation, Library, Reagent};

fn library() -> Library {
    Library::builtin().unwrap_or_else(|fault| panic!("{fault}"))
}

/// Ions and hydrogen that stand beside the base itself, with their charge and formula.
const INORGANIC: [(&str, i32, &str); 10] = [
    ("[Li+]", 1, "Li"),
    ("[Na+]", 1, "Na"),
    ("[K+]", 1, "K"),
    ("[Cs+]", 1, "Cs"),
    ("[Mg+2]", 2, "Mg"),
    ("[Ca+2]", 2, "Ca"),
    ("[Ba+2]", 2, "Ba"),
    ("[Zn+2]", 2, "Zn"),
    ("[H-]", -1, "H"),
    ("[H][H]", 0, "H2"),
];

/// Charge and formula of one fragment of a SMILES.
fn fragment(smiles: &str) -> (i32, String) {
    if let Some((_, charge, formula)) = INORGANIC.iter().find(|(ion, ..)| *ion == smiles) {
        return (*charge, (*formula).to_owned());
    }
    let molecule = Molecule::parse(smiles).unwrap_or_else(|fault| panic!("{smiles}: {fault}"));
    let charge = molecule
        .atoms()
        .iter()
        .map(|atom| i32::from(atom.charge))
        .sum();
    let formula = molecule
        .formula()
        .split(['+', '-'])
        .next()
        .unwrap_or_default();
    (charge, formula.to_owned())
}

/// Adds the elements of a formula such as `C4H9KO`.
fn count(formula: &str, elements: &mut BTreeMap<String, i32>) {
    let mut rest = formula;
    while let Some(first) = rest.chars().next() {
        assert!(first.is_ascii_uppercase(), "{formula}");
        let letters = 1 + rest[1..]
            .chars()
            .take_while(char::is_ascii_lowercase)
            .count();
        let digits = rest[letters..]
            .chars()
            .take_while(char::is_ascii_digit)
            .count();
        let number = rest[letters..letters + digits].parse().unwrap_or(1);
        *elements.entry(rest[..letters].to_owned()).or_default() += number;
        rest = &rest[letters + digits..];
    }
}

fn elements(smiles: &str) -> BTreeMap<String, i32> {
    let mut elements = BTreeMap::new();
    for part in smiles.split('.') {
        count(&fragment(part).1, &mut elements);
    }
    elements
}

#[test]
fn formulas_are_those_of_the_structures() {
    let library = library();
    let bases = library
        .bases()
        .iter()
        .map(|b| (&b.name, &b.smiles, &b.formula));
    let solvents = library
        .solvents()
        .iter()
        .map(|s| (&s.name, &s.smiles, &s.formula));
    let additives = library
        .additives()
        .iter()
        .map(|a| (&a.name, &a.smiles, &a.formula));
    let electrophiles = library
        .electrophiles()
        .iter()
        .map(|e| (&e.name, &e.smiles, &e.formula));
    let all = bases.chain(solvents).chain(additives).chain(electrophiles);
    for (name, smiles, formula) in all {
        let mut stated = BTreeMap::new();
        count(formula, &mut stated);
        assert_eq!(elements(smiles), stated, "{name}");
    }
}

#[test]
fn salts_are_neutral() {
    for reagent in library().search("") {
        let charge: i32 = reagent
            .smiles()
            .split('.')
            .map(|part| fragment(part).0)
            .sum();
        let electrophile = matches!(reagent, Reagent::Electrophile(_));
        assert!(charge == 0 || electrophile, "{}", reagent.name());
    }
}

/// Whether a fragment is a counter-ion, or a halide that is no base.
fn is_bystander(smiles: &str) -> bool {
    let is_metal = INORGANIC
        .iter()
        .any(|(ion, charge, _)| *ion == smiles && *charge > 0);
    let is_quaternary = fragment(smiles).0 == 1 && smiles.contains("[N+](");
    is_metal || is_quaternary || ["[Cl-]", "[Br-]"].contains(&smiles)
}

#[test]
fn the_conjugate_acid_is_the_base_with_one_proton() {
    for base in library().bases() {
        let own = |smiles: &str| -> String {
            let parts: Vec<&str> = smiles
                .split('.')
                .filter(|part| !is_bystander(part))
                .collect();
            parts.join(".")
        };
        let (base_parts, acid_parts) = (own(&base.smiles), own(&base.conjugate_acid));
        let charge = |smiles: &str| -> i32 { smiles.split('.').map(|part| fragment(part).0).sum() };
        assert_eq!(
            charge(&acid_parts),
            charge(&base_parts) + 1,
            "{}",
            base.name
        );
        let mut expected = elements(&base_parts);
        count("H", &mut expected);
        assert_eq!(elements(&acid_parts), expected, "{}", base.name);
        let is_neutral = charge(&base_parts) == 0;
        assert_eq!(is_neutral, base.cation == Cation::None, "{}", base.name);
    }
}

/// Average molar masses by the IUPAC atomic weights of 2021, as handbooks print them.
#[test]
fn molar_masses_of_solvents_are_those_of_the_handbook() {
    let library = library();
    for (name, handbook) in [
        ("THF", 72.11),
        ("DMSO", 78.13),
        ("water", 18.015),
        ("DCM", 84.93),
        ("HMPA", 179.20),
        ("CPME", 100.16),
        ("sulfolane", 120.17),
        ("propylene carbonate", 102.09),
    ] {
        let mass = library.solvent(name).unwrap().molar_mass_g_mol;
        assert!((mass - handbook).abs() < 0.01, "{name}: {mass}");
    }
}
