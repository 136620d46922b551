//! What one change of a cell would bring: each change is computed.

use std::sync::Arc;

use enolattice_reagents::{BaseKind, SolventClass};

use crate::screen::cautions_of;
use crate::{Addition, Advice, Cell, Conditions, Model, Severity};

/// Changes that bring less than this are not worth a line.
const LEAST_GAIN: f64 = 0.05;
/// Lines of advice at most.
const LINES: usize = 5;

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

/// What a change is about: of each only the best is shown.
#[derive(Clone, Copy, Debug, PartialEq)]
enum About {
    Base(BaseKind),
    Solvent(SolventClass),
    Temperature,
    DeprotonationTemperature,
    BaseEquivalents,
    ElectrophileEquivalents,
    Order,
    Time,
}

/// The best single changes of base, solvent, temperature, time, order and equivalents, best first: one of each kind.
pub(crate) fn advice(model: &Model, cell: &Cell, yield_at_least: f64, now: f64) -> Vec<Advice> {
    let mut tried: Vec<(About, Advice)> = changes(model, cell)
        .into_iter()
        .filter(|(.., changed)| can_be_recommended(changed))
        .filter_map(|(about, change, changed)| {
            let expected_yield = model.score(&changed, yield_at_least, 0).expected_yield?;
            let advice = Advice {
                change,
                expected_yield,
            };
            (expected_yield > now + LEAST_GAIN).then_some((about, advice))
        })
        .collect();
    tried.sort_by(|a, b| b.1.expected_yield.total_cmp(&a.1.expected_yield));
    let mut shown: Vec<About> = Vec::with_capacity(LINES);
    tried.retain(|(about, _)| {
        let is_new = !shown.contains(about);
        shown.push(*about);
        is_new
    });
    tried.truncate(LINES);
    tried.into_iter().map(|(_, advice)| advice).collect()
}

/// Whether the solvent is liquid throughout and no caution says never.
fn can_be_recommended(cell: &Cell) -> bool {
    let solvent = &cell.solvent.record;
    let conditions = &cell.conditions;
    let is_liquid = [conditions.temperature_c, conditions.formation_temperature_c]
        .into_iter()
        .all(|t| solvent.melting_c < t && t < solvent.boiling_c);
    is_liquid
        && cautions_of(cell)
            .iter()
            .all(|caution| caution.severity != Severity::Stop)
}

fn changes(model: &Model, cell: &Cell) -> Vec<(About, String, Cell)> {
    let mut changes = reagents(model, cell);
    changes.extend(
        conditions(cell)
            .into_iter()
            .map(|(about, change, conditions)| {
                let changed = Cell {
                    conditions,
                    ..cell.clone()
                };
                (about, change, changed)
            }),
    );
    changes
}

fn reagents(model: &Model, cell: &Cell) -> Vec<(About, String, Cell)> {
    let library = model.library();
    let (base, solvent) = (&cell.base.record, &cell.solvent.record);
    let bases = USUAL_BASES
        .into_iter()
        .filter_map(|name| library.base(name))
        .filter(|record| record.name != base.name)
        .map(|record| {
            let changed = Cell {
                base: Arc::new(model.base(record)),
                ..cell.clone()
            };
            let change = format!("base {} → {}", base.name, record.name);
            (About::Base(record.kind), change, changed)
        });
    let solvents = USUAL_SOLVENTS
        .into_iter()
        .filter_map(|name| library.solvent(name))
        .filter(|record| record.name != solvent.name)
        .map(|record| {
            let changed = Cell {
                solvent: Arc::new(model.solvent(record)),
                ..cell.clone()
            };
            let change = format!("solvent {} → {}", solvent.name, record.name);
            (About::Solvent(record.class), change, changed)
        });
    bases.chain(solvents).collect()
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
        let to = now.temperature_c + step;
        let change = format!("temperature {} → {to} °C", now.temperature_c);
        with(About::Temperature, change, &|c| c.temperature_c = to);
    }
    if now.formation_temperature_c > -78.0 {
        let from = now.formation_temperature_c;
        let change = format!("temperature of the deprotonation {from} → -78 °C");
        with(About::DeprotonationTemperature, change, &|c| {
            c.formation_temperature_c = -78.0;
        });
    }
    for factor in [0.5, 2.0] {
        let to = now.base_equiv * factor;
        let change = format!("base {} → {to} equivalents", now.base_equiv);
        with(About::BaseEquivalents, change, &|c| c.base_equiv = to);
        let to = now.electrophile_equiv * factor;
        let change = format!("electrophile {} → {to} equivalents", now.electrophile_equiv);
        with(About::ElectrophileEquivalents, change, &|c| {
            c.electrophile_equiv = to;
        });
    }
    for factor in [0.25, 4.0] {
        let to = now.time_h * factor;
        let change = format!("time {} → {to} h", now.time_h);
        with(About::Time, change, &|c| c.time_h = to);
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
        assert!(advised.len() <= LINES);
    }
}
