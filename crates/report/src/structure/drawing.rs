//! A structure as lines and letters.
//!
//! A wedge goes towards the reader, a hash away, narrow at the stereocentre; crossed lines are a double bond of
//! which E or Z is not said. A stereocentre with neither wedge nor hash is of unknown configuration.

use std::panic::{AssertUnwindSafe, catch_unwind};

use enolattice_molecule::{Atom, Molecule, element_symbol};
use maud::{Markup, html};

use super::layout::{Line, Look, Place, layout};

/// Atoms beyond which a drawing of this size cannot be read.
const MOST_ATOMS: usize = 70;
/// Free space around the letters of an atom.
const CLEAR: f64 = 10.5;
/// Distance of the lines of a double bond.
const GAP: f64 = 6.0;
/// Width of a wedge at its wide end.
const WEDGE: f64 = 9.0;
/// Lines of a hash.
const HASHES: usize = 6;

/// A drawing.
#[derive(Debug)]
pub(super) struct Drawing {
    pub(super) width: f64,
    pub(super) height: f64,
    /// Whether it shows all configuration that the structure says.
    pub(super) is_whole: bool,
    bonds: String,
    wedges: String,
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
            @if !self.wedges.is_empty() { path.wedge d=(self.wedges) {} }
            @for label in &self.labels {
                text x=(one(label.x)) y=(one(label.y)) text-anchor=(label.anchor) { (label.text) }
            }
        }
    }
}

fn drawn(given: &Molecule) -> Option<Drawing> {
    let layout = layout(given)?;
    let mut sketch = Sketch {
        molecule: &layout.molecule,
        places: &layout.places,
        bonds: String::new(),
        wedges: String::new(),
        labels: Vec::new(),
    };
    layout.lines.iter().for_each(|line| sketch.bond(line));
    (0..layout.places.len()).for_each(|atom| sketch.label(atom));
    Some(Drawing {
        width: layout.width,
        height: layout.height,
        is_whole: layout.is_whole,
        bonds: sketch.bonds,
        wedges: sketch.wedges,
        labels: sketch.labels,
    })
}

struct Sketch<'a> {
    molecule: &'a Molecule,
    places: &'a [Place],
    bonds: String,
    wedges: String,
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
        match line.look {
            Look::Single => self.stroke(from, to, across, 0.0, 0.0),
            Look::Double => match self.inner_side(one, other, across) {
                Some(side) => {
                    self.stroke(from, to, across, 0.0, 0.0);
                    self.stroke(from, to, across, GAP * side, 5.0);
                }
                None => {
                    self.stroke(from, to, across, GAP / 2.0, 0.0);
                    self.stroke(from, to, across, -GAP / 2.0, 0.0);
                }
            },
            Look::Crossed => {
                let half = GAP / 2.0;
                self.piece(from.beside(across, half), to.beside(across, -half));
                self.piece(from.beside(across, -half), to.beside(across, half));
            }
            Look::Triple => {
                for offset in [-GAP, 0.0, GAP] {
                    self.stroke(from, to, across, 0.75 * offset, 0.0);
                }
            }
            Look::Wedge => {
                let (left, right) = (
                    to.beside(across, WEDGE / 2.0),
                    to.beside(across, -WEDGE / 2.0),
                );
                let shape = format!("M{}L{}L{}Z", point(from), point(left), point(right));
                self.wedges.push_str(&shape);
            }
            Look::Hash => {
                for i in 1..=HASHES {
                    let along = i as f64 / HASHES as f64;
                    let at = Place {
                        x: from.x + dx * along,
                        y: from.y + dy * along,
                    };
                    let half = 0.5 * WEDGE * along;
                    self.piece(at.beside(across, half), at.beside(across, -half));
                }
            }
        }
    }

    /// One line beside the bond, shortened at both ends.
    fn stroke(&mut self, from: Place, to: Place, across: Place, offset: f64, shorter: f64) {
        // along the bond
        let (ux, uy) = (across.y, -across.x);
        let along = Place { x: ux, y: uy };
        self.piece(
            from.beside(across, offset).beside(along, shorter),
            to.beside(across, offset).beside(along, -shorter),
        );
    }

    /// One line.
    fn piece(&mut self, from: Place, to: Place) {
        let piece = format!("M{}L{}", point(from), point(to));
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

impl Place {
    /// The place so far away in a direction of length 1.
    fn beside(self, direction: Place, by: f64) -> Place {
        Place {
            x: self.x + direction.x * by,
            y: self.y + direction.y * by,
        }
    }
}

fn point(at: Place) -> String {
    format!("{} {}", one(at.x), one(at.y))
}

/// One decimal, none where it is zero.
fn one(number: f64) -> String {
    let text = format!("{number:.1}");
    text.strip_suffix(".0").map_or(text.clone(), str::to_owned)
}

#[cfg(test)]
mod tests {
    use super::super::layout::MARGIN;
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
