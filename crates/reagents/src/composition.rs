//! What salts are made of, by structure and by formula.

use std::collections::BTreeMap;

use enolattice_molecule::Molecule;

/// Numbers of atoms by element.
pub(crate) type Elements = BTreeMap<String, u32>;

/// Ions and hydrogen that stand beside the base itself; the rest is for the parser.
const SIMPLE: [(&str, &str); 12] = [
    ("[Li+]", "Li"),
    ("[Na+]", "Na"),
    ("[K+]", "K"),
    ("[Rb+]", "Rb"),
    ("[Cs+]", "Cs"),
    ("[Mg+2]", "Mg"),
    ("[Ca+2]", "Ca"),
    ("[Ba+2]", "Ba"),
    ("[Zn+2]", "Zn"),
    ("[Al+3]", "Al"),
    ("[H-]", "H"),
    ("[H][H]", "H2"),
];

/// The elements of a structure whose parts are separated by `.`.
///
/// # Errors
/// Why a part is no structure.
pub(crate) fn of_structure(smiles: &str) -> Result<Elements, String> {
    let mut elements = Elements::new();
    for part in smiles.split('.') {
        if let Some((_, formula)) = SIMPLE.iter().find(|(ion, _)| *ion == part) {
            add(formula, &mut elements);
            continue;
        }
        let molecule = Molecule::parse(part).map_err(|error| error.to_string())?;
        // The charge of an ion stands behind its formula.
        add(
            molecule
                .formula()
                .split(['+', '-'])
                .next()
                .unwrap_or_default(),
            &mut elements,
        );
    }
    Ok(elements)
}

/// The elements of a formula such as `C4H9KO`; none where it is no formula.
pub(crate) fn of_formula(formula: &str) -> Option<Elements> {
    let mut elements = Elements::new();
    let is_formula = formula.starts_with(|c: char| c.is_ascii_uppercase())
        && formula.bytes().all(|b| b.is_ascii_alphanumeric());
    (is_formula && add(formula, &mut elements)).then_some(elements)
}

/// Standard atomic weights, abridged, g/mol (Prohaska and others, Pure Appl. Chem. 2022, 94, 573).
const ATOMIC_WEIGHTS: [(&str, f64); 24] = [
    ("H", 1.008),
    ("Li", 6.94),
    ("B", 10.81),
    ("C", 12.011),
    ("N", 14.007),
    ("O", 15.999),
    ("F", 18.998),
    ("Na", 22.990),
    ("Mg", 24.305),
    ("Al", 26.982),
    ("Si", 28.085),
    ("P", 30.974),
    ("S", 32.06),
    ("Cl", 35.45),
    ("K", 39.098),
    ("Ca", 40.078),
    ("Zn", 65.38),
    ("Se", 78.971),
    ("Br", 79.904),
    ("Rb", 85.468),
    ("Sn", 118.71),
    ("I", 126.90),
    ("Cs", 132.91),
    ("Ba", 137.33),
];

/// Molar mass of a formula such as `C4H9KO`, g/mol; none where it is no formula or holds an element that no reagent has.
pub fn molar_mass_g_mol(formula: &str) -> Option<f64> {
    let weight = |element: &str| {
        let mut known = ATOMIC_WEIGHTS.iter();
        known
            .find(|(symbol, _)| *symbol == element)
            .map(|(_, weight)| *weight)
    };
    of_formula(formula)?
        .iter()
        .map(|(element, n)| Some(weight(element)? * f64::from(*n)))
        .sum()
}

/// The formula of these elements, Hill order.
pub(crate) fn hill(elements: &Elements) -> String {
    let organic = elements.contains_key("C");
    let first = ["C", "H"].into_iter().filter(|_| organic);
    let rest = elements.keys().map(String::as_str);
    let rest = rest.filter(|element| !organic || !matches!(*element, "C" | "H"));
    let mut formula = String::new();
    for element in first.chain(rest) {
        match elements.get(element) {
            None => {}
            Some(1) => formula += element,
            Some(number) => formula += &format!("{element}{number}"),
        }
    }
    formula
}

/// Adds the elements of a formula; false where a number is too large.
fn add(formula: &str, elements: &mut Elements) -> bool {
    let starts = formula
        .char_indices()
        .filter(|(_, c)| c.is_ascii_uppercase());
    let starts: Vec<usize> = starts.map(|(index, _)| index).collect();
    let ends = starts.iter().skip(1).copied().chain([formula.len()]);
    for (start, end) in starts.iter().zip(ends) {
        let word = &formula[*start..end];
        let letters = word.trim_end_matches(|c: char| c.is_ascii_digit());
        let digits = &word[letters.len()..];
        let number = if digits.is_empty() {
            Ok(1)
        } else {
            digits.parse()
        };
        let Ok(number) = number else {
            return false;
        };
        let sum: &mut u32 = elements.entry(letters.to_owned()).or_default();
        *sum = sum.saturating_add(number);
    }
    true
}

#[cfg(test)]
mod tests {
    use super::*;

    fn formula(smiles: &str) -> String {
        hill(&of_structure(smiles).unwrap())
    }

    /// Formulas as handbooks print them.
    #[test]
    fn salts_have_the_formula_of_the_handbook() {
        assert_eq!(formula("[K+].CC(C)(C)[O-]"), "C4H9KO");
        assert_eq!(formula("[K+].[K+].[O-]C([O-])=O"), "CK2O3");
        assert_eq!(formula("[Na+].[H-]"), "HNa");
        assert_eq!(formula("O"), "H2O");
        assert_eq!(formula("[Mg+2].[Cl-].C[CH-]C"), "C3H7ClMg");
        for text in ["CK2O3", "C4H9KO", "C16H36BrN"] {
            assert_eq!(hill(&of_formula(text).unwrap()), text);
        }
    }

    #[test]
    fn what_is_no_structure_or_formula_is_refused() {
        for smiles in ["", ".", "[Xx+]", "C(", "K"] {
            assert!(of_structure(smiles).is_err(), "{smiles}");
        }
        for text in ["", "c4", "4C", "C4H9-", "C99999999999", "Ü"] {
            assert!(of_formula(text).is_none(), "{text}");
        }
    }
}
