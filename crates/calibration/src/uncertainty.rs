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
/// A cell is in doubt where the screen or the draws expect some product, and not all of it.
const TELLING: std::ops::Range<f64> = 0.005..0.995;
/// Draws after which a cell that is not in doubt is left: its p_hit is known to well below 0.01 by then.
const ENOUGH: usize = 512;
/// Cells with the greatest differences that are listed.
const WORST: usize = 15;
/// Quantities that are listed by how much of the variance they explain.
const QUANTITIES: usize = 25;
/// Bounds of p_hit between which cells are put together.
const BINS: [f64; 8] = [0.0, 0.02, 0.1, 0.3, 0.5, 0.7, 0.9, 1.0];

/// One cell by quadrature and by draws.
struct Compared {
    cell: String,
    p_hit: [f64; 2],
    mean: [f64; 2],
    in_doubt: bool,
}

/// The page on the screen's p_hit and mean yield against those of `draws` joint draws, over `count` random cells that
/// the model covers.
///
/// # Errors
/// A sentence if the demo's substrates cannot be read.
pub fn page(model: &Model, count: usize, draws: u32) -> Result<String, String> {
    let mut cells = RandomCells::new(model)?;
    let draws: Vec<Draw> = (1..=draws).map(|number| model.draw(1, number)).collect();
    let mut all = Vec::new();
    let mut shares: BTreeMap<String, f64> = BTreeMap::new();
    while all.len() < count {
        let cell = cells.next(model);
        all.extend(compare(model, &cell, &draws, &mut shares));
    }
    all.sort_by(|a, b| off(b).total_cmp(&off(a)));
    let doubted: Vec<&Compared> = all.iter().filter(|c| c.in_doubt).collect();
    let everything: Vec<&Compared> = all.iter().collect();
    let mut page = format!(
        "# Uncertainty: the screen against joint draws\n\n\
         Written by `enolattice-calibration uncertainty {count} {n}`: random cells as on [the solvers' page](solvers.md) that the \
         model covers, each scored by the screen and marched in {n} joint draws of all parameters, of the acidities of \
         substrate, product, electrophile and base and of the electrophile's E. A cell is in doubt where the screen or the draws expect a \
         yield between {} and {}; the others were left after {ENOUGH} draws. A hit is a yield of {TARGET} or more. \
         The width that the screen gives to all other parameters was set on these very cells.\n\n\
         | figure | all cells | cells in doubt | aim |\n| --- | --- | --- | --- |\n",
        TELLING.start,
        TELLING.end,
        n = draws.len(),
    );
    let mut line = |name: &str, aim: &str, figure: &dyn Fn(&[&Compared]) -> String| {
        let [of_all, of_doubted] = [&everything, &doubted].map(|cells| figure(cells));
        writeln!(page, "| {name} | {of_all} | {of_doubted} | {aim} |").expect("a string grows");
    };
    line("cells", "", &|cells| cells.len().to_string());
    line(&format!("p_hit within {CLOSE}"), "90 %", &|cells| {
        let close = mean(cells, &|c| f64::from(u8::from(off(c) <= CLOSE)));
        format!("{:.0} %", 100.0 * close)
    });
    line("p_hit within 0.1", "", &|cells| {
        let close = mean(cells, &|c| f64::from(u8::from(off(c) <= 0.1)));
        format!("{:.0} %", 100.0 * close)
    });
    line("mean of p_hit, screen and draws", "", &|cells| {
        let [screen, drawn] = [0, 1].map(|i| mean(cells, &|c| c.p_hit[i]));
        format!("{screen:.3}, {drawn:.3}")
    });
    line("mean absolute difference of p_hit", "", &|cells| {
        format!("{:.3}", mean(cells, &off))
    });
    line(
        "mean of the expected yield, screen and draws",
        "",
        &|cells| {
            let [screen, drawn] = [0, 1].map(|i| mean(cells, &|c| c.mean[i]));
            format!("{screen:.3}, {drawn:.3}")
        },
    );
    line(
        "mean absolute difference of the expected yield",
        "",
        &|cells| {
            let apart = |c: &Compared| (c.mean[0] - c.mean[1]).abs();
            format!("{:.3}", mean(cells, &apart))
        },
    );
    page.push_str(
        "\nOf the cells to which the screen gives a p_hit, the mean p_hit by draws:\n\n\
         | p_hit, screen | cells | mean, screen | mean, draws | within 0.05 |\n| --- | --- | --- | --- | --- |\n",
    );
    for bounds in BINS.windows(2) {
        let within = |p: f64| p >= bounds[0] && (p < bounds[1] || bounds[1] == 1.0);
        let cells: Vec<&Compared> = all.iter().filter(|c| within(c.p_hit[0])).collect();
        writeln!(
            page,
            "| {} to {} | {} | {:.3} | {:.3} | {:.0} % |",
            bounds[0],
            bounds[1],
            cells.len(),
            mean(&cells, &|c| c.p_hit[0]),
            mean(&cells, &|c| c.p_hit[1]),
            100.0 * mean(&cells, &|c| f64::from(u8::from(off(c) <= CLOSE))),
        )
        .expect("a string grows");
    }
    page.push_str(
        "\nThe cells with the greatest differences:\n\n\
         | p_hit, screen | p_hit, draws | yield, screen | yield, draws | cell |\n| --- | --- | --- | --- | --- |\n",
    );
    for c in all.iter().take(WORST) {
        writeln!(
            page,
            "| {:.3} | {:.3} | {:.3} | {:.3} | {} |",
            c.p_hit[0], c.p_hit[1], c.mean[0], c.mean[1], c.cell
        )
        .expect("a string grows");
    }
    page.push_str(
        "\nWhat explains the variance of the yield over the draws, as a mean share over the cells in doubt (only shares \
         that the draws tell from nothing):\n\n| quantity | share |\n| --- | --- |\n",
    );
    let n = doubted.len() as f64;
    let mut shares: Vec<(String, f64)> = shares.into_iter().collect();
    shares.sort_by(|a, b| b.1.total_cmp(&a.1));
    for (quantity, share) in shares.into_iter().take(QUANTITIES) {
        writeln!(page, "| {quantity} | {:.1} % |", 100.0 * share / n).expect("a string grows");
    }
    Ok(page)
}

