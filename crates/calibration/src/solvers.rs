//! The fast solver against the stiff reference on random cells.

use std::sync::Arc;

use enolattice_model::{Base, Cell, Conditions, Electrophile, Model, Pair, Solvent, Substrate};
use enolattice_molecule::Molecule;

/// Agreement counts as good within this difference of yields.
const CLOSE: f64 = 0.05;
/// Yields this near to 0 or 1 in both solvers are trivial.
const TRIVIAL: f64 = 0.02;

/// Yields of the wanted product of one cell by both solvers.
#[derive(Clone, Debug)]
pub struct Comparison {
    /// The cell in words.
    pub cell: String,
    /// Fast solver.
    pub fast: f64,
    /// Stiff reference.
    pub reference: f64,
}

impl Comparison {
    fn is_trivial(&self) -> bool {
        let near = |y: f64| !(TRIVIAL..=1.0 - TRIVIAL).contains(&y);
        near(self.fast) && near(self.reference)
    }

    fn difference(&self) -> f64 {
        (self.fast - self.reference).abs()
    }
}

/// Picks from lists with a fixed seed.
pub(crate) struct Sampler {
    state: u64,
}

impl Default for Sampler {
    fn default() -> Sampler {
        Sampler { state: 20_261_201 }
    }
}

impl Sampler {
    /// Knuth's MMIX generator: good enough to pick cells.
    pub(crate) fn pick(&mut self, n: usize) -> usize {
        self.state = self
            .state
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        ((self.state >> 33) as usize) % n
    }
}

/// Cells solved by both solvers, and those on which the reference gave up, with its reason.
pub type Compared = (Vec<Comparison>, Vec<String>);

/// Compares both solvers on `count` random cells that the model covers.
///
/// # Errors
/// A sentence if the demo's substrates cannot be read.
pub fn compare(model: &Model, count: usize) -> Result<Compared, String> {
    let substrates = demo_substrates(model)?;
    let library = model.library();
    let bases: Vec<Arc<Base>> = library
        .bases()
        .iter()
        .map(|b| Arc::new(model.base(b)))
        .collect();
    let solvents: Vec<Arc<Solvent>> = library
        .solvents()
        .iter()
        .map(|s| Arc::new(model.solvent(s)))
        .collect();
    let electrophiles: Vec<Arc<Electrophile>> = library
        .electrophiles()
        .iter()
        .filter_map(|e| {
            Some(Arc::new(
                model.electrophile(&e.name, Molecule::parse(&e.smiles).ok()?),
            ))
        })
        .collect();
    let mut sampler = Sampler::default();
    let (mut found, mut given_up) = (Vec::with_capacity(count), Vec::new());
    while found.len() < count {
        let substrate = substrates[sampler.pick(substrates.len())].clone();
        let electrophile = electrophiles[sampler.pick(electrophiles.len())].clone();
        let pair: Arc<Pair> = Arc::new(model.pair(&substrate, &electrophile));
        let temperature_c = [-78.0, -20.0, 0.0, 25.0, 60.0][sampler.pick(5)];
        let cell = Cell {
            substrate,
            electrophile,
            pair,
            base: bases[sampler.pick(bases.len())].clone(),
            solvent: solvents[sampler.pick(solvents.len())].clone(),
            additive: None,
            conditions: Conditions {
                additive_equiv: 0.0,
                temperature_c,
                formation_temperature_c: temperature_c,
                base_equiv: [0.1, 1.1, 2.2][sampler.pick(3)],
                electrophile_equiv: [1.1, 2.0][sampler.pick(2)],
                concentration_m: [0.1, 0.4][sampler.pick(2)],
                time_h: [1.0, 16.0][sampler.pick(2)],
                dosing_min: 10.0,
                addition: None,
            },
        };
        match model.both_solvers(&cell) {
            Ok(Some((fast, reference))) => found.push(Comparison {
                cell: words(&cell),
                fast,
                reference,
            }),
            Ok(None) => {}
            Err(error) => given_up.push(format!("{}: {error}", words(&cell))),
        }
    }
    Ok((found, given_up))
}

