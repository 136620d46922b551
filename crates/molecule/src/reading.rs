//! From text to a perceived molecule: caps, lexical checks, parsing, valence, perception.

mod refusals;

use std::sync::OnceLock;

use chematic::core::{self as graph, AtomIdx, BondIdx, BondOrder, ez_markers};
use chematic::{chem, perception, smiles};

use crate::{Atom, Bond, Molecule, StructureError, symmetry, valence};
use refusals::impossible;

/// Reads a SMILES into a perceived molecule.
pub(crate) fn read(text: &str) -> Result<Molecule, StructureError> {
    let given = text.trim();
    check_text(given)?;
    check_single(given)?;
    let unmapped = without_atom_maps(given);
    let parsed = parse(given, &unmapped)?;
    check_graph(&parsed)?;
    perceive(given, tidy(given, parsed)?)
}

/// Canonical SMILES with stereo.
pub(crate) fn canonical(molecule: &graph::Molecule) -> Option<String> {
    smiles::rdkit_canonical_smiles(molecule).ok()
}

/// Canonical SMILES without stereo.
pub(crate) fn flat_smiles(molecule: &graph::Molecule) -> Option<String> {
    let parameters = smiles::RdkitSmilesParams {
        isomeric: false,
        ..Default::default()
    };
    smiles::rdkit_smiles(molecule, &parameters).ok()
}

/// The text in quotes, cut where it is long.
pub(crate) fn quoted(text: &str) -> String {
    const SHOWN: usize = 60;
    match text.char_indices().nth(SHOWN) {
        Some((end, _)) => format!("`{}…`", &text[..end]),
        None => format!("`{text}`"),
    }
}

/// Refuses text that is beyond the caps or cannot be SMILES, before anything else looks at it.
pub(crate) fn check_text(given: &str) -> Result<(), StructureError> {
    if given.is_empty() {
        return Err(StructureError::new(
            "the SMILES is empty",
            "give one molecule as SMILES, for instance CC(=O)OCC",
        ));
    }
    if given.len() > Molecule::MAX_BYTES {
        return Err(StructureError::new(
            format!(
                "the SMILES has {} bytes, more than the {} that are read",
                given.len(),
                Molecule::MAX_BYTES
            ),
            "give a smaller molecule or a model compound with the same reacting group",
        ));
    }
    if let Some((position, odd)) = given.char_indices().find(|(_, c)| !c.is_ascii_graphic()) {
        return Err(StructureError::new(
            format!(
                "{} has the character {odd:?} at position {position}, which no SMILES has",
                quoted(given)
            ),
            "give the SMILES alone, without name, blanks or extensions",
        ));
    }
    Ok(())
}

/// Atoms that a text writes, whether or not it is a SMILES; counted without reading it.
pub(crate) fn atoms_written(text: &str) -> usize {
    let mut in_brackets = false;
    let is_atom = |byte: &u8| match byte {
        b'[' => {
            in_brackets = true;
            true
        }
        b']' => {
            in_brackets = false;
            false
        }
        // of Cl and Br the first letter counts
        b'A'..=b'Z' | b'b' | b'c' | b'n' | b'o' | b'p' | b's' | b'*' => !in_brackets,
        _ => false,
    };
    text.bytes().filter(is_atom).count()
}

fn check_single(given: &str) -> Result<(), StructureError> {
    if given.contains('.') {
        return Err(StructureError::new(
            format!("{} has more than one fragment", quoted(given)),
            "give the neutral molecule alone, without counter-ions or solvate",
        ));
    }
    Ok(())
}

/// Removes `:7` from bracket atoms: map numbers mean nothing here and would end up in products.
fn without_atom_maps(given: &str) -> String {
    let mut kept = String::with_capacity(given.len());
    for (i, piece) in given.split('[').enumerate() {
        if i > 0 {
            kept.push('[');
        }
        let (inside, after) = match piece.find(']') {
            Some(end) if i > 0 => piece.split_at(end),
            _ => ("", piece),
        };
        match inside.rsplit_once(':') {
            Some((atom, map)) if map.bytes().all(|b| b.is_ascii_digit()) => kept.push_str(atom),
            _ => kept.push_str(inside),
        }
        kept.push_str(after);
    }
    kept
}

