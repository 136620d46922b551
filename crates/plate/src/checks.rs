//! What is checked of a plan before anybody fills a plate.

use std::collections::{BTreeMap, BTreeSet};

use enolattice_reagents::{BaseKind, Hazards};
use serde::{Deserialize, Serialize};

use crate::stocks::{Stock, Supply};
use crate::transfers::{duration_s, last_reagent, plate_name, quench};
use crate::{Deck, Form, PlateFormat, Recipe, Role, Transfer};

/// Something that was checked and is worth saying.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Finding {
    /// `warning` or `note`.
    pub severity: String,
    /// What was checked.
    pub check: String,
    /// What was found.
    pub text: String,
}

fn warning(check: &str, text: String) -> Finding {
    Finding {
        severity: "warning".to_owned(),
        check: check.to_owned(),
        text,
    }
}

fn note(check: &str, text: String) -> Finding {
    Finding {
        severity: "note".to_owned(),
        ..warning(check, text)
    }
}

/// Everything that is checked.
pub(crate) fn findings(
    recipes: &[Recipe],
    supply: &Supply,
    transfers: &[Transfer],
    half_times_s: &[Option<f64>],
    deck: &Deck,
    plates: PlateFormat,
) -> Vec<Finding> {
    let mut findings = Vec::new();
    volumes(recipes, supply, plates, &mut findings);
    pressure(recipes, supply, deck, plates, &mut findings);
    vapours(recipes, supply, deck, &mut findings);
    water(recipes, supply, &mut findings);
    lifetimes(supply, transfers, deck, &mut findings);
    skew(recipes, transfers, half_times_s, deck, &mut findings);
    hazards(recipes, supply, &mut findings);
    findings.sort_by_key(|finding| finding.severity != "warning");
    findings
}

/// Volume of a well, uL.
fn volume_ul(supply: &Supply, at: usize, with: impl Fn(Role) -> bool) -> f64 {
    let doses = supply.doses[at].iter();
    let counted = doses.filter(|dose| with(supply.stocks[dose.stock].role));
    counted.map(|dose| dose.volume_nl / 1000.0).sum()
}

fn reacts(role: Role) -> bool {
    !matches!(role, Role::Quench | Role::Diluent)
}

fn volumes(recipes: &[Recipe], supply: &Supply, plates: PlateFormat, findings: &mut Vec<Finding>) {
    let off = (0..recipes.len())
        .map(|at| (volume_ul(supply, at, reacts) / supply.volume_ul - 1.0).abs())
        .fold(0.0, f64::max);
    let text = format!(
        "every well holds {:.1} uL of reaction within {:.1} %; what is taken from each source well is there with {} left",
        supply.volume_ul,
        100.0 * off,
        "its dead volume"
    );
    findings.push(match off > 0.05 {
        true => warning("volume balance", text),
        false => note("volume balance", text),
    });
    let usual = plates.usual_volume_ul();
    if !usual.contains(&supply.volume_ul) {
        findings.push(warning(
            "volume balance",
            format!(
                "{:.1} uL are outside what is usual with {plates} ({} to {} uL)",
                supply.volume_ul,
                usual.start(),
                usual.end()
            ),
        ));
    }
    let short: Vec<&str> = supply
        .stocks
        .iter()
        .filter(|stock| {
            stock
                .sources
                .iter()
                .any(|s| s.taken_ul > s.filled_ul + 1e-6)
        })
        .map(|stock| stock.label.as_str())
        .collect();
    if !short.is_empty() {
        findings.push(warning(
            "volume balance",
            format!("more is taken than filled in: {}", short.join(", ")),
        ));
    }
}

/// Hydrogen of hydrides and carbon dioxide of carbonates when the quench comes, against the gas space of a sealed well.
fn pressure(
    recipes: &[Recipe],
    supply: &Supply,
    deck: &Deck,
    plates: PlateFormat,
    findings: &mut Vec<Finding>,
) {
    let mut worst: BTreeMap<&str, (f64, f64, usize)> = BTreeMap::new();
    for (at, recipe) in recipes.iter().enumerate() {
        let gas = match recipe.cell.base.record.kind {
            BaseKind::Hydride => "hydrogen of hydrides, while they react",
            BaseKind::Organolithium | BaseKind::Grignard => {
                "alkane of alkylmetals, while they react"
            }
            BaseKind::Carbonate => "carbon dioxide of carbonates, at an acidic quench",
            _ => continue,
        };
        let gas_umol = recipe.amount_umol(Role::Base, supply.volume_ul);
        let liquid_ul = volume_ul(supply, at, |role| role != Role::Diluent);
        let space_ul = deck.gas_space_ul(plates, liquid_ul);
        let kelvin = recipe.cell.conditions.temperature_c.max(25.0) + 273.15;
        // p = nRT/V; umol/uL is mol/L, R in L bar/(mol K)
        let bar = gas_umol / space_ul * 0.083_145 * kelvin;
        let known = worst.entry(gas).or_default();
        known.2 += 1;
        if bar > known.0 {
            (known.0, known.1) = (bar, gas_umol * 24.5 / 1000.0);
        }
    }
    for (gas, (bar, volume_ml, wells)) in worst {
        let text = format!(
            "{gas}: up to {volume_ml:.2} mL a well in {wells} wells, {bar:.1} bar above the room if the well were sealed (it holds {} bar)",
            deck.holds_bar
        );
        findings.push(match bar > deck.holds_bar && deck.sealed {
            true => warning(
                "pressure",
                format!("{text}; vent before sealing, or take less"),
            ),
            false => note("pressure", text),
        });
    }
}

