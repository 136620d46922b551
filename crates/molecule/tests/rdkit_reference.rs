//! Structures and products against values that RDKit made (`testdata/make_rdkit_reference.py`).

use enolattice_molecule::{
    Bond, ElectrophilicGroup, Molecule, Product, StructureError, alcohol_of_ester, alkenes,
    c_product, carbonyl_product, dehalogenated, dehydrated, disproportionated, double_product,
    heteroatom_product, o_product, recognise, self_condensation_product, substitution_product,
};

const REFERENCE: &str = include_str!("../testdata/rdkit_reference.csv");
const PRODUCTS: &str = include_str!("../testdata/rdkit_products.csv");
const SIDE_PRODUCTS: &str = include_str!("../testdata/rdkit_side_products.csv");

fn rows(text: &'static str) -> Vec<Vec<String>> {
    csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(text.as_bytes())
        .records()
        .map(|row| row.unwrap().iter().map(str::to_owned).collect())
        .collect()
}

fn assert_same(molecule: &Molecule, expected: &[String], what: &str) {
    let [flat, canonical, formula, exact_mass, molar_mass] = expected else {
        panic!("{what}: row is short");
    };
    assert_eq!(molecule.canonical_flat(), *flat, "{what}");
    assert_eq!(molecule.canonical(), canonical, "{what}");
    assert_eq!(molecule.formula(), formula, "{what}");
    let exact: f64 = exact_mass.parse().unwrap();
    let molar: f64 = molar_mass.parse().unwrap();
    assert!((molecule.exact_mass() - exact).abs() < 2e-5, "{what}");
    assert!((molecule.molar_mass() - molar).abs() < 2e-3, "{what}");
}

#[test]
fn structures_agree_with_rdkit() {
    let rows = rows(REFERENCE);
    assert!(rows.len() >= 400);
    for row in &rows {
        let molecule = Molecule::parse(&row[0]).unwrap();
        let expected = [&row[2], &row[1], &row[3], &row[4], &row[5]].map(String::clone);
        assert_same(&molecule, &expected, &row[0]);
        let mut rings: Vec<usize> = molecule.rings().iter().map(Vec::len).collect();
        rings.sort_unstable();
        let rings: Vec<String> = rings.iter().map(usize::to_string).collect();
        assert_eq!(rings.join(" "), row[6], "{}", row[0]);
        let classes = molecule.symmetry_classes().iter().max().unwrap() + 1;
        assert_eq!(classes.to_string(), row[7], "{}", row[0]);
        let again = Molecule::parse(molecule.canonical()).unwrap();
        assert_eq!(again.canonical(), molecule.canonical());
    }
}

fn partner(smiles: &str) -> (Molecule, ElectrophilicGroup) {
    let molecule = Molecule::parse_salt(smiles).unwrap().molecule;
    let group = recognise(&molecule).unwrap();
    (molecule, group)
}

fn product(
    kind: &str,
    substrate: &Molecule,
    site: usize,
    other: &str,
) -> Result<Product, StructureError> {
    if kind.starts_with("self") {
        return self_condensation_product(substrate, site, other.parse().unwrap());
    }
    let (electrophile, group) = partner(other);
    match kind.split(' ').next().unwrap() {
        "enolate" | "nitronate" => {
            o_product(substrate, site, &electrophile, &group).map(|p| p.expect("O-product"))
        }
        "heteroatom" => heteroatom_product(substrate, site, &electrophile, &group),
        "double" => {
            let single = c_product(substrate, site, &electrophile, &group)?;
            double_product(&single, &electrophile, &group).map(|p| p.expect("a second hydrogen"))
        }
        _ => c_product(substrate, site, &electrophile, &group),
    }
}

#[test]
fn products_agree_with_reaction_smarts() {
    let rows = rows(PRODUCTS);
    assert!(rows.len() >= 200);
    for row in &rows {
        let what = row[..4].join(" ");
        let substrate = Molecule::parse(&row[1]).unwrap();
        let site: usize = row[2].parse().unwrap();
        let product = product(&row[0], &substrate, site, &row[3]).unwrap();
        let former = substrate.atoms()[site];
        let now = product.molecule.atoms()[product.site];
        if row[0].starts_with("enolate") || row[0].starts_with("nitronate") {
            assert_eq!((now.element, now.hydrogens), (8, 0), "{what}");
        } else {
            assert_eq!(now.element, former.element, "{what}");
            let two = row[0].ends_with("two hydrogens") || row[0].starts_with("double");
            let lost = if two { 2 } else { 1 };
            assert_eq!(now.hydrogens + lost, former.hydrogens, "{what}");
        }
        let molecule = if row[0].starts_with("aldol") {
            dehydrated(&product).unwrap().expect("an α hydrogen")
        } else {
            product.molecule
        };
        assert_same(&molecule, &row[4..], &what);
    }
}

/// The one carbon with a double bond to oxygen.
fn carbonyl(molecule: &Molecule) -> usize {
    let atoms = molecule.atoms();
    let is_carbonyl = |carbon: &usize| {
        let mut bonds = molecule.neighbours(*carbon).iter();
        bonds.any(|(other, bond)| *bond == Bond::Double && atoms[*other].element == 8)
    };
    (0..atoms.len())
        .find(is_carbonyl)
        .expect("a carbonyl group")
}

fn side_product(kind: &str, first: &Molecule, atom: usize, second: &str) -> Molecule {
    let partner_of = |smiles: &str| Molecule::parse(smiles).unwrap();
    match kind.split(' ').next().unwrap() {
        "substitution" => {
            let (electrophile, group) = partner(second);
            let product = substitution_product(first, atom, &electrophile, &group);
            product.unwrap().molecule
        }
        "carbonyl" => {
            // 1,3-dicarbonyl compounds are written with the group that is attacked first
            let second = partner_of(second);
            let product = carbonyl_product(first, atom, &second, carbonyl(&second));
            product.unwrap().molecule
        }
        "alkene" => {
            let group = recognise(first).unwrap();
            let mut possible = alkenes(first, &group).unwrap();
            assert_eq!(possible.len(), 1, "{}", first.smiles());
            possible.remove(0)
        }
        "dehalogenation" => dehalogenated(first, atom).unwrap(),
        "acid" => disproportionated(first, atom).unwrap().0,
        _ if kind == "alcohol of an ester" => {
            let alcohol = alcohol_of_ester(first, atom).unwrap();
            alcohol.expect("no lactone")
        }
        _ => disproportionated(first, atom).unwrap().1,
    }
}

#[test]
fn side_products_agree_with_reaction_smarts() {
    let rows = rows(SIDE_PRODUCTS);
    assert!(rows.len() >= 30);
    for row in &rows {
        let first = Molecule::parse(&row[1]).unwrap();
        let molecule = side_product(&row[0], &first, row[2].parse().unwrap(), &row[3]);
        assert_same(&molecule, &row[4..], &row[..4].join(" "));
    }
}