fn parse(given: &str, unmapped: &str) -> Result<graph::Molecule, StructureError> {
    let limits = smiles::SmilesParseLimits {
        max_input_bytes: Molecule::MAX_BYTES,
        max_atoms: Molecule::MAX_ATOMS,
        max_bonds: Molecule::MAX_BONDS,
    };
    smiles::parse_with_limits(unmapped, &limits)
        .map_err(|error| refusals::unreadable(given, unmapped, error))
}

/// Refuses what parses and is no molecule.
fn check_graph(parsed: &graph::Molecule) -> Result<(), StructureError> {
    if parsed.atom_count() == 0 {
        return Err(StructureError::new(
            "the SMILES has no atoms",
            "give one molecule as SMILES, for instance CC(=O)OCC",
        ));
    }
    for (index, atom) in parsed.atoms() {
        if atom.wildcard {
            return Err(StructureError::new(
                format!("atom {} is a wildcard", index.0),
                "replace it by a definite group",
            ));
        }
        if !valence::is_supported(atom.element.atomic_number()) {
            return Err(StructureError::new(
                format!(
                    "atom {} is {}, an element that is not covered",
                    index.0,
                    atom.element.symbol()
                ),
                "give a molecule of H, B, C, N, O, F, Si, P, S, Cl, As, Se, Br and I",
            ));
        }
    }
    for (_, bond) in parsed.bonds() {
        if bond.atom1 == bond.atom2 {
            return Err(StructureError::new(
                format!("atom {} is bound to itself", bond.atom1.0),
                "write the two ends of the ring label on different atoms",
            ));
        }
        let ordinary = matches!(
            bond.order,
            BondOrder::Single
                | BondOrder::Double
                | BondOrder::Triple
                | BondOrder::Aromatic
                | BondOrder::Up
                | BondOrder::Down
        );
        if !ordinary {
            return Err(StructureError::new(
                format!(
                    "the bond between atoms {} and {} is neither single, double, triple nor aromatic",
                    bond.atom1.0, bond.atom2.0
                ),
                "write it with an ordinary bond order",
            ));
        }
    }
    Ok(())
}

/// Charges and bonds of hypervalent nitrogen and its kin set right, hydrogens folded, Kekulé form.
fn tidy(given: &str, mut molecule: graph::Molecule) -> Result<graph::Molecule, StructureError> {
    let has_hydrogens = molecule
        .atoms()
        .any(|(_, atom)| atom.element == graph::Element::H && atom.isotope.is_none());
    if has_hydrogens || is_aromatic(&molecule) {
        // The written form is checked first: the Kekulé form hides aromatic atoms outside rings, and
        // atoms count differently without their hydrogens.
        smiles::rdkit_sanitized_model(&molecule).map_err(|_| impossible(given, &molecule))?;
    }
    let edits = match may_be_hypervalent(&molecule) {
        true => smiles::rdkit_cleanup_edits(&molecule).map_err(|_| impossible(given, &molecule))?,
        false => None,
    };
    for edit in edits.into_iter() {
        for (atom, charge) in edit.charges {
            molecule.set_charge(AtomIdx(atom as u32), charge as i8);
        }
        for (bond, order, _) in edit.bonds {
            molecule.set_bond_order(BondIdx(bond as u32), order);
        }
    }
    if has_hydrogens {
        molecule = chem::remove_hydrogens(&molecule);
    }
    let orders = graph::kekulize(&molecule).map_err(|_| impossible(given, &molecule))?;
    let mut molecule = graph::apply_kekule(&molecule, &orders);
    for atom in 0..molecule.atom_count() {
        molecule.set_atom_aromatic(AtomIdx(atom as u32), false);
    }
    Ok(molecule)
}

fn is_aromatic(molecule: &graph::Molecule) -> bool {
    molecule.atoms().any(|(_, atom)| atom.aromatic)
        || molecule
            .bonds()
            .any(|(_, bond)| bond.order == BondOrder::Aromatic)
}

/// Whether there is an atom whose charge and bonds may have to be set right: nitrogen of valence five,
/// phosphorus, halogens with more than one bond. Looking is cheaper than the copy that a cleaning takes.
fn may_be_hypervalent(molecule: &graph::Molecule) -> bool {
    molecule.atoms().any(|(index, atom)| {
        let bonds = || {
            molecule
                .neighbors(index)
                .map(|(_, bond)| molecule.bond(bond).order)
        };
        match atom.element.atomic_number() {
            7 => {
                let hydrogens = f64::from(atom.hydrogen_count.unwrap_or(0));
                let orders = bonds().map(|order| match order {
                    BondOrder::Double => 2.0,
                    BondOrder::Triple => 3.0,
                    BondOrder::Aromatic => 1.5,
                    _ => 1.0,
                });
                hydrogens + orders.sum::<f64>() > 4.0
            }
            15 => true,
            17 | 35 | 53 => bonds().count() > 1,
            _ => false,
        }
    })
}