/// Liquids that leave open wells and come down in others.
fn vapours(recipes: &[Recipe], supply: &Supply, deck: &Deck, findings: &mut Vec<Finding>) {
    let hottest = recipes
        .iter()
        .map(|recipe| recipe.cell.conditions.temperature_c)
        .fold(f64::NEG_INFINITY, f64::max);
    let mut boiling: BTreeSet<String> = BTreeSet::new();
    for stock in supply.stocks.iter().filter(|stock| reacts(stock.role)) {
        if let Some(liquid) = &stock.liquid
            && liquid.boiling_c < hottest + 20.0
        {
            boiling.insert(format!("{} ({} °C)", stock.solvent, liquid.boiling_c));
        }
    }
    if !boiling.is_empty() {
        let names: Vec<String> = boiling.into_iter().collect();
        let text = format!(
            "within 20 °C of boiling at {hottest} °C, or above: {}; {}",
            names.join(", "),
            if deck.sealed {
                "seal before heating"
            } else {
                "the wells are open: they will run dry"
            }
        );
        findings.push(warning("evaporation", text));
    }
    let volatile: BTreeSet<String> = recipes
        .iter()
        .filter(|recipe| recipe.content.holds(Role::Electrophile))
        .filter_map(|recipe| {
            let boiling = recipe.cell.electrophile.named()?.boiling_c?;
            let near = boiling < recipe.cell.conditions.temperature_c.max(25.0) + 40.0;
            near.then(|| format!("{} ({boiling} °C)", recipe.cell.electrophile.name))
        })
        .collect();
    if !volatile.is_empty() {
        let names: Vec<String> = volatile.into_iter().collect();
        findings.push(warning(
            "vapours",
            format!(
                "electrophiles whose vapour reaches neighbouring wells: {}; dispense them last and seal at once, and read the wells without electrophile beside them with care",
                names.join(", ")
            ),
        ));
    }
}

/// Water of the solvents and of the base as it is supplied, umol.
pub(crate) fn water_umol(recipe: &Recipe, supply: &Supply, at: usize) -> f64 {
    const WATER_G_MOL: f64 = 18.015;
    let solvent = &recipe.cell.solvent.record;
    let reaction_ul = volume_ul(supply, at, reacts);
    // ppm by mass of g/mL gives ug/mL; over the molar mass umol/mL
    let of_solvent = solvent.water_ppm * solvent.density_g_ml / WATER_G_MOL * reaction_ul / 1000.0;
    let base = recipe.amount_umol(Role::Base, supply.volume_ul);
    of_solvent + base * recipe.cell.base.record.water_equiv
}

/// Water against bases that it destroys.
fn water(recipes: &[Recipe], supply: &Supply, findings: &mut Vec<Finding>) {
    // water is the stronger acid of these by far: Bordwell's 31.4 in DMSO
    const DESTROYED_PKA: f64 = 25.0;
    const WORTH_SAYING: f64 = 0.05;
    let worst = recipes
        .iter()
        .enumerate()
        .filter(|(_, recipe)| recipe.cell.base.record.pka_dmso.value > DESTROYED_PKA)
        // where the solvent is the acid, a little water changes nothing
        .filter(|(_, recipe)| {
            let mut parts = recipe.cell.solvent.record.components();
            !parts.any(|part| part.class.is_protic())
        })
        .filter_map(|(at, recipe)| {
            let base = recipe.amount_umol(Role::Base, supply.volume_ul);
            (base > 0.0).then(|| (water_umol(recipe, supply, at) / base, recipe))
        })
        .max_by(|a, b| a.0.total_cmp(&b.0));
    if let Some((share, recipe)) = worst {
        let text = format!(
            "water of solvents and bases takes at most {:.1} % of a strong base ({} in {})",
            100.0 * share,
            recipe.cell.base.record.name,
            recipe.cell.solvent.record.name
        );
        findings.push(match share > WORTH_SAYING {
            true => warning("water", format!("{text}; dry the solvent or add base")),
            false => note("water", text),
        });
    }
}

/// Stocks that do not last as long as filling the plates takes.
fn lifetimes(supply: &Supply, transfers: &[Transfer], deck: &Deck, findings: &mut Vec<Finding>) {
    let filling_h = transfers.len() as f64 * deck.seconds_per_transfer / 3600.0;
    for stock in &supply.stocks {
        if let Some(lasts) = stock.lasts_h
            && lasts < filling_h.max(2.0)
        {
            findings.push(warning(
                "stock lifetime",
                format!(
                    "{} ({} in {}) loses a twentieth in {lasts:.1} h at room temperature: keep it cold or make it in portions",
                    stock.label, stock.reagent, stock.solvent
                ),
            ));
        }
    }
    let unknown = supply
        .stocks
        .iter()
        .filter(|stock| stock.lasts_h.is_none() && stock.concentration_m > 0.0)
        .count();
    if unknown > 0 {
        findings.push(note(
            "stock lifetime",
            format!("how long {unknown} stocks last is unknown: make them on the day"),
        ));
    }
}

