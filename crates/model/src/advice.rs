//! What one change of a cell would bring: each change is computed.

use std::sync::Arc;

use enolattice_reagents::{BaseKind, Cation, SolventClass};

use crate::kinetics::{Kinetics, Nudge};
use crate::parameters::Values;
use crate::screen::cautions_of;
use crate::{Addition, Additive, Advice, Cell, Conditions, Model, Severity};

/// A change for the worse that costs less than this teaches nothing.
const LEAST_HARM: f64 = 0.1;
/// Warnings at most.
const WARNINGS: usize = 5;
/// Changes of one kind that are shown, each of another class of reagent.
const OF_A_KIND: usize = 3;

/// Bases that a laboratory has at hand; others are not recommended unasked (common practice).
const USUAL_BASES: [&str; 22] = [
    "LDA",
    "LiHMDS",
    "NaHMDS",
    "KHMDS",
    "LiTMP",
    "nBuLi",
    "NaH",
    "KOtBu",
    "LiOtBu",
    "NaOEt",
    "NaOMe",
    "NaOH",
    "KOH",
    "K2CO3",
    "Cs2CO3",
    "K3PO4",
    "DBU",
    "TMG",
    "Et3N",
    "DIPEA",
    "piperidine",
    "pyridine",
];
/// Solvents that a laboratory has at hand (common practice).
const USUAL_SOLVENTS: [&str; 14] = [
    "THF", "2-MeTHF", "Et2O", "DME", "toluene", "DCM", "MeCN", "DMF", "DMSO", "acetone", "EtOH",
    "MeOH", "tBuOH", "water",
];
/// Additives that a laboratory has at hand (common practice), in the amounts of the trade, equivalents on the base.
const USUAL_ADDITIVES: [(&str, f64); 6] = [
    ("DMPU", 2.0),
    ("TMEDA", 1.0),
    ("LiCl", 1.0),
    ("15-crown-5", 1.0),
    ("18-crown-6", 1.0),
    ("TBAB", 0.1),
];

/// What a change is about.
#[derive(Clone, Copy, Debug, PartialEq)]
enum About {
    Base(BaseKind),
    Solvent(SolventClass),
    Additive,
    Temperature,
    DeprotonationTemperature,
    BaseEquivalents,
    ElectrophileEquivalents,
    Order,
    Time,
    Concentration,
}

impl About {
    /// Whether two changes are of one kind: both of the base, say.
    fn is_like(self, other: About) -> bool {
        std::mem::discriminant(&self) == std::mem::discriminant(&other)
    }
}

/// A cell with one change, and what it is about.
struct Changed {
    about: About,
    change: String,
    cell: Cell,
}

/// Single changes of base, solvent, additive, temperature, order, equivalents, time and concentration, best first: of each
/// the best there is, and those that cost most where they are another.
pub(crate) fn advice(model: &Model, cell: &Cell, yield_at_least: f64, now: f64) -> Vec<Advice> {
    let mut tried: Vec<(About, Advice)> = changes(model, cell)
        .into_iter()
        .filter(|changed| can_be_recommended(&changed.cell))
        .filter_map(|changed| {
            let score = model.score(&changed.cell, yield_at_least, 0);
            let advice = Advice {
                change: changed.change,
                expected_yield: score.expected_yield?,
                p_hit: score.p_hit,
                selectivity: score.selectivity,
                largest_loss: score.largest_loss,
            };
            Some((changed.about, advice))
        })
        .collect();
    tried.sort_by(|a, b| b.1.expected_yield.total_cmp(&a.1.expected_yield));
    let shown = best_of_each(&tried);
    let warned = worst_of_each(&tried, &shown, now);
    let kept = |i: &usize| shown.contains(i) || warned.contains(i);
    let rows = tried.into_iter().enumerate();
    rows.filter(|(i, _)| kept(i))
        .map(|(_, (_, advice))| advice)
        .collect()
}

/// The best change of each kind; of bases and solvents those of several classes, for none has every reagent at hand.
fn best_of_each(tried: &[(About, Advice)]) -> Vec<usize> {
    let mut shown: Vec<usize> = Vec::new();
    for (i, (about, _)) in tried.iter().enumerate() {
        let alike = |j: &&usize| tried[**j].0.is_like(*about);
        let most = match about {
            About::Base(_) | About::Solvent(_) => OF_A_KIND,
            _ => 1,
        };
        let is_new = shown.iter().all(|j| tried[*j].0 != *about);
        if is_new && shown.iter().filter(alike).count() < most {
            shown.push(i);
        }
    }
    shown
}