fn words(cell: &Cell) -> String {
    let c = &cell.conditions;
    format!(
        "{} + {} + {} in {}, {} °C, {} / {} equiv, {} M, {} h",
        cell.substrate.name,
        cell.base.record.name,
        cell.electrophile.name,
        cell.solvent.record.name,
        c.temperature_c,
        c.base_equiv,
        c.electrophile_equiv,
        c.concentration_m,
        c.time_h
    )
}

pub(crate) fn demo_substrates(model: &Model) -> Result<Vec<Arc<Substrate>>, String> {
    let text = include_str!("../../../deploy/demo/substrates.csv");
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(text.as_bytes());
    reader
        .records()
        .map(|row| {
            let row = row.map_err(|error| error.to_string())?;
            let molecule = Molecule::parse(&row[1]).map_err(|e| format!("{}: {e}", &row[0]))?;
            Ok(Arc::new(model.substrate(&row[0], molecule, None)))
        })
        .collect()
}

/// Spearman's rank correlation; ties share their mean rank.
fn spearman(x: &[f64], y: &[f64]) -> f64 {
    let (x, y) = (ranks(x), ranks(y));
    let mean = (x.len() as f64 + 1.0) / 2.0;
    let dot = |a: &[f64], b: &[f64]| {
        a.iter()
            .zip(b)
            .map(|(a, b)| (a - mean) * (b - mean))
            .sum::<f64>()
    };
    dot(&x, &y) / (dot(&x, &x) * dot(&y, &y)).sqrt()
}

fn ranks(values: &[f64]) -> Vec<f64> {
    let mut order: Vec<usize> = (0..values.len()).collect();
    order.sort_by(|&a, &b| values[a].total_cmp(&values[b]));
    let mut ranks = vec![0.0; values.len()];
    let mut start = 0;
    while start < order.len() {
        let mut end = start + 1;
        while end < order.len() && values[order[end]] == values[order[start]] {
            end += 1;
        }
        let shared = (start + 1 + end) as f64 / 2.0;
        order[start..end].iter().for_each(|&i| ranks[i] = shared);
        start = end;
    }
    ranks
}

/// Share of cells within [`CLOSE`].
fn close_share<'a>(comparisons: impl Iterator<Item = &'a Comparison>) -> f64 {
    let (mut close, mut all) = (0.0, 0.0);
    for comparison in comparisons {
        all += 1.0;
        close += f64::from(u8::from(comparison.difference() <= CLOSE));
    }
    if all > 0.0 { close / all } else { 1.0 }
}

/// Prints the disagreement of the two solvers and the worst cells.
///
/// # Errors
/// As [`compare`].
pub fn print(model: &Model, count: usize, out: &mut impl std::io::Write) -> Result<(), String> {
    let (mut found, given_up) = compare(model, count)?;
    let nontrivial = found.iter().filter(|c| !c.is_trivial()).count();
    let fast: Vec<f64> = found.iter().map(|c| c.fast).collect();
    let reference: Vec<f64> = found.iter().map(|c| c.reference).collect();
    let rho = spearman(&fast, &reference);
    let all = close_share(found.iter());
    let hard = close_share(found.iter().filter(|c| !c.is_trivial()));
    found.sort_by(|a, b| b.difference().total_cmp(&a.difference()));
    let mut text = format!(
        "fast solver against stiff reference, {count} random cells of the library, {nontrivial} of them not trivial\n\
         |Δyield| ≤ {CLOSE}: {:.1} % of all, {:.1} % of those not trivial\nSpearman ρ: {rho:.4}\nworst:\n",
        100.0 * all,
        100.0 * hard
    );
    for c in found.iter().take(8) {
        text += &format!(
            "  fast {:.3}, reference {:.3}: {}\n",
            c.fast, c.reference, c.cell
        );
    }
    for cell in &given_up {
        text += &format!("  the reference gave up: {cell}\n");
    }
    out.write_all(text.as_bytes())
        .map_err(|error| error.to_string())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn spearman_of_a_worked_example() {
        // Spearman 1904's formula 1 − 6 Σd²/(n(n² − 1)) by hand: d = 0, 1, −1, 0 → 0.8
        assert!((spearman(&[1.0, 2.0, 3.0, 4.0], &[1.0, 3.0, 2.0, 4.0]) - 0.8).abs() < 1e-12);
    }
}