/// First and last well of a plate begin and end at different times. That counts where a reaction is still going on at the end:
/// where half of its product takes longer than a fifth of the time.
fn skew(
    recipes: &[Recipe],
    transfers: &[Transfer],
    half_times_s: &[Option<f64>],
    deck: &Deck,
    findings: &mut Vec<Finding>,
) {
    let plates: BTreeSet<usize> = recipes.iter().map(|recipe| recipe.plate).collect();
    for plate in plates {
        let Some(recipe) = recipes.iter().find(|recipe| recipe.plate == plate) else {
            continue;
        };
        let start_s = duration_s(transfers, last_reagent(plate), deck);
        let end_s = duration_s(transfers, quench(plate), deck);
        let time_s = recipe.cell.conditions.time_h * 3600.0;
        let differ_s = (start_s - end_s).abs();
        let going_on: Vec<f64> = recipes
            .iter()
            .zip(half_times_s)
            .filter(|(recipe, _)| recipe.plate == plate && recipe.content.runs())
            .filter_map(|(_, half)| half.filter(|half| *half > time_s / 5.0))
            .collect();
        let quickest_s = going_on.iter().copied().fold(f64::INFINITY, f64::min);
        let text = format!(
            "{}: the last reagent takes {start_s:.0} s from the first to the last well and the quench {end_s:.0} s, in nearly the same order: times of reaction differ by {differ_s:.0} s; {} wells are still reacting at the end{}",
            plate_name(plate),
            going_on.len(),
            match going_on.is_empty() {
                true => String::new(),
                false => format!(
                    ", the quickest of them with half of its product after {:.1} h",
                    quickest_s / 3600.0
                ),
            }
        );
        findings.push(match differ_s > 0.1 * quickest_s.min(time_s) {
            true => warning("time skew", text),
            false => note("time skew", text),
        });
        let dosing_s = recipe.cell.conditions.dosing_min * 60.0;
        if start_s > 2.0 * dosing_s.max(60.0) {
            findings.push(warning(
                "time skew",
                format!(
                    "{}: adding the last reagent takes {:.0} s, the cells were screened with {:.0} s",
                    plate_name(plate),
                    start_s,
                    dosing_s
                ),
            ));
        }
    }
}

/// What stands on the deck, by statement of hazard.
fn hazards(recipes: &[Recipe], supply: &Supply, findings: &mut Vec<Finding>) {
    let mut by_statement: BTreeMap<&str, (usize, f64)> = BTreeMap::new();
    let mut unknown = 0;
    let mass_g = |stock: &Stock| {
        let liquid = stock
            .liquid
            .as_ref()
            .map_or(1.0, |liquid| liquid.density_g_ml);
        stock.weigh_mg.unwrap_or(stock.made_ul * liquid) / 1000.0
    };
    for stock in &supply.stocks {
        if stock.hazards == "unknown" {
            unknown += 1;
            continue;
        }
        for code in stock
            .hazards
            .split(", ")
            .filter(|code| code.starts_with('H'))
        {
            let known = by_statement.entry(code).or_default();
            known.0 += 1;
            known.1 += mass_g(stock);
        }
    }
    let totals: Vec<String> = by_statement
        .iter()
        .map(|(code, (stocks, grams))| format!("{code}: {stocks} stocks, {grams:.1} g"))
        .collect();
    findings.push(note(
        "hazards of the deck",
        format!(
            "{}; hazards of {unknown} of {} stocks are unknown",
            if totals.is_empty() {
                "no statement is known".to_owned()
            } else {
                totals.join("; ")
            },
            supply.stocks.len()
        ),
    ));
    let pyrophoric: BTreeSet<&str> = recipes
        .iter()
        .map(|recipe| &recipe.cell.base.record)
        .filter(|base| is_pyrophoric(&base.hazards, base.kind))
        .map(|base| base.name.as_str())
        .collect();
    if !pyrophoric.is_empty() {
        let names: Vec<&str> = pyrophoric.into_iter().collect();
        findings.push(warning(
            "hazards of the deck",
            format!(
                "catch fire in air or give gas with water: {}",
                names.join(", ")
            ),
        ));
    }
    let suspended: Vec<&str> = supply
        .stocks
        .iter()
        .filter(|stock| stock.form == Form::Suspension)
        .map(|stock| stock.label.as_str())
        .collect();
    if !suspended.is_empty() {
        findings.push(warning(
            "suspensions",
            format!(
                "dosed as suspensions, whose volumes are uncertain: {}",
                suspended.join(", ")
            ),
        ));
    }
}

fn is_pyrophoric(hazards: &Hazards, kind: BaseKind) -> bool {
    hazards.has("H250")
        || hazards.has("H260")
        || matches!(kind, BaseKind::Organolithium | BaseKind::Hydride)
}
