//! Where the atoms of a drawing stand and how its bonds look.
//!
//! The library of structures lays atoms out, turns double bonds to their configuration and picks a wedge or hash for each
//! stereocentre.

use chematic::core::{
    AtomIdx, BondEntry, BondIdx, BondOrder, Molecule as Graph, apply_kekule, kekulize,
};
use chematic::mol::stereo_depiction::stereo_depiction;
use chematic::smiles::parse;
use enolattice_molecule::Molecule;

/// Length of a bond.
pub(super) const BOND: f64 = 40.0;
/// Room around the outermost atoms.
pub(super) const MARGIN: f64 = 18.0;
/// Length of a bond of the library's layout, Å.
const BOND_ANGSTROM: f64 = 1.5;

/// A place of the drawing; y grows downwards.
#[derive(Clone, Copy, Debug)]
pub(super) struct Place {
    pub(super) x: f64,
    pub(super) y: f64,
}

/// How a bond is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Look {
    /// One line.
    Single,
    /// Two lines.
    Double,
    /// Two lines that cross: E or Z is not said.
    Crossed,
    /// Three lines.
    Triple,
    /// Towards the reader, away from the first end.
    Wedge,
    /// Away from the reader, from the first end on.
    Hash,
}

/// A bond of the Kekulé form.
#[derive(Clone, Copy, Debug)]
pub(super) struct Line {
    pub(super) ends: [usize; 2],
    pub(super) look: Look,
}

/// A molecule on the plane.
pub(super) struct Layout {
    /// The molecule, its atoms in the order of the places.
    pub(super) molecule: Molecule,
    pub(super) places: Vec<Place>,
    pub(super) lines: Vec<Line>,
    pub(super) width: f64,
    pub(super) height: f64,
    /// Whether all configuration that the structure says can be seen.
    pub(super) is_whole: bool,
}

/// Lays a molecule out; `None` where the library cannot.
pub(super) fn layout(given: &Molecule) -> Option<Layout> {
    // atoms of both readings in the same order, hydrogens written as atoms folded in
    let molecule = Molecule::parse(given.canonical()).ok()?;
    let graph = parse(given.canonical()).ok()?;
    let kekule = kekulize(&graph)
        .ok()
        .map(|found| apply_kekule(&graph, &found));
    let graph = kekule.unwrap_or(graph);
    if graph.atom_count() != molecule.atoms().len() {
        return None;
    }
    let depiction = stereo_depiction(&graph, &[]);
    let scale = BOND / BOND_ANGSTROM;
    let mut places: Vec<Place> = depiction
        .coords
        .iter()
        .map(|(x, y)| Place {
            x: x * scale,
            y: -y * scale,
        })
        .collect();
    let is_finite = |at: &Place| at.x.is_finite() && at.y.is_finite();
    if places.len() != graph.atom_count() || !places.iter().all(is_finite) {
        return None;
    }
    let (width, height) = laid_down(&mut places);
    let wedge = |bond: BondIdx| {
        let found = depiction.wedges.get(&bond)?;
        Some((found.start, found.order))
    };
    let unsaid = &depiction.unspecified_double_bonds;
    let lines = lines(&graph, wedge, |bond| unsaid.contains(&bond));
    Some(Layout {
        molecule,
        places,
        lines,
        width,
        height,
        is_whole: depiction.unexpressed_centres.is_empty()
            && depiction.unexpressed_double_bonds.is_empty(),
    })
}

fn lines(
    graph: &Graph,
    wedge: impl Fn(BondIdx) -> Option<(AtomIdx, BondOrder)>,
    is_unsaid: impl Fn(BondIdx) -> bool,
) -> Vec<Line> {
    let at = |atom: AtomIdx| atom.0 as usize;
    let line = |(index, bond): (BondIdx, &BondEntry)| {
        let ends = [at(bond.atom1), at(bond.atom2)];
        let look = match bond.order {
            BondOrder::Double if is_unsaid(index) => Look::Crossed,
            BondOrder::Double => Look::Double,
            BondOrder::Triple => Look::Triple,
            _ => Look::Single,
        };
        let Some((start, order)) = wedge(index) else {
            return Line { ends, look };
        };
        Line {
            ends: if at(start) == ends[0] {
                ends
            } else {
                [ends[1], ends[0]]
            },
            look: if order == BondOrder::Down {
                Look::Hash
            } else {
                Look::Wedge
            },
        }
    };
    graph.bonds().map(line).collect()
}

/// Turns what is taller than wide on its side and moves it to the corner; gives width and height.
fn laid_down(places: &mut [Place]) -> (f64, f64) {
    let bounds = |places: &[Place]| {
        let fold = |of: fn(&Place) -> f64, pick: fn(f64, f64) -> f64, start| {
            places.iter().map(of).fold(start, pick)
        };
        let least = Place {
            x: fold(|p| p.x, f64::min, f64::INFINITY),
            y: fold(|p| p.y, f64::min, f64::INFINITY),
        };
        let most = Place {
            x: fold(|p| p.x, f64::max, f64::NEG_INFINITY),
            y: fold(|p| p.y, f64::max, f64::NEG_INFINITY),
        };
        (least, most)
    };
    let (least, most) = bounds(places);
    if most.y - least.y > 1.15 * (most.x - least.x) {
        // a quarter turn, no mirror: wedges keep their meaning
        for at in places.iter_mut() {
            *at = Place { x: -at.y, y: at.x };
        }
    }
    let (least, most) = bounds(places);
    for at in places.iter_mut() {
        at.x += MARGIN - least.x;
        at.y += MARGIN - least.y;
    }
    (
        most.x - least.x + 2.0 * MARGIN,
        most.y - least.y + 2.0 * MARGIN,
    )
}

