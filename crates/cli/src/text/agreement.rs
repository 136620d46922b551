//! What a laboratory has measured, beside what the model says.

use enolattice_engine::{
    AcidityAgreement, Agreement, CellDescription, CheckedAcidity, CheckedRun, Miss, ReasonedSite,
    YieldAgreement,
};
use enolattice_grid::Decile;
use enolattice_model::{ExplainedSite, Explanation, Neighbour, Origin};

use super::numbers::{count, fixed, percent, temperatures};
use super::safety_notice;
use super::table::{Side, table, wrapped};

/// Compounds that are listed, worst first; `--json` has all.
const COMPOUNDS: usize = 20;
/// Losses of a miss that are named.
const LOSSES: usize = 3;

/// The page that `check-measured` prints; `rows` says where each yield was written.
pub(crate) fn agreement_page(agreement: &Agreement, rows: &[String]) -> String {
    let mut parts = Vec::new();
    let Agreement {
        model,
        yields,
        acidities,
    } = agreement;
    if !yields.runs.is_empty() {
        parts.push(format!("Yields\n{}", figures(yields)));
        if yields.covered > 0 {
            parts.push(format!(
                "Calibration of p_hit\n{}",
                calibration(&yields.deciles)
            ));
        }
        parts.extend(not_covered(yields, rows));
        if !yields.misses.is_empty() {
            parts.push(format!("Worst misses\n{}", misses(yields, rows)));
        }
    }
    if !acidities.compounds.is_empty() {
        parts.push(format!("pKa in DMSO\n{}", acidity_figures(acidities)));
        parts.push(format!("Compounds, worst first\n{}", compounds(acidities)));
    }
    parts.push(safety_notice());
    parts.push(format!("model {model}"));
    parts.join("\n\n")
}

fn figures(yields: &YieldAgreement) -> String {
    let runs = yields.runs.len() as u64;
    let covered = yields.covered;
    let bias = yields.mean_error.map_or_else(String::new, |error| {
        let way = if error < 0.0 { "low" } else { "high" };
        format!(", on average {} points too {way}", points(error.abs()))
    });
    lines(&[
        (
            "runs",
            format!(
                "{}, of them {} covered by the model",
                count(runs),
                count(covered)
            ),
        ),
        (
            "rank correlation",
            format!(
                "{} (Spearman, over {} runs)",
                fixed(yields.spearman, 2),
                count(covered)
            ),
        ),
        (
            "mean absolute error",
            match yields.mean_absolute_error {
                Some(error) => format!("{} points of yield{bias}", points(error)),
                None => "unknown".to_owned(),
            },
        ),
        (
            "hits",
            format!(
                "{} expected, {} measured (yield of {} or more)",
                fixed(Some(yields.hits_expected), 1),
                count(yields.hits_measured),
                percent(Some(yields.yield_at_least))
            ),
        ),
    ])
}

/// A difference of two yields.
pub(super) fn points(difference: f64) -> String {
    fixed(Some(100.0 * difference), 1)
}

fn calibration(deciles: &[Decile]) -> String {
    use Side::{Left, Right};
    let columns = [
        ("  p_hit", Left),
        ("runs", Right),
        ("mean p_hit", Right),
        ("hits", Right),
        ("share of hits", Right),
    ];
    let filled = deciles.iter().filter(|decile| decile.runs > 0);
    let rows = filled.map(|decile| {
        vec![
            format!("  {:.1} to {:.1}", decile.from, decile.to),
            count(decile.runs),
            percent(decile.p_hit),
            count(decile.hits),
            percent(decile.observed()),
        ]
    });
    table(&columns, rows)
}

fn not_covered(yields: &YieldAgreement, rows: &[String]) -> Option<String> {
    let unknown = yields.runs.iter().zip(rows);
    let unknown = unknown.filter(|(run, _)| run.expected_yield.is_none());
    let told: Vec<String> = unknown
        .map(|(run, row)| {
            wrapped(
                "  ",
                &format!("{row}: {}: {}", words(&run.cell), run.not_covered),
            )
        })
        .collect();
    (!told.is_empty()).then(|| format!("Not covered\n{}", told.join("\n")))
}

fn misses(yields: &YieldAgreement, rows: &[String]) -> String {
    let told = (1..).zip(&yields.misses).filter_map(|(number, miss)| {
        let at = usize::try_from(miss.run).ok()?;
        Some(one_miss(number, miss, yields.runs.get(at)?, rows.get(at)?))
    });
    told.collect::<Vec<_>>().join("\n")
}

fn one_miss(number: usize, miss: &Miss, run: &CheckedRun, row: &str) -> String {
    let told = &miss.explanation;
    let expected = run.expected_yield.unwrap_or_default();
    let measured = run.cell.measured.as_ref();
    let measured = measured.map_or(0.0, |known| known.yield_fraction);
    let way = if expected < measured { "low" } else { "high" };
    let sigma = told.yield_sigma;
    let sigma = sigma.map_or_else(String::new, |sigma| format!(" ± {}", percent(Some(sigma))));
    // the first sentence often names the largest loss once more
    let limits = told
        .limits
        .iter()
        .find(|text| !text.starts_with("largest loss"));
    let limits = limits.map_or("the model names nothing", String::as_str);
    let acidity = favoured_site(&told.sites).map_or_else(|| "none known".to_owned(), of_cell);
    [
        wrapped(
            &format!("  {number}. "),
            &format!("{row}: {}", words(&run.cell)),
        ),
        format!(
            "     expected {}{sigma}, measured {}: {} points too {way}",
            percent(Some(expected)),
            percent(Some(measured)),
            points((expected - measured).abs())
        ),
        format!("     losses        {}", losses(told)),
        wrapped("     what limits   ", limits),
        wrapped("     acidity       ", &acidity),
        wrapped("     hangs on      ", &most_doubted(told)),
    ]
    .join("\n")
}