/// Perceives a Kekulé graph.
fn perceive(given: &str, kekule: graph::Molecule) -> Result<Molecule, StructureError> {
    let model = smiles::rdkit_sanitized_model(&kekule).map_err(|_| impossible(given, &kekule))?;
    let atoms = perceived_atoms(given, &kekule, &model)?;
    let neighbours = perceived_bonds(given, &kekule, &model)?;
    valence::check(&kekule, &atoms)?;
    let canonical = OnceLock::new();
    if kekule
        .bonds()
        .any(|(bond, _)| ez_markers::raw_direction(&kekule, bond).is_some())
    {
        // marks of double bonds that contradict each other show only when they are written
        let written = self::canonical(&kekule).ok_or_else(|| impossible(given, &kekule))?;
        canonical.get_or_init(|| written);
    }
    let isotopes: Vec<u16> = kekule
        .atoms()
        .map(|(_, atom)| atom.isotope.unwrap_or(0))
        .collect();
    Ok(Molecule {
        smiles: given.to_owned(),
        canonical,
        formula: chem::calc_mol_formula(&kekule),
        exact_mass: chem::exact_mass(&kekule),
        molar_mass: chem::rdkit_molecular_weight(&kekule),
        symmetry_classes: symmetry::refine(&atoms, &isotopes, &neighbours),
        atoms,
        neighbours,
        rings: rings(&kekule),
        bicycles: OnceLock::new(),
        kekule,
    })
}

fn perceived_atoms(
    given: &str,
    kekule: &graph::Molecule,
    model: &smiles::RdkitSanitizedModel,
) -> Result<Vec<Atom>, StructureError> {
    kekule
        .atoms()
        .zip(&model.atoms)
        .map(|((index, atom), perceived)| {
            let (aromatic, charge, hydrogens) = perceived.ok_or_else(|| {
                StructureError::new(
                    format!("atom {} of {} is a lone hydrogen", index.0, quoted(given)),
                    "leave hydrogens out or write them inside the brackets of their atom",
                )
            })?;
            Ok(Atom {
                element: atom.element.atomic_number(),
                charge,
                hydrogens,
                aromatic,
            })
        })
        .collect()
}

fn perceived_bonds(
    given: &str,
    kekule: &graph::Molecule,
    model: &smiles::RdkitSanitizedModel,
) -> Result<Vec<Vec<(usize, Bond)>>, StructureError> {
    let mut neighbours = vec![Vec::new(); kekule.atom_count()];
    for ((_, bond), perceived) in kekule.bonds().zip(&model.bonds) {
        let order = match perceived {
            Some(BondOrder::Single) => Bond::Single,
            Some(BondOrder::Double) => Bond::Double,
            Some(BondOrder::Triple) => Bond::Triple,
            Some(BondOrder::Aromatic) => Bond::Aromatic,
            _ => return Err(impossible(given, kekule)),
        };
        let (a, b) = (bond.atom1.0 as usize, bond.atom2.0 as usize);
        neighbours[a].push((b, order));
        neighbours[b].push((a, order));
    }
    for around in &mut neighbours {
        around.sort_unstable_by_key(|(other, _)| *other);
    }
    Ok(neighbours)
}

/// Symmetrised smallest rings; the plain smallest set where the search gives up.
fn rings(kekule: &graph::Molecule) -> Vec<Vec<usize>> {
    let bonds: Vec<(usize, usize, bool)> = kekule
        .bonds()
        .map(|(_, bond)| (bond.atom1.0 as usize, bond.atom2.0 as usize, true))
        .collect();
    perception::rdkit_symmetrized_sssr(kekule.atom_count(), &bonds).unwrap_or_else(|| {
        let smallest = perception::find_sssr(kekule);
        let indices = |ring: &Vec<graph::AtomIdx>| ring.iter().map(|a| a.0 as usize).collect();
        smallest.rings().iter().map(indices).collect()
    })
}
