//! Everything about one cell, as a page.

use enolattice_engine::CellDescription;
use enolattice_grid::MeasuredYield;
use enolattice_model::{Advice, Channel, CoursePoint, Explanation};

use super::chart::{Curve, chart, time};
use super::numbers::{fixed, percent, short, temperatures};
use super::safety_notice;
use super::sites::{reasons, site_table};
use super::table::{Side, table, wrapped};
use crate::json::SiteRecord;

/// The page that `explain` prints.
pub(crate) fn explanation_page(cell: &CellDescription, told: &Explanation) -> String {
    let mut sections = vec![
        ("Cell", cell_section(cell)),
        ("In short", in_short(told)),
        ("Numbers", numbers(cell, told)),
        ("Product", product(told)),
        ("Acidic sites", sites(told)),
        ("Why these pKa", why(told)),
        ("Rates, in the order of what goes through them", rates(told)),
        ("Losses (of the substrate charged)", losses(told)),
        ("What the uncertainty rests on", doubts(told)),
        ("Masses to look for", masses(told)),
        (
            "Time course (reference, parameters at their means)",
            course(told),
        ),
        ("Cautions", cautions(told)),
        ("Hazards", sentences(&told.hazards, "unknown")),
        ("Limits", sentences(&told.limits, "the model names none")),
        ("What a change would bring", advice(told)),
    ];
    // why there is no number is the first thing that one wants to know
    sections.retain(|(heading, _)| *heading != "In short" || !told.summary.is_empty());
    let mut page: Vec<String> = sections
        .iter()
        .map(|(heading, text)| format!("{heading}\n{text}"))
        .collect();
    page.push(safety_notice());
    page.push(format!("model {}", told.model));
    page.join("\n\n")
}

/// The opening paragraph: the sentences of the summary with capitals and full stops.
fn in_short(told: &Explanation) -> String {
    let sentence = |text: &String| {
        let mut letters = text.chars();
        // a name keeps its first letter: only words of the language begin a sentence with a capital
        let starts_with_word = ["the ", "its ", "what ", "nothing ", "not ", "expected "]
            .iter()
            .any(|word| text.starts_with(word));
        match letters.next() {
            Some(first) if starts_with_word => {
                format!("{}{}.", first.to_uppercase(), letters.as_str())
            }
            _ => format!("{text}."),
        }
    };
    let paragraph: Vec<String> = told.summary.iter().map(sentence).collect();
    wrapped("  ", &paragraph.join(" "))
}

fn cell_section(cell: &CellDescription) -> String {
    let mut lines = Vec::new();
    if let Some(number) = cell.cell {
        lines.push(("number", number.to_string()));
    }
    lines.extend([
        (
            "substrate",
            with_smiles(&cell.substrate, &cell.substrate_smiles),
        ),
        (
            "base",
            format!("{}, {} equiv", cell.base, short(cell.base_equiv)),
        ),
        (
            "electrophile",
            format!(
                "{}, {} equiv",
                with_smiles(&cell.electrophile, &cell.electrophile_smiles),
                short(cell.electrophile_equiv)
            ),
        ),
        (
            "solvent",
            format!(
                "{}, substrate {} mol/L",
                cell.solvent,
                short(cell.concentration_m)
            ),
        ),
    ]);
    if let Some(additive) = &cell.additive {
        let equiv = short(cell.additive_equiv.unwrap_or_default());
        lines.push(("additive", format!("{additive}, {equiv} equiv")));
    }
    lines.extend([
        (
            "temperature",
            format!(
                "{} °C",
                temperatures(cell.formation_temperature_c, cell.temperature_c)
            ),
        ),
        (
            "time",
            format!(
                "{} h; electrophile over {} min",
                short(cell.time_h),
                short(cell.dosing_min)
            ),
        ),
        ("addition", cell.addition.clone()),
    ]);
    pairs(lines)
}

fn with_smiles(name: &str, smiles: &str) -> String {
    if name == smiles {
        name.to_owned()
    } else {
        format!("{name} ({smiles})")
    }
}