/// The worst change of each kind that costs enough to be a warning, worst first.
fn worst_of_each(tried: &[(About, Advice)], shown: &[usize], now: f64) -> Vec<usize> {
    let mut warned: Vec<usize> = Vec::new();
    for (i, (about, advice)) in tried.iter().enumerate().rev() {
        let is_new = warned.iter().all(|j| !tried[*j].0.is_like(*about));
        let costs = advice.expected_yield < now - LEAST_HARM;
        if is_new && costs && !shown.contains(&i) && warned.len() < WARNINGS {
            warned.push(i);
        }
    }
    warned
}

/// Whether the solvent is liquid throughout, leaves the base what it is, and no caution says never.
fn can_be_recommended(cell: &Cell) -> bool {
    let solvent = &cell.solvent.record;
    let conditions = &cell.conditions;
    let is_liquid = [conditions.temperature_c, conditions.formation_temperature_c]
        .into_iter()
        .all(|t| solvent.melting_c < t && t < solvent.boiling_c);
    let values = Values::means();
    let kinetics = Kinetics::new(cell, conditions.temperature_c, &values, Nudge::default());
    is_liquid
        && !kinetics.base_is_levelled()
        && cautions_of(cell)
            .iter()
            .all(|caution| caution.severity != Severity::Stop)
}

fn changes(model: &Model, cell: &Cell) -> Vec<Changed> {
    let mut changes = reagents(model, cell);
    changes.extend(additives(model, cell));
    let conditions = conditions(cell).into_iter();
    changes.extend(conditions.map(|(about, change, conditions)| Changed {
        about,
        change,
        cell: Cell {
            conditions,
            ..cell.clone()
        },
    }));
    changes
}

fn reagents(model: &Model, cell: &Cell) -> Vec<Changed> {
    let library = model.library();
    let (base, solvent) = (&cell.base.record, &cell.solvent.record);
    let bases = USUAL_BASES
        .into_iter()
        .filter_map(|name| library.base(name))
        .filter(|record| record.name != base.name)
        .map(|record| Changed {
            about: About::Base(record.kind),
            change: format!("base {} → {}", base.name, record.name),
            cell: Cell {
                base: Arc::new(model.base(record)),
                ..cell.clone()
            },
        });
    let solvents = USUAL_SOLVENTS
        .into_iter()
        .filter_map(|name| library.solvent(name))
        .filter(|record| record.name != solvent.name)
        .map(|record| Changed {
            about: About::Solvent(record.class),
            change: format!("solvent {} → {}", solvent.name, record.name),
            cell: Cell {
                solvent: Arc::new(model.solvent(record)),
                ..cell.clone()
            },
        });
    bases.chain(solvents).collect()
}

/// An additive more where there is a metal for it, or the one that there is left out.
fn additives(model: &Model, cell: &Cell) -> Vec<Changed> {
    let with = |change: String, additive: Option<Arc<Additive>>, equiv: f64| Changed {
        about: About::Additive,
        change,
        cell: Cell {
            additive,
            conditions: Conditions {
                additive_equiv: equiv,
                ..cell.conditions
            },
            ..cell.clone()
        },
    };
    if let Some(additive) = &cell.additive {
        let change = format!("additive {} left out", additive.record.name);
        return vec![with(change, None, cell.conditions.additive_equiv)];
    }
    if cell.base.record.cation == Cation::None {
        return Vec::new();
    }
    let library = model.library();
    let usual = USUAL_ADDITIVES.into_iter();
    usual
        .filter_map(|(name, each)| {
            let additive = model.additive(library.additive(name)?);
            let equiv = each * cell.conditions.base_equiv;
            let change = format!("additive none → {name}, {} equivalents", short(equiv));
            Some(with(change, Some(Arc::new(additive)), equiv))
        })
        .collect()
}

/// A number with three decimals at most.
fn short(number: f64) -> f64 {
    (number * 1e3).round() / 1e3
}

