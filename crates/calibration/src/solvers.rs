//! The fast solver against the stiff reference on random cells.

use std::fmt::Write;
use std::time::Instant;

use enolattice_grid::spearman;
use enolattice_model::{Cell, Model, Solutions};

use crate::random_cells::RandomCells;

/// Agreement counts as good within this difference of yields.
const CLOSE: f64 = 0.05;
/// Yields this near to 0 or 1 in both solvers are trivial.
const TRIVIAL: f64 = 0.02;
/// Yields that differ by less rank alike: no analysis tells them apart (common practice).
const ALIKE: f64 = 1e-3;
/// Cells with the greatest differences that are listed.
const WORST: usize = 20;
/// Error of mass, as a share of what was charged, from which a cell is listed.
const MASS: f64 = 1e-7;

/// One cell by both solvers.
#[derive(Clone, Debug)]
pub struct Comparison {
    /// The cell in words.
    pub cell: String,
    /// What the solvers make of it.
    pub solutions: Solutions,
}

impl Comparison {
    fn is_trivial(&self) -> bool {
        let near = |y: f64| !(TRIVIAL..=1.0 - TRIVIAL).contains(&y);
        near(self.solutions.fast.product) && near(self.solutions.reference.product)
    }

    /// Difference of the yields.
    pub fn difference(&self) -> f64 {
        (self.solutions.fast.product - self.solutions.reference.product).abs()
    }

    /// Whether both solvers name the same largest loss.
    fn has_same_loss(&self) -> bool {
        self.solutions.fast.largest_loss == self.solutions.reference.largest_loss
    }

    /// Substrate lost or gained by the fast solver and by the reference, as a share of what was charged.
    fn mass_errors(&self) -> [f64; 2] {
        [&self.solutions.fast, &self.solutions.reference]
            .map(|s| s.substrate_error.abs().max(s.electrophile_error.abs()))
    }
}

/// Both solvers on random cells.
#[derive(Clone, Debug, Default)]
pub struct Compared {
    /// Cells solved by both.
    pub found: Vec<Comparison>,
    /// Cells on which the reference gave up, with its reason.
    pub given_up: Vec<String>,
    /// Time of the fast solver at the mean of all parameters, µs a cell.
    pub at_mean_us: f64,
    /// Time of a score, with quadrature, µs a cell.
    pub score_us: f64,
}

/// Compares both solvers on `count` random cells that the model covers and that need a network.
///
/// # Errors
/// A sentence if the demo's substrates cannot be read.
pub fn compare(model: &Model, count: usize) -> Result<Compared, String> {
    let mut cells = RandomCells::new(model)?;
    let mut compared = Compared::default();
    let (mut at_mean_s, mut score_s) = (0.0, 0.0);
    while compared.found.len() < count {
        let cell = cells.next(model);
        match model.both_solvers(&cell) {
            Ok(Some(solutions)) => {
                at_mean_s += seconds(|| model.yield_at_mean(&cell));
                score_s += seconds(|| model.score(&cell, 0.5, 0));
                let cell = words(&cell);
                compared.found.push(Comparison { cell, solutions });
            }
            Ok(None) => {}
            Err(error) => compared.given_up.push(format!("{}: {error}", words(&cell))),
        }
    }
    compared.at_mean_us = 1e6 * at_mean_s / count as f64;
    compared.score_us = 1e6 * score_s / count as f64;
    Ok(compared)
}

fn seconds<T>(work: impl FnOnce() -> T) -> f64 {
    let start = Instant::now();
    std::hint::black_box(work());
    start.elapsed().as_secs_f64()
}

/// A cell in words.
pub(crate) fn words(cell: &Cell) -> String {
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

/// Share of the cells for which something holds, in per cent.
fn share<'a>(
    cells: impl Iterator<Item = &'a Comparison>,
    holds: impl Fn(&Comparison) -> bool,
) -> f64 {
    let (mut held, mut all) = (0.0, 0.0);
    for cell in cells {
        all += 1.0;
        held += f64::from(u8::from(holds(cell)));
    }
    100.0 * held / f64::max(all, 1.0)
}

