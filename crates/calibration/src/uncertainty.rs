//! The screen's quadrature against joint draws of everything uncertain.

use std::collections::BTreeMap;
use std::fmt::Write;

use enolattice_model::{Cell, Draw, Model};

use crate::random_cells::RandomCells;
use crate::solvers::words;

/// Yield that counts as a hit.
const TARGET: f64 = 0.5;
/// Differences of p_hit that count as small.
const CLOSE: f64 = 0.05;
/// A cell is taken where the screen leaves some doubt, or finds some product.
const TELLING: std::ops::Range<f64> = 0.005..0.995;
/// Cells with the greatest differences that are listed.
const WORST: usize = 15;
/// Quantities that are listed by how much of the variance they explain.
const QUANTITIES: usize = 25;

/// One cell by quadrature and by draws.
struct Compared {
    cell: String,
    p_hit: [f64; 2],
    mean: [f64; 2],
}

/// The page on the screen's p_hit and mean yield against those of `draws` joint draws, over `count` random cells.
///
/// # Errors
/// A sentence if the demo's substrates cannot be read.
pub fn page(model: &Model, count: usize, draws: u32) -> Result<String, String> {
    let mut cells = RandomCells::new(model)?;
    let draws: Vec<Draw> = (1..=draws).map(|number| model.draw(1, number)).collect();
    let mut found = Vec::new();
    let mut shares: BTreeMap<String, f64> = BTreeMap::new();
    let (mut tried, mut trivial) = (0, 0);
    while found.len() < count {
        let cell = cells.next(model);
        tried += 1;
        let Some(compared) = compare(model, &cell, &draws, &mut shares) else {
            trivial += 1;
            continue;
        };
        found.push(compared);
    }
    found.sort_by(|a, b| off(b).total_cmp(&off(a)));
    let n = found.len() as f64;
    let mean = |of: &dyn Fn(&Compared) -> f64| found.iter().map(of).sum::<f64>() / n;
    let close = 100.0 * mean(&|c| f64::from(u8::from(off(c) <= CLOSE)));
    let mut page = format!(
        "# Uncertainty: the screen against joint draws\n\n\
         Written by `enolattice-calibration uncertainty {count} {}`: random cells as on [the solvers' page](solvers.md), \
         each scored by the screen and marched in {} joint draws of all parameters, of the acidities of substrate and \
         base and of the electrophile's E. Of {tried} cells {trivial} are not covered or leave no doubt (screen and first draws \
         agree on nothing or on everything); the rest counts here. A hit is a yield of {TARGET} or more.\n\n\
         | figure | value | aim |\n| --- | --- | --- |\n\
         | p_hit within {CLOSE} | {close:.0} % | 90 % |\n\
         | mean of p_hit, screen and draws | {:.3}, {:.3} | |\n\
         | mean absolute difference of p_hit | {:.3} | |\n\
         | mean of the expected yield, screen and draws | {:.3}, {:.3} | |\n\
         | mean absolute difference of the expected yield | {:.3} | |\n\n\
         The cells with the greatest differences:\n\n\
         | p_hit, screen | p_hit, draws | yield, screen | yield, draws | cell |\n| --- | --- | --- | --- | --- |\n",
        draws.len(),
        draws.len(),
        mean(&|c| c.p_hit[0]),
        mean(&|c| c.p_hit[1]),
        mean(&off),
        mean(&|c| c.mean[0]),
        mean(&|c| c.mean[1]),
        mean(&|c| (c.mean[0] - c.mean[1]).abs()),
    );
    for c in found.iter().take(WORST) {
        writeln!(
            page,
            "| {:.3} | {:.3} | {:.3} | {:.3} | {} |",
            c.p_hit[0], c.p_hit[1], c.mean[0], c.mean[1], c.cell
        )
        .expect("a string grows");
    }
    page.push_str(
        "\nWhat explains the variance of the yield over the draws, as a mean share over these cells (only shares that \
         the draws tell from nothing):\n\n| quantity | share |\n| --- | --- |\n",
    );
    let mut shares: Vec<(String, f64)> = shares.into_iter().collect();
    shares.sort_by(|a, b| b.1.total_cmp(&a.1));
    for (quantity, share) in shares.into_iter().take(QUANTITIES) {
        writeln!(page, "| {quantity} | {:.1} % |", 100.0 * share / n).expect("a string grows");
    }
    Ok(page)
}

fn off(compared: &Compared) -> f64 {
    (compared.p_hit[0] - compared.p_hit[1]).abs()
}

/// `None` where the model does not cover the cell or nothing is in doubt.
fn compare(
    model: &Model,
    cell: &Cell,
    draws: &[Draw],
    shares: &mut BTreeMap<String, f64>,
) -> Option<Compared> {
    const FIRST: usize = 32;
    let score = model.score(cell, TARGET, 0);
    let (p_hit, expected) = (score.p_hit?, score.expected_yield?);
    let mean = |yields: &[f64]| yields.iter().sum::<f64>() / yields.len() as f64;
    let first = mean(&model.yields(cell, &draws[..draws.len().min(FIRST)])?);
    if !TELLING.contains(&expected) && !TELLING.contains(&first) {
        return None;
    }
    let yields = model.yields(cell, draws)?;
    let hits = yields.iter().filter(|&&y| y >= TARGET).count();
    for doubt in model.doubts(cell, draws, &yields) {
        // the reagents' own values count by kind
        let kind = match doubt.quantity.split_once(" of ") {
            Some((value, _)) => format!("{value} of the reagent"),
            None => doubt.quantity,
        };
        *shares.entry(kind).or_default() += doubt.share;
    }
    Some(Compared {
        cell: words(cell),
        p_hit: [p_hit, hits as f64 / yields.len() as f64],
        mean: [expected, mean(&yields)],
    })
}
