//! What one change of a cell would bring: each change is computed.

use std::sync::Arc;

use crate::screen::cautions_of;
use crate::{Addition, Advice, Cell, Model, Severity};

/// Changes that bring less than this are not worth a line.
const LEAST_GAIN: f64 = 0.05;
/// Lines of advice at most.
const LINES: usize = 5;

/// The best single changes of base, solvent, temperature, order and equivalents, best first.
pub(crate) fn advice(model: &Model, cell: &Cell, yield_at_least: f64, now: f64) -> Vec<Advice> {
    let mut tried: Vec<Advice> = changes(model, cell)
        .into_iter()
        .filter(|(_, changed)| can_be_recommended(changed))
        .filter_map(|(change, changed)| {
            let expected_yield = model.score(&changed, yield_at_least, 0).expected_yield?;
            (expected_yield > now + LEAST_GAIN).then_some(Advice {
                change,
                expected_yield,
            })
        })
        .collect();
    tried.sort_by(|a, b| b.expected_yield.total_cmp(&a.expected_yield));
    tried.truncate(LINES);
    tried
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

fn changes(model: &Model, cell: &Cell) -> Vec<(String, Cell)> {
    let mut changes = Vec::new();
    for record in model.library().bases() {
        if record.name != cell.base.record.name {
            let base = Arc::new(model.base(record));
            changes.push((
                format!("base {} → {}", cell.base.record.name, record.name),
                Cell {
                    base,
                    ..cell.clone()
                },
            ));
        }
    }
    for record in model.library().solvents() {
        if record.name != cell.solvent.record.name {
            let solvent = Arc::new(model.solvent(record));
            let change = format!("solvent {} → {}", cell.solvent.record.name, record.name);
            changes.push((
                change,
                Cell {
                    solvent,
                    ..cell.clone()
                },
            ));
        }
    }
    let conditions = cell.conditions;
    let mut with = |change: String, edit: &dyn Fn(&mut crate::Conditions)| {
        let mut changed = cell.clone();
        edit(&mut changed.conditions);
        changes.push((change, changed));
    };
    for step in [-40.0, -20.0, 20.0, 40.0] {
        let to = conditions.temperature_c + step;
        let solvent = &cell.solvent.record;
        if to > solvent.melting_c && to < solvent.boiling_c {
            with(
                format!("temperature {} → {to} °C", conditions.temperature_c),
                &|c| c.temperature_c = to,
            );
        }
    }
    if conditions.formation_temperature_c > -78.0 && cell.solvent.record.melting_c < -78.0 {
        let from = conditions.formation_temperature_c;
        with(
            format!("temperature of the deprotonation {from} → -78 °C"),
            &|c| c.formation_temperature_c = -78.0,
        );
    }
    for factor in [0.5, 2.0] {
        let (base, electrophile) = (conditions.base_equiv, conditions.electrophile_equiv);
        with(
            format!("base {base} → {} equivalents", base * factor),
            &|c| c.base_equiv = base * factor,
        );
        with(
            format!(
                "electrophile {electrophile} → {} equivalents",
                electrophile * factor
            ),
            &|c| {
                c.electrophile_equiv = electrophile * factor;
            },
        );
    }
    let order = conditions
        .addition
        .unwrap_or_else(|| cell.base.usual_addition());
    for other in Addition::ALL.into_iter().filter(|other| *other != order) {
        with(
            format!("order of addition {} → {}", order.name(), other.name()),
            &|c| c.addition = Some(other),
        );
    }
    changes
}