fn numbers(cell: &CellDescription, told: &Explanation) -> String {
    let uncertain = told
        .yield_sigma
        .map_or_else(String::new, |sigma| format!(" ± {}", percent(Some(sigma))));
    let mut lines = vec![(
        "expected yield",
        match told.expected_yield {
            Some(_) => format!(
                "{}{uncertain} on the substrate",
                percent(told.expected_yield)
            ),
            None => percent(None),
        },
    )];
    lines.extend(
        cell.measured
            .as_ref()
            .map(|known| ("measured yield", measured(known))),
    );
    lines.extend([
        ("yield on limiting", on_limiting(told)),
        ("p_hit", percent(told.p_hit)),
        ("feasibility", percent(told.feasibility)),
        ("selectivity", percent(told.selectivity)),
        ("reference yield", percent(told.reference_yield)),
        ("fast yield", percent(told.fast_yield)),
        ("log10 K", log10_k(told)),
        ("ΔG° deprotonation", delta_g(cell, told)),
        ("enolate fraction", percent(told.enolate_fraction)),
    ]);
    pairs(lines)
}

/// The mean yield on the reagent of which there is least.
fn on_limiting(told: &Explanation) -> String {
    let reagent = told.limiting_reagent.as_deref();
    let named = reagent.map_or_else(String::new, |reagent| format!(" on the {reagent}"));
    format!("{}{named}", percent(told.yield_on_limiting))
}

/// ΔG° of the deprotonation with the uncertainty of log10 K, at the temperature of the reaction.
fn delta_g(cell: &CellDescription, told: &Explanation) -> String {
    // R·ln 10, kJ/(mol K) (CODATA 2018)
    const PER_LOG10_K: f64 = 8.314_462_618e-3 * std::f64::consts::LN_10;
    let sigma = told
        .log10_k_sigma
        .map(|sigma| sigma * PER_LOG10_K * (cell.temperature_c + 273.15));
    match (told.delta_g_deprotonation_kj_mol, sigma) {
        (known @ Some(_), Some(_)) => {
            format!("{} ± {} kJ/mol", fixed(known, 1), fixed(sigma, 1))
        }
        (known, _) => with_unit(known, 1, "kJ/mol"),
    }
}

/// A yield as the laboratory has measured it, with what it says of it.
fn measured(known: &MeasuredYield) -> String {
    let mut text = percent(Some(known.yield_fraction));
    if known.sigma.is_some() {
        text += &format!(" ± {}", percent(known.sigma));
    }
    if !known.note.is_empty() {
        text += &format!(" ({})", known.note);
    }
    text
}

/// log10 K of the deprotonation at the temperature of the reaction, with its uncertainty.
fn log10_k(told: &Explanation) -> String {
    let uncertain = told
        .log10_k_sigma
        .map_or_else(String::new, |sigma| format!(" ± {}", fixed(Some(sigma), 1)));
    format!("{}{uncertain}", fixed(told.log10_k, 2))
}

fn with_unit(number: Option<f64>, decimals: usize, unit: &str) -> String {
    match number {
        Some(_) => format!("{} {unit}", fixed(number, decimals)),
        None => "unknown".to_owned(),
    }
}

fn product(told: &Explanation) -> String {
    let unknown = || "unknown".to_owned();
    let mut lines = vec![
        (
            "SMILES",
            told.product_smiles.clone().unwrap_or_else(unknown),
        ),
        (
            "formula",
            told.product_formula.clone().unwrap_or_else(unknown),
        ),
        ("monoisotopic mass", with_unit(told.product_mass, 4, "Da")),
    ];
    if let Some(condensed) = &told.condensation_smiles {
        lines.push(("after loss of water", condensed.clone()));
    }
    pairs(lines)
}

fn sites(told: &Explanation) -> String {
    let records: Vec<SiteRecord> = told.sites.iter().cloned().map(SiteRecord::from).collect();
    if records.is_empty() {
        "  none known".to_owned()
    } else {
        indented(&site_table(&records, true))
    }
}

/// Terms and neighbours of each estimated site, the source of each measured one.
fn why(told: &Explanation) -> String {
    let sites = told.sites.iter().cloned().map(SiteRecord::from);
    let blocks: Vec<String> = sites.map(|site| reasons(&site, true)).collect();
    match blocks.is_empty() {
        true => "  no site is known".to_owned(),
        false => blocks.join("\n\n"),
    }
}