/// The page on the agreement of the two solvers and on the cells where it is worst, over `count` random cells.
///
/// # Errors
/// As [`compare`].
pub fn page(model: &Model, count: usize) -> Result<String, String> {
    let compared = compare(model, count)?;
    let mut found = compared.found;
    let each = |product: fn(&Solutions) -> f64| -> Vec<f64> {
        found.iter().map(|c| product(&c.solutions)).collect()
    };
    let (fast, reference) = (each(|s| s.fast.product), each(|s| s.reference.product));
    let [rho_of_all, rho] = [1e-12, ALIKE].map(|unit| {
        let rounded = |yields: f64| (yields / unit).round();
        let pairs = fast.iter().zip(&reference);
        let pairs: Vec<_> = pairs.map(|(x, y)| (rounded(*x), rounded(*y))).collect();
        spearman(&pairs).unwrap_or(f64::NAN)
    });
    found.sort_by(|a, b| b.difference().total_cmp(&a.difference()));
    let is_close = |c: &Comparison| c.difference() <= CLOSE;
    let hard = || found.iter().filter(|c| !c.is_trivial());
    let mass = |solver: usize| {
        found
            .iter()
            .map(|c| c.mass_errors()[solver])
            .fold(0.0, f64::max)
    };
    let mut page = format!(
        "# The two solvers\n\n\
         Written by `enolattice-calibration solvers {count}`: random cells over the demo's invented substrates and all \
         reagents of the library that the model covers and that need a network. The stiff reference is Radau IIA of \
         order 5; `tests/python/check_networks.py` holds it against SciPy. A cell is trivial where both \
         yields lie within {TRIVIAL} of 0 or of 1.\n\n\
         | figure | value | aim |\n| --- | --- | --- |\n\
         | cells, of them not trivial | {count}, {} | |\n\
         | yields within {CLOSE}, all cells | {:.1} % | 95 % |\n\
         | yields within {CLOSE}, cells that are not trivial | {:.1} % | 90 % |\n\
         | Spearman's rank correlation of the yields, those within {ALIKE} alike | {rho:.4} | 0.98 |\n\
         | the same with all digits, yields down to 1e-12 | {rho_of_all:.4} | |\n\
         | same largest loss | {:.1} % | 90 % |\n\
         | settled by a bound, without quadrature | {:.1} % | |\n\
         | greatest error of mass, fast solver | {:.0e} | 1e-6 |\n\
         | greatest error of mass, reference | {:.0e} | 1e-9 |\n\
         | given up by the reference | {} | 0 |\n\
         | time at the mean, the deprotonation included, µs a cell | {:.0} | |\n\
         | time of a score with quadrature, the deprotonation included, µs a cell | {:.0} | |\n\n\
         Times are of one core of the machine that wrote the page. In a campaign cells that differ in the electrophile \
         alone share the deprotonation: the benchmark `screening` of the grid gives the time of a whole one.\n\n\
         The cells with the greatest differences:\n\n\
         | fast | reference | cell |\n| --- | --- | --- |\n",
        hard().count(),
        share(found.iter(), is_close),
        share(hard(), is_close),
        share(found.iter(), Comparison::has_same_loss),
        share(found.iter(), |c| c.solutions.is_settled),
        mass(0),
        mass(1),
        compared.given_up.len(),
        compared.at_mean_us,
        compared.score_us,
    );
    for Comparison { cell, solutions } in found.iter().take(WORST) {
        let (fast, reference) = (solutions.fast.product, solutions.reference.product);
        writeln!(page, "| {fast:.3} | {reference:.3} | {cell} |").expect("a string grows");
    }
    found.retain(|c| c.mass_errors()[0] > MASS);
    found.sort_by(|a, b| b.mass_errors()[0].total_cmp(&a.mass_errors()[0]));
    if !found.is_empty() {
        writeln!(
            page,
            "\nCells in which the fast solver loses or gains more than {MASS:.0e} of what was charged: {}.\n\n\
             | error of mass | cell |\n| --- | --- |",
            found.len()
        )
        .expect("a string grows");
    }
    for cell in found.iter().take(WORST) {
        writeln!(page, "| {:.1e} | {} |", cell.mass_errors()[0], cell.cell)
            .expect("a string grows");
    }
    for cell in &compared.given_up {
        writeln!(page, "\nThe reference gave up: {cell}").expect("a string grows");
    }
    Ok(page)
}
