//! A structure as lines and letters.
//!
//! Where atoms stand is worked out by the library of structures; bonds and labels are drawn here. Configuration is not
//! drawn.

use std::panic::{AssertUnwindSafe, catch_unwind};

use chematic::core::{BondOrder, apply_kekule, kekulize};
use chematic::smiles::parse;
use chematic_depict::compute_layout;
use enolattice_molecule::{Atom, Molecule, element_symbol};
use maud::{Markup, html};

/// Atoms beyond which a drawing of this size cannot be read.
const MOST_ATOMS: usize = 70;
/// Room around the outermost atoms, in units of the layout, whose bonds are 40 long.
const MARGIN: f64 = 18.0;
/// Free space around the letters of an atom.
const CLEAR: f64 = 10.5;
/// Distance of the lines of a double bond.
const GAP: f64 = 6.0;

/// A drawing.
#[derive(Debug)]
pub(super) struct Drawing {
    pub(super) width: f64,
    pub(super) height: f64,
    bonds: String,
    labels: Vec<Label>,
}

/// Letters at a place.
#[derive(Debug)]
struct Label {
    x: f64,
    y: f64,
    anchor: &'static str,
    text: String,
}

/// A place of the drawing.
#[derive(Clone, Copy, Debug)]
struct Place {
    x: f64,
    y: f64,
}

/// A bond of the Kekulé form.
struct Line {
    ends: [usize; 2],
    lines: u8,
}

impl Drawing {
    /// A drawing of a molecule; none of one that is too large or that the layout cannot do.
    pub(super) fn of(molecule: &Molecule) -> Option<Drawing> {
        if molecule.atoms().len() > MOST_ATOMS {
            return None;
        }
        // a fault of the layout costs the drawing, never the page
        catch_unwind(AssertUnwindSafe(|| drawn(molecule)))
            .ok()
            .flatten()
    }

    pub(super) fn markup(&self) -> Markup {
        html! {
            path d=(self.bonds) {}
            @for label in &self.labels {
                text x=(one(label.x)) y=(one(label.y)) text-anchor=(label.anchor) { (label.text) }
            }
        }
    }
}

fn drawn(given: &Molecule) -> Option<Drawing> {
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
    let layout = compute_layout(&graph);
    let mut places: Vec<Place> = layout
        .coords
        .iter()
        .map(|at| Place { x: at.x, y: at.y })
        .collect();
    if places
        .iter()
        .any(|at| !at.x.is_finite() || !at.y.is_finite())
    {
        return None;
    }
    let (width, height) = laid_down(&mut places);
    let lines: Vec<Line> = graph
        .bonds()
        .map(|(_, bond)| Line {
            ends: [bond.atom1.0 as usize, bond.atom2.0 as usize],
            lines: match bond.order {
                BondOrder::Double => 2,
                BondOrder::Triple => 3,
                _ => 1,
            },
        })
        .collect();
    let mut sketch = Sketch {
        molecule: &molecule,
        places: &places,
        bonds: String::new(),
        labels: Vec::new(),
    };
    lines.iter().for_each(|line| sketch.bond(line));
    (0..places.len()).for_each(|atom| sketch.label(atom));
    Some(Drawing {
        width,
        height,
        bonds: sketch.bonds,
        labels: sketch.labels,
    })
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

struct Sketch<'a> {
    molecule: &'a Molecule,
    places: &'a [Place],
    bonds: String,
    labels: Vec<Label>,
}