#[cfg(test)]
mod tests {
    use std::fmt::Write;
    use std::path::Path;

    use enolattice_molecule::element_symbol;

    use super::*;

    /// Centres in chains, rings, bridges and at sulfur; double bonds with and without configuration; charges.
    const CONFIGURED: [&str; 18] = [
        "CCOC(=O)[C@H](C)N",
        "C[C@@H]1CCCCC1=O",
        "C[C@@H]1CC[C@@H](C(C)C)C(=O)C1",
        "O=C1C[C@@H]2CC[C@@]1(C)C2(C)C",
        "COC(=O)[C@@H]1CCCN1C(=O)OC(C)(C)C",
        "CCC(=O)N1C(=O)OC[C@@H]1Cc1ccccc1",
        "C[S@@](=O)c1ccc(C)cc1",
        "CCOC(=O)[C@H](O)[C@@H](O)C(=O)OCC",
        "C[C@H]1CCC[C@@H](C)C1=O",
        "C[C@]12CC[C@H]3[C@H]([C@@H]1CCC2=O)CCc1cc(O)ccc13",
        "CN1[C@H]2CC[C@@H]1CC(=O)C2",
        "C[C@@](N)(CC)C#N",
        "O=[N+]([O-])/C=C/c1ccccc1",
        "CCOC(=O)/C=C\\C",
        "C/C=C/[C@@H](C)C(=O)OC",
        "C(/C=C\\[C@@H](F)Cl)=C/C",
        "CC=CC(=O)OC",
        "CC(O)C(=O)OC",
    ];

    /// A drawing as a mol block (CTfile format, V2000), y upwards again.
    fn mol_block(smiles: &str) -> String {
        let layout = layout(&Molecule::parse(smiles).expect("reads")).expect("is laid out");
        assert!(layout.is_whole, "{smiles}");
        let atoms = layout.molecule.atoms();
        let mut block = format!("{smiles}\n\n\n");
        let (n, m) = (atoms.len(), layout.lines.len());
        writeln!(block, "{n:3}{m:3}  0  0  0  0  0  0  0  0999 V2000").expect("text");
        for (atom, at) in atoms.iter().zip(&layout.places) {
            let (x, y) = (at.x / BOND, -at.y / BOND);
            let symbol = element_symbol(atom.element);
            writeln!(
                block,
                "{x:10.4}{y:10.4}{:10.4} {symbol:<3} 0  0  0  0  0  0",
                0.0
            )
            .expect("text");
        }
        for Line {
            ends: [one, other],
            look,
        } in &layout.lines
        {
            let (order, mark) = match look {
                Look::Single => (1, 0),
                Look::Double => (2, 0),
                Look::Crossed => (2, 3),
                Look::Triple => (3, 0),
                Look::Wedge => (1, 1),
                Look::Hash => (1, 6),
            };
            writeln!(block, "{:3}{:3}{order:3}{mark:3}", one + 1, other + 1).expect("text");
        }
        for (i, atom) in atoms
            .iter()
            .enumerate()
            .filter(|(_, atom)| atom.charge != 0)
        {
            writeln!(block, "M  CHG  1{:4}{:4}", i + 1, atom.charge).expect("text");
        }
        block + "M  END\n$$$$\n"
    }

    /// RDKit reads the same structures out of this file: `tests/python/check_drawings.py`.
    #[test]
    fn drawings_are_those_that_another_program_has_read() {
        let drawn: String = CONFIGURED.into_iter().map(mol_block).collect();
        let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("testdata/configuration.sdf");
        if std::env::var_os("ENOLATTICE_RENEW_DRAWINGS").is_some() {
            std::fs::write(&path, &drawn).expect("is written");
        }
        let kept = std::fs::read_to_string(&path).expect("is there");
        assert!(
            drawn == kept,
            "drawings have changed: renew the file with ENOLATTICE_RENEW_DRAWINGS=1 and let tests/python/check_drawings.py read it"
        );
    }

    #[test]
    fn unknown_configuration_is_drawn_as_such() {
        let looks = |smiles: &str| {
            let layout = layout(&Molecule::parse(smiles).expect("reads")).expect("is laid out");
            let count = |look| layout.lines.iter().filter(|line| line.look == look).count();
            [Look::Crossed, Look::Wedge, Look::Hash].map(count)
        };
        assert_eq!(looks("CC=CC(=O)OC"), [1, 0, 0]);
        assert_eq!(looks("C/C=C/C(=O)OC"), [0, 0, 0]);
        assert_eq!(looks("CC(O)C(=O)OC"), [0, 0, 0]);
        let [crossed, wedges, hashes] = looks("C[C@H](O)C(=O)OC");
        assert_eq!((crossed, wedges + hashes), (0, 1));
    }
}