/// The largest losses.
fn losses(told: &Explanation) -> String {
    let largest = told.losses.iter().take(LOSSES);
    let largest =
        largest.map(|(channel, share)| format!("{} {}", channel.name(), percent(Some(*share))));
    match told.losses.is_empty() {
        true => "none known".to_owned(),
        false => largest.collect::<Vec<_>>().join(", "),
    }
}

/// The quantity whose error moves the yield most.
fn most_doubted(told: &Explanation) -> String {
    told.doubts.first().map_or_else(
        || "no single quantity decides".to_owned(),
        |doubt| {
            format!(
                "{}, {} ± {}: {} of the variance of the yield",
                doubt.quantity,
                fixed(Some(doubt.value), 2),
                fixed(Some(doubt.sigma), 2),
                percent(Some(doubt.share))
            )
        },
    )
}

/// A cell in a line.
pub(super) fn words(cell: &CellDescription) -> String {
    let additive = cell.additive.as_ref();
    let additive = additive.map_or_else(String::new, |name| format!(" with {name}"));
    format!(
        "{} + {} + {} in {}{additive}, {} °C",
        cell.substrate,
        cell.base,
        cell.electrophile,
        cell.solvent,
        temperatures(cell.formation_temperature_c, cell.temperature_c)
    )
}

/// The most acidic C–H of the substrate.
fn favoured_site(sites: &[ExplainedSite]) -> Option<&ExplainedSite> {
    let carbon = |site: &&ExplainedSite| site.molecule == "substrate" && site.element == "C";
    let sites = sites.iter().filter(carbon);
    sites.min_by(|a, b| a.pka_dmso.total_cmp(&b.pka_dmso))
}

fn of_cell(site: &ExplainedSite) -> String {
    let value = format!(
        "C–H at atom {}: pKa {} ± {}",
        site.atom,
        fixed(Some(site.pka_dmso), 1),
        fixed(Some(site.sigma), 1)
    );
    format!(
        "{value}, {}",
        origin(site.origin, &site.source, &site.reasons.neighbours)
    )
}

/// Where a pKa comes from: its source, or the measured acid most like it.
fn origin(origin: Origin, source: &str, neighbours: &[Neighbour]) -> String {
    match (origin, neighbours.first()) {
        (Origin::Measured, _) => format!("measured: {source}"),
        (Origin::Estimated, None) => "estimated; nothing alike was measured".to_owned(),
        (Origin::Estimated, Some(near)) => format!(
            "estimated; nearest measured: {}, pKa {}, likeness {} ({})",
            near.smiles,
            fixed(Some(near.pka_dmso), 1),
            fixed(Some(near.similarity), 2),
            near.source
        ),
    }
}

fn acidity_figures(acidities: &AcidityAgreement) -> String {
    let compounds = &acidities.compounds;
    let known = compounds
        .iter()
        .filter(|compound| compound.site.is_some())
        .count() as u64;
    lines(&[
        (
            "compounds",
            format!(
                "{}, of them {} with a C–H that the model knows",
                compounds.len(),
                count(known)
            ),
        ),
        (
            "mean absolute error",
            format!(
                "{} over all, {} over the estimated",
                fixed(acidities.mean_absolute_error, 2),
                fixed(acidities.mean_absolute_error_of_estimates, 2)
            ),
        ),
        (
            "within 2 σ",
            format!("{} of {}", count(acidities.within_two_sigma), count(known)),
        ),
        (
            "rank correlation",
            format!("{} (Spearman)", fixed(acidities.spearman, 2)),
        ),
    ])
}

fn compounds(acidities: &AcidityAgreement) -> String {
    use Side::{Left, Right};
    let error = |compound: &CheckedAcidity| {
        let site = compound.site.as_ref()?;
        Some(site.site.pka_dmso - compound.measured)
    };
    let size = |compound: &CheckedAcidity| error(compound).map_or(f64::NEG_INFINITY, f64::abs);
    let mut worst: Vec<&CheckedAcidity> = acidities.compounds.iter().collect();
    worst.sort_by(|a, b| size(b).total_cmp(&size(a)));
    let columns = [
        ("  compound", Left),
        ("measured", Right),
        ("model", Right),
        ("± σ", Right),
        ("error", Right),
        ("origin", Left),
    ];
    let rows = worst.into_iter().take(COMPOUNDS).map(|compound| {
        let site = compound.site.as_ref();
        vec![
            format!("  {}", compound.name),
            fixed(Some(compound.measured), 1),
            fixed(site.map(|known| known.site.pka_dmso), 1),
            fixed(site.map(|known| known.site.sigma), 1),
            fixed(error(compound), 1),
            site.map_or_else(|| "no acidic C–H is known".to_owned(), of_compound),
        ]
    });
    table(&columns, rows)
}

fn of_compound(known: &ReasonedSite) -> String {
    let near = &known.reasons.neighbours;
    match (known.site.origin, near.is_empty()) {
        // only the worst have reasons
        (Origin::Estimated, true) => "estimated".to_owned(),
        (of, _) => origin(of, &known.site.source, near),
    }
}

/// Names and values, the values below each other.
pub(super) fn lines(pairs: &[(&str, String)]) -> String {
    let lines: Vec<String> = pairs
        .iter()
        .map(|(name, value)| wrapped(&format!("  {name:<21}"), value))
        .collect();
    lines.join("\n")
}