impl Sketch<'_> {
    fn bond(&mut self, line: &Line) {
        let [one, other] = line.ends;
        let (from, to) = (self.end(one, other), self.end(other, one));
        let (dx, dy) = (to.x - from.x, to.y - from.y);
        let length = dx.hypot(dy).max(1e-6);
        // across the bond
        let across = Place {
            x: -dy / length,
            y: dx / length,
        };
        match line.lines {
            1 => self.stroke(from, to, across, 0.0, 0.0),
            2 => match self.inner_side(one, other, across) {
                Some(side) => {
                    self.stroke(from, to, across, 0.0, 0.0);
                    self.stroke(from, to, across, GAP * side, 5.0);
                }
                None => {
                    self.stroke(from, to, across, GAP / 2.0, 0.0);
                    self.stroke(from, to, across, -GAP / 2.0, 0.0);
                }
            },
            _ => {
                for offset in [-GAP, 0.0, GAP] {
                    self.stroke(from, to, across, 0.75 * offset, 0.0);
                }
            }
        }
    }

    /// One line beside the bond, shortened at both ends.
    fn stroke(&mut self, from: Place, to: Place, across: Place, offset: f64, shorter: f64) {
        // along the bond
        let (ux, uy) = (across.y, -across.x);
        let x1 = from.x + across.x * offset + ux * shorter;
        let y1 = from.y + across.y * offset + uy * shorter;
        let x2 = to.x + across.x * offset - ux * shorter;
        let y2 = to.y + across.y * offset - uy * shorter;
        let piece = format!("M{} {}L{} {}", one(x1), one(y1), one(x2), one(y2));
        self.bonds.push_str(&piece);
    }

    /// Where the bond ends at an atom: before its letters, if it has any.
    fn end(&self, atom: usize, towards: usize) -> Place {
        let (at, other) = (self.places[atom], self.places[towards]);
        if self.letters(atom).is_none() {
            return at;
        }
        let (dx, dy) = (other.x - at.x, other.y - at.y);
        let length = dx.hypot(dy).max(1e-6);
        Place {
            x: at.x + dx / length * CLEAR,
            y: at.y + dy / length * CLEAR,
        }
    }

    /// The side of the second line of a double bond: into the ring, or to where the neighbours are. None where it has an
    /// end without neighbours and stands in the middle.
    fn inner_side(&self, one: usize, other: usize, across: Place) -> Option<f64> {
        let middle = Place {
            x: (self.places[one].x + self.places[other].x) / 2.0,
            y: (self.places[one].y + self.places[other].y) / 2.0,
        };
        let mut rings = self.molecule.rings().iter();
        let ring = rings
            .by_ref()
            .filter(|ring| ring.contains(&one) && ring.contains(&other))
            .min_by_key(|ring| ring.len());
        let beside: Vec<usize> = match ring {
            Some(ring) => ring.clone(),
            None => {
                let of = |atom: usize, but: usize| {
                    let neighbours = self.molecule.neighbours(atom).iter();
                    neighbours.map(|(to, _)| *to).filter(move |to| *to != but)
                };
                let (left, right): (Vec<_>, Vec<_>) =
                    (of(one, other).collect(), of(other, one).collect());
                if left.is_empty() || right.is_empty() {
                    return None;
                }
                left.into_iter().chain(right).collect()
            }
        };
        let side: f64 = beside
            .iter()
            .map(|&atom| {
                let at = self.places[atom];
                (at.x - middle.x) * across.x + (at.y - middle.y) * across.y
            })
            .sum();
        Some(if side < 0.0 { -1.0 } else { 1.0 })
    }

    /// Symbol and charge of an atom that is written out; carbon is a corner.
    fn letters(&self, atom: usize) -> Option<String> {
        let Atom {
            element, charge, ..
        } = self.molecule.atoms()[atom];
        let alone = self.molecule.neighbours(atom).is_empty();
        if element == 6 && charge == 0 && !alone {
            return None;
        }
        let sign = match charge {
            0 => String::new(),
            1 => "⁺".to_owned(),
            -1 => "⁻".to_owned(),
            other => format!("{other:+}"),
        };
        Some(format!("{}{sign}", element_symbol(element)))
    }

    fn label(&mut self, atom: usize) {
        let Some(letters) = self.letters(atom) else {
            return;
        };
        let at = self.places[atom];
        let baseline = at.y + 6.5;
        let hydrogens = hydrogens(self.molecule.atoms()[atom].hydrogens);
        let half = 5.5 * letters.chars().count() as f64;
        self.labels.push(Label {
            x: at.x,
            y: baseline,
            anchor: "middle",
            text: letters,
        });
        if hydrogens.is_empty() {
            return;
        }
        let neighbours = self.molecule.neighbours(atom);
        let n = neighbours.len().max(1) as f64;
        let (dx, dy) = neighbours.iter().fold((0.0, 0.0), |(dx, dy), (to, _)| {
            let to = self.places[*to];
            (dx + (to.x - at.x) / n, dy + (to.y - at.y) / n)
        });
        let (x, y, anchor) = if dx.abs() < 8.0 && neighbours.len() > 1 {
            (at.x, baseline - 17.0 * dy.signum(), "middle")
        } else if dx > 0.0 {
            (at.x - half, baseline, "end")
        } else {
            (at.x + half, baseline, "start")
        };
        self.labels.push(Label {
            x,
            y,
            anchor,
            text: hydrogens,
        });
    }
}

fn hydrogens(number: u8) -> String {
    match number {
        0 => String::new(),
        1 => "H".to_owned(),
        2 => "H₂".to_owned(),
        3 => "H₃".to_owned(),
        _ => "H₄".to_owned(),
    }
}

/// One decimal, none where it is zero.
fn one(number: f64) -> String {
    let text = format!("{number:.1}");
    text.strip_suffix(".0").map_or(text.clone(), str::to_owned)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn drawing(smiles: &str) -> Drawing {
        Drawing::of(&Molecule::parse(smiles).expect("reads")).expect("is drawn")
    }

    /// Benzene by Kekulé has six sides and three double bonds: nine lines.
    #[test]
    fn benzene_has_nine_lines() {
        let benzene = drawing("c1ccccc1");
        assert_eq!(benzene.bonds.matches('M').count(), 9);
        assert!(benzene.labels.is_empty());
    }

    #[test]
    fn letters_stand_at_what_is_no_carbon() {
        let letters = |smiles: &str| {
            let mut letters: Vec<String> = drawing(smiles)
                .labels
                .into_iter()
                .map(|label| label.text)
                .collect();
            letters.sort();
            letters
        };
        assert_eq!(letters("CCN"), ["H₂", "N"]);
        assert_eq!(letters("CC[N+](=O)[O-]"), ["N⁺", "O", "O⁻"]);
        assert_eq!(letters("OCC#N"), ["H", "N", "O"]);
    }

    #[test]
    fn everything_lies_within_the_drawing() {
        for smiles in ["CC(=O)c1ccccc1", "CC(C)(C)OC(=O)N1CCC(CC(=O)OCC)CC1", "C"] {
            let drawing = drawing(smiles);
            assert!(drawing.width >= 2.0 * MARGIN && drawing.height >= 2.0 * MARGIN);
            for label in &drawing.labels {
                assert!((0.0..=drawing.width).contains(&label.x), "{label:?}");
                assert!((0.0..=drawing.height).contains(&label.y), "{label:?}");
            }
        }
    }
}