/// The steps through which something goes, and some of those that could matter; `--json` has all.
fn rates(told: &Explanation) -> String {
    const LEAST: usize = 4;
    const MOST: usize = 14;
    const COUNTS: f64 = 5e-4;
    let columns = [
        ("step", Side::Left),
        ("log10 k", Side::Right),
        ("σ", Side::Right),
        ("goes through", Side::Right),
        ("source", Side::Left),
    ];
    let counts = told
        .rates
        .iter()
        .filter(|rate| rate.extent.is_none_or(|e| e >= COUNTS));
    let shown = counts.count().clamp(LEAST, MOST);
    let rows = told.rates.iter().take(shown).map(|rate| {
        vec![
            rate.step.clone(),
            fixed(Some(rate.log10_k), 2),
            fixed(Some(rate.sigma), 1),
            rate.extent
                .map_or_else(String::new, |extent| percent(Some(extent))),
            rate.source.clone(),
        ]
    });
    if told.rates.is_empty() {
        "  none known".to_owned()
    } else {
        indented(&table(&columns, rows))
    }
}

fn losses(told: &Explanation) -> String {
    let rows = told
        .losses
        .iter()
        .map(|(channel, fraction)| vec![channel.name().to_owned(), percent(Some(*fraction))]);
    let columns = [("channel", Side::Left), ("fraction", Side::Right)];
    if told.losses.is_empty() {
        "  none known".to_owned()
    } else {
        indented(&table(&columns, rows))
    }
}

/// The quantities whose errors matter most; `--json` has all.
fn doubts(told: &Explanation) -> String {
    const SHOWN: usize = 8;
    let columns = [
        ("quantity", Side::Left),
        ("value", Side::Right),
        ("σ", Side::Right),
        ("share of variance", Side::Right),
        ("more of it", Side::Left),
        ("source", Side::Left),
    ];
    let rows = told.doubts.iter().take(SHOWN).map(|doubt| {
        vec![
            doubt.quantity.clone(),
            fixed(Some(doubt.value), 2),
            fixed(Some(doubt.sigma), 2),
            percent(Some(doubt.share)),
            match doubt.raises_yield {
                true => "raises the yield".to_owned(),
                false => "lowers the yield".to_owned(),
            },
            doubt.source.clone(),
        ]
    });
    if told.doubts.is_empty() {
        "  no single quantity decides".to_owned()
    } else {
        indented(&table(&columns, rows))
    }
}

/// What can be in the pot at the end, with the share of the substrate that ends in it.
/// Products whose share shows; `--json` has all that can be drawn.
fn masses(told: &Explanation) -> String {
    const SHOWS: f64 = 0.0005;
    let columns = [
        ("channel", Side::Left),
        ("SMILES", Side::Left),
        ("formula", Side::Left),
        ("mass, Da", Side::Right),
        ("share", Side::Right),
    ];
    let shown = told
        .products
        .iter()
        .filter(|product| product.fraction.is_none_or(|share| share >= SHOWS));
    let rows = shown.map(|product| {
        vec![
            product.channel_name().to_owned(),
            product.smiles.clone(),
            product.formula.clone(),
            fixed(Some(product.monoisotopic_mass), 4),
            percent(product.fraction),
        ]
    });
    if told.products.is_empty() {
        let none = told.expected_yield.map_or("unknown", |_| "none");
        format!("  {none}")
    } else {
        indented(&table(&columns, rows))
    }
}

fn course(told: &Explanation) -> String {
    /// Losses that have a curve of their own.
    const DRAWN: usize = 2;
    /// A loss below this share would lie on the axis.
    const SEEN: f64 = 0.03;
    if told.course.is_empty() {
        return "  unknown".to_owned();
    }
    let curve = |symbol: char, name: &str, of: &dyn Fn(&CoursePoint) -> f64| Curve {
        symbol,
        name: name.to_owned(),
        points: told
            .course
            .iter()
            .map(|point| (point.time_s, of(point)))
            .collect(),
    };
    let mut curves = vec![
        curve('P', "wanted product", &|point| point.product),
        curve('S', "substrate, anions included", &|point| {
            point.substrate + point.anions
        }),
    ];
    let share = |point: &CoursePoint, channel: Channel| {
        let mut made = point.losses.iter();
        made.find(|(other, _)| *other == channel)
            .map_or(0.0, |(_, share)| *share)
    };
    let made = told.course.last().map_or(&[][..], |last| &last.losses);
    let largest = made.iter().filter(|(_, share)| *share > SEEN).take(DRAWN);
    for ((channel, _), symbol) in largest.zip('1'..) {
        curves.push(curve(symbol, channel.name(), &|point| {
            share(point, *channel)
        }));
    }
    let table = course_table(told);
    format!("{}\n\n{}", chart(&curves), indented(&table))
}