fn conditions(cell: &Cell) -> Vec<(About, String, Conditions)> {
    let now = cell.conditions;
    let mut changes = Vec::new();
    let mut with = |about: About, change: String, edit: &dyn Fn(&mut Conditions)| {
        let mut changed = now;
        edit(&mut changed);
        changes.push((about, change, changed));
    };
    for step in [-40.0, -20.0, 20.0, 40.0] {
        let to = short(now.temperature_c + step);
        let change = format!("temperature {} → {to} °C", now.temperature_c);
        let together = now.formation_temperature_c == now.temperature_c;
        with(About::Temperature, change, &|c| {
            c.temperature_c = to;
            if together {
                c.formation_temperature_c = to;
            }
        });
    }
    if now.formation_temperature_c > -78.0 {
        let from = now.formation_temperature_c;
        let change = format!("temperature of the deprotonation {from} → -78 °C");
        with(About::DeprotonationTemperature, change, &|c| {
            c.formation_temperature_c = -78.0;
        });
    }
    for factor in [0.5, 2.0] {
        let to = short(now.base_equiv * factor);
        let change = format!("base {} → {to} equivalents", now.base_equiv);
        with(About::BaseEquivalents, change, &|c| c.base_equiv = to);
        let to = short(now.electrophile_equiv * factor);
        let change = format!("electrophile {} → {to} equivalents", now.electrophile_equiv);
        with(About::ElectrophileEquivalents, change, &|c| {
            c.electrophile_equiv = to;
        });
    }
    for factor in [0.25, 4.0] {
        let to = short(now.time_h * factor);
        let change = format!("time {} → {to} h", now.time_h);
        with(About::Time, change, &|c| c.time_h = to);
        let to = short(now.concentration_m * factor);
        let change = format!("substrate {} → {to} mol/L", now.concentration_m);
        with(About::Concentration, change, &|c| c.concentration_m = to);
    }
    let order = now.addition.unwrap_or_else(|| cell.base.usual_addition());
    for other in Addition::ALL.into_iter().filter(|other| *other != order) {
        let change = format!("order of addition {} → {}", order.name(), other.name());
        with(About::Order, change, &|c| c.addition = Some(other));
    }
    changes
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::sample;

    #[test]
    fn what_is_recommended_is_in_the_library() {
        let model = sample::model();
        let library = model.library();
        for name in USUAL_BASES {
            assert!(library.base(name).is_some(), "{name}");
        }
        for name in USUAL_SOLVENTS {
            assert!(library.solvent(name).is_some(), "{name}");
        }
        for (name, _) in USUAL_ADDITIVES {
            assert!(library.additive(name).is_some(), "{name}");
        }
    }

    #[test]
    fn a_weak_base_is_advised_to_become_stronger_once() {
        let model = sample::model();
        let cell = sample::cell(&model, "CC(=O)N(C)C", "K2CO3", "BrCc1ccccc1", "THF");
        let advised = advice(&model, &cell, 0.5, 0.0);
        let stronger = advised
            .iter()
            .filter(|a| a.change.starts_with("base K2CO3"));
        let is_amide = |change: &str| {
            ["LDA", "HMDS", "TMP"]
                .iter()
                .any(|name| change.contains(name))
        };
        let amides = stronger.filter(|a| is_amide(&a.change));
        assert_eq!(amides.count(), 1, "{advised:?}");
    }

    /// What a change is said to bring is what the changed cell is scored with, and the best stands first.
    #[test]
    fn changes_are_ordered_and_warn() {
        let model = sample::model();
        let cell = sample::cell(&model, "CC(=O)N(C)C", "LDA", "BrCc1ccccc1", "THF");
        let now = model.score(&cell, 0.5, 0).expected_yield.expect("covered");
        let advised = advice(&model, &cell, 0.5, now);
        let yields: Vec<f64> = advised.iter().map(|a| a.expected_yield).collect();
        assert!(yields.is_sorted_by(|a, b| a >= b), "{yields:?}");
        // a metal amide is nothing in an alcohol or in water: whoever reads this must be warned of it
        let worst = advised.last().expect("some");
        assert!(worst.expected_yield < 0.05, "{worst:?}");
        let in_dmf = Cell {
            solvent: Arc::new(model.solvent(model.library().solvent("DMF").expect("known"))),
            ..cell
        };
        let named = advised.iter().find(|a| a.change == "solvent THF → DMF");
        if let Some(advice) = named {
            let scored = model.score(&in_dmf, 0.5, 0).expected_yield;
            assert_eq!(scored, Some(advice.expected_yield));
        }
    }
}