fn mean(cells: &[&Compared], of: &dyn Fn(&Compared) -> f64) -> f64 {
    cells.iter().map(|c| of(c)).sum::<f64>() / cells.len() as f64
}

fn off(compared: &Compared) -> f64 {
    (compared.p_hit[0] - compared.p_hit[1]).abs()
}

/// `None` where the model does not cover the cell.
fn compare(
    model: &Model,
    cell: &Cell,
    draws: &[Draw],
    shares: &mut BTreeMap<String, f64>,
) -> Option<Compared> {
    let score = model.score(cell, TARGET, 0);
    let (p_hit, expected) = (score.p_hit?, score.expected_yield?);
    let average = |yields: &[f64]| yields.iter().sum::<f64>() / yields.len() as f64;
    let (first, rest) = draws.split_at(draws.len().min(ENOUGH));
    let mut yields = model.yields(cell, first)?;
    let in_doubt = TELLING.contains(&expected) || TELLING.contains(&average(&yields));
    if in_doubt {
        yields.extend(model.yields(cell, rest)?);
        for doubt in model.doubts(cell, draws, &yields) {
            *shares.entry(kind(doubt.quantity)).or_default() += doubt.share;
        }
    }
    let hits = yields.iter().filter(|&&y| y >= TARGET).count();
    Some(Compared {
        cell: words(cell),
        p_hit: [p_hit, hits as f64 / yields.len() as f64],
        mean: [expected, average(&yields)],
        in_doubt,
    })
}

/// A quantity as the page lists it: the reagents' own values by kind.
fn kind(quantity: String) -> String {
    let kinds = [
        ("pKa of the acid of ", "pKa of the base's acid"),
        ("pKa of ", "pKa of the substrate"),
        ("E of ", "E of the electrophile"),
    ];
    let known = kinds.iter().find(|(start, _)| quantity.starts_with(start));
    known.map_or(quantity.clone(), |(_, kind)| (*kind).to_owned())
}