fn course_table(told: &Explanation) -> String {
    let columns = [
        ("time", Side::Right),
        ("substrate", Side::Right),
        ("anions", Side::Right),
        ("electrophile", Side::Right),
        ("product", Side::Right),
    ];
    let rows = thinned(&told.course).map(|point| {
        let amounts = [
            point.substrate,
            point.anions,
            point.electrophile,
            point.product,
        ];
        std::iter::once(time(point.time_s))
            .chain(amounts.map(|amount| percent(Some(amount))))
            .collect()
    });
    table(&columns, rows)
}

/// At most about twelve points, the last among them; JSON has them all.
fn thinned(course: &[CoursePoint]) -> impl Iterator<Item = &CoursePoint> {
    let step = course.len().div_ceil(12).max(1);
    let last = course.len().saturating_sub(1);
    let kept = move |(i, _): &(usize, &CoursePoint)| i % step == 0 || *i == last;
    course
        .iter()
        .enumerate()
        .filter(kept)
        .map(|(_, point)| point)
}

fn cautions(told: &Explanation) -> String {
    let lines: Vec<String> = told
        .cautions
        .iter()
        .map(|caution| {
            wrapped(
                &format!(
                    "  {} ({}): ",
                    caution.category.name(),
                    caution.severity.name()
                ),
                &format!("{} [{}]", caution.text, caution.source),
            )
        })
        .collect();
    if lines.is_empty() {
        "  none known to the model".to_owned()
    } else {
        lines.join("\n")
    }
}

fn sentences(texts: &[String], none: &str) -> String {
    let lines: Vec<String> = texts.iter().map(|text| wrapped("  - ", text)).collect();
    if lines.is_empty() {
        format!("  {none}")
    } else {
        lines.join("\n")
    }
}

fn advice(told: &Explanation) -> String {
    let columns = [
        ("change", Side::Left),
        ("expected yield", Side::Right),
        ("p_hit", Side::Right),
        ("selectivity", Side::Right),
        ("main loss then", Side::Left),
    ];
    let row = |change: &str, advice: &Advice| {
        vec![
            change.to_owned(),
            percent(Some(advice.expected_yield)),
            percent(advice.p_hit),
            percent(advice.selectivity),
            advice.largest_loss.map_or("none", Channel::name).to_owned(),
        ]
    };
    let Some(now) = told.expected_yield else {
        return "  unknown".to_owned();
    };
    let as_it_is = Advice {
        change: String::new(),
        expected_yield: now,
        p_hit: told.p_hit,
        selectivity: told.selectivity,
        largest_loss: told.losses.first().map(|(channel, _)| *channel),
    };
    let better = told
        .advice
        .partition_point(|advice| advice.expected_yield > now);
    let (better, worse) = told.advice.split_at(better);
    let each = |advice: &Advice| row(&advice.change, advice);
    let rows = better.iter().map(each);
    let rows = rows.chain([row("(as it is)", &as_it_is)]);
    let rows = rows.chain(worse.iter().map(each));
    if told.advice.is_empty() {
        "  nothing was tried".to_owned()
    } else {
        indented(&table(&columns, rows))
    }
}

fn pairs(lines: Vec<(&str, String)>) -> String {
    let lines: Vec<String> = lines
        .into_iter()
        .map(|(name, value)| format!("  {name:<19} {value}"))
        .collect();
    lines.join("\n")
}

fn indented(text: &str) -> String {
    text.lines()
        .map(|line| format!("  {line}"))
        .collect::<Vec<_>>()
        .join("\n")
}
